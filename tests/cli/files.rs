//! Files that a run leaves.

use std::fs;
use std::path::Path;

use crate::{Answer, axirad, folder, project, small_spec};

const TABLES: [&str; 3] = ["axial.csv", "field.csv", "quantities.csv"];

fn names_in(folder: &Path) -> Vec<String> {
    let entries = fs::read_dir(folder).expect("the folder is there");
    let name = |entry: Result<fs::DirEntry, _>| entry.expect("it can be listed").file_name().into_string();
    let mut names: Vec<String> = entries.map(|entry| name(entry).expect("names are UTF-8")).collect();
    names.sort();
    names
}

fn first_line(path: &Path) -> String {
    let text = fs::read_to_string(path).expect("the file is there");
    text.lines().next().unwrap_or_default().to_owned()
}

#[test]
fn out_writes_three_tables_with_units_in_their_headers() {
    let folder = folder();
    let (spec, out) = (small_spec(folder.path(), "small.yaml"), folder.path().join("results/of today"));
    let answer = Answer::of(axirad(["run"]).arg(&spec).arg("--out").arg(&out));
    assert_eq!(answer.code, 0, "{}", answer.words);
    assert!(answer.words.starts_with("wrote "), "{}", answer.words);
    assert_eq!(names_in(&out), TABLES);
    assert!(first_line(&out.join("axial.csv")).starts_with("section,z_m,temperature_K,highest_temperature_K,"));
    assert!(
        first_line(&out.join("field.csv")).starts_with("section,z_m,tube,r_m,r_inner_m,r_outer_m,velocity_m_per_s,")
    );
    assert_eq!(first_line(&out.join("quantities.csv")), "quantity,value,unit,reason");
}

#[test]
fn tables_have_a_row_for_each_station_and_stream_tube_and_no_nan() {
    let folder = folder();
    let spec = small_spec(folder.path(), "small.yaml");
    Answer::of(axirad(["run"]).arg(&spec).arg("--out").arg(folder.path()));
    let text = |name: &str| fs::read_to_string(folder.path().join(name)).expect("the file is there");
    // 5 stations, a place, and both ends of the two sections
    let stations = text("axial.csv").lines().count() - 1;
    assert_eq!(stations, 8);
    assert_eq!(text("field.csv").lines().count() - 1, 8 * stations);
    for name in TABLES {
        let text = text(name);
        assert!(!text.to_lowercase().contains("nan") && !text.contains("inf"), "{name}");
        assert!(text.ends_with('\n') && !text.contains('\r'), "{name}");
        let cells = |line: &str| line.split(',').count();
        let header = text.lines().next().map(cells);
        assert!(name == "quantities.csv" || text.lines().all(|line| Some(cells(line)) == header), "{name}");
    }
}

#[test]
fn several_specs_have_a_folder_each() {
    let folder = folder();
    let (one, two) = (small_spec(folder.path(), "one.yaml"), small_spec(folder.path(), "two.yaml"));
    let out = folder.path().join("out");
    let answer = Answer::of(axirad(["run", "--write", "csv,json"]).args([&one, &two]).arg("--out").arg(&out));
    assert_eq!(answer.code, 0, "{}", answer.words);
    assert_eq!(names_in(&out), ["one", "two"]);
    assert_eq!(names_in(&out.join("two")), ["axial.csv", "field.csv", "quantities.csv", "results.json"]);
}

#[test]
fn two_specs_are_not_written_into_one_folder() {
    let folder = folder();
    fs::create_dir(folder.path().join("a")).expect("there is room");
    let (one, two) = (small_spec(folder.path(), "x.yaml"), small_spec(&folder.path().join("a"), "x.yaml"));
    let out = folder.path().join("out");
    let answer = Answer::of(axirad(["run"]).args([&one, &two]).arg("--out").arg(&out));
    assert_eq!(answer.code, 2);
    assert!(answer.words.contains("would go into one folder"), "{}", answer.words);
    assert!(answer.results.is_empty() && !out.exists());
}

#[test]
fn our_own_files_are_replaced_and_others_only_by_force() {
    let folder = folder();
    let (spec, out) = (small_spec(folder.path(), "small.yaml"), folder.path().join("out"));
    let run =
        |more: &[&str]| Answer::of(axirad(["run", "--write", "csv,json"]).arg(&spec).arg("--out").arg(&out).args(more));
    assert_eq!(run(&[]).code, 0);
    assert_eq!(run(&[]).code, 0, "all of them are ours");
    let foreign = out.join("field.csv");
    for content in ["", "x,y\n1,2\n", "section"] {
        fs::write(&foreign, content).expect("the folder can be written");
        let answer = run(&[]);
        assert_eq!(answer.code, 5);
        assert!(answer.results.is_empty(), "nothing is computed before the files are open");
        assert!(answer.words.contains("field.csv` was not written by axirad"), "{}", answer.words);
        assert_eq!(fs::read_to_string(&foreign).ok().as_deref(), Some(content));
    }
    assert_eq!(run(&["--force"]).code, 0);
    assert!(first_line(&foreign).starts_with("section,z_m,tube,"));
    assert_eq!(names_in(&out).len(), 4, "no temporary file is left");
}

#[test]
fn a_wrong_spec_leaves_no_folder() {
    let folder = folder();
    let (spec, out) = (small_spec(folder.path(), "small.yaml"), folder.path().join("out"));
    let answer = Answer::of(axirad(["run", "--set", "feed.temperatur=1 K"]).arg(&spec).arg("--out").arg(&out));
    assert_eq!(answer.code, 2);
    assert!(!out.exists());
}

#[test]
fn names_may_hold_blanks_other_letters_and_a_leading_dash() {
    let folder = folder();
    for name in ["bulk styr\u{e8}ne 140 \u{b0}C.yaml", "-x.yaml", "caf\u{65}\u{301} (1).spec"] {
        small_spec(folder.path(), name);
        let out = folder.path().join(format!("out of {name}"));
        let answer = Answer::of(axirad(["run", "--out"]).arg(&out).args(["--", name]).current_dir(folder.path()));
        assert_eq!(answer.code, 0, "{name}: {}", answer.words);
        assert_eq!(names_in(&out), TABLES);
        let mut checked = axirad(["check", "--", name]);
        let answer = Answer::of(checked.current_dir(folder.path()));
        assert!(answer.results.starts_with(&format!("{name}: a valid spec\n")), "{}", answer.results);
    }
}

#[test]
fn the_same_spec_gives_the_same_bytes_wherever_and_whenever() {
    let (here, there) = (folder(), folder());
    let all = |folder: &Path, zone: &str| {
        let spec = small_spec(folder, "small.yaml");
        let mut command = axirad(["run", "small.yaml", "--verbose", "--write", "csv,json", "--out", "out"]);
        command.current_dir(folder).env("TZ", zone).env("LC_ALL", "de_DE.UTF-8").env("USER", zone);
        let answer = Answer::of(&mut command);
        let json = Answer::of(axirad(["run", "small.yaml", "--json"]).current_dir(folder)).results;
        let names = names_in(&folder.join("out"));
        let files = names.iter().map(|name| fs::read(folder.join("out").join(name)).expect("it is there"));
        let files: Vec<Vec<u8>> = files.collect();
        assert_eq!(Some(&json.into_bytes()), files.last(), "results.json is what --json prints");
        drop(spec);
        (answer.results, names, files)
    };
    assert_eq!(all(here.path(), "Europe/Paris"), all(there.path(), "Asia/Tokyo"));
}

#[test]
fn the_examples_of_every_help_run() {
    let folder = folder();
    copy(&project().join("specs"), &folder.path().join("specs"));
    let mut run = 0;
    for command in [vec![], vec!["run"], vec!["check"]] {
        let help = Answer::of(axirad(&command).arg("--help"));
        assert_eq!(help.code, 0);
        let examples = help.results.lines().skip_while(|line| *line != "Examples:").skip(1);
        let examples: Vec<&str> = examples.filter_map(|line| line.strip_prefix("  axirad ")).collect();
        assert_eq!(examples.len(), 2, "{}", help.results);
        for example in examples {
            let quoted = example.split('"').enumerate();
            let words =
                quoted.flat_map(|(k, part)| if k % 2 == 1 { vec![part] } else { part.split_whitespace().collect() });
            let answer = Answer::of(axirad(words).current_dir(folder.path()));
            assert_eq!(answer.code, 0, "{example}: {}", answer.words);
            run += 1;
        }
    }
    assert_eq!(run, 6);
}

fn copy(from: &Path, to: &Path) {
    fs::create_dir_all(to).expect("there is room");
    for entry in fs::read_dir(from).expect("the folder is there") {
        let entry = entry.expect("it can be listed");
        let target = to.join(entry.file_name());
        if entry.path().is_dir() {
            copy(&entry.path(), &target);
        } else {
            fs::copy(entry.path(), target).expect("there is room");
        }
    }
}
