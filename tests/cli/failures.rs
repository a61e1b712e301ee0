//! What happens when the world does not play along.

use std::fs;
use std::io::Read;
use std::path::Path;
use std::process::{Command, Stdio};

use crate::{Answer, axirad, folder, small_spec};

#[test]
fn a_full_disk_is_exit_code_5_and_said() {
    let full = Path::new("/dev/full");
    if !full.exists() {
        return; // only some systems have it
    }
    let commands: [&[&str]; 5] = [
        &["run", "specs/cases/case_a.yaml"],
        &["run", "specs/cases/case_a.yaml", "--json"],
        &["check", "specs/cases/case_a.yaml", "--resolved"],
        &["--help"],
        &["--version"],
    ];
    for arguments in commands {
        let target = fs::OpenOptions::new().write(true).open(full).expect("it can be opened");
        let answer = Answer::of(axirad(arguments).stdout(Stdio::from(target)));
        assert_eq!(answer.code, 5, "{arguments:?}");
        assert!(answer.words.contains("error: cannot write the results: "), "{}", answer.words);
    }
}

#[test]
fn words_that_cannot_be_written_are_exit_code_5() {
    let Ok(full) = fs::OpenOptions::new().write(true).open("/dev/full") else { return };
    let mut command = axirad(["run", "specs/cases/nothing.yaml"]);
    let status = command.stderr(Stdio::from(full)).stdout(Stdio::null()).status().expect("the program starts");
    assert_eq!(status.code(), Some(5));
}

#[test]
fn a_pipe_that_is_closed_ends_in_silence_and_files_are_still_written() {
    let folder = folder();
    let out = folder.path().join("out");
    for arguments in [["--verbose"], ["--json"]] {
        let mut command = axirad(["run", "specs/cases/case_a.yaml", "--out"]);
        command.arg(&out).args(arguments).stdout(Stdio::piped()).stderr(Stdio::piped());
        let mut child = command.spawn().expect("the program starts");
        drop(child.stdout.take());
        let mut words = String::new();
        child.stderr.take().expect("it is piped").read_to_string(&mut words).expect("it is UTF-8");
        assert_eq!(child.wait().expect("it ends").code(), Some(0));
        assert!(words.starts_with("wrote ") && words.lines().count() == 1, "{words}");
        assert!(out.join("axial.csv").exists());
    }
}

#[test]
fn a_folder_that_cannot_be_written_is_exit_code_5_before_anything_is_computed() {
    let folder = folder();
    let spec = small_spec(folder.path(), "small.yaml");
    let locked = folder.path().join("locked");
    fs::create_dir(&locked).expect("there is room");
    let mut permissions = fs::metadata(&locked).expect("it is there").permissions();
    permissions.set_readonly(true);
    fs::set_permissions(&locked, permissions).expect("it is ours");
    let may_still_write = fs::write(locked.join("probe"), "").is_ok(); // root may
    let mut outs = vec![spec.clone(), spec.join("below")];
    if !may_still_write {
        outs.extend([locked.clone(), locked.join("below")]);
    }
    if Path::new("/proc/self").exists() {
        outs.push("/proc/axirad".into());
    }
    for out in outs {
        let answer = Answer::of(axirad(["run"]).arg(&spec).arg("--out").arg(&out));
        assert_eq!(answer.code, 5, "{}", out.display());
        assert!(answer.results.is_empty(), "{}", out.display());
        assert!(answer.words.starts_with("error: cannot write `"), "{}", answer.words);
    }
}

#[test]
fn a_folder_in_the_place_of_a_file_is_left_alone() {
    let folder = folder();
    let spec = small_spec(folder.path(), "small.yaml");
    fs::create_dir(folder.path().join("axial.csv")).expect("there is room");
    let answer = Answer::of(axirad(["run", "--force"]).arg(&spec).arg("--out").arg(folder.path()));
    assert_eq!(answer.code, 5);
    assert!(answer.words.contains("it is a folder"), "{}", answer.words);
    assert!(folder.path().join("axial.csv").is_dir());
}

/// A limit of the system on the size of files stands for a disk that fills up in the middle of one.
#[cfg(unix)]
#[test]
fn a_disk_that_fills_up_leaves_the_earlier_files_as_they_were() {
    let folder = folder();
    let spec = small_spec(folder.path(), "small.yaml");
    let out = folder.path().join("out");
    assert_eq!(Answer::of(axirad(["run"]).arg(&spec).arg("--out").arg(&out)).code, 0);
    let content = |name: &str| fs::read(out.join(name)).expect("it is there");
    let before = ["axial.csv", "field.csv", "quantities.csv"].map(content);
    let mut limited = Command::new("sh");
    limited.args(["-c", "trap '' XFSZ; ulimit -f 4; exec \"$0\" \"$@\"", env!("CARGO_BIN_EXE_axirad"), "run"]);
    limited.arg(&spec).args(["--set", "numerics.stream_tubes=40", "--out"]).arg(&out);
    let answer = Answer::of(&mut limited);
    assert_eq!(answer.code, 5, "{}", answer.words);
    assert!(answer.words.contains("error: cannot write `"), "{}", answer.words);
    let after = ["axial.csv", "field.csv", "quantities.csv"].map(content);
    assert!(before == after, "a file was changed");
    assert_eq!(fs::read_dir(&out).expect("it is there").count(), 3, "no temporary file is left");
}

#[test]
fn a_spec_that_cannot_be_read_is_exit_code_5() {
    let folder = folder();
    let missing = folder.path().join("missing.yaml");
    for name in [missing.as_path(), folder.path()] {
        for command in ["run", "check"] {
            let answer = Answer::of(axirad([command]).arg(name));
            assert_eq!(answer.code, 5);
            assert!(answer.words.starts_with("error: cannot read `"), "{}", answer.words);
        }
    }
}

#[test]
fn of_several_outcomes_the_largest_counts_and_all_are_told() {
    let folder = folder();
    let good = small_spec(folder.path(), "good.yaml");
    let wrong = folder.path().join("wrong.yaml");
    fs::write(&wrong, "format: axirad/1\n").expect("the folder can be written");
    let answer = Answer::of(axirad(["run", "--quiet"]).args([&wrong, &good]));
    assert_eq!(answer.code, 2);
    assert!(answer.words.contains("wrong.yaml"), "{}", answer.words);
    assert!(answer.results.contains("good.yaml: broken: hot_spot.temperature"), "{}", answer.results);
    let limit = "limits.temperature.highest=45 degC";
    let answer = Answer::of(axirad(["run", "--quiet", "--set", limit]).args([&wrong, &good]));
    assert_eq!(answer.code, 3, "{}", answer.words);
    let missing = folder.path().join("missing.yaml");
    let answer = Answer::of(axirad(["run", "--quiet", "--set", limit]).args([&good, &missing]));
    assert_eq!(answer.code, 5);
    assert!(answer.results.contains("good.yaml: ended at z = "), "{}", answer.results);
}

#[test]
fn colour_comes_only_where_it_is_asked_for() {
    let colourful = |answer: &Answer| answer.words.contains('\u{1b}');
    for arguments in [["run", "specs/cases/case_a.yaml", "--set", "feed.x=1"], ["run", "-", "--oops", "--json"]] {
        let plain = Answer::of(axirad(arguments).stdin(Stdio::null()));
        assert!(!colourful(&plain) && plain.code == 2, "{}", plain.words);
        let asked = Answer::of(axirad(arguments).args(["--color", "always"]).stdin(Stdio::null()));
        assert!(colourful(&asked), "{}", asked.words);
        let not = Answer::of(axirad(arguments).args(["--color=never"]).env("CLICOLOR_FORCE", "1").stdin(Stdio::null()));
        assert!(!colourful(&not), "{}", not.words);
    }
}
