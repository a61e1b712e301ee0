//! What an engineer reads in a report: a rounded number in the unit that suits its size.

use super::dimension::Dimension;
use super::names::symbol;
use super::read;

/// Numbers in this range are shown without an exponent.
const PLAIN: std::ops::Range<i32> = -3..6;
/// More digits than this a number does not have.
const MOST_DIGITS: usize = 17;
/// Zero of the Celsius scale, in K.
const CELSIUS_ZERO: f64 = 273.15;

/// A unit and the smallest value in it that is shown in it.
type Step = (&'static str, f64);

/// Units for the sizes of a quantity, the largest first; the last one takes what is left, the
/// first one takes zero. Others are shown in their SI unit.
#[rustfmt::skip]
const STEPS: &[(Dimension, &[Step])] = &[
    (Dimension::ANGLE, &[("deg", 0.0)]),
    (Dimension::LENGTH, &[("m", 1.0), ("mm", 0.1), ("um", 0.0)]),
    (Dimension::AREA, &[("m2", 0.1), ("cm2", 0.1), ("mm2", 0.0)]),
    (Dimension::VOLUME, &[("m3", 1.0), ("L", 0.1), ("mL", 0.0)]),
    (Dimension::MASS, &[("kg", 0.1), ("g", 0.0)]),
    (Dimension::TIME, &[("d", 2.0), ("h", 2.0), ("min", 2.0), ("s", 0.1), ("ms", 0.0)]),
    (Dimension::PRESSURE, &[("bar", 0.1), ("mbar", 1.0), ("Pa", 0.0)]),
    (Dimension::PRESSURE_LEVEL, &[("bar", 0.01), ("mbar", 0.0)]),
    (Dimension::PRESSURE_GRADIENT, &[("bar/m", 0.1), ("mbar/m", 1.0), ("Pa/m", 0.0)]),
    (Dimension::VELOCITY, &[("m/s", 0.1), ("mm/s", 0.0)]),
    (Dimension::MASS_FLOW, &[("kg/h", 0.1), ("g/h", 0.0)]),
    (Dimension::VOLUME_FLOW, &[("m3/h", 1.0), ("L/h", 0.1), ("mL/h", 0.0)]),
    (Dimension::ENERGY, &[("MJ", 1.0), ("kJ", 1.0), ("J", 0.0)]),
    (Dimension::MOLAR_ENERGY, &[("kJ/mol", 0.1), ("J/mol", 0.0)]),
    (Dimension::SPECIFIC_ENERGY, &[("kJ/kg", 0.1), ("J/kg", 0.0)]),
    (Dimension::HEAT_CAPACITY, &[("kJ/(kg K)", 0.1), ("J/(kg K)", 0.0)]),
    (Dimension::POWER, &[("MW", 1.0), ("kW", 1.0), ("W", 0.0)]),
    (Dimension::HEAT_FLUX, &[("kW/m2", 1.0), ("W/m2", 0.0)]),
    (Dimension::HEAT_SOURCE, &[("kW/m3", 1.0), ("W/m3", 0.0)]),
    (Dimension::VISCOSITY, &[("Pa s", 1.0), ("mPa s", 0.0)]),
];

/// Ratios up to 1 are shares; above they count something, and a bare number reads better. Far
/// below a ppm they are residuals.
const RATIO_STEPS: &[Step] = &[("%", 0.01), ("ppm", 0.1)];

/// A value as an engineer reads it, rounded to so many digits (5 is usual): the number and its
/// unit. Zeros at the end are left out.
///
/// Temperatures are in degC, pressures in bar, mbar or Pa, lengths, in m, mm or um, ratios up to 1
/// in % or ppm and above as bare numbers (so is a residual below 1e-7). What is not finite is `-`
/// without a unit.
#[must_use]
pub fn show(value: f64, dimension: Dimension, digits: usize) -> (String, String) {
    if !value.is_finite() {
        return ("-".to_owned(), String::new());
    }
    if dimension == Dimension::TEMPERATURE {
        return (celsius(value, digits), "degC".to_owned());
    }
    let unit = unit_for(value, dimension);
    let scaled = value / size(&unit, dimension);
    if scaled.is_finite() {
        return (show_number(scaled, digits), unit);
    }
    (show_number(value, digits), symbol(dimension))
}

/// A bare number rounded to so many digits, zeros at the end left out, with an exponent below
/// 0.001 and from a million on; `-` if it is not finite. For what is a ratio but no share, such as
/// a dispersity or a Reynolds number.
#[must_use]
pub fn show_number(value: f64, digits: usize) -> String {
    if !value.is_finite() {
        return "-".to_owned();
    }
    if value == 0.0 {
        return "0".to_owned();
    }
    let digits = digits.clamp(1, MOST_DIGITS);
    let (rounded, power) = rounded(value, digits);
    if !PLAIN.contains(&power) {
        let mantissa = rounded.split('e').next().unwrap_or_default();
        return format!("{}e{power}", without_zeros(mantissa));
    }
    // digits that were rounded away stay away: 123456 with five digits is 123460
    let plain: f64 = rounded.parse().unwrap_or(value);
    let decimals = usize::try_from(power)
        .map_or_else(|_| digits - 1 + power.unsigned_abs() as usize, |power| (digits - 1).saturating_sub(power));
    without_zeros(&format!("{plain:.decimals$}")).to_owned()
}

/// The number in scientific form, and its power of ten.
fn rounded(value: f64, digits: usize) -> (String, i32) {
    let text = format!("{value:.*e}", digits - 1);
    let power = text.split_once('e').map(|(_, power)| power.parse());
    let power = power.expect("the format has an exponent");
    (text, power.expect("the exponent is a whole number of few digits"))
}

/// What a unit is in SI. It comes from the one table of units, so that a report cannot disagree
/// with a spec.
fn size(unit: &str, dimension: Dimension) -> f64 {
    if unit.is_empty() {
        return 1.0;
    }
    read(&format!("1 {unit}"), dimension).expect("units of the steps are known")
}

fn without_zeros(number: &str) -> &str {
    if number.contains('.') { number.trim_end_matches('0').trim_end_matches('.') } else { number }
}

/// Near 0 degC the digits of the number would be finer than those of the temperature: decimals
/// are counted from tens of degrees.
fn celsius(kelvin: f64, digits: usize) -> String {
    let degrees = kelvin - CELSIUS_ZERO;
    let below_ten = degrees.abs() < 10.0;
    if !below_ten {
        return show_number(degrees, digits);
    }
    let decimals = digits.clamp(1, MOST_DIGITS).saturating_sub(2);
    match without_zeros(&format!("{degrees:.decimals$}")) {
        "-0" => "0".to_owned(),
        text => text.to_owned(),
    }
}

fn unit_for(value: f64, dimension: Dimension) -> String {
    let size = value.abs();
    if dimension.is_ratio() {
        let fits = |&&(unit, least): &&Step| at_least(size, unit, least, dimension);
        let small = RATIO_STEPS.iter().find(fits).map_or("", |&(unit, _)| unit);
        let unit = if size == 0.0 { "%" } else { small };
        return if size > 1.0 { String::new() } else { unit.to_owned() };
    }
    let Some((_, steps)) = STEPS.iter().find(|(of, _)| *of == dimension) else {
        return symbol(dimension);
    };
    let fits = |&&(unit, least): &&Step| size == 0.0 || at_least(size, unit, least, dimension);
    steps.iter().find(fits).map_or_else(|| symbol(dimension), |&(unit, _)| unit.to_owned())
}

fn at_least(size: f64, unit: &str, least: f64, dimension: Dimension) -> bool {
    read(&format!("{least} {unit}"), dimension).is_ok_and(|least| size >= least)
}

/// The same as one text: `85 degC`, `2.7` for a ratio above 1.
#[must_use]
pub fn shown(value: f64, dimension: Dimension, digits: usize) -> String {
    let (number, unit) = show(value, dimension, digits);
    format!("{number} {unit}").trim_end().to_owned()
}

#[cfg(test)]
mod tests {
    use super::super::names::named;
    use super::*;

    fn shown(value: f64, dimension: Dimension) -> String {
        super::shown(value, dimension, 5)
    }

    #[test]
    fn sizes_choose_their_units() {
        for (value, dimension, text) in [
            (358.15, Dimension::TEMPERATURE, "85 degC"),
            (358.153_46, Dimension::TEMPERATURE, "85.003 degC"),
            (473.154_56, Dimension::TEMPERATURE, "200 degC"),
            (473.164_56, Dimension::TEMPERATURE, "200.01 degC"),
            (273.150_1, Dimension::TEMPERATURE, "0 degC"),
            (10.0, Dimension::TEMPERATURE_DIFFERENCE, "10 K"),
            (1_001_325.0, Dimension::PRESSURE_LEVEL, "10.013 bar"),
            (345.678, Dimension::PRESSURE, "3.4568 mbar"),
            (12.3, Dimension::PRESSURE, "12.3 Pa"),
            (0.2, Dimension::RATIO, "20 %"),
            (3e-4, Dimension::RATIO, "0.03 %"),
            (3e-5, Dimension::RATIO, "30 ppm"),
            (2.0, Dimension::RATIO, "2"),
            (1.0, Dimension::RATIO, "100 %"),
            (0.0, Dimension::RATIO, "0 %"),
            (3e-14, Dimension::RATIO, "3e-14"),
            (0.02, Dimension::LENGTH, "20 mm"),
            (4.0, Dimension::LENGTH, "4 m"),
            (180.0, Dimension::MOLAR_MASS, "180 kg/mol"),
            (90.0, Dimension::TIME, "90 s"),
            (1800.0, Dimension::TIME, "30 min"),
            (9000.0, Dimension::TIME, "2.5 h"),
            (0.004_2, Dimension::VISCOSITY, "4.2 mPa s"),
            (12.0, Dimension::VISCOSITY, "12 Pa s"),
            (0.0, Dimension::PRESSURE, "0 bar"),
            (300.0, Dimension::HEAT_TRANSFER_COEFFICIENT, "300 W/(m2 K)"),
            (1.1 / 3600.0, Dimension::MASS_FLOW, "1.1 kg/h"),
            (-69_900.0, Dimension::MOLAR_ENERGY, "-69.9 kJ/mol"),
            (f64::NAN, Dimension::LENGTH, "-"),
            (f64::INFINITY, Dimension::TEMPERATURE, "-"),
        ] {
            assert_eq!(shown(value, dimension), text);
        }
    }

    #[test]
    fn numbers_are_rounded_to_the_digits_asked_for() {
        assert_eq!(show_number(99_999.6, 5), "100000");
        assert_eq!(show_number(123_456.0, 5), "123460");
        assert_eq!(show_number(1_234_567.0, 3), "1.23e6");
        assert_eq!(show_number(0.001_234_56, 3), "0.00123");
        assert_eq!(show_number(0.000_999_999_6, 5), "0.001");
        assert_eq!(show_number(-1.5e-9, 5), "-1.5e-9");
        assert_eq!(show_number(2.5, 0), "2");
        assert_eq!(show_number(f64::MAX, 40), "1.7976931348623157e308");
    }

    #[test]
    fn what_is_shown_reads_back_within_its_digits() {
        for dimension in named() {
            for power in -12..12 {
                let value = 1.234_567 * 10_f64.powi(power);
                let text = shown(value, dimension);
                let back = read(&text, dimension).expect(&text);
                // half a unit of the fifth digit, for degC of the scale's own number
                let offset = dimension == Dimension::TEMPERATURE;
                let play = if offset { 5.1e-5 * CELSIUS_ZERO } else { 0.0 };
                assert!((back - value).abs() <= 5.1e-5 * value + play, "{text}: {value}");
            }
        }
    }
}
