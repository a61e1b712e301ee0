//! From SI to a text that reads back to the same number.

use super::dimension::Dimension;
use super::names::symbol;

/// Numbers in this range are written without an exponent.
const PLAIN: std::ops::Range<f64> = 1e-2..1e6;

/// A value in SI with its SI unit and the fewest digits that read back to the same number:
/// `368.15 K`, `1.2e-3 m3/(mol s)`, `0.2` for a ratio.
///
/// Numbers that are not finite are written as `NaN` and `inf`, which cannot be read back.
#[must_use]
pub fn write(value: f64, dimension: Dimension) -> String {
    let number = if value == 0.0 || PLAIN.contains(&value.abs()) { format!("{value}") } else { format!("{value:e}") };
    let unit = symbol(dimension);
    if unit.is_empty() { number } else { format!("{number} {unit}") }
}

#[cfg(test)]
mod tests {
    use super::super::names::named;
    use super::super::read;
    use super::*;

    /// Digits over the whole range of sizes, every `step`-th power of ten.
    fn values(step: usize) -> impl Iterator<Item = f64> {
        let digits = [1.0, 9.999_999_999_999_998, 2.0 / 3.0, 1.234_567_890_123_456_7];
        let powers = (-307..=307).step_by(step).map(|power| 10_f64.powi(power));
        let spread = powers.flat_map(move |power| digits.map(|digit| digit * power));
        let edges = [0.0, f64::MIN_POSITIVE, f64::MAX, 5e-324, 0.1 + 0.2, 1e6, 999_999.9];
        spread.chain(edges)
    }

    /// A grid of dimensions, most of them without a name.
    fn unnamed() -> impl Iterator<Item = Dimension> {
        let orders = (0..=12).map(|step| Dimension::rate_constant(f64::from(step) * 0.37));
        let grid = (0..3_u32.pow(5)).map(|index| {
            let exponent = |place: u32| f64::from(index / 3_u32.pow(place) % 3) * 1.5 - 1.5;
            Dimension::new(exponent(0), exponent(1), exponent(2), exponent(3), exponent(4))
        });
        orders.chain(grid)
    }

    #[test]
    fn what_is_written_reads_back_to_the_same_number() {
        let all = named().map(|dimension| (dimension, 1)).chain(unnamed().map(|other| (other, 41)));
        for (dimension, step) in all {
            for value in values(step) {
                let text = write(value, dimension);
                assert_eq!(read(&text, dimension), Ok(value), "{text}");
            }
        }
    }

    #[test]
    fn negative_values_read_back_where_they_have_a_meaning() {
        for value in values(1) {
            let text = write(-value, Dimension::MOLAR_ENERGY);
            assert_eq!(read(&text, Dimension::MOLAR_ENERGY), Ok(-value), "{text}");
        }
        assert!(read(&write(-1.0, Dimension::TEMPERATURE), Dimension::TEMPERATURE).is_err());
    }

    #[test]
    fn the_shortest_digits_are_written() {
        assert_eq!(write(368.15, Dimension::TEMPERATURE), "368.15 K");
        assert_eq!(write(1.2e-3, Dimension::rate_constant(2.0)), "1.2e-3 m3/(mol s)");
        assert_eq!(write(0.2, Dimension::RATIO), "0.2");
        assert_eq!(write(101_325.0, Dimension::PRESSURE_LEVEL), "101325 Pa");
        assert_eq!(write(1.58e15, Dimension::FREQUENCY), "1.58e15 1/s");
        assert_eq!(write(0.0, Dimension::PRESSURE), "0 Pa");
    }

    #[test]
    fn what_is_not_finite_is_written_but_not_read() {
        for value in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
            assert!(read(&write(value, Dimension::LENGTH), Dimension::LENGTH).is_err());
        }
    }
}
