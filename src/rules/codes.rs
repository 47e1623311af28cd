//! The codes of faults in a port's rules and tasks; `rules/README.md` explains each.

use crate::finding::page::TableCodes;
use crate::port::kind::Kind;

/// Faults that any table can have.
pub static TABLE: TableCodes = TableCodes {
    syntax: "rules-syntax",
    duplicate_key: "rules-duplicate-key",
    unknown_key: "rules-unknown-key",
    missing_key: "rules-missing-key",
    wrong_type: "rules-wrong-type",
    no_unit: "rules-no-unit",
    bad_value: "rules-bad-value",
    unknown_word: "rules-unknown-word",
    bad_time: "rules-bad-time",
    time_gap: "rules-time-gap",
    time_fold: "rules-time-fold",
};

/// rules.toml or tasks.toml is not there.
pub const MISSING_FILE: &str = "rules-missing-file";
/// The id of a stage, duty or task stands twice, or two differ by case only.
pub const DUPLICATE_ID: &str = "rules-duplicate-id";
/// A stage that rules.toml does not list.
pub const UNKNOWN_STAGE: &str = "rules-unknown-stage";
/// A stage that waits for itself.
pub const STAGE_ITSELF: &str = "rules-stage-itself";
/// An arrival reckoned as the earliest or most likely without a least chance.
pub const NO_LEAST_CHANCE: &str = "rules-no-least-chance";
/// Seas of a height whose reach advisories do not give.
pub const SEAS_NOT_GIVEN: &str = "rules-seas-not-given";
/// A chance of 0 or 100 %, which no forecast can tell from one nearby.
pub const BAD_CHANCE: &str = "rules-bad-chance";
/// A class that no member of the pool has.
pub const UNKNOWN_CLASS: &str = "rules-unknown-class";
/// None needed: a need for 0.
pub const ZERO_COUNT: &str = "rules-zero-count";
/// More needed than the pool has, or than have the class.
pub const TOO_FEW: &str = "rules-too-few";
/// A thing's own value in a task that is not repeated for things.
pub const OWN_WITHOUT_THING: &str = "rules-own-without-thing";
/// A thing that lacks the own value which the template asks for.
pub const OWN_MISSING: &str = "rules-own-missing";
/// A thing whose own value is of another sort than the template asks for.
pub const OWN_WRONG: &str = "rules-own-wrong";
/// A template that is repeated for nothing.
pub const PICKS_NOTHING: &str = "rules-picks-nothing";
/// A shorter way that is not shorter.
pub const NOT_SHORTER: &str = "rules-not-shorter";
/// A part of a task that ends before it begins, or after the task.
pub const BAD_PART: &str = "rules-bad-part";
/// A tide is needed, and the port has none.
pub const NO_TIDE: &str = "rules-no-tide";
/// A ship that no tide ever floats through the channel.
pub const NEVER_FLOATS: &str = "rules-never-floats";

/// An id that nothing of this kind has.
#[must_use]
pub fn unknown(kind: Kind) -> &'static str {
    match kind {
        Kind::Place => "rules-unknown-place",
        Kind::Berth => "rules-unknown-berth",
        Kind::Ship => "rules-unknown-ship",
        Kind::Plant => "rules-unknown-plant",
        Kind::Pool | Kind::Member => "rules-unknown-pool",
        Kind::Channel => "rules-unknown-channel",
    }
}
