//! The odds of every advisory that the record took, each worked out when first asked for or ahead of that.

use crate::advisory::forecast::Advisory;
use crate::arrival::earlier::earlier_of;
use crate::arrival::odds::{Answers, ask};
use crate::plan::in_force::{at_adoption, in_force};
use crate::plan::inputs::Inputs;
use crate::record::event::What;
use crate::record::fold::{in_order, situation};
use crate::time::moment::Moment;
use crate::work::questions::questions;
use std::collections::BTreeMap;
use std::sync::OnceLock;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::thread::{available_parallelism, scope};

/// The odds of all advisories taken, and of all sets of storms that were in force together. Whoever asks first works them
/// out; the answers depend on the advisories alone, so that neither the order nor the number of threads changes anything
/// but the time.
#[derive(Debug)]
pub struct AllOdds<'a> {
    inputs: Inputs<'a>,
    /// In the order in which they were taken.
    entries: Vec<(&'a Advisory, OnceLock<Answers>)>,
    by_file: BTreeMap<&'a str, usize>,
    /// By sorted files, two or more.
    together: BTreeMap<Vec<String>, OnceLock<Option<Answers>>>,
}

impl<'a> AllOdds<'a> {
    /// The advisories that were taken by `now` and are at hand, those withdrawn since too, as earlier plans stood on them;
    /// and which of them were in force together at one of `moments`. No odds yet.
    #[must_use]
    pub fn of(inputs: &Inputs<'a>, now: Moment, moments: &[Moment]) -> AllOdds<'a> {
        let mut entries = Vec::new();
        let mut by_file = BTreeMap::new();
        for event in in_order(inputs.events).into_iter().take_while(|event| event.known <= now.to_utc()) {
            let What::AdvisoryTaken(taking) = &event.what else { continue };
            let Some((file, advisory)) = inputs.forecasts.get_key_value(&taking.key()) else { continue };
            by_file.entry(file.as_str()).or_insert_with(|| {
                entries.push((advisory, OnceLock::new()));
                entries.len() - 1
            });
        }
        let mut together = BTreeMap::new();
        for files in moments.iter().flat_map(|moment| sets_at(inputs, *moment)) {
            if files.len() > 1 {
                together.insert(files, OnceLock::new());
            }
        }
        AllOdds { inputs: *inputs, entries, by_file, together }
    }

    /// The odds of some advisories together, `files` sorted; `None` if there are none, or they never were in force together.
    #[must_use]
    pub fn get(&self, files: &[&str]) -> Option<&Answers> {
        match files {
            [] => None,
            [file] => self.answers(*self.by_file.get(file)?),
            _ => {
                let key: Vec<String> = files.iter().map(|file| (*file).to_owned()).collect();
                let earlier = || {
                    let storms: Option<Vec<&Answers>> = files.iter().map(|file| self.get(&[file])).collect();
                    earlier_of(&storms?)
                };
                self.together.get(&key)?.get_or_init(earlier).as_ref()
            }
        }
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

/// The files of the advisories in force at a moment, and of those at each adoption that holds then.
fn sets_at(inputs: &Inputs<'_>, moment: Moment) -> Vec<Vec<String>> {
    let then = situation(inputs.events, moment.to_utc());
    let owned = |files: Vec<&str>| files.into_iter().map(str::to_owned).collect();
    let now = in_force(inputs.forecasts, inputs.port, &then.advisories, then.now).files();
    let adopted =
        then.adopted.values().map(|adopted| at_adoption(inputs.forecasts, inputs.port, &then, adopted));
    std::iter::once(now).chain(adopted).map(owned).collect()
}
