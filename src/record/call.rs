//! What became of a call: released, told, acknowledged, or not answered.

use crate::time::moment::{Minutes, Moment};
use chrono::{DateTime, Utc};

/// One report about a call, by the call's id.
///
/// What was said is kept with it, so that the record shows it even when the plan has moved on since.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct CallReport {
    /// The call.
    pub call: String,
    /// What became of it.
    pub step: CallStep,
    /// Whom the call is for; empty if not said.
    pub to: String,
    /// The task, stage or place that it is about; empty if not said.
    pub about: String,
    /// What it says; `None` if not said.
    pub substance: Option<Substance>,
    /// When.
    pub at: DateTime<Utc>,
}

/// What became of a call.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum CallStep {
    /// Whoever may has released its text.
    Released,
    /// It was made.
    Told,
    /// Whom it is for has confirmed it.
    Acknowledged,
    /// Nobody answered.
    NoAnswer,
}

/// What a call says of the thing that it is about.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Substance {
    /// The task starts at this time.
    Start(DateTime<Utc>),
    /// The task is given up.
    GivenUp,
    /// The task is not needed.
    NotNeeded,
    /// The task waits for a stage that nothing makes due.
    Waits,
    /// The task's time has passed without a report: has it begun?
    Unreported,
    /// Something is to be decided.
    Decision,
    /// A declared stage lays a duty on them.
    Duty,
    /// A ship may stay.
    Stay,
}

/// A start this close to the one that was told is the same to whoever was told. Our choice: plans move nothing by less.
const SAME: Minutes = Minutes::new(10);

impl Substance {
    /// Whether who was told the other need not be told this.
    #[must_use]
    pub fn is_as_good_as(self, other: Substance) -> bool {
        if let (Substance::Start(one), Substance::Start(two)) = (self, other) {
            let apart = Moment::at_or_before(one) - Moment::at_or_before(two);
            return -SAME < apart && apart < SAME;
        }
        self == other
    }
}
