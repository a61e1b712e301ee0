//! Size and dimension of a part of a unit.

use super::dimension::Dimension;

/// Size and dimension of a part.
#[derive(Clone, Copy)]
pub(super) struct Size {
    pub(super) dimension: Dimension,
    pub(super) numerator: f64,
    pub(super) denominator: f64,
    pub(super) decade: f64,
}

impl Size {
    /// Size of 1.
    pub(super) const ONE: Self = Self { dimension: Dimension::RATIO, numerator: 1.0, denominator: 1.0, decade: 0.0 };

    pub(super) fn times(self, other: Self) -> Self {
        Self {
            dimension: self.dimension.times(other.dimension),
            numerator: self.numerator * other.numerator,
            denominator: self.denominator * other.denominator,
            decade: self.decade + other.decade,
        }
    }

    pub(super) fn inverse(self) -> Self {
        Self {
            dimension: self.dimension.to_power(-1.0),
            numerator: self.denominator,
            denominator: self.numerator,
            decade: -self.decade,
        }
    }

    pub(super) fn to_power(self, power: f64) -> Self {
        let base = if power < 0.0 { self.inverse() } else { self };
        let power = power.abs();
        Self {
            dimension: base.dimension.to_power(power),
            numerator: base.numerator.powf(power),
            denominator: base.denominator.powf(power),
            decade: base.decade * power,
        }
    }
}
