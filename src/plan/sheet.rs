//! A finished plan as plain data: the head, the stages, the tasks, what does not fit and what would help.

use crate::plan::call::Call;
use crate::rules::stage::StageDirection;
use crate::rules::task::Stake;
use crate::time::moment::{Minutes, Moment};
use crate::units::chance::Chance;
use crate::units::wind::WindLimit;

/// Everything that one plan says. It depends on the port's folder and the time it is made for, and on nothing else.
#[derive(Clone, Debug, PartialEq)]
pub struct Plan {
    /// The time it is made for.
    pub now: Moment,
    /// The advisory in force; `None` before the first.
    pub advisory: Option<AdvisoryInForce>,
    /// Those of other storms that are in force beside it; the arrivals are of all storms together.
    pub other_advisories: Vec<AdvisoryInForce>,
    /// What a second centre warns of, and that a drill is one, in words.
    pub warnings: Vec<String>,
    /// Arrivals at the reference places first, then at the others; gale, storm and hurricane force.
    pub arrivals: Vec<Arrival>,
    /// Stages, in the order of the rules.
    pub stages: Vec<StageLine>,
    /// Tasks: by start, then those without a time; ties by id.
    pub tasks: Vec<TaskLine>,
    /// What would make given-up tasks fit, earliest decision first.
    pub reliefs: Vec<Relief>,
    /// Duties that the rules lay on people.
    pub duties: Vec<DutyLine>,
    /// The chance that every hard task in the plan is done before its limit, all at once.
    pub joint: Option<JointChance>,
    /// Adopted arrivals that the computed ones have left behind by more than the rules' margin.
    pub overtaken: Vec<Overtaken>,
    /// What adopting the computed arrivals would move, where they differ from the adopted ones by more than the margin.
    pub if_adopted: Vec<IfAdopted>,
    /// Orders that clash with a rule, a limit or each other: reported, never moved.
    pub clashes: Vec<Clash>,
    /// What the audit found wrong with this plan; empty for a sound one.
    pub breaches: Vec<Breach>,
    /// Who must be told what, most urgent first; of the last plan of a history only.
    pub calls: Vec<Call>,
    /// Which of two equally named inputs was used and similar remarks, in words.
    pub notes: Vec<String>,
}

/// The advisory on which a plan stands.
#[derive(Clone, Debug, PartialEq)]
pub struct AdvisoryInForce {
    /// Its file in the port's folder.
    pub file: String,
    /// The storm's name.
    pub storm: String,
    /// The issuing office.
    pub issuer: String,
    /// Its number, if it has one.
    pub number: Option<u32>,
    /// Whether it corrects an earlier one with the same number.
    pub is_corrected: bool,
    /// When it was issued.
    pub issued: Moment,
    /// When the port knew it.
    pub known: Moment,
    /// When the next one is due.
    pub next_due: Option<Moment>,
    /// How old it is.
    pub age: Minutes,
    /// The next one is overdue, so this one is not current.
    pub is_overdue: bool,
    /// The office said that it is the last.
    pub is_last: bool,
    /// What its reader had to assume, in words.
    pub assumed: Vec<String>,
    /// The last time for which it forecasts.
    pub forecast_end: Moment,
}

/// When a wind arrives at a place, and with what chance.
#[derive(Clone, Debug, PartialEq)]
pub struct Arrival {
    /// The place's id.
    pub place: String,
    /// Its name.
    pub place_name: String,
    /// Whether arrivals are adopted for this place.
    pub is_reference: bool,
    /// The wind.
    pub wind: WindLimit,
    /// The adopted working time, if the port has adopted one.
    pub adopted: Option<Moment>,
    /// The computed time as the rules reckon it; `None` if the chance never reaches what they ask.
    pub computed: Option<Moment>,
    /// The storm that brings it first, if there is more than one.
    pub storm: Option<String>,
    /// The 10 % point of the onsets after issue.
    pub earliest: Point,
    /// Their 50 % point.
    pub likely: Point,
    /// Their 90 % point.
    pub latest: Point,
    /// The arrival on the forecast track itself, without errors.
    pub single_track: Option<Moment>,
    /// The chance that it comes at all before the forecast ends.
    pub chance: Chance,
    /// The chance that it blew already when the advisory was issued.
    pub already: Chance,
    /// By when it is over for good with 90 % chance, given that it comes.
    pub over_by: Point,
}

/// A point of a distribution of times.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Point {
    /// A time.
    At(Moment),
    /// Later than the forecast reaches.
    AfterEnd,
    /// Too few scenarios to say.
    Unknown,
}

/// A stage as it stands.
#[derive(Clone, Debug, PartialEq)]
pub struct StageLine {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// Closing or re-opening.
    pub direction: StageDirection,
    /// How it stands.
    pub status: StageStatus,
    /// When it is due under the rules; `None` if nothing makes it due.
    pub due: Option<Moment>,
    /// What makes it due, in words.
    pub because: String,
    /// Since when it is declared, and by whom.
    pub declared: Option<(Moment, String)>,
    /// Since when it is lifted.
    pub lifted: Option<Moment>,
    /// What is open or closed while it is in force.
    pub port_status: Vec<(String, String)>,
    /// Where the rule is written.
    pub source: String,
}

/// How a stage stands. Only an event declares or lifts one.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum StageStatus {
    /// Nothing makes it due on the present forecast.
    NotDue,
    /// Due later.
    Computed,
    /// Due now, and not declared.
    Recommended,
    /// Declared and in force.
    Declared,
    /// A later stage has been declared since.
    Superseded,
    /// Lifted.
    Lifted,
}

/// A task as it stands.
#[derive(Clone, Debug, PartialEq)]
pub struct TaskLine {
    /// Its full id: "V01/sail".
    pub id: String,
    /// What is done.
    pub name: String,
    /// How it stands.
    pub state: TaskState,
    /// Planned or actual start.
    pub start: Option<Moment>,
    /// Planned or actual finish.
    pub finish: Option<Moment>,
    /// The last start with which its own deadlines, and those of what waits for it, can still be met.
    pub latest_start: Option<Moment>,
    /// The hard deadline, if it has one.
    pub deadline: Option<Moment>,
    /// The soft one.
    pub due: Option<Moment>,
    /// How long it takes as planned.
    pub takes: Minutes,
    /// Members by pool: ("pilot", ["P1"]).
    pub members: Vec<(String, Vec<String>)>,
    /// Who does it.
    pub who: String,
    /// Where.
    pub at: String,
    /// Who approves.
    pub approvers: Vec<String>,
    /// How it is confirmed.
    pub confirm: String,
    /// What is at stake.
    pub stake: Stake,
    /// The chance that a wind which stops it comes before it is finished; `None` if no wind limits it.
    pub caught: Option<Chance>,
    /// It can start only when this stage is declared, which has not happened.
    pub if_declared: Option<String>,
    /// Its start is fixed by order: shown to the minute and never moved.
    pub is_ordered: bool,
    /// Its planned time has passed without a report.
    pub is_unreported: bool,
    /// The shorter way is taken: its price.
    pub cut: Option<String>,
    /// It stands in for this given-up task.
    pub stands_in_for: Option<String>,
    /// Late against its soft deadline by this much.
    pub late_by: Minutes,
    /// Why it starts when it starts: a chain whose minutes add up from `chain_from` to its start.
    pub chain: Vec<ChainLink>,
    /// Where the chain begins.
    pub chain_from: Moment,
    /// Why it is given up.
    pub given_up: Option<GivenUp>,
    /// Where its numbers come from.
    pub basis: String,
}

/// How a task stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum TaskState {
    /// It has no place in the plan and is named first.
    GivenUp,
    /// Begun.
    Started,
    /// Has a time.
    Planned,
    /// Waits for a stage that nothing makes due yet.
    Waiting,
    /// Done.
    Done,
    /// Not needed, by report or because it only stands in for a task that goes ahead.
    NotNeeded,
}

/// Why a task is given up.
#[derive(Clone, Debug, PartialEq)]
pub struct GivenUp {
    /// The cause in words.
    pub why: String,
    /// When it would be finished without its deadline.
    pub would_finish: Option<Moment>,
    /// By how much it misses.
    pub late_by: Option<Minutes>,
    /// No plan at all can do it, as opposed to: none was found.
    pub is_proved: bool,
    /// The chain to its would-be finish; minutes add up from `chain_from`.
    pub chain: Vec<ChainLink>,
    /// Where the chain begins.
    pub chain_from: Moment,
}

/// One link of a chain of causes.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ChainLink {
    /// What took the time, in words: "waits for the tide", "V01/secure".
    pub what: String,
    /// How long.
    pub minutes: Minutes,
}

/// Something that makes given-up tasks fit, found by planning again with it.
#[derive(Clone, Debug, PartialEq)]
pub struct Relief {
    /// The steps that must all be taken, in words, each with its price.
    pub steps: Vec<ReliefStep>,
    /// Tasks that then fit.
    pub relieves: Vec<String>,
    /// Given-up tasks that it does not help.
    pub leaves: Vec<String>,
    /// Tasks of less weight that are given up instead.
    pub gives_up: Vec<String>,
    /// The last minute at which deciding it still makes them fit.
    pub decide_by: Moment,
}

/// One step of a relief.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct ReliefStep {
    /// What kind of step.
    pub kind: ReliefKind,
    /// The task, pool or order that it is about.
    pub about: String,
    /// In words: "stop cargo on V01 early".
    pub what: String,
    /// Its price in words.
    pub price: String,
}

/// Kinds of relief.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum ReliefKind {
    /// A task takes its shorter way.
    Cut,
    /// Other tasks stand in for it.
    Substitute,
    /// One more member of a pool.
    OneMore,
    /// An order that fixes a time is lifted.
    LiftOrder,
}

/// A duty as it stands.
#[derive(Clone, Debug, PartialEq)]
pub struct DutyLine {
    /// Its id.
    pub id: String,
    /// The stage it hangs on.
    pub stage: String,
    /// Who.
    pub who: String,
    /// What.
    pub act: String,
    /// By when; `None` if that is not known yet.
    pub by: Option<Moment>,
    /// How it stands.
    pub state: DutyState,
    /// Tasks that would fulfil it and do not: their ids.
    pub missing: Vec<String>,
    /// Where the rule is written.
    pub source: String,
}

/// How a duty stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum DutyState {
    /// Its stage is not due.
    NotDue,
    /// To be done; the plan fulfils it in time, or a person reports it.
    Open,
    /// Fulfilled.
    Fulfilled,
    /// The plan does not fulfil it in time.
    Missed,
}

/// The chance that all goes well at once.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct JointChance {
    /// The chance that every hard task of the plan is finished before its wind comes.
    pub chance: Chance,
    /// How many tasks that is.
    pub tasks: usize,
    /// In how many scenarios it was tried.
    pub scenarios: usize,
}

/// An adopted arrival that the computed one precedes by more than the margin.
#[derive(Clone, Debug, PartialEq)]
pub struct Overtaken {
    /// The place.
    pub place: String,
    /// The adopted time.
    pub adopted: Moment,
    /// The computed one.
    pub computed: Moment,
    /// Tasks that the computed one endangers: they are planned to finish after it allows.
    pub endangers: Vec<String>,
}

/// What an order to adopt the computed arrival would move.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct IfAdopted {
    /// The place's name.
    pub place: String,
    /// The computed arrival.
    pub computed: Moment,
    /// How much later than the adopted one it is; negative is earlier.
    pub by: Minutes,
    /// Stages that are not declared yet and would be due at another time.
    pub stages: Vec<StageShift>,
    /// How many tasks would start at another time.
    pub moved: usize,
    /// Tasks that would no longer fit.
    pub given_up: Vec<String>,
    /// Tasks that would fit again.
    pub relieved: Vec<String>,
}

/// A stage that would be due at another time.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct StageShift {
    /// Its id.
    pub id: String,
    /// Due now.
    pub from: Option<Moment>,
    /// Due then.
    pub to: Option<Moment>,
}

/// An order that clashes with something.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Clash {
    /// The task that the order is about.
    pub task: String,
    /// What it clashes with, in words.
    pub what: String,
}

/// Something wrong with a plan, found by the audit.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Breach {
    /// `audit-<what>`.
    pub code: &'static str,
    /// The task or thing it is about.
    pub about: String,
    /// In words.
    pub what: String,
}

impl Plan {
    /// The task with this id.
    #[must_use]
    pub fn task(&self, id: &str) -> Option<&TaskLine> {
        self.tasks.iter().find(|task| task.id == id)
    }

    /// The given-up tasks, in the plan's order.
    pub fn given_up(&self) -> impl Iterator<Item = &TaskLine> {
        self.tasks.iter().filter(|task| task.state == TaskState::GivenUp)
    }

    /// The stage in force: the last closing or re-opening stage that is declared and not lifted or superseded.
    #[must_use]
    pub fn stage_in_force(&self) -> Option<&StageLine> {
        self.stages.iter().rev().find(|stage| stage.status == StageStatus::Declared)
    }

    /// Whether everything fits: nothing given up, nothing late, nothing unreported, and the audit is content.
    #[must_use]
    pub fn fits(&self) -> bool {
        self.breaches.is_empty()
            && self.tasks.iter().all(|task| task.state != TaskState::GivenUp && task.late_by <= Minutes::ZERO)
    }
}
