//! Names in the record and in duties that the port does not have, and orders that its tasks cannot follow.

use crate::finding::fault::{Finding, did_you_mean, nearest, quoted};
use crate::port::harbour::Port;
use crate::record::event::{Event, What};
use crate::record::fold::{in_order, withdrawn};
use crate::record::mention::{Mention, MentionKind, mentions};
use crate::rules::stage::Rules;
use crate::work::graph::WorkGraph;
use std::collections::BTreeSet;

/// Findings about every name in `events` and in the duties that the port's files do not know. Files of advisories are
/// not judged here: they lie on a disk.
#[must_use]
pub fn strangers(port: &Port, rules: &Rules, work: &WorkGraph, events: &[Event]) -> Vec<Finding> {
    let places = || port.places.iter().map(|place| place.id.as_str());
    let berths = port.berths.iter().map(|berth| berth.id.as_str());
    let channels = port.channels.iter().map(|channel| channel.id.as_str());
    let members = port.pools.iter().flat_map(|pool| &pool.members).map(|member| member.id.as_str());
    let pools = port.pools.iter().map(|pool| pool.id.as_str());
    let mut known = Known {
        places: places().collect(),
        stages: rules.stages.iter().map(|stage| stage.id.as_str()).collect(),
        tasks: work.task_ids().collect(),
        members: members.chain(pools).collect(),
        spots: places().chain(berths).chain(channels).collect(),
        ships: port.ships.iter().map(|ship| ship.id.as_str()).collect(),
        all: BTreeSet::new(),
    };
    known.all = known.pairs();
    let sorted = in_order(events);
    let gone = withdrawn(&sorted);
    let standing = || events.iter().filter(|event| !gone.contains(&event.number));
    let names = standing().flat_map(mentions).filter_map(|mention| known.stranger(&mention));
    let orders = standing().filter_map(|event| impossible_order(work, event));
    let alone = standing().filter_map(|event| ordered_alone(rules, event));
    names.chain(orders).chain(alone).chain(unknown_fulfilment(rules, &known)).collect()
}

struct Known<'a> {
    places: Vec<&'a str>,
    stages: Vec<&'a str>,
    tasks: Vec<&'a str>,
    members: Vec<&'a str>,
    spots: Vec<&'a str>,
    ships: Vec<&'a str>,
    all: BTreeSet<(MentionKind, &'a str)>,
}

impl<'a> Known<'a> {
    fn pairs(&self) -> BTreeSet<(MentionKind, &'a str)> {
        let lists = [
            (MentionKind::Place, &self.places),
            (MentionKind::Stage, &self.stages),
            (MentionKind::Task, &self.tasks),
            (MentionKind::Member, &self.members),
            (MentionKind::Spot, &self.spots),
            (MentionKind::Ship, &self.ships),
        ];
        lists.into_iter().flat_map(|(kind, ids)| ids.iter().map(move |id| (kind, *id))).collect()
    }

    fn stranger(&self, mention: &Mention<'_>) -> Option<Finding> {
        let (code, kind, known) = match mention.kind {
            MentionKind::Place => ("work-unknown-event-place", "place", &self.places),
            MentionKind::Stage => ("work-unknown-event-stage", "stage", &self.stages),
            MentionKind::Task => ("work-unknown-event-task", "task", &self.tasks),
            MentionKind::Member => ("work-unknown-event-member", "member of a pool", &self.members),
            MentionKind::Spot => ("work-unknown-event-spot", "place, berth or channel", &self.spots),
            MentionKind::Ship => ("work-unknown-event-ship", "ship", &self.ships),
            MentionKind::File | MentionKind::Call => return None,
        };
        // Records are long, and a large port has hundreds of tasks.
        if self.all.contains(&(mention.kind, mention.id)) {
            return None;
        }
        Some(Finding::error(
            code,
            mention.written.clone(),
            format!("{kind} \"{}\" is not in the port's files", mention.id),
            format!("one of {}", quoted(known)),
            did_you_mean(mention.id, known.iter().copied(), "correct the name"),
        ))
    }
}

/// A stage that takes two persons, declared or lifted by one: the order counts, and everybody should know.
fn ordered_alone(rules: &Rules, event: &Event) -> Option<Finding> {
    let (What::StageDeclared { stage, .. } | What::StageLifted { stage, .. }) = &event.what else {
        return None;
    };
    let takes_two = rules.stages.iter().any(|known| known.id == *stage && known.needs_second);
    (takes_two && !event.awaits_second).then(|| {
        Finding::warning(
            "work-ordered-alone",
            event.place.clone(),
            format!("an order about stage {stage} stands here without waiting for a second person"),
            "the rules ask for two persons; the order counts all the same",
            "write awaits_second = true, and let another person confirm it in a further event",
        )
    })
}

/// An order to cut a task that has no shorter way, or to replace one that has no stand-ins.
fn impossible_order(work: &WorkGraph, event: &Event) -> Option<Finding> {
    let (task, code, lacks, to_do) = match &event.what {
        What::CutOrdered { task } if work.task(task)?.cut.is_none() => (
            task,
            "work-no-cut",
            "has no shorter way",
            "give the task may_be_cut, or report with takes how long it takes",
        ),
        What::SubstituteOrdered { task } if work.task(task)?.or_else.is_none() => {
            (task, "work-no-substitute", "has no tasks that stand in for it", "give the task or_else")
        }
        What::CutOrdered { .. }
        | What::SubstituteOrdered { .. }
        | What::AdvisoryTaken(_)
        | What::ArrivalAdopted { .. }
        | What::StageDeclared { .. }
        | What::StageLifted { .. }
        | What::TaskStarted { .. }
        | What::TaskDone { .. }
        | What::TaskCannot { .. }
        | What::TaskNotNeeded { .. }
        | What::TaskTakes { .. }
        | What::TaskNotBefore { .. }
        | What::TaskFixed { .. }
        | What::TaskRetracted { .. }
        | What::MeansOut { .. }
        | What::MeansBack { .. }
        | What::Observed { .. }
        | What::TaskLeft { .. }
        | What::Told(_)
        | What::Ruled(_)
        | What::Call(_)
        | What::Withdrawn { .. }
        | What::Confirmed { .. }
        | What::PlanIssued => return None,
    };
    let found = format!("{task} {lacks}");
    Some(Finding::error(
        code,
        event.place.clone(),
        found,
        "an order that the task's file provides for",
        to_do,
    ))
}

fn unknown_fulfilment(rules: &Rules, known: &Known<'_>) -> Vec<Finding> {
    let templates: Vec<&str> = rules.tasks.iter().map(|spec| spec.id.as_str()).collect();
    let named = rules.duties.iter().flat_map(|duty| duty.fulfilled_by.iter().map(move |task| (duty, task)));
    named
        .filter(|(_, task)| !templates.contains(&task.as_str()) && !known.tasks.contains(&task.as_str()))
        .map(|(duty, task)| {
            let candidates = templates.iter().chain(&known.tasks).copied();
            let hint = nearest(task, candidates).map(|name| format!("did you mean \"{name}\"?"));
            Finding::error(
                "work-unknown-duty-task",
                duty.written.clone(),
                format!(
                    "duty \"{}\" is fulfilled by \"{task}\", and there is no such task or template",
                    duty.id
                ),
                "a task's full id or a template's id",
                hint.unwrap_or_else(|| String::from("correct the name or add the task")),
            )
        })
        .collect()
}
