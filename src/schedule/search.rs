//! The search: seeds by several rules, then changes aimed at what is given up, late or moved.
//!
//! An iterated local search over orders of placing (H. R. Lourenco, O. C. Martin, T. Stuetzle, "Iterated local search",
//! Handbook of Metaheuristics, 2003, from memory). Each change is drawn from what stands in the way of one task that
//! fares badly; a schedule that is no worse is taken as the next to change.

use crate::schedule::bound::Bound;
use crate::schedule::causes::told;
use crate::schedule::change::{Changer, Trouble};
use crate::schedule::check::Refused;
use crate::schedule::model::Model;
use crate::schedule::outcome::{Schedule, Score};
use crate::schedule::place::{Builder, Choices};
use crate::schedule::problem::Problem;
use crate::schedule::random::Random;
use crate::schedule::score::score;
use crate::schedule::seeds::seeds;

/// How hard to search. The same effort on the same problem gives the same schedule on every machine.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Effort {
    /// Begins the random numbers.
    pub seed: u64,
    /// The most schedules that are built; 0 is counted as 1.
    pub decodes: u64,
}

impl Effort {
    /// The usual effort for a problem with so many tasks: fewer schedules where each takes longer to build.
    ///
    /// Our choice, measured with `benches/placing.rs`: a search that its bound does not stop takes about 20 ms for 100
    /// tasks and 0.2 s for 2,000; most are stopped within ten schedules.
    #[must_use]
    pub fn usual(tasks: usize) -> Effort {
        let tasks = u64::try_from(tasks.max(1)).unwrap_or(u64::MAX);
        Effort { seed: 1, decodes: 60 + (12_000 / tasks).min(3_000) }
    }
}

/// The best schedule found for a problem.
///
/// It is a function of the problem and the effort alone. The search stops at once when its score meets the bound: when
/// nothing is given up but what provably must be, and nothing is later, moved or cut more than it must be.
///
/// # Errors
/// When the problem has a structural fault.
///
/// ```
/// use snugdown::schedule::problem::Problem;
/// use snugdown::schedule::search::{Effort, solve};
/// use snugdown::time::moment::{Minutes, Moment};
/// let now = Moment::from_epoch_minutes(0);
/// let problem = Problem {
///     now,
///     horizon: now + Minutes::hours(72),
///     least_move: Minutes::new(10),
///     tasks: vec![],
///     links: vec![],
///     pools: vec![],
///     lanes: vec![],
///     windows: vec![],
/// };
/// assert!(solve(&problem, Effort::usual(0))?.outcomes.is_empty());
/// # Ok::<(), snugdown::schedule::check::Refused>(())
/// ```
pub fn solve(problem: &Problem, effort: Effort) -> Result<Schedule, Refused> {
    let model = Model::new(problem)?;
    let mut builder = Builder::new(&model);
    let bound = Bound::new(&builder);
    builder.wanted = bound.wanted(&model);
    let least = bound.score(&builder);
    let mut search = Search::new(builder, &bound, &least, effort);
    search.sow();
    search.improve();
    let Search { mut builder, best, decodes, .. } = search;
    let (score, choices) = best;
    let outcomes = told(problem, &mut builder, &bound, &choices);
    Ok(Schedule { outcomes, score, bound: least, decodes })
}

/// A search under way.
struct Search<'a, 'm> {
    builder: Builder<'m>,
    bound: &'a Bound,
    least: &'a Score,
    best: (Score, Choices),
    decodes: u64,
    most: u64,
    random: Random,
}

impl<'a, 'm> Search<'a, 'm> {
    fn new(builder: Builder<'m>, bound: &'a Bound, least: &'a Score, effort: Effort) -> Search<'a, 'm> {
        let none = Choices::plain(builder.model);
        let mut search = Search {
            builder,
            bound,
            least,
            best: (Score::default(), none),
            decodes: 0,
            most: effort.decodes.max(1),
            random: Random::new(effort.seed),
        };
        let choices = search.best.1.clone();
        search.best.0 = search.try_out(&choices);
        search
    }

    fn try_out(&mut self, choices: &Choices) -> Score {
        self.decodes += 1;
        self.builder.build(choices, |_, _, _| ());
        score(&self.builder)
    }

    /// Whether nothing is left to look for.
    fn is_over(&self) -> bool {
        let (best, least) = (&self.best.0, self.least);
        let is_met = (&best.classes, best.moved, best.cost) <= (&least.classes, least.moved, least.cost);
        is_met || self.decodes >= self.most
    }

    /// Tries the rules, the best of which is where the improvement begins.
    fn sow(&mut self) {
        for choices in seeds(self.builder.model, self.bound, &self.builder.wanted) {
            if self.is_over() {
                return;
            }
            let score = self.try_out(&choices);
            if score < self.best.0 {
                self.best = (score, choices);
            }
        }
    }

    fn improve(&mut self) {
        /// Changes in vain after which the search goes back to the best schedule and leaps from there.
        const PATIENCE: u32 = 60;
        let changer = Changer::new(self.builder.model);
        let mut now = self.best.clone();
        let mut trial = now.1.clone();
        let mut in_vain = 0;
        if !self.is_over() {
            self.try_out(&now.1.clone());
        }
        let mut trouble = Trouble::of(&self.builder, self.bound);
        while !self.is_over() {
            trial.clone_from(&now.1);
            let leap = if in_vain > 0 && in_vain % PATIENCE == 0 { 4 } else { 0 };
            let changes = 1 + leap + self.random.below(2);
            for _ in 0..changes {
                changer.change(&mut trial, &trouble, &mut self.random);
            }
            let score = self.try_out(&trial);
            let is_better = score < now.0;
            if score <= now.0 || leap > 0 {
                now = (score, trial.clone());
                trouble = Trouble::of(&self.builder, self.bound);
            }
            if now.0 < self.best.0 {
                self.best = now.clone();
            }
            in_vain = if is_better { 0 } else { in_vain + 1 };
            if in_vain % PATIENCE == PATIENCE - 1 && now.0 > self.best.0 {
                now = self.best.clone();
            }
        }
    }
}
