//! `axirad check`: read files and say what they describe, without solving.

use serde_json::{Value as Json, json};

use super::super::arguments::{Check as Arguments, Everywhere};
use super::super::exit_code::ExitCode;
use super::super::input;
use super::super::output::Console;
use super::super::problem::Problem;
use super::{Answer, given_twice, shown};
use crate::report::json::Outcome;
use crate::report::outline::{outline, part};
use crate::simulate::{self, Spec, TOP};
use crate::spec::include::{FileFormat, Loaded, load};
use crate::spec::node::Entry;
use crate::spec::suggest::nearest;
use crate::spec::{KeyPath, Need, Node, Place, ResolvedLine, SpecError};

/// What a part is held against, and what only a spec can tell.
const OF_A_PART: &str = "checked: its text, what it includes, and the names of its blocks; what stands in them is read \
                         when a spec includes it";

/// Checks each file; what is wrong with one does not keep the others from being checked.
pub fn check(arguments: &Arguments, everywhere: Everywhere, console: &mut Console<'_>) -> ExitCode {
    let files = &arguments.specs.specs;
    let mut answer = Answer::new(console, everywhere, files.len());
    if let Some(problem) = given_twice(files) {
        return answer.refuse_command(&problem);
    }
    for file in files {
        check_one(file, arguments, &mut answer);
    }
    answer.finish()
}

fn check_one(file: &str, arguments: &Arguments, answer: &mut Answer<'_, '_>) {
    let bytes = match input::read(file) {
        Ok(bytes) => bytes,
        Err(problem) => return answer.fail(file, None, &problem),
    };
    let mut read = |name: &str| input::read_part(name);
    let formats = [FileFormat::Spec, FileFormat::Part, FileFormat::Study];
    let loaded = match load(file, &bytes, &mut read, &formats) {
        Ok(loaded) => loaded,
        Err(errors) => return answer.refuse(file, &errors),
    };
    match loaded.format {
        FileFormat::Spec => check_spec(file, loaded, arguments, answer),
        FileFormat::Part => check_part(file, &loaded, arguments, answer),
        FileFormat::Study => answer.refuse(file, &[no_study(&loaded.root)]),
    }
}

fn check_spec(file: &str, loaded: Loaded, arguments: &Arguments, answer: &mut Answer<'_, '_>) {
    let spec = match simulate::read_loaded(loaded, &arguments.specs.sets) {
        Ok(spec) => spec,
        Err(errors) => return answer.refuse(file, &errors),
    };
    let outcome = || {
        let outcome = Outcome::of_check(Some(&spec), checked(&spec));
        if arguments.resolved { outcome.with_resolved(&spec.gathered.resolved) } else { outcome }
    };
    let text = match (arguments.resolved, answer.several) {
        (true, true) => format!("# {}\n{}", shown(file), resolved(&spec)),
        (true, false) => resolved(&spec),
        (false, _) => described(file, &spec, answer.everywhere.quiet),
    };
    answer.add(file, ExitCode::Done, outcome, &text);
}

/// The resolved spec: `path = value  # origin`, a line each.
fn resolved(spec: &Spec) -> String {
    let line = |line: &ResolvedLine| format!("{} = {}  # {}\n", line.path, line.value, line.origin);
    spec.gathered.resolved.iter().map(line).collect()
}

/// What a spec describes, and what its reading warns of; quiet: the warnings alone.
fn described(file: &str, spec: &Spec, quiet: bool) -> String {
    let open = |code: &str| !spec.acknowledged.contains_key(code);
    let warnings = spec.gathered.warnings.iter().filter(|warning| open(warning.code));
    let warnings: String =
        warnings.map(|warning| format!("{}: warning {}: {}\n", shown(file), warning.code, warning.text)).collect();
    if quiet {
        return warnings;
    }
    format!("{}: a valid spec\n{}{warnings}", shown(file), outline(spec))
}

fn check_part(file: &str, loaded: &Loaded, arguments: &Arguments, answer: &mut Answer<'_, '_>) {
    if !arguments.specs.sets.is_empty() {
        let message = format!("`{}` is a part: values are set in the spec that includes it", shown(file));
        return answer.fail(file, None, &Problem::of_command(message, "check the spec with `--set`"));
    }
    let errors = unknown_blocks(&loaded.root);
    if !errors.is_empty() {
        return answer.refuse(file, &errors);
    }
    let checked = json!({ "kind": "part", "what": OF_A_PART });
    let text = if answer.everywhere.quiet { String::new() } else { part(shown(file), OF_A_PART) };
    answer.add(file, ExitCode::Done, || Outcome::of_check(None, checked), &text);
}

/// Blocks of a part that no spec has, or none that this version reads.
fn unknown_blocks(root: &Node) -> Vec<SpecError> {
    let known = || TOP.keys.iter().map(|key| key.name);
    let wrong = |entry: &Entry| {
        let at = Place { location: entry.key_location.clone(), path: KeyPath(vec![entry.key.clone()]) };
        match TOP.key(&entry.key) {
            Some(key) if key.need == Need::Later => Some(SpecError::NotInThisVersion { at, what: entry.key.clone() }),
            Some(_) => None,
            None => Some(SpecError::UnknownKey {
                at,
                block: "part".to_owned(),
                key: entry.key.clone(),
                nearest: nearest(&entry.key, known()).map(str::to_owned),
                known: known().collect(),
            }),
        }
    };
    root.entries().unwrap_or_default().iter().filter_map(wrong).collect()
}

/// Studies come with a later version.
fn no_study(root: &Node) -> SpecError {
    let format = root.get("format").unwrap_or(root);
    let at = Place { location: format.location.clone(), path: KeyPath(vec!["format".to_owned()]) };
    SpecError::NotInThisVersion { at, what: FileFormat::Study.word().to_owned() }
}

/// What `--json` says of a spec that was checked.
fn checked(spec: &Spec) -> Json {
    let plant = &spec.plant;
    let sections: Vec<&str> = plant.sections.iter().map(|section| section.name.as_str()).collect();
    json!({
        "kind": "spec",
        "sections": sections,
        "length_m": plant.length(),
        "species": plant.material.species,
        "stream_tubes": plant.numerics.stream_tubes,
        "variables": plant.material.n_vars(),
        "accept": spec.accept.len(),
    })
}
