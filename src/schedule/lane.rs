//! When a passage can enter a lane: spaced from others of its direction, clear of those against it.

use crate::schedule::model::{ModelLane, Passage};
use crate::schedule::problem::Direction;

/// A passage that has its time.
#[derive(Clone, Copy)]
pub(crate) struct Transit {
    pub enter: i64,
    pub leave: i64,
    pub direction: Direction,
    pub class: usize,
    /// The task, by its place in the model.
    pub task: usize,
}

impl Transit {
    /// The passage of a task that starts at `start`.
    pub fn new(passage: &Passage, start: i64, task: usize) -> Transit {
        Transit {
            enter: start + passage.enter,
            leave: start + passage.leave,
            direction: passage.direction,
            class: passage.class,
            task,
        }
    }
}

impl ModelLane {
    /// The first start at or after `start` from which the passage fits among the transits, which are in order of
    /// entry; with the transit that was in the way last, if any was.
    pub fn first_fit(&self, transits: &[Transit], passage: &Passage, start: i64) -> (i64, Option<usize>) {
        let mut enter = start + passage.enter;
        let mut in_the_way = None;
        'moved: loop {
            let first = transits.partition_point(|transit| transit.enter <= enter - self.reach);
            for transit in &transits[first..] {
                if transit.enter >= enter + self.reach {
                    break;
                }
                if let Some(later) = self.blocked_until(transit, passage, enter) {
                    enter = later;
                    in_the_way = Some(transit.task);
                    continue 'moved;
                }
            }
            return (enter - passage.enter, in_the_way);
        }
    }

    /// When a passage that would enter at `enter` can enter behind a transit that it clashes with.
    fn blocked_until(&self, transit: &Transit, passage: &Passage, enter: i64) -> Option<i64> {
        let (behind, ahead) = if transit.direction == passage.direction {
            let behind = transit.enter + self.spacing[transit.class][passage.class];
            (behind, transit.enter - self.spacing[passage.class][transit.class])
        } else {
            let length = passage.leave - passage.enter;
            (transit.leave + self.clearance, transit.enter - length - self.clearance)
        };
        (ahead < enter && enter < behind).then_some(behind)
    }
}

/// Adds a transit in order of entry.
pub(crate) fn pass(transits: &mut Vec<Transit>, transit: Transit) {
    let at = transits.partition_point(|other| (other.enter, other.task) < (transit.enter, transit.task));
    transits.insert(at, transit);
}
