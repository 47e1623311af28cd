//! What adopting the newly computed arrival would move: the plan tried with it, beside the plan in hand.

use crate::plan::draft::{Draft, DraftInputs};
use crate::plan::sheet::{Arrival, IfAdopted, StageShift};
use crate::rules::stage::Rules;
use crate::schedule::outcome::Outcome;
use crate::time::moment::{Minutes, Moment};
use crate::work::reckoned::{AdoptedArrival, ArrivalBook};
use crate::work::timed::{Timed, timed};
use petgraph::graph::NodeIndex;
use std::collections::BTreeMap;

/// For each adopted arrival from which the computed one differs by more than the rules' margin, earlier or later: what
/// an order to adopt the computed one would do. `make` makes a try for other times as the plan in hand was made.
#[must_use]
pub fn if_adopted(
    inputs: DraftInputs<'_>,
    rules: &Rules,
    book: &ArrivalBook<'_>,
    (in_hand, arrivals): (&Draft, &[Arrival]),
    make: impl Fn(DraftInputs<'_>) -> Draft,
) -> Vec<IfAdopted> {
    let differs = |arrival: &&Arrival| match (arrival.adopted, arrival.computed) {
        (Some(adopted), Some(computed)) => {
            let gap = if computed > adopted { computed - adopted } else { adopted - computed };
            gap > rules.adopted_margin
        }
        (Some(_) | None, _) => false,
    };
    let mut found = Vec::new();
    for arrival in arrivals.iter().filter(differs) {
        let Some(computed) = arrival.computed else { continue };
        let mut tried_book = book.clone();
        let adopted = AdoptedArrival { wind: arrival.wind.speed, time: computed, answers: book.answers };
        tried_book.adopted.insert(arrival.place.clone(), adopted);
        let times = timed(inputs.work, rules, &tried_book, inputs.situation);
        let tried = make(DraftInputs { timed: &times, ..inputs });
        found.push(compared(inputs, rules, (in_hand, &tried), &times, arrival));
    }
    found
}

fn compared(
    inputs: DraftInputs<'_>,
    rules: &Rules,
    (in_hand, tried): (&Draft, &Draft),
    times: &Timed,
    arrival: &Arrival,
) -> IfAdopted {
    let (now, then) = (in_hand.misses(inputs.work), tried.misses(inputs.work));
    let (old, new) = (starts(in_hand), starts(tried));
    let moves = |(node, start): (&NodeIndex, &Moment)| new.get(node).is_some_and(|other| other != start);
    let stages = rules.stages.iter().zip(inputs.timed.stages.iter().zip(&times.stages));
    IfAdopted {
        place: arrival.place_name.clone(),
        computed: arrival.computed.unwrap_or(inputs.now),
        by: arrival
            .adopted
            .zip(arrival.computed)
            .map_or(Minutes::ZERO, |(adopted, computed)| computed - adopted),
        stages: stages
            .filter(|(_, (before, after))| before.due != after.due && before.declared.is_none())
            .map(|(stage, (before, after))| StageShift {
                id: stage.id.clone(),
                from: before.due,
                to: after.due,
            })
            .collect(),
        moved: old.iter().filter(|entry| moves(*entry)).count(),
        given_up: then.difference(&now).cloned().collect(),
        relieved: now.difference(&then).cloned().collect(),
    }
}

fn starts(draft: &Draft) -> BTreeMap<NodeIndex, Moment> {
    let placed = draft.stated.nodes.iter().zip(&draft.schedule.outcomes).filter_map(|(node, outcome)| {
        let Outcome::Placed(placement) = outcome else { return None };
        Some((*node, placement.start))
    });
    placed.collect()
}
