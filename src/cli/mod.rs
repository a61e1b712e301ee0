//! The command line: reads arguments and files, prints, writes files, and owns the table of exit codes.
//!
//! Nothing outside this folder prints. Results go to standard output, words to standard error, both through the
//! checked writer of [`output`].

#![deny(clippy::print_stdout, clippy::print_stderr)]

pub mod arguments;
pub mod commands;
pub mod diagnostic;
pub mod exit_code;
mod files;
mod input;
pub mod output;
mod problem;

use std::ffi::OsString;
use std::panic::{self, AssertUnwindSafe, PanicHookInfo};
use std::sync::{Arc, Mutex};

use clap::Parser;
use serde_json::json;

use self::arguments::{Arguments, Command};
use self::exit_code::ExitCode;
use self::output::{Colour, Console};
use crate::report::json::{Outcome, document};

/// Runs the command that the arguments say, the program's own name first.
pub fn main_with(arguments: impl IntoIterator<Item = OsString>) -> std::process::ExitCode {
    let arguments: Vec<OsString> = arguments.into_iter().collect();
    let (code, fault) = guarded(|| command(&arguments));
    let Some(fault) = fault else { return code.into() };
    let mut console = Console::of_process(Colour::Never);
    console.words.write(&fault_report(&fault));
    console.finish(code).into()
}

fn command(arguments: &[OsString]) -> ExitCode {
    match Arguments::try_parse_from(arguments) {
        Ok(arguments) => {
            let everywhere = arguments.everywhere;
            let mut console = Console::of_process(everywhere.color);
            let code = match arguments.command {
                Command::Run(run) => commands::run::run(&run, everywhere, &mut console),
                Command::Check(check) => commands::check::check(&check, everywhere, &mut console),
            };
            console.finish(code)
        }
        Err(error) => {
            let mut console = Console::of_process(colour_of(arguments));
            let text = error.render().ansi().to_string();
            if !error.use_stderr() {
                console.results.write(&text);
                return console.finish(ExitCode::Done);
            }
            console.words.write(&text);
            if arguments.iter().any(|argument| argument == "--json") {
                let diagnostic = json!({ "message": error.to_string().trim_end() });
                let outcome = Outcome::of_failure(None, vec![diagnostic]);
                console.results.write(&document(&[(String::new(), outcome)], false));
            }
            console.finish(ExitCode::WrongInput)
        }
    }
}

/// What `--color` asks for on a command line that could not be read.
fn colour_of(arguments: &[OsString]) -> Colour {
    let asks = |word: &str| {
        let joined = arguments.iter().any(|argument| argument.to_str() == Some(&format!("--color={word}")));
        joined || arguments.windows(2).any(|pair| pair[0] == "--color" && pair[1] == word)
    };
    match (asks("never"), asks("always")) {
        (true, _) => Colour::Never,
        (false, true) => Colour::Always,
        (false, false) => Colour::Auto,
    }
}

/// Does some work; if it panics, the code of a fault and what the panic said.
fn guarded(work: impl FnOnce() -> ExitCode) -> (ExitCode, Option<String>) {
    let said = Arc::new(Mutex::new(None));
    let heard = Arc::clone(&said);
    let before = panic::take_hook();
    panic::set_hook(Box::new(move |info| {
        if let Ok(mut heard) = heard.lock() {
            *heard = Some(words_of(info));
        }
    }));
    let outcome = panic::catch_unwind(AssertUnwindSafe(work));
    panic::set_hook(before);
    match outcome {
        Ok(code) => (code, None),
        Err(_) => {
            let said = said.lock().ok().and_then(|mut said| said.take());
            (ExitCode::Fault, Some(said.unwrap_or_else(|| "nothing is known of it".to_owned())))
        }
    }
}

/// What a panic says, and where in the sources it happened.
fn words_of(info: &PanicHookInfo<'_>) -> String {
    let payload = info.payload();
    let words =
        payload.downcast_ref::<&str>().copied().or_else(|| payload.downcast_ref::<String>().map(String::as_str));
    let place = info.location().map(|place| format!(" ({}, line {})", end_of(place.file()), place.line()));
    format!("{}{}", words.unwrap_or("no words"), place.unwrap_or_default())
}

/// The last steps of a path: which file of which crate, not where it lay when axirad was built.
fn end_of(path: &str) -> String {
    let steps: Vec<&str> = path.split(['/', '\\']).collect();
    steps[steps.len().saturating_sub(4)..].join("/")
}

fn fault_report(fault: &str) -> String {
    format!(
        "error: this is a fault of axirad itself, not of your input: {fault}\n  help: please report it with this \
         message, the version (axirad {}), the command line, and the spec with its parts\n",
        env!("CARGO_PKG_VERSION")
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_panic_becomes_exit_code_70_and_is_told() {
        let (code, fault) = guarded(|| panic!("the tube has no {}", "wall"));
        assert_eq!(code, ExitCode::Fault);
        let fault = fault.expect("it is told");
        assert!(fault.starts_with("the tube has no wall (src/cli/mod.rs, line "), "{fault}");
        assert!(fault_report(&fault).contains(env!("CARGO_PKG_VERSION")));
        assert_eq!(guarded(|| ExitCode::LimitLeft), (ExitCode::LimitLeft, None));
    }

    #[test]
    fn the_place_of_a_fault_names_no_folder_of_the_builder() {
        assert_eq!(end_of("src/cli/mod.rs"), "src/cli/mod.rs");
        assert_eq!(end_of("/a/b/registry/solver-0.19/src/ode/bdf.rs"), "solver-0.19/src/ode/bdf.rs");
        assert_eq!(end_of("C:\\a\\b\\solver-0.19\\src\\ode\\bdf.rs"), "solver-0.19/src/ode/bdf.rs");
    }

    #[test]
    fn colour_is_known_on_a_command_line_that_is_wrong() {
        let arguments = |words: &[&str]| words.iter().map(OsString::from).collect::<Vec<OsString>>();
        assert_eq!(colour_of(&arguments(&["axirad", "--color", "never", "rnu"])), Colour::Never);
        assert_eq!(colour_of(&arguments(&["axirad", "rnu", "--color=always"])), Colour::Always);
        assert_eq!(colour_of(&arguments(&["axirad", "rnu"])), Colour::Auto);
    }
}
