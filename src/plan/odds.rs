//! The odds of every advisory that the record took, each worked out when first asked for or ahead of that.

use crate::advisory::forecast::Advisory;
use crate::arrival::odds::{Answers, ask};
use crate::plan::inputs::Inputs;
use crate::record::event::What;
use crate::record::fold::in_order;
use crate::work::questions::questions;
use chrono::{DateTime, Utc};
use std::collections::BTreeMap;
use std::sync::OnceLock;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::thread::{available_parallelism, scope};

/// The odds of all advisories taken. Whoever asks first works them out; the answers depend on the advisory alone, so
/// that neither the order nor the number of threads changes anything but the time.
#[derive(Debug)]
pub struct AllOdds<'a> {
    inputs: Inputs<'a>,
    /// In the order in which they were taken.
    entries: Vec<(&'a Advisory, OnceLock<Answers>)>,
    by_file: BTreeMap<&'a str, usize>,
}

impl<'a> AllOdds<'a> {
    /// The advisories that were taken by `now` and are at hand, those withdrawn since too: earlier plans stood on them. No
    /// odds yet.
    #[must_use]
    pub fn of(inputs: &Inputs<'a>, now: DateTime<Utc>) -> AllOdds<'a> {
        let mut entries = Vec::new();
        let mut by_file = BTreeMap::new();
        for event in in_order(inputs.events).into_iter().take_while(|event| event.known <= now) {
            let What::AdvisoryTaken { file, .. } = &event.what else { continue };
            let Some((file, advisory)) = inputs.forecasts.get_key_value(file) else { continue };
            by_file.entry(file.as_str()).or_insert_with(|| {
                entries.push((advisory, OnceLock::new()));
                entries.len() - 1
            });
        }
        AllOdds { inputs: *inputs, entries, by_file }
    }

    /// The odds of one advisory; `None` if it was not taken.
    #[must_use]
    pub fn get(&self, file: &str) -> Option<&Answers> {
        self.answers(*self.by_file.get(file)?)
    }

    fn answers(&self, number: usize) -> Option<&Answers> {
        let Inputs { port, rules, work, tables, draw, .. } = self.inputs;
        let (advisory, answers) = self.entries.get(number)?;
        Some(answers.get_or_init(|| {
            let asked = questions(port, rules, work, advisory.averaging);
            ask(advisory, &tables.for_advisory(advisory), &asked, draw)
        }))
    }

    /// Does `work`, which asks for the odds from the oldest on, while other threads work them out from the newest back:
    /// they meet, and rarely wait for each other.
    pub fn ahead_of<R>(&self, work: impl FnOnce() -> R) -> R {
        let others = available_parallelism().map_or(0, |threads| threads.get() - 1).min(self.entries.len());
        let done = AtomicUsize::new(0);
        let from_the_newest = || {
            while let Some(number) = self.entries.len().checked_sub(done.fetch_add(1, Ordering::Relaxed) + 1)
            {
                let _ = self.answers(number);
            }
        };
        // A panic in one of them comes out of the scope: odds that are missing must never look like ones that are empty.
        scope(|scope| {
            for _ in 0..others {
                scope.spawn(from_the_newest);
            }
            work()
        })
    }
}
