//! The circular tube (model page, §1).

use std::f64::consts::PI;

/// A circular tube, SI.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tube {
    /// R, in m.
    pub radius: f64,
}

impl Tube {
    /// A = πR², in m².
    #[must_use]
    pub fn area(&self) -> f64 {
        PI * self.radius * self.radius
    }

    /// Perimeter of the wetted wall, 2πR, in m.
    #[must_use]
    pub fn wall_perimeter(&self) -> f64 {
        2.0 * PI * self.radius
    }

    /// The friction gradient of a Newtonian fluid, G = 8 η ū/R² (Hagen–Poiseuille), in Pa/m.
    #[must_use]
    pub fn newtonian_gradient(&self, viscosity: f64, mean_velocity: f64) -> f64 {
        8.0 * viscosity * mean_velocity / (self.radius * self.radius)
    }

    /// r² at which Poiseuille's profile has passed a share of the flow: R² (1 − √(1 − share)), in m².
    #[must_use]
    pub fn parabolic_square(&self, share: f64) -> f64 {
        let left = (1.0 - share).max(0.0);
        // share/(1 + √(1 − share)) keeps all digits near the axis
        self.radius * self.radius * share / (1.0 + left.sqrt())
    }
}
