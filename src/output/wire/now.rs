//! What matters now in JSON: the lists of the one-screen view, uncut.

use crate::output::now_lists::{Now, NowOptions};
use crate::output::setting::Setting;
use crate::output::wire::calls::{CallOut, call};
use crate::output::wire::head::{AdvisoryOut, ArrivalOut, advisory, arrival};
use crate::output::wire::plan::{OvertakenOut, overtaken};
use crate::output::wire::port::{PortOut, port};
use crate::output::wire::task::{TaskOut, task};
use crate::output::wire::value::{SCHEMA, time};
use crate::plan::sheet::{Plan, TaskLine};
use serde::{Deserialize, Serialize};

/// Everything about now.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct NowOut {
    /// Version of this form.
    pub schema: u32,
    /// "now".
    pub kind: String,
    /// The port.
    pub port: PortOut,
    /// Now.
    pub now: String,
    /// For whom the task lists are; null for everybody.
    pub concerning: Option<String>,
    /// How far ahead `next` looks.
    pub ahead_min: i64,
    /// The id of the stage in force; null if none is declared.
    pub stage_in_force: Option<String>,
    /// The advisory in force; null before the first.
    pub advisory: Option<AdvisoryOut>,
    /// Arrivals at the reference places.
    pub arrivals: Vec<ArrivalOut>,
    /// Adopted arrivals left behind by the computed ones.
    pub overtaken: Vec<OvertakenOut>,
    /// Calls that nobody has confirmed in time, as in `calls`; everybody's.
    pub calls_overdue: Vec<CallOut>,
    /// Given up, then late.
    pub no_longer_fits: Vec<TaskOut>,
    /// Planned time passed without a report.
    pub unreported: Vec<TaskOut>,
    /// To be started at once.
    pub start_now: Vec<TaskOut>,
    /// To be started later, within `ahead_min`.
    pub next: Vec<TaskOut>,
    /// What must be decided or seen to, earliest first.
    pub decisions: Vec<DecisionOut>,
}

/// Something that must be decided or seen to.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct DecisionOut {
    /// By when.
    pub by: String,
    /// What, in words.
    pub what: String,
}

/// What matters now in its JSON form.
#[must_use]
pub fn now_out(plan: &Plan, setting: &Setting, options: &NowOptions, now: &Now) -> NowOut {
    let tasks = |list: &[&TaskLine]| list.iter().map(|line| task(line)).collect();
    NowOut {
        schema: SCHEMA,
        kind: "now".to_owned(),
        port: port(setting),
        now: time(plan.now),
        concerning: options.concerning.clone(),
        ahead_min: options.ahead.get(),
        stage_in_force: plan.stage_in_force().map(|stage| stage.id.clone()),
        advisory: plan.advisory.as_ref().map(advisory),
        arrivals: plan.arrivals.iter().filter(|one| one.is_reference).map(arrival).collect(),
        overtaken: plan.overtaken.iter().map(overtaken).collect(),
        calls_overdue: plan
            .calls
            .iter()
            .filter(|one| one.is_overdue(plan.now))
            .map(|one| call(one, plan, setting))
            .collect(),
        no_longer_fits: tasks(&now.no_longer_fits),
        unreported: tasks(&now.unreported),
        start_now: tasks(&now.start_now),
        next: tasks(&now.next),
        decisions: now
            .decisions
            .iter()
            .map(|decision| DecisionOut { by: time(decision.by), what: decision.what.clone() })
            .collect(),
    }
}
