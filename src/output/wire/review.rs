//! Asked against done, in JSON.

use crate::output::review_text::{done_at, end_key};
use crate::output::setting::Setting;
use crate::output::wire::port::{PortOut, port};
use crate::output::wire::value::{SCHEMA, maybe, time};
use crate::plan::review::ReviewLine;
use crate::time::moment::Moment;
use serde::{Deserialize, Serialize};

/// Every task, asked against done.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ReviewOut {
    /// Version of this form.
    pub schema: u32,
    /// "review".
    pub kind: String,
    /// The port.
    pub port: PortOut,
    /// Until when.
    pub now: String,
    /// The tasks, in order of the time asked.
    pub tasks: Vec<TaskReviewOut>,
}

/// One task.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct TaskReviewOut {
    /// Its id.
    pub id: String,
    /// What is done.
    pub name: String,
    /// Who does it.
    pub who: String,
    /// The start asked last before it began; null if it was never asked.
    pub asked_start: Option<String>,
    /// The finish asked with it.
    pub asked_finish: Option<String>,
    /// The deadline that held then.
    pub deadline: Option<String>,
    /// When it began; null if not told.
    pub began: Option<String>,
    /// "done", "cannot", "not_needed", "open", "untold", "given_up" or "never_asked".
    pub end: String,
    /// When it was done; null if it was not.
    pub done: Option<String>,
    /// How long after the asked finish it was done; negative if before.
    pub after_asked_min: Option<i64>,
    /// How long after its deadline; null if in time.
    pub late_min: Option<i64>,
    /// Who told the end; null if nobody.
    pub told_by: Option<String>,
    /// Evidence in words; null if none.
    pub evidence: Option<String>,
}

/// Every task, asked against done.
#[must_use]
pub fn review_out(lines: &[ReviewLine], now: Moment, setting: &Setting) -> ReviewOut {
    let said = |text: &str| (!text.is_empty()).then(|| text.to_owned());
    let one = |line: &ReviewLine| TaskReviewOut {
        id: line.task.clone(),
        name: line.name.clone(),
        who: line.who.clone(),
        asked_start: maybe(line.asked_start),
        asked_finish: maybe(line.asked_finish),
        deadline: maybe(line.deadline),
        began: maybe(line.began),
        end: end_key(line.end).to_owned(),
        done: maybe(done_at(line.end)),
        after_asked_min: line.after_asked.map(|span| span.get()),
        late_min: line.late.map(|span| span.get()),
        told_by: said(&line.told_by),
        evidence: said(&line.evidence),
    };
    ReviewOut {
        schema: SCHEMA,
        kind: "review".to_owned(),
        port: port(setting),
        now: time(now),
        tasks: lines.iter().map(one).collect(),
    }
}
