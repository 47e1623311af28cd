//! What can go wrong with the record's file.

use rusqlite::ErrorCode;
use std::io;

/// Why the record could not be read or written. Whatever was acknowledged before stays.
#[derive(Debug, thiserror::Error)]
pub enum StoreError {
    /// The disk is full.
    #[error("{file}: the disk is full; nothing was recorded; make room and repeat the command")]
    Full {
        /// The record's file.
        file: String,
    },
    /// The file or its folder cannot be written.
    #[error("{file}: it cannot be written (read-only disk, or no permission); nothing was recorded")]
    ReadOnly {
        /// The record's file.
        file: String,
    },
    /// Another program held it for too long.
    #[error(
        "{file}: another program is writing to it and does not end; nothing was recorded; repeat the command"
    )]
    Busy {
        /// The record's file.
        file: String,
    },
    /// Somebody else has recorded something since it was read.
    #[error("{file}: it goes on to event {now} already")]
    Moved {
        /// The record's file.
        file: String,
        /// Its last event.
        now: usize,
    },
    /// The file is damaged, or an event in it was changed.
    #[error(
        "{file}: the record is damaged: {what}; take the last good backup, and keep this file to be looked at"
    )]
    Damaged {
        /// The record's file.
        file: String,
        /// What was found.
        what: String,
    },
    /// It is some other file.
    #[error("{file}: this is not a record of this program: {what}")]
    NotARecord {
        /// The file.
        file: String,
        /// What was found.
        what: String,
    },
    /// It was written by a newer program.
    #[error(
        "{file}: it was written by a newer program (format {found}; this one knows {known}); use that program"
    )]
    TooNew {
        /// The record's file.
        file: String,
        /// Its format.
        found: i64,
        /// The newest format that this program knows.
        known: i64,
    },
    /// It lies on a network share.
    #[error(
        "{file}: it lies on a network share ({kind}), where two computers can spoil it; keep the port's folder on a disk \
         of one computer, and copy backups to the share"
    )]
    Shared {
        /// The record's file.
        file: String,
        /// The kind of file system.
        kind: String,
    },
    /// There is a file already where a new one is to be made.
    #[error("{file}: there is a file of this name already")]
    Exists {
        /// The file.
        file: String,
    },
    /// The system does not give or take what was asked.
    #[error("{file}: the disk failed ({error}); 'record list' shows whether it was recorded")]
    Disk {
        /// The file.
        file: String,
        /// What the system says.
        error: io::Error,
    },
    /// The disk failed on the way: an event may have got there without being acknowledged.
    #[error("{file}: the disk failed ({what}); 'record list' shows whether it was recorded")]
    Failing {
        /// The record's file.
        file: String,
        /// What the database says.
        what: String,
    },
    /// Anything else that the database says.
    #[error("{file}: {what}")]
    Other {
        /// The record's file.
        file: String,
        /// What it says.
        what: String,
    },
}

impl StoreError {
    /// Puts what the database says into our words.
    #[must_use]
    pub fn of(file: &str, error: &rusqlite::Error) -> StoreError {
        let file = file.to_owned();
        let what = error.to_string();
        match error.sqlite_error_code() {
            Some(ErrorCode::DiskFull) => StoreError::Full { file },
            Some(ErrorCode::ReadOnly | ErrorCode::PermissionDenied) => StoreError::ReadOnly { file },
            Some(ErrorCode::SystemIoFailure | ErrorCode::CannotOpen) => StoreError::Failing { file, what },
            Some(ErrorCode::DatabaseBusy | ErrorCode::DatabaseLocked) => StoreError::Busy { file },
            Some(ErrorCode::DatabaseCorrupt | ErrorCode::NotADatabase) => StoreError::Damaged { file, what },
            Some(_) | None => StoreError::Other { file, what },
        }
    }

    /// Puts what the system says into our words.
    #[must_use]
    pub fn disk(file: &str, error: io::Error) -> StoreError {
        let file = file.to_owned();
        match error.kind() {
            io::ErrorKind::StorageFull => StoreError::Full { file },
            io::ErrorKind::ReadOnlyFilesystem | io::ErrorKind::PermissionDenied => {
                StoreError::ReadOnly { file }
            }
            io::ErrorKind::AlreadyExists => StoreError::Exists { file },
            _ => StoreError::Disk { file, error },
        }
    }

    /// Whether the file itself is at fault, rather than the disk or the moment.
    #[must_use]
    pub fn is_fault_of_file(&self) -> bool {
        match self {
            StoreError::Damaged { .. } | StoreError::NotARecord { .. } | StoreError::TooNew { .. } => true,
            StoreError::Full { .. }
            | StoreError::ReadOnly { .. }
            | StoreError::Busy { .. }
            | StoreError::Moved { .. }
            | StoreError::Shared { .. }
            | StoreError::Exists { .. }
            | StoreError::Disk { .. }
            | StoreError::Failing { .. }
            | StoreError::Other { .. } => false,
        }
    }
}
