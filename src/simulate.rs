//! The pipeline in one place: from the bytes of a spec to a run.

use std::collections::BTreeMap;

use crate::integrate::chain::{Trajectory, run_sections};
use crate::integrate::error::NumericsError;
use crate::model::plant::{self, Plant};
use crate::spec::include::{FileFormat, ReadFile, load};
use crate::spec::{
    About, Block, Fields, Gathered, Key, Need, Node, Reader, Reported, SpecError, Takes, edit, like,
};

/// A spec that was read: everything a run needs, and what the reading gathered.
#[derive(Clone, Debug)]
pub struct Spec {
    /// The title, if given.
    pub title: Option<String>,
    /// The note, if given.
    pub note: Option<String>,
    /// The reactor.
    pub plant: Plant,
    /// The resolved listing, where numbers come from, warnings.
    pub gathered: Gathered,
}

/// The keys of a spec, in canonical order.
pub const TOP: About = About {
    kind: "spec",
    summary: "a reactor, its feed, and what is asked of it",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "format",
            takes: Takes::Text,
            need: Need::Required("axirad/1"),
            meaning: "the format of the file, first of all keys",
        },
        Key { name: "title", takes: Takes::Text, need: Need::Optional, meaning: "what the report is headed with" },
        Key { name: "note", takes: Takes::Text, need: Need::Optional, meaning: "anything worth saying" },
        Key {
            name: "include",
            takes: Takes::Other("a list of files"),
            need: Need::Optional,
            meaning: "parts to join, relative to this file",
        },
        Key {
            name: "sources",
            takes: Takes::Other("names with texts"),
            need: Need::Optional,
            meaning: "sources that blocks name",
        },
        plant::KEYS[0],
        plant::KEYS[1],
        plant::KEYS[2],
        plant::KEYS[3],
        plant::KEYS[4],
        plant::KEYS[5],
        plant::KEYS[6],
        plant::KEYS[7],
        plant::KEYS[8],
        plant::KEYS[9],
        Key {
            name: "override",
            takes: Takes::Other("paths with values"),
            need: Need::Optional,
            meaning: "what differs from the parts, path by path",
        },
        plant::KEYS[10],
        Key { name: "hazard", takes: Takes::Other("a block"), need: Need::Later, meaning: "data from calorimetry" },
        Key {
            name: "accept",
            takes: Takes::Other("quantities with bounds"),
            need: Need::Optional,
            meaning: "what a passing design must show",
        },
        Key {
            name: "acknowledge",
            takes: Takes::Other("warnings with reasons"),
            need: Need::Optional,
            meaning: "warnings that are accepted, and why",
        },
        plant::KEYS[11],
        plant::KEYS[12],
    ],
};

/// Reads a spec: the main file's bytes, a way to read the parts it includes, and values set by path.
///
/// # Errors
/// All mistakes that were found, in the order of the files.
pub fn read_spec(
    name: &str,
    bytes: &[u8],
    read: ReadFile<'_>,
    sets: &[String],
) -> Result<Spec, Vec<SpecError>> {
    let root = resolved_tree(name, bytes, read, sets)?;
    let reader = Reader::new(sources(&root));
    let spec = read_tree(&reader, &root);
    let gathered = reader.end()?;
    let (title, note, plant) = spec.expect("a reader without mistakes leaves a spec");
    Ok(Spec { title, note, plant, gathered })
}

/// The tree of a spec with its parts joined, overrides and sets applied, and likes copied.
fn resolved_tree(
    name: &str,
    bytes: &[u8],
    read: ReadFile<'_>,
    sets: &[String],
) -> Result<Node, Vec<SpecError>> {
    let mut root = load(name, bytes, read, &[FileFormat::Spec])?.root;
    let mut problems = edit::apply_override(&mut root);
    problems.extend(sets.iter().filter_map(|argument| edit::set_from_text(&mut root, argument).err()));
    problems.extend(like::resolve_likes(&mut root));
    if problems.is_empty() { Ok(root) } else { Err(problems) }
}

/// The texts under `sources`, by name.
fn sources(root: &Node) -> BTreeMap<String, String> {
    let entries = root.get("sources").and_then(Node::entries).unwrap_or_default();
    entries.iter().filter_map(|entry| Some((entry.key.clone(), entry.node.text()?.to_owned()))).collect()
}

type Parts = (Option<String>, Option<String>, Plant);

fn read_tree(reader: &Reader, root: &Node) -> Result<Parts, Reported> {
    let fields = Block::top(reader, root).open(&TOP);
    let _ = fields.text("format");
    let (title, note) = (fields.text("title"), fields.text("note"));
    let _ = (fields.child("include"), fields.child("override"));
    check_sources(&fields);
    let plant = Plant::read(&fields);
    let _ = (fields.child("accept"), fields.child("acknowledge"));
    let plant = fields.take(plant);
    fields.finish(())?;
    Ok((title, note, plant.ok_or(Reported)?))
}

/// Sources are names with texts.
fn check_sources(fields: &Fields<'_>) {
    let Some(child) = fields.child("sources") else { return };
    for (_, item) in child.named() {
        if item.node().text().is_none() {
            fields.problem(item.wrong_shape(item.last_step(), "a text"));
        }
    }
}

/// Integrates a plant.
///
/// # Errors
/// The integrator gave up; a limit that was left is no error.
pub fn integrate(plant: &Plant) -> Result<Trajectory<'_>, NumericsError> {
    let places: Vec<f64> = plant.output.places.iter().map(|place| place.z).collect();
    run_sections(plant, &places)
}
