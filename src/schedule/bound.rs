//! What no schedule can beat: each task's earliest start beside what is fixed alone, and the score that follows.

use crate::schedule::model::{Model, NEVER, Standing, last_in};
use crate::schedule::outcome::{ClassScore, Score};
use crate::schedule::place::Builder;
use crate::schedule::problem::{IfGivenUp, LinkKind};
use crate::schedule::score::nearness;

/// For each task, what holds in every schedule.
pub(crate) struct Bound {
    /// No schedule starts it sooner; [`NEVER`] if none can place it.
    pub start: Vec<i64>,
    /// No schedule finishes it sooner; [`NEVER`] if none can place it.
    pub finish: Vec<i64>,
    /// Whether no schedule can place it.
    pub is_hopeless: Vec<bool>,
}

impl Bound {
    /// Places every task by itself beside what is fixed, after the bounds of those that it must wait for.
    ///
    /// A link that falls away when the other task is given up binds only if that task is fixed: a schedule may give
    /// it up. The builder must hold nothing but what is fixed.
    pub fn new(builder: &Builder) -> Bound {
        let model = builder.model;
        let count = model.tasks.len();
        let mut bound =
            Bound { start: vec![NEVER; count], finish: vec![NEVER; count], is_hopeless: vec![true; count] };
        for task in &model.in_turn {
            let data = &model.tasks[*task];
            if let Some(fixed) = &data.fixed {
                (bound.start[*task], bound.finish[*task]) = (fixed.start, fixed.finish);
                bound.is_hopeless[*task] = false;
                continue;
            }
            if bound.is_cut(model, *task) {
                continue;
            }
            for way in &data.ways {
                let root = bound.root(model, *task, way.takes);
                let Some(start) = builder.first_start(way, root, |_, _, _| ()) else { continue };
                bound.start[*task] = bound.start[*task].min(start);
                bound.finish[*task] = bound.finish[*task].min(start + way.takes);
            }
            bound.is_hopeless[*task] = bound.finish[*task] > data.deadline.min(NEVER - 1);
        }
        bound
    }

    /// Whether a task waits for one that no schedule can place, and is given up with it.
    fn is_cut(&self, model: &Model, task: usize) -> bool {
        let mut waits = model.waits[task].iter();
        waits.any(|link| link.if_given_up == IfGivenUp::GiveUpToo && self.is_hopeless[link.other])
    }

    fn root(&self, model: &Model, task: usize, takes: i64) -> i64 {
        let mut root = model.tasks[task].release;
        for link in &model.waits[task] {
            let binds = link.if_given_up == IfGivenUp::GiveUpToo || model.tasks[link.other].fixed.is_some();
            if binds {
                root = root.max(link.start_after(self.start[link.other], self.finish[link.other], takes));
            }
        }
        root
    }

    /// A score that no schedule can beat, its sum of finishes aside.
    pub fn score(&self, builder: &Builder) -> Score {
        let model = builder.model;
        let mut score = Score { classes: vec![ClassScore::default(); model.classes], ..Score::default() };
        for (task, data) in model.tasks.iter().enumerate() {
            let class = &mut score.classes[data.class];
            if self.is_hopeless[task] {
                class.given_up += data.weight;
                score.finishes += model.horizon - model.now;
            } else {
                let late = (self.finish[task] - data.due.min(data.deadline)).max(0);
                class.late += late.unsigned_abs();
                score.finishes += self.finish[task] - model.now;
                let costs = data.ways.iter().map(|way| way.cost);
                score.cost += match &data.fixed {
                    Some(fixed) => data.ways[fixed.way].cost,
                    None => costs.min().unwrap_or(0),
                };
            }
            if let Some(issued) = data.issued.as_ref().filter(|_| data.fixed.is_none()) {
                score.moved += self.forced_move(builder, task, issued);
            }
        }
        score
    }

    /// What moving an issued task costs at least in every schedule.
    fn forced_move(&self, builder: &Builder, task: usize, issued: &Standing) -> u64 {
        let near = nearness(builder.model, issued);
        let can_stand = !self.is_hopeless[task]
            && self.root(builder.model, task, issued.finish - issued.start) <= issued.start;
        if can_stand && builder.stands(task, issued) {
            0
        } else if can_stand && builder.could_stand(task, issued) {
            near
        } else {
            2 * near
        }
    }

    /// By when each task should finish so that neither it nor anything that waits for it is later than it must be,
    /// members aside.
    pub fn wanted(&self, model: &Model) -> Vec<i64> {
        let mut ends: Vec<(i64, i64)> = self.start.iter().copied().zip(self.finish.iter().copied()).collect();
        for task in model.in_turn.iter().rev() {
            let data = &model.tasks[*task];
            if self.is_hopeless[*task] || data.fixed.is_some() {
                continue;
            }
            // A due time that cannot be met wants the least lateness there can be.
            let mut wanted = data.deadline.min(data.due.max(self.finish[*task])).min(model.horizon);
            let shortest = data.ways.iter().map(|way| way.takes).min().unwrap_or(0);
            for link in &model.leads[*task] {
                if self.is_hopeless[link.other] || model.tasks[link.other].fixed.is_some() {
                    continue;
                }
                let (start, finish) = ends[link.other];
                wanted = wanted.min(match link.kind {
                    LinkKind::FinishStart => start - link.lag,
                    LinkKind::StartStart => start - link.lag + shortest,
                    LinkKind::FinishFinish => finish - link.lag,
                    LinkKind::StartFinish => finish - link.lag + shortest,
                });
            }
            let last = data.ways.iter().filter_map(|way| {
                let start = last_in(&model.starts[way.starts], wanted - way.takes)?;
                Some((start, start + way.takes))
            });
            let (start, finish) = last.max().unwrap_or((wanted - shortest, wanted));
            ends[*task] = (start.max(self.start[*task]), finish.max(self.finish[*task]));
        }
        ends.into_iter().map(|(_, finish)| finish).collect()
    }
}
