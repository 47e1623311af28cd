//! Makes one plan: from rules, record and odds at one moment to a finished sheet that has passed the audit.

use crate::advisory::forecast::Advisory;
use crate::arrival::odds::Answers;
use crate::plan::adjust::Adjustments;
use crate::plan::adoption::if_adopted;
use crate::plan::audit::audit;
use crate::plan::audit_case::AuditInputs;
use crate::plan::calendar::Calendar;
use crate::plan::draft::{Draft, DraftInputs, draft};
use crate::plan::heads;
use crate::plan::lines::{LineInputs, lines};
use crate::plan::news::standing_words;
use crate::plan::relief::{permitted, reliefs};
use crate::plan::sheet::{AdvisoryInForce, Clash, Plan};
use crate::port::harbour::Port;
use crate::record::situation::Situation;
use crate::rules::stage::Rules;
use crate::schedule::latest::{Latest, Limits, latest};
use crate::schedule::outcome::Outcome;
use crate::schedule::search::Effort;
use crate::time::moment::Moment;
use crate::units::wind::Averaging;
use crate::work::graph::{Task, WorkGraph};
use crate::work::reckoned::ArrivalBook;
use crate::work::timed::{Timed, timed};
use petgraph::graph::NodeIndex;

/// An advisory with its answers.
#[derive(Clone, Debug)]
pub struct Forecast<'a> {
    /// What it says.
    pub advisory: &'a Advisory,
    /// The odds that follow from it.
    pub answers: &'a Answers,
    /// Its file.
    pub file: &'a str,
    /// When the port took it.
    pub known: Moment,
}

/// Everything that one plan is made from.
#[derive(Clone, Copy, Debug)]
pub struct MakeInputs<'a> {
    /// The port.
    pub port: &'a Port,
    /// Its tide, daylight and shifts.
    pub calendar: &'a Calendar,
    /// Its rules.
    pub rules: &'a Rules,
    /// The graph of its tasks and stages.
    pub work: &'a WorkGraph,
    /// The record as it stands.
    pub situation: &'a Situation,
    /// The advisory in force.
    pub forecast: Option<&'a Forecast<'a>>,
    /// Working arrivals.
    pub book: &'a ArrivalBook<'a>,
    /// The plan before this one.
    pub before: Option<&'a Plan>,
    /// How long to search.
    pub effort: Effort,
    /// Whether reliefs are searched for: they cost several plans each, and only the last plan of a fold shows them.
    pub with_reliefs: bool,
}

/// Makes the plan. Pure: the same inputs give the same plan.
#[must_use]
pub fn make(inputs: MakeInputs<'_>) -> Plan {
    let MakeInputs { port, calendar, rules, work, situation, forecast, book, before, effort, with_reliefs } =
        inputs;
    let now = Moment::at_or_after(situation.now);
    let timed = timed(work, rules, book, situation);
    let forecast_end = forecast.map(|f| Moment::at_or_after(f.advisory.last_valid()));
    let draft_inputs = DraftInputs {
        port,
        calendar,
        work,
        timed: &timed,
        situation,
        before,
        now,
        carried_out: None,
        hints: None,
        forecast_end,
        effort,
    };
    let made = draft_with_permitted(draft_inputs);
    let answers = forecast.map(|f| f.answers);
    let latest_starts = latest_starts(&made);
    let tasks = lines(LineInputs {
        port,
        rules,
        work,
        timed: &timed,
        answers,
        before,
        draft: &made,
        latest_starts: &latest_starts,
        now,
    });
    let averaging = forecast.map_or(Averaging::Minute1, |f| f.advisory.averaging);
    let arrivals = heads::arrivals(port, book, averaging);
    let adoption = if with_reliefs {
        if_adopted(draft_inputs, rules, book, (&made, &arrivals), draft_with_permitted)
    } else {
        Vec::new()
    };
    let mut plan = Plan {
        now,
        advisory: forecast.map(|f| advisory_line(f, situation)),
        other_advisories: Vec::new(),
        warnings: Vec::new(),
        stages: heads::stages(rules, &timed, situation, port),
        duties: heads::duties(rules, work, &timed, book, &tasks),
        joint: answers.and_then(|answers| heads::joint_chance(answers, work, &timed, &tasks)),
        overtaken: heads::overtaken(rules, work, book, &arrivals, &tasks),
        arrivals,
        tasks,
        reliefs: Vec::new(),
        if_adopted: adoption,
        clashes: made.clashes.iter().cloned().chain(begun_too_soon(work, rules, &timed, situation)).collect(),
        breaches: Vec::new(),
        calls: Vec::new(),
        notes: standing_words(situation, &port.clock),
    };
    if with_reliefs {
        plan.reliefs = reliefs(draft_inputs, &made, &plan);
    }
    plan.breaches = audit(AuditInputs { port, rules, work, situation, book }, &plan);
    plan
}

/// The latest start of each task that keeps the hard deadlines; where nothing hard limits it, the soft ones. A given-up
/// task puts no limit on those that it waits for.
fn latest_starts(draft: &Draft) -> Vec<Option<Moment>> {
    let mut problem = draft.stated.problem.clone();
    let is_given_up = |task: usize| matches!(draft.schedule.outcomes.get(task), Some(Outcome::GivenUp(_)));
    problem.links.retain(|link| !is_given_up(link.before) && !is_given_up(link.after));
    let by = |limits| latest(&problem, limits, &[]).unwrap_or_default();
    let start = |latest: &Latest| match latest {
        Latest::By(ends) => Some(ends.start),
        Latest::Unlimited | Latest::Never => None,
    };
    let soft = by(Limits::DeadlinesAndDues);
    by(Limits::Deadlines).iter().zip(&soft).map(|(hard, soft)| start(hard).or_else(|| start(soft))).collect()
}

/// Tasks that were begun or done although the stage that gates them is not declared: a fact cannot be undone, but it is
/// said.
fn begun_too_soon(work: &WorkGraph, rules: &Rules, timed: &Timed, situation: &Situation) -> Vec<Clash> {
    let clash = |(index, task): (NodeIndex, &Task)| {
        let stage = rules.stages.get(timed.tasks.get(&index)?.if_declared?)?;
        let state = situation.tasks.get(&task.id)?;
        let is_begun = state.started.is_some() || state.done_at().is_some();
        let what = format!("reported begun, and stage {} is not declared", stage.id);
        is_begun.then(|| Clash { task: task.id.clone(), what })
    };
    work.tasks().filter_map(clash).collect()
}

/// The plain plan, or the one with the fewest choices that the files permit if the plain one misses something.
fn draft_with_permitted(inputs: DraftInputs<'_>) -> Draft {
    let plain = draft(inputs, &Adjustments::default());
    let chosen = permitted(inputs, &plain);
    if chosen == plain.adjustments { plain } else { draft(inputs, &chosen) }
}

/// An advisory as a plan tells of it.
#[must_use]
pub fn advisory_line(forecast: &Forecast<'_>, situation: &Situation) -> AdvisoryInForce {
    let advisory = forecast.advisory;
    AdvisoryInForce {
        file: forecast.file.to_owned(),
        storm: advisory.storm.name.clone(),
        issuer: advisory.issuer.clone(),
        number: advisory.number,
        is_corrected: advisory.is_corrected,
        issued: Moment::at_or_before(advisory.issued),
        known: forecast.known,
        next_due: advisory.next_due.map(Moment::at_or_before),
        age: advisory.age_at(situation.now),
        is_overdue: is_overdue(advisory, situation),
        is_last: advisory.is_last,
        assumed: advisory.assumed.iter().map(|assumption| assumption.what.clone()).collect(),
        forecast_end: Moment::at_or_after(advisory.last_valid()),
    }
}

/// How long after the announced time an advisory counts as overdue. Our choice: offices send within minutes of the
/// hour, and a duty officer wants to be told before the next watch call.
const GRACE_MINUTES: i64 = 30;

/// How long an advisory that does not announce the next one stays current: the routine interval of six hours (forecast
/// offices' practice, four a day) and the grace.
const ROUTINE_MINUTES: i64 = 360;

fn is_overdue(advisory: &Advisory, situation: &Situation) -> bool {
    let late =
        |since: chrono::DateTime<chrono::Utc>, minutes: i64| (situation.now - since).num_minutes() > minutes;
    match advisory.next_due {
        Some(due) => late(due, GRACE_MINUTES),
        None => !advisory.is_last && late(advisory.issued, ROUTINE_MINUTES + GRACE_MINUTES),
    }
}
