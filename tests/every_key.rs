//! No key is read and ignored: changing any of them changes the run, or is refused.

use std::collections::BTreeSet;

use axirad::judge::accept;
use axirad::simulate::{Run, Spec, TOP, read_spec, run};
use axirad::spec::{About, Need, ResolvedLine, SpecError, Takes};

const SPECS: [&str; 3] = ["polymer", "reactions", "odds"];

/// Keys whose change rightly changes nothing, and why.
const WITHOUT_EFFECT: [(&str, &str); 4] = [
    ("format", "says what the file is"),
    ("note", "for the reader of the file alone"),
    ("sources", "read with the blocks that name them"),
    ("reactions.*.name", "stands in messages and paths alone"),
];

fn read(name: &str, sets: &[String]) -> Result<Spec, Vec<SpecError>> {
    let path = format!("tests/every_key/{name}.yaml");
    let bytes = std::fs::read(&path).expect("the spec stands beside this test");
    read_spec(&path, &bytes, &mut |part| std::fs::read(part).map_err(|error| error.to_string()), sets)
}

/// Everything that a reader of the report can see, but for what is rounding alone.
fn appearance(spec: &Spec) -> String {
    let Run { mut figures, hot_spot, end, accept, warnings, work: _, tables } =
        run(spec, true).unwrap_or_else(|error| {
            panic!("{error:?}: {:?}", spec.gathered.resolved.iter().find(|line| line.origin == "set"))
        });
    figures.retain(|figure| !figure.name.starts_with("balance."));
    format!("{:?} {:?}", spec.title, spec.gathered.provenance)
        + &format!("{figures:?} {hot_spot:?} {end:?} {accept:?} {warnings:?} {tables:?}")
}

/// Whether two appearances differ by more than rounding: numbers by more than 1e-9, other text at all.
fn differ(one: &str, other: &str) -> bool {
    let words = |text: &str| -> Vec<String> {
        text.split(|c: char| c.is_whitespace() || "(),[]{}:\"".contains(c)).map(str::to_owned).collect()
    };
    let (one, other) = (words(one), words(other));
    one.len() != other.len()
        || one.iter().zip(&other).any(|(a, b)| match (a.parse::<f64>(), b.parse::<f64>()) {
            (Ok(a), Ok(b)) => (a - b).abs() > 1e-9 * a.abs().max(b.abs()).max(1e-9),
            _ => a != b,
        })
}

/// Other values for a line of the resolved spec.
fn other_values(line: &ResolvedLine) -> Vec<String> {
    let key = line.path.0.last().map_or("", String::as_str);
    let (number, unit) = line.value.split_once(' ').unwrap_or((&line.value, ""));
    if let Ok(value) = number.parse::<f64>() {
        // 0 has no scale of its own: a change that no unit makes absurd
        let scaled = |factor: f64| if value == 0.0 { 1e-4 } else { value * factor };
        let whole = value.fract() == 0.0 && ["stream_tubes", "stations"].contains(&key);
        let changed = if whole { vec![value + 1.0] } else { [1.05, 0.95, 1.001, 1.3, 0.01].map(scaled).into() };
        return changed.into_iter().map(|value| format!("{value} {unit}").trim_end().to_owned()).collect();
    }
    match (key, line.value.as_str()) {
        (_, "true") => vec!["false".to_owned()],
        (_, "false") => vec!["true".to_owned()],
        ("profile", "parabolic") => vec!["plug".to_owned()],
        ("profile", _) => vec!["parabolic".to_owned()],
        ("spacing", "uniform") => vec!["equal_area".to_owned()],
        ("spacing", _) => vec!["uniform".to_owned()],
        _ => vec!["quite_another".to_owned()],
    }
}

/// A number must be taken and count; a word may be refused, and so may a number that others must fit.
fn may_be_refused(line: &ResolvedLine) -> bool {
    let path = line.path.to_string();
    let is_number = line.value.split(' ').next().is_some_and(|text| text.parse::<f64>().is_ok());
    !is_number
        || path.starts_with("limits.")
        || ["order", "consumes", "makes", "viscosity.a.0", "viscosity.b.0", "valid"]
            .iter()
            .any(|key| path.contains(key))
}

fn is_without_effect(line: &ResolvedLine) -> bool {
    let path = line.path.to_string();
    WITHOUT_EFFECT.iter().any(|(known, _)| match known.split_once("*") {
        Some((before, after)) => path.starts_with(before) && path.ends_with(after),
        None => path == *known,
    })
}

#[test]
fn every_key_that_is_given_changes_the_run_or_is_refused() {
    let mut ignored = Vec::new();
    for name in SPECS {
        let spec = read(name, &[]).unwrap_or_else(|errors| panic!("{name}: {errors:#?}"));
        let before = appearance(&spec);
        for line in &spec.gathered.resolved {
            if line.origin == "default" || is_without_effect(line) || line.value == "rest" {
                continue;
            }
            let has_effect = other_values(line).iter().any(|value| {
                let set = format!("{}={value}", line.path);
                match read(name, &[set]) {
                    Ok(changed) => differ(&appearance(&changed), &before),
                    Err(_) => may_be_refused(line),
                }
            });
            if !has_effect {
                ignored.push(format!("{name}: {} = {}", line.path, line.value));
            }
        }
    }
    assert!(ignored.is_empty(), "read and ignored:\n{}", ignored.join("\n"));
}

/// Every key of a table and of the tables below it.
fn collect(about: &'static About, keys: &mut BTreeSet<(&'static str, &'static str)>) {
    for key in about.keys.iter().filter(|key| key.need != Need::Later) {
        let is_new = keys.insert((about.kind, key.name));
        let below: &[&'static About] = match key.takes {
            Takes::Block(about) | Takes::Named(about) | Takes::Listed(about) => &[about],
            Takes::Law(_, kinds) | Takes::Rate(kinds) | Takes::Kinds(kinds) => kinds,
            _ => &[],
        };
        if is_new {
            below.iter().for_each(|about| collect(about, keys));
        }
    }
}

#[test]
fn every_key_of_the_format_is_given_in_some_spec() {
    let mut all = BTreeSet::new();
    collect(&TOP, &mut all);
    collect(&accept::ABOUT, &mut all);
    let mut given = BTreeSet::new();
    for name in SPECS {
        given.extend(read(name, &[]).unwrap_or_else(|errors| panic!("{name}: {errors:#?}")).gathered.keys);
    }
    // `override` is used up before the tables are read; `closing_species` is always refused, with its reason
    let elsewhere = [("spec", "override"), ("mixture", "closing_species")];
    let missing: Vec<_> = all.difference(&given).filter(|key| !elsewhere.contains(key)).collect();
    assert!(missing.is_empty(), "no spec gives {missing:?}");
}
