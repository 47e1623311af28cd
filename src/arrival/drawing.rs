//! Draws scenarios and follows each of them at every place that is asked about.

use crate::advisory::forecast::Advisory;
use crate::arrival::course::Course;
use crate::arrival::keyed::{BLOCK, Keyed};
use crate::arrival::onset::{Onset, ScenarioOnset, Watch};
use crate::arrival::question::{Question, Sought};
use crate::arrival::scenario::{Draws, Scenario};
use crate::arrival::seas::HighSeas;
use crate::arrival::threads::each_on;
use crate::wind::sphere::Vector;
use std::collections::BTreeMap;
use std::ops::Range;

/// For each question, in their order, what each scenario says, in the order of the scenarios.
pub type Onsets = Vec<Vec<ScenarioOnset>>;

/// Questions at one place, so that the geometry is worked out once for all its limits.
#[derive(Debug)]
struct Group {
    watch: Watch,
    /// Indices of the questions, by rising limit.
    questions: Vec<usize>,
}

/// All questions about one course.
#[derive(Debug)]
pub struct Drawing<'a> {
    course: &'a Course,
    keyed: Keyed,
    count: usize,
    groups: Vec<Group>,
    /// `None` where the advisory does not give their reach: questions about them stay without onsets.
    high_seas: Option<HighSeas>,
    /// Places of the questions about high seas, with their indices.
    seas: Vec<(Vector, usize)>,
}

impl<'a> Drawing<'a> {
    /// Gets ready for the questions.
    #[must_use]
    pub fn new(course: &'a Course, advisory: &Advisory, questions: &[Question]) -> Drawing<'a> {
        let mut places: BTreeMap<(u64, u64), Vec<(f64, usize)>> = BTreeMap::new();
        let mut seas = Vec::new();
        for (index, question) in questions.iter().enumerate() {
            let place = (question.position.latitude().to_bits(), question.position.longitude().to_bits());
            match question.sought {
                Sought::Wind(limit) => places.entry(place).or_default().push((limit.get(), index)),
                Sought::Seas => seas.push((course.vector(question.position), index)),
            }
        }
        let groups = places
            .into_values()
            .filter_map(|mut limits| {
                limits.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.cmp(&b.1)));
                let position = questions.get(limits.first()?.1)?.position;
                let (limits, questions) = limits.into_iter().unzip();
                Some(Group { watch: Watch::new(course.vector(position), limits), questions })
            })
            .collect();
        let storm = advisory.storm.id.as_deref().unwrap_or(&advisory.storm.name);
        let high_seas = HighSeas::of(advisory, course);
        Drawing { course, keyed: Keyed::storm(storm), count: questions.len(), groups, high_seas, seas }
    }

    /// Whether high seas are asked for and the advisory does not give their reach.
    #[must_use]
    pub fn lacks_seas(&self) -> bool {
        self.high_seas.is_none() && !self.seas.is_empty()
    }

    /// The first `count` scenarios for every question, block by block on so many threads.
    #[must_use]
    pub fn first(&self, threads: usize, count: usize) -> Onsets {
        let blocks: Vec<Range<usize>> =
            (0..count).step_by(BLOCK).map(|from| from..(from + BLOCK).min(count)).collect();
        let all = vec![true; self.count];
        let mut told: Onsets = vec![Vec::with_capacity(count); self.count];
        for block in each_on(threads, &blocks, |block| self.within_block(block.clone(), &all)) {
            join(&mut told, block);
        }
        told
    }

    /// More scenarios, up to `most`, for the questions with some onsets after issue, but fewer than `least`.
    ///
    /// One without any onset gets none: ten times as many could bring thirty, and with such a chance the first thousand show
    /// none in one case of twenty at most.
    pub fn more(&self, told: &mut Onsets, from: usize, most: usize, least: usize) {
        let mut start = from;
        while start < most {
            let lacking: Vec<bool> =
                told.iter().map(|onsets| (1..least).contains(&after_issue(onsets))).collect();
            if !lacking.contains(&true) {
                break;
            }
            // Up to the end of the block that `start` lies in, as its draws belong together.
            let end = ((start / BLOCK + 1) * BLOCK).min(most);
            join(told, self.within_block(start..end, &lacking));
            start = end;
        }
    }

    /// Scenarios that all belong to one block, for the questions wanted; the others get none.
    fn within_block(&self, scenarios: Range<usize>, wanted: &[bool]) -> Onsets {
        let is_wanted = |question: &usize| wanted.get(*question) == Some(&true);
        let groups: Vec<&Group> =
            self.groups.iter().filter(|group| group.questions.iter().any(is_wanted)).collect();
        let draws = Draws::of(self.course, self.keyed, scenarios.start / BLOCK);
        let mut scenario = Scenario::default();
        let mut told: Onsets = vec![Vec::new(); self.count];
        let mut tell = |question: usize, onset| {
            if let Some(onsets) = told.get_mut(question).filter(|_| is_wanted(&question)) {
                onsets.push(onset);
            }
        };
        for index in scenarios {
            scenario.draw(self.course, &draws, index);
            for group in &groups {
                let seen = group.watch.follow(self.course, &scenario);
                group.questions.iter().zip(seen).for_each(|(question, onset)| tell(*question, onset));
            }
            self.see(&scenario, &mut tell);
        }
        told
    }

    fn see(&self, scenario: &Scenario, mut tell: impl FnMut(usize, ScenarioOnset)) {
        let Some(high_seas) = &self.high_seas else { return };
        for (place, question) in &self.seas {
            tell(*question, high_seas.follow(self.course, scenario, *place));
        }
    }

    /// The forecast's own track, without errors, for every question.
    #[must_use]
    pub fn single_track(&self) -> Vec<ScenarioOnset> {
        let mut singles = vec![ScenarioOnset::NEVER; self.count];
        let mut scenario = Scenario::default();
        scenario.single_track(self.course);
        let mut tell = |question: usize, onset| {
            if let Some(single) = singles.get_mut(question) {
                *single = onset;
            }
        };
        for group in &self.groups {
            let seen = group.watch.follow(self.course, &scenario);
            group.questions.iter().zip(seen).for_each(|(question, onset)| tell(*question, onset));
        }
        self.see(&scenario, &mut tell);
        singles
    }
}

fn after_issue(onsets: &[ScenarioOnset]) -> usize {
    onsets.iter().filter(|scenario| matches!(scenario.onset, Onset::At(_))).count()
}

fn join(told: &mut Onsets, more: Onsets) {
    told.iter_mut().zip(more).for_each(|(onsets, more)| onsets.extend(more));
}
