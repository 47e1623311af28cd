//! Where the search begins: orders of placing by rules that have served well.

use crate::schedule::bound::Bound;
use crate::schedule::model::{Model, NEVER};
use crate::schedule::place::Choices;

impl Choices {
    /// Tasks by rank, all as stated, issued ones kept.
    pub fn plain(model: &Model) -> Choices {
        let count = model.tasks.len();
        Choices {
            order: (0..count).collect(),
            keep: vec![true; count],
            way: vec![0; count],
            turn: vec![0; count],
            not_before: vec![-NEVER; count],
            yields: vec![false; count],
        }
    }
}

/// Where the search starts, the most promising first: the issued plan before all else, then the tasks by class and latest finish;
/// the same without regard to the issued plan; by latest start; by weight; by earliest start.
pub(crate) fn seeds(model: &Model, bound: &Bound, wanted: &[i64]) -> Vec<Choices> {
    let class = inherited_class(model, bound);
    let weight = |task: usize| u64::MAX - model.tasks[task].weight;
    let shortest = |task: usize| model.tasks[task].ways.iter().map(|way| way.takes).min().unwrap_or(0);
    let latest_start = |task: usize| wanted[task].saturating_sub(shortest(task));
    let spare = |task: usize| wanted[task].saturating_sub(bound.finish[task]);
    let has_issued = model.tasks.iter().any(|task| task.issued.is_some());
    let mut seeds = Vec::new();
    if has_issued {
        let issued = |task: usize| model.tasks[task].issued.as_ref().map_or(NEVER, |issued| issued.start);
        seeds.push(by(model, |task| (issued(task), class[task] as i64, latest_start(task), weight(task))));
    }
    seeds.push(by(model, |task| (class[task], latest_start(task), weight(task))));
    seeds.push(by(model, |task| (class[task], wanted[task], weight(task))));
    if has_issued {
        let mut free = by(model, |task| (class[task], latest_start(task), weight(task)));
        free.keep.fill(false);
        seeds.push(free);
    }
    seeds.push(by(model, |task| (class[task], weight(task), latest_start(task))));
    seeds.push(by(model, |task| (class[task], spare(task), latest_start(task))));
    seeds.push(by(model, |task| (class[task], bound.start[task], wanted[task])));
    seeds.push(by(model, |task| (latest_start(task), class[task], weight(task))));
    seeds
}

fn by<K: Ord>(model: &Model, key: impl Fn(usize) -> K) -> Choices {
    let mut choices = Choices::plain(model);
    choices.order.sort_by_key(|task| (key(*task), *task));
    choices
}

/// The most important class among a task and all that wait for it, hopeless ones aside.
fn inherited_class(model: &Model, bound: &Bound) -> Vec<usize> {
    let mut class: Vec<usize> = model.tasks.iter().map(|task| task.class).collect();
    for task in model.in_turn.iter().rev() {
        for link in &model.leads[*task] {
            if !bound.is_hopeless[link.other] {
                class[*task] = class[*task].min(class[link.other]);
            }
        }
    }
    class
}
