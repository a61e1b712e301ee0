//! A spec and the parts it includes, joined into one tree.
//!
//! Blocks are joined key by key, `reactions` name by name; any other list comes whole from one file. A
//! value given twice is a mistake: a wanted difference stands under `override`.

use std::collections::{HashMap, HashSet};

use super::document::read_document;
use super::error::SpecError;
use super::node::{Entry, Node, Origin, Value};
use super::place::{KeyPath, Location, Place};

/// Most levels of parts that include parts.
const MAX_NESTED: usize = 16;
/// Most files that make one spec.
const MAX_FILES: usize = 64;

/// Keys that say something of a file, not of the reactor; those of a part end with it.
const ABOUT_THE_FILE: [&str; 4] = ["format", "title", "note", "include"];

/// What a file is, by its first key.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum FileFormat {
    /// `axirad/1`
    Spec,
    /// `axirad-part/1`
    Part,
    /// `axirad-study/1`
    Study,
}

impl FileFormat {
    /// The value of `format`.
    #[must_use]
    pub fn word(self) -> &'static str {
        match self {
            Self::Spec => "axirad/1",
            Self::Part => "axirad-part/1",
            Self::Study => "axirad-study/1",
        }
    }

    const ALL: [Self; 3] = [Self::Spec, Self::Part, Self::Study];
}

/// A file with all it includes.
#[derive(Debug)]
pub struct Loaded {
    /// What the file is.
    pub format: FileFormat,
    /// Its keys with those of its parts. What it says of itself comes first, then the parts' blocks in the
    /// order they are included, then what the file adds.
    pub root: Node,
    /// The files that were read, the file itself first, named as their places name them.
    pub files: Vec<String>,
}

/// Reads a file by name; the error is the reason, in the words of the system.
pub type ReadFile<'a> = &'a mut dyn FnMut(&str) -> Result<Vec<u8>, String>;

/// Joins a file, whose bytes the caller has read, with the parts it includes, which `read` fetches.
///
/// `name` is as the user typed it; `-` is standard input, whose parts lie relative to the current folder.
/// The first of `accepts` is what a message proposes. A study includes nothing.
///
/// # Errors
/// Everything that is wrong with the texts of all files, with their `format` and `include`, and what is
/// given in two of them.
pub fn load(name: &str, bytes: &[u8], read: ReadFile<'_>, accepts: &[FileFormat]) -> Result<Loaded, Vec<SpecError>> {
    let shown = if name == "-" { "standard input" } else { name };
    let root = read_document(shown, bytes, Origin::File)?;
    let mut errors = Vec::new();
    let format = format_of(&root, accepts, &mut errors).ok_or_else(|| std::mem::take(&mut errors))?;
    let mut joiner = Joiner {
        read,
        files: vec![shown.to_owned()],
        seen: HashSet::from([plain(name)]),
        open: vec![plain(name)],
        errors,
    };
    let root = match format {
        FileFormat::Study => root,
        FileFormat::Spec | FileFormat::Part => joiner.with_parts(root, folder(name), format),
    };
    if joiner.errors.is_empty() { Ok(Loaded { format, root, files: joiner.files }) } else { Err(joiner.errors) }
}

/// What a file says it is, if that can be read and is accepted.
fn format_of(root: &Node, accepts: &[FileFormat], errors: &mut Vec<SpecError>) -> Option<FileFormat> {
    let wanted = accepts.first().map_or("axirad/1", |format| format.word());
    let entries = root.entries().unwrap_or_default();
    let Some((position, entry)) = entries.iter().enumerate().find(|(_, entry)| entry.key == "format") else {
        let location = entries.first().map_or(&root.location, |entry| &entry.key_location).clone();
        errors.push(SpecError::NoFormat { at: Place { location, path: KeyPath::default() }, wanted });
        return None;
    };
    let path = KeyPath(vec!["format".to_owned()]);
    let at = Place { location: entry.node.location.clone(), path: path.clone() };
    let found = entry.node.text().unwrap_or_default();
    match FileFormat::ALL.into_iter().find(|format| format.word() == found) {
        Some(format) if accepts.contains(&format) => {
            if position > 0 {
                // It is there, but not where a reader of the file and other tools look for it.
                let at = Place { location: entry.key_location.clone(), path };
                errors.push(SpecError::NoFormat { at, wanted });
            }
            Some(format)
        }
        None if is_newer(found) => {
            errors.push(SpecError::NewerFormat { at, found: found.to_owned() });
            None
        }
        _ => {
            errors.push(SpecError::WrongFormat { at, found: found.to_owned(), wanted });
            None
        }
    }
}

/// Whether a format is one of ours with a larger number.
fn is_newer(found: &str) -> bool {
    let Some((kind, number)) = found.rsplit_once('/') else { return false };
    let ours = FileFormat::ALL.into_iter().any(|format| format.word().strip_suffix("/1") == Some(kind));
    ours && number.parse::<u32>().is_ok_and(|number| number > 1)
}

/// The files on the way to one tree.
struct Joiner<'a> {
    read: ReadFile<'a>,
    files: Vec<String>,
    seen: HashSet<String>,
    /// The files whose parts are being read, the main one first.
    open: Vec<String>,
    errors: Vec<SpecError>,
}

impl Joiner<'_> {
    /// A file's tree with those of its parts. Recursion ends with [`MAX_NESTED`].
    fn with_parts(&mut self, root: Node, folder: &str, format: FileFormat) -> Node {
        let Node { value, location, origin } = root;
        let Value::Map(entries) = value else { return Node { value, location, origin } };
        let main = self.open.len() == 1;
        let (about, own): (Vec<Entry>, Vec<Entry>) =
            entries.into_iter().partition(|entry| ABOUT_THE_FILE.contains(&entry.key.as_str()));
        let own = self.without_override(own, format);
        let mut parts = Vec::new();
        if let Some(include) = about.iter().find(|entry| entry.key == "include") {
            self.include(&include.node, folder, &mut parts);
        }
        let path = KeyPath::default();
        let mut joined = if main { about } else { Vec::new() };
        for part in parts.into_iter().chain([own]) {
            join(&mut joined, part, &path, &mut self.errors);
        }
        Node { value: Value::Map(joined), location, origin }
    }

    /// Only the spec itself may override: its reader sees all differences in one place.
    fn without_override(&mut self, own: Vec<Entry>, format: FileFormat) -> Vec<Entry> {
        if format == FileFormat::Spec {
            return own;
        }
        let (refused, kept): (Vec<Entry>, Vec<Entry>) = own.into_iter().partition(|entry| entry.key == "override");
        for Entry { key, key_location: location, .. } in refused {
            let at = Place { location, path: KeyPath(vec![key.clone()]) };
            let with = "a part: differences stand in the spec that includes it".to_owned();
            self.errors.push(SpecError::DoesNotGoWith { at, key, with });
        }
        kept
    }

    /// Reads the files of a list.
    fn include(&mut self, list: &Node, folder: &str, parts: &mut Vec<Vec<Entry>>) {
        let path = KeyPath(vec!["include".to_owned()]);
        let Some(items) = list.items() else {
            let (at, key) = (Place { location: list.location.clone(), path }, "include".to_owned());
            self.errors.push(SpecError::WrongShape { at, key, wanted: "a list of files", found: list.shape() });
            return;
        };
        for (position, item) in items.iter().enumerate() {
            let at = Place { location: item.location.clone(), path: path.child(&position.to_string()) };
            match item.text() {
                Some(text) => parts.extend(self.part(&join_names(folder, text), at)),
                None => {
                    let (key, wanted) = ("include".to_owned(), "the name of a file");
                    self.errors.push(SpecError::WrongShape { at, key, wanted, found: item.shape() });
                }
            }
        }
    }

    /// Reads one part with its own parts, unless it was read before.
    fn part(&mut self, name: &str, at: Place) -> Option<Vec<Entry>> {
        let file = name.to_owned();
        if self.open.iter().any(|open| open == name) {
            self.errors.push(SpecError::IncludeCircle { at, file });
            return None;
        }
        if !self.seen.insert(file.clone()) {
            return None;
        }
        let bytes = match () {
            () if self.open.len() > MAX_NESTED => Err(format!("parts are nested deeper than {MAX_NESTED}")),
            () if self.files.len() >= MAX_FILES => Err(format!("a spec may have {MAX_FILES} files")),
            () => (self.read)(name),
        };
        let bytes = bytes.map_err(|reason| self.errors.push(SpecError::NoPart { at, file, reason })).ok()?;
        self.files.push(name.to_owned());
        let root = read_document(name, &bytes, Origin::File).map_err(|errors| self.errors.extend(errors)).ok()?;
        let format = format_of(&root, &[FileFormat::Part], &mut self.errors)?;
        self.open.push(name.to_owned());
        let joined = self.with_parts(root, folder(name), format);
        self.open.pop();
        match joined.value {
            Value::Map(entries) => Some(entries),
            _ => None,
        }
    }
}

/// Adds the keys of a later file to those of earlier ones.
fn join(earlier: &mut Vec<Entry>, later: Vec<Entry>, path: &KeyPath, errors: &mut Vec<SpecError>) {
    let positions: HashMap<String, usize> =
        earlier.iter().enumerate().map(|(position, entry)| (entry.key.clone(), position)).collect();
    for entry in later {
        let known = positions.get(&entry.key).and_then(|position| earlier.get_mut(*position));
        match known {
            None => earlier.push(entry),
            Some(known) => join_entry(known, entry, path, errors),
        }
    }
}

/// Joins two values of one key. As deep as a document may be.
fn join_entry(known: &mut Entry, entry: Entry, path: &KeyPath, errors: &mut Vec<SpecError>) {
    let path = path.child(&entry.key);
    let Entry { key_location: at, node, bare, .. } = entry;
    match (&mut known.node.value, node.value) {
        (_, Value::Null) if !bare => {} // a key without anything under it gives nothing
        (Value::Null, value) if !known.bare => {
            known.node = Node { value, ..node };
            known.key_location = at;
        }
        (Value::Map(earlier), Value::Map(later)) => join(earlier, later, &path, errors),
        (Value::List(earlier), Value::List(later)) if path.0 == ["reactions"] => {
            join_reactions(earlier, later, &path, errors);
        }
        _ => given_twice(at, path, &known.key_location, errors),
    }
}

/// Joins reactions by name; those without one are kept for the reader to refuse.
fn join_reactions(earlier: &mut Vec<Node>, later: Vec<Node>, path: &KeyPath, errors: &mut Vec<SpecError>) {
    let mut positions = HashMap::new();
    for (position, item) in earlier.iter().enumerate() {
        if let (Some(name), true) = (item.get("name").and_then(Node::text), item.entries().is_some()) {
            positions.entry(name.to_owned()).or_insert(position);
        }
    }
    for mut item in later {
        let name = item.get("name").and_then(Node::text).map(str::to_owned);
        let known = name.as_ref().and_then(|name| positions.get(name)).and_then(|position| earlier.get_mut(*position));
        match (known.map(|known| &mut known.value), &mut item.value) {
            (Some(Value::Map(known)), Value::Map(entries)) => {
                let mut entries = std::mem::take(entries);
                entries.retain(|entry| entry.key != "name");
                join(known, entries, &path.child(&name.unwrap_or_default()), errors);
            }
            _ => earlier.push(item),
        }
    }
}

fn given_twice(location: Location, path: KeyPath, first: &Location, errors: &mut Vec<SpecError>) {
    let key = path.to_string();
    errors.push(SpecError::GivenTwice { at: Place { location, path }, key, first: first.clone() });
}

/// The folder of a file, with the slash at its end; empty for the current one.
fn folder(name: &str) -> &str {
    let is_slash = |c: char| c == '/' || (cfg!(windows) && c == '\\');
    name.rfind(is_slash).map_or("", |slash| &name[..=slash])
}

/// The name of a part as seen from where the command runs.
fn join_names(folder: &str, part: &str) -> String {
    let part = part.replace('\\', "/"); // a spec typed on one system is read on all
    let absolute = part.starts_with('/') || part.get(1..3) == Some(":/");
    if absolute { plain(&part) } else { plain(&format!("{folder}{part}")) }
}

/// A name without steps that lead nowhere, so that one file has one name.
fn plain(name: &str) -> String {
    let name = if cfg!(windows) { name.replace('\\', "/") } else { name.to_owned() };
    let mut steps: Vec<&str> = Vec::new();
    for (position, step) in name.split('/').enumerate() {
        match (step, steps.last()) {
            ("." | "", _) if position > 0 => {}
            (".", _) => {}
            ("..", Some(last)) if !matches!(*last, ".." | "") => {
                steps.pop();
            }
            _ => steps.push(step),
        }
    }
    steps.join("/")
}

#[cfg(test)]
mod tests {
    use super::*;
    use FileFormat::{Part, Spec, Study};

    fn loaded(name: &str, text: &str, files: &[(&str, &str)]) -> Result<Loaded, Vec<SpecError>> {
        let mut read = |wanted: &str| {
            let file = files.iter().find(|(name, _)| *name == wanted);
            file.map(|(_, text)| text.as_bytes().to_vec()).ok_or_else(|| "no such file".to_owned())
        };
        load(name, text.as_bytes(), &mut read, &[Spec, Part, Study])
    }

    fn messages(name: &str, text: &str, files: &[(&str, &str)]) -> Vec<String> {
        let errors = loaded(name, text, files).err().unwrap_or_default();
        errors.iter().map(ToString::to_string).collect()
    }

    fn keys(node: Option<&Node>) -> Vec<&str> {
        node.and_then(Node::entries).unwrap_or_default().iter().map(|entry| entry.key.as_str()).collect()
    }

    const A: (&str, &str) = (
        "plants/materials/a.yaml",
        "format: axirad-part/1\ntitle: A\ninclude: [../b.yaml]\nspecies: {styrene: {density: 1 g/cm3}}\nreactions:\n- {name: first, heat: 1 J/mol}\n- {name: second}\n",
    );
    const B: (&str, &str) = ("plants/b.yaml", "format: axirad-part/1\nsources: {x: y}\nmixture: {density: 2 g/cm3}\n");

    #[test]
    fn blocks_are_joined_key_by_key_and_reactions_name_by_name() {
        let text = "format: axirad/1\ntitle: plant\ninclude: [materials/a.yaml, b.yaml]\nspecies: {toluene: {formula: C7H8}, styrene: {formula: C8H8}}\nreactions: [{name: third}, {name: first, orders: {styrene: 1}}]\n";
        let Loaded { format, root, files } = loaded("plants/line.yaml", text, &[A, B]).expect("the parts fit");
        assert_eq!((format, files), (Spec, vec!["plants/line.yaml".to_owned(), A.0.to_owned(), B.0.to_owned()]));
        let top = ["format", "title", "include", "sources", "mixture", "species", "reactions"];
        assert_eq!(keys(Some(&root)), top);
        assert_eq!(root.get("title").and_then(Node::text), Some("plant"));
        assert_eq!(keys(root.get("species").and_then(|species| species.get("styrene"))), ["density", "formula"]);
        let reactions = root.get("reactions").and_then(Node::items).expect("a list");
        let names: Vec<String> = reactions.iter().enumerate().map(|(at, item)| item.item_step(at)).collect();
        assert_eq!(names, ["first", "second", "third"]);
        assert_eq!(keys(reactions.first()), ["name", "heat", "orders"]);
        let density = root.get("mixture").and_then(|mixture| mixture.get("density")).expect("from the part");
        assert_eq!(density.location.source.name, B.0);
    }

    #[test]
    fn what_is_given_twice_shows_both_places() {
        let text = "format: axirad/1\ninclude: [materials/a.yaml]\nspecies: {styrene: {density: 3 g/cm3}}\nreactions: [{name: first, heat: 2 J/mol}]\n";
        let errors = loaded("plants/line.yaml", text, &[A, B]).expect_err("two values are given twice");
        let shown = errors.iter().map(|error| match error {
            SpecError::GivenTwice { at, key, first } => (
                key.as_str(),
                at.location.source.name.as_str(),
                at.location.line(),
                first.source.name.as_str(),
                first.line(),
            ),
            other => panic!("{other}"),
        });
        let expected = [
            ("species.styrene.density", "plants/line.yaml", 3, A.0, 4),
            ("reactions.first.heat", "plants/line.yaml", 4, A.0, 6),
        ];
        assert_eq!(shown.collect::<Vec<_>>(), expected);
    }

    #[test]
    fn lists_other_than_reactions_come_whole_from_one_file() {
        let part = ("p.yaml", "format: axirad-part/1\nsections: [{name: a}]\nwalls:\n");
        let text = "format: axirad/1\ninclude: [p.yaml]\nsections: [{name: b}]\nwalls: {x: {}}\n";
        assert_eq!(messages("-", text, &[part]), ["`sections` is given twice, in two files"]);
        let text = "format: axirad/1\ninclude: [./p.yaml]\nwalls: {x: {}}\n";
        let root = loaded("-", text, &[part]).expect("an empty block gives nothing").root;
        assert_eq!(keys(root.get("walls")), ["x"]);
    }

    #[test]
    fn circles_and_missing_parts_are_shown_in_the_list() {
        let files = [
            ("p.yaml", "format: axirad-part/1\ninclude: [q.yaml]"),
            ("q.yaml", "format: axirad-part/1\ninclude: [p.yaml, none.yaml, s.yaml]"),
            ("s.yaml", "format: axirad/1"),
            ("o.yaml", "format: axirad-part/1\noverride: {a: 1}"),
        ];
        let text = "format: axirad/1\ninclude: [p.yaml, line.yaml, [x], o.yaml]\n";
        let expected = [
            "the part `p.yaml` includes itself",
            "the part `none.yaml` cannot be read: no such file",
            "`axirad/1` is not a format this file can have",
            "the part `line.yaml` includes itself",
            "`include` needs the name of a file, but a list stands here",
            "`override` does not go with a part: differences stand in the spec that includes it",
        ];
        assert_eq!(messages("line.yaml", text, &files), expected);
    }

    #[test]
    fn endless_parts_have_an_end() {
        let mut read = |name: &str| {
            let number: usize = name.trim_end_matches(".yaml").parse().map_err(|_| "no number".to_owned())?;
            Ok(format!("format: axirad-part/1\ninclude: [{}.yaml]", number + 1).into_bytes())
        };
        let errors = load("line.yaml", b"format: axirad/1\ninclude: [1.yaml]", &mut read, &[Spec]).err();
        assert!(matches!(errors.as_deref(), Some([SpecError::NoPart { .. }])));
    }

    #[test]
    fn the_format_is_checked_before_all_else() {
        for (text, variant) in [
            ("duct: {}", "NoFormat"),
            ("just a text", "NoFormat"),
            ("title: x\nformat: axirad/1", "NoFormat"),
            ("format: axirad/2", "NewerFormat"),
            ("format: axirad-part/7", "NewerFormat"),
            ("format: axirad/0", "WrongFormat"),
            ("format: other/3", "WrongFormat"),
            ("format: [axirad/1]", "WrongFormat"),
        ] {
            let errors = loaded("line.yaml", text, &[]).expect_err("no spec");
            assert!(format!("{errors:?}").starts_with(&format!("[{variant} ")), "of {text}: {errors:?}");
        }
        let formats = ["format: axirad-part/1", "format: axirad-study/1\ninclude: 3"];
        let found = formats.map(|text| loaded("x.yaml", text, &[]).map(|loaded| loaded.format));
        assert_eq!(found, [Ok(Part), Ok(Study)]);
        let error = load("x.yaml", b"format: axirad-study/1", &mut |_| Err(String::new()), &[Spec]);
        assert!(matches!(error.err().as_deref(), Some([SpecError::WrongFormat { wanted: "axirad/1", .. }])));
    }

    #[test]
    fn names_of_parts_are_plain_paths_from_where_the_command_runs() {
        for (main, part, name) in [
            ("line.yaml", "materials/a.yaml", "materials/a.yaml"),
            ("./plants/line.yaml", "./a.yaml", "plants/a.yaml"),
            ("plants/line.yaml", "../../b.yaml", "../b.yaml"),
            ("../plants/line.yaml", "materials\\a.yaml", "../plants/materials/a.yaml"),
            ("/plants/line.yaml", "../a.yaml", "/a.yaml"),
            ("plants/line.yaml", "/shared//a.yaml", "/shared/a.yaml"),
            ("-", "a.yaml", "a.yaml"),
        ] {
            assert_eq!(join_names(folder(main), part), name);
        }
    }
}
