//! Which record a port has: the file that only grows, or a text that people write; never both in silence.

use crate::cli::exit::Failure;
use crate::cli::folder::PortFolder;
use crate::cli::port_args::PortArgs;
use crate::finding::fault::Finding;
use crate::finding::source::SourceText;
use crate::record::event::Event;
use crate::store::chain::Head;
use crate::store::file::Store;
use crate::store::form::{Form, in_utc};
use std::fs::File;
use std::io::Read;
use std::path::{Path, PathBuf};

/// A port's record as a text within its folder.
pub const TEXT: &str = "events.toml";
/// A port's record as a file that only grows.
pub const STORE: &str = "record.sqlite";

/// Warning: the folder holds both kinds of record.
pub const TWO_RECORDS: &str = "cli-two-records";

/// With these bytes every file of the database begins (its documentation of the file format, 1.3.1).
const MAGIC: &[u8] = b"SQLite format 3\0";

/// A port's record.
#[derive(Debug)]
pub enum Kept {
    /// A text, or none at all: nothing is written to it.
    Text,
    /// A file that only grows.
    Store(Box<KeptStore>),
}

/// An open record and what stands in it.
#[derive(Debug)]
pub struct KeptStore {
    /// The file.
    pub store: Store,
    /// Its events, in the order of their numbers.
    pub events: Vec<Event>,
    /// The head of its chain.
    pub head: Head,
}

impl Kept {
    /// Finds and reads the record of a port. A text stays in `folder` to be read there; beside a file that only grows, or in
    /// place of another text, it is taken out.
    ///
    /// # Errors
    /// [`Failure::Read`], [`Failure::Store`].
    pub fn of(port: &PortArgs, folder: &mut PortFolder) -> Result<Kept, Failure> {
        let path = match &port.record {
            Some(path) if is_store(path) => path.clone(),
            Some(path) => {
                folder.replace(TEXT, path)?;
                return Ok(Kept::Text);
            }
            None => port.folder.join(STORE),
        };
        if !path.exists() {
            return Ok(Kept::Text);
        }
        if port.record.is_none()
            && let Some(text) = folder.files.get(TEXT)
        {
            folder.findings.push(two_records(text));
        }
        folder.files.remove(TEXT);
        let store = Store::open(&path)?;
        let entries = store.read()?;
        let head = entries.last().map_or_else(Head::beginning, |last| last.head.clone());
        let events = entries.into_iter().map(|entry| entry.event).collect();
        Ok(Kept::Store(Box::new(KeptStore { store, events, head })))
    }

    /// The head of the chain; `None` for a text.
    #[must_use]
    pub fn head(&self) -> Option<Head> {
        match self {
            Kept::Text => None,
            Kept::Store(kept) => Some(kept.head.clone()),
        }
    }
}

/// Where a command writes: the record that was named, or the port's own.
#[must_use]
pub fn store_path(port: &PortArgs) -> PathBuf {
    port.record.clone().unwrap_or_else(|| port.folder.join(STORE))
}

fn is_store(path: &Path) -> bool {
    let mut first = [0; MAGIC.len()];
    File::open(path).and_then(|mut file| file.read_exact(&mut first)).is_ok() && first == *MAGIC
}

fn two_records(text: &SourceText) -> Finding {
    Finding::warning(
        TWO_RECORDS,
        text.line(1),
        format!("the folder holds both {STORE} and {TEXT}"),
        format!("{STORE} counts, and this text is not read"),
        "move the text out of the folder",
    )
}

/// Events of a store as lines, so that findings can show them.
#[must_use]
pub fn lines_of(shown: &str, events: &[Event]) -> SourceText {
    let line = |event: &Event| serde_json::to_string(&Form::of(event, None, &in_utc)).unwrap_or_default();
    let mut sorted: Vec<&Event> = events.iter().collect();
    sorted.sort_by_key(|event| event.number);
    SourceText::new(shown, sorted.into_iter().map(line).collect::<Vec<_>>().join("\n"))
}
