//! Paths: the keys that lead to a value.
//!
//! A step is a key, matched longest first because keys may hold dots, or an item of a list, by its `name`
//! or else its position from 0. At a scalar the step `value` names the scalar itself, as the short form
//! stands for a block.

use super::error::SpecError;
use super::node::{Entry, Node, Value};
use super::place::Place;
use super::suggest::nearest;

/// The blocks a spec may have at its top.
pub const KNOWN_BLOCKS: [&str; 22] = [
    "format",
    "title",
    "note",
    "include",
    "sources",
    "duct",
    "feed",
    "flow",
    "coolants",
    "walls",
    "sections",
    "species",
    "mixture",
    "reactions",
    "polymerization",
    "override",
    "limits",
    "hazard",
    "accept",
    "acknowledge",
    "numerics",
    "output",
];

/// Blocks whose keys are names that define something. A path into a name that does not stand there is a
/// slip of the pen: adding it would define something that nothing uses, and no one would notice.
const DEFINING: [&str; 3] = ["species", "walls", "coolants"];

/// Keys that hold a list: a path cannot make an item.
const LISTS: [&str; 3] = ["sections", "reactions", "layers"];

/// What may follow a quantity in `accept`; all before is the quantity's name, with its dots.
const VERDICT_KEYS: [&str; 4] = [".at_least", ".at_most", ".is", ".because"];

/// The value at a path, if one stands there.
#[must_use]
pub fn find<'a>(root: &'a Node, path: &str) -> Option<&'a Node> {
    let mut trail = Vec::new();
    trace(root, path, &mut trail)
}

/// Follows a path that exists, noting the position taken at each list or map. Every value is reached by
/// one text only, so trying shorter keys where the longest leads nowhere costs no more than the tree has.
pub(super) fn trace<'a>(node: &'a Node, rest: &str, trail: &mut Vec<usize>) -> Option<&'a Node> {
    match &node.value {
        Value::Map(entries) => {
            let mut fits: Vec<(usize, &Entry)> =
                entries.iter().enumerate().filter(|(_, entry)| after(rest, &entry.key).is_some()).collect();
            fits.sort_by_key(|(_, entry)| std::cmp::Reverse(entry.key.len()));
            fits.into_iter()
                .find_map(|(position, entry)| onward(&entry.node, position, after(rest, &entry.key)?, trail))
        }
        Value::List(items) => {
            let (position, more) = item(items, rest)?;
            onward(items.get(position)?, position, more, trail)
        }
        Value::Null | Value::Flag(_) | Value::Number { .. } | Value::Text(_) => (rest == "value").then_some(node),
    }
}

fn onward<'a>(node: &'a Node, position: usize, rest: Option<&str>, trail: &mut Vec<usize>) -> Option<&'a Node> {
    trail.push(position);
    let found = match rest {
        None => Some(node),
        Some(rest) => trace(node, rest, trail),
    };
    if found.is_none() {
        trail.pop();
    }
    found
}

/// What follows a step at the beginning of a path: `Some(None)` if nothing does.
fn after<'p>(path: &'p str, step: &str) -> Option<Option<&'p str>> {
    match path.strip_prefix(step)? {
        "" => Some(None),
        more => more.strip_prefix('.').map(Some),
    }
}

/// The item of a list that a path begins with, by name or else by position, and what follows.
fn item<'p>(items: &[Node], path: &'p str) -> Option<(usize, Option<&'p str>)> {
    let named = items.iter().enumerate().filter_map(|(position, item)| {
        let name = item.get("name").and_then(Node::text)?;
        Some((name.len(), position, after(path, name)?))
    });
    if let Some((_, position, more)) = named.max_by_key(|(length, position, _)| (*length, usize::MAX - position)) {
        return Some((position, more));
    }
    let step = path.split('.').next()?;
    let position = step.parse::<usize>().ok().filter(|position| *position < items.len())?;
    Some((position, after(path, step)?))
}

/// Where new keys go: the trail to the value they go into, its path, and the keys.
pub(super) struct Goal {
    pub(super) trail: Vec<usize>,
    pub(super) path: Vec<String>,
    pub(super) steps: Vec<String>,
}

/// The search for the place of a value that is not there yet.
pub(super) struct Search<'a> {
    pub(super) root: &'a Node,
    pub(super) path: &'a str,
    pub(super) at: &'a Place,
}

impl<'a> Search<'a> {
    /// Goes as deep as the path leads: where the new keys go, and what stands there.
    pub(super) fn goal(&self) -> Result<(Goal, &'a Node), SpecError> {
        let (mut node, mut rest) = (self.root, self.path);
        let (mut trail, mut path) = (Vec::new(), Vec::new());
        loop {
            let next = match &node.value {
                Value::Map(entries) => entries
                    .iter()
                    .enumerate()
                    .filter_map(|(position, entry)| Some((position, entry, after(rest, &entry.key)??)))
                    // `outlet.conversion` is no beginning of another quantity.
                    .filter(|(_, _, more)| path != ["accept"] || !more.contains('.'))
                    .max_by_key(|(_, entry, _)| entry.key.len())
                    .map(|(position, entry, more)| (position, entry.key.clone(), &entry.node, more)),
                Value::List(items) => {
                    let taken = item(items, rest).and_then(|(at, more)| Some((at, items.get(at)?, more?)));
                    let Some((at, item, more)) = taken else {
                        let names: Vec<String> =
                            items.iter().enumerate().map(|(at, item)| item.item_step(at)).collect();
                        return Err(self.nothing(&path, rest, names.iter().map(String::as_str)));
                    };
                    Some((at, item.item_step(at), item, more))
                }
                Value::Null => None,
                Value::Flag(_) | Value::Number { .. } | Value::Text(_) if is_quantity(node) => None,
                Value::Flag(_) | Value::Number { .. } | Value::Text(_) => {
                    return Err(self.inside_a_text(&path, node, rest));
                }
            };
            let Some((position, step, inner, more)) = next else { break };
            trail.push(position);
            path.push(step);
            (node, rest) = (inner, more);
        }
        let steps = new_steps(&path, rest);
        Ok((Goal { trail, path, steps }, node))
    }

    /// Refuses new keys that could only be slips.
    pub(super) fn judge(&self, goal: &Goal, node: &Node) -> Result<(), SpecError> {
        let Goal { path, steps, .. } = goal;
        let rest = steps.join(".");
        let here = || node.entries().unwrap_or_default().iter().map(|entry| entry.key.as_str());
        let mut whole: Vec<&str> = path.iter().map(String::as_str).collect();
        for (position, step) in steps.iter().enumerate() {
            let last = position + 1 == steps.len();
            let known = match whole.as_slice() {
                [] => KNOWN_BLOCKS.contains(&step.as_str()) && (last || !LISTS.contains(&step.as_str())),
                [block] => last || !DEFINING.contains(block),
                [..] => last || !LISTS.contains(&step.as_str()),
            };
            if !known {
                let blocks = KNOWN_BLOCKS.into_iter().filter(|_| path.is_empty() && position == 0);
                return Err(self.nothing(path, &rest, here().chain(blocks)));
            }
            whole.push(step);
        }
        Ok(())
    }

    /// Nothing is named so; the nearest path has the first step that failed put right.
    fn nothing<'n>(&self, path: &[String], rest: &str, known: impl Iterator<Item = &'n str>) -> SpecError {
        let (step, more) = rest.split_once('.').map_or((rest, None), |(step, more)| (step, Some(more)));
        let nearest = nearest(step, known).filter(|near| *near != step).map(|near| {
            let steps = path.iter().map(String::as_str).chain([near]).chain(more);
            steps.collect::<Vec<_>>().join(".")
        });
        SpecError::NoSuchPath { at: self.at.clone(), path: self.path.to_owned(), nearest }
    }

    /// A step goes into a text. If that is the name of a wall or a coolant, the path is where it is defined.
    fn inside_a_text(&self, path: &[String], node: &Node, rest: &str) -> SpecError {
        let steps: Vec<&str> = path.iter().map(String::as_str).collect();
        let block = match steps.as_slice() {
            [.., "wall"] | [.., "wall", "inner" | "outer" | "lower" | "upper"] => Some("walls"),
            [.., "coolant"] => Some("coolants"),
            _ => None,
        };
        let nearest = block.and_then(|block| Some(format!("{block}.{}.{rest}", node.text()?)));
        SpecError::NoSuchPath { at: self.at.clone(), path: self.path.to_owned(), nearest }
    }
}

/// Whether a scalar can be the short form of a block with `value`: names and words cannot.
fn is_quantity(node: &Node) -> bool {
    match &node.value {
        Value::Number { .. } => true,
        Value::Text(text) => text.trim_start_matches(['+', '-', '.']).starts_with(|c: char| c.is_ascii_digit()),
        Value::Null | Value::Flag(_) | Value::List(_) | Value::Map(_) => false,
    }
}

/// Splits what is new in a path into keys; quantities and temperatures keep their dots.
fn new_steps(path: &[String], rest: &str) -> Vec<String> {
    let mut path = path.to_vec();
    let (mut rest, mut steps) = (Some(rest), Vec::new());
    while let Some(more) = rest {
        let (step, next) = if path == ["accept"] {
            match VERDICT_KEYS.iter().find_map(|key| Some((more.strip_suffix(key)?, &key[1..]))) {
                Some((quantity, key)) => (quantity, Some(key)),
                None => (more, None),
            }
        } else if path.last().is_some_and(|last| last == "points") {
            (more, None)
        } else {
            more.split_once('.').map_or((more, None), |(step, next)| (step, Some(next)))
        };
        steps.push(step.to_owned());
        path.push(step.to_owned());
        rest = next;
    }
    steps
}

/// The steps of a trail.
pub(super) fn steps_of(root: &Node, trail: &[usize]) -> Vec<String> {
    let (mut node, mut steps) = (root, Vec::new());
    for position in trail {
        let next = match &node.value {
            Value::Map(entries) => entries.get(*position).map(|entry| (entry.key.clone(), &entry.node)),
            Value::List(items) => items.get(*position).map(|item| (item.item_step(*position), item)),
            Value::Null | Value::Flag(_) | Value::Number { .. } | Value::Text(_) => None,
        };
        let Some((step, inner)) = next else { break };
        steps.push(step);
        node = inner;
    }
    steps
}

#[cfg(test)]
mod tests {
    use super::super::document::read_document;
    use super::super::node::Origin;
    use super::*;

    fn found(text: &str, path: &str) -> Option<String> {
        let root = read_document("plant.yaml", text.as_bytes(), Origin::File).expect("it parses");
        find(&root, path).and_then(Node::text).map(str::to_owned)
    }

    #[test]
    fn the_longest_key_is_tried_first_and_shorter_ones_after_it() {
        let text = "{a: {b.c: 1, b: {c: 2}}, a.b: {d: 3}}";
        assert_eq!(found(text, "a.b.c").as_deref(), Some("1"));
        assert_eq!(found(text, "a.b.d").as_deref(), Some("3"));
        assert_eq!(found(text, "a.b.e"), None);
    }

    #[test]
    fn items_are_found_by_name_or_else_by_position() {
        let text = "{list: [{name: x, v: 1}, {name: y, v: 2}, 7]}";
        assert_eq!(found(text, "list.y.v").as_deref(), Some("2"));
        assert_eq!(found(text, "list.0.v").as_deref(), Some("1"));
        assert_eq!(found(text, "list.2").as_deref(), Some("7"));
        assert_eq!(found(text, "list.3"), None);
        assert_eq!(found(text, "list.-1"), None);
    }

    #[test]
    fn a_scalar_is_its_own_value() {
        assert_eq!(found("{a: {b: 3 K}}", "a.b.value").as_deref(), Some("3 K"));
        assert_eq!(found("{a: {b: {value: 4 K}}}", "a.b.value").as_deref(), Some("4 K"));
        assert_eq!(found("{a: {b: 3 K}}", "a.b.at"), None);
    }
}
