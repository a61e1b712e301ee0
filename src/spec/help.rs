//! What a message says besides its text: where the mistake stands, what its code is, and what to write
//! instead, with an example that can be read.
//!
//! The tests hold that every proposed value is one; `cli/` draws the rest.

use super::error::{SpecError, joined};
use super::place::{Location, Place};

/// A list of more known words than this is no help: nobody reads it.
const MOST_KNOWN: usize = 14;

/// Most of a percentage that may have been meant; a larger number is rather in parts per million.
const MOST_PERCENT: f64 = 100.0;

/// A longer text is not quoted in a proposal.
const LONGEST_QUOTED: usize = 80;

/// Most of a number of parts per million.
const MOST_PPM: f64 = 1e6;

/// Makes what each variant has, from one table: its place, and its code.
macro_rules! variants {
    ($($variant:ident: $code:literal),+ $(,)?) => {
        impl SpecError {
            /// The codes of all mistakes, in the order a file is read.
            pub const CODES: &'static [&'static str] = &[$($code),+];

            /// The word for this kind of mistake, as `explain` and the JSON form know it.
            #[must_use]
            pub fn code(&self) -> &'static str {
                match self {
                    $(Self::$variant { .. } => $code),+
                }
            }

            /// Where the mistake stands.
            #[must_use]
            pub fn at(&self) -> &Place {
                match self {
                    $(Self::$variant { at, .. })|+ => at,
                }
            }
        }
    };
}

variants! {
    TooLarge: "too_large",
    NotUtf8: "not_utf8",
    Empty: "empty",
    NotYaml: "not_yaml",
    TooDeep: "too_deep",
    TooMany: "too_many",
    SecondDocument: "second_document",
    Tag: "tag",
    MergeKey: "merge_key",
    KeyNotText: "key_not_text",
    DuplicateKey: "duplicate_key",
    NotFinite: "not_finite",
    Ambiguous: "ambiguous",
    NoFormat: "no_format",
    WrongFormat: "wrong_format",
    NewerFormat: "newer_format",
    NoPart: "no_part",
    IncludeCircle: "include_circle",
    GivenTwice: "given_twice",
    NoSuchPath: "no_such_path",
    UnknownKey: "unknown_key",
    CommaEndedText: "comma_ended_text",
    MissingKey: "missing_key",
    NoneOf: "none_of",
    BothOf: "both_of",
    WrongShape: "wrong_shape",
    UnknownKind: "unknown_kind",
    UnknownWord: "unknown_word",
    NotInThisVersion: "not_in_this_version",
    Unit: "unit",
    NotWhole: "not_whole",
    OutOfBounds: "out_of_bounds",
    FractionAboveOne: "fraction_above_one",
    NotAFlag: "not_a_flag",
    BadName: "bad_name",
    ReservedName: "reserved_name",
    NameTaken: "name_taken",
    UnknownName: "unknown_name",
    LikeCircle: "like_circle",
    SumNotOne: "sum_not_one",
    TwoRests: "two_rests",
    NoRest: "no_rest",
    MassNotBalanced: "mass_not_balanced",
    ElementNotBalanced: "element_not_balanced",
    BadFormula: "bad_formula",
    MissingProperty: "missing_property",
    PropertyTwice: "property_twice",
    TooFewPoints: "too_few_points",
    PointTwice: "point_twice",
    EmptyRange: "empty_range",
    LengthsDiffer: "lengths_differ",
    NoSection: "no_section",
    Needs: "needs",
    DoesNotGoWith: "does_not_go_with",
    OutsideLength: "outside_length",
}

impl SpecError {
    /// What to write instead; none where the message says it already.
    #[must_use]
    pub fn help(&self) -> Option<String> {
        let text = match self {
            // ---- the text
            Self::TooLarge { .. } => "a spec is typed by hand: is this the file that was meant?".into(),
            Self::NotUtf8 { .. } => "save the file as UTF-8: editors offer it beside the file's name".into(),
            Self::Empty { .. } => "a spec begins with `format: axirad/1`".into(),
            Self::NotYaml { .. } => return None, // the reason says what to change
            Self::TooDeep { .. } => "no block of the format is nested so deep".into(),
            Self::TooMany { .. } => "aliases and `like` that name each other multiply: write out what is meant".into(),
            Self::SecondDocument { .. } => "a file holds one spec: put the second into a file of its own".into(),
            Self::Tag { .. } => "leave the tag out: units stand in the value, as in `85 degC`".into(),
            Self::MergeKey { .. } => {
                "in `species` and `walls`, `like: NAME` copies a block; elsewhere an alias repeats a whole value".into()
            }
            Self::KeyNotText { .. } => "write the key as one word, as in `mass_flow: 1 kg/h`".into(),
            Self::DuplicateKey { .. } => "leave one of the two out".into(),
            Self::NotFinite { .. } => "write a number; what has no value or no limit is left out".into(),
            Self::Ambiguous { .. } => "put it in quotes".into(),

            // ---- format, parts, paths
            Self::NoFormat { wanted, .. } => format!("the first key must be `format: {wanted}`"),
            Self::WrongFormat { found, wanted, .. } => wrong_format(found, wanted),
            Self::NewerFormat { .. } => "a newer version of axirad is needed; `axirad --version` shows this one".into(),
            Self::NoPart { .. } => "parts are named relative to the file that includes them".into(),
            Self::IncludeCircle { .. } => "leave this `include` out: what it brings is there already".into(),
            Self::GivenTwice { key, .. } => {
                format!("leave one out; a wanted difference stands under `override`, by its path: `{key}`")
            }
            Self::NoSuchPath { nearest: Some(nearest), .. } => do_you_mean(nearest),
            Self::NoSuchPath { nearest: None, .. } => {
                "a path has a step for each key, list items by their `name`: `sections.zone_1.length`".into()
            }

            // ---- structure
            Self::UnknownKey { nearest: Some(nearest), .. }
            | Self::UnknownKind { nearest: Some(nearest), .. }
            | Self::UnknownWord { nearest: Some(nearest), .. } => do_you_mean(nearest),
            Self::UnknownKey { nearest: None, known, .. } => known_words("its keys are", known, "and")?,
            Self::UnknownKind { nearest: None, known, .. } => known_words("write", known, "or")?,
            Self::UnknownWord { nearest: None, known, .. } => known_words("write", known, "or")?,
            Self::CommaEndedText { at, key } => comma(at, key),
            Self::MissingKey { key, example, .. } => format!("such as `{key}: {example}`"),
            Self::NoneOf { keys, .. } => none_of(keys)?,
            Self::BothOf { one, other, .. } => format!("leave out `{one}` or `{other}`"),
            Self::WrongShape { key, wanted, found, .. } => wrong_shape(key, wanted, found)?,
            Self::NotInThisVersion { .. } => "it belongs to the format, but needs a later version of axirad".into(),

            // ---- values
            Self::Unit { error, .. } => error.help(),
            Self::NotWhole { text, .. } => not_whole(text),
            Self::OutOfBounds { text, bound, .. } => do_you_mean(positive(text, bound)?),
            Self::FractionAboveOne { text, .. } => above_one(text),
            Self::NotAFlag { text, .. } => not_a_flag(text),

            // ---- names
            Self::BadName { name, .. } => {
                let like = name_like(name).map(|like| format!(", as in `{like}`")).unwrap_or_default();
                format!("a name begins with a small letter and has small letters, digits and `_`{like}")
            }
            Self::ReservedName { name, .. } => format!(
                "`rest`, `same`, `inlet`, `outlet`, `inner`, `outer`, `lower` and `upper` mean something already; \
                 write `{name}_1`, say"
            ),
            Self::NameTaken { name, .. } => format!("give one of the two another name, such as `{name}_2`"),
            Self::UnknownName { nearest: Some(nearest), .. } => do_you_mean(nearest),
            Self::UnknownName { nearest: None, what, known, .. } => unknown_name(what, known),
            Self::LikeCircle { .. } => "write out the keys of one of them, without `like`".into(),

            // ---- meaning
            Self::SumNotOne { .. } => "write `rest` for one of them: it takes what is missing".into(),
            Self::TwoRests { .. } => "give all but one a value".into(),
            Self::NoRest { .. } => "lower the others: what is left for `rest` must not be below 0".into(),
            Self::MassNotBalanced { .. } => {
                "check the amounts in `consumes` and `makes`, and the molar masses of these species".into()
            }
            Self::ElementNotBalanced { .. } => {
                "check the amounts in `consumes` and `makes`, and the formulas of these species".into()
            }
            Self::BadFormula { .. } => {
                "write elements with their counts, as in `C8H8` or `Ca(OH)2`, or give `molar_mass` instead".into()
            }
            Self::MissingProperty { property, .. } => missing_property(property),
            Self::PropertyTwice { property, .. } => {
                format!("leave `{property}` out of `mixture`, or out of every species")
            }
            Self::TooFewPoints { .. } => {
                "give two or more, as in `{20 degC: 867 kg/m3, 60 degC: 829 kg/m3}`; one value alone needs no table"
                    .into()
            }
            Self::PointTwice { .. } => "leave one of the two out".into(),
            Self::EmptyRange { key, from, to, .. } if key == "valid" && from != to => {
                format!("do you mean `{{from: {to}, to: {from}}}`?")
            }
            Self::EmptyRange { .. } => "the lower end comes first, and below the upper".into(),
            Self::LengthsDiffer { other, .. } => {
                format!("entries go in pairs with those of `{other}`: write 0, with its unit, for what is not there")
            }
            Self::NoSection { .. } => "such as `- {name: tube, length: 4 m, wall: {kind: insulated}}`".into(),
            Self::Needs { .. } | Self::DoesNotGoWith { .. } => return None, // the message says what to do
            Self::OutsideLength { length, .. } => format!("`z` lies between 0 m and {length}"),
        };
        Some(text)
    }

    /// The other place that the mistake is about, and a few words for it.
    #[must_use]
    pub fn second(&self) -> Option<(&Location, String)> {
        let (first, label) = match self {
            Self::DuplicateKey { first, .. } => (first, "first given here"),
            Self::GivenTwice { first, .. } => (first, "also given here"),
            Self::NameTaken { first, .. } => (first, "taken here"),
            Self::PropertyTwice { first, .. } => (first, "given for the mixture here"),
            _ => return None,
        };
        Some((first, label.to_owned()))
    }

    /// A few words for what the caret underlines; empty where they would only repeat the message.
    #[must_use]
    pub fn label(&self) -> String {
        match self {
            Self::MissingKey { key, .. } => format!("`{key}` is missing here"),
            Self::NoneOf { .. } => "one is missing here".into(),
            Self::UnknownKey { .. } => "unknown key".into(),
            Self::CommaEndedText { .. } => "after a comma".into(),
            Self::NoFormat { at, .. } if at.path.0.is_empty() => "it is missing before this".into(),
            Self::NoFormat { .. } => "it must stand before all else".into(),
            Self::DuplicateKey { .. } | Self::GivenTwice { .. } | Self::PropertyTwice { .. } => "again here".into(),
            Self::TwoRests { .. } => "the second".into(),
            Self::NameTaken { .. } => "the same name".into(),
            Self::MissingProperty { property, .. } => format!("has no `{property}`"),
            Self::LengthsDiffer { wanted, .. } => format!("{wanted} are due"),
            _ => String::new(),
        }
    }
}

fn do_you_mean(word: impl AsRef<str>) -> String {
    format!("do you mean `{}`?", word.as_ref())
}

/// The words that are known, where they are few.
fn known_words(before: &str, known: &[impl AsRef<str>], joint: &str) -> Option<String> {
    let few = !known.is_empty() && known.len() <= MOST_KNOWN;
    few.then(|| format!("{before} {}", joined(known, joint)))
}

fn wrong_format(found: &str, wanted: &str) -> String {
    match (found, wanted) {
        ("axirad-part/1", "axirad/1") => "a part is read by the spec that includes it: `include: [FILE]`".into(),
        ("axirad-study/1", "axirad/1") => "a study is no spec: take the file that it names as `base`".into(),
        ("axirad/1", "axirad-part/1") => {
            "only parts can be included: their first key is `format: axirad-part/1`".into()
        }
        _ => format!("write `format: {wanted}`"),
    }
}

/// A comma inside braces ended a number or a text: the pieces put together again.
fn comma(at: &Place, key: &str) -> String {
    let text = &at.location.source.text;
    let (before, from) = text.split_at(text.floor_char_boundary(at.location.bytes.start));
    let line = before.rsplit('\n').next().unwrap_or_default();
    let value = line.rsplit_once(": ").map_or("", |(_, value)| value.trim().trim_end_matches(',').trim_end());
    let is_number = value.parse::<i64>().is_ok();
    if is_number && key.starts_with(|c: char| c.is_ascii_digit()) {
        return do_you_mean(format!("{value}.{key}"));
    }
    let rest = from.lines().next().unwrap_or_default().split(['}', '{', '#']).next().unwrap_or_default();
    let pieces: Vec<&str> = rest.split(',').map(str::trim).take_while(|piece| !piece.contains(": ")).collect();
    let whole = format!("{value}, {}", pieces.join(", "));
    if value.is_empty() || whole.len() > LONGEST_QUOTED || whole.contains(['"', '\\']) {
        return "put the text in quotes, as in `note: \"one, two\"`".into();
    }
    format!("put the text in quotes: `\"{}\"`", whole.trim_end_matches([',', ' ']))
}

fn wrong_shape(key: &str, wanted: &str, found: &str) -> Option<String> {
    Some(match () {
        () if wanted.contains("such as") => return None,
        () if wanted.starts_with("temperatures") => {
            format!("such as `{key}: {{20 degC: 867 kg/m3, 60 degC: 829 kg/m3}}`")
        }
        () if wanted.starts_with("a list of numbers") => format!("such as `{key}: [0, 2.57, 9.56]`, with their units"),
        () if wanted.starts_with("a list of files") => format!("such as `{key}: [materials/styrene.yaml]`"),
        () if wanted.starts_with("a list") => "begin each item with `- `, under the key".into(),
        () if wanted.starts_with("a block") => format!("write keys under it, or in one line: `{key}: {{KEY: VALUE}}`"),
        () if found == "nothing" => format!("write it after `{key}:`"),
        () if wanted == "a value" => format!("write the value itself after `{key}:`"),
        () => return None,
    })
}

/// An example for the first of several keys, one of which is due.
fn none_of(keys: &[&'static str]) -> Option<String> {
    let example = match *keys.first()? {
        "mass_flow" => "such as `mass_flow: 1 kg/h`",
        "mass_fractions" => "such as `mass_fractions: {styrene: rest}`",
        "value" => "give `value` with the temperature it belongs to, `at`, or `prefactor`",
        "activation_energy" => {
            "such as `activation_energy: 75 kJ/mol`; what is the same at any temperature has `kind: constant`"
        }
        "at_least" => "such as `at_least: 20 %`, in the unit of the quantity",
        "by_combination" => "termination of two radicals makes one chain (`by_combination`), two, or both",
        _ => return None,
    };
    Some(example.to_owned())
}

/// The whole numbers on both sides.
fn not_whole(text: &str) -> String {
    match text.trim().parse::<f64>() {
        Ok(value) if value.abs() < MOST_PPM => format!("write `{}` or `{}`", value.floor(), value.ceil()),
        _ => "write it like `40`".into(),
    }
}

/// A negative quantity without its sign.
fn positive(text: &str, bound: &str) -> Option<String> {
    let rest = text.trim().strip_prefix('-').filter(|_| matches!(bound, "above 0" | "0 or above"))?;
    rest.starts_with(|c: char| matches!(c, '1'..='9') || rest.contains(|c: char| matches!(c, '1'..='9')) && c == '0')
        .then(|| rest.to_owned())
}

fn above_one(text: &str) -> String {
    match text.trim().parse::<f64>() {
        Ok(value) if value <= MOST_PERCENT => do_you_mean(format!("{} %", text.trim())),
        Ok(value) if value <= MOST_PPM => do_you_mean(format!("{} ppm", text.trim())),
        _ => "a fraction lies between 0 and 1, `0 %` and `100 %`".into(),
    }
}

/// `yes` and its like, which other formats take for `true`.
fn not_a_flag(text: &str) -> String {
    match text.trim().to_lowercase().as_str() {
        "yes" | "y" | "on" | "1" | "true" | "t" => "write `true`".into(),
        "no" | "n" | "off" | "0" | "false" | "f" | "none" => "write `false`".into(),
        _ => "write `true` or `false`".into(),
    }
}

/// A name that comes close to what was typed.
fn name_like(typed: &str) -> Option<String> {
    let mut name = String::new();
    for c in typed.trim().chars().take(LONGEST_QUOTED) {
        match c.to_ascii_lowercase() {
            c if c.is_ascii_lowercase() => name.push(c),
            c if c.is_ascii_digit() && !name.is_empty() => name.push(c),
            _ if !name.is_empty() && !name.ends_with('_') => name.push('_'),
            _ => {}
        }
    }
    let name = name.trim_end_matches('_');
    (name.len() > 1 || name == typed.to_lowercase()).then(|| name.to_owned()).filter(|name| !name.is_empty())
}

/// Where what is named is defined, and what there is.
fn unknown_name(what: &str, known: &[String]) -> String {
    let define = match what {
        "quantity" => return "quantities are named as `axirad run --verbose` names them".into(),
        "species" => "define it under `species`".into(),
        "wall" => "define it under `walls`, or write a block: `wall: {kind: insulated}`".into(),
        "coolant" => "define it under `coolants`, or write a block: `coolant: {temperature: 110 degC}`".into(),
        _ => String::new(),
    };
    let there = match known {
        [] => String::new(),
        [_] => format!("there is {}", joined(known, "and")),
        [_, _, ..] => known_words("there are", known, "and").unwrap_or_default(),
    };
    let parts: Vec<&str> = [there.as_str(), define.as_str()].into_iter().filter(|part| !part.is_empty()).collect();
    if parts.is_empty() { format!("no {what} is defined") } else { parts.join("; or ") }
}

fn missing_property(property: &str) -> String {
    let example = match property {
        "molar_mass" => return "such as `molar_mass: 104.15 g/mol`, or `formula: C8H8`".into(),
        "density" => "900 kg/m3",
        "heat_capacity" => "1.9 kJ/(kg K)",
        "conductivity" => "0.13 W/(m K)",
        "diffusivity" => "1e-9 m2/s",
        _ => return format!("add `{property}`"),
    };
    format!("such as `{property}: {example}`; in `mixture` it holds for the whole fluid")
}

#[cfg(test)]
mod tests {
    use super::super::place::{KeyPath, SourceText};
    use super::*;
    use crate::units::{self, Dimension};
    use std::sync::Arc;

    fn place(text: &str, at: &str) -> Place {
        let start = text.find(at).expect("it stands there");
        let source = Arc::new(SourceText { name: "plant.yaml".to_owned(), text: text.to_owned() });
        Place { location: Location { source, bytes: start..start + at.len() }, path: KeyPath::default() }
    }

    #[test]
    fn codes_are_the_names_of_the_variants() {
        let error = SpecError::TooFewPoints { at: place("x", "x") };
        let shown = format!("{error:?}");
        let name = shown.split(' ').next().expect("a name begins it");
        let snake: String = name.chars().fold(String::new(), |mut snake, c| {
            if c.is_uppercase() && !snake.is_empty() {
                snake.push('_');
            }
            snake.extend(c.to_lowercase());
            snake
        });
        assert_eq!(error.code(), snake);
        let mut codes = SpecError::CODES.to_vec();
        codes.sort_unstable();
        codes.dedup();
        assert_eq!(codes.len(), SpecError::CODES.len());
    }

    #[test]
    fn a_comma_gives_back_the_number_or_the_text_it_ended() {
        let text = "feed: {mass_flow: 1,5 kg/h}\nlaw: {source: Hui (1972), J. Appl. Polym. Sci., 749, x: 1}\n";
        assert_eq!(comma(&place(text, "5 kg/h"), "5 kg/h"), "do you mean `1.5 kg/h`?");
        let quoted = comma(&place(text, "J. Appl. Polym. Sci."), "J. Appl. Polym. Sci.");
        assert_eq!(quoted, "put the text in quotes: `\"Hui (1972), J. Appl. Polym. Sci., 749\"`");
        assert_eq!(comma(&place(text, "feed"), "feed"), "put the text in quotes, as in `note: \"one, two\"`");
    }

    #[test]
    fn a_fraction_above_one_is_taken_for_percent_or_ppm() {
        assert_eq!(above_one("20"), "do you mean `20 %`?");
        assert_eq!(above_one("300"), "do you mean `300 ppm`?");
        assert_eq!(above_one("120 %"), "a fraction lies between 0 and 1, `0 %` and `100 %`");
    }

    #[test]
    fn a_negative_quantity_is_proposed_without_its_sign() {
        assert_eq!(positive("-4 m", "above 0").as_deref(), Some("4 m"));
        assert_eq!(positive("-0.5 m", "above 0").as_deref(), Some("0.5 m"));
        assert_eq!(positive("-0 m", "above 0"), None);
        assert_eq!(positive("-4", "from 4 to 2000"), None);
    }

    #[test]
    fn proposed_names_can_be_names() {
        assert_eq!(name_like("Zone 1").as_deref(), Some("zone_1"));
        assert_eq!(name_like("2-butanol").as_deref(), Some("butanol"));
        assert_eq!(name_like("n-Butyl acetate!").as_deref(), Some("n_butyl_acetate"));
        assert_eq!(name_like("A").as_deref(), Some("a"));
        assert_eq!(name_like("+"), None);
    }

    #[test]
    fn other_words_for_true_and_false_are_understood() {
        assert_eq!(not_a_flag("Yes"), "write `true`");
        assert_eq!(not_a_flag("off"), "write `false`");
        assert_eq!(not_a_flag("perhaps"), "write `true` or `false`");
    }

    #[test]
    fn proposed_values_of_properties_can_be_read() {
        for (property, dimension) in [
            ("density", Dimension::DENSITY),
            ("heat_capacity", Dimension::HEAT_CAPACITY),
            ("conductivity", Dimension::CONDUCTIVITY),
            ("diffusivity", Dimension::DIFFUSIVITY),
        ] {
            let help = missing_property(property);
            let value = help.split(['`', ':']).nth(2).expect("a value stands in it").trim();
            assert!(units::read(value, dimension).is_ok(), "{help}");
        }
    }
}
