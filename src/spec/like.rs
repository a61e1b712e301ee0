//! `like`: a species or a wall that is as another, but for the keys beside it.
//!
//! Resolved after `override` and `--set`, so that a change of the one named reaches its likes.

use std::collections::{HashMap, HashSet};

use super::alternatives::make_room;
use super::document::{MAX_DEPTH, MAX_ERRORS, MAX_VALUES};
use super::error::SpecError;
use super::node::{Entry, Node, Value};
use super::place::{KeyPath, Place};
use super::suggest::nearest;

const LIKE: &str = "like";

/// Most names among which a message looks for the nearest.
const MAX_KNOWN: usize = 1000;

/// The walls that a duct with two has.
const SIDES: [&str; 4] = ["inner", "outer", "lower", "upper"];

/// Replaces every `like` in `species`, `walls` and the walls of `sections` by a copy of the one named;
/// keys beside it win, and remove those they exclude.
#[must_use]
pub fn resolve_likes(root: &mut Node) -> Vec<SpecError> {
    let mut copier = Copier { left: MAX_VALUES, errors: Vec::new() };
    copier.block(root, "species", "species");
    copier.block(root, "walls", "wall");
    copier.sections(root);
    copier.errors
}

/// The key of the one that a block is like, or of the one that is like, into which a path goes on.
///
/// `path` is the block's own; `rest` what the path has left there.
pub(super) fn inherited(root: &Node, path: &[String], rest: &str) -> Option<Entry> {
    let steps: Vec<&str> = path.iter().map(String::as_str).collect();
    let (block, mut node) = match steps.as_slice() {
        [block @ ("species" | "walls"), name] => (*block, root.get(block)?.get(name)?),
        ["sections", name, "wall", side @ ..] if side.is_empty() || SIDES.contains(side.first()?) => {
            let items = root.get("sections")?.items()?;
            let (_, section) = items.iter().enumerate().find(|(at, item)| item.item_step(*at) == *name)?;
            let wall = section.get("wall")?;
            ("walls", side.iter().try_fold(wall, |node, side| node.get(side))?)
        }
        _ => return None,
    };
    let named = root.get(block)?;
    for _ in 0..MAX_DEPTH {
        node = named.get(node.get(LIKE)?.text()?)?;
        let goes_on = |entry: &&Entry| rest.strip_prefix(&entry.key).is_some_and(|more| more.starts_with('.'));
        let entry = node.entries()?.iter().filter(goes_on).max_by_key(|entry| entry.key.len());
        if let Some(entry) = entry.filter(|entry| entry.key != LIKE) {
            return Some(entry.clone());
        }
    }
    None
}

/// Copies what is alike, within a budget: a chain of copies of a large block is a bomb.
struct Copier {
    left: usize,
    errors: Vec<SpecError>,
}

/// How far an item of a block is.
#[derive(Clone, Copy, PartialEq)]
enum State {
    Waiting,
    OnChain,
    Done,
}

impl Copier {
    /// Resolves the items of a block of named items.
    fn block(&mut self, root: &mut Node, block: &'static str, what: &'static str) {
        let Some(entries) = entries_mut(root, block) else { return };
        let names: HashMap<String, usize> =
            entries.iter().enumerate().map(|(position, entry)| (entry.key.clone(), position)).collect();
        let mut states = vec![State::Waiting; entries.len()];
        for start in 0..entries.len() {
            for (item, base) in self.chain(entries, &names, &mut states, start, (block, what)).into_iter().rev() {
                let path = KeyPath(vec![block.to_owned(), entries[item].key.clone()]);
                if let Some(base) = base {
                    let base = entries[base].node.clone();
                    self.copy(&base, &mut entries[item].node, &path);
                }
                remove_like(&mut entries[item].node);
                states[item] = State::Done;
            }
        }
    }

    /// The items from `start` on that are like one another, each with the one it is like, until one that
    /// is resolved or like none.
    fn chain(
        &mut self,
        entries: &[Entry],
        names: &HashMap<String, usize>,
        states: &mut [State],
        start: usize,
        (block, what): (&'static str, &'static str),
    ) -> Vec<(usize, Option<usize>)> {
        let (mut chain, mut item) = (Vec::new(), start);
        while states[item] == State::Waiting {
            states[item] = State::OnChain;
            let Entry { key, node, .. } = &entries[item];
            let path = KeyPath(vec![block.to_owned(), key.clone()]);
            let wanted = self.name(node, &path);
            let base = wanted.and_then(|(name, at)| {
                let base = names.get(name).copied();
                if base.is_none() {
                    let known = entries.iter().map(|entry| entry.key.as_str());
                    self.report(unknown(at.clone(), what, name, known));
                }
                base.map(|base| (base, at))
            });
            match base {
                Some((base, at)) if states[base] == State::OnChain => {
                    self.report(SpecError::LikeCircle { at, name: key.clone() });
                    chain.push((item, None));
                    break;
                }
                Some((base, _)) => {
                    chain.push((item, Some(base)));
                    item = base;
                }
                None => chain.push((item, None)),
            }
        }
        chain
    }

    /// Resolves the walls typed in sections.
    fn sections(&mut self, root: &mut Node) {
        let walls = root.get("walls").cloned();
        let Some(entry) = entry_mut(root, "sections") else { return };
        let Value::List(items) = &mut entry.node.value else { return };
        for (position, item) in items.iter_mut().enumerate() {
            let path = KeyPath(vec!["sections".to_owned(), item.item_step(position), "wall".to_owned()]);
            let Some(wall) = entry_mut(item, "wall") else { continue };
            self.inline(walls.as_ref(), &mut wall.node, &path);
            for side in SIDES {
                if let Some(inner) = entry_mut(&mut wall.node, side) {
                    self.inline(walls.as_ref(), &mut inner.node, &path.child(side));
                }
            }
        }
    }

    fn inline(&mut self, walls: Option<&Node>, wall: &mut Node, path: &KeyPath) {
        let base = self.name(wall, path).and_then(|(name, at)| {
            let base = walls.and_then(|walls| walls.get(name));
            if base.is_none() {
                let known = walls.and_then(Node::entries).unwrap_or_default().iter().map(|entry| entry.key.as_str());
                self.report(unknown(at, "wall", name, known));
            }
            base
        });
        if let Some(base) = base {
            self.copy(base, wall, path);
        }
        remove_like(wall);
    }

    fn report(&mut self, error: SpecError) {
        if self.errors.len() < MAX_ERRORS {
            self.errors.push(error);
        }
    }

    /// The name that a block says it is like, and where it says so.
    fn name<'n>(&mut self, node: &'n Node, path: &KeyPath) -> Option<(&'n str, Place)> {
        let like = node.get(LIKE)?;
        let at = Place { location: like.location.clone(), path: path.child(LIKE) };
        if let Value::Text(name) = &like.value {
            return Some((name, at));
        }
        self.report(SpecError::WrongShape { at, key: LIKE.to_owned(), wanted: "a name", found: like.shape() });
        None
    }

    /// Puts under the block's own keys those of the one it is like.
    fn copy(&mut self, base: &Node, node: &mut Node, path: &KeyPath) {
        let size = count(base);
        if size > self.left {
            if let Some(like) = node.get(LIKE).filter(|_| self.left > 0) {
                let at = Place { location: like.location.clone(), path: path.child(LIKE) };
                self.report(SpecError::TooMany { at, limit: MAX_VALUES });
            }
            self.left = 0;
            return;
        }
        self.left -= size;
        let (Value::Map(own), Some(copied)) = (&mut node.value, base.entries()) else { return };
        let keys: HashSet<&str> = own.iter().map(|entry| entry.key.as_str()).collect();
        let mut all: Vec<Entry> = copied.iter().filter(|entry| !keys.contains(entry.key.as_str())).cloned().collect();
        for entry in own.iter() {
            make_room(&mut all, &path.0, &entry.key);
        }
        all.append(own);
        *own = all;
    }
}

fn unknown<'n>(at: Place, what: &'static str, name: &str, known: impl Iterator<Item = &'n str>) -> SpecError {
    let known: Vec<String> = known.take(MAX_KNOWN).map(str::to_owned).collect();
    let nearest = nearest(name, known.iter().map(String::as_str)).map(str::to_owned);
    SpecError::UnknownName { at, what, name: name.to_owned(), nearest, known }
}

fn entry_mut<'n>(node: &'n mut Node, key: &str) -> Option<&'n mut Entry> {
    match &mut node.value {
        Value::Map(entries) => entries.iter_mut().find(|entry| entry.key == key),
        _ => None,
    }
}

fn entries_mut<'n>(node: &'n mut Node, key: &str) -> Option<&'n mut Vec<Entry>> {
    match &mut entry_mut(node, key)?.node.value {
        Value::Map(entries) => Some(entries),
        _ => None,
    }
}

fn remove_like(node: &mut Node) {
    if let Value::Map(entries) = &mut node.value {
        entries.retain(|entry| entry.key != LIKE);
    }
}

/// How many values a tree has; it is as deep as a document and a path may be.
fn count(node: &Node) -> usize {
    1 + match &node.value {
        Value::List(items) => items.iter().map(count).sum(),
        Value::Map(entries) => entries.iter().map(|entry| count(&entry.node)).sum(),
        Value::Null | Value::Flag(_) | Value::Number { .. } | Value::Text(_) => 0_usize,
    }
}

#[cfg(test)]
mod tests {
    use super::super::document::read_document;
    use super::super::node::Origin;
    use super::*;

    fn resolved(text: &str) -> (Node, Vec<SpecError>) {
        let mut root = read_document("plant.yaml", text.as_bytes(), Origin::File).expect("it parses");
        let errors = resolve_likes(&mut root);
        (root, errors)
    }

    fn keys(node: &Node, path: &str) -> Vec<String> {
        let block = super::super::edit::find(node, path).and_then(Node::entries).unwrap_or_default();
        let mut keys: Vec<String> = block.iter().map(|entry| entry.key.clone()).collect();
        keys.sort();
        keys
    }

    fn value<'n>(node: &'n Node, path: &str) -> Option<&'n str> {
        super::super::edit::find(node, path).and_then(Node::text)
    }

    #[test]
    fn keys_beside_it_win_and_remove_those_they_exclude() {
        let text = "species:\n  dtbp: {like: aibn, formula: C8H18O2}\n  aibn: {like: styrene, density: 1 g/cm3}\n  styrene: {molar_mass: 104 g/mol, density: {kind: linear}, note: x}\n";
        let (root, errors) = resolved(text);
        assert_eq!(errors, []);
        assert_eq!(keys(&root, "species.dtbp"), ["density", "formula", "note"]);
        assert_eq!(value(&root, "species.dtbp.density"), Some("1 g/cm3"));
        assert_eq!(keys(&root, "species.aibn"), ["density", "molar_mass", "note"]);
    }

    #[test]
    fn a_wall_in_a_section_is_like_a_named_one() {
        let text = "walls: {oil: {kind: jacket, layers: [{name: steel}], coolant: oil}}\nsections:\n- {name: a, wall: {like: oil, coefficient: 3 W/(m2 K)}}\n- {name: b, wall: {inner: {like: oil}, outer: oil}}\n";
        let (root, errors) = resolved(text);
        assert_eq!(errors, []);
        assert_eq!(keys(&root, "sections.a.wall"), ["coefficient", "coolant", "kind"]);
        assert_eq!(keys(&root, "sections.b.wall.inner"), ["coolant", "kind", "layers"]);
        assert_eq!(value(&root, "sections.b.wall.outer"), Some("oil"));
    }

    #[test]
    fn circles_and_unknown_names_are_reported_once() {
        let text = "species: {a: {like: b}, b: {like: c}, c: {like: b}, d: {like: d}, e: {like: styrne}, styrene: {}, f: {like: [a]}}";
        let (root, errors) = resolved(text);
        let shown: Vec<String> = errors.iter().map(ToString::to_string).collect();
        let expected = [
            "`c` is like itself",
            "`d` is like itself",
            "there is no species named `styrne`",
            "`like` needs a name, but a list stands here",
        ];
        assert_eq!(shown, expected);
        assert!(matches!(&errors[2], SpecError::UnknownName { nearest: Some(near), .. } if near == "styrene"));
        assert_eq!(keys(&root, "species.a"), [""; 0]);
    }

    #[test]
    fn copies_of_copies_have_a_bound() {
        let big: String = (0..1000).map(|i| format!("k{i}: 1, ")).collect();
        let likes: String = (0..1000).map(|i| format!("s{i}: {{like: big}}, ")).collect();
        let (_, errors) = resolved(&format!("species: {{big: {{{big}}}, {likes}}}"));
        assert!(matches!(errors[..], [SpecError::TooMany { .. }]));
    }

    #[test]
    fn a_long_chain_needs_no_stack() {
        let chain: String = (1..40_000).map(|i| format!("s{i}: {{like: s{}}}, ", i - 1)).collect();
        let (_, errors) = resolved(&format!("species: {{{chain} s0: {{}}}}"));
        assert_eq!(errors, []);
    }
}
