//! A port's folder on disk: its TOML files, and the advisories that its record names.

use crate::advisory::read::LONGEST;
use crate::cli::exit::Failure;
use crate::finding::fault::{Finding, Place};
use crate::finding::source::SourceText;
use crate::port::folder::Folder;
use std::fs::File;
use std::io::{ErrorKind, Read, stdin};
use std::path::{Component, Path, PathBuf};
use std::string::FromUtf8Error;

/// A file of a port that is longer than 1 MiB.
pub const TOO_LONG: &str = "cli-file-too-long";
/// A file of a port that is not UTF-8 text.
pub const NOT_TEXT: &str = "cli-file-not-text";

/// A port's folder as it is on disk.
#[derive(Clone, Debug)]
pub struct PortFolder {
    path: PathBuf,
    /// Its TOML files by name.
    pub files: Folder,
    /// Files that could not be taken as text.
    pub findings: Vec<Finding>,
}

impl PortFolder {
    /// Reads all TOML files of a folder, not of folders within it.
    ///
    /// # Errors
    /// [`Failure::Read`] if the folder or one of the files cannot be read.
    pub fn open(path: &Path) -> Result<PortFolder, Failure> {
        let mut folder = PortFolder { path: path.to_owned(), files: Folder::new(), findings: Vec::new() };
        for name in toml_names(path)? {
            let shown = path.join(&name).display().to_string();
            let bytes =
                read_file(&path.join(&name)).map_err(|error| Failure::Read { name: shown.clone(), error })?;
            // A file that is no text is kept as an empty one, so that nobody reports it missing besides.
            let (text, finding) = text_of(&shown, bytes);
            folder.files.insert(name, SourceText::new(shown, text));
            folder.findings.extend(finding);
        }
        Ok(folder)
    }

    /// What a file within the folder is called for people.
    #[must_use]
    pub fn shown(&self, file: &str) -> String {
        self.path.join(file).display().to_string()
    }

    /// The bytes of a file within the folder, at most one more than may be read; `None` if there is no such file, or if
    /// its path leads out of the folder.
    ///
    /// # Errors
    /// [`Failure::Read`] if it is there and cannot be read.
    pub fn bytes(&self, file: &str) -> Result<Option<Vec<u8>>, Failure> {
        let leads_inside = Path::new(file).components().all(|part| matches!(part, Component::Normal(_)));
        if !leads_inside {
            return Ok(None);
        }
        match read_file(&self.path.join(file)) {
            Ok(bytes) => Ok(Some(bytes)),
            Err(error) if error.kind() == ErrorKind::NotFound => Ok(None),
            Err(error) => Err(Failure::Read { name: self.shown(file), error }),
        }
    }

    /// The files that lie in the same folder as `file` would, written as `file` is; none if there is no such folder.
    #[must_use]
    pub fn beside(&self, file: &str) -> Vec<String> {
        let parent = Path::new(file).parent().unwrap_or(Path::new(""));
        let entries = self.path.join(parent).read_dir().into_iter().flatten().flatten();
        let mut names: Vec<String> = entries
            .filter(|entry| entry.path().is_file())
            .map(|entry| parent.join(entry.file_name()).display().to_string())
            .collect();
        names.sort();
        names
    }
}

/// The bytes of a file, or of standard input for "-"; at most one more than may be read.
///
/// # Errors
/// [`Failure::Read`].
pub fn read_bytes(path: &Path) -> Result<Vec<u8>, Failure> {
    let bytes = if path == Path::new("-") { at_most_one_more(stdin().lock()) } else { read_file(path) };
    bytes.map_err(|error| Failure::Read { name: path.display().to_string(), error })
}

fn read_file(path: &Path) -> std::io::Result<Vec<u8>> {
    at_most_one_more(File::open(path)?)
}

/// Enough to see that a file is too long, without filling the memory with it.
fn at_most_one_more(reader: impl Read) -> std::io::Result<Vec<u8>> {
    let mut bytes = Vec::new();
    reader.take(LONGEST as u64 + 1).read_to_end(&mut bytes)?;
    Ok(bytes)
}

fn toml_names(path: &Path) -> Result<Vec<String>, Failure> {
    let failed = |error| Failure::Read { name: path.display().to_string(), error };
    let mut names = Vec::new();
    for entry in path.read_dir().map_err(failed)? {
        let entry = entry.map_err(failed)?;
        // A name that is not UTF-8 is none that a port's files have.
        if let Ok(name) = entry.file_name().into_string()
            && name.ends_with(".toml")
            && entry.path().is_file()
        {
            names.push(name);
        }
    }
    // The order in which a disk lists its files must not matter.
    names.sort();
    Ok(names)
}

/// The text of a file; empty, with a finding, if it is none.
fn text_of(shown: &str, bytes: Vec<u8>) -> (String, Option<Finding>) {
    if bytes.len() > LONGEST {
        let finding = Finding::error(
            TOO_LONG,
            SourceText::new(shown, "").line(1),
            "the file is longer than 1 MiB",
            "the files of a port are at most 1 MiB each",
            "look whether it is the right file",
        );
        return (String::new(), Some(finding));
    }
    match String::from_utf8(bytes) {
        // Some editors begin a file with a byte order mark, which TOML does not know.
        Ok(text) => (text.strip_prefix('\u{feff}').unwrap_or(&text).to_owned(), None),
        Err(error) => (String::new(), Some(not_text(shown, &error))),
    }
}

fn not_text(shown: &str, error: &FromUtf8Error) -> Finding {
    let good = error.utf8_error().valid_up_to();
    let text = String::from_utf8_lossy(error.as_bytes().get(..good).unwrap_or_default()).into_owned();
    // The text is not kept, so the place says line and column, and marks no byte.
    let place = Place { start: 0, end: 0, ..SourceText::new(shown, text).place(good..good) };
    Finding::error(
        NOT_TEXT,
        place,
        "the file is not UTF-8 text from here on",
        "the files of a port are TOML in UTF-8",
        "save it as UTF-8",
    )
}
