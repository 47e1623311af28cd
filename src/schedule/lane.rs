//! When a passage can enter a lane: spaced from others of its direction, clear of those against it.

use crate::schedule::model::{ModelLane, Passage};
use crate::schedule::problem::Direction;

/// The passages through a lane that have their times, each direction in order of entry.
#[derive(Clone, Default)]
pub(crate) struct Traffic {
    outward: Vec<Transit>,
    inward: Vec<Transit>,
}

/// A passage that has its time.
#[derive(Clone, Copy)]
struct Transit {
    enter: i64,
    leave: i64,
    class: usize,
    /// The task, by its place in the model.
    task: usize,
}

impl Traffic {
    /// Adds the passage of a task that starts at `start`.
    pub fn pass(&mut self, passage: &Passage, start: i64, task: usize) {
        let transits = match passage.direction {
            Direction::Out => &mut self.outward,
            Direction::In => &mut self.inward,
        };
        let (enter, leave) = (start + passage.enter, start + passage.leave);
        let at = transits.partition_point(|other| (other.enter, other.task) < (enter, task));
        transits.insert(at, Transit { enter, leave, class: passage.class, task });
    }
}

impl ModelLane {
    /// The first start at or after `start` from which the passage fits into the traffic; with the task that was in the
    /// way last, if any was.
    pub fn first_fit(&self, traffic: &Traffic, passage: &Passage, start: i64) -> (i64, Option<usize>) {
        let (along, against) = match passage.direction {
            Direction::Out => (&traffic.outward, &traffic.inward),
            Direction::In => (&traffic.inward, &traffic.outward),
        };
        let length = passage.leave - passage.enter;
        let mut enter = start + passage.enter;
        let mut in_the_way = None;
        loop {
            let behind = near(along, enter, self.reach).find_map(|other| {
                let ahead = other.enter - self.spacing[passage.class][other.class];
                let behind = other.enter + self.spacing[other.class][passage.class];
                (ahead < enter && enter < behind).then_some((behind, other.task))
            });
            let behind = behind.or_else(|| {
                near(against, enter, self.reach_against).find_map(|other| {
                    let ahead = other.enter - length - self.clearance;
                    let behind = other.leave + self.clearance;
                    (ahead < enter && enter < behind).then_some((behind, other.task))
                })
            });
            let Some((later, task)) = behind else { return (enter - passage.enter, in_the_way) };
            enter = later;
            in_the_way = Some(task);
        }
    }
}

/// The transits that enter less than `reach` from a moment.
fn near(transits: &[Transit], enter: i64, reach: i64) -> impl Iterator<Item = &Transit> {
    let first = transits.partition_point(|transit| transit.enter <= enter - reach);
    transits[first..].iter().take_while(move |transit| transit.enter < enter + reach)
}
