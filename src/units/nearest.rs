//! What was meant by a unit that does not exist.

use super::table::{all, find};

/// Words that no distance between letters would find.
#[rustfmt::skip]
const WORDS: &[(&str, &[&str])] = &[
    ("degC", &["c", "celsius", "centigrade", "deg_c"]),
    ("degF", &["f", "fahrenheit", "deg_f"]),
    ("degR", &["r", "rankine", "ra"]),
    ("delta_degC", &["deltac", "delta_c", "ddegc", "Δdegc", "Δ°c", "delta°c", "delta_°c"]),
    ("delta_degF", &["deltaf", "delta_f", "ddegf", "Δdegf", "Δ°f", "delta°f", "delta_°f"]),
    ("K", &["kelvin", "kelvins", "degk", "°k", "Δk", "delta_k"]),
    ("s", &["sec", "secs", "second", "seconds"]),
    ("min", &["mins", "minute", "minutes", "mn"]),
    ("h", &["hr", "hrs", "hour", "hours"]),
    ("d", &["day", "days"]),
    ("g", &["gm", "gms", "gram", "grams", "gramme"]),
    ("kg", &["kgs", "kilo", "kilos", "kilogram", "kilograms", "kgm"]),
    ("t", &["tonne", "tonnes", "mt"]),
    ("lb", &["lbs", "lbm", "pound", "pounds", "#"]),
    ("oz", &["ounce", "ounces"]),
    ("lbmol", &["lbmole", "lb_mol", "lb_mole"]),
    ("m", &["meter", "meters", "metre", "metres", "mtr"]),
    ("mm", &["millimeter", "millimeters", "millimetre", "millimetres"]),
    ("cm", &["centimeter", "centimeters", "centimetre", "centimetres"]),
    ("um", &["micron", "microns", "mu"]),
    ("in", &["inch", "inches", "\""]),
    ("ft", &["foot", "feet"]),
    ("L", &["liter", "liters", "litre", "litres", "ltr", "lt"]),
    ("cm3", &["cc", "ccm"]),
    ("m3", &["cbm"]),
    ("ft3", &["cuft", "cf"]),
    ("gal", &["gallon", "gallons", "usgal"]),
    ("gal/min", &["gpm"]),
    ("mol", &["mole", "moles", "gmol", "gmole"]),
    ("mol/L", &["molar"]),
    ("g/mol", &["da", "dalton", "daltons", "amu"]),
    ("kg/mol", &["kda"]),
    ("Pa", &["pascal", "pascals"]),
    ("bar", &["bara", "bars", "bar_a", "barabs"]),
    ("barg", &["bar_g", "barü", "bargauge"]),
    ("psi", &["psia", "psid", "psf"]),
    ("N", &["newton", "newtons"]),
    ("J", &["joule", "joules"]),
    ("W", &["watt", "watts"]),
    ("P", &["poise"]),
    ("cP", &["cps", "cpoise", "centipoise"]),
    ("St", &["stokes", "stoke"]),
    ("cSt", &["centistokes", "cstokes"]),
    ("cal", &["calorie", "calories", "gcal"]),
    ("hp", &["horsepower"]),
    ("hp_metric", &["ps", "cv", "pk"]),
    ("atm", &["atmosphere", "atmospheres"]),
    ("rad", &["radian", "radians"]),
    ("deg", &["degree", "degrees", "degs"]),
    ("%", &["percent", "pct", "wt%", "mol%", "vol%", "w%", "m%", "%wt", "wtpct"]),
    ("ppm", &["ppmw", "wppm", "ppmv"]),
];

/// Words for several units, and how each of them is written.
const AMBIGUOUS: &[(&str, &[&str])] = &[
    ("ton", &["`t` (1000 kg)", "`ton_short` (2000 lb)", "`ton_long` (2240 lb)"]),
    ("tons", &["`t` (1000 kg)", "`ton_short` (2000 lb)", "`ton_long` (2240 lb)"]),
];

/// Prefixes that a slip of the pen may have meant; the others would only widen the guess.
const LIKELY: &[&str] = &["k", "m", "c", "M", "u", "n"];

/// Beyond this length it is no symbol but a sentence.
const LONGEST: usize = 24;

/// The units a word may stand for, where that is more than one.
pub(super) fn choices(symbol: &str) -> Option<&'static [&'static str]> {
    AMBIGUOUS.iter().find(|(word, _)| symbol.eq_ignore_ascii_case(word)).map(|&(_, ways)| ways)
}

/// The unit that was most likely meant.
pub(super) fn nearest(symbol: &str) -> Option<String> {
    if symbol.len() > LONGEST {
        return None;
    }
    word(symbol).or_else(|| run_together(symbol)).or_else(|| other_case(symbol)).or_else(|| close(symbol))
}

fn word(symbol: &str) -> Option<String> {
    // the case carries meaning in one letter only: `M` is molar, `m` a metre
    if symbol == "M" {
        return Some("mol/L".to_owned());
    }
    let lower = symbol.to_lowercase();
    // Δ has a lower case of its own
    let lower = lower.replace('δ', "Δ");
    WORDS.iter().find(|(_, words)| words.contains(&lower.as_str())).map(|&(unit, _)| unit.to_owned())
}

/// The symbol with the fewest letters in another case.
fn other_case(symbol: &str) -> Option<String> {
    let changes = |way: &String| way.chars().zip(symbol.chars()).filter(|(a, b)| a != b).count();
    candidates().filter(|way| way.eq_ignore_ascii_case(symbol)).min_by_key(changes)
}

/// `Nm`, `mPas`: two units without a sign between them.
fn run_together(symbol: &str) -> Option<String> {
    ["s", "m", "h"].iter().find_map(|second| {
        let first = symbol.strip_suffix(second)?;
        let (unit, _) = find(first)?;
        matches!(unit.symbol, "Pa" | "N" | "W" | "J").then(|| format!("{first} {second}"))
    })
}

/// The symbol with the fewest letters missing, added, wrong or swapped.
fn close(symbol: &str) -> Option<String> {
    let length = symbol.chars().count();
    // in a short symbol every letter counts: `xx` is near to nothing
    let farthest = match length {
        0..=2 => return None,
        3..=5 => 1,
        _ => 2,
    };
    candidates()
        .filter(|way| way.chars().count() > 1)
        .map(|way| (strsim::damerau_levenshtein(&way, symbol), way))
        .filter(|&(distance, _)| distance <= farthest)
        .min_by_key(|&(distance, _)| distance)
        .map(|(_, way)| way)
}

/// Symbols without a prefix first, so that they win a tie.
fn candidates() -> impl Iterator<Item = String> {
    let bare = all().map(|unit| unit.symbol.to_owned());
    let prefixed = LIKELY.iter().flat_map(|prefix| {
        all()
            .filter(|unit| unit.prefixes.contains(prefix) && !(*prefix == "M" && unit.symbol == "m"))
            .map(move |unit| format!("{prefix}{}", unit.symbol))
    });
    bare.chain(prefixed)
}

#[cfg(test)]
mod tests {
    use super::super::expression::parse;
    use super::*;

    #[test]
    fn every_word_leads_to_a_unit_and_is_none_itself() {
        for (unit, words) in WORDS {
            assert!(parse(unit, 0).is_ok(), "{unit}");
            for word in *words {
                assert_eq!(find(word).map(|(unit, _)| unit.symbol), None, "{word}");
            }
        }
        assert!(AMBIGUOUS.iter().all(|(word, _)| find(word).is_none()));
    }

    #[test]
    fn usual_slips_are_understood() {
        for (typed, meant) in [
            ("pa", "Pa"),
            ("degc", "degC"),
            ("celsius", "degC"),
            ("C", "degC"),
            ("F", "degF"),
            ("hr", "h"),
            ("sec", "s"),
            ("kelvin", "K"),
            ("mins", "min"),
            ("cp", "cP"),
            ("KG", "kg"),
            ("Kg", "kg"),
            ("MPA", "MPa"),
            ("mpa", "mPa"),
            ("k", "K"),
            ("kpa", "kPa"),
            ("BTU", "Btu"),
            ("PSI", "psi"),
            ("psia", "psi"),
            ("Nm", "N m"),
            ("mPas", "mPa s"),
            ("M", "mol/L"),
            ("wt%", "%"),
            ("dgeC", "degC"),
            ("delta_degc", "delta_degC"),
            ("delta_C", "delta_degC"),
            ("MM", "mm"),
            ("kmole", "kmol"),
        ] {
            assert_eq!(nearest(typed).as_deref(), Some(meant), "{typed}");
        }
    }

    #[test]
    fn far_words_are_near_to_nothing() {
        for typed in ["wobbles", "qq", "approximately", "x", "ħ", &"k".repeat(150)] {
            assert_eq!(nearest(typed), None, "{typed}");
        }
    }
}
