//! The codes of faults in the record, and what each means.

use crate::finding::page::TableCodes;

/// Faults that any table can have.
pub static TABLE: TableCodes = TableCodes {
    syntax: "record-syntax",
    duplicate_key: "record-duplicate-key",
    unknown_key: "record-unknown-key",
    missing_key: "record-missing-key",
    wrong_type: "record-wrong-type",
    no_unit: "record-no-unit",
    bad_value: "record-bad-value",
    unknown_word: "record-unknown-word",
    bad_time: "record-bad-time",
    time_gap: "record-time-gap",
    time_fold: "record-time-fold",
};

/// Something told as done or seen lies after the time at which it was told.
pub const NOT_YET: &str = "record-not-yet";
/// A time more than 30 days from when it was told.
pub const FAR_OFF: &str = "record-far-off";
/// An outage that ends before it begins, or at once.
pub const ENDS_FIRST: &str = "record-ends-before-it-begins";
/// A wind stronger than any measured outside a tornado.
pub const ABSURD_WIND: &str = "record-absurd-wind";
/// A file that does not lie within the port's folder.
pub const FILE_OUTSIDE: &str = "record-file-outside";
/// Warning: an event known before the one above it; it counts from its own time.
pub const OUT_OF_ORDER: &str = "record-out-of-order";
/// Warning: two events say the very same; it counts once.
pub const SAME_TWICE: &str = "record-same-twice";
/// Warning: a task is done before it started; what was told last counts.
pub const DONE_BEFORE_STARTED: &str = "record-done-before-started";
/// Warning: an event ends or takes back what was never said.
pub const NO_EFFECT: &str = "record-no-effect";
