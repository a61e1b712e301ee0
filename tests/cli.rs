//! The program as its users meet it: commands, exit codes, whole outputs, files, and what happens when things fail.
//!
//! The pages in `tests/cli/` are sessions: what is typed and what comes back, to the letter. Numbers have five
//! digits; what depends on rounding or on the machine is elided there by `[..]`.

use std::path::{Path, PathBuf};
use std::process::{Command, Output};

#[path = "cli/failures.rs"]
mod failures;
#[path = "cli/files.rs"]
mod files;
#[path = "cli/json.rs"]
mod json;

/// Variables that a user's shell may hold and that must not change a test.
const SHELL: [&str; 6] = ["NO_COLOR", "CLICOLOR", "CLICOLOR_FORCE", "FORCE_COLOR", "COLUMNS", "LINES"];

#[test]
fn every_session_is_answered_to_the_letter() {
    trycmd::TestCases::new()
        .case("README.md")
        .case("tests/cli/*.md")
        .case("tests/cli/*.toml")
        .env("COLUMNS", "80")
        .run();
}

/// The command, in the folder of the project.
fn axirad<S: AsRef<std::ffi::OsStr>>(arguments: impl IntoIterator<Item = S>) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_axirad"));
    command.current_dir(project()).args(arguments);
    for variable in SHELL {
        command.env_remove(variable);
    }
    command
}

/// The folder of the project.
fn project() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

/// What a command came to: exit code, results, words.
struct Answer {
    code: i32,
    results: String,
    words: String,
}

impl Answer {
    fn of(command: &mut Command) -> Self {
        let Output { status, stdout, stderr } = command.output().expect("the program starts");
        let text = |bytes| String::from_utf8(bytes).expect("it is UTF-8");
        Self { code: status.code().expect("it ends by itself"), results: text(stdout), words: text(stderr) }
    }
}

/// A small spec that is solved at once, in a folder of its own.
fn small_spec(folder: &Path, name: &str) -> PathBuf {
    let path = folder.join(name);
    let spec = include_str!("cli/small.yaml");
    std::fs::write(&path, spec).expect("the folder can be written");
    path
}

/// A folder that goes when the test ends.
fn folder() -> tempfile::TempDir {
    tempfile::tempdir().expect("there is room for a folder")
}
