//! Setting values by path: `--set`, `override` and studies.
//!
//! What is set replaces the whole value; keys that were absent are added, and whether the format has them
//! the reader judges. `paths.rs` says what a path is.

use std::sync::Arc;

use super::alternatives::make_room;
use super::document::{MAX_BYTES, MAX_DEPTH, read_value};
use super::error::SpecError;
use super::like;
use super::node::{Entry, Node, Origin, Value};
use super::paths::{Goal, Search, steps_of, trace};
pub use super::paths::{KNOWN_BLOCKS, find};
use super::place::{KeyPath, Location, Place, SourceText};

/// Keys that have had their effect when values are set: setting them would change nothing.
const SPENT: [&str; 3] = ["format", "include", "override"];

/// Sets the value at a path; `at` is where the path was written.
///
/// Keys that exclude the one set (`a | b` in the format) are removed from its block.
///
/// # Errors
/// [`SpecError::NoSuchPath`] if a list has no such item, the first step is no block, a name is defined
/// nowhere, or a step would go into a text; [`SpecError::DoesNotGoWith`] for what no path can set;
/// [`SpecError::TooDeep`].
pub fn set(root: &mut Node, path: &str, value: Node, at: &Place) -> Result<(), SpecError> {
    let head = path.split('.').next().unwrap_or_default();
    if SPENT.contains(&head) {
        let with = "a path: it has had its effect before values are set".to_owned();
        return Err(SpecError::DoesNotGoWith { at: at.clone(), key: head.to_owned(), with });
    }
    if path.split('.').any(|step| step.trim().is_empty()) {
        return Err(SpecError::NoSuchPath { at: at.clone(), path: path.to_owned(), nearest: None });
    }
    let mut trail = Vec::new();
    if trace(root, path, &mut trail).is_some() {
        replace(root, &trail, value, at);
        return Ok(());
    }
    let goal = loop {
        let search = Search { root, path, at };
        let (goal, node) = search.goal()?;
        let Some(entry) = like::inherited(root, &goal.path, &goal.steps.join(".")) else {
            search.judge(&goal, node)?;
            break goal;
        };
        // A change deep inside what `like` copies must not lose what stands beside it: it is copied now.
        if !put(root, &goal, entry) {
            break goal;
        }
        trail.clear();
        if trace(root, path, &mut trail).is_some() {
            replace(root, &trail, value, at);
            return Ok(());
        }
    };
    if goal.trail.len() + goal.steps.len() > MAX_DEPTH {
        return Err(SpecError::TooDeep { at: at.clone(), limit: MAX_DEPTH });
    }
    add(root, &goal, value, at);
    Ok(())
}

/// Sets a value from the text `PATH=VALUE`, where VALUE is YAML.
///
/// # Errors
/// As [`set`], and what is wrong with VALUE; its places lie in the argument.
pub fn set_from_text(root: &mut Node, argument: &str) -> Result<(), SpecError> {
    let source = Arc::new(SourceText { name: "--set".to_owned(), text: argument.to_owned() });
    let location = |bytes| Location { source: Arc::clone(&source), bytes };
    let place = |bytes| Place { location: location(bytes), path: KeyPath::default() };
    if argument.len() > MAX_BYTES {
        return Err(SpecError::TooLarge { at: place(0..0), bytes: argument.len(), limit: MAX_BYTES });
    }
    let Some(equals) = argument.find('=') else {
        let reason = "a path, `=` and a value are needed".to_owned();
        return Err(SpecError::NotYaml { at: place(0..argument.len()), reason });
    };
    let path = argument[..equals].trim();
    let start = equals - argument[..equals].trim_start().len();
    let at = Place { location: location(start..start + path.len()), path: KeyPath(vec![path.to_owned()]) };
    match read_value(&source, equals + 1, &at.path, Origin::Set) {
        Ok(Some(value)) => set(root, path, value, &at),
        Ok(None) => {
            let reason = "a value is missing after `=`".to_owned();
            Err(SpecError::NotYaml { at: place(equals..equals + 1), reason })
        }
        Err(errors) => Err(errors.into_iter().next().unwrap_or(SpecError::Empty { at })),
    }
}

/// Takes the block `override` out of the tree and sets its values, path by path.
#[must_use]
pub fn apply_override(root: &mut Node) -> Vec<SpecError> {
    let Value::Map(entries) = &mut root.value else { return Vec::new() };
    let Some(position) = entries.iter().position(|entry| entry.key == "override") else { return Vec::new() };
    let Entry { node, .. } = entries.remove(position);
    let path = KeyPath(vec!["override".to_owned()]);
    let found = node.shape();
    match node.value {
        Value::Null => Vec::new(),
        Value::Map(changes) => changes
            .into_iter()
            .filter_map(|Entry { key, key_location, mut node, .. }| {
                let at = Place { location: key_location, path: path.child(&key) };
                given_by(&mut node, Origin::Override);
                set(root, &key, node, &at).err()
            })
            .collect(),
        _ => {
            let at = Place { location: node.location, path };
            let (key, wanted) = ("override".to_owned(), "a block of paths with values");
            vec![SpecError::WrongShape { at, key, wanted, found }]
        }
    }
}

/// Marks a value and all below it as given by `origin`.
pub fn given_by(node: &mut Node, origin: Origin) {
    node.origin = origin;
    match &mut node.value {
        Value::List(items) => items.iter_mut().for_each(|item| given_by(item, origin)),
        Value::Map(entries) => entries.iter_mut().for_each(|entry| given_by(&mut entry.node, origin)),
        Value::Null | Value::Flag(_) | Value::Number { .. } | Value::Text(_) => {}
    }
}

/// Puts an entry into the block that a path leads to; false if there is none.
fn put(root: &mut Node, goal: &Goal, entry: Entry) -> bool {
    let Some(Value::Map(entries)) = follow(root, &goal.trail).map(|node| &mut node.value) else { return false };
    make_room(entries, &goal.path, &entry.key);
    entries.push(entry);
    true
}

fn follow<'a>(root: &'a mut Node, trail: &[usize]) -> Option<&'a mut Node> {
    let mut node = root;
    for position in trail {
        node = match &mut node.value {
            Value::Map(entries) => &mut entries.get_mut(*position)?.node,
            Value::List(items) => items.get_mut(*position)?,
            Value::Null | Value::Flag(_) | Value::Number { .. } | Value::Text(_) => return None,
        };
    }
    Some(node)
}

/// Replaces the value at the end of a trail.
fn replace(root: &mut Node, trail: &[usize], value: Node, at: &Place) {
    let Some((last, before)) = trail.split_last() else {
        return; // the path has a step, and the top is a map: a trail is never empty
    };
    let path = steps_of(root, before);
    match follow(root, before).map(|node| &mut node.value) {
        Some(Value::Map(entries)) => {
            let Some(entry) = entries.get_mut(*last) else { return };
            entry.node = value;
            entry.key_location = at.location.clone();
            entry.bare = false;
            let key = entry.key.clone();
            make_room(entries, &path, &key);
        }
        Some(Value::List(items)) => {
            let Some(item) = items.get_mut(*last) else { return };
            let before = std::mem::replace(item, value);
            keep_name(before, item);
        }
        _ => {}
    }
}

/// An item that was reached by its name keeps it, unless the new one brings its own.
fn keep_name(before: Node, item: &mut Node) {
    if let (Value::Map(old), Value::Map(new)) = (before.value, &mut item.value)
        && !new.iter().any(|entry| entry.key == "name")
    {
        new.splice(0..0, old.into_iter().filter(|entry| entry.key == "name"));
    }
}

/// Adds new keys with a value at their end.
fn add(root: &mut Node, goal: &Goal, value: Node, at: &Place) {
    let Some((first, deeper)) = goal.steps.split_first() else { return };
    let (location, origin) = (at.location.clone(), value.origin);
    let entry = |key: &str, node| Entry { key: key.to_owned(), key_location: location.clone(), node, bare: false };
    let value = deeper.iter().rev().fold(value, |inner, key| Node {
        value: Value::Map(vec![entry(key, inner)]),
        location: location.clone(),
        origin,
    });
    let Some(node) = follow(root, &goal.trail) else { return };
    if !matches!(node.value, Value::Map(_)) {
        let short = std::mem::replace(&mut node.value, Value::Null);
        let mut entries = Vec::new();
        if short != Value::Null {
            let scalar = Node { value: short, location: node.location.clone(), origin: node.origin };
            let key_location = node.location.clone();
            entries.push(Entry { key: "value".to_owned(), key_location, node: scalar, bare: false });
        }
        node.value = Value::Map(entries);
    }
    if let Value::Map(entries) = &mut node.value {
        make_room(entries, &goal.path, first);
        entries.push(entry(first, value));
    }
}

#[cfg(test)]
mod tests {
    use super::super::document::read_document;
    use super::*;

    const SPEC: &str = "\
format: axirad/1
feed: {mass_flow: 1 kg/h, temperature: 95 degC, mass_fractions: {styrene: rest}}
walls:
  oil: {kind: jacket, coolant: cold, layers: [{name: steel, thickness: 2 mm, conductivity: 16 W/(m K)}]}
  plain: {like: oil, note: x}
coolants: {cold: {temperature: 128 degC}}
sections:
- {name: zone_1, length: 4 m, wall: oil}
- {name: run_out, length: 1 m, wall: {kind: jacket, coefficient: 250 W/(m2 K), coolant: {temperature: 90 degC}}}
- {name: end, length: 1 m, wall: {like: plain}}
species:
  toluene: {density: {kind: table, points: {20 degC: 867 kg/m3, 60.5 degC: 829 kg/m3}}}
  aibn: {like: toluene}
mixture: {viscosity: {kind: polymer_solution, a: [-13.04, 3.915]}}
polymerization: {propagation: 3 m3/(mol s), transfer: {toluene: {prefactor: 1 m3/(mol s), activation_temperature: 300 K}}}
accept: {outlet.conversion: {at_least: 0.5}}
";

    fn spec() -> Node {
        read_document("plant.yaml", SPEC.as_bytes(), Origin::File).expect("it parses")
    }

    /// The spec after these settings.
    fn after(settings: &[&str]) -> Node {
        let mut root = spec();
        for setting in settings {
            set_from_text(&mut root, setting).unwrap_or_else(|error| panic!("{setting}: {error}"));
        }
        root
    }

    fn value(root: &Node, path: &str) -> String {
        find(root, path).and_then(Node::text).unwrap_or("absent").to_owned()
    }

    fn keys(root: &Node, path: &str) -> Vec<String> {
        let entries = find(root, path).and_then(Node::entries).unwrap_or_default();
        entries.iter().map(|entry| entry.key.clone()).collect()
    }

    /// The proposal for a path that leads nowhere.
    fn proposal(setting: &str) -> Option<String> {
        match set_from_text(&mut spec(), setting) {
            Err(SpecError::NoSuchPath { nearest, .. }) => nearest,
            other => panic!("{setting}: {other:?}"),
        }
    }

    #[test]
    fn a_set_value_replaces_what_stood_there() {
        for (path, text) in [
            ("feed.temperature", "70 degC"),
            ("sections.run_out.wall.coolant.temperature", "80 degC"),
            ("mixture.viscosity.a.1", "4.2"),
            ("species.toluene.density.points.20 degC", "870 kg/m3"),
            ("species.toluene.density.points.60.5 degC", "830 kg/m3"),
            ("accept.outlet.conversion.at_least", "0.9"),
            ("sections.0.length", "5 m"),
            ("walls.oil.layers.steel.thickness", "3 mm"),
            ("polymerization.propagation.value", "4 m3/(mol s)"),
        ] {
            let root = after(&[&format!("{path}={text}")]);
            assert_eq!(value(&root, path), text, "at {path}");
            assert_eq!(find(&root, path).map(|node| node.origin), Some(Origin::Set));
        }
    }

    #[test]
    fn an_item_that_is_replaced_keeps_its_name() {
        let root = after(&["sections.zone_1={length: 3 m}", "sections.end={name: last, length: 2 m}"]);
        assert_eq!(keys(&root, "sections.zone_1"), ["name", "length"]);
        assert_eq!(value(&root, "sections.last.length"), "2 m");
    }

    #[test]
    fn absent_keys_are_added() {
        let root = after(&["numerics.stream_tubes=30", "feed.polymer={dispersity: 2}", "feed.polymer.ends.acid=48 %"]);
        assert_eq!(value(&root, "numerics.stream_tubes"), "30");
        assert_eq!(keys(&root, "feed.polymer"), ["dispersity", "ends"]);
        let root =
            after(&["species.toluene.density.points.80.5 degC=810 kg/m3", "coolants.hot={temperature: 150 degC}"]);
        assert_eq!(keys(&root, "species.toluene.density.points").last().map(String::as_str), Some("80.5 degC"));
        assert_eq!(value(&root, "coolants.hot.temperature"), "150 degC");
    }

    #[test]
    fn a_quantity_keeps_its_dots_when_it_is_added() {
        let settings = ["accept.runaway.margin.at_least=15 %", "accept.outlet.conversion.percentile_10.at_most=0.4"];
        let root = after(&[settings[0], settings[1], "accept.outlet.conversion.because=sold so"]);
        assert_eq!(keys(&root, "accept"), ["outlet.conversion", "runaway.margin", "outlet.conversion.percentile_10"]);
        assert_eq!(keys(&root, "accept.outlet.conversion"), ["at_least", "because"]);
    }

    #[test]
    fn a_scalar_becomes_a_block_when_a_key_is_set_in_it() {
        let root = after(&["polymerization.propagation.activation_energy=30 kJ/mol"]);
        assert_eq!(keys(&root, "polymerization.propagation"), ["value", "activation_energy"]);
        assert_eq!(find(&root, "polymerization.propagation.value").map(|node| node.origin), Some(Origin::File));
        let root = after(&["polymerization.propagation.prefactor=1 m3/(mol s)"]);
        assert_eq!(keys(&root, "polymerization.propagation"), ["prefactor"]);
    }

    #[test]
    fn a_set_key_removes_those_it_excludes() {
        let root = after(&["feed.volume_flow=1 L/h", "polymerization.transfer.toluene.ratio=4e-5"]);
        assert_eq!(keys(&root, "feed"), ["temperature", "mass_fractions", "volume_flow"]);
        assert_eq!(keys(&root, "polymerization.transfer.toluene"), ["ratio"]);
        let root = after(&["walls.oil.layers.steel.resistance=2e-4 m2 K/W", "sections.run_out.wall.layers=[]"]);
        assert_eq!(keys(&root, "walls.oil.layers.0"), ["name", "resistance"]);
        assert_eq!(keys(&root, "sections.run_out.wall"), ["kind", "coolant", "layers"]);
    }

    #[test]
    fn a_change_inside_what_is_copied_keeps_what_stands_beside_it() {
        let root = after(&["species.aibn.density.points.20 degC=900 kg/m3"]);
        assert_eq!(keys(&root, "species.aibn.density.points"), ["20 degC", "60.5 degC"]);
        assert_eq!(value(&root, "species.toluene.density.points.20 degC"), "867 kg/m3");
        let root = after(&["sections.end.wall.layers.steel.thickness=5 mm"]);
        assert_eq!(keys(&root, "sections.end.wall.layers.steel"), ["name", "thickness", "conductivity"]);
        let root = after(&["species.aibn.density=900 kg/m3"]);
        assert_eq!(value(&root, "species.aibn.density"), "900 kg/m3");
    }

    #[test]
    fn a_path_that_leads_nowhere_proposes_the_nearest() {
        for (setting, near) in [
            ("fed.temperature=1", Some("feed.temperature")),
            ("sections.zone1.length=1 m", Some("sections.zone_1.length")),
            ("species.tolune.density=1", Some("species.toluene.density")),
            ("walls.oyl.coefficient=1", Some("walls.oil.coefficient")),
            ("sections.zone_1.wall.kind=x", Some("walls.oil.kind")),
            ("walls.oil.coolant.temperature=1 K", Some("coolants.cold.temperature")),
            ("mixture.viscosity.a.2=1", None),
            ("mixture.viscosity.kind.x=1", None),
            ("walls.plain.layers.copper=1", None),
            ("reactions.first.heat=1", None),
            ("feed..temperature=1", None),
            ("=1", None),
        ] {
            assert_eq!(proposal(setting).as_deref(), near, "of {setting}");
        }
    }

    #[test]
    fn what_no_path_can_change_is_refused() {
        for setting in ["include=[a.yaml]", "format=axirad/1", "override.feed.temperature=1 K"] {
            let error = set_from_text(&mut spec(), setting);
            assert!(matches!(error, Err(SpecError::DoesNotGoWith { .. })), "of {setting}");
        }
        let deep = format!("feed.{}x=1", "x.".repeat(40));
        assert!(matches!(set_from_text(&mut spec(), &deep), Err(SpecError::TooDeep { .. })));
        assert!(matches!(set_from_text(&mut spec(), "feed.temperature"), Err(SpecError::NotYaml { .. })));
        assert!(matches!(set_from_text(&mut spec(), "feed.temperature= "), Err(SpecError::NotYaml { .. })));
    }

    #[test]
    fn places_of_a_setting_lie_in_the_argument() {
        let Err(SpecError::DuplicateKey { at, .. }) = set_from_text(&mut spec(), "duct={a: 1, a: 2}") else {
            panic!("a key stands twice")
        };
        assert_eq!((at.location.source.name.as_str(), at.location.column()), ("--set", 13));
        let root = after(&["feed.temperature = 70 degC"]);
        let location = &find(&root, "feed.temperature").expect("it was set").location;
        assert_eq!(&location.source.text[location.bytes.clone()], "70 degC");
    }

    #[test]
    fn overrides_are_taken_out_and_applied() {
        let text =
            format!("{SPEC}override: {{walls.oil.coefficient: 3 W/(m2 K), feed: {{pressure: 9 barg}}, fed.x: 1}}");
        let mut root = read_document("plant.yaml", text.as_bytes(), Origin::File).expect("it parses");
        let errors = apply_override(&mut root);
        assert_eq!(errors.iter().map(ToString::to_string).collect::<Vec<_>>(), ["nothing is named `fed.x`"]);
        assert_eq!(keys(&root, "walls.oil"), ["kind", "coolant", "coefficient"]);
        assert_eq!(find(&root, "feed.pressure").map(|node| node.origin), Some(Origin::Override));
        assert_eq!(keys(&root, "feed"), ["pressure"]);
        assert!(find(&root, "override").is_none());
        let mut wrong = read_document("plant.yaml", b"override: [1]", Origin::File).expect("it parses");
        assert!(matches!(apply_override(&mut wrong)[..], [SpecError::WrongShape { .. }]));
    }
}
