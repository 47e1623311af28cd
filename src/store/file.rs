//! The record's file: opened, read whole with its chain checked, added to, and copied while others write.

use crate::finding::fault::Place;
use crate::record::event::Event;
use crate::store::chain::{Head, digest};
use crate::store::error::StoreError;
use crate::store::form::{Form, in_utc};
use crate::store::form_back::{event_of, time};
use crate::store::schema::{STEPS, format_of, raise};
use crate::store::share::share_of;
use chrono::{DateTime, Utc};
use rusqlite::{Connection, OpenFlags, OptionalExtension, TransactionBehavior};
use std::fs::File;
use std::path::{Path, PathBuf};
use std::time::Duration;

/// How long to wait for another program that is writing: a commit takes milliseconds, a copy seconds.
const PATIENCE: Duration = Duration::from_secs(10);

/// A record that is open.
#[derive(Debug)]
pub struct Store {
    connection: Connection,
    path: PathBuf,
    shown: String,
}

/// An event as it stands in the record.
#[derive(Clone, Debug, PartialEq)]
pub struct Entry {
    /// The event.
    pub event: Event,
    /// When it was written down; `None` if that was not kept.
    pub recorded: Option<DateTime<Utc>>,
    /// The head of the chain after it.
    pub head: Head,
}

/// What is to be added in one piece: all of it, or nothing.
#[derive(Clone, Copy, Debug)]
pub struct Addition<'a> {
    /// The events, in order; their numbers are given by the record.
    pub events: &'a [Event],
    /// Papers that they name, as they came.
    pub papers: &'a [Vec<u8>],
    /// When it is written down.
    pub recorded: DateTime<Utc>,
}

impl Store {
    /// Makes a new record without events. It appears under its name only when it is whole.
    ///
    /// # Errors
    /// [`StoreError::Exists`], [`StoreError::Shared`], and whatever the disk says.
    pub fn create(path: &Path) -> Result<Store, StoreError> {
        let shown = path.display().to_string();
        if path.exists() {
            return Err(StoreError::Exists { file: shown });
        }
        refuse_share(path)?;
        let draft = path.with_extension(format!("new-{}", std::process::id()));
        let disk = |error| StoreError::disk(&shown, error);
        let made = make(&draft, &shown).and_then(|()| {
            // A link, unlike a renaming, never takes the place of a record that another program has just made.
            std::fs::hard_link(&draft, path).map_err(disk)
        });
        let _ = std::fs::remove_file(&draft);
        made?;
        sync_folder(path).map_err(disk)?;
        Store::open(path)
    }

    /// Opens a record that is there, and raises it to the newest format after keeping a copy.
    ///
    /// # Errors
    /// Any [`StoreError`].
    pub fn open(path: &Path) -> Result<Store, StoreError> {
        let shown = path.display().to_string();
        // Opening the file a second time and closing it would give up the locks of a connection that is open already.
        let data = std::fs::metadata(path).map_err(|error| StoreError::disk(&shown, error))?;
        if data.len() == 0 {
            let what = "the file is empty: its contents are lost".to_owned();
            return Err(StoreError::Damaged { file: shown, what });
        }
        let mut connection = connect(path, &shown, OpenFlags::SQLITE_OPEN_READ_WRITE)?;
        let format = format_of(&connection, &shown, STEPS.len())?;
        if format < STEPS.len() {
            keep_copy(&connection, path, &shown, format)?;
            raise(&mut connection, &shown, format, STEPS)?;
        }
        Ok(Store { connection, path: path.to_owned(), shown })
    }

    /// The file as it was named.
    #[must_use]
    pub fn shown(&self) -> &str {
        &self.shown
    }

    /// Every event with its head, in order, each checked against the chain.
    ///
    /// # Errors
    /// [`StoreError::Damaged`] at the first event that is not as it was written.
    pub fn read(&self) -> Result<Vec<Entry>, StoreError> {
        let (entries, fault) = self.read_to_fault()?;
        match fault {
            None => Ok(entries),
            Some(what) => Err(StoreError::Damaged { file: self.shown.clone(), what }),
        }
    }

    /// The events up to the first that is not as it was written, and what is wrong with that one.
    ///
    /// # Errors
    /// What the database says.
    pub fn read_to_fault(&self) -> Result<(Vec<Entry>, Option<String>), StoreError> {
        let failed = |error| StoreError::of(&self.shown, &error);
        let mut query = self
            .connection
            .prepare("SELECT number, text, hash FROM event ORDER BY number")
            .map_err(failed)?;
        let mut rows = query.query([]).map_err(failed)?;
        let mut entries = Vec::new();
        let mut head = Head::beginning();
        while let Some(row) = rows.next().map_err(failed)? {
            let number: i64 = row.get(0).map_err(failed)?;
            let text = row.get_ref(1).map_err(failed)?.as_str().unwrap_or_default();
            let hash = row.get_ref(2).map_err(failed)?.as_str().unwrap_or_default();
            head = head.then(text);
            if usize::try_from(number) != Ok(head.number) {
                return Ok((entries, Some(format!("event {} is missing", head.number))));
            }
            if head.hash != hash {
                return Ok((entries, Some(format!("event {number} is not as it was written"))));
            }
            let Some(entry) = self.entry(text, &head) else {
                return Ok((entries, Some(format!("event {number} cannot be understood"))));
            };
            entries.push(entry);
        }
        Ok((entries, None))
    }

    fn entry(&self, text: &str, head: &Head) -> Option<Entry> {
        let form: Form = serde_json::from_str(text).ok()?;
        let recorded = match &form.recorded {
            Some(text) => Some(time(text)?),
            None => None,
        };
        let place = Place { file: self.shown.clone(), line: head.number, column: 1, start: 0, end: 0 };
        Some(Entry { event: event_of(form, head.number, place)?, recorded, head: head.clone() })
    }

    /// The head as it is now.
    ///
    /// # Errors
    /// What the database says.
    pub fn head(&self) -> Result<Head, StoreError> {
        head_of(&self.connection).map_err(|error| StoreError::of(&self.shown, &error))
    }

    /// Adds events and papers after `expected`, in one piece. When this returns, they are on the disk.
    ///
    /// # Errors
    /// [`StoreError::Moved`] if the record's head is another by now; [`StoreError::Full`], [`StoreError::ReadOnly`],
    /// [`StoreError::Busy`], [`StoreError::Shared`]. Then nothing was added.
    pub fn append(&mut self, expected: &Head, addition: Addition<'_>) -> Result<Head, StoreError> {
        refuse_share(&self.path)?;
        let shown = self.shown.clone();
        let failed = |error: rusqlite::Error| StoreError::of(&shown, &error);
        let change =
            self.connection.transaction_with_behavior(TransactionBehavior::Immediate).map_err(failed)?;
        let mut head = head_of(&change).map_err(failed)?;
        if head != *expected {
            return Err(StoreError::Moved { file: shown, now: head.number });
        }
        for paper in addition.papers {
            let insert = "INSERT INTO paper (sha256, bytes) SELECT ?1, ?2 WHERE NOT EXISTS (SELECT 1 FROM paper WHERE sha256 = ?1)";
            change.execute(insert, (digest(paper), paper)).map_err(failed)?;
        }
        for event in addition.events {
            let form = Form::of(event, Some(addition.recorded), &in_utc);
            let text = serde_json::to_string(&form)
                .map_err(|error| StoreError::Other { file: shown.clone(), what: error.to_string() })?;
            head = head.then(&text);
            let row = (i64::try_from(head.number).unwrap_or(i64::MAX), text, &head.hash);
            change
                .execute("INSERT INTO event (number, text, hash) VALUES (?1, ?2, ?3)", row)
                .map_err(failed)?;
        }
        change.commit().map_err(failed)?;
        Ok(head)
    }

    /// The bytes of a paper by their SHA-256, checked against it; `None` if the record does not hold it.
    ///
    /// # Errors
    /// [`StoreError::Damaged`], and what the database says.
    pub fn paper(&self, sha256: &str) -> Result<Option<Vec<u8>>, StoreError> {
        let query = "SELECT bytes FROM paper WHERE sha256 = ?1";
        let bytes: Option<Vec<u8>> = self
            .connection
            .query_row(query, [sha256], |row| row.get(0))
            .optional()
            .map_err(|error| StoreError::of(&self.shown, &error))?;
        if bytes.as_ref().is_some_and(|bytes| digest(bytes) != sha256) {
            let what = format!("the paper {sha256} is not as it came");
            return Err(StoreError::Damaged { file: self.shown.clone(), what });
        }
        Ok(bytes)
    }

    /// What the database finds wrong with its own pages; empty if nothing.
    ///
    /// # Errors
    /// What the database says.
    pub fn page_faults(&self) -> Result<Vec<String>, StoreError> {
        let failed = |error| StoreError::of(&self.shown, &error);
        let mut query = self.connection.prepare("PRAGMA integrity_check").map_err(failed)?;
        let lines = query.query_map([], |row| row.get::<_, String>(0)).map_err(failed)?;
        let lines: Vec<String> = lines.collect::<Result<_, _>>().map_err(failed)?;
        Ok(lines.into_iter().filter(|line| line != "ok").collect())
    }

    /// Copies the whole record to a new file as it is at this moment, while others may go on writing.
    ///
    /// # Errors
    /// [`StoreError::Exists`], and whatever the disk says.
    pub fn back_up(&self, to: &Path) -> Result<Head, StoreError> {
        copy_to(&self.connection, to)?;
        let copy = Store::open(to)?;
        Ok(copy.read()?.pop().map_or_else(Head::beginning, |last| last.head))
    }
}

fn head_of(connection: &Connection) -> rusqlite::Result<Head> {
    let query = "SELECT number, hash FROM event ORDER BY number DESC LIMIT 1";
    let last = connection
        .query_row(query, [], |row| Ok((row.get::<_, i64>(0)?, row.get::<_, String>(1)?)))
        .optional()?;
    Ok(last.map_or_else(Head::beginning, |(number, hash)| Head {
        number: usize::try_from(number).unwrap_or_default(),
        hash,
    }))
}

fn connect(path: &Path, shown: &str, flags: OpenFlags) -> Result<Connection, StoreError> {
    let failed = |error| StoreError::of(shown, &error);
    let connection = Connection::open_with_flags(path, flags).map_err(failed)?;
    connection.busy_timeout(PATIENCE).map_err(failed)?;
    // EXTRA also waits until the folder has forgotten the journal: then a power cut loses nothing that was acknowledged.
    connection.pragma_update(None, "synchronous", "EXTRA").map_err(failed)?;
    connection.pragma_update(None, "trusted_schema", false).map_err(failed)?;
    connection.pragma_update(None, "cell_size_check", true).map_err(failed)?;
    Ok(connection)
}

fn make(path: &Path, shown: &str) -> Result<(), StoreError> {
    let flags = OpenFlags::SQLITE_OPEN_READ_WRITE | OpenFlags::SQLITE_OPEN_CREATE;
    let mut connection = connect(path, shown, flags)?;
    raise(&mut connection, shown, 0, STEPS)
}

/// Keeps the record as it was before its format is raised: "record.sqlite.format-1".
fn keep_copy(connection: &Connection, path: &Path, shown: &str, format: usize) -> Result<(), StoreError> {
    let kept = PathBuf::from(format!("{shown}.format-{format}"));
    match copy_to(connection, &kept) {
        // Another program was about to do the same, or was stopped after it.
        Err(StoreError::Exists { .. }) => Ok(()),
        other => other.and_then(|()| sync_folder(path).map_err(|error| StoreError::disk(shown, error))),
    }
}

fn copy_to(connection: &Connection, to: &Path) -> Result<(), StoreError> {
    let shown = to.display().to_string();
    if to.exists() {
        return Err(StoreError::Exists { file: shown });
    }
    connection.execute("VACUUM INTO ?1", [&shown]).map_err(|error| StoreError::of(&shown, &error))?;
    let synced = File::open(to).and_then(|file| file.sync_all()).and_then(|()| sync_folder(to));
    synced.map_err(|error| StoreError::disk(&shown, error))
}

/// Waits until the disk knows the names in the folder of `path`.
fn sync_folder(path: &Path) -> std::io::Result<()> {
    let folder = path.parent().filter(|parent| !parent.as_os_str().is_empty()).unwrap_or(Path::new("."));
    if cfg!(unix) { File::open(folder)?.sync_all() } else { Ok(()) }
}

fn refuse_share(path: &Path) -> Result<(), StoreError> {
    let folder = path.parent().filter(|parent| !parent.as_os_str().is_empty()).unwrap_or(Path::new("."));
    match share_of(folder) {
        Some(kind) => Err(StoreError::Shared { file: path.display().to_string(), kind }),
        None => Ok(()),
    }
}
