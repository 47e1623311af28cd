//! What an event names, so that the rooms above can find names the port does not have.

use crate::finding::fault::Place;
use crate::record::event::{Event, What};
use crate::record::ruling::Ruling;

/// Something an event names by its id.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Mention<'a> {
    /// What kind of thing it is.
    pub kind: MentionKind,
    /// Its id, as written.
    pub id: &'a str,
    /// Where the event stands in the record.
    pub written: &'a Place,
}

/// The kinds of thing an event can name.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum MentionKind {
    /// A place of the port.
    Place,
    /// A stage of its rules.
    Stage,
    /// A task, by its full id.
    Task,
    /// A member of a pool, or a pool.
    Member,
    /// A place, berth, channel or anchorage.
    Spot,
    /// A ship.
    Ship,
    /// A file in the port's folder.
    File,
    /// A call.
    Call,
}

/// Everything `event` names, in the order written.
#[must_use]
pub fn mentions(event: &Event) -> Vec<Mention<'_>> {
    let named = |kind, id| Mention { kind, id, written: &event.place };
    match &event.what {
        What::AdvisoryTaken(taking) => vec![named(MentionKind::File, taking.file.as_str())],
        What::ArrivalAdopted { place, .. } | What::Observed { place, .. } => {
            vec![named(MentionKind::Place, place)]
        }
        What::StageDeclared { stage, .. } | What::StageLifted { stage, .. } => {
            vec![named(MentionKind::Stage, stage)]
        }
        What::TaskStarted { task, members, .. } => std::iter::once(named(MentionKind::Task, task))
            .chain(members.iter().map(|member| named(MentionKind::Member, member)))
            .collect(),
        What::TaskDone { task, .. }
        | What::TaskCannot { task }
        | What::TaskNotNeeded { task }
        | What::TaskTakes { task, .. }
        | What::TaskLeft { task, .. }
        | What::TaskNotBefore { task, .. }
        | What::TaskFixed { task, .. }
        | What::CutOrdered { task }
        | What::SubstituteOrdered { task }
        | What::TaskRetracted { task, .. } => vec![named(MentionKind::Task, task)],
        What::MeansOut { member, .. } | What::MeansBack { member, .. } => {
            vec![named(MentionKind::Member, member)]
        }
        What::Told(fact) => fact.spot().map(|spot| named(MentionKind::Spot, spot)).into_iter().collect(),
        What::Ruled(Ruling::Hold { stage, .. } | Ruling::Skip { stage }) => {
            vec![named(MentionKind::Stage, stage)]
        }
        What::Ruled(Ruling::Stay { ship, .. }) => vec![named(MentionKind::Ship, ship)],
        What::Call(report) => vec![named(MentionKind::Call, report.call.as_str())],
        What::Ruled(Ruling::Waive { .. } | Ruling::Refuse { .. })
        | What::PlanIssued
        | What::Withdrawn { .. }
        | What::Confirmed { .. } => Vec::new(),
    }
}
