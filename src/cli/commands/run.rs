//! `axirad run`: solve specs and report.

use std::path::{Path, PathBuf};

use super::super::arguments::{Everywhere, Run as Arguments, Write};
use super::super::exit_code::ExitCode;
use super::super::files::{FileKind, Folder};
use super::super::input;
use super::super::output::Console;
use super::super::problem::Problem;
use super::{Answer, given_twice, shown, stem};
use crate::export::csv;
use crate::report::json::{self, Outcome};
use crate::report::{brief, text};
use crate::simulate::{self, Run, Spec};

const AXIAL: FileKind = FileKind { name: "axial.csv", beginning: csv::PROFILE_BEGINNING };
const FIELD: FileKind = FileKind { name: "field.csv", beginning: csv::PROFILE_BEGINNING };
const QUANTITIES: FileKind = FileKind { name: "quantities.csv", beginning: csv::QUANTITIES_HEADER };
const RESULTS: FileKind = FileKind { name: "results.json", beginning: json::BEGINNING };

/// Solves each spec and reports it; what is wrong with one does not keep the others from being solved.
pub fn run(arguments: &Arguments, everywhere: Everywhere, console: &mut Console<'_>) -> ExitCode {
    let files = &arguments.specs.specs;
    let mut answer = Answer::new(console, everywhere, files.len());
    if let Some(problem) = given_twice(files).or_else(|| same_folder(arguments)) {
        return answer.refuse_command(&problem);
    }
    for file in files {
        run_one(file, arguments, &mut answer);
    }
    answer.finish()
}

fn run_one(file: &str, arguments: &Arguments, answer: &mut Answer<'_, '_>) {
    let bytes = match input::read(file) {
        Ok(bytes) => bytes,
        Err(problem) => return answer.fail(file, None, &problem),
    };
    let mut read = |name: &str| input::read_part(name);
    let spec = match simulate::read_spec(file, &bytes, &mut read, &arguments.specs.sets) {
        Ok(spec) => spec,
        Err(errors) => return answer.refuse(file, &errors),
    };
    let title = || spec.title.clone();
    let folder = match folder(file, arguments).map(|path| Folder::open(&path, &kinds(arguments), arguments.force)) {
        None => None,
        Some(Ok(folder)) => Some(folder),
        Some(Err(problem)) => return answer.fail(file, title(), &problem),
    };
    let run = match simulate::run(&spec, folder.is_some()) {
        Ok(run) => run,
        Err(error) => return answer.fail(file, title(), &Problem::of_numerics(&error)),
    };
    let code = if run.end.limit.is_some() { ExitCode::LimitLeft } else { ExitCode::Done };
    let text = report(file, &spec, &run, answer);
    answer.add(file, code, || Outcome::of_run(&spec, &run), &text);
    if let Some(folder) = folder {
        write(folder, &spec, &run, answer);
    }
}

/// The text for a reader; of several files each says which it is.
fn report(file: &str, spec: &Spec, run: &Run, answer: &Answer<'_, '_>) -> String {
    let everywhere = answer.everywhere;
    if everywhere.json {
        return String::new();
    }
    if everywhere.quiet {
        return brief(spec, run).iter().map(|line| format!("{}: {line}\n", shown(file))).collect();
    }
    let text = text::text(spec, run, stem(file), everywhere.verbose);
    if answer.several { format!("File {}\n\n{text}", shown(file)) } else { text }
}

/// The files that were asked for.
fn kinds(arguments: &Arguments) -> Vec<FileKind> {
    let of = |write: &Write| match write {
        Write::Csv => vec![AXIAL, FIELD, QUANTITIES],
        Write::Json => vec![RESULTS],
    };
    let mut kinds: Vec<FileKind> = arguments.write.iter().flat_map(of).collect();
    kinds.dedup();
    kinds
}

fn write(folder: Folder, spec: &Spec, run: &Run, answer: &mut Answer<'_, '_>) {
    let content = |kind: &FileKind| match (*kind, &run.tables) {
        (AXIAL, Some(tables)) => csv::profiles(&tables.along_z),
        (FIELD, Some(tables)) => csv::profiles(&tables.over_z_and_r),
        (QUANTITIES, _) => csv::quantities(&run.figures),
        (RESULTS, _) => json::document(&[(String::new(), Outcome::of_run(spec, run))], false).into_bytes(),
        _ => Vec::new(),
    };
    match folder.write(&content) {
        Ok(written) if answer.everywhere.quiet => drop(written),
        Ok(written) => {
            let names: Vec<String> = written.iter().map(|path| path.display().to_string()).collect();
            answer.say(&format!("wrote {}\n", names.join(", ")));
        }
        Err(problem) => {
            answer.say(&problem.draw());
            answer.code = answer.code.max(problem.code);
        }
    }
}

/// The folder of a spec's files: the one that was asked for, of several specs one in it.
fn folder(file: &str, arguments: &Arguments) -> Option<PathBuf> {
    let out: &Path = arguments.out.as_deref()?;
    Some(if arguments.specs.specs.len() > 1 { out.join(stem(file)) } else { out.to_owned() })
}

/// Two specs whose files would go into one folder.
fn same_folder(arguments: &Arguments) -> Option<Problem> {
    arguments.out.as_ref()?;
    let files = &arguments.specs.specs;
    let same = |(k, file): (usize, &String)| {
        let other = files[..k].iter().find(|other| stem(other) == stem(file))?;
        let message = format!("the files of `{other}` and `{file}` would go into one folder");
        Some(Problem::of_command(message, "run them apart, with an `--out` each"))
    };
    files.iter().enumerate().find_map(same)
}
