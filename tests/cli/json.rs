//! The document of `--json`.

use std::fs;
use std::process::Stdio;

use serde_json::Value;

use crate::{Answer, axirad, folder, small_spec};

fn document(text: &str) -> Value {
    serde_json::from_str(text).unwrap_or_else(|error| panic!("{error}: {text}"))
}

/// Keys in the order of the text.
fn keys(text: &str, indent: &str) -> Vec<String> {
    let key = |line: &str| Some(line.strip_prefix(indent)?.strip_prefix('"')?.split('"').next()?.to_owned());
    text.lines().filter_map(key).collect()
}

const KEYS: [&str; 9] =
    ["format", "axirad", "title", "quantities", "ended", "end", "accept", "warnings", "diagnostics"];

#[test]
fn a_run_has_its_quantities_in_si_with_units() {
    let folder = folder();
    let answer = Answer::of(axirad(["run", "--json"]).arg(small_spec(folder.path(), "small.yaml")));
    assert_eq!(answer.code, 0);
    assert_eq!(keys(&answer.results, "  "), KEYS);
    let document = document(&answer.results);
    assert_eq!(document["format"], "axirad-results/1");
    assert_eq!(document["axirad"], env!("CARGO_PKG_VERSION"));
    assert_eq!(document["title"], "Isomerization in a cooled tube");
    assert_eq!(document["ended"], "outlet");
    assert_eq!(document["end"]["section"], "cold");
    assert_eq!(document["end"]["z_m"], 3.0);
    assert_eq!(document["diagnostics"], Value::Array(Vec::new()));
    let quantity = |name: &str| &document["quantities"][name];
    assert_eq!(quantity("hot_spot.temperature")["unit"], "K");
    assert!(quantity("hot_spot.temperature")["value"].as_f64().is_some_and(|value| (313.15..340.0).contains(&value)));
    assert_eq!(quantity("hot_spot.section")["value"], "hot");
    assert_eq!(quantity("pressure_drop")["value"], Value::Null);
    assert_eq!(quantity("pressure_drop")["reason"], "no `mixture.viscosity` is given");
    assert_eq!(quantity("outlet.conversion")["value"], document["end"]["quantities"]["conversion"]["value"]);
    let verdicts: Vec<&Value> =
        document["accept"].as_array().into_iter().flatten().map(|limit| &limit["verdict"]).collect();
    assert_eq!(verdicts, ["holds", "broken"]);
    assert_eq!(document["accept"][0]["bound"]["at_least"], 0.6);
    assert_eq!(document["warnings"][0]["code"], "law_range");
    assert_eq!(document["warnings"][0]["acknowledged"], Value::Null);
}

#[test]
fn an_early_end_says_where_and_what_was_reached() {
    let folder = folder();
    let spec = small_spec(folder.path(), "small.yaml");
    let answer = Answer::of(axirad(["run", "--json", "--set", "limits.temperature.highest=45 degC"]).arg(spec));
    assert_eq!(answer.code, 3);
    let document = document(&answer.results);
    assert_eq!(document["ended"], "limits.temperature.highest");
    assert_eq!(document["end"]["section"], "hot");
    let reached = document["end"]["quantities"]["highest_temperature"]["value"].as_f64();
    // the spline across the duct may pass the hottest tube, which is what the limit holds for
    assert!(reached.is_some_and(|reached| (reached - 318.15).abs() < 0.5), "{reached:?}");
    assert_eq!(document["quantities"]["outlet.conversion"]["value"], Value::Null);
    assert_eq!(document["accept"][0]["verdict"], "not_judged");
    assert!(document["accept"][0]["reason"].is_string());
}

#[test]
fn whatever_fails_there_is_one_document_with_diagnostics() {
    let failures: [(&[&str], i32); 7] = [
        (&["run", "specs/cases/case_a.yaml", "--set", "feed.x=1"], 2),
        (&["run", "specs/cases/nothing.yaml"], 5),
        (&["run", "specs/cases/case_a.yaml", "specs/cases/case_a.yaml"], 2),
        (&["run", "specs/cases/materials/styrene.yaml"], 2),
        (&["run", "-"], 2),
        (&["check", "specs/cases/nothing.yaml"], 5),
        (&["run", "specs/cases/case_a.yaml", "--ou", "x"], 2),
    ];
    for (arguments, code) in failures {
        let answer = Answer::of(axirad(arguments).arg("--json").stdin(Stdio::null()));
        assert_eq!(answer.code, code, "{arguments:?}");
        let document = document(&answer.results);
        assert_eq!(document["format"], "axirad-results/1");
        assert_eq!(document["ended"], Value::Null);
        assert_eq!(document["quantities"], Value::Object(serde_json::Map::new()));
        let message = &document["diagnostics"][0]["message"];
        assert!(message.as_str().is_some_and(|message| !message.is_empty()), "{arguments:?}");
        assert!(!answer.words.is_empty(), "a reader is told too");
        let quiet = Answer::of(axirad(arguments).args(["--json", "--quiet"]).stdin(Stdio::null()));
        assert_eq!(quiet.results, answer.results);
    }
}

#[test]
fn several_specs_stand_under_their_files() {
    let folder = folder();
    let good = small_spec(folder.path(), "good.yaml");
    let wrong = folder.path().join("wrong.yaml");
    fs::write(&wrong, "format: axirad/1\ntitle: nothing\n").expect("the folder can be written");
    let mut command = axirad(["run", "--json", "wrong.yaml", "good.yaml"]);
    let answer = Answer::of(command.current_dir(folder.path()));
    drop((good, wrong));
    assert_eq!(answer.code, 2);
    assert_eq!(keys(&answer.results, "  "), ["format", "axirad", "runs"]);
    assert_eq!(keys(&answer.results, "    "), ["wrong.yaml", "good.yaml"]);
    let document = document(&answer.results);
    assert_eq!(document["runs"]["good.yaml"]["ended"], "outlet");
    assert!(document["runs"]["wrong.yaml"]["diagnostics"].as_array().is_some_and(|all| !all.is_empty()));
}

#[test]
fn a_check_says_what_was_understood_and_solves_nothing() {
    let answer = Answer::of(&mut axirad(["check", "--json", "--resolved", "specs/cases/case_c.yaml"]));
    assert_eq!(answer.code, 0);
    let document = document(&answer.results);
    assert_eq!(document["checked"]["kind"], "spec");
    assert_eq!(document["checked"]["sections"][0], "tube");
    assert_eq!(document["ended"], Value::Null);
    let line = document["resolved"].as_array().into_iter().flatten().find(|line| line["path"] == "feed.temperature");
    assert_eq!(
        line.map(|line| (&line["value"], &line["origin"])),
        Some((&"373.15 K".into(), &"specs/cases/case_c.yaml".into()))
    );
}
