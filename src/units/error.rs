//! What can be wrong with a quantity, in the words of who wrote it.

use super::dimension::{Dimension, Role, vanishes};
use super::names::{example, phrase, symbol, usual_units};
use super::read;
use std::ops::Range;

/// A quotient of more factors than this is another quantity, not a slip of the pen.
const FACTORS_FORGOTTEN: usize = 2;

/// What is wrong with a quantity, and where: `bytes` counts inside the text that was read.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[expect(missing_docs, reason = "the fields are what the message says about them")]
pub enum UnitError {
    /// Far longer than any value.
    #[error("this text of {length} bytes is too long for a value with its unit")]
    TooLong { length: usize, bytes: Range<usize> },
    /// Nothing but blanks.
    #[error("a value is missing: {} is wanted", phrase(*wanted))]
    Empty { wanted: Dimension, bytes: Range<usize> },
    /// A unit or a word without a number before it.
    #[error("`{text}` does not begin with a number")]
    NumberMissing { text: String, wanted: Dimension, bytes: Range<usize> },
    /// Digits and signs that make no number.
    #[error("`{text}` is not a number")]
    MalformedNumber { text: String, bytes: Range<usize> },
    /// `1,5`; three digits after the comma may also have meant thousands.
    #[error("`{text}` has a comma in the number")]
    DecimalComma { text: String, pointed: String, joined: Option<String>, bytes: Range<usize> },
    /// `1_000`, `1 000`, `1,000,000`.
    #[error("`{text}` has its digits in groups")]
    ThousandsSeparator { text: String, joined: String, bytes: Range<usize> },
    /// Hexadecimal, octal or binary.
    #[error("`{text}` is not a decimal number")]
    NotDecimal { text: String, decimal: Option<String>, bytes: Range<usize> },
    /// `nan`, `inf`.
    #[error("`{text}` is not a finite number")]
    NotFinite { text: String, bytes: Range<usize> },
    /// Beyond the largest number, as typed or in SI.
    #[error("`{text}` is too large to be computed with")]
    TooLarge { text: String, bytes: Range<usize> },
    /// Not zero, but nothing is left of it.
    #[error("`{text}` is too close to zero to be told from it")]
    TooSmall { text: String, bytes: Range<usize> },
    /// A digit or sign of another script where the number stands.
    #[error("the number has the character `{found}`")]
    ForeignCharacter { found: char, bytes: Range<usize> },
    /// `5kg`.
    #[error("`{text}` has no blank between the number and its unit")]
    NoBlank { text: String, spaced: String, bytes: Range<usize> },
    /// `5/s`.
    #[error("`{text}` has nothing above the slash")]
    NothingAboveSlash { text: String, instead: String, bytes: Range<usize> },
    /// Two numbers in a row.
    #[error("`{text}` has a number where the unit is wanted")]
    SecondNumber { text: String, bytes: Range<usize> },
    /// A bare number where a unit is due.
    #[error("`{number}` has no unit: {} is wanted", phrase(*wanted))]
    UnitMissing { number: String, wanted: Dimension, bytes: Range<usize> },
    /// No unit of that name.
    #[error("there is no unit `{symbol}`")]
    UnknownUnit { symbol: String, corrected: Option<String>, bytes: Range<usize> },
    /// A word for several units.
    #[error("`{symbol}` stands for more than one unit")]
    AmbiguousUnit { symbol: String, choices: &'static [&'static str], bytes: Range<usize> },
    /// `W/m2 K`, with both readings.
    #[error("`{unit}` can be read in two ways")]
    AmbiguousQuotient { unit: String, below: String, above: String, bytes: Range<usize> },
    /// `m^`, `m99`, `m^(2)`.
    #[error("`{text}` has no exponent that can be used")]
    BadExponent { text: String, bytes: Range<usize> },
    /// A sign, a parenthesis or the end where a unit should stand.
    #[error("a unit is missing {place}")]
    UnitExpected { place: String, bytes: Range<usize> },
    /// `m2s`, `W(m2 K)`.
    #[error("two units stand together without a sign between them")]
    NotSeparated { spaced: String, bytes: Range<usize> },
    /// `W/(m2 K`.
    #[error("a parenthesis is not closed")]
    ParenthesisNotClosed { closed: String, bytes: Range<usize> },
    /// `W/m2 K)`.
    #[error("a parenthesis is closed that was not opened")]
    ParenthesisNotOpened { bytes: Range<usize> },
    /// Parentheses within parentheses, deeper than any unit needs.
    #[error("parentheses stand more than {deepest} deep")]
    TooDeep { deepest: usize, bytes: Range<usize> },
    /// A character that no unit has.
    #[error("`{found}` cannot stand in a unit")]
    UnexpectedCharacter { found: char, bytes: Range<usize> },
    /// `%/K`, `barg/m`.
    #[error("`{symbol}` cannot be part of another unit")]
    StandsAlone { symbol: String, bytes: Range<usize> },
    /// A quantity of another kind.
    #[error("`{text}` is {}, but {} is wanted", phrase(*found), phrase(*wanted))]
    WrongDimension { text: String, found: Dimension, wanted: Dimension, bytes: Range<usize> },
    /// `10 degC` for a difference.
    #[error("`{text}` is a temperature, but a difference of temperatures is wanted")]
    TemperatureForDifference { text: String, number: String, symbol: String, bytes: Range<usize> },
    /// `10 delta_degC` for a temperature.
    #[error("`{text}` is a difference of temperatures, but a temperature is wanted")]
    DifferenceForTemperature { text: String, number: String, bytes: Range<usize> },
    /// `2 barg` where no level is wanted.
    #[error("`{text}` counts from the pressure of the atmosphere, but a difference is wanted")]
    GaugeForPressure { text: String, instead: String, bytes: Range<usize> },
    /// Colder than cold.
    #[error("`{text}` is below absolute zero")]
    BelowAbsoluteZero { text: String, bytes: Range<usize> },
    /// Less than nothing.
    #[error("`{text}` is below vacuum")]
    BelowVacuum { text: String, bytes: Range<usize> },
}

impl UnitError {
    /// The bytes of the text that the message is about.
    #[must_use]
    pub fn bytes(&self) -> Range<usize> {
        match self {
            Self::TooLong { bytes, .. }
            | Self::Empty { bytes, .. }
            | Self::NumberMissing { bytes, .. }
            | Self::MalformedNumber { bytes, .. }
            | Self::DecimalComma { bytes, .. }
            | Self::ThousandsSeparator { bytes, .. }
            | Self::NotDecimal { bytes, .. }
            | Self::NotFinite { bytes, .. }
            | Self::TooLarge { bytes, .. }
            | Self::TooSmall { bytes, .. }
            | Self::ForeignCharacter { bytes, .. }
            | Self::NoBlank { bytes, .. }
            | Self::NothingAboveSlash { bytes, .. }
            | Self::SecondNumber { bytes, .. }
            | Self::UnitMissing { bytes, .. }
            | Self::UnknownUnit { bytes, .. }
            | Self::AmbiguousUnit { bytes, .. }
            | Self::AmbiguousQuotient { bytes, .. }
            | Self::BadExponent { bytes, .. }
            | Self::UnitExpected { bytes, .. }
            | Self::NotSeparated { bytes, .. }
            | Self::ParenthesisNotClosed { bytes, .. }
            | Self::ParenthesisNotOpened { bytes }
            | Self::TooDeep { bytes, .. }
            | Self::UnexpectedCharacter { bytes, .. }
            | Self::StandsAlone { bytes, .. }
            | Self::WrongDimension { bytes, .. }
            | Self::TemperatureForDifference { bytes, .. }
            | Self::DifferenceForTemperature { bytes, .. }
            | Self::GaugeForPressure { bytes, .. }
            | Self::BelowAbsoluteZero { bytes, .. }
            | Self::BelowVacuum { bytes, .. } => bytes.clone(),
        }
    }

    /// What to write instead.
    #[must_use]
    pub fn help(&self) -> String {
        match self {
            Self::TooLong { .. } => "a value is a number and a unit, such as `85 degC`".into(),
            Self::Empty { wanted, .. } | Self::NumberMissing { wanted, .. } => {
                format!("write it like `{}`", example(*wanted))
            }
            Self::MalformedNumber { .. } => "write it like `40`, `0.5` or `1.2e-3`".into(),
            Self::DecimalComma { pointed, joined: None, .. } => format!("write `{pointed}`"),
            Self::DecimalComma { pointed, joined: Some(joined), .. } => {
                format!("write `{pointed}` for a decimal comma, `{joined}` for thousands")
            }
            Self::ThousandsSeparator { joined, .. } => format!("write `{joined}`"),
            Self::NotDecimal { decimal: Some(decimal), .. } => format!("write `{decimal}`"),
            Self::NotDecimal { decimal: None, .. } => "write it with the digits 0 to 9".into(),
            Self::NotFinite { .. } => "write a number; what has no value or no limit is left out".into(),
            Self::TooLarge { .. } | Self::TooSmall { .. } => "check the exponent and the prefix of the unit".into(),
            Self::ForeignCharacter { .. } => "write it with the digits 0 to 9, `.` and `-`, as in `-1.2e-3`".into(),
            Self::NoBlank { spaced, .. } | Self::NotSeparated { spaced, .. } => {
                format!("write `{spaced}`")
            }
            Self::NothingAboveSlash { instead, .. } => format!("write `{instead}`"),
            Self::SecondNumber { .. } => "a value is one number and a unit, such as `85 degC` or `2e-4 1/s`".into(),
            Self::UnitMissing { number, wanted, .. } => unit_missing(number, *wanted),
            Self::UnknownUnit { corrected: Some(corrected), .. } => {
                format!("do you mean `{corrected}`?")
            }
            Self::UnknownUnit { corrected: None, .. } => "known are the SI units with their prefixes, and `in`, `ft`, `lb`, `gal`, `psi`, `bar`, `Btu`, `cal`, `hp`, `degC`, `degF`, `min`, `h` and their like".into(),
            Self::AmbiguousUnit { choices, .. } => format!("write {}", choices.join(", ")),
            Self::AmbiguousQuotient { below, above, .. } => {
                format!("write `{below}` or `{above}`")
            }
            Self::BadExponent { .. } => "an exponent follows its unit: `m2`, `s-1`, `m1.5`; the largest is 20".into(),
            Self::UnitExpected { .. } => "write units like `W/(m2 K)`, `Pa.s`, `1/s` or `m3/(mol s)`".into(),
            Self::ParenthesisNotClosed { closed, .. } => format!("write `{closed}`"),
            Self::ParenthesisNotOpened { .. } => "write units like `W/(m2 K)`".into(),
            Self::TooDeep { .. } => "two levels are enough for any unit".into(),
            Self::UnexpectedCharacter { .. } => {
                "a unit has letters, exponents, `/`, `.`, blanks and parentheses: `W/(m2 K)`".into()
            }
            Self::StandsAlone { symbol, .. } => stands_alone(symbol),
            Self::WrongDimension { found, wanted, .. } => wrong_dimension(*found, *wanted),
            Self::TemperatureForDifference { number, symbol, .. } => {
                let fahrenheit = symbol.ends_with('F') || symbol.ends_with('℉');
                let scale = if fahrenheit { "F" } else { "C" };
                let kelvin = if fahrenheit { "" } else { "K or " };
                format!("a difference is {kelvin}delta_deg{scale}: write `{number} delta_deg{scale}`")
            }
            Self::DifferenceForTemperature { number, .. } => {
                let degrees = format!("{number} degC");
                let allowed = read(&degrees, Dimension::TEMPERATURE).is_ok();
                let like = if allowed { degrees } else { example(Dimension::TEMPERATURE) };
                format!("write degC, degF, degR or K, such as `{like}`")
            }
            Self::GaugeForPressure { instead, .. } => format!("write a difference: `{instead}`"),
            Self::BelowAbsoluteZero { .. } => "absolute zero is 0 K, -273.15 degC".into(),
            Self::BelowVacuum { .. } => "vacuum is 0 bar, -1.01325 barg".into(),
        }
    }
}

fn unit_missing(number: &str, wanted: Dimension) -> String {
    // only what can be read: -300 is no temperature in K or degC
    let ways: Vec<String> = usual_units(wanted)
        .into_iter()
        .map(|unit| format!("{number} {unit}"))
        .filter(|way| read(way, wanted).is_ok())
        .map(|way| format!("`{way}`"))
        .collect();
    if ways.is_empty() {
        return format!("write it like `{}`", example(wanted));
    }
    format!("write {}", ways.join(" or "))
}

fn stands_alone(symbol: &str) -> String {
    match symbol {
        "%" => "write the ratio as a number: `1 %` is 0.01".into(),
        "ppm" => "write the ratio as a number: `1 ppm` is 1e-6".into(),
        _ => format!("write `{}` instead", symbol.trim_end_matches('g')),
    }
}

fn wrong_dimension(found: Dimension, wanted: Dimension) -> String {
    let like = format!("write it like `{}`", example(wanted));
    match missing_factor(found, wanted) {
        Some(factor) => format!("a factor {factor} is missing; {like}"),
        None => like,
    }
}

/// The factor that was forgotten, where it is simple enough to have been forgotten.
fn missing_factor(found: Dimension, wanted: Dimension) -> Option<String> {
    if found.plain().is_ratio() || wanted.plain().is_ratio() || wanted.role() == Role::Point {
        return None;
    }
    let quotient = wanted.over(found);
    let factors = quotient.exponents().into_iter().filter(|&exponent| !vanishes(exponent)).count();
    (1..=FACTORS_FORGOTTEN).contains(&factors).then(|| symbol(quotient))
}

/// The text as it may stand in a message of one line, whatever was typed.
pub(super) fn quoted(text: &str) -> String {
    text.trim().chars().map(|c| if c.is_control() { char::REPLACEMENT_CHARACTER } else { c }).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Text, what was wanted, message, help: one row for each variant.
    #[rustfmt::skip]
    const SAID: &[(&str, Dimension, &str, &str)] = &[
        ("", Dimension::TEMPERATURE, "a value is missing: a temperature (K) is wanted", "write it like `85 degC`"),
        ("kg", Dimension::MASS, "`kg` does not begin with a number", "write it like `5 kg`"),
        ("1.2.3 m", Dimension::LENGTH, "`1.2.3` is not a number", "write it like `40`, `0.5` or `1.2e-3`"),
        ("1,5 m", Dimension::LENGTH, "`1,5` has a comma in the number", "write `1.5`"),
        ("1,500 m", Dimension::LENGTH, "`1,500` has a comma in the number", "write `1.500` for a decimal comma, `1500` for thousands"),
        ("1_000 m", Dimension::LENGTH, "`1_000` has its digits in groups", "write `1000`"),
        ("1 500 kg/m3", Dimension::DENSITY, "`1 500` has its digits in groups", "write `1500`"),
        ("0x1F m", Dimension::LENGTH, "`0x1F` is not a decimal number", "write `31`"),
        ("nan", Dimension::RATIO, "`nan` is not a finite number", "write a number; what has no value or no limit is left out"),
        ("1e400 m", Dimension::LENGTH, "`1e400 m` is too large to be computed with", "check the exponent and the prefix of the unit"),
        ("1e-400 m", Dimension::LENGTH, "`1e-400 m` is too close to zero to be told from it", "check the exponent and the prefix of the unit"),
        ("−4 degC", Dimension::TEMPERATURE, "the number has the character `−`", "write it with the digits 0 to 9, `.` and `-`, as in `-1.2e-3`"),
        ("5kg", Dimension::MASS, "`5kg` has no blank between the number and its unit", "write `5 kg`"),
        ("5/s", Dimension::SHEAR_RATE, "`5/s` has nothing above the slash", "write `5 1/s`"),
        ("5 / s", Dimension::SHEAR_RATE, "`5 / s` has nothing above the slash", "write `5 1/ s`"),
        ("5 6 m", Dimension::LENGTH, "`5 6` has a number where the unit is wanted", "a value is one number and a unit, such as `85 degC` or `2e-4 1/s`"),
        ("85", Dimension::TEMPERATURE, "`85` has no unit: a temperature (K) is wanted", "write `85 degC` or `85 K`"),
        ("3 kg/hr", Dimension::MASS_FLOW, "there is no unit `hr`", "do you mean `3 kg/h`?"),
        ("3 wobbles", Dimension::LENGTH, "there is no unit `wobbles`", "known are the SI units with their prefixes, and `in`, `ft`, `lb`, `gal`, `psi`, `bar`, `Btu`, `cal`, `hp`, `degC`, `degF`, `min`, `h` and their like"),
        ("3 ton", Dimension::MASS, "`ton` stands for more than one unit", "write `t` (1000 kg), `ton_short` (2000 lb), `ton_long` (2240 lb)"),
        ("3 W/m2 K", Dimension::HEAT_TRANSFER_COEFFICIENT, "`W/m2 K` can be read in two ways", "write `W/(m2 K)` or `W K/m2`"),
        ("3 m99", Dimension::LENGTH, "`m99` has no exponent that can be used", "an exponent follows its unit: `m2`, `s-1`, `m1.5`; the largest is 20"),
        ("3 W/", Dimension::POWER, "a unit is missing at the end", "write units like `W/(m2 K)`, `Pa.s`, `1/s` or `m3/(mol s)`"),
        ("3 m**2", Dimension::AREA, "a unit is missing before `*`", "write units like `W/(m2 K)`, `Pa.s`, `1/s` or `m3/(mol s)`"),
        ("3 m2s", Dimension::AREA, "two units stand together without a sign between them", "write `m2 s`"),
        ("3 W/(m2 K", Dimension::AREA, "a parenthesis is not closed", "write `W/(m2 K)`"),
        ("3 W/m2)", Dimension::AREA, "a parenthesis is closed that was not opened", "write units like `W/(m2 K)`"),
        ("3 (((((((((m)))))))))", Dimension::LENGTH, "parentheses stand more than 8 deep", "two levels are enough for any unit"),
        ("3 m; 4", Dimension::LENGTH, "`;` cannot stand in a unit", "a unit has letters, exponents, `/`, `.`, blanks and parentheses: `W/(m2 K)`"),
        ("3 %/K", Dimension::PER_TEMPERATURE, "`%` cannot be part of another unit", "write the ratio as a number: `1 %` is 0.01"),
        ("3 barg/m", Dimension::PRESSURE_GRADIENT, "`barg` cannot be part of another unit", "write `bar` instead"),
        ("300 W/m2", Dimension::HEAT_TRANSFER_COEFFICIENT, "`300 W/m2` is a heat flux (W/m2), but a heat transfer coefficient (W/(m2 K)) is wanted", "a factor 1/K is missing; write it like `300 W/(m2 K)`"),
        ("5 kg", Dimension::RATIO, "`5 kg` is a mass (kg), but a ratio (a bare number, % or ppm) is wanted", "write it like `20 %`"),
        ("5 rad", Dimension::RATIO, "`5 rad` is an angle (rad), but a ratio (a bare number, % or ppm) is wanted", "write it like `20 %`"),
        ("85 degC", Dimension::PRESSURE, "`85 degC` is a temperature (K), but a pressure (Pa) is wanted", "write it like `2 bar`"),
        ("10 degC", Dimension::TEMPERATURE_DIFFERENCE, "`10 degC` is a temperature, but a difference of temperatures is wanted", "a difference is K or delta_degC: write `10 delta_degC`"),
        ("10 °F", Dimension::TEMPERATURE_DIFFERENCE, "`10 °F` is a temperature, but a difference of temperatures is wanted", "a difference is delta_degF: write `10 delta_degF`"),
        ("10 delta_degC", Dimension::TEMPERATURE, "`10 delta_degC` is a difference of temperatures, but a temperature is wanted", "write degC, degF, degR or K, such as `10 degC`"),
        ("9 barg", Dimension::PRESSURE, "`9 barg` counts from the pressure of the atmosphere, but a difference is wanted", "write a difference: `9 bar`"),
        ("-300 degC", Dimension::TEMPERATURE, "`-300 degC` is below absolute zero", "absolute zero is 0 K, -273.15 degC"),
        ("-2 barg", Dimension::PRESSURE_LEVEL, "`-2 barg` is below vacuum", "vacuum is 0 bar, -1.01325 barg"),
    ];

    #[test]
    fn every_mistake_is_told_in_the_words_of_its_writer() {
        for &(text, wanted, message, help) in SAID {
            let error = read(text, wanted).expect_err(text);
            assert_eq!((error.to_string().as_str(), error.help().as_str()), (message, help));
            let bytes = error.bytes();
            assert!(text.get(bytes.clone()).is_some(), "{text}: {bytes:?}");
        }
    }

    #[test]
    fn a_long_text_is_refused_with_its_length() {
        let error = read(&"9".repeat(400), Dimension::RATIO).expect_err("400 digits");
        assert_eq!(error, UnitError::TooLong { length: 400, bytes: 0..400 });
        assert!(!error.help().is_empty());
    }

    #[test]
    fn messages_are_lowercase_and_have_no_full_stop() {
        for &(text, wanted, _, _) in SAID {
            let message = read(text, wanted).expect_err(text).to_string();
            assert!(!message.ends_with('.'), "{message}");
            assert!(!message.starts_with(char::is_uppercase), "{message}");
        }
    }

    #[test]
    fn a_number_that_fits_no_usual_unit_is_not_proposed_with_one() {
        let error = read("-300", Dimension::TEMPERATURE).expect_err("a bare number");
        assert_eq!(error.help(), "write it like `85 degC`");
    }

    #[test]
    fn control_characters_do_not_reach_a_message() {
        let error = read("5\u{1b}[31m kg", Dimension::MASS).expect_err("an escape sequence");
        assert!(!error.to_string().contains('\u{1b}'), "{error}");
        let error = read("\u{1b}[31m", Dimension::MASS).expect_err("an escape sequence");
        assert!(!error.to_string().contains('\u{1b}'), "{error}");
    }
}
