//! The codes of faults in a port's own files; `rules/README.md` explains each.

use crate::finding::page::TableCodes;

/// Faults that any table can have.
pub static TABLE: TableCodes = TableCodes {
    syntax: "port-syntax",
    duplicate_key: "port-duplicate-key",
    unknown_key: "port-unknown-key",
    missing_key: "port-missing-key",
    wrong_type: "port-wrong-type",
    no_unit: "port-no-unit",
    bad_value: "port-bad-value",
    unknown_word: "port-unknown-word",
    bad_time: "port-bad-time",
    time_gap: "port-time-gap",
    time_fold: "port-time-fold",
};

/// port.toml is not there.
pub const MISSING_FILE: &str = "port-missing-file";
/// A file whose name is nearly one of ours, so that it was probably meant to be read.
pub const UNKNOWN_FILE: &str = "port-unknown-file";
/// An id stands twice, or two differ by case only.
pub const DUPLICATE_ID: &str = "port-duplicate-id";
/// A time zone that does not exist.
pub const UNKNOWN_ZONE: &str = "port-unknown-zone";
/// A position that cannot be read.
pub const BAD_POSITION: &str = "port-bad-position";
/// A place that others count from, but that itself counts from another.
pub const NOT_A_REFERENCE: &str = "port-not-a-reference";
/// A pool without members.
pub const EMPTY_POOL: &str = "port-empty-pool";
/// A time span that ends before it begins.
pub const BAD_SPAN: &str = "port-bad-span";
/// Classes of a channel that are out of order.
pub const CLASS_ORDER: &str = "port-class-order";
/// Two classes of a channel between which no spacing is given.
pub const NO_SPACING: &str = "port-no-spacing";
/// A channel whose depth counts from another datum than the tide.
pub const OTHER_DATUM: &str = "port-other-datum";
/// A tide that cannot be computed as it is described.
pub const BAD_TIDE: &str = "port-bad-tide";
/// Something a thing has for itself that is neither a count, a time span, a time nor a class.
pub const BAD_OWN_VALUE: &str = "port-bad-own-value";
/// A place that port.toml does not list.
pub const UNKNOWN_PLACE: &str = "port-unknown-place";
/// A pool that means.toml does not list.
pub const UNKNOWN_POOL: &str = "port-unknown-pool";
/// Two contacts for the same people or the same pool.
pub const DUPLICATE_CONTACT: &str = "port-duplicate-contact";
/// A berth that berths.toml does not list.
pub const UNKNOWN_BERTH: &str = "port-unknown-berth";
