//! What every part of the audit is given, and how it says what it found.

use crate::plan::sheet::{Breach, TaskState};
use crate::port::harbour::Port;
use crate::record::situation::Situation;
use crate::rules::stage::Rules;
use crate::work::graph::WorkGraph;
use crate::work::reckoned::ArrivalBook;

/// What a plan is held against.
#[derive(Clone, Copy, Debug)]
pub struct AuditInputs<'a> {
    /// The port.
    pub port: &'a Port,
    /// Its rules.
    pub rules: &'a Rules,
    /// The graph.
    pub work: &'a WorkGraph,
    /// The record.
    pub situation: &'a Situation,
    /// Working arrivals.
    pub book: &'a ArrivalBook<'a>,
}

/// A breach in one line.
pub fn breach(code: &'static str, about: &str, what: String) -> Breach {
    Breach { code, about: about.to_owned(), what }
}

/// Whether a task holds a time in the plan.
#[must_use]
pub fn holds_time(state: TaskState) -> bool {
    match state {
        TaskState::Planned | TaskState::Started | TaskState::Done => true,
        TaskState::GivenUp | TaskState::Waiting | TaskState::NotNeeded => false,
    }
}
