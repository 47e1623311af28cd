//! People, craft and machines that tasks share, member by member.

use crate::time::moment::Minutes;
use chrono::{DateTime, NaiveTime, Utc};

/// A pool of members of whom tasks need some.
#[derive(Clone, Debug, PartialEq)]
pub struct Pool {
    /// Its id: "pilot", "tug", "tie-down-gang".
    pub id: String,
    /// Its name for people.
    pub name: String,
    /// Its members, by name; in the order in which they are called.
    pub members: Vec<Member>,
    /// Hours of duty and rest that bind each member; `None` for machines.
    pub duty: Option<DutyHours>,
    /// Where its numbers come from.
    pub source: String,
}

/// One pilot, tug, gang or machine.
#[derive(Clone, Debug, PartialEq)]
pub struct Member {
    /// Its id: "P1".
    pub id: String,
    /// What it can do: "unlimited", "65 t".
    pub classes: Vec<String>,
    /// When it works; always if empty.
    pub shifts: Vec<Shift>,
    /// Duty already worked before the plan begins, so that rest is counted from it.
    pub worked: Vec<(DateTime<Utc>, DateTime<Utc>)>,
}

/// When a member is on call.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Shift {
    /// Every day between two local times; past midnight if the end is before the start.
    Daily {
        /// From.
        from: NaiveTime,
        /// To, not included.
        to: NaiveTime,
    },
    /// Once, between two instants.
    Once {
        /// From.
        from: DateTime<Utc>,
        /// To, not included.
        to: DateTime<Utc>,
    },
}

/// How long a member may be on duty, and how long it then rests. A duty runs from the first hold to the last release;
/// gaps shorter than the rest lie inside it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct DutyHours {
    /// The longest duty.
    pub at_most: Minutes,
    /// The rest after it.
    pub then_rest: Minutes,
}
