//! How good a schedule is: whole numbers, compared in order; the order is told at [`Score`].

use crate::schedule::model::{Model, ModelTask, NEVER, Standing};
use crate::schedule::outcome::{ClassScore, Score};
use crate::schedule::place::{Builder, Slot, State};

/// What a move of an issued task counts by how near its issued start is: within 6 h, within 24 h, and beyond.
///
/// Our choice, not measured: a crew called for the next hours is on its way; one for the day after is not yet called.
const NEARNESS: [(i64, u64); 2] = [(6 * 60, 4), (24 * 60, 2)];
const FAR: u64 = 1;

/// How much it counts that a task stays where it was issued; a change of time counts twice this, one of members once.
pub(crate) fn nearness(model: &Model, issued: &Standing) -> u64 {
    let ahead = issued.start - model.now;
    NEARNESS.iter().find(|(within, _)| ahead <= *within).map_or(FAR, |(_, weight)| *weight)
}

/// The score of what the builder holds.
pub(crate) fn score(builder: &Builder) -> Score {
    let model = builder.model;
    let mut score = Score { classes: vec![ClassScore::default(); model.classes], ..Score::default() };
    for (data, slot) in model.tasks.iter().zip(&builder.slots) {
        let class = &mut score.classes[data.class];
        if slot.state == State::Placed {
            class.late += late(data, slot);
            score.cost += data.ways[slot.way].cost;
            score.finishes += slot.finish - model.now;
        } else {
            class.given_up += data.weight;
            score.finishes += model.horizon - model.now;
        }
        score.moved += moved(builder, data, slot);
    }
    score
}

/// Minutes by which a placed task finishes after it is due; only a fixed one can be beyond its deadline.
pub(crate) fn late(data: &ModelTask, slot: &Slot) -> u64 {
    (slot.finish - data.due.min(data.deadline).min(NEVER)).max(0).unsigned_abs()
}

/// What the move of a task counts; 0 if it stays or was not issued.
pub(crate) fn moved(builder: &Builder, data: &ModelTask, slot: &Slot) -> u64 {
    let Some(issued) = data.issued.as_ref().filter(|_| data.fixed.is_none()) else { return 0 };
    let near = nearness(builder.model, issued);
    if slot.state != State::Placed || slot.start != issued.start || slot.way != issued.way {
        return 2 * near;
    }
    let members = builder.people_of(slot);
    let stays = issued.members.iter().all(|pair| members.contains(pair));
    if stays { 0 } else { near }
}
