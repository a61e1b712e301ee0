//! The one way to the terminal: a writer that checks every write.
//!
//! A pipe that the reader closed is no error: what would follow is dropped in silence. Anything else, a full disk
//! above all, is kept and becomes exit code 5 at the end. Nothing else in axirad writes to the terminal.

use std::io::{self, Write};

use anstream::{AutoStream, ColorChoice};
use clap::ValueEnum;

use super::exit_code::ExitCode;
use super::problem::{Problem, reason};

/// When to use colour; meaning never depends on it.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, ValueEnum)]
pub enum Colour {
    /// On a terminal, unless the environment says no.
    #[default]
    Auto,
    /// Always.
    Always,
    /// Never.
    Never,
}

/// A stream whose writes are checked.
pub struct Stream<'w> {
    to: Box<dyn Write + 'w>,
    /// Whether the reader has closed the pipe.
    closed: bool,
    failure: Option<io::Error>,
}

impl<'w> Stream<'w> {
    /// A stream to a writer.
    #[must_use]
    pub fn new(to: Box<dyn Write + 'w>) -> Self {
        Self { to, closed: false, failure: None }
    }

    /// Writes a text; after a failure nothing more.
    pub fn write(&mut self, text: &str) {
        self.attempt(|to| to.write_all(text.as_bytes()));
    }

    /// Passes on what was written, and says what went wrong since the stream was opened.
    pub fn finish(&mut self) -> Option<io::Error> {
        self.attempt(|to| to.flush());
        self.failure.take()
    }

    fn attempt(&mut self, act: impl FnOnce(&mut dyn Write) -> io::Result<()>) {
        if self.closed || self.failure.is_some() {
            return;
        }
        match act(self.to.as_mut()) {
            Err(error) if error.kind() == io::ErrorKind::BrokenPipe => self.closed = true,
            outcome => self.failure = outcome.err(),
        }
    }
}

/// Results on one stream, words on the other.
pub struct Console<'w> {
    /// Results: standard output.
    pub results: Stream<'w>,
    /// Words: standard error.
    pub words: Stream<'w>,
    /// Whether words may be coloured.
    pub colour: bool,
}

impl Console<'static> {
    /// The streams of the process.
    #[must_use]
    pub fn of_process(colour: Colour) -> Self {
        let choice = match colour {
            Colour::Always => ColorChoice::Always,
            Colour::Never => ColorChoice::Never,
            Colour::Auto => AutoStream::choice(&io::stderr()),
        };
        let results = match colour {
            Colour::Always => ColorChoice::Always,
            Colour::Never => ColorChoice::Never,
            Colour::Auto => AutoStream::choice(&io::stdout()),
        };
        Self {
            results: Stream::new(Box::new(AutoStream::new(io::stdout(), results))),
            words: Stream::new(Box::new(AutoStream::new(io::stderr(), choice))),
            colour: choice != ColorChoice::Never,
        }
    }
}

impl Console<'_> {
    /// Ends the output: the code of a command, raised if its results could not be written.
    pub fn finish(&mut self, code: ExitCode) -> ExitCode {
        let failed = self.results.finish();
        let code = match failed {
            None => code,
            Some(error) => {
                let problem = Problem::of_outside(format!("cannot write the results: {}", reason(&error)), None);
                self.words.write(&problem.draw());
                code.max(problem.code)
            }
        };
        // where words cannot be written there is nowhere to say so
        match self.words.finish() {
            None => code,
            Some(_) => code.max(ExitCode::OutsideFailed),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Takes so many bytes, then fails in one way.
    struct Failing<'b> {
        taken: &'b mut Vec<u8>,
        room: usize,
        kind: io::ErrorKind,
    }

    impl Write for Failing<'_> {
        fn write(&mut self, bytes: &[u8]) -> io::Result<usize> {
            if self.taken.len() >= self.room {
                return Err(self.kind.into());
            }
            self.taken.extend(bytes.first());
            Ok(bytes.len().min(1))
        }

        fn flush(&mut self) -> io::Result<()> {
            if self.taken.len() >= self.room { Err(self.kind.into()) } else { Ok(()) }
        }
    }

    fn code_after(room: usize, kind: io::ErrorKind) -> (ExitCode, String) {
        let (mut taken, mut said) = (Vec::new(), Vec::new());
        let mut console = Console {
            results: Stream::new(Box::new(Failing { taken: &mut taken, room, kind })),
            words: Stream::new(Box::new(&mut said)),
            colour: false,
        };
        console.results.write("results");
        console.results.write(" and more");
        let code = console.finish(ExitCode::Done);
        drop(console);
        (code, String::from_utf8(said).expect("it is UTF-8"))
    }

    #[test]
    fn a_disk_that_fills_up_at_any_byte_is_an_error_that_is_said_once() {
        for room in 0..16 {
            let (code, said) = code_after(room, io::ErrorKind::StorageFull);
            assert_eq!(code, ExitCode::OutsideFailed, "{room}");
            assert_eq!(said.matches("cannot write the results").count(), 1, "{said}");
        }
        assert_eq!(code_after(99, io::ErrorKind::StorageFull), (ExitCode::Done, String::new()));
    }

    #[test]
    fn a_pipe_that_is_closed_at_any_byte_is_no_error() {
        for room in 0..16 {
            assert_eq!(code_after(room, io::ErrorKind::BrokenPipe), (ExitCode::Done, String::new()));
        }
    }
}
