//! The pipeline in one place: from the bytes of a spec to a run.

use std::collections::BTreeMap;

use crate::integrate::chain::{Trajectory, run_sections};
use crate::integrate::error::NumericsError;
use crate::integrate::work::Work;
use crate::judge::accept::{self, Judged};
use crate::judge::warning::{self, Warning, read_acknowledged};
use crate::model::plant::{self, Plant};
use crate::results::axial::{self, Table};
use crate::results::view::RunView;
use crate::results::{Figure, HotSpot, Value, catalogue};
use crate::spec::include::{FileFormat, Loaded, ReadFile, load};
use crate::spec::{About, Block, Fields, Gathered, Key, Need, Node, Reader, Reported, SpecError, Takes, edit, like};
use crate::units::Dimension;

/// A spec that was read: everything a run needs, and what the reading gathered.
#[derive(Clone, Debug)]
pub struct Spec {
    /// The title, if given.
    pub title: Option<String>,
    /// The note, if given.
    pub note: Option<String>,
    /// The reactor.
    pub plant: Plant,
    /// What a passing design must show.
    pub accept: Vec<accept::Limit>,
    /// Warnings that are accepted, by code, and why.
    pub acknowledged: BTreeMap<String, String>,
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
pub fn read_spec(name: &str, bytes: &[u8], read: ReadFile<'_>, sets: &[String]) -> Result<Spec, Vec<SpecError>> {
    read_loaded(load(name, bytes, read, &[FileFormat::Spec])?, sets)
}

/// Reads a spec whose files are loaded and joined, with values set by path.
///
/// # Errors
/// All mistakes that were found, in the order of the files.
pub fn read_loaded(loaded: Loaded, sets: &[String]) -> Result<Spec, Vec<SpecError>> {
    let root = resolved_tree(loaded.root, sets)?;
    let reader = Reader::new(sources(&root));
    let spec = read_tree(&reader, &root);
    let gathered = reader.end()?;
    let spec = spec.expect("a reader without mistakes leaves a spec");
    Ok(Spec { gathered, ..spec })
}

/// A joined tree with overrides and sets applied, and likes copied.
fn resolved_tree(mut root: Node, sets: &[String]) -> Result<Node, Vec<SpecError>> {
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

/// The spec of a tree, without what the reader gathers.
fn read_tree(reader: &Reader, root: &Node) -> Result<Spec, Reported> {
    let fields = Block::top(reader, root).open(&TOP);
    let _ = fields.text("format");
    let (title, note) = (fields.text("title"), fields.text("note"));
    let _ = (fields.child("include"), fields.child("override"));
    check_sources(&fields);
    let plant = fields.take(Plant::read(&fields));
    let acknowledged = fields.child("acknowledge").map(|child| fields.take(read_acknowledged(&child)));
    let accept = match (fields.child("accept"), &plant) {
        (Some(child), Some(plant)) => fields.take(accept::Limit::read_all(&child, plant)),
        _ => Some(Vec::new()),
    };
    fields.finish(())?;
    Ok(Spec {
        title,
        note,
        plant: plant.ok_or(Reported)?,
        accept: accept.ok_or(Reported)?,
        acknowledged: acknowledged.flatten().unwrap_or_default(),
        gathered: Gathered::default(),
    })
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

/// A finished run, or one that a limit ended: figures, judgement, tables.
#[derive(Clone, Debug)]
pub struct Run {
    /// Every quantity of the catalogue, in its order.
    pub figures: Vec<Figure>,
    /// The hottest point.
    pub hot_spot: HotSpot,
    /// Where the run ended, and what was reached there.
    pub end: End,
    /// The bounds of `accept`, held against the figures.
    pub accept: Vec<Judged>,
    /// What is in doubt.
    pub warnings: Vec<Warning>,
    /// What it cost.
    pub work: Work,
    /// Profiles for files, if asked for.
    pub tables: Option<Tables>,
}

/// Where a run ended.
#[derive(Clone, Debug)]
pub struct End {
    /// The limit that ended it, by its path; none at the outlet.
    pub limit: Option<&'static str>,
    /// The section.
    pub section: String,
    /// z from the inlet, in m.
    pub z: f64,
    /// Quantities of the place.
    pub figures: Vec<Figure>,
}

/// Profiles for files.
#[derive(Clone, Debug)]
pub struct Tables {
    /// One row a station.
    pub along_z: Table,
    /// One row a stream tube of a station.
    pub over_z_and_r: Table,
}

impl Run {
    /// A figure by its name.
    #[must_use]
    pub fn figure(&self, name: &str) -> Option<&Figure> {
        self.figures.iter().find(|figure| figure.name == name)
    }

    /// The number of a figure by its name.
    #[must_use]
    pub fn number(&self, name: &str) -> Option<f64> {
        self.figure(name)?.value.number()
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

/// Runs a spec; with tables if they are wanted.
///
/// # Errors
/// The integrator gave up; a limit that was left is no error but a result.
pub fn run(spec: &Spec, with_tables: bool) -> Result<Run, NumericsError> {
    let trajectory = integrate(&spec.plant)?;
    let view = RunView::new(&spec.plant, &trajectory);
    let mut figures = catalogue::figures(&view);
    let read = &spec.gathered.warnings;
    let warnings = warning::warnings(&view, &figures, read, &spec.acknowledged);
    let open = warnings.iter().filter(|warning| warning.acknowledged.is_none()).count();
    #[expect(clippy::cast_precision_loss, reason = "warnings are few")]
    let count = Value::Number(open as f64);
    figures.push(Figure { name: accept::WARNINGS_COUNT.to_owned(), dimension: Dimension::RATIO, value: count });
    let station = view.end();
    let ended_in = (!view.is_complete()).then_some(station.leg.system.section.name.as_str());
    let accept = spec.accept.iter().map(|limit| limit.judge(&figures, ended_in)).collect();
    let end = End {
        limit: trajectory.ended().map(|limit| limit.path()),
        section: station.leg.system.section.name.clone(),
        z: station.z,
        figures: catalogue::place_figures(station),
    };
    let tables =
        with_tables.then(|| Tables { along_z: axial::along_z(&view), over_z_and_r: axial::over_z_and_r(&view) });
    let work = trajectory.work;
    Ok(Run { figures, hot_spot: view.hot_spot.clone(), end, accept, warnings, work, tables })
}
