//! Afterwards: what each task was asked to do, against what was done.

use crate::plan::fold::History;
use crate::plan::sheet::{Plan, TaskLine, TaskState};
use crate::record::situation::{Outcome, Situation};
use crate::time::moment::{Minutes, Moment};

/// One task, asked against done.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ReviewLine {
    /// Its id.
    pub task: String,
    /// What is done.
    pub name: String,
    /// Who does it.
    pub who: String,
    /// The start that was asked last before it began: by the last plan made until then that placed it; `None` if none did.
    pub asked_start: Option<Moment>,
    /// The finish that was asked with it.
    pub asked_finish: Option<Moment>,
    /// The deadline that held then: the hard one, else the soft one.
    pub deadline: Option<Moment>,
    /// When it began, if told.
    pub began: Option<Moment>,
    /// How it ended.
    pub end: End,
    /// How long after the asked finish it was done; negative if before; `None` if not both are known.
    pub after_asked: Option<Minutes>,
    /// How long after its deadline it was done; `None` if in time, or not both are known.
    pub late: Option<Minutes>,
    /// Who told the end; empty if nobody.
    pub told_by: String,
    /// Evidence, in words; empty if none.
    pub evidence: String,
}

/// How a task ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum End {
    /// Done then.
    Done(Moment),
    /// It could not be done.
    Cannot,
    /// It was not needed.
    NotNeeded,
    /// Begun, and nothing told since.
    Open,
    /// Asked, and nothing told.
    Untold,
    /// Given up by the last plan.
    GivenUp,
    /// Never asked: its stage was not declared.
    NeverAsked,
}

/// Every task of the last plan, in order of the time asked, then by id.
#[must_use]
pub fn review(history: &History, situation: &Situation) -> Vec<ReviewLine> {
    let Some(last) = history.latest() else { return Vec::new() };
    let mut lines: Vec<ReviewLine> = last.tasks.iter().map(|task| line(history, situation, task)).collect();
    lines.sort_by(|a, b| {
        let when = |line: &ReviewLine| line.asked_start.or(line.began).unwrap_or(Moment::LATEST);
        (when(a), &a.task).cmp(&(when(b), &b.task))
    });
    lines
}

fn line(history: &History, situation: &Situation, task: &TaskLine) -> ReviewLine {
    let state = situation.tasks.get(&task.id);
    let began = state.and_then(|state| state.started.as_ref()).map(|told| Moment::at_or_before(told.at));
    let outcome = state.and_then(|state| state.outcome.as_ref());
    let (end, told_by, evidence) = match outcome {
        Some(Outcome::Done { at, evidence, said }) => {
            (End::Done(Moment::at_or_after(*at)), said.by.clone(), evidence.clone())
        }
        Some(Outcome::Cannot { said }) => (End::Cannot, said.by.clone(), String::new()),
        Some(Outcome::NotNeeded { said }) => (End::NotNeeded, said.by.clone(), String::new()),
        None => (open_end(task, began), String::new(), String::new()),
    };
    let done = if let End::Done(at) = end { Some(at) } else { None };
    let asked = asked(history, &task.id, began.or(done));
    let finish = asked.and_then(|asked| asked.finish);
    let deadline = asked.and_then(|asked| asked.deadline.or(asked.due));
    ReviewLine {
        task: task.id.clone(),
        name: task.name.clone(),
        who: task.who.clone(),
        asked_start: asked.and_then(|asked| asked.start),
        asked_finish: finish,
        deadline,
        began,
        end: if asked.is_none() && end == End::Untold { End::NeverAsked } else { end },
        after_asked: done.zip(finish).map(|(done, finish)| done - finish),
        late: done.zip(deadline).map(|(done, by)| done - by).filter(|late| *late > Minutes::ZERO),
        told_by,
        evidence,
    }
}

fn open_end(task: &TaskLine, began: Option<Moment>) -> End {
    match (task.state, began) {
        (_, Some(_)) => End::Open,
        (TaskState::GivenUp, None) => End::GivenUp,
        (TaskState::NotNeeded, None) => End::NotNeeded,
        (TaskState::Waiting | TaskState::Planned | TaskState::Started | TaskState::Done, None) => End::Untold,
    }
}

/// The line of the last plan until `began` (or of all, if it never began) that had the task planned for certain.
fn asked<'a>(history: &'a History, task: &str, began: Option<Moment>) -> Option<&'a TaskLine> {
    let until = |plan: &&Plan| began.is_none_or(|began| plan.now <= began);
    let lines = history.plans.iter().rev().filter(until).filter_map(|plan| plan.task(task));
    lines.into_iter().find(|line| line.state == TaskState::Planned && line.if_declared.is_none())
}
