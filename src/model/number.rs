//! The number types of the physics: plain numbers, dual numbers for Jacobian blocks, tangents for one slope.
//!
//! Every law is written once, generic over [`Number`]; its derivatives come from the same code.

use std::ops::{Add, Div, Mul, Neg, Sub};

/// What a law may do with a number. Branches only through `at_least`, `at_most` and `select`.
pub trait Number:
    Copy
    + Add<Output = Self>
    + Sub<Output = Self>
    + Mul<Output = Self>
    + Div<Output = Self>
    + Neg<Output = Self>
    + Add<f64, Output = Self>
    + Sub<f64, Output = Self>
    + Mul<f64, Output = Self>
{
    /// A number that depends on nothing.
    fn constant(value: f64) -> Self;
    /// eˣ.
    #[must_use]
    fn exp(self) -> Self;
    /// ln x, for positive x.
    #[must_use]
    fn ln(self) -> Self;
    /// √x, for positive x.
    #[must_use]
    fn sqrt(self) -> Self;
    /// 1/x.
    #[must_use]
    fn recip(self) -> Self;
    /// The larger of x and a bound.
    #[must_use]
    fn at_least(self, bound: f64) -> Self;
    /// The smaller of x and a bound.
    #[must_use]
    fn at_most(self, bound: f64) -> Self;
    /// `yes` where x is above 0, else `no`.
    #[must_use]
    fn select(self, yes: Self, no: Self) -> Self;

    /// xⁿ for a whole n from 0.
    #[must_use]
    fn power(self, n: u32) -> Self {
        match n {
            0 => Self::constant(1.0),
            1 => self,
            n if n.is_multiple_of(2) => (self * self).power(n / 2),
            n => self * (self * self).power(n / 2),
        }
    }

    /// xᵃ for positive x and any a.
    #[must_use]
    fn real_power(self, exponent: f64) -> Self {
        (self.ln() * exponent).exp()
    }

    /// ½(x + √(x² + δ²)): x where it is positive, smoothly near 0 below it.
    #[must_use]
    fn smooth_positive(self, delta: f64) -> Self {
        // below 0 the sum would cancel to nothing; the same number as a quotient does not
        let root = (self * self + delta * delta).sqrt();
        let below = (root - self).recip() * (0.5 * delta * delta);
        self.select((self + root) * 0.5, below)
    }
}

impl Number for f64 {
    fn constant(value: f64) -> Self {
        value
    }
    fn exp(self) -> Self {
        self.exp()
    }
    fn ln(self) -> Self {
        self.ln()
    }
    fn sqrt(self) -> Self {
        self.sqrt()
    }
    fn recip(self) -> Self {
        self.recip()
    }
    fn at_least(self, bound: f64) -> Self {
        if self > bound { self } else { bound }
    }
    fn at_most(self, bound: f64) -> Self {
        if self < bound { self } else { bound }
    }
    fn select(self, yes: Self, no: Self) -> Self {
        if self > 0.0 { yes } else { no }
    }
}

/// A number and its slopes with respect to `P` variables.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Dual<const P: usize> {
    /// The value.
    pub value: f64,
    /// ∂value/∂(each variable).
    pub slopes: [f64; P],
}

impl<const P: usize> Dual<P> {
    /// The variable number `which`; one outside 0 … P − 1 has no slope.
    #[must_use]
    pub fn variable(value: f64, which: Option<usize>) -> Self {
        let mut slopes = [0.0; P];
        if let Some(slope) = which.and_then(|which| slopes.get_mut(which)) {
            *slope = 1.0;
        }
        Self { value, slopes }
    }

    /// f(x) with slope f′(x).
    fn chain(self, value: f64, slope: f64) -> Self {
        Self { value, slopes: self.slopes.map(|s| s * slope) }
    }
}

impl<const P: usize> Add for Dual<P> {
    type Output = Self;
    fn add(mut self, other: Self) -> Self {
        self.value += other.value;
        for (a, b) in self.slopes.iter_mut().zip(other.slopes) {
            *a += b;
        }
        self
    }
}
impl<const P: usize> Sub for Dual<P> {
    type Output = Self;
    fn sub(mut self, other: Self) -> Self {
        self.value -= other.value;
        for (a, b) in self.slopes.iter_mut().zip(other.slopes) {
            *a -= b;
        }
        self
    }
}
impl<const P: usize> Mul for Dual<P> {
    type Output = Self;
    fn mul(mut self, other: Self) -> Self {
        for (a, b) in self.slopes.iter_mut().zip(other.slopes) {
            *a = *a * other.value + self.value * b;
        }
        self.value *= other.value;
        self
    }
}
impl<const P: usize> Div for Dual<P> {
    type Output = Self;
    fn div(mut self, other: Self) -> Self {
        let inverse = other.value.recip();
        self.value *= inverse;
        for (a, b) in self.slopes.iter_mut().zip(other.slopes) {
            *a = (*a - self.value * b) * inverse;
        }
        self
    }
}
impl<const P: usize> Neg for Dual<P> {
    type Output = Self;
    fn neg(self) -> Self {
        self.chain(-self.value, -1.0)
    }
}
impl<const P: usize> Add<f64> for Dual<P> {
    type Output = Self;
    fn add(mut self, other: f64) -> Self {
        self.value += other;
        self
    }
}
impl<const P: usize> Sub<f64> for Dual<P> {
    type Output = Self;
    fn sub(mut self, other: f64) -> Self {
        self.value -= other;
        self
    }
}
impl<const P: usize> Mul<f64> for Dual<P> {
    type Output = Self;
    fn mul(self, other: f64) -> Self {
        self.chain(self.value * other, other)
    }
}

impl<const P: usize> Number for Dual<P> {
    fn constant(value: f64) -> Self {
        Self { value, slopes: [0.0; P] }
    }
    fn exp(self) -> Self {
        let value = self.value.exp();
        self.chain(value, value)
    }
    fn ln(self) -> Self {
        self.chain(self.value.ln(), self.value.recip())
    }
    fn sqrt(self) -> Self {
        let value = self.value.sqrt();
        self.chain(value, 0.5 / value)
    }
    fn recip(self) -> Self {
        let value = self.value.recip();
        self.chain(value, -value * value)
    }
    fn at_least(self, bound: f64) -> Self {
        if self.value > bound { self } else { Self::constant(bound) }
    }
    fn at_most(self, bound: f64) -> Self {
        if self.value < bound { self } else { Self::constant(bound) }
    }
    fn select(self, yes: Self, no: Self) -> Self {
        if self.value > 0.0 { yes } else { no }
    }
}

/// A number of any kind and its slope along one direction.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tangent<N> {
    /// The value.
    pub value: N,
    /// Its slope.
    pub slope: N,
}

impl<N: Number> Tangent<N> {
    /// The variable itself: slope 1.
    pub fn variable(value: N) -> Self {
        Self { value, slope: N::constant(1.0) }
    }
    /// A number that does not change along the direction.
    pub fn fixed(value: N) -> Self {
        Self { value, slope: N::constant(0.0) }
    }
    fn chain(self, value: N, slope: N) -> Self {
        Self { value, slope: self.slope * slope }
    }
}

impl<N: Number> Add for Tangent<N> {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        Self { value: self.value + other.value, slope: self.slope + other.slope }
    }
}
impl<N: Number> Sub for Tangent<N> {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        Self { value: self.value - other.value, slope: self.slope - other.slope }
    }
}
impl<N: Number> Mul for Tangent<N> {
    type Output = Self;
    fn mul(self, other: Self) -> Self {
        Self { value: self.value * other.value, slope: self.slope * other.value + self.value * other.slope }
    }
}
impl<N: Number> Div for Tangent<N> {
    type Output = Self;
    fn div(self, other: Self) -> Self {
        let inverse = other.value.recip();
        let value = self.value * inverse;
        Self { value, slope: (self.slope - value * other.slope) * inverse }
    }
}
impl<N: Number> Neg for Tangent<N> {
    type Output = Self;
    fn neg(self) -> Self {
        Self { value: -self.value, slope: -self.slope }
    }
}
impl<N: Number> Add<f64> for Tangent<N> {
    type Output = Self;
    fn add(self, other: f64) -> Self {
        Self { value: self.value + other, slope: self.slope }
    }
}
impl<N: Number> Sub<f64> for Tangent<N> {
    type Output = Self;
    fn sub(self, other: f64) -> Self {
        Self { value: self.value - other, slope: self.slope }
    }
}
impl<N: Number> Mul<f64> for Tangent<N> {
    type Output = Self;
    fn mul(self, other: f64) -> Self {
        Self { value: self.value * other, slope: self.slope * other }
    }
}

impl<N: Number> Number for Tangent<N> {
    fn constant(value: f64) -> Self {
        Self::fixed(N::constant(value))
    }
    fn exp(self) -> Self {
        let value = self.value.exp();
        self.chain(value, value)
    }
    fn ln(self) -> Self {
        self.chain(self.value.ln(), self.value.recip())
    }
    fn sqrt(self) -> Self {
        let value = self.value.sqrt();
        self.chain(value, value.recip() * 0.5)
    }
    fn recip(self) -> Self {
        let value = self.value.recip();
        self.chain(value, -(value * value))
    }
    fn at_least(self, bound: f64) -> Self {
        let above = self.value - bound;
        let slope = above.select(self.slope, N::constant(0.0));
        Self { value: self.value.at_least(bound), slope }
    }
    fn at_most(self, bound: f64) -> Self {
        let below = -(self.value - bound);
        let slope = below.select(self.slope, N::constant(0.0));
        Self { value: self.value.at_most(bound), slope }
    }
    fn select(self, yes: Self, no: Self) -> Self {
        Self { value: self.value.select(yes.value, no.value), slope: self.value.select(yes.slope, no.slope) }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    /// A chain through every operation a law may use.
    #[inline(always)]
    fn chain<N: Number>(x: N) -> N {
        let y = (x * x + 1.0).sqrt().recip() + (x * 0.3).exp() - x.power(5) * 0.01;
        let z = (y + 4.0).ln() / (x + 2.0) + (x + 1.5).real_power(0.37);
        z.at_least(-5.0).at_most(50.0) + (x - 0.2).smooth_positive(1e-3) + (-x).select(x, y) * 0.1
    }

    /// Central differences with h = 1e-6 are good to h², 1e-12, plus rounding over h, 1e-10.
    const DIFFERENCE_ERROR: f64 = 1e-8;

    #[test]
    fn dual_slope_is_the_central_difference() {
        for x in [0.1, 0.7, 1.9, 3.3] {
            let difference = (chain(x + 1e-6) - chain(x - 1e-6)) / 2e-6;
            let dual = chain(Dual::<3>::variable(x, Some(1)));
            assert_relative_eq!(dual.value, chain(x), max_relative = 1e-15);
            assert_relative_eq!(dual.slopes[1], difference, max_relative = DIFFERENCE_ERROR);
            assert!(dual.slopes[0] == 0.0 && dual.slopes[2] == 0.0);
        }
    }

    #[test]
    fn tangent_of_dual_gives_the_second_slope() {
        let slope = |x: f64| chain(Tangent::variable(x)).slope;
        for x in [0.1, 0.7, 1.9] {
            let curvature = (slope(x + 1e-6) - slope(x - 1e-6)) / 2e-6;
            let nested = chain(Tangent::variable(Dual::<1>::variable(x, Some(0))));
            assert_relative_eq!(nested.slope.value, slope(x), max_relative = 1e-14);
            assert_relative_eq!(nested.slope.slopes[0], curvature, max_relative = 1e-7);
        }
    }
}
