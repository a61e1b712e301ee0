//! What can be typed: commands and options.

use std::path::PathBuf;

use clap::{Args, Parser, Subcommand, ValueEnum};

use super::output::Colour;

/// Columns of a help text.
const WIDTH: usize = 80;

/// Laminar tubular reactors whose fluid changes as it reacts: temperature,
/// conversion, molar masses and pressure along the tube and across it.
#[derive(Debug, Parser)]
#[command(
    name = "axirad",
    version,
    max_term_width = WIDTH,
    arg_required_else_help = true,
    disable_help_subcommand = true,
    after_help = EXAMPLES
)]
pub struct Arguments {
    /// The command.
    #[command(subcommand)]
    pub command: Command,
    /// What every command takes.
    #[command(flatten)]
    pub everywhere: Everywhere,
}

const EXAMPLES: &str = "\
Examples:
  axirad check specs/cases/case_a.yaml
  axirad run specs/cases/case_a.yaml

Exit codes: 0 done; 2 the command line or a spec is wrong; 3 a run ended at a
limit of its spec; 4 the numerics failed; 5 a file cannot be read or written;
70 a fault of axirad itself. Of several outcomes the largest counts.";

/// Options of every command.
#[derive(Args, Clone, Copy, Debug)]
pub struct Everywhere {
    /// One JSON document with the same content, failures included
    #[arg(long, global = true)]
    pub json: bool,
    /// Only what must not be missed, a line each
    #[arg(long, short, global = true, conflicts_with = "verbose")]
    pub quiet: bool,
    /// All quantities and the work done as well
    #[arg(long, short, global = true)]
    pub verbose: bool,
    /// Colour in messages: auto, always or never
    #[arg(long, global = true, value_enum, value_name = "WHEN", default_value_t, hide_possible_values = true)]
    pub color: Colour,
}

/// A command.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Solve specs and report
    Run(Run),
    /// Read specs and parts and say what they describe, without solving
    Check(Check),
}

/// Specs, and values set by path.
#[derive(Args, Debug)]
pub struct Specs {
    /// Files to read; `-` is standard input
    #[arg(required = true, value_name = "SPEC")]
    pub specs: Vec<String>,
    /// Give a key another value, as in `feed.temperature=95 degC`; may be repeated
    #[arg(long = "set", value_name = "PATH=VALUE")]
    pub sets: Vec<String>,
}

/// `axirad run`.
#[derive(Args, Debug)]
#[command(after_help = RUN_EXAMPLES)]
pub struct Run {
    /// What is run.
    #[command(flatten)]
    pub specs: Specs,
    /// Write files into this folder; of several specs a folder in it for each
    #[arg(long, value_name = "DIR")]
    pub out: Option<PathBuf>,
    /// What to write: csv is axial.csv, field.csv and quantities.csv; json is results.json
    #[arg(
        long,
        value_enum,
        value_name = "KINDS",
        value_delimiter = ',',
        default_value = "csv",
        requires = "out",
        hide_possible_values = true
    )]
    pub write: Vec<Write>,
    /// Write over files that axirad did not write
    #[arg(long, requires = "out")]
    pub force: bool,
}

const RUN_EXAMPLES: &str = "\
Examples:
  axirad run specs/cases/case_c.yaml --set \"feed.temperature=95 degC\"
  axirad run specs/cases/case_a.yaml specs/cases/case_b.yaml --out results";

/// A kind of files.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Write {
    /// Tables.
    Csv,
    /// The document of `--json`.
    Json,
}

/// `axirad check`.
#[derive(Args, Debug)]
#[command(after_help = CHECK_EXAMPLES)]
pub struct Check {
    /// What is checked.
    #[command(flatten)]
    pub specs: Specs,
    /// Print every key with its value in SI and who gave it, a line each
    #[arg(long)]
    pub resolved: bool,
}

const CHECK_EXAMPLES: &str = "\
Examples:
  axirad check specs/cases/case_b.yaml specs/cases/materials/styrene.yaml
  axirad check specs/cases/case_c.yaml --resolved";
