//! From the bytes of a file to a located tree.
//!
//! Two readers see the same text. `events.rs` gives every value its place and refuses whatever is not
//! part of the format or could be made to cost much; `second_reader.rs` then decides what is a number,
//! a text, a flag or nothing. Where the two differ in shape, the file is refused: no value is guessed.

use std::ops::Range;
use std::sync::Arc;

use super::error::SpecError;
use super::events;
use super::node::{Node, Origin, Value};
use super::place::{KeyPath, Location, Place, SourceText};
use super::second_reader;

/// Most bytes a file may have.
pub const MAX_BYTES: usize = 4 << 20;
/// Most values a file may have, aliases expanded.
pub const MAX_VALUES: usize = 100_000;
/// Most levels of blocks and lists.
pub const MAX_DEPTH: usize = 32;
/// Most mistakes reported of one file: nobody reads more, and a hostile file could have 10⁵.
pub const MAX_ERRORS: usize = 100;

/// What some editors put before the first character.
const BYTE_ORDER_MARK: &[u8] = b"\xef\xbb\xbf";

/// Reads a text as a tree whose values know where they stand and who gave them.
///
/// # Errors
/// Everything that is wrong with the text, in the order it stands there: bytes that are no text, a text
/// that is not YAML or uses what the format has not (tags, merge keys, several documents), keys given
/// twice, numbers that are not finite, blocks too deep or values too many.
pub fn read_document(name: &str, bytes: &[u8], origin: Origin) -> Result<Node, Vec<SpecError>> {
    let source = source_text(name, bytes).map_err(|error| vec![error])?;
    match read_value(&source, 0, &KeyPath::default(), origin)? {
        Some(node) if node.value != Value::Null => Ok(node),
        _ => Err(vec![SpecError::Empty { at: top(&source, 0) }]),
    }
}

/// Reads what stands from byte `start` on as one value; `path` is where in a spec it belongs.
///
/// # Errors
/// As [`read_document`], but an empty text is `None`.
pub fn read_value(
    source: &Arc<SourceText>,
    start: usize,
    path: &KeyPath,
    origin: Origin,
) -> Result<Option<Node>, Vec<SpecError>> {
    let mut mistakes = Mistakes { source: Arc::clone(source), start, found: Vec::new() };
    let text = source.text.get(start..).unwrap_or_default();
    let heard = events::read(text, path, origin, &mut mistakes);
    let mut tree = heard.tree;
    if let Some(node) = tree.as_mut().filter(|_| heard.comparable) {
        second_reader::settle(node, text, path, &mut mistakes);
    }
    mistakes.into_result().map(|()| tree)
}

/// What was found wrong in a text, and at which byte.
pub(super) struct Mistakes {
    source: Arc<SourceText>,
    /// Where in the source the text begins that is read.
    start: usize,
    found: Vec<(usize, SpecError)>,
}

impl Mistakes {
    /// The location of bytes counted from the start of the text that is read.
    pub(super) fn location(&self, bytes: Range<usize>) -> Location {
        let bytes = self.start + bytes.start..self.start + bytes.end;
        Location { source: Arc::clone(&self.source), bytes }
    }

    /// Adds a mistake.
    pub(super) fn add(&mut self, location: Location, path: KeyPath, error: impl FnOnce(Place) -> SpecError) {
        if self.found.len() < MAX_ERRORS {
            self.found.push((location.bytes.start, error(Place { location, path })));
        }
    }

    fn into_result(mut self) -> Result<(), Vec<SpecError>> {
        if self.found.is_empty() {
            return Ok(());
        }
        self.found.sort_by_key(|(byte, _)| *byte);
        Err(self.found.into_iter().map(|(_, error)| error).collect())
    }
}

/// The text of a file, if its bytes are one and not too many.
fn source_text(name: &str, bytes: &[u8]) -> Result<Arc<SourceText>, SpecError> {
    let named = |text: &str| Arc::new(SourceText { name: name.to_owned(), text: text.to_owned() });
    if bytes.len() > MAX_BYTES {
        return Err(SpecError::TooLarge { at: top(&named(""), 0), bytes: bytes.len(), limit: MAX_BYTES });
    }
    let stripped = bytes.strip_prefix(BYTE_ORDER_MARK).unwrap_or(bytes);
    match std::str::from_utf8(stripped) {
        Ok(text) => Ok(named(text)),
        Err(error) => {
            let good = error.valid_up_to();
            let before = String::from_utf8_lossy(&stripped[..good]);
            let byte = bytes.len() - stripped.len() + good + 1; // counted from 1, as lines and columns are
            Err(SpecError::NotUtf8 { at: top(&named(&before), good), byte })
        }
    }
}

fn top(source: &Arc<SourceText>, byte: usize) -> Place {
    Place { location: Location { source: Arc::clone(source), bytes: byte..byte }, path: KeyPath::default() }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The tree in one line: numbers after `#`, texts in quotes, `-` for nothing, `!` after a bare key.
    fn drawn(node: &Node) -> String {
        let joined = |parts: Vec<String>| parts.join(", ");
        match &node.value {
            Value::Null => "-".to_owned(),
            Value::Flag(flag) => flag.to_string(),
            Value::Number { value, text } => format!("#{value}={text}"),
            Value::Text(text) => format!("{text:?}"),
            Value::List(items) => format!("[{}]", joined(items.iter().map(drawn).collect())),
            Value::Map(entries) => {
                let entry = |e: &super::super::node::Entry| {
                    format!("{}{}: {}", e.key, if e.bare { "!" } else { "" }, drawn(&e.node))
                };
                format!("{{{}}}", joined(entries.iter().map(entry).collect()))
            }
        }
    }

    fn read(text: &str) -> Result<Node, Vec<SpecError>> {
        read_document("plant.yaml", text.as_bytes(), Origin::File)
    }

    fn tree(text: &str) -> String {
        read(text).map_or_else(|errors| format!("{errors:?}"), |node| drawn(&node))
    }

    fn errors(text: &[u8]) -> Vec<SpecError> {
        read_document("plant.yaml", text, Origin::File).err().unwrap_or_default()
    }

    /// The variant of the only error.
    fn wrong(text: &str) -> String {
        let errors = errors(text.as_bytes());
        let names = errors.iter().map(|error| {
            let shown = format!("{error:?}");
            shown.split([' ', '(']).next().unwrap_or_default().to_owned()
        });
        names.collect::<Vec<_>>().join(" ")
    }

    /// The texts that the locations of all values cover.
    fn covered(node: &Node) -> Vec<String> {
        let own = node.location.text().to_owned();
        let below: Vec<String> = match &node.value {
            Value::List(items) => items.iter().flat_map(covered).collect(),
            Value::Map(entries) => entries.iter().flat_map(|entry| covered(&entry.node)).collect(),
            _ => Vec::new(),
        };
        std::iter::once(own).chain(below).collect()
    }

    const SPECS: [(&str, &str); 8] = [
        (
            "format: axirad/1\ntitle: Line 2, styrene in three zones   # invented\nduct: {shape: tube, inner_diameter: 26 mm}\n",
            r#"{format: "axirad/1", title: "Line 2, styrene in three zones", duct: {shape: "tube", inner_diameter: "26 mm"}}"#,
        ),
        (
            "walls:\n  oil:\n    layers:        # outwards\n      - {name: steel, thickness: 2 mm}\n      - name: film\n        coefficient: 900 W/(m2 K)\n",
            r#"{walls: {oil: {layers: [{name: "steel", thickness: "2 mm"}, {name: "film", coefficient: "900 W/(m2 K)"}]}}}"#,
        ),
        (
            "mixture: {viscosity: {a: [-13.04, 3.915,\n  0.623], b: [2013 K, 0 K], molar_mass_power: 0.18, confirmed: false}}",
            r#"{mixture: {viscosity: {a: [#-13.04=-13.04, #3.915=3.915, #0.623=0.623], b: ["2013 K", "0 K"], molar_mass_power: #0.18=0.18, confirmed: false}}}"#,
        ),
        (
            "sources: {hui: \"Hui and Hamielec (1972), J. Appl. Polym. Sci. 16, 749\", own: 'it''s measured'}\r\nflow: {}\r\n",
            r#"{sources: {hui: "Hui and Hamielec (1972), J. Appl. Polym. Sci. 16, 749", own: "it's measured"}, flow: {}}"#,
        ),
        (
            "note: >-\n  two lines\n  in one\n\nrate: \"k * c_alcohol / (1 + inhibition * c_water)\"\nsteps: |\n  first\n  second",
            r#"{note: "two lines in one", rate: "k * c_alcohol / (1 + inhibition * c_water)", steps: "first\nsecond"}"#,
        ),
        (
            "base: &law {value: 1.06 g/cm3, at: 200 degC}\nother: *law\nagain: [*law, &n 4, *n]\nlast:\n",
            r#"{base: {value: "1.06 g/cm3", at: "200 degC"}, other: {value: "1.06 g/cm3", at: "200 degC"}, again: [{value: "1.06 g/cm3", at: "200 degC"}, #4=4, #4=4], last: -}"#,
        ),
        (
            "points: {20 degC: 867 kg/m3, 60.5 degC: 829 kg/m3}\nnumbers: [1e-6, +5, 0x1F, 012, \"12\", 1_0, yes, TRUE, ~]\n",
            r#"{points: {20 degC: "867 kg/m3", 60.5 degC: "829 kg/m3"}, numbers: [#0.000001=1e-6, #5=+5, #31=0x1F, "012", "12", "1_0", "yes", true, -]}"#,
        ),
        (
            "propagation: {source: Hui and Hamielec (1972), J. Appl. Polym., 'x', at: , end}",
            r#"{propagation: {source: "Hui and Hamielec (1972)", J. Appl. Polym.!: -, x!: -, at: -, end!: -}}"#,
        ),
    ];

    #[test]
    fn specs_read_to_what_they_say() {
        for (text, expected) in SPECS {
            assert_eq!(tree(text), expected, "of {text}");
        }
    }

    #[test]
    fn serde_yaml_sees_the_same_values() {
        fn same(node: &Node, value: &serde_yaml::Value) -> bool {
            use serde_yaml::Value as Y;
            match (&node.value, value) {
                (Value::Null, Y::Null) => true,
                (Value::Flag(flag), Y::Bool(other)) => flag == other,
                (Value::Number { value, .. }, Y::Number(other)) => other.as_f64() == Some(*value),
                (Value::Text(text), Y::String(other)) => text == other,
                (Value::List(items), Y::Sequence(others)) => {
                    items.len() == others.len() && items.iter().zip(others).all(|(item, other)| same(item, other))
                }
                (Value::Map(entries), Y::Mapping(others)) => {
                    entries.len() == others.len()
                        && entries
                            .iter()
                            .zip(others)
                            .all(|(entry, (key, other))| key.as_str() == Some(&entry.key) && same(&entry.node, other))
                }
                _ => false,
            }
        }
        for (text, _) in SPECS {
            let node = read(text).expect("the specs above parse");
            let value = serde_yaml::from_str(text).expect("the second reader reads them too");
            assert!(same(&node, &value), "of {text}");
        }
    }

    #[test]
    fn locations_cover_exactly_what_was_typed() {
        let text = "a: 'x y'   # c\nb: {c: 12 mm,\n  d: [1]}\ne:\n  f: \"q\"\n  g: 2\nh:\n- 1\n- 2\ni: >-\n  long\n  text\n\nj: ü\n";
        let node = read(text).expect("it parses");
        let expected = [
            "a: 'x y'",
            "'x y'",
            "{c: 12 mm,\n  d: [1]}",
            "12 mm",
            "[1]",
            "1",
            "f: \"q\"",
            "\"q\"",
            "2",
            "1",
            "1",
            "2",
            "long\n  text",
            "ü",
        ];
        assert_eq!(covered(&node), expected);
    }

    #[test]
    fn a_byte_order_mark_is_no_part_of_the_text() {
        let node = read("\u{feff}a: 1\n").expect("editors put it there");
        assert_eq!((drawn(&node).as_str(), node.location.bytes.start), ("{a: #1=1}", 0));
    }

    #[test]
    fn what_is_no_spec_is_refused_by_its_own_name() {
        let too_wide = "- 1\n".repeat(MAX_VALUES + 1);
        let bomb = (1..20).fold("a0: &a0 [x, x, x, x, x, x, x, x, x]\n".to_owned(), |text, i| {
            format!("{text}a{i}: &a{i} [{}]\n", vec![format!("*a{}", i - 1); 9].join(", "))
        });
        let long_bomb = format!("a: &a {}\nb: [{}]", "x".repeat(1 << 20), ["*a"; 9000].join(","));
        let deep_aliases =
            (1..40).fold("a0: &a0 [x]\n".to_owned(), |text, i| format!("{text}a{i}: &a{i} [*a{}]\n", i - 1));
        let blocks = (0..2000).fold(String::new(), |text, i| format!("{text}{}a:\n", " ".repeat(i)));
        let cases: [(&str, &str); 37] = [
            ("", "Empty"),
            ("# nothing\n", "Empty"),
            ("---\n", "Empty"),
            ("~", "Empty"),
            (&"a: 1\n".repeat(1 << 20), "TooLarge"),
            (&too_wide, "TooMany"),
            (&bomb, "TooMany"),
            (&long_bomb, "TooMany"),
            (&deep_aliases, "TooDeep"),
            (&blocks, "TooDeep"),
            (&"[".repeat(100_000), "TooDeep"),
            (&"{a: ".repeat(33), "TooDeep"),
            ("a: 1\n---\nb: 2\n", "SecondDocument"),
            ("a: 1\n...\nb: 2\n", "SecondDocument"),
            ("a: !tag 1", "Tag"),
            ("a: !x!y 1", "Tag"),
            ("!!map {a: 1}", "Tag"),
            ("<<: {a: 1}", "MergeKey"),
            ("[a]: 1", "KeyNotText"),
            ("{a: 1}: 1", "KeyNotText"),
            (": 1", "KeyNotText"),
            ("&k a: 1\n*k : 2", "KeyNotText"),
            ("a: 1\na: 2", "DuplicateKey"),
            ("a: .nan", "NotFinite"),
            ("a: -.inf", "NotFinite"),
            ("a: 1e999", "NotFinite"),
            ("{?key: 1}", "Ambiguous"),
            ("a: &a [*a]", "NotYaml"),
            ("a: *b", "NotYaml"),
            ("a: {b: 1", "NotYaml"),
            ("a: [1, 2}", "NotYaml"),
            ("a: 'b", "NotYaml"),
            ("{a:}", "NotYaml"),
            ("%YAML 1.2\n---\na: 1", "NotYaml"),
            ("a: x\u{1}", "NotYaml"),
            ("a: b\n\u{feff}c: d", "NotYaml"),
            ("\ta: 1", "NotYaml"),
        ];
        for (text, variant) in cases {
            assert_eq!(wrong(text), variant, "of {}", &text[..text.len().min(60)]);
        }
        assert!(matches!(errors(b"a: \xff").as_slice(), [SpecError::NotUtf8 { byte: 4, .. }]));
        assert_eq!(tree("a: '1e999'"), r#"{a: "1e999"}"#);
    }

    #[test]
    fn all_that_can_be_read_past_is_reported_at_once_in_order() {
        let text = "a: .inf\nb: {c: 1, c: 2, <<: 3}\na: 1e400\nsections:\n- {name: z, wall: 1, wall: 2}\nx: [1\n";
        let errors = errors(text.as_bytes());
        let places: Vec<String> = errors.iter().map(|error| error.to_string()).collect();
        assert_eq!(errors.len(), 6, "{places:?}");
        let twice = |error: &SpecError| match error {
            SpecError::DuplicateKey { at, first, .. } => Some((at.path.to_string(), first.line(), first.column())),
            _ => None,
        };
        let expected = [("b.c".to_owned(), 2, 5), ("a".to_owned(), 1, 1), ("sections.z.wall".to_owned(), 5, 13)];
        assert_eq!(errors.iter().filter_map(twice).collect::<Vec<_>>(), expected);
        assert!(matches!(errors.last(), Some(SpecError::NotYaml { .. })));
    }

    #[test]
    fn an_alias_that_is_too_much_is_shown_where_it_stands() {
        let text = format!("a: &a [{}]\nb: [*a, *a]\n", vec!["1"; 40_000].join(","));
        let [SpecError::TooMany { at, .. }] = &errors(text.as_bytes())[..] else { panic!("one error") };
        assert_eq!((at.location.line(), at.path.to_string().as_str()), (2, "b.1.19995"));
    }

    #[test]
    fn a_value_read_from_the_middle_keeps_its_place() {
        let source = Arc::new(SourceText { name: "--set".to_owned(), text: "a.b=[1 m, .nan]".to_owned() });
        let errors = read_value(&source, 4, &KeyPath(vec!["a.b".to_owned()]), Origin::Set).expect_err("not finite");
        let [SpecError::NotFinite { at, .. }] = &errors[..] else { panic!("one error") };
        assert_eq!((at.location.bytes.clone(), at.path.to_string().as_str()), (10..14, "a.b.1"));
    }
}
