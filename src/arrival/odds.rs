//! The chance that a wind reaches a place by a time, and the answers to all questions of one ask.

use crate::advisory::forecast::Advisory;
use crate::arrival::course::Course;
use crate::arrival::drawing::Drawing;
use crate::arrival::errors::ErrorTable;
use crate::arrival::onset::{Onset, ScenarioOnset};
use crate::arrival::question::{Question, Sought};
use crate::geo::position::Position;
use crate::time::moment::Moment;
use crate::units::chance::Chance;
use std::thread::available_parallelism;

/// Below this many onsets no quantile is given: a 10 % point of fewer hangs on two or three scenarios. The
/// program's rule.
pub const LEAST_ONSETS: usize = 30;

/// How many scenarios are drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Draw {
    /// For every question, at least 1; joint statements hold among these.
    pub scenarios: usize,
    /// At most this many where a wind comes in some, but in fewer than [`LEAST_ONSETS`] of them after issue.
    pub most: usize,
}

impl Default for Draw {
    fn default() -> Draw {
        Draw { scenarios: 1_000, most: 10_000 }
    }
}

/// A point of the distribution of onsets or ends.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Quantile {
    /// This minute.
    At(Moment),
    /// It lies beyond the end of the forecast: the forecast is too short to tell.
    AfterEnd,
    /// Too few scenarios in which it happens ([`LEAST_ONSETS`]).
    TooFew,
}

/// The answer to one question.
///
/// P(t) is the share of scenarios in which the limit is reached in (issue, t]; those past it at issue count
/// at once; after the end of the forecast P stays as it is. Quantiles are of the onsets *after issue*, given
/// that the wind comes by the end of the forecast: always say with them the chance that it comes at all.
///
/// A quantile is cut off ([`Quantile::AfterEnd`]) when it would lie beyond the end of the forecast if those
/// scenarios were counted too in which the storm, going on as it is at the end, would still bring the wind
/// within a day. So a forecast that stops while the storm draws near never gives a "latest" that looks like
/// one. Times that are given use onsets within the forecast only: nothing that was carried on enters them.
#[derive(Clone, Debug, PartialEq)]
pub struct Answer {
    /// The question's name.
    pub key: String,
    /// Where.
    pub position: Position,
    /// What was looked for there.
    pub sought: Sought,
    /// Issue time of the advisory.
    pub issued: Moment,
    /// End of its forecast.
    pub forecast_end: Moment,
    /// Scenario by scenario, the first [`Answers::joint`] of them the same storms for all questions.
    pub onsets: Vec<ScenarioOnset>,
    /// When the forecast's own track brings the wind, without any error; the issue time if it is there already.
    pub single_track: Option<Moment>,
    /// All that the forecast's own track says.
    pub single: ScenarioOnset,
    already: usize,
    reached: Vec<Moment>,
    cut_off: usize,
}

impl Answer {
    /// The chance that the wind has come by `t`; zero before issue.
    #[must_use]
    pub fn chance_by(&self, t: Moment) -> Chance {
        if t < self.issued {
            return Chance::NEVER;
        }
        let after_issue = self.reached.partition_point(|onset| *onset <= t);
        Chance::share(self.already + after_issue, self.onsets.len())
    }

    /// The chance that it comes by the end of the forecast.
    #[must_use]
    pub fn chance(&self) -> Chance {
        Chance::share(self.already + self.reached.len(), self.onsets.len())
    }

    /// The chance that the wind has come by `t`, given that it does not blow at issue: for those who can see
    /// that, and for scores that leave out places where it blows. Zero if it blows in every scenario.
    #[must_use]
    pub fn chance_by_unless_there(&self, t: Moment) -> Chance {
        let after_issue = self.reached.partition_point(|onset| *onset <= t);
        Chance::share(after_issue, (self.onsets.len() - self.already).max(1))
    }

    /// The share of scenarios in which it blows at issue.
    #[must_use]
    pub fn already_share(&self) -> Chance {
        Chance::share(self.already, self.onsets.len())
    }

    /// Whether it blows at issue in at least half of the scenarios.
    #[must_use]
    pub fn already(&self) -> bool {
        self.already > 0 && 2 * self.already >= self.onsets.len()
    }

    /// The time by which a share `p` of the onsets after issue have come.
    #[must_use]
    pub fn quantile(&self, p: Chance) -> Quantile {
        point(&self.reached, self.cut_off, p)
    }

    /// The same among onsets within the forecast alone, however many are cut off: for scoring forecasts
    /// against what came. For people take [`Answer::quantile`].
    #[must_use]
    pub fn quantile_within(&self, p: Chance) -> Option<Moment> {
        at_rank(&self.reached, p)
    }

    /// The 10 % point of the onsets.
    #[must_use]
    pub fn earliest(&self) -> Quantile {
        self.quantile(tenths(1))
    }

    /// The 50 % point.
    #[must_use]
    pub fn likely(&self) -> Quantile {
        self.quantile(tenths(5))
    }

    /// The 90 % point.
    #[must_use]
    pub fn latest(&self) -> Quantile {
        self.quantile(tenths(9))
    }

    /// The first minute at which P reaches `p`; `None` if it never does. A chance of 0 is reached at issue.
    #[must_use]
    pub fn first_reaching(&self, p: Chance) -> Option<Moment> {
        let needed = least_count(self.onsets.len(), p);
        match needed.checked_sub(self.already) {
            None | Some(0) => Some(self.issued),
            Some(rank) => self.reached.get(rank - 1).copied(),
        }
    }

    /// Of the scenarios in which the wind comes (or blows at issue): the time by which a share `p` of them
    /// have it behind them for good, as far as the forecast goes.
    #[must_use]
    pub fn end_quantile(&self, p: Chance) -> Quantile {
        let comes = self.onsets.iter().filter(|scenario| scenario.onset != Onset::Never);
        let mut ends: Vec<Moment> = comes.filter_map(|scenario| scenario.until).collect();
        ends.sort_unstable();
        let open = self.already + self.reached.len() - ends.len();
        point(&ends, open, p)
    }

    /// The chance that the wind blows neither at `t` nor later in the forecast, whether it came before or
    /// never comes.
    #[must_use]
    pub fn chance_over_by(&self, t: Moment) -> Chance {
        let over = self
            .onsets
            .iter()
            .filter(|scenario| {
                scenario.onset == Onset::Never || scenario.until.is_some_and(|until| until <= t)
            })
            .count();
        Chance::share(over, self.onsets.len())
    }
}

fn tenths(n: usize) -> Chance {
    Chance::share(n, 10)
}

/// The smallest count that is at least the share `p` of `whole`.
fn least_count(whole: usize, p: Chance) -> usize {
    // A share such as 0.1 is a little more than a tenth in binary: without the allowance 10 % of 1,000 would
    // be 101.
    f64::ceil(whole as f64 * p.get() - 1e-9).max(0.0) as usize
}

fn at_rank(sorted: &[Moment], p: Chance) -> Option<Moment> {
    sorted.get(least_count(sorted.len(), p).max(1) - 1).copied()
}

/// The quantile of `sorted` moments where `beyond` more lie after the end of the forecast.
fn point(sorted: &[Moment], beyond: usize, p: Chance) -> Quantile {
    if sorted.len() < LEAST_ONSETS {
        Quantile::TooFew
    } else if least_count(sorted.len() + beyond, p) > sorted.len() {
        Quantile::AfterEnd
    } else {
        at_rank(sorted, p).map_or(Quantile::TooFew, Quantile::At)
    }
}

/// All answers of one ask, in the order of the questions.
#[derive(Clone, Debug, PartialEq)]
pub struct Answers {
    /// One for each question that the advisory allows to answer.
    pub answers: Vec<Answer>,
    /// How many scenarios, the first ones, are common to all answers.
    pub joint: usize,
    /// What must be printed with the odds: what was assumed, and for which seas the errors do not hold.
    pub notes: Vec<String>,
}

impl Answers {
    /// The answer to the question with this name.
    #[must_use]
    pub fn get(&self, key: &str) -> Option<&Answer> {
        self.answers.iter().find(|answer| answer.key == key)
    }
}

/// Answers all questions about one advisory from one set of scenarios.
///
/// The draws depend on the storm alone (see [`crate::arrival::keyed`]): neither the advisory's number, nor
/// the other questions, nor their order change an answer.
#[must_use]
pub fn ask(advisory: &Advisory, table: &ErrorTable, questions: &[Question], draw: Draw) -> Answers {
    ask_on(available_parallelism().map_or(1, usize::from), advisory, table, questions, draw)
}

/// The same on so many threads at most: their number changes nothing but the time.
#[must_use]
pub fn ask_on(
    threads: usize,
    advisory: &Advisory,
    table: &ErrorTable,
    questions: &[Question],
    draw: Draw,
) -> Answers {
    let joint = draw.scenarios.max(1);
    let mut notes: Vec<String> = table.notes().to_vec();
    notes.extend(advisory.own_spread_words());
    notes.extend(advisory.assumed.iter().map(|assumption| assumption.what.clone()));
    let Some(course) = Course::of(advisory, table) else {
        let issued = Moment::at_or_before(advisory.issued);
        let winds = questions.iter().filter(|question| question.sought != Sought::Seas);
        let answers = winds
            .map(|q| answer_of(q, (issued, issued), vec![ScenarioOnset::NEVER; joint], ScenarioOnset::NEVER))
            .collect();
        return Answers { answers, joint, notes };
    };
    notes.extend(course.notes.iter().cloned());
    let drawing = Drawing::new(&course, advisory, questions);
    let mut onsets = drawing.first(threads, joint);
    drawing.more(&mut onsets, joint, draw.most, LEAST_ONSETS);
    let singles = drawing.single_track();
    if drawing.lacks_seas() {
        notes.push(
            "the advisory does not give the reach of high seas: limits of seas are not answered".to_owned(),
        );
    }
    let answers = questions
        .iter()
        .zip(onsets)
        .zip(singles)
        // What the advisory says nothing about has no answer; "never" would be one.
        .filter(|((_, onsets), _)| !onsets.is_empty())
        .map(|((q, onsets), single)| answer_of(q, (course.issued, course.forecast_end), onsets, single))
        .collect();
    Answers { answers, joint, notes }
}

/// The answer that follows from the onsets of a question's scenarios and from that of the forecast's own track.
#[must_use]
pub fn answer_of(
    question: &Question,
    (issued, forecast_end): (Moment, Moment),
    onsets: Vec<ScenarioOnset>,
    single: ScenarioOnset,
) -> Answer {
    let mut reached: Vec<Moment> = onsets
        .iter()
        .filter_map(|scenario| match scenario.onset {
            Onset::At(moment) => Some(moment),
            Onset::Already | Onset::Never => None,
        })
        .collect();
    reached.sort_unstable();
    let single_track = match single.onset {
        Onset::Already => Some(issued),
        Onset::At(moment) => Some(moment),
        Onset::Never => None,
    };
    Answer {
        key: question.key.clone(),
        position: question.position,
        sought: question.sought,
        issued,
        forecast_end,
        already: onsets.iter().filter(|scenario| scenario.onset == Onset::Already).count(),
        cut_off: onsets.iter().filter(|scenario| scenario.is_cut_off).count(),
        reached,
        onsets,
        single_track,
        single,
    }
}
