//! Several numbers side by side: the laws are evaluated for several stream tubes at once.
//!
//! The functions below have no branch and no table, so that the compiler can use the machine's vector
//! instructions. They use no fused multiply-add: results are the same on every x86 processor.

use std::ops::{Add, Div, Mul, Neg, Sub};

use super::number::Number;

/// `W` numbers side by side.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Lane<const W: usize>(pub [f64; W]);

impl<const W: usize> Lane<W> {
    #[inline(always)]
    fn map(self, f: impl Fn(f64) -> f64) -> Self {
        let mut out = self.0;
        for value in &mut out {
            *value = f(*value);
        }
        Self(out)
    }

    #[inline(always)]
    fn zip(self, other: Self, f: impl Fn(f64, f64) -> f64) -> Self {
        let mut out = self.0;
        for (value, other) in out.iter_mut().zip(other.0) {
            *value = f(*value, other);
        }
        Self(out)
    }
}

impl<const W: usize> Add for Lane<W> {
    type Output = Self;
    #[inline(always)]
    fn add(self, other: Self) -> Self {
        self.zip(other, |a, b| a + b)
    }
}
impl<const W: usize> Sub for Lane<W> {
    type Output = Self;
    #[inline(always)]
    fn sub(self, other: Self) -> Self {
        self.zip(other, |a, b| a - b)
    }
}
impl<const W: usize> Mul for Lane<W> {
    type Output = Self;
    #[inline(always)]
    fn mul(self, other: Self) -> Self {
        self.zip(other, |a, b| a * b)
    }
}
impl<const W: usize> Div for Lane<W> {
    type Output = Self;
    #[inline(always)]
    fn div(self, other: Self) -> Self {
        self.zip(other, |a, b| a / b)
    }
}
impl<const W: usize> Neg for Lane<W> {
    type Output = Self;
    #[inline(always)]
    fn neg(self) -> Self {
        self.map(|a| -a)
    }
}
impl<const W: usize> Add<f64> for Lane<W> {
    type Output = Self;
    #[inline(always)]
    fn add(self, other: f64) -> Self {
        self.map(|a| a + other)
    }
}
impl<const W: usize> Sub<f64> for Lane<W> {
    type Output = Self;
    #[inline(always)]
    fn sub(self, other: f64) -> Self {
        self.map(|a| a - other)
    }
}
impl<const W: usize> Mul<f64> for Lane<W> {
    type Output = Self;
    #[inline(always)]
    fn mul(self, other: f64) -> Self {
        self.map(|a| a * other)
    }
}

impl<const W: usize> Number for Lane<W> {
    #[inline(always)]
    fn constant(value: f64) -> Self {
        Self([value; W])
    }
    #[inline(always)]
    fn exp(self) -> Self {
        self.map(exp)
    }
    #[inline(always)]
    fn ln(self) -> Self {
        self.map(ln)
    }
    #[inline(always)]
    fn sqrt(self) -> Self {
        self.map(f64::sqrt)
    }
    #[inline(always)]
    fn recip(self) -> Self {
        self.map(|a| 1.0 / a)
    }
    #[inline(always)]
    fn at_least(self, bound: f64) -> Self {
        self.map(|a| if a > bound { a } else { bound })
    }
    #[inline(always)]
    fn at_most(self, bound: f64) -> Self {
        self.map(|a| if a < bound { a } else { bound })
    }
    #[inline(always)]
    fn select(self, yes: Self, no: Self) -> Self {
        let mut out = no.0;
        for ((out, yes), test) in out.iter_mut().zip(yes.0).zip(self.0) {
            *out = if test > 0.0 { yes } else { *out };
        }
        Self(out)
    }
}

/// 1.5 · 2⁵²: a number below 2⁵¹ added to it stands, rounded, in its low bits.
const ROUNDER: f64 = 6_755_399_441_055_744.0;
/// Exponents beyond this leave the range of normal numbers.
const MOST: f64 = 708.0;
/// ln 2 in two parts, the first with its last 32 bits zero, so that k times it is exact for the k below.
const LN_2_HIGH: f64 = 0.693_147_180_369_123_8;
const LN_2_LOW: f64 = 1.908_214_929_270_587_7e-10;
/// 1/k! from k = 13 down to 2.
const FACTORIALS: [f64; 12] = [
    1.0 / 6_227_020_800.0,
    1.0 / 479_001_600.0,
    1.0 / 39_916_800.0,
    1.0 / 3_628_800.0,
    1.0 / 362_880.0,
    1.0 / 40_320.0,
    1.0 / 5_040.0,
    1.0 / 720.0,
    1.0 / 120.0,
    1.0 / 24.0,
    1.0 / 6.0,
    0.5,
];

/// eˣ = 2ᵏ eʳ, r = x − k ln 2 within ±½ ln 2, eʳ by its series: the first term left out is below 2e-17.
///
/// Beyond ±708 the exponent is held.
#[inline(always)]
fn exp(x: f64) -> f64 {
    let x = if x > -MOST { x } else { -MOST };
    let x = if x < MOST { x } else { MOST };
    let shifted = x * std::f64::consts::LOG2_E + ROUNDER;
    let k = shifted - ROUNDER;
    let r = (x - k * LN_2_HIGH) - k * LN_2_LOW;
    let mut series = FACTORIALS[0];
    for coefficient in &FACTORIALS[1..] {
        series = series * r + coefficient;
    }
    let series = series * r * r + r + 1.0;
    // k stands in the low bits of `shifted`; moved up it is an exponent
    let scale = f64::from_bits((shifted.to_bits() << 52).wrapping_add(1023 << 52));
    series * scale
}

/// 1/(2k + 1) from k = 10 down to 1.
const ODD_RECIPROCALS: [f64; 10] = [
    1.0 / 21.0,
    1.0 / 19.0,
    1.0 / 17.0,
    1.0 / 15.0,
    1.0 / 13.0,
    1.0 / 11.0,
    1.0 / 9.0,
    1.0 / 7.0,
    1.0 / 5.0,
    1.0 / 3.0,
];
/// Bits of √½.
const ROOT_HALF_BITS: u64 = 0x3fe6_a09e_667f_3bcd;
/// Bits of [`ROUNDER`].
const ROUNDER_BITS: u64 = 0x4338_0000_0000_0000;

/// ln x = k ln 2 + ln m, m within √½ … √2, ln m = 2 artanh s, s = (m − 1)/(m + 1), by its series: the first
/// term left out is below 1e-18.
///
/// For positive normal x; any other gives some finite number.
#[inline(always)]
fn ln(x: f64) -> f64 {
    let bits = x.to_bits();
    let above = bits.wrapping_sub(ROOT_HALF_BITS).wrapping_add(1024 << 52);
    let biased = above >> 52; // k + 1024
    let m = f64::from_bits(bits.wrapping_sub(biased.wrapping_sub(1024) << 52));
    let k = f64::from_bits(ROUNDER_BITS.wrapping_add(biased)) - ROUNDER - 1024.0;
    let s = (m - 1.0) / (m + 1.0);
    let z = s * s;
    let mut series = ODD_RECIPROCALS[0];
    for coefficient in &ODD_RECIPROCALS[1..] {
        series = series * z + coefficient;
    }
    k * LN_2_HIGH + (2.0 * s + (2.0 * s * z * series + k * LN_2_LOW))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Three units in the last place: the series' own rounding.
    const ROUNDING: f64 = 6.7e-16;

    #[test]
    fn exponential_agrees_with_the_standard_library() {
        for k in -70_000..70_000 {
            let x = f64::from(k) * 0.01 + 1e-3;
            let (own, theirs) = (exp(x), x.exp());
            assert!((own / theirs - 1.0).abs() < ROUNDING, "e^{x}: {own} against {theirs}");
        }
        assert!(exp(1e9).is_finite() && exp(-1e9) > 0.0 && exp(0.0) == 1.0);
    }

    #[test]
    fn logarithm_agrees_with_the_standard_library() {
        for k in -3000..3000 {
            let x = 1.234_567_f64 * 1.26_f64.powi(k);
            if x.is_normal() {
                let (own, theirs) = (ln(x), x.ln());
                assert!((own - theirs).abs() < ROUNDING * theirs.abs().max(1.0), "ln {x}: {own} against {theirs}");
            }
        }
        for k in 1..2000 {
            let x = f64::from(k) * 1e-3;
            assert!((ln(x) - x.ln()).abs() < ROUNDING * x.ln().abs().max(0.5), "ln {x}");
        }
    }
}
