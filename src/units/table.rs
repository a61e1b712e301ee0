//! The units that can be written, from exact definitions.

use super::dimension::Dimension;

const BROCHURE: &str = "BIPM, The International System of Units, 9th edition (2019)";
const SP_811: &str = "NIST Special Publication 811 (2008), appendix B.8";

/// International foot, in m.
const FOOT: f64 = 0.3048;
/// Inch, in m.
const INCH: f64 = 0.0254;
/// Avoirdupois pound, in kg.
const POUND: f64 = 0.453_592_37;
/// Standard acceleration of free fall in m/s2.
const FREE_FALL: f64 = 9.806_65;
/// Pound-force \[N\].
const POUND_FORCE: f64 = POUND * FREE_FALL;
/// Standard atmosphere, in Pa, added to a gauge pressure.
pub(super) const ATMOSPHERE: f64 = 101_325.0;
/// Thermochemical and international table calorie \[J\].
const CALORIE_TH: f64 = 4.184;
const CALORIE_IT: f64 = 4.1868;
/// Degrees Fahrenheit in a kelvin.
const FAHRENHEIT_PER_KELVIN: f64 = 1.8;
/// Gram in a pound, by which a pound-mole is so many moles.
const GRAM_PER_POUND: f64 = 453.592_37;
/// Zero of the Celsius and the Fahrenheit scale above absolute zero, in hundredths of a degree of
/// the scale: whole numbers, so that -40 degC becomes 233.15 K to the last digit.
const CELSIUS_ZERO: f64 = 27_315.0;
const FAHRENHEIT_ZERO: f64 = 45_967.0;
/// Conventional mercury, kg/m3.
const MERCURY: f64 = 13_595.1;

/// How numbers in a unit are to be taken.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Kind {
    /// A factor alone.
    Plain,
    /// A temperature scale that starts at absolute zero: a temperature or a difference.
    FromAbsoluteZero,
    /// A temperature scale with an offset, in hundredths of its degree; a temperature when alone,
    /// a difference within a compound unit.
    Point {
        /// What to add before scaling, in hundredths of a degree.
        hundredths: f64,
    },
    /// A difference of temperatures, never a temperature.
    Difference,
    /// A pressure above the standard atmosphere.
    Gauge,
    /// A part of one, only alone.
    Ratio,
    /// An angle.
    Angle,
}

/// A unit with its definition.
#[derive(Debug)]
pub struct Unit {
    /// How it is written, such as `psi`.
    pub symbol: &'static str,
    /// Other ways to write it.
    pub also: &'static [&'static str],
    /// What it is called, such as `pound-force per square inch`.
    pub name: &'static str,
    /// What it measures.
    pub dimension: Dimension,
    /// Whether it has an offset, and where it may stand.
    pub kind: Kind,
    /// Its exact definition in words and numbers.
    pub definition: &'static str,
    /// Where the definition stands.
    pub source: &'static str,
    /// Prefixes it takes, such as `k`.
    pub prefixes: &'static [&'static str],
    /// Its size is numerator/denominator × 10^decade SI units. Kept apart, so that powers of ten
    /// go into the digits of the number and 9 mm is 0.009 m to the last digit.
    pub(super) numerator: f64,
    pub(super) denominator: f64,
    pub(super) decade: i32,
}

impl Unit {
    /// Its size in the SI unit, without offset.
    #[must_use]
    pub fn factor(&self) -> f64 {
        self.numerator / self.denominator * 10_f64.powi(self.decade)
    }
}

/// Every unit that is known, without its prefixes, in the order of the lists.
pub fn all() -> impl Iterator<Item = &'static Unit> {
    UNITS.iter()
}

/// SI prefixes and their powers of ten.
#[rustfmt::skip]
const PREFIXES: &[(&str, i32)] = &[
    ("q", -30), ("r", -27), ("y", -24), ("z", -21), ("a", -18), ("f", -15), ("p", -12), ("n", -9),
    ("u", -6), ("m", -3), ("c", -2), ("d", -1), ("da", 1), ("h", 2), ("k", 3), ("M", 6), ("G", 9),
    ("T", 12), ("P", 15), ("E", 18), ("Z", 21), ("Y", 24), ("R", 27), ("Q", 30),
];

const NONE: &[&str] = &[];
/// All powers of a thousand.
const THOUSANDS: &[&str] =
    &["k", "m", "M", "u", "n", "G", "p", "T", "f", "P", "a", "E", "z", "Z", "y", "Y", "r", "R", "q", "Q"];
/// The same with the steps of ten that length, mass and pressure are written in.
const EVERY: &[&str] = &[
    "k", "m", "c", "M", "d", "u", "h", "n", "G", "da", "p", "T", "f", "P", "a", "E", "z", "Z", "y", "Y", "r", "R", "q",
    "Q",
];
const SMALL: &[&str] = &["m", "u", "n"];
const LITRE: &[&str] = &["m", "c", "d", "u", "h", "k", "n"];
const LARGE: &[&str] = &["k", "M", "G", "T"];
const CGS: &[&str] = &["c", "m", "u", "d"];
const BAR: &[&str] = &["m", "k", "u"];
const MILLI: &[&str] = &["m"];
const CALORIE: &[&str] = &["k", "M"];

macro_rules! units {
    ($($symbol:literal $also:tt $name:literal, $dimension:ident, $kind:expr,
       $numerator:expr, $denominator:expr, $decade:literal, $prefixes:ident, $definition:literal, $source:ident;)*) => {
        &[$(Unit {
            symbol: $symbol,
            also: &$also,
            name: $name,
            dimension: Dimension::$dimension,
            kind: $kind,
            definition: $definition,
            source: $source,
            prefixes: $prefixes,
            numerator: $numerator,
            denominator: $denominator,
            decade: $decade,
        }),*]
    };
}

const UNITS: &[Unit] = units! {
    "m" [] "metre", LENGTH, Kind::Plain, 1.0, 1.0, 0, EVERY, "SI base unit", BROCHURE;
    "in" [] "inch", LENGTH, Kind::Plain, INCH, 1.0, 0, NONE, "25.4 mm", SP_811;
    "ft" [] "foot", LENGTH, Kind::Plain, FOOT, 1.0, 0, NONE, "12 in", SP_811;
    "yd" [] "yard", LENGTH, Kind::Plain, 3.0 * FOOT, 1.0, 0, NONE, "3 ft", SP_811;
    "mil" [] "thousandth of an inch", LENGTH, Kind::Plain, INCH, 1.0, -3, NONE, "0.001 in", SP_811;
    "L" ["l"] "litre", VOLUME, Kind::Plain, 1.0, 1.0, -3, LITRE, "1 dm3", BROCHURE;
    "gal" ["gal_US"] "gallon (US, liquid)", VOLUME, Kind::Plain, 3.785_411_784, 1.0, -3, NONE, "231 in3", SP_811;
    "gal_UK" [] "gallon (Imperial)", VOLUME, Kind::Plain, 4.546_09, 1.0, -3, NONE, "4.54609 L", SP_811;
    "g" [] "gram", MASS, Kind::Plain, 1.0, 1.0, -3, EVERY, "0.001 kg", BROCHURE;
    "t" [] "tonne", MASS, Kind::Plain, 1.0, 1.0, 3, NONE, "1000 kg", BROCHURE;
    "lb" [] "pound (avoirdupois)", MASS, Kind::Plain, POUND, 1.0, 0, NONE, "0.45359237 kg", SP_811;
    "oz" [] "ounce (avoirdupois)", MASS, Kind::Plain, POUND, 16.0, 0, NONE, "lb/16", SP_811;
    "ton_short" [] "short ton", MASS, Kind::Plain, 2000.0 * POUND, 1.0, 0, NONE, "2000 lb", SP_811;
    "ton_long" [] "long ton", MASS, Kind::Plain, 2240.0 * POUND, 1.0, 0, NONE, "2240 lb", SP_811;
    "s" [] "second", TIME, Kind::Plain, 1.0, 1.0, 0, SMALL, "SI base unit", BROCHURE;
    "min" [] "minute", TIME, Kind::Plain, 60.0, 1.0, 0, NONE, "60 s", BROCHURE;
    "h" [] "hour", TIME, Kind::Plain, 3600.0, 1.0, 0, NONE, "60 min", BROCHURE;
    "d" [] "day", TIME, Kind::Plain, 86_400.0, 1.0, 0, NONE, "24 h", BROCHURE;
    "Hz" [] "hertz", FREQUENCY, Kind::Plain, 1.0, 1.0, 0, LARGE, "1/s", BROCHURE;
    "mol" [] "mole", AMOUNT, Kind::Plain, 1.0, 1.0, 0, THOUSANDS, "SI base unit", BROCHURE;
    "lbmol" [] "pound-mole", AMOUNT, Kind::Plain, GRAM_PER_POUND, 1.0, 0, NONE, "453.59237 mol, as many as grams in a pound", SP_811;
    "K" [] "kelvin", TEMPERATURE, Kind::FromAbsoluteZero, 1.0, 1.0, 0, SMALL, "SI base unit", BROCHURE;
    "degR" ["°R"] "degree Rankine", TEMPERATURE, Kind::FromAbsoluteZero, 1.0, FAHRENHEIT_PER_KELVIN, 0, NONE, "K/1.8, from absolute zero", SP_811;
    "degC" ["°C", "℃"] "degree Celsius", TEMPERATURE, Kind::Point { hundredths: CELSIUS_ZERO }, 1.0, 1.0, 0, NONE, "T/K = t/degC + 273.15; in a compound unit K", BROCHURE;
    "degF" ["°F", "℉"] "degree Fahrenheit", TEMPERATURE, Kind::Point { hundredths: FAHRENHEIT_ZERO }, 1.0, FAHRENHEIT_PER_KELVIN, 0, NONE, "T/K = (t/degF + 459.67)/1.8; in a compound unit K/1.8", SP_811;
    "delta_degC" [] "difference of 1 degC", TEMPERATURE_DIFFERENCE, Kind::Difference, 1.0, 1.0, 0, NONE, "1 K", BROCHURE;
    "delta_degF" [] "difference of 1 degF", TEMPERATURE_DIFFERENCE, Kind::Difference, 1.0, FAHRENHEIT_PER_KELVIN, 0, NONE, "K/1.8", SP_811;
    "N" [] "newton", FORCE, Kind::Plain, 1.0, 1.0, 0, THOUSANDS, "1 kg m/s2", BROCHURE;
    "dyn" [] "dyne", FORCE, Kind::Plain, 1.0, 1.0, -5, NONE, "1e-5 N", SP_811;
    "kgf" [] "kilogram-force", FORCE, Kind::Plain, FREE_FALL, 1.0, 0, NONE, "9.80665 N", SP_811;
    "lbf" [] "pound-force", FORCE, Kind::Plain, POUND_FORCE, 1.0, 0, NONE, "1 lb times 9.80665 m/s2", SP_811;
    "Pa" [] "pascal", PRESSURE, Kind::Plain, 1.0, 1.0, 0, EVERY, "1 N/m2", BROCHURE;
    "bar" [] "bar", PRESSURE, Kind::Plain, 1.0, 1.0, 5, BAR, "100 kPa", BROCHURE;
    "barg" [] "bar above the atmosphere", PRESSURE_LEVEL, Kind::Gauge, 1.0, 1.0, 5, MILLI, "bar, counted from 1.01325 bar", BROCHURE;
    "psi" [] "pound-force per square inch", PRESSURE, Kind::Plain, POUND_FORCE, INCH * INCH, 0, NONE, "1 lbf/in2, counted from vacuum", SP_811;
    "psig" [] "pound-force per square inch above the atmosphere", PRESSURE_LEVEL, Kind::Gauge, POUND_FORCE, INCH * INCH, 0, NONE, "psi, counted from 1.01325 bar", SP_811;
    "atm" [] "standard atmosphere", PRESSURE, Kind::Plain, ATMOSPHERE, 1.0, 0, NONE, "101325 Pa", SP_811;
    "torr" ["Torr"] "torr", PRESSURE, Kind::Plain, ATMOSPHERE, 760.0, 0, MILLI, "atm/760", SP_811;
    "mmHg" [] "conventional millimetre of mercury", PRESSURE, Kind::Plain, MERCURY * FREE_FALL, 1.0, -3, NONE, "1 mm of 13595.1 kg/m3 under 9.80665 m/s2", SP_811;
    "J" [] "joule", ENERGY, Kind::Plain, 1.0, 1.0, 0, THOUSANDS, "1 N m", BROCHURE;
    "Wh" [] "watt-hour", ENERGY, Kind::Plain, 3600.0, 1.0, 0, LARGE, "3600 J", SP_811;
    "cal" ["cal_th"] "calorie (thermochemical)", ENERGY, Kind::Plain, CALORIE_TH, 1.0, 0, CALORIE, "4.184 J", SP_811;
    "cal_IT" [] "calorie (international table)", ENERGY, Kind::Plain, CALORIE_IT, 1.0, 0, CALORIE, "4.1868 J", SP_811;
    "Btu" ["Btu_IT"] "British thermal unit (international table)", ENERGY, Kind::Plain, 1e3 * CALORIE_IT * POUND, FAHRENHEIT_PER_KELVIN, 0, NONE, "1 kcal_IT lb/kg degF/K, 1055.05585262 J", SP_811;
    "Btu_th" [] "British thermal unit (thermochemical)", ENERGY, Kind::Plain, 1e3 * CALORIE_TH * POUND, FAHRENHEIT_PER_KELVIN, 0, NONE, "1 kcal_th lb/kg degF/K, 1054.35026449 J", SP_811;
    "W" [] "watt", POWER, Kind::Plain, 1.0, 1.0, 0, THOUSANDS, "1 J/s", BROCHURE;
    "hp" [] "horsepower (550 ft lbf/s)", POWER, Kind::Plain, 550.0 * FOOT * POUND_FORCE, 1.0, 0, NONE, "550 ft lbf/s", SP_811;
    "hp_metric" [] "horsepower (metric)", POWER, Kind::Plain, 75.0 * FREE_FALL, 1.0, 0, NONE, "75 kgf m/s", SP_811;
    "hp_electric" [] "horsepower (electric)", POWER, Kind::Plain, 746.0, 1.0, 0, NONE, "746 W", SP_811;
    "P" [] "poise", VISCOSITY, Kind::Plain, 1.0, 1.0, -1, CGS, "0.1 Pa s", SP_811;
    "St" [] "stokes", DIFFUSIVITY, Kind::Plain, 1.0, 1.0, -4, CGS, "1e-4 m2/s", SP_811;
    "rad" [] "radian", ANGLE, Kind::Angle, 1.0, 1.0, 0, SMALL, "SI unit", BROCHURE;
    "deg" ["°"] "degree of angle", ANGLE, Kind::Angle, std::f64::consts::PI, 180.0, 0, NONE, "pi/180 rad", BROCHURE;
    "%" [] "per cent", RATIO, Kind::Ratio, 1.0, 1.0, -2, NONE, "0.01", BROCHURE;
    "ppm" [] "part per million", RATIO, Kind::Ratio, 1.0, 1.0, -6, NONE, "1e-6", BROCHURE;
};

/// The unit that a symbol names, and the power of ten of its prefix.
pub(super) fn find(symbol: &str) -> Option<(&'static Unit, i32)> {
    let plain = symbol.replace(['µ', 'μ'], "u");
    // a whole symbol comes before a prefix with a symbol
    if let Some(unit) = UNITS.iter().find(|unit| spells(unit, &plain)) {
        return Some((unit, 0));
    }
    PREFIXES.iter().find_map(|&(prefix, decade)| {
        let rest = plain.strip_prefix(prefix)?;
        let unit = UNITS.iter().find(|unit| spells(unit, rest))?;
        unit.prefixes.contains(&prefix).then_some((unit, decade))
    })
}

fn spells(unit: &Unit, symbol: &str) -> bool {
    unit.symbol == symbol || unit.also.contains(&symbol)
}

#[cfg(test)]
mod tests {
    use super::super::read;
    use super::*;
    use std::collections::BTreeMap;

    fn relative(value: f64, wanted: f64) -> f64 {
        (value / wanted - 1.0).abs()
    }

    #[test]
    fn no_two_units_are_written_alike() {
        let mut seen = BTreeMap::new();
        for unit in all() {
            for symbol in std::iter::once(unit.symbol).chain(unit.also.iter().copied()) {
                for prefix in std::iter::once("").chain(unit.prefixes.iter().copied()) {
                    let other = seen.insert(format!("{prefix}{symbol}"), unit.symbol);
                    assert_eq!(other, None, "{prefix}{symbol}");
                }
            }
        }
        for (written, symbol) in seen {
            assert_eq!(find(&written).map(|(unit, _)| unit.symbol), Some(symbol));
        }
    }

    #[test]
    fn every_prefix_of_a_unit_has_its_power_of_ten() {
        for unit in all() {
            for prefix in unit.prefixes {
                assert!(PREFIXES.iter().any(|(known, _)| known == prefix), "{prefix}");
            }
        }
        assert_eq!(find("µm").map(|(_, decade)| decade), Some(-6));
        assert_eq!(find("ks").map(|(unit, _)| unit.symbol), None);
    }

    #[test]
    fn a_minute_is_no_milli_inch_and_a_foot_no_femto_tonne() {
        assert_eq!(find("min").map(|(unit, _)| unit.name), Some("minute"));
        assert_eq!(find("ft").map(|(unit, _)| unit.name), Some("foot"));
    }

    /// Unit, dimension, value from the exact definition, value printed in NIST SP 811 (2008), B.8.
    #[rustfmt::skip]
    const PRINTED: &[(&str, Dimension, f64, f64)] = &[
        ("in", Dimension::LENGTH, 0.0254, 2.54e-2),
        ("ft", Dimension::LENGTH, 0.3048, 3.048e-1),
        ("mil", Dimension::LENGTH, 2.54e-5, 2.54e-5),
        ("lb", Dimension::MASS, 0.453_592_37, 4.535_924e-1),
        ("oz", Dimension::MASS, 0.028_349_523_125, 2.834_952e-2),
        ("lbf", Dimension::FORCE, 4.448_221_615_260_5, 4.448_222),
        ("kgf", Dimension::FORCE, 9.806_65, 9.806_65),
        ("dyn", Dimension::FORCE, 1e-5, 1e-5),
        ("psi", Dimension::PRESSURE, 6_894.757_293_17, 6.894_757e3),
        ("atm", Dimension::PRESSURE, 101_325.0, 1.013_25e5),
        ("bar", Dimension::PRESSURE, 1e5, 1e5),
        ("torr", Dimension::PRESSURE, 133.322_368_421, 1.333_224e2),
        ("Btu_IT", Dimension::ENERGY, 1_055.055_852_62, 1.055_056e3),
        ("Btu", Dimension::ENERGY, 1_055.055_852_62, 1.055_056e3),
        ("Btu_th", Dimension::ENERGY, 1_054.350_264_49, 1.054_350e3),
        ("cal_th", Dimension::ENERGY, 4.184, 4.184),
        ("cal", Dimension::ENERGY, 4.184, 4.184),
        ("cal_IT", Dimension::ENERGY, 4.1868, 4.1868),
        ("ft lbf", Dimension::ENERGY, 1.355_817_948_331_4, 1.355_818),
        ("kWh", Dimension::ENERGY, 3.6e6, 3.6e6),
        ("hp", Dimension::POWER, 745.699_871_582, 7.456_999e2),
        ("hp_metric", Dimension::POWER, 735.498_75, 7.354_988e2),
        ("Btu_IT/h", Dimension::POWER, 0.293_071_070_172, 2.930_711e-1),
        ("P", Dimension::VISCOSITY, 0.1, 1e-1),
        ("cP", Dimension::VISCOSITY, 0.001, 1e-3),
        ("St", Dimension::DIFFUSIVITY, 1e-4, 1e-4),
        ("cSt", Dimension::DIFFUSIVITY, 1e-6, 1e-6),
        ("lbf s/ft2", Dimension::VISCOSITY, 47.880_258_980_3, 4.788_026e1),
        ("gal", Dimension::VOLUME, 3.785_411_784e-3, 3.785_412e-3),
        ("gal/min", Dimension::VOLUME_FLOW, 6.309_019_64e-5, 6.309_020e-5),
        ("ft3", Dimension::VOLUME, 0.028_316_846_592, 2.831_685e-2),
        ("lb/ft3", Dimension::DENSITY, 16.018_463_374, 1.601_846e1),
        ("Btu_IT/(h ft2 degF)", Dimension::HEAT_TRANSFER_COEFFICIENT, 5.678_263_341_11, 5.678_263),
        ("Btu_IT/(h ft degF)", Dimension::CONDUCTIVITY, 1.730_734_666_37, 1.730_735),
        ("Btu_IT/(lb degF)", Dimension::HEAT_CAPACITY, 4_186.8, 4.1868e3),
        ("Btu_IT/lb", Dimension::SPECIFIC_ENERGY, 2_326.0, 2.326e3),
        ("delta_degF", Dimension::TEMPERATURE_DIFFERENCE, 5.0 / 9.0, 5.0 / 9.0),
        ("degR", Dimension::TEMPERATURE_DIFFERENCE, 5.0 / 9.0, 5.0 / 9.0),
        ("degR", Dimension::TEMPERATURE, 5.0 / 9.0, 5.0 / 9.0),
    ];

    #[test]
    fn factors_agree_with_exact_definitions_and_with_the_printed_table() {
        for &(unit, dimension, exact, printed) in PRINTED {
            let value = read(&format!("1 {unit}"), dimension).expect("each row is a known unit");
            // twelve digits are given for the longest definitions
            assert!(relative(value, exact) < 1e-10, "{unit}: {value} against {exact}");
            // seven digits are printed
            assert!(relative(value, printed) < 5e-7, "{unit}: {value} against {printed}");
        }
    }

    #[test]
    fn temperatures_agree_with_the_check_table() {
        for (text, kelvin) in [
            ("98.6 degF", 310.15),
            ("-40 degF", 233.15),
            ("-40 degC", 233.15),
            ("0 degF", 255.372_222_222),
            ("500 degR", 277.777_777_778),
            ("10 degC", 283.15),
        ] {
            let value = read(text, Dimension::TEMPERATURE).expect("each row is a temperature");
            assert!(relative(value, kelvin) < 1e-10, "{text}: {value}");
        }
        for (text, kelvin) in [("10 delta_degF", 5.555_555_556), ("10 delta_degC", 10.0)] {
            let value = read(text, Dimension::TEMPERATURE_DIFFERENCE).expect("a difference");
            assert!(relative(value, kelvin) < 1e-10, "{text}: {value}");
        }
        assert_eq!(
            read("3 W/(m2 degC)", Dimension::HEAT_TRANSFER_COEFFICIENT),
            read("3 W/(m2 K)", Dimension::HEAT_TRANSFER_COEFFICIENT)
        );
    }

    #[test]
    fn factor_says_what_reading_one_gives() {
        for unit in all().filter(|unit| !matches!(unit.kind, Kind::Point { .. } | Kind::Gauge)) {
            let value = read(&format!("1 {}", unit.symbol), unit.dimension);
            let value = value.expect("a unit measures its own dimension");
            assert!(relative(value, unit.factor()) < 1e-15, "{}", unit.symbol);
        }
    }
}
