//! The commands, a file each.

pub mod check;
pub mod run;

use serde_json::Value as Json;

use super::arguments::Everywhere;
use super::diagnostic;
use super::exit_code::ExitCode;
use super::input::STANDARD_INPUT;
use super::output::Console;
use super::problem::Problem;
use crate::report::json::{Outcome, document};
use crate::spec::SpecError;

/// What a command says of its files, in the form that was asked for.
struct Answer<'c, 'w> {
    console: &'c mut Console<'w>,
    everywhere: Everywhere,
    several: bool,
    /// Whether a text was written.
    is_begun: bool,
    outcomes: Vec<(String, Outcome)>,
    code: ExitCode,
}

impl<'c, 'w> Answer<'c, 'w> {
    fn new(console: &'c mut Console<'w>, everywhere: Everywhere, files: usize) -> Self {
        Self { console, everywhere, several: files > 1, is_begun: false, outcomes: Vec::new(), code: ExitCode::Done }
    }

    /// Adds what became of a file: its document, and the text for a reader.
    fn add(&mut self, file: &str, code: ExitCode, outcome: impl FnOnce() -> Outcome, text: &str) {
        self.code = self.code.max(code);
        if self.everywhere.json {
            self.outcomes.push((file.to_owned(), outcome()));
            return;
        }
        if !text.is_empty() {
            let gap = if self.is_begun && !self.everywhere.quiet { "\n\n" } else { "" };
            self.console.results.write(&format!("{gap}{text}"));
            self.is_begun = true;
        }
    }

    /// Says something to a reader; one who wants the document and quiet has it there alone.
    fn say(&mut self, words: &str) {
        if !(self.everywhere.json && self.everywhere.quiet) {
            self.console.words.write(words);
        }
    }

    /// Adds a file that yielded nothing, for one reason.
    fn fail(&mut self, file: &str, title: Option<String>, problem: &Problem) {
        self.say(&problem.draw());
        let diagnostics: Vec<Json> = vec![problem.to_json()];
        self.add(file, problem.code, || Outcome::of_failure(title, diagnostics), "");
    }

    /// Adds a file that is wrong.
    fn refuse(&mut self, file: &str, errors: &[SpecError]) {
        let drawn = diagnostic::draw_all(errors, self.console.colour);
        self.say(&drawn);
        let outcome = || Outcome::of_failure(None, errors.iter().map(diagnostic::to_json).collect());
        self.add(file, ExitCode::WrongInput, outcome, "");
    }

    /// Ends the answer because the command line is wrong.
    fn refuse_command(mut self, problem: &Problem) -> ExitCode {
        self.several = false;
        self.fail("", None, problem);
        self.finish()
    }

    /// Ends the answer.
    fn finish(self) -> ExitCode {
        if self.everywhere.json {
            self.console.results.write(&document(&self.outcomes, self.several));
        }
        self.code
    }
}

/// A file as a reader knows it.
fn shown(file: &str) -> &str {
    if file == STANDARD_INPUT { "standard input" } else { file }
}

/// A file's name without its folder and ending.
fn stem(file: &str) -> &str {
    if file == STANDARD_INPUT {
        return "standard_input";
    }
    std::path::Path::new(file).file_stem().and_then(|stem| stem.to_str()).unwrap_or(file)
}

/// Files that are given twice: each is read once.
fn given_twice(files: &[String]) -> Option<Problem> {
    let twice = files.iter().enumerate().find(|(k, file)| files[..*k].contains(file));
    let message = |file: &str| format!("`{file}` is given twice");
    twice.map(|(_, file)| Problem::of_command(message(file), "give each file once"))
}
