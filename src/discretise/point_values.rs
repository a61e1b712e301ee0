//! Local values on the cross-section: at any r, and the largest (model page, §7).

use super::profile::Profile;
use super::spline::Spline;

/// A value and the r it belongs to.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Peak {
    /// The largest value.
    pub value: f64,
    /// r, in m.
    pub r: f64,
}

impl Profile {
    /// ⟨r²⟩ of every stream tube, in m².
    fn mean_squares(&self) -> Vec<f64> {
        (0..self.n_tubes()).map(|i| self.geometry.mean_square(i)).collect()
    }

    /// R², in m².
    fn wall_square(&self) -> f64 {
        self.geometry.squares[self.n_tubes()]
    }

    /// T over r²: through the tubes and the wall's surface, continued to the axis.
    fn temperature_spline(&self) -> Spline {
        let mut squares = self.mean_squares();
        let mut values = self.temperatures.clone();
        squares.push(self.wall_square());
        values.push(self.wall.temperature);
        Spline::through(squares, values)
    }

    /// T at r/R, in K.
    #[must_use]
    pub fn temperature_at(&self, position: f64) -> f64 {
        self.temperature_spline().at(position * position * self.wall_square())
    }

    /// The largest temperature of the cross-section, wall surface included.
    #[must_use]
    pub fn peak_temperature(&self) -> Peak {
        let (value, square) = self.temperature_spline().largest(0.0, self.wall_square());
        Peak { value, r: square.max(0.0).sqrt() }
    }

    /// The least temperature of the cross-section, wall surface included, in K.
    #[must_use]
    pub fn lowest_temperature(&self) -> f64 {
        self.temperatures.iter().copied().fold(self.wall.temperature, f64::min)
    }

    /// A value given per stream tube, at r/R.
    #[must_use]
    pub fn value_at(&self, position: f64, per_tube: impl Fn(usize) -> f64) -> f64 {
        let values = (0..self.n_tubes()).map(per_tube).collect();
        Spline::through(self.mean_squares(), values).at(position * position * self.wall_square())
    }
}
