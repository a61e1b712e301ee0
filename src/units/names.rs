//! What dimensions are called, the SI unit each is written in, and an example of each.

use super::dimension::{Dimension, vanishes};

/// A dimension with a name of its own.
struct Known {
    dimension: Dimension,
    words: &'static str,
    symbol: &'static str,
    /// A usual number in the first of the usual units, for examples.
    number: &'static str,
    /// Units an engineer would write, the commonest first.
    usual: &'static [&'static str],
}

const fn known(
    dimension: Dimension,
    words: &'static str,
    symbol: &'static str,
    number: &'static str,
    usual: &'static [&'static str],
) -> Known {
    Known { dimension, words, symbol, number, usual }
}

/// Where two names share a dimension (stress and pressure), the first one speaks for both.
#[rustfmt::skip]
const KNOWN: &[Known] = &[
    known(Dimension::RATIO, "ratio", "", "20", &["%"]),
    known(Dimension::ANGLE, "angle", "rad", "90", &["deg", "rad"]),
    known(Dimension::LENGTH, "length", "m", "20", &["mm", "m"]),
    known(Dimension::AREA, "area", "m2", "3", &["cm2", "m2"]),
    known(Dimension::VOLUME, "volume", "m3", "2", &["L", "m3"]),
    known(Dimension::MASS, "mass", "kg", "5", &["kg", "g"]),
    known(Dimension::TIME, "time", "s", "30", &["min", "s"]),
    known(Dimension::AMOUNT, "amount of substance", "mol", "2", &["mol", "kmol"]),
    known(Dimension::TEMPERATURE, "temperature", "K", "85", &["degC", "K"]),
    known(Dimension::TEMPERATURE_DIFFERENCE, "temperature difference", "K", "10", &["K", "delta_degC"]),
    known(Dimension::FORCE, "force", "N", "5", &["N"]),
    known(Dimension::PRESSURE, "pressure", "Pa", "2", &["bar", "Pa"]),
    known(Dimension::PRESSURE_LEVEL, "pressure level", "Pa", "9", &["bar", "barg"]),
    known(Dimension::VELOCITY, "velocity", "m/s", "2", &["mm/s", "m/s"]),
    known(Dimension::ACCELERATION, "acceleration", "m/s2", "9.81", &["m/s2"]),
    known(Dimension::MASS_FLOW, "mass flow", "kg/s", "1.1", &["kg/h", "g/s"]),
    known(Dimension::MASS_FLUX, "mass flux", "kg/(m2 s)", "3", &["kg/(m2 s)"]),
    known(Dimension::VOLUME_FLOW, "volume flow", "m3/s", "18", &["L/h", "m3/s"]),
    known(Dimension::DENSITY, "density", "kg/m3", "890", &["kg/m3", "g/cm3"]),
    known(Dimension::DENSITY_SLOPE, "slope of a density", "kg/(m3 K)", "-0.7", &["kg/(m3 K)"]),
    known(Dimension::CONCENTRATION, "concentration", "mol/m3", "4000", &["mol/m3", "mol/L"]),
    known(Dimension::PER_CONCENTRATION, "inverse of a concentration", "m3/mol", "2e-4", &["m3/mol", "L/mol"]),
    known(Dimension::REACTION_RATE, "rate of reaction", "mol/(m3 s)", "1", &["mol/(m3 s)"]),
    known(Dimension::MOLAR_MASS, "molar mass", "kg/mol", "104.15", &["g/mol", "kg/mol"]),
    known(Dimension::AMOUNT_PER_MASS, "amount per mass", "mol/kg", "9.6", &["mol/kg"]),
    known(Dimension::ENERGY, "energy", "J", "5", &["kJ", "J"]),
    known(Dimension::MOLAR_ENERGY, "molar energy", "J/mol", "75", &["kJ/mol", "J/mol"]),
    known(Dimension::SPECIFIC_ENERGY, "energy per mass", "J/kg", "670", &["kJ/kg", "J/kg"]),
    known(Dimension::HEAT_CAPACITY, "heat capacity", "J/(kg K)", "1.88", &["kJ/(kg K)", "J/(kg K)"]),
    known(Dimension::MOLAR_HEAT_CAPACITY, "molar heat capacity", "J/(mol K)", "75", &["J/(mol K)"]),
    known(Dimension::POWER, "power", "W", "2", &["kW", "W"]),
    known(Dimension::SPECIFIC_POWER, "power per mass", "W/kg", "10", &["W/kg"]),
    known(Dimension::HEAT_SOURCE, "heat source", "W/m3", "2e5", &["W/m3"]),
    known(Dimension::HEAT_FLUX, "heat flux", "W/m2", "500", &["W/m2"]),
    known(Dimension::HEAT_TRANSFER_COEFFICIENT, "heat transfer coefficient", "W/(m2 K)", "300", &["W/(m2 K)"]),
    known(Dimension::HEAT_RESISTANCE, "heat resistance", "m2 K/W", "2e-4", &["m2 K/W"]),
    known(Dimension::CONDUCTIVITY, "thermal conductivity", "W/(m K)", "0.126", &["W/(m K)"]),
    known(Dimension::DIFFUSIVITY, "diffusivity", "m2/s", "1e-9", &["m2/s"]),
    known(Dimension::VISCOSITY, "viscosity", "Pa s", "12", &["Pa s", "mPa s"]),
    known(Dimension::FREQUENCY, "rate", "1/s", "2e-4", &["1/s", "1/h"]),
    known(Dimension::PRESSURE_GRADIENT, "pressure gradient", "Pa/m", "0.5", &["bar/m", "Pa/m"]),
    known(Dimension::PER_TEMPERATURE, "coefficient per kelvin", "1/K", "7e-4", &["1/K"]),
];

/// Symbols of the exponents in the order they are written, with their place in the array of
/// [`Dimension::exponents`].
const BASE: [(&str, usize); 5] = [("kg", 1), ("mol", 4), ("m", 0), ("s", 2), ("K", 3)];

/// Derived units that may take the place of base units where no name is known; the first of
/// equally short ones is taken.
const DERIVED: [(&str, Dimension); 5] = [
    ("W", Dimension::POWER),
    ("J", Dimension::ENERGY),
    ("Pa", Dimension::PRESSURE),
    ("Pa s", Dimension::VISCOSITY),
    ("N", Dimension::FORCE),
];

fn find(dimension: Dimension) -> Option<&'static Known> {
    KNOWN.iter().find(|known| known.dimension == dimension)
}

/// The name in words, if there is one.
pub(super) fn words(dimension: Dimension) -> Option<&'static str> {
    find(dimension).map(|known| known.words).or_else(|| {
        let [length, _, _, _, amount] = dimension.exponents();
        let same_order = Dimension::rate_constant(1.0 - amount);
        // an amount alone would fit any order; only volume per amount makes a rate constant
        (dimension == same_order && !vanishes(length)).then_some("rate constant")
    })
}

/// Name and unit with the article, for messages.
pub(super) fn phrase(dimension: Dimension) -> String {
    let text = dimension.to_string();
    let article = if text.starts_with(['a', 'e', 'i', 'o', 'u']) { "an" } else { "a" };
    format!("{article} {text}")
}

/// Units an engineer would write for it, the commonest first.
pub(super) fn usual_units(dimension: Dimension) -> Vec<String> {
    match find(dimension) {
        Some(known) => known.usual.iter().map(|&unit| unit.to_owned()).collect(),
        None => vec![symbol(dimension)],
    }
}

/// The SI unit as it is written here: `W/(m2 K)`, empty for a ratio, `rad` for an angle.
///
/// Quantities without a name are written in base units, or with N, Pa, J or W where that is
/// shorter.
#[must_use]
pub fn symbol(dimension: Dimension) -> String {
    match find(dimension) {
        Some(known) => known.symbol.to_owned(),
        None => composed(dimension),
    }
}

/// The unit as the end of a column's name: `K`, `W_per_m2`, `m3_per_mol_s`, empty for a ratio.
#[must_use]
pub fn column_suffix(dimension: Dimension) -> String {
    let symbol = symbol(dimension);
    let symbol = symbol.replace(['(', ')'], "").replace(' ', "_");
    match symbol.strip_prefix("1/") {
        Some(below) => format!("per_{below}"),
        None => symbol.replace('/', "_per_"),
    }
}

/// A value that can be read as this dimension, for messages: `85 degC`, `300 W/(m2 K)`, `20 %`.
#[must_use]
pub fn example(dimension: Dimension) -> String {
    match find(dimension) {
        Some(known) => format!("{} {}", known.number, known.usual.first().unwrap_or(&"")),
        None => format!("1 {}", composed(dimension)),
    }
}

/// The shortest way to write exponents as a unit.
fn composed(dimension: Dimension) -> String {
    let base = (cost(dimension), quotient(dimension, None, None));
    let derived = |(symbol, derived): (&'static str, Dimension)| {
        // `Pa s` is two symbols to read
        let own = if symbol.contains(' ') { 2.0 } else { 1.0 };
        let (above, below) = (dimension.over(derived), dimension.times(derived));
        [
            (own + cost(above), quotient(above, Some(symbol), None)),
            (own + cost(below), quotient(below, None, Some(symbol))),
        ]
    };
    // `min_by` keeps the first of equals, so base units win a tie
    std::iter::once(base)
        .chain(DERIVED.into_iter().flat_map(derived))
        .min_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, text)| text)
        .unwrap_or_default()
}

/// How much there is to read: the symbols, and the size of their exponents.
fn cost(dimension: Dimension) -> f64 {
    let present = dimension.exponents().into_iter().filter(|&exponent| !vanishes(exponent));
    present.map(|exponent| 1.0 + exponent.abs()).sum()
}

fn quotient(rest: Dimension, above: Option<&str>, below: Option<&str>) -> String {
    let mut numerator: Vec<String> = above.map(str::to_owned).into_iter().collect();
    let mut denominator: Vec<String> = below.map(str::to_owned).into_iter().collect();
    let exponents = rest.exponents();
    for (symbol, place) in BASE {
        let exponent = exponents[place];
        if vanishes(exponent) {
            continue;
        }
        let side = if exponent > 0.0 { &mut numerator } else { &mut denominator };
        side.push(raised(symbol, exponent.abs()));
    }
    let numerator = numerator.join(" ");
    match (numerator.is_empty(), denominator.as_slice()) {
        (_, []) => numerator,
        (true, [one]) => format!("1/{one}"),
        (true, many) => format!("1/({})", many.join(" ")),
        (false, [one]) if !one.contains(' ') => format!("{numerator}/{one}"),
        (false, many) => format!("{numerator}/({})", many.join(" ")),
    }
}

/// The exponent with the digits that matter to the comparison of dimensions, none for 1.
fn raised(symbol: &str, exponent: f64) -> String {
    let digits = format!("{exponent:.3}");
    let digits = digits.trim_end_matches('0').trim_end_matches('.');
    if digits == "1" { symbol.to_owned() } else { format!("{symbol}{digits}") }
}

/// Every dimension that has a name, for tests.
#[cfg(test)]
pub(super) fn named() -> impl Iterator<Item = Dimension> {
    KNOWN.iter().map(|known| known.dimension)
}

#[cfg(test)]
mod tests {
    use super::super::read;
    use super::*;

    #[test]
    fn each_symbol_reads_as_its_own_dimension() {
        for known in KNOWN {
            let text = format!("1 {}", known.symbol);
            assert_eq!(read(text.trim(), known.dimension), Ok(1.0), "{}", known.words);
        }
    }

    #[test]
    fn every_example_and_usual_unit_can_be_read() {
        for dimension in named() {
            assert!(read(&example(dimension), dimension).is_ok(), "{dimension}");
            for unit in usual_units(dimension) {
                assert!(read(&format!("1 {unit}"), dimension).is_ok(), "{unit}");
            }
        }
        let unnamed = Dimension::new(1.0, 2.0, -3.0, 0.5, -1.0);
        assert_eq!(read(&example(unnamed), unnamed), Ok(1.0));
    }

    #[test]
    fn rate_constants_are_written_in_base_units() {
        assert_eq!(symbol(Dimension::rate_constant(2.0)), "m3/(mol s)");
        assert_eq!(symbol(Dimension::rate_constant(3.0)), "m6/(mol2 s)");
        assert_eq!(symbol(Dimension::rate_constant(1.5)), "m1.5/(mol0.5 s)");
        assert_eq!(symbol(Dimension::rate_constant(1.7)), "m2.1/(mol0.7 s)");
        assert_eq!(words(Dimension::rate_constant(1.5)), Some("rate constant"));
        assert_eq!(words(Dimension::VOLUME), Some("volume"));
    }

    #[test]
    fn quantities_without_a_name_take_the_shortest_unit() {
        let per_kelvin = Dimension::CONDUCTIVITY.over(Dimension::TEMPERATURE_DIFFERENCE);
        assert_eq!(symbol(per_kelvin), "W/(m K2)");
        assert_eq!(symbol(Dimension::CONDUCTIVITY.to_power(-1.0)), "m K/W");
        assert_eq!(symbol(Dimension::AREA.to_power(-1.0)), "1/m2");
        assert_eq!(symbol(Dimension::MASS.over(Dimension::LENGTH)), "kg/m");
        let coefficient = Dimension::VISCOSITY.over(Dimension::TEMPERATURE_DIFFERENCE);
        assert_eq!(symbol(coefficient), "Pa s/K");
    }

    #[test]
    fn columns_say_per_for_a_slash() {
        assert_eq!(column_suffix(Dimension::TEMPERATURE), "K");
        assert_eq!(column_suffix(Dimension::HEAT_FLUX), "W_per_m2");
        assert_eq!(column_suffix(Dimension::MOLAR_MASS), "kg_per_mol");
        assert_eq!(column_suffix(Dimension::rate_constant(2.0)), "m3_per_mol_s");
        assert_eq!(column_suffix(Dimension::SHEAR_RATE), "per_s");
        assert_eq!(column_suffix(Dimension::VISCOSITY), "Pa_s");
        assert_eq!(column_suffix(Dimension::RATIO), "");
    }

    #[test]
    fn the_article_fits_the_name() {
        assert_eq!(phrase(Dimension::ENERGY), "an energy (J)");
        assert_eq!(phrase(Dimension::HEAT_FLUX), "a heat flux (W/m2)");
    }
}
