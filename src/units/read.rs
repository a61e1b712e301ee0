//! From a text with a unit to a number in SI.

use super::dimension::{Dimension, Role};
use super::error::{UnitError, quoted};
use super::expression::{self, Expression};
use super::number::{self, Number};
use super::table::{ATMOSPHERE, Kind};
use std::ops::Range;

/// Bytes of a text; a value has some twenty.
const LONGEST: usize = 200;
/// Parts that a degree is counted in where a scale has an offset, as a power of ten.
const HUNDREDTHS: i32 = 2;

/// Reads a value with its unit, such as `1.2 kJ/(mol K)`, as SI, for a key that wants `wanted`.
///
/// A ratio is a bare number, % or ppm; everything else needs its unit. A temperature is K, degC,
/// degF or degR; a difference of temperatures K, `delta_degC` or `delta_degF`. `barg` and `psig`
/// are read where a pressure level is wanted. Negative temperatures and pressure levels below
/// vacuum are refused. Signs of other quantities are the caller's business.
///
/// # Errors
/// What is wrong with the text, with the bytes inside it and a help text.
pub fn read(text: &str, wanted: Dimension) -> Result<f64, UnitError> {
    if text.len() > LONGEST {
        return Err(UnitError::TooLong { length: text.len(), bytes: 0..text.len() });
    }
    let number = number::scan(text, wanted)?;
    let rest = &text[number.bytes.end..];
    let quantity = Quantity { text, bytes: number.bytes.start..text.trim_end().len(), number, wanted };
    let from = text.len() - rest.trim_start().len();
    if from == text.len() {
        return quantity.bare();
    }
    if text[from..].starts_with('/') {
        return Err(quantity.nothing_above());
    }
    let unit = expression::parse(text, from)?;
    // `20%` and `90°` are common and clear
    if from == quantity.number.bytes.end && !rest.starts_with(['%', '°']) {
        return Err(quantity.no_blank());
    }
    quantity.in_unit(&unit)
}

/// A number with what is wanted of it.
struct Quantity<'a> {
    text: &'a str,
    /// Where number and unit stand.
    bytes: Range<usize>,
    number: Number<'a>,
    wanted: Dimension,
}

impl Quantity<'_> {
    fn bare(&self) -> Result<f64, UnitError> {
        if self.wanted.is_ratio() {
            return self.finite(self.number.value(0));
        }
        Err(UnitError::UnitMissing {
            number: self.number.text.to_owned(),
            wanted: self.wanted,
            bytes: self.bytes.clone(),
        })
    }

    fn in_unit(&self, unit: &Expression) -> Result<f64, UnitError> {
        match self.wanted.role() {
            Role::Plain => self.plain(unit),
            Role::Point => self.temperature(unit),
            Role::Level => self.level(unit),
            Role::Angle => match unit.alone.map(|alone| alone.kind) {
                Some(Kind::Angle) => self.scaled(unit),
                _ => Err(self.wrong(unit)),
            },
        }
    }

    fn plain(&self, unit: &Expression) -> Result<f64, UnitError> {
        if unit.dimension != self.wanted {
            return Err(self.wrong(unit));
        }
        match unit.alone.map(|alone| alone.kind) {
            Some(Kind::Point { .. }) => {
                let symbol = unit.alone.map(|alone| alone.symbol).unwrap_or_default();
                Err(UnitError::TemperatureForDifference {
                    text: self.quoted(),
                    number: self.number.text.to_owned(),
                    symbol: symbol.to_owned(),
                    bytes: self.bytes.clone(),
                })
            }
            Some(Kind::Gauge) => {
                let symbol = self.text[self.number.bytes.end..].trim().trim_end_matches('g');
                Err(UnitError::GaugeForPressure {
                    text: self.quoted(),
                    instead: format!("{} {symbol}", self.number.text),
                    bytes: self.bytes.clone(),
                })
            }
            Some(Kind::Angle) => Err(self.wrong(unit)),
            Some(Kind::Plain | Kind::FromAbsoluteZero | Kind::Difference | Kind::Ratio) | None => self.scaled(unit),
        }
    }

    fn temperature(&self, unit: &Expression) -> Result<f64, UnitError> {
        if unit.dimension != Dimension::TEMPERATURE_DIFFERENCE {
            return Err(self.wrong(unit));
        }
        let kelvin = match unit.alone.map(|alone| alone.kind) {
            // whole hundredths of a degree are added before the one rounding
            Some(Kind::Point { hundredths }) => {
                let parts = self.number.value(HUNDREDTHS) + hundredths;
                self.not_too_large(parts * unit.numerator / (100.0 * unit.denominator))?
            }
            Some(Kind::FromAbsoluteZero) => self.scaled(unit)?,
            None if !unit.has_point => self.scaled(unit)?,
            _ => {
                return Err(UnitError::DifferenceForTemperature {
                    text: self.quoted(),
                    number: self.number.text.to_owned(),
                    bytes: self.bytes.clone(),
                });
            }
        };
        if kelvin < 0.0 {
            return Err(UnitError::BelowAbsoluteZero { text: self.quoted(), bytes: self.bytes.clone() });
        }
        Ok(kelvin)
    }

    fn level(&self, unit: &Expression) -> Result<f64, UnitError> {
        if unit.dimension != Dimension::PRESSURE {
            return Err(self.wrong(unit));
        }
        let gauge = unit.alone.is_some_and(|alone| alone.kind == Kind::Gauge);
        let pressure = self.scaled(unit)? + if gauge { ATMOSPHERE } else { 0.0 };
        if pressure < 0.0 {
            return Err(UnitError::BelowVacuum { text: self.quoted(), bytes: self.bytes.clone() });
        }
        Ok(pressure)
    }

    fn scaled(&self, unit: &Expression) -> Result<f64, UnitError> {
        self.finite(self.number.value(unit.decade) * unit.numerator / unit.denominator)
    }

    fn finite(&self, value: f64) -> Result<f64, UnitError> {
        if value == 0.0 && !self.number.is_zero() {
            let text = self.quoted();
            return Err(UnitError::TooSmall { text, bytes: self.bytes.clone() });
        }
        self.not_too_large(value)
    }

    fn not_too_large(&self, value: f64) -> Result<f64, UnitError> {
        if value.is_finite() {
            return Ok(value);
        }
        Err(UnitError::TooLarge { text: self.quoted(), bytes: self.bytes.clone() })
    }

    fn wrong(&self, unit: &Expression) -> UnitError {
        // a unit alone says more than its exponents: degC is a temperature, deg an angle
        let found = unit.alone.map_or(unit.dimension, |alone| alone.dimension);
        UnitError::WrongDimension { text: self.quoted(), found, wanted: self.wanted, bytes: self.bytes.clone() }
    }

    fn no_blank(&self) -> UnitError {
        let unit = &self.text[self.number.bytes.end..];
        UnitError::NoBlank {
            text: self.quoted(),
            spaced: quoted(&format!("{} {unit}", self.number.text)),
            bytes: self.bytes.clone(),
        }
    }

    fn nothing_above(&self) -> UnitError {
        let unit = self.text[self.number.bytes.end..].trim();
        UnitError::NothingAboveSlash {
            text: self.quoted(),
            instead: quoted(&format!("{} 1{unit}", self.number.text)),
            bytes: self.bytes.clone(),
        }
    }

    fn quoted(&self) -> String {
        quoted(self.text)
    }
}

#[cfg(test)]
mod tests {
    use super::super::names::named;
    use super::*;

    #[test]
    fn gauge_pressure_adds_one_atmosphere() {
        assert_eq!(read("9 barg", Dimension::PRESSURE_LEVEL), Ok(1_001_325.0));
        assert_eq!(read("0 psig", Dimension::PRESSURE_LEVEL), Ok(101_325.0));
        assert_eq!(read("9 bar", Dimension::PRESSURE_LEVEL), Ok(900_000.0));
        assert_eq!(read("-1.01325 barg", Dimension::PRESSURE_LEVEL), Ok(0.0));
    }

    #[test]
    fn psi_alone_counts_from_vacuum() {
        let level = read("14.5 psi", Dimension::PRESSURE_LEVEL);
        assert_eq!(level, read("14.5 psi", Dimension::PRESSURE));
    }

    #[test]
    fn celsius_within_a_unit_is_a_kelvin() {
        assert_eq!(read("1.88 J/(g degC)", Dimension::HEAT_CAPACITY), Ok(1880.0));
        assert_eq!(read("2 1/degC", Dimension::PER_TEMPERATURE), Ok(2.0));
        assert_eq!(read("9 1/degF", Dimension::PER_TEMPERATURE), Ok(16.2));
    }

    #[test]
    fn a_difference_takes_kelvin_or_delta() {
        for text in ["10 K", "10 delta_degC", "18 delta_degF", "18 degR", "10000 mK"] {
            assert_eq!(read(text, Dimension::TEMPERATURE_DIFFERENCE), Ok(10.0), "{text}");
        }
        let degrees = read("10 degC m/m", Dimension::TEMPERATURE);
        assert!(matches!(degrees, Err(UnitError::DifferenceForTemperature { .. })), "{degrees:?}");
    }

    #[test]
    fn tenths_of_a_degree_are_exact_in_kelvin() {
        assert_eq!(read("-40 degC", Dimension::TEMPERATURE), Ok(233.15));
        assert_eq!(read("85 degC", Dimension::TEMPERATURE), Ok(358.15));
        assert_eq!(read("85 °C", Dimension::TEMPERATURE), Ok(358.15));
        assert_eq!(read("98.6 °F", Dimension::TEMPERATURE), Ok(310.15));
        assert_eq!(read("0 K", Dimension::TEMPERATURE), Ok(0.0));
        assert_eq!(read("-273.15 degC", Dimension::TEMPERATURE), Ok(0.0));
        assert_eq!(read("-459.67 degF", Dimension::TEMPERATURE), Ok(0.0));
    }

    #[test]
    fn ratios_are_bare_or_parts_or_cancel_out() {
        for text in ["0.2", "20 %", "20%", "200000 ppm", "0.2 kg/kg", "0.2 mol/mol", "200 g/kg"] {
            assert_eq!(read(text, Dimension::RATIO), Ok(0.2), "{text}");
        }
    }

    #[test]
    fn angles_need_a_unit() {
        assert_eq!(read("180 deg", Dimension::ANGLE), Ok(std::f64::consts::PI));
        assert_eq!(read("90°", Dimension::ANGLE), Ok(std::f64::consts::FRAC_PI_2));
        for text in ["1", "1 %", "1 m/m"] {
            assert!(read(text, Dimension::ANGLE).is_err(), "{text}");
        }
    }

    #[test]
    fn values_of_the_spec_page_are_read() {
        for (text, dimension, value) in [
            ("300 W/(m2 K)", Dimension::HEAT_TRANSFER_COEFFICIENT, 300.0),
            ("0.26 g/s", Dimension::MASS_FLOW, 0.26e-3),
            ("1.2e-3 m3/(mol s)", Dimension::rate_constant(2.0), 1.2e-3),
            ("2e-4 m2 K/W", Dimension::HEAT_RESISTANCE, 2e-4),
            ("0.219 m6/(mol2 s)", Dimension::rate_constant(3.0), 0.219),
            ("-5.05e-3 1/K", Dimension::PER_TEMPERATURE, -5.05e-3),
            ("18 L/h", Dimension::VOLUME_FLOW, 18e-3 / 3600.0),
            ("40 ft", Dimension::LENGTH, 12.192),
            ("-69.9 kJ/mol", Dimension::MOLAR_ENERGY, -69_900.0),
            ("-0.7 kg/(m3 K)", Dimension::DENSITY_SLOPE, -0.7),
            ("90 deg", Dimension::ANGLE, std::f64::consts::FRAC_PI_2),
            ("1.1 kg/h", Dimension::MASS_FLOW, 1.1 / 3600.0),
            ("2 mm/s", Dimension::VELOCITY, 2e-3),
        ] {
            assert_eq!(read(text, dimension), Ok(value), "{text}");
        }
    }

    #[rustfmt::skip]
    const ODD: &[&str] = &[
        "", " ", "\t\n", "-", "+", ".", "e", "1e", "1 ", " 1", "1 /", "1 1/", "1 1", "1/s",
        "1 1/1", "1 m//s", "1 /s", "1 (", "1 )", "1 ()", "1 m(", "1 m)2", "1 m^", "1 m^^2",
        "1 m-", "1 m--1", "1 m⁻", "1 m²³", "1 m.5", "1 m2.5.5", "1 .", "1 ..m", "1 m..s", "1 ½",
        "½ m", "1½ m", "5€", "5 €", "😀", "5 😀", "5😀", "٣ m", "1\u{a0}m", "1\u{2009}m",
        "\u{feff}1 m", "1 m\u{0}", "1 °", "1 ° C", "1°C", "1 °C2", "1 ℃", "1 µ", "1 %%", "1 %2",
        "1 % m", "1 ppm/ppm", "1 barg2", "1 degC degC", "1 delta_degC/K", "0x", "0x1G", "0b2",
        "1,", ",5", "1,,5", "1_", "_1", "1'", "1, 2", "1,5e3 m", "1.5,5", "-0 K",
        "1e-999999999999 m", "1e99999999999999999999", "0.000e-5 m", "1 qm", "1 Qm20",
        "1 lb20/qg20", "1e308 Qm20", "1e-308 qm20", "1 m0", "1 m0.001", "1 K0", "infm", "nan K",
        "1 nan", "null", "~", "true", "1 W/m2 K)", "1 (W/m2 K", "1 W/m2 K/s m (", "1 \u{202e}m",
        "1 ²", "1 Δ°C", "1 Å", "1 Ω",
    ];

    #[test]
    fn no_text_is_a_panic_and_every_range_lies_inside() {
        let long = [
            "1".repeat(400),
            format!("1 {}", "m ".repeat(90)),
            format!("1 {}", "(".repeat(150)),
            format!("1 {}", "k".repeat(198)),
        ];
        let texts = ODD.iter().copied().chain(long.iter().map(String::as_str));
        let wanted = [Dimension::RATIO, Dimension::TEMPERATURE, Dimension::PRESSURE_LEVEL, Dimension::ANGLE];
        for text in texts {
            for dimension in wanted {
                match read(text, dimension) {
                    Ok(value) => assert!(value.is_finite(), "{text:?}"),
                    Err(error) => {
                        assert!(text.get(error.bytes()).is_some(), "{text:?}: {error:?}");
                        assert!(!error.to_string().is_empty() && !error.help().is_empty());
                    }
                }
            }
        }
    }

    #[test]
    fn random_texts_are_read_or_refused_without_a_panic() {
        let letters: Vec<char> = "01259.,-+eE/()^*· mKPadegCsµ°²⁻%_x'½℃é😀\u{301}".chars().collect();
        // a linear congruential generator is random enough here and the same everywhere
        let mut state = 2_u64;
        let mut draw = |below: usize| {
            state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
            usize::try_from(state >> 40).expect("24 bits fit") % below
        };
        let dimensions: Vec<Dimension> = named().collect();
        for _ in 0..50_000 {
            let head = ["", "1 ", "5 m/", "2 W/(m2 "][draw(4)];
            let tail: String = (0..draw(12)).map(|_| letters[draw(letters.len())]).collect();
            let text = format!("{head}{tail}");
            if let Err(error) = read(&text, dimensions[draw(dimensions.len())]) {
                assert!(text.get(error.bytes()).is_some(), "{text:?}: {error:?}");
                assert!(!error.to_string().is_empty() && !error.help().is_empty());
            }
        }
    }
}
