//! What changed between two plans, and why.

use crate::plan::sheet::StageStatus;
use crate::time::moment::{Minutes, Moment};

/// Everything that differs between an earlier plan and a later one.
#[derive(Clone, Debug, PartialEq)]
pub struct Changes {
    /// The time of the earlier plan.
    pub from: Moment,
    /// The time of the later plan.
    pub to: Moment,
    /// What became known between them, in words, oldest first: "advisory 12 taken", "T3 out of service".
    pub news: Vec<String>,
    /// Arrivals that moved.
    pub arrivals: Vec<ArrivalMoved>,
    /// Stages whose due time or status changed.
    pub stages: Vec<StageMoved>,
    /// Tasks with another start, by their new start.
    pub moved: Vec<TaskMoved>,
    /// Tasks whose state changed: newly given up first, then relieved, late, unreported, added, dropped, started, done.
    pub turned: Vec<TaskTurned>,
}

/// An arrival that moved.
#[derive(Clone, Debug, PartialEq)]
pub struct ArrivalMoved {
    /// The place's name.
    pub place: String,
    /// The wind in words.
    pub wind: String,
    /// Whether the adopted or the computed time moved.
    pub is_adopted: bool,
    /// Before; `None` if there was none.
    pub from: Option<Moment>,
    /// After.
    pub to: Option<Moment>,
    /// Why, in words.
    pub cause: String,
}

/// A stage whose due time or status changed.
#[derive(Clone, Debug, PartialEq)]
pub struct StageMoved {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// Due before.
    pub from: Option<Moment>,
    /// Due after.
    pub to: Option<Moment>,
    /// Status before.
    pub was: StageStatus,
    /// Status after.
    pub is: StageStatus,
    /// Why, in words.
    pub cause: String,
}

/// A task that starts at another time.
#[derive(Clone, Debug, PartialEq)]
pub struct TaskMoved {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// Its start before.
    pub from: Moment,
    /// Its start after.
    pub to: Moment,
    /// Why, in words.
    pub cause: String,
}

impl TaskMoved {
    /// How far it moved; negative is earlier.
    #[must_use]
    pub fn by(&self) -> Minutes {
        self.to - self.from
    }
}

/// A task whose state changed.
#[derive(Clone, Debug, PartialEq)]
pub struct TaskTurned {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// How.
    pub turn: Turn,
    /// Why, in words.
    pub cause: String,
}

/// How a task's state changed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Turn {
    /// It no longer fits.
    GivenUp,
    /// It fits again.
    Relieved,
    /// It is late against its soft deadline.
    Late,
    /// Its time passed without a report.
    Unreported,
    /// It has a time now.
    Added,
    /// It has none any more.
    Dropped,
    /// It was begun.
    Started,
    /// It was done.
    Done,
}
