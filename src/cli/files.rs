//! Files that a run leaves: whole or not at all, and never over a file that is not ours.
//!
//! A file is written under a temporary name in its own folder and takes its place when it is complete, so that a
//! full disk or a stopped program leaves the earlier file as it was. A file that exists is replaced if it begins as
//! axirad's files of that name begin (the header of a table, the first keys of a document), or with `--force`.
//! Everything is opened before anything is computed.

use std::fs::{self, File};
use std::io::{self, Read, Write};
use std::path::{Path, PathBuf};

use tempfile::NamedTempFile;

use super::problem::Problem;

/// A file to be written: its name, and how a file of ours begins.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct FileKind {
    /// The name in the folder.
    pub name: &'static str,
    /// How every such file of ours begins.
    pub beginning: &'static str,
}

/// A folder with room for files that come later.
#[derive(Debug)]
pub struct Folder {
    files: Vec<(FileKind, PathBuf, NamedTempFile)>,
}

impl Folder {
    /// Makes the folder and opens its files under temporary names.
    ///
    /// # Errors
    /// It cannot be written to, or holds a file of one of the names that is not ours.
    pub fn open(folder: &Path, kinds: &[FileKind], force: bool) -> Result<Self, Problem> {
        let failed = |path: &Path, error: &io::Error| Problem::of_file("write", &path.display().to_string(), error);
        fs::create_dir_all(folder).map_err(|error| failed(folder, &error))?;
        let mut files = Vec::new();
        for kind in kinds {
            let path = folder.join(kind.name);
            if !force && !may_replace(&path, kind).map_err(|error| failed(&path, &error))? {
                let message = format!("`{}` was not written by axirad", path.display());
                let help = "choose another folder, or write over it with `--force`";
                return Err(Problem::of_outside(message, Some(help)));
            }
            if path.is_dir() {
                return Err(Problem::of_outside(format!("cannot write `{}`: it is a folder", path.display()), None));
            }
            let temporary = temporary(folder).map_err(|error| failed(&path, &error))?;
            files.push((*kind, path, temporary));
        }
        Ok(Self { files })
    }

    /// Writes all files and puts them in their places.
    ///
    /// # Errors
    /// One could not be written; those before it are in place, it and those after it are as they were.
    pub fn write(self, content: &dyn Fn(&FileKind) -> Vec<u8>) -> Result<Vec<PathBuf>, Problem> {
        let mut written = Vec::new();
        for (kind, path, mut temporary) in self.files {
            let failed = |error: &io::Error| Problem::of_file("write", &path.display().to_string(), error);
            temporary.write_all(&content(&kind)).map_err(|error| failed(&error))?;
            temporary.as_file().sync_all().map_err(|error| failed(&error))?;
            temporary.persist(&path).map_err(|error| failed(&error.error))?;
            written.push(path);
        }
        Ok(written)
    }
}

/// Whether nothing is there, or a file of ours.
fn may_replace(path: &Path, kind: &FileKind) -> io::Result<bool> {
    let file = match File::open(path) {
        Ok(file) => file,
        Err(error) if error.kind() == io::ErrorKind::NotFound => return Ok(true),
        Err(error) => return Err(error),
    };
    if file.metadata()?.is_dir() {
        return Ok(true); // what it is, the caller says
    }
    let mut beginning = Vec::new();
    file.take(kind.beginning.len() as u64).read_to_end(&mut beginning)?;
    Ok(beginning == kind.beginning.as_bytes())
}

fn temporary(folder: &Path) -> io::Result<NamedTempFile> {
    let mut builder = tempfile::Builder::new();
    builder.prefix(".axirad-").suffix(".part");
    #[cfg(unix)]
    {
        use std::os::unix::fs::PermissionsExt;
        // as any new file: the user's mask decides who reads it
        builder.permissions(fs::Permissions::from_mode(0o666));
    }
    builder.tempfile_in(folder)
}
