//! Every mistake a user can make in a spec has a file in `specs/wrong/`, and beside it the whole message.
//!
//! The folders go by the stage that refuses: the text, the format and its parts, the keys, the values, the
//! meaning. `AXIRAD_BLESS=1` writes the messages anew; then each is read as a user would read it, before it is
//! kept: is the place right, is there one message for one mistake, can what it proposes be typed?

#![cfg(feature = "cli")]

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};

use axirad::cli::diagnostic::draw_all;
use axirad::simulate::read_spec;
use axirad::spec::SpecError;
use axirad::units::{self, Dimension, UnitError};

/// Folders of specs, by the stage that refuses them.
const STAGES: [&str; 5] = ["text", "format", "keys", "values", "meaning"];

/// Mistakes without a file, and why.
const EXEMPT: [(&str, &str); 2] = [
    ("too_large", "the file would have more than 4 MiB; `document.rs` has the test"),
    ("too_many", "the smallest such file is a bomb that slows every tool that looks at it; `document.rs` has the test"),
];

/// A wrong spec: its name below `specs/wrong`, and what is wrong with it.
struct Wrong {
    name: String,
    errors: Vec<SpecError>,
}

#[test]
fn every_wrong_spec_is_told_as_written_beside_it() {
    let bless = std::env::var_os("AXIRAD_BLESS").is_some();
    let mut stale = Vec::new();
    for Wrong { name, errors } in wrong_specs() {
        let drawn = draw_all(&errors, false);
        let beside = folder().join(&name).with_extension("txt");
        let expected = fs::read_to_string(&beside).unwrap_or_default().replace("\r\n", "\n");
        if drawn == expected {
            continue;
        }
        if bless {
            fs::write(&beside, &drawn).expect("the folder can be written to");
        } else {
            stale.push(format!("---- {name} is told:\n{drawn}---- expected:\n{expected}"));
        }
    }
    assert!(stale.is_empty(), "{}\nAXIRAD_BLESS=1 writes the messages anew", stale.join("\n"));
}

#[test]
fn every_message_belongs_to_a_spec() {
    for stage in STAGES {
        for file in files_of(stage, "txt") {
            assert!(file.with_extension("yaml").exists(), "nothing is wrong beside {}", file.display());
        }
    }
}

#[test]
fn every_mistake_has_a_wrong_spec() {
    let specs = wrong_specs();
    let seen: BTreeSet<&str> = specs.iter().flat_map(|spec| &spec.errors).map(SpecError::code).collect();
    let exempt: BTreeSet<&str> = EXEMPT.iter().map(|(code, _)| *code).collect();
    let missing: Vec<&&str> =
        SpecError::CODES.iter().filter(|code| !seen.contains(**code) && !exempt.contains(**code)).collect();
    assert!(missing.is_empty(), "no wrong spec makes these mistakes: {missing:?}");
    let made: Vec<&&str> = exempt.intersection(&seen).collect();
    assert!(made.is_empty(), "these are exempt, but a spec makes them: {made:?}");
}

#[test]
fn what_a_help_proposes_can_be_read() {
    for Wrong { name, errors } in wrong_specs() {
        for error in errors {
            let help = error.help().unwrap_or_default();
            for example in help.split('`').skip(1).step_by(2) {
                assert!(is_readable(example, &error), "{name}: `{example}` cannot be read: {help}");
            }
        }
    }
}

#[test]
fn messages_are_lowercase_and_have_no_full_stop() {
    for Wrong { name, errors } in wrong_specs() {
        for error in errors {
            let texts = [Some(error.to_string()), error.help(), Some(error.label())];
            for text in texts.into_iter().flatten() {
                let first = text.chars().next().unwrap_or('a');
                assert!(!first.is_uppercase() && !text.ends_with('.'), "{name}: {text}");
            }
        }
    }
}

/// Whether an example is a value with a unit, a unit, or YAML. Words and keys stand for themselves.
fn is_readable(example: &str, error: &SpecError) -> bool {
    let is_value = example.trim_start_matches('-').starts_with(|c: char| c.is_ascii_digit());
    if is_value {
        return is_quantity(example) || is_unit(example);
    }
    if matches!(error, SpecError::Unit { .. }) {
        return example.len() == 1 || example.starts_with("axirad ") || is_unit(example);
    }
    if !example.contains(": ") {
        return true;
    }
    // a word in capitals stands for what only the user knows
    serde_yaml::from_str::<serde_yaml::Value>(example).is_ok_and(|value| value.is_mapping() || value.is_sequence())
}

/// Whether a unit is one, of whatever dimension.
fn is_unit(text: &str) -> bool {
    let found = units::read(&format!("1 {text}"), Dimension::RATIO);
    matches!(found, Ok(_) | Err(UnitError::WrongDimension { .. }))
}

/// Whether some key of the format takes this value.
fn is_quantity(text: &str) -> bool {
    let rates = [0.0, 0.5, 1.0, 1.5, 2.0, 3.0].map(Dimension::rate_constant);
    let all = [
        Dimension::RATIO,
        Dimension::ANGLE,
        Dimension::LENGTH,
        Dimension::MASS_FLOW,
        Dimension::VOLUME_FLOW,
        Dimension::VELOCITY,
        Dimension::TEMPERATURE,
        Dimension::TEMPERATURE_DIFFERENCE,
        Dimension::PRESSURE,
        Dimension::PRESSURE_LEVEL,
        Dimension::DENSITY,
        Dimension::CONCENTRATION,
        Dimension::MOLAR_MASS,
        Dimension::MOLAR_ENERGY,
        Dimension::HEAT_CAPACITY,
        Dimension::HEAT_TRANSFER_COEFFICIENT,
        Dimension::CONDUCTIVITY,
        Dimension::DIFFUSIVITY,
        Dimension::VISCOSITY,
        Dimension::FREQUENCY,
        Dimension::DENSITY_SLOPE,
    ];
    all.into_iter().chain(rates).any(|dimension| units::read(text, dimension).is_ok())
}

/// All wrong specs, read.
fn wrong_specs() -> Vec<Wrong> {
    let files = STAGES.iter().flat_map(|stage| files_of(stage, "yaml").into_iter().map(move |file| (*stage, file)));
    files.map(|(stage, file)| read(stage, &file)).collect()
}

fn read(stage: &str, file: &Path) -> Wrong {
    let stem = file.file_name().and_then(|name| name.to_str()).expect("names of specs are plain");
    let name = format!("{stage}/{stem}");
    let bytes = fs::read(file).expect("a listed file can be read");
    let mut part = |name: &str| fs::read(folder().join(name)).map_err(|_| "there is no such file".to_owned());
    match read_spec(&name, &bytes, &mut part, &[]) {
        Ok(_) => panic!("nothing is wrong with {name}"),
        Err(errors) => Wrong { name, errors },
    }
}

/// The files of a stage with this ending, in the order of their names; parts lie in folders of their own.
fn files_of(stage: &str, ending: &str) -> Vec<PathBuf> {
    let entries = fs::read_dir(folder().join(stage)).expect("each stage has a folder");
    let mut files: Vec<PathBuf> = entries.flatten().map(|entry| entry.path()).collect();
    files.retain(|file| file.extension().is_some_and(|found| found == ending));
    files.sort();
    files
}

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("specs").join("wrong")
}
