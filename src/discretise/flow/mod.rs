//! Velocity, areas and friction of all stream tubes at one z (model page, §3).

pub mod from_viscosity;
pub mod parabolic;
pub mod plug;

/// The cross-section at one z.
#[derive(Clone, Debug, Default)]
pub struct Geometry {
    /// y = r² at the faces, axis first, wall last, in m².
    pub squares: Vec<f64>,
    /// Aᵢ, in m².
    pub areas: Vec<f64>,
    /// v at the faces, in m/s.
    pub velocities: Vec<f64>,
    /// G, the friction gradient, in Pa/m.
    pub friction_gradient: f64,
}

impl Geometry {
    /// Room for N stream tubes.
    #[must_use]
    pub fn new(n_tubes: usize) -> Self {
        Self {
            squares: vec![0.0; n_tubes + 1],
            areas: vec![0.0; n_tubes],
            velocities: vec![0.0; n_tubes + 1],
            friction_gradient: 0.0,
        }
    }

    /// ⟨r²⟩ᵢ over the area of tube `i`, in m².
    #[must_use]
    pub fn mean_square(&self, i: usize) -> f64 {
        0.5 * (self.squares[i] + self.squares[i + 1])
    }

    /// P ∂/∂r on the face between tubes `i` and `i + 1`, per unit of difference: 4π y_f/(⟨r²⟩ᵢ₊₁ − ⟨r²⟩ᵢ).
    #[must_use]
    pub fn face_gradient(&self, i: usize) -> f64 {
        8.0 * std::f64::consts::PI * self.squares[i + 1] / (self.squares[i + 2] - self.squares[i])
    }

    /// g_w = 2R/(R² − ⟨r²⟩_N), the gradient at the wall per unit of difference, in 1/m.
    #[must_use]
    pub fn wall_gradient(&self) -> f64 {
        let n = self.areas.len();
        let square = self.squares[n];
        2.0 * square.sqrt() / (square - self.mean_square(n - 1))
    }

    /// A of the whole section, in m².
    #[must_use]
    pub fn area(&self) -> f64 {
        std::f64::consts::PI * self.squares[self.squares.len() - 1]
    }
}
