//! Reading the files of a spec.

use std::fs::File;
use std::io::{self, Read};
use std::path::Path;

use super::problem::{Problem, reason};

/// The name that stands for standard input.
pub const STANDARD_INPUT: &str = "-";

/// No file is read beyond this; the reader of specs refuses far smaller ones, but has to be told their size.
const MOST_BYTES: u64 = 64 << 20;

/// The bytes of a file, or of standard input for `-`.
///
/// # Errors
/// It cannot be read.
pub fn read(name: &str) -> Result<Vec<u8>, Problem> {
    let bytes = if name == STANDARD_INPUT { bytes_of(&mut io::stdin().lock()) } else { bytes_of_file(name) };
    let shown = if name == STANDARD_INPUT { "standard input" } else { name };
    bytes.map_err(|error| Problem::of_file("read", shown, &error))
}

/// The bytes of a part that a spec includes; the error is the system's reason.
///
/// # Errors
/// It cannot be read.
pub fn read_part(name: &str) -> Result<Vec<u8>, String> {
    bytes_of_file(name).map_err(|error| reason(&error))
}

fn bytes_of_file(name: &str) -> io::Result<Vec<u8>> {
    bytes_of(&mut File::open(Path::new(name))?)
}

fn bytes_of(from: &mut dyn Read) -> io::Result<Vec<u8>> {
    let mut bytes = Vec::new();
    from.take(MOST_BYTES).read_to_end(&mut bytes)?;
    Ok(bytes)
}
