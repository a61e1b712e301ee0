//! Figures as a reader meets them: rounded, in engineering units, shares in per cent and numbers bare.

use crate::results::{Figure, Value};
use crate::simulate::Run;
use crate::units::{self, Dimension};

/// Digits of a figure.
pub const DIGITS: usize = 5;
/// Digits of a residual.
const RESIDUAL_DIGITS: usize = 2;

/// From here on a stress is shown in kPa; a stress is no pressure, and bar would say so [Pa].
const KILO: f64 = 1000.0;
/// Pressures below this are none: a run that ends at no pressure ends there within its tolerance [Pa].
const LEAST_PRESSURE: f64 = 1e-3;

/// Quantities that are ratios but no shares: their numbers are shown bare.
const BARE: [&str; 4] = ["dispersity", "velocity_ratio", "hot_spot.position", "warnings.count"];

/// A value of a quantity with its unit.
#[must_use]
pub fn shown(quantity: &str, value: f64, dimension: Dimension) -> String {
    let (number, unit) = parts(quantity, value, dimension);
    format!("{number} {unit}").trim_end().to_owned()
}

/// The same in two pieces: number and unit.
#[must_use]
pub fn parts(quantity: &str, value: f64, dimension: Dimension) -> (String, String) {
    if quantity.starts_with("balance.") {
        return (units::show_number(value, RESIDUAL_DIGITS), String::new());
    }
    if is_bare(quantity) {
        return (units::show_number(value, DIGITS), String::new());
    }
    if quantity.ends_with("shear_stress") {
        let is_large = value.abs() >= KILO;
        let number = units::show_number(if is_large { value / KILO } else { value }, DIGITS);
        return (number, if is_large { "kPa".to_owned() } else { "Pa".to_owned() });
    }
    let is_nothing = dimension == Dimension::PRESSURE_LEVEL && value.abs() < LEAST_PRESSURE;
    units::show(if is_nothing { 0.0 } else { value }, dimension, DIGITS)
}

/// Whether a quantity is a number that is no share of anything.
#[must_use]
pub fn is_bare(quantity: &str) -> bool {
    let name = quantity.split(".percentile_").next().unwrap_or_default();
    let before = |bare: &str| name.strip_suffix(bare);
    BARE.iter().any(|bare| before(bare).is_some_and(|before| before.is_empty() || before.ends_with('.')))
}

/// Two values of a quantity: `85 to 92.5 degC`.
#[must_use]
pub fn range(quantity: &str, from: f64, to: f64, dimension: Dimension) -> String {
    let (low, unit) = parts(quantity, from, dimension);
    let (high, other) = parts(quantity, to, dimension);
    let text =
        if unit == other { format!("{low} to {high} {unit}") } else { format!("{low} {unit} to {high} {other}") };
    text.trim_end().to_owned()
}

/// A figure's value with its unit; a word as it is, nothing where it is missing.
#[must_use]
pub fn of(figure: &Figure) -> Option<String> {
    match &figure.value {
        Value::Number(value) => Some(shown(&figure.name, *value, figure.dimension)),
        Value::Word(word) => Some(word.clone()),
        Value::Missing(_) => None,
    }
}

/// A run's figure by name, as [`of`] shows it.
#[must_use]
pub fn of_run(run: &Run, name: &str) -> Option<String> {
    run.figure(name).and_then(of)
}

/// Why a run's figure is missing, if it is.
#[must_use]
pub fn reason<'r>(run: &'r Run, name: &str) -> Option<&'r str> {
    match &run.figure(name)?.value {
        Value::Missing(reason) => Some(reason),
        Value::Number(_) | Value::Word(_) => None,
    }
}

/// The dimension of a difference of two values.
#[must_use]
pub fn difference(dimension: Dimension) -> Dimension {
    if dimension == Dimension::TEMPERATURE {
        return Dimension::TEMPERATURE_DIFFERENCE;
    }
    if dimension == Dimension::PRESSURE_LEVEL { Dimension::PRESSURE } else { dimension }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn shares_are_in_per_cent_and_what_is_no_share_is_bare() {
        let ratio = |name: &str, value| shown(name, value, Dimension::RATIO);
        assert_eq!(ratio("outlet.conversion", 0.42), "42 %");
        assert_eq!(ratio("section.tube.outlet.dispersity.percentile_10", 0.98), "0.98");
        assert_eq!(ratio("place.tap.velocity_ratio", 2.0), "2");
        assert_eq!(ratio("section.tube.hot_spot.position", 0.5), "0.5");
        assert_eq!(ratio("warnings.count", 1.0), "1");
        assert_eq!(ratio("balance.energy", 1.234e-9), "1.2e-9");
    }

    #[test]
    fn a_stress_is_no_pressure_in_bar() {
        assert_eq!(shown("wall.highest_shear_stress", 52_555.0, Dimension::STRESS), "52.555 kPa");
        assert_eq!(shown("outlet.wall_shear_stress", 11.9, Dimension::STRESS), "11.9 Pa");
        assert_eq!(shown("pressure_drop", 52_555.0, Dimension::PRESSURE), "0.52555 bar");
    }

    #[test]
    fn a_range_names_its_unit_once() {
        let range = |from, to| range("outlet.temperature", from, to, Dimension::TEMPERATURE);
        assert_eq!(range(358.15, 373.15), "85 to 100 degC");
        let lengths = super::range("z", 0.02, 3.0, Dimension::LENGTH);
        assert_eq!(lengths, "20 mm to 3 m");
    }
}
