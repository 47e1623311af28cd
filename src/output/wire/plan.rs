//! A plan in JSON.

use crate::output::setting::Setting;
use crate::output::wire::calls::{CallOut, call};
use crate::output::wire::changes::{MovedOut, moved};
use crate::output::wire::head::{AdvisoryOut, ArrivalOut, advisory, arrival};
use crate::output::wire::port::{PortOut, port};
use crate::output::wire::task::{TaskOut, task};
use crate::output::wire::value::{SCHEMA, chance, maybe, time};
use crate::output::words::{cautions, direction_key, duty_state_key, relief_key, stage_status_key};
use crate::plan::changes::Changes;
use crate::plan::sheet::{DutyLine, IfAdopted, Overtaken, Plan, Relief, StageLine};
use serde::{Deserialize, Serialize};
use std::collections::BTreeMap;

/// A whole plan.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct PlanOut {
    /// Version of this form.
    pub schema: u32,
    /// "plan".
    pub kind: String,
    /// The port.
    pub port: PortOut,
    /// The time it is made for.
    pub now: String,
    /// Whether everything fits: nothing given up, nothing late, and the audit is content.
    pub fits: bool,
    /// The advisory in force; null before the first.
    pub advisory: Option<AdvisoryOut>,
    /// Those of other storms in force; the arrivals are of all storms together.
    pub other_advisories: Vec<AdvisoryOut>,
    /// What a second centre warns of, and that a drill is one, in words.
    pub warnings: Vec<String>,
    /// Winds at places.
    pub arrivals: Vec<ArrivalOut>,
    /// The id of the stage in force; null if none is declared.
    pub stage_in_force: Option<String>,
    /// Stages in the order of the rules.
    pub stages: Vec<StageOut>,
    /// Tasks: by start, then those without a time.
    pub tasks: Vec<TaskOut>,
    /// With which earlier plan `moved` compares this one: the last issued, or the one before the last advisory; null if
    /// there was none.
    pub moved_since: Option<String>,
    /// Tasks that moved since then, as in `changes`.
    pub moved: Vec<MovedOut>,
    /// What would help, earliest decision first.
    pub reliefs: Vec<ReliefOut>,
    /// Who must be told what, most urgent first, as in `calls`.
    pub calls: Vec<CallOut>,
    /// Duties.
    pub duties: Vec<DutyOut>,
    /// The chance that all hard tasks are done in time; null if no wind limits any.
    pub joint: Option<JointOut>,
    /// Adopted arrivals left behind by the computed ones.
    pub overtaken: Vec<OvertakenOut>,
    /// What an order to adopt the computed arrival would move.
    pub if_adopted: Vec<IfAdoptedOut>,
    /// Orders that clash.
    pub clashes: Vec<ClashOut>,
    /// What the audit found; empty for a sound plan.
    pub breaches: Vec<BreachOut>,
    /// Remarks in words.
    pub notes: Vec<String>,
    /// What must be shown with a plan: who decides, and what it does not cover.
    pub cautions: Vec<String>,
}

/// A stage.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct StageOut {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// "closing" or "reopening".
    pub direction: String,
    /// "not_due", "computed", "recommended", "declared", "superseded" or "lifted".
    pub status: String,
    /// When it is due; null if nothing makes it due.
    pub due: Option<String>,
    /// What makes it due, in words.
    pub because: String,
    /// Since when it is declared.
    pub declared: Option<String>,
    /// By whom.
    pub declared_by: Option<String>,
    /// Since when it is lifted.
    pub lifted: Option<String>,
    /// What is open or closed while it is in force.
    pub port_status: BTreeMap<String, String>,
    /// Where the rule is written.
    pub source: String,
}

/// Something that would help.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ReliefOut {
    /// The steps, all of which must be taken.
    pub steps: Vec<ReliefStepOut>,
    /// Tasks that then fit.
    pub relieves: Vec<String>,
    /// Given-up tasks that it does not help.
    pub leaves: Vec<String>,
    /// Tasks of less weight that are given up instead.
    pub gives_up: Vec<String>,
    /// The last minute at which deciding it still helps.
    pub decide_by: String,
}

/// A step of a relief.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ReliefStepOut {
    /// "cut", "substitute", "one_more" or "lift_order".
    pub kind: String,
    /// The task, pool or order.
    pub about: String,
    /// In words.
    pub what: String,
    /// Its price in words.
    pub price: String,
}

/// A duty.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct DutyOut {
    /// Its id.
    pub id: String,
    /// The stage it hangs on.
    pub stage: String,
    /// Who.
    pub who: String,
    /// What.
    pub act: String,
    /// By when; null if not known yet.
    pub by: Option<String>,
    /// "not_due", "open", "fulfilled" or "missed".
    pub state: String,
    /// Tasks that would fulfil it and do not.
    pub missing: Vec<String>,
    /// Where the rule is written.
    pub source: String,
}

/// The chance that all goes well at once.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct JointOut {
    /// The chance.
    pub chance: f64,
    /// Of how many hard tasks.
    pub tasks: usize,
    /// Tried in how many scenarios.
    pub scenarios: usize,
}

/// An adopted arrival left behind.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct OvertakenOut {
    /// The place's id.
    pub place: String,
    /// The adopted time.
    pub adopted: String,
    /// The computed one.
    pub computed: String,
    /// Tasks that it endangers.
    pub endangers: Vec<String>,
}

/// What an order to adopt the computed arrival would move.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct IfAdoptedOut {
    /// The place.
    pub place: String,
    /// The computed arrival.
    pub computed: String,
    /// How many minutes later than the adopted one it is; negative is earlier.
    pub by_min: i64,
    /// Stages that would be due at another time.
    pub stages: Vec<StageShiftOut>,
    /// How many tasks would start at another time.
    pub moved: usize,
    /// Tasks that would no longer fit.
    pub given_up: Vec<String>,
    /// Tasks that would fit again.
    pub relieved: Vec<String>,
}

/// A stage that would be due at another time.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct StageShiftOut {
    /// Its id.
    pub id: String,
    /// Due now.
    pub from: Option<String>,
    /// Due then.
    pub to: Option<String>,
}

/// An order that clashes.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ClashOut {
    /// The task.
    pub task: String,
    /// With what.
    pub what: String,
}

/// Something that the audit found.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct BreachOut {
    /// `audit-<what>`.
    pub code: String,
    /// What it is about.
    pub about: String,
    /// In words.
    pub what: String,
}

/// The plan in its JSON form; `since_before` are the changes since an earlier plan.
#[must_use]
pub fn plan_out(plan: &Plan, setting: &Setting, since_before: Option<&Changes>) -> PlanOut {
    PlanOut {
        schema: SCHEMA,
        kind: "plan".to_owned(),
        port: port(setting),
        now: time(plan.now),
        fits: plan.fits(),
        advisory: plan.advisory.as_ref().map(advisory),
        other_advisories: plan.other_advisories.iter().map(advisory).collect(),
        warnings: plan.warnings.clone(),
        arrivals: plan.arrivals.iter().map(arrival).collect(),
        stage_in_force: plan.stage_in_force().map(|stage| stage.id.clone()),
        stages: plan.stages.iter().map(stage).collect(),
        tasks: plan.tasks.iter().map(task).collect(),
        moved_since: since_before.map(|changes| time(changes.from)),
        moved: since_before.map(moved).unwrap_or_default(),
        reliefs: plan.reliefs.iter().map(relief).collect(),
        calls: plan.calls.iter().map(|one| call(one, plan, setting)).collect(),
        duties: plan.duties.iter().map(duty).collect(),
        joint: plan.joint.map(|joint| JointOut {
            chance: chance(joint.chance),
            tasks: joint.tasks,
            scenarios: joint.scenarios,
        }),
        overtaken: plan.overtaken.iter().map(overtaken).collect(),
        if_adopted: plan.if_adopted.iter().map(if_adopted).collect(),
        clashes: plan
            .clashes
            .iter()
            .map(|clash| ClashOut { task: clash.task.clone(), what: clash.what.clone() })
            .collect(),
        breaches: plan
            .breaches
            .iter()
            .map(|breach| BreachOut {
                code: breach.code.to_owned(),
                about: breach.about.clone(),
                what: breach.what.clone(),
            })
            .collect(),
        notes: plan.notes.clone(),
        cautions: cautions(setting),
    }
}

fn stage(stage: &StageLine) -> StageOut {
    StageOut {
        id: stage.id.clone(),
        name: stage.name.clone(),
        direction: direction_key(stage.direction).to_owned(),
        status: stage_status_key(stage.status).to_owned(),
        due: maybe(stage.due),
        because: stage.because.clone(),
        declared: stage.declared.as_ref().map(|(since, _)| time(*since)),
        declared_by: stage.declared.as_ref().map(|(_, by)| by.clone()),
        lifted: maybe(stage.lifted),
        port_status: stage.port_status.iter().cloned().collect(),
        source: stage.source.clone(),
    }
}

/// Something that would help.
#[must_use]
pub fn relief(relief: &Relief) -> ReliefOut {
    ReliefOut {
        steps: relief
            .steps
            .iter()
            .map(|step| ReliefStepOut {
                kind: relief_key(step.kind).to_owned(),
                about: step.about.clone(),
                what: step.what.clone(),
                price: step.price.clone(),
            })
            .collect(),
        relieves: relief.relieves.clone(),
        leaves: relief.leaves.clone(),
        gives_up: relief.gives_up.clone(),
        decide_by: time(relief.decide_by),
    }
}

/// An adopted arrival left behind.
#[must_use]
pub fn overtaken(overtaken: &Overtaken) -> OvertakenOut {
    OvertakenOut {
        place: overtaken.place.clone(),
        adopted: time(overtaken.adopted),
        computed: time(overtaken.computed),
        endangers: overtaken.endangers.clone(),
    }
}

fn if_adopted(tried: &IfAdopted) -> IfAdoptedOut {
    let stages = tried.stages.iter().map(|stage| StageShiftOut {
        id: stage.id.clone(),
        from: maybe(stage.from),
        to: maybe(stage.to),
    });
    IfAdoptedOut {
        place: tried.place.clone(),
        computed: time(tried.computed),
        by_min: tried.by.get(),
        stages: stages.collect(),
        moved: tried.moved,
        given_up: tried.given_up.clone(),
        relieved: tried.relieved.clone(),
    }
}

fn duty(duty: &DutyLine) -> DutyOut {
    DutyOut {
        id: duty.id.clone(),
        stage: duty.stage.clone(),
        who: duty.who.clone(),
        act: duty.act.clone(),
        by: maybe(duty.by),
        state: duty_state_key(duty.state).to_owned(),
        missing: duty.missing.clone(),
        source: duty.source.clone(),
    }
}
