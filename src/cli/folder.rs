//! A port's folder on disk: its TOML files, and the advisories that its record names.

use crate::advisory::read::{LONGEST, LONGEST_DECK};
use crate::cli::exit::Failure;
use crate::finding::fault::Finding;
use crate::finding::source::SourceText;
use crate::port::folder::Folder;
use std::fs::File;
use std::io::{ErrorKind, Read, stdin};
use std::path::{Component, Path, PathBuf};

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
    /// Files that are too long, or not all text.
    pub findings: Vec<Finding>,
    /// Those that were too long to be read, by the name they are shown under.
    pub unread: Vec<String>,
}

impl PortFolder {
    /// Reads all TOML files of a folder, not of folders within it.
    ///
    /// # Errors
    /// [`Failure::Read`] if the folder or one of the files cannot be read.
    pub fn open(path: &Path) -> Result<PortFolder, Failure> {
        let mut folder = PortFolder {
            path: path.to_owned(),
            files: Folder::new(),
            findings: Vec::new(),
            unread: Vec::new(),
        };
        for name in toml_names(path)? {
            let shown = path.join(&name).display().to_string();
            let bytes =
                read_file(&path.join(&name)).map_err(|error| Failure::Read { name: shown.clone(), error })?;
            folder.take(name, &shown, bytes);
        }
        Ok(folder)
    }

    /// Reads a file from elsewhere, or standard input for "-", in place of the folder's own file of that name.
    ///
    /// # Errors
    /// [`Failure::Read`] if it cannot be read.
    pub fn replace(&mut self, name: &str, by: &Path) -> Result<(), Failure> {
        let bytes = read_bytes(by)?;
        self.take(name.to_owned(), &by.display().to_string(), bytes);
        Ok(())
    }

    fn take(&mut self, name: String, shown: &str, bytes: Vec<u8>) {
        if bytes.len() > LONGEST {
            // Kept as an empty file, so that nobody reports it missing besides.
            self.unread.push(shown.to_owned());
            self.findings.push(too_long(shown));
            self.files.insert(name, SourceText::new(shown, ""));
            return;
        }
        // What cannot be decoded is replaced, so that the rest of the file is looked at all the same.
        let text = String::from_utf8_lossy(&bytes);
        // Some editors begin a file with a byte order mark, which TOML does not know.
        let source = SourceText::new(shown, text.strip_prefix('\u{feff}').unwrap_or(&text));
        if let Err(error) = std::str::from_utf8(&bytes) {
            self.findings.push(not_text(&source, error.valid_up_to()));
        }
        self.files.insert(name, source);
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
    reader.take(LONGEST_DECK as u64 + 1).read_to_end(&mut bytes)?;
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

fn too_long(shown: &str) -> Finding {
    Finding::error(
        TOO_LONG,
        SourceText::new(shown, "").line(1),
        "the file is longer than 1 MiB",
        "the files of a port are at most 1 MiB each",
        "look whether it is the right file",
    )
}

fn not_text(source: &SourceText, from: usize) -> Finding {
    Finding::error(
        NOT_TEXT,
        source.place(from..from + char::REPLACEMENT_CHARACTER.len_utf8()),
        "this is not UTF-8 text",
        "the files of a port are TOML in UTF-8",
        "save the file as UTF-8",
    )
}
