//! The tables of the record's file, its format number, and how an older format is raised to this one.

use crate::store::error::StoreError;
use rusqlite::{Connection, Transaction};

/// Marks the file as ours in its header: "snug".
pub const APPLICATION: i64 = 0x736e_7567;

/// One step from a format to the next.
pub type Step = fn(&Transaction<'_>) -> rusqlite::Result<()>;

/// The steps: the first makes format 1 of an empty file, the n-th makes format n of format n - 1. A step that was ever
/// released is never changed.
pub const STEPS: &[Step] = &[first_tables];

/// Events as JSON texts with their chained hashes, and papers (advisories as they came) by the SHA-256 of their bytes.
/// Nothing is ever changed or taken out, and events are numbered without gaps.
fn first_tables(change: &Transaction<'_>) -> rusqlite::Result<()> {
    change.execute_batch(
        "CREATE TABLE event (
             number INTEGER PRIMARY KEY,
             text TEXT NOT NULL,
             hash TEXT NOT NULL CHECK (length(hash) = 64)
         ) STRICT;
         CREATE TABLE paper (
             sha256 TEXT PRIMARY KEY CHECK (length(sha256) = 64),
             bytes BLOB NOT NULL
         ) STRICT;
         CREATE TRIGGER event_next BEFORE INSERT ON event
             WHEN NEW.number IS NOT (SELECT coalesce(max(number), 0) + 1 FROM event)
             BEGIN SELECT raise(ABORT, 'events are numbered without gaps'); END;
         CREATE TRIGGER event_kept BEFORE DELETE ON event
             BEGIN SELECT raise(ABORT, 'the record is never rewritten'); END;
         CREATE TRIGGER event_unchanged BEFORE UPDATE ON event
             BEGIN SELECT raise(ABORT, 'the record is never rewritten'); END;
         CREATE TRIGGER paper_once BEFORE INSERT ON paper
             WHEN EXISTS (SELECT 1 FROM paper WHERE sha256 = NEW.sha256)
             BEGIN SELECT raise(ABORT, 'the record is never rewritten'); END;
         CREATE TRIGGER paper_kept BEFORE DELETE ON paper
             BEGIN SELECT raise(ABORT, 'the record is never rewritten'); END;
         CREATE TRIGGER paper_unchanged BEFORE UPDATE ON paper
             BEGIN SELECT raise(ABORT, 'the record is never rewritten'); END;",
    )
}

/// The format of a file that is open; 0 for an empty one.
///
/// # Errors
/// [`StoreError::NotARecord`] for a database of another program, [`StoreError::TooNew`] for a format that is not known,
/// and whatever the database says.
pub fn format_of(connection: &Connection, file: &str, known: usize) -> Result<usize, StoreError> {
    let number = |name| {
        connection
            .pragma_query_value(None, name, |row| row.get::<_, i64>(0))
            .map_err(|error| StoreError::of(file, &error))
    };
    let (application, format) = (number("application_id")?, number("user_version")?);
    let newest = i64::try_from(known).unwrap_or(i64::MAX);
    if application != APPLICATION {
        let what = if application == 0 && format == 0 {
            "it is empty, or was made by another program"
        } else {
            "it was made by another program"
        };
        return Err(StoreError::NotARecord { file: file.to_owned(), what: what.to_owned() });
    }
    match usize::try_from(format) {
        Ok(format) if (1..=known).contains(&format) => Ok(format),
        Ok(_) | Err(_) if format > newest => {
            Err(StoreError::TooNew { file: file.to_owned(), found: format, known: newest })
        }
        Ok(_) | Err(_) => {
            Err(StoreError::NotARecord { file: file.to_owned(), what: format!("it has the format {format}") })
        }
    }
}

/// Takes every step after `from`, all in one transaction: either the file has the newest format afterwards, or it is as it
/// was. Another program may have raised it in the meantime; then nothing is done.
///
/// # Errors
/// Whatever the database says; then nothing has changed.
pub fn raise(connection: &mut Connection, file: &str, from: usize, steps: &[Step]) -> Result<(), StoreError> {
    let failed = |error: rusqlite::Error| StoreError::of(file, &error);
    let change =
        connection.transaction_with_behavior(rusqlite::TransactionBehavior::Immediate).map_err(failed)?;
    let now: i64 = change.pragma_query_value(None, "user_version", |row| row.get(0)).map_err(failed)?;
    if usize::try_from(now) != Ok(from) {
        return Ok(());
    }
    for step in steps.iter().skip(from) {
        step(&change).map_err(failed)?;
    }
    change.pragma_update(None, "application_id", APPLICATION).map_err(failed)?;
    change
        .pragma_update(None, "user_version", i64::try_from(steps.len()).unwrap_or(i64::MAX))
        .map_err(failed)?;
    change.commit().map_err(failed)
}
