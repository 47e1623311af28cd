//! Who serves a task: when enough members are free for its needs, and which of them are chosen.

use crate::schedule::model::{ModelNeed, ModelWay, NEVER};
use crate::schedule::place::{Builder, Choices, Slot};

impl Builder<'_> {
    /// The first start at or after `start` at which enough members can be held for a need, and the member that makes
    /// them enough.
    pub fn first_ready(&self, need: &ModelNeed, takes: i64, start: i64) -> Option<(i64, usize)> {
        let mut missing = need.count;
        let length = need.before + takes + need.after;
        if need.able.len() < need.count {
            return None;
        }
        if missing == 0 || length == 0 {
            return Some((start, 0));
        }
        let from = start - need.before;
        let mut soonest = (NEVER, 0);
        let mut later = Vec::new();
        for member in &need.able {
            let fit = self.model.members[*member].first_fit(&self.rosters[*member], from, length);
            let Some(fit) = fit else { continue };
            if fit == from {
                missing -= 1;
                if missing == 0 {
                    return Some((start, *member));
                }
            } else if need.count == 1 {
                soonest = soonest.min((fit, *member));
            } else {
                later.push((fit, *member));
            }
        }
        if need.count > 1 {
            later.sort_unstable();
            soonest = later.get(missing - 1).copied()?;
        }
        (soonest.0 < NEVER).then_some((soonest.0 + need.before, soonest.1))
    }

    /// Whether a member can be held for a need when the task starts at `start`.
    pub fn is_free(&self, need: &ModelNeed, takes: i64, member: usize, start: i64) -> bool {
        let (from, length) = (start - need.before, need.before + takes + need.after);
        length == 0 || self.model.members[member].first_fit(&self.rosters[member], from, length) == Some(from)
    }

    /// The next start after `start` at which somebody who cannot serve then can.
    pub fn next_change(&self, way: &ModelWay, start: i64) -> Option<i64> {
        let mut next: Option<i64> = None;
        for need in &way.needs {
            let (from, length) = (start - need.before, need.before + way.takes + need.after);
            for member in need.able.iter().filter(|_| length > 0) {
                let fit = self.model.members[*member].first_fit(&self.rosters[*member], from, length);
                if let Some(later) = fit.filter(|fit| *fit > from) {
                    let later = later + need.before;
                    next = Some(next.map_or(later, |next| next.min(later)));
                }
            }
        }
        next
    }

    /// Adds the members of a task that is about to be placed to the builder's people.
    pub fn choose_members(&mut self, choices: &Choices, task: usize, slot: &Slot) {
        let data = &self.model.tasks[task];
        let way = &data.ways[slot.way];
        // People who were told that they serve here come first, as far as they can.
        let told = data.issued.as_ref().filter(|issued| issued.way == slot.way && issued.start == slot.start);
        let turn = choices.turn[task];
        let preferred = |need: &ModelNeed| -> Vec<usize> {
            let mut able = need.able.clone();
            let by = turn % able.len().max(1);
            able.rotate_left(by);
            if let Some(told) = told {
                able.sort_by_key(|member| !told.members.iter().any(|(_, named)| named == member));
            }
            able
        };
        if way.shares {
            let shared = self.share_out(way, slot.start, preferred).unwrap_or_default();
            self.people.extend(shared);
            return;
        }
        for (number, need) in way.needs.iter().enumerate() {
            let mut missing = need.count;
            let is_plain = turn == 0 && told.is_none();
            let able = if is_plain { None } else { Some(preferred(need)) };
            for member in able.as_ref().unwrap_or(&need.able) {
                if missing == 0 {
                    break;
                }
                if self.is_free(need, way.takes, *member, slot.start) {
                    self.people.push((number, *member));
                    missing -= 1;
                }
            }
        }
    }

    /// Members for all needs of a way together, none serving two of them; `None` if there are too few.
    pub fn share_out(
        &self,
        way: &ModelWay,
        start: i64,
        preferred: impl Fn(&ModelNeed) -> Vec<usize>,
    ) -> Option<Vec<(usize, usize)>> {
        let mut places: Vec<(usize, Vec<usize>)> = Vec::new();
        for (number, need) in way.needs.iter().enumerate() {
            let mut able = preferred(need);
            able.retain(|member| self.is_free(need, way.takes, *member, start));
            places.extend(std::iter::repeat_n((number, able), need.count));
        }
        let mut holder_of: Vec<(usize, usize)> = Vec::new();
        for place in 0..places.len() {
            let mut tried = Vec::new();
            if !seat(place, &places, &mut holder_of, &mut tried) {
                return None;
            }
        }
        let mut shared: Vec<(usize, usize)> =
            holder_of.into_iter().map(|(member, place)| (places[place].0, member)).collect();
        shared.sort_unstable();
        Some(shared)
    }
}

/// Finds a member for a place, making others change places where that helps (an augmenting path).
fn seat(
    place: usize,
    places: &[(usize, Vec<usize>)],
    holder_of: &mut Vec<(usize, usize)>,
    tried: &mut Vec<usize>,
) -> bool {
    for member in &places[place].1 {
        if tried.contains(member) {
            continue;
        }
        tried.push(*member);
        match holder_of.iter().position(|(held, _)| held == member) {
            None => {
                holder_of.push((*member, place));
                return true;
            }
            Some(at) => {
                let other = holder_of[at].1;
                if seat(other, places, holder_of, tried) {
                    // The other place has found somebody else; this member is the only entry left with that place.
                    holder_of.retain(|(held, at)| !(held == member && *at == other));
                    holder_of.push((*member, place));
                    return true;
                }
            }
        }
    }
    false
}
