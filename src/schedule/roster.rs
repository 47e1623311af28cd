//! When a member can be held: between its other holds, on shift, and within its hours of duty.

use crate::schedule::model::{ModelMember, NEVER, Stretches};

impl ModelMember {
    /// The first start at or after `from` of a hold of `length` minutes that fits among `holds`; `length` above 0.
    pub fn first_fit(&self, holds: &[(i64, i64)], from: i64, length: i64) -> Option<i64> {
        if length > self.at_most {
            return None;
        }
        let mut start = from;
        let mut shift = self.available.partition_point(|(_, end)| *end <= start);
        let mut next = holds.partition_point(|(_, end)| *end <= start);
        loop {
            // The first shift that is long enough from here on.
            loop {
                let (opens, closes) = *self.available.get(shift)?;
                start = start.max(opens);
                if start + length <= closes {
                    break;
                }
                shift += 1;
            }
            while holds.get(next).is_some_and(|(_, end)| *end <= start) {
                next += 1;
            }
            match self.first_in_gap(holds, next, start, length) {
                Some(found) if found == start => return Some(start),
                Some(found) => start = found,
                None => start = holds.get(next)?.1,
            }
        }
    }

    /// The first start at or after `start` in the gap before the hold `next`, all holds before which end by `start`.
    ///
    /// A hold can join the block of duty on its left, the one on its right, both or neither; from left to right the
    /// gap is cut into the stretches where it does so, and each has its own bound.
    fn first_in_gap(&self, holds: &[(i64, i64)], next: usize, start: i64, length: i64) -> Option<i64> {
        let gap_end = holds.get(next).map_or(NEVER, |(start, _)| *start);
        if start + length > gap_end {
            return None;
        }
        if self.at_most == NEVER {
            return Some(start);
        }
        let gap_start = if next == 0 { -NEVER } else { holds[next - 1].1 };
        let joins_left_before = gap_start + self.rest;
        // From this start on the hold joins the block on the right.
        let joins_right_from = gap_end - length - self.rest + 1;
        if start < joins_left_before {
            let left = self.block_start(&holds[..next]);
            if start < joins_right_from && start + length - left <= self.at_most {
                return Some(start);
            }
            let both = start.max(joins_right_from);
            if both < joins_left_before
                && both + length <= gap_end
                && self.block_end(&holds[next..]) - left <= self.at_most
            {
                return Some(both);
            }
        }
        let alone = start.max(joins_left_before);
        if alone < joins_right_from {
            return Some(alone);
        }
        let right = alone.max(joins_right_from).max(self.block_end(&holds[next..]) - self.at_most);
        (right + length <= gap_end).then_some(right)
    }

    /// The start of the block of duty that the last of these holds belongs to.
    fn block_start(&self, holds: &[(i64, i64)]) -> i64 {
        let mut start = NEVER;
        for (begins, ends) in holds.iter().rev() {
            if start != NEVER && start - ends >= self.rest {
                break;
            }
            start = *begins;
        }
        start
    }

    /// The end of the block of duty that the first of these holds belongs to.
    fn block_end(&self, holds: &[(i64, i64)]) -> i64 {
        let mut end = -NEVER;
        for (begins, ends) in holds {
            if end != -NEVER && begins - end >= self.rest {
                break;
            }
            end = *ends;
        }
        end
    }
}

/// Adds a hold that fits.
pub(crate) fn hold(holds: &mut Stretches, start: i64, end: i64) {
    let at = holds.partition_point(|held| *held < (start, end));
    holds.insert(at, (start, end));
}

#[cfg(test)]
mod tests {
    use super::hold;
    use crate::schedule::model::{ModelMember, NEVER};
    use proptest::prelude::proptest;

    fn member(at_most: i64, rest: i64, available: &[(i64, i64)]) -> ModelMember {
        let available = available.to_vec();
        ModelMember { pool: 0, number: 0, available, at_most, rest, worked: Vec::new() }
    }

    /// The blocks of duty, told minute by minute from the meaning of the words.
    fn is_lawful(holds: &[(i64, i64)], at_most: i64, rest: i64) -> bool {
        let mut sorted = holds.to_vec();
        sorted.sort_unstable();
        let mut block = (0, -NEVER);
        for (start, end) in sorted {
            block = if start - block.1 < rest { (block.0, end) } else { (start, end) };
            if block.1 - block.0 > at_most {
                return false;
            }
        }
        true
    }

    #[test]
    fn a_hold_waits_for_the_rest_when_the_block_would_grow_too_long() {
        let pilot = member(600, 600, &[(0, 5_000)]);
        assert_eq!(pilot.first_fit(&[(0, 195), (390, 585)], 585, 195), Some(585 + 600));
        assert_eq!(pilot.first_fit(&[(0, 195)], 300, 195), Some(300));
    }

    #[test]
    fn a_hold_that_would_join_two_blocks_into_one_too_long_is_refused() {
        let pilot = member(600, 600, &[(0, 5_000)]);
        assert_eq!(pilot.first_fit(&[(0, 300), (900, 1_200)], 300, 100), Some(1_200));
    }

    proptest! {
        #[test]
        fn the_first_fit_is_what_trying_every_minute_finds(
            wanted in proptest::collection::vec((0_i64..80, 1_i64..12), 0..7),
            at_most in 8_i64..40, rest in 0_i64..25, from in 0_i64..60, length in 1_i64..14,
            gap in 0_i64..20, has_duty in proptest::bool::ANY,
        ) {
            let (at_most, rest) = if has_duty { (at_most, rest) } else { (NEVER, 0) };
            let pilot = member(at_most, rest, &[(0, 50), (50 + gap, 120)]);
            let fits = |holds: &[(i64, i64)], start: i64, length: i64| {
                let end = start + length;
                let is_free = holds.iter().all(|(s, e)| end <= *s || *e <= start);
                let is_on_shift = pilot.available.iter().any(|(s, e)| *s <= start && end <= *e);
                let mut with = holds.to_vec();
                with.push((start, end));
                is_free && is_on_shift && is_lawful(&with, at_most, rest)
            };
            let mut holds = Vec::new();
            for (start, length) in wanted {
                if fits(&holds, start, length) {
                    hold(&mut holds, start, start + length);
                }
            }
            let slow = (from..130).find(|start| fits(&holds, *start, length));
            assert_eq!(pilot.first_fit(&holds, from, length), slow);
        }
    }
}
