//! The odds of several storms together: in each scenario the wind comes with whichever storm brings it first.
//!
//! The draws are keyed by storm, so that scenario i of one storm and scenario i of another are independent; scenario by
//! scenario the chance of "by t" becomes 1 - (1 - p1)(1 - p2), within the sampling error, and what is asked of one scenario
//! at several places stays one world.

use crate::arrival::odds::{Answer, Answers, answer_of};
use crate::arrival::onset::{Onset, ScenarioOnset};
use crate::arrival::question::Question;
use crate::time::moment::Moment;
use crate::units::chance::Chance;

/// The answers of all storms together, question by question in the order of the first storm's; each question's limit is
/// the first storm's. Chances count from the earliest issue, to the latest end of a forecast. `None` without any storm.
#[must_use]
pub fn earlier_of(storms: &[&Answers]) -> Option<Answers> {
    let (first, others) = storms.split_first()?;
    let joint = storms.iter().map(|answers| answers.joint).min().unwrap_or(first.joint);
    let mut notes = first.notes.clone();
    for note in others.iter().flat_map(|answers| &answers.notes) {
        if !notes.contains(note) {
            notes.push(note.clone());
        }
    }
    let answers = first
        .answers
        .iter()
        .map(|answer| {
            let same = others.iter().filter_map(|answers| answers.get(&answer.key));
            same.fold(answer.clone(), |all, one| earlier(&all, one))
        })
        .collect();
    Some(Answers { answers, joint, notes })
}

/// The storm, by its place in `storms`, that most often brings a wind first, and in what share of the scenarios in which it
/// comes; `None` if it never does. A tie goes to the storm that stands first.
#[must_use]
pub fn mostly_first(storms: &[&Answers], key: &str) -> Option<(usize, Chance)> {
    let of_storms: Vec<&Answer> = storms.iter().map(|answers| answers.get(key)).collect::<Option<_>>()?;
    let scenarios = of_storms.iter().map(|answer| answer.onsets.len()).min()?;
    let issued = of_storms.iter().map(|answer| answer.issued).min()?;
    let mut wins = vec![0; of_storms.len()];
    for scenario in 0..scenarios {
        let onset = |answer: &Answer| {
            answer.onsets.get(scenario).map(|told| since(*told, answer.issued, issued).onset)
        };
        let onsets = of_storms.iter().map(|answer| onset(answer).unwrap_or(Onset::Never));
        let first = onsets.enumerate().min_by_key(|(storm, onset)| (*onset, *storm));
        if let Some((storm, Onset::Already | Onset::At(_))) = first
            && let Some(count) = wins.get_mut(storm)
        {
            *count += 1;
        }
    }
    let comes: usize = wins.iter().sum();
    let (storm, most) =
        wins.into_iter().enumerate().max_by_key(|(storm, count)| (*count, std::cmp::Reverse(*storm)))?;
    (comes > 0).then(|| (storm, Chance::share(most, comes)))
}

/// Two storms' answers to one question as one.
fn earlier(a: &Answer, b: &Answer) -> Answer {
    let issued = a.issued.min(b.issued);
    let end = a.forecast_end.max(b.forecast_end);
    let both = |x: &ScenarioOnset, y: &ScenarioOnset| {
        first_of(since(*x, a.issued, issued), since(*y, b.issued, issued))
    };
    let onsets = a.onsets.iter().zip(&b.onsets).map(|(x, y)| both(x, y)).collect();
    let question = Question { key: a.key.clone(), position: a.position, sought: a.sought };
    answer_of(&question, (issued, end), onsets, both(&a.single, &b.single))
}

/// An onset counted from an earlier issue: what blew already at its own issue came at that time.
fn since(mut told: ScenarioOnset, own: Moment, issued: Moment) -> ScenarioOnset {
    if told.onset == Onset::Already && own > issued {
        told.onset = Onset::At(own);
    }
    told
}

/// The earlier onset, and the later end: the wind is over when both storms' wind is.
fn first_of(x: ScenarioOnset, y: ScenarioOnset) -> ScenarioOnset {
    let (first, second) = if y.onset < x.onset { (y, x) } else { (x, y) };
    let until = match (first.onset, second.onset) {
        (Onset::Never, _) => None,
        (_, Onset::Never) => first.until,
        (Onset::Already | Onset::At(_), Onset::Already | Onset::At(_)) => {
            first.until.zip(second.until).map(|(a, b)| a.max(b))
        }
    };
    let peak = if second.peak > first.peak { second.peak } else { first.peak };
    let is_cut_off = first.onset == Onset::Never && (first.is_cut_off || second.is_cut_off);
    ScenarioOnset { until, peak, has_lull: first.has_lull || second.has_lull, is_cut_off, ..first }
}

#[cfg(test)]
mod tests {
    use super::{first_of, since};
    use crate::arrival::onset::{Onset, ScenarioOnset};
    use crate::time::moment::Moment;

    fn told(onset: Onset, until: Option<i64>) -> ScenarioOnset {
        ScenarioOnset { onset, until: until.map(Moment::from_epoch_minutes), ..ScenarioOnset::NEVER }
    }

    fn at(minute: i64) -> Onset {
        Onset::At(Moment::from_epoch_minutes(minute))
    }

    #[test]
    fn the_wind_comes_with_the_first_storm_and_ends_with_the_last() {
        let never = ScenarioOnset { is_cut_off: true, ..ScenarioOnset::NEVER };
        let (early, late) = (told(at(100), Some(200)), told(at(150), Some(400)));
        assert_eq!(first_of(late, early), told(at(100), Some(400)));
        assert_eq!(first_of(never, early), early);
        assert_eq!(first_of(early, told(at(300), None)), told(at(100), None));
        assert_eq!(first_of(told(Onset::Already, Some(50)), late), told(Onset::Already, Some(400)));
        assert_eq!(first_of(ScenarioOnset::NEVER, never), never);
    }

    #[test]
    fn what_blew_at_the_later_issue_came_then() {
        let blows = told(Onset::Already, None);
        let (own, earlier) = (Moment::from_epoch_minutes(60), Moment::from_epoch_minutes(0));
        assert_eq!(since(blows, own, earlier).onset, at(60));
        assert_eq!(since(blows, own, own).onset, Onset::Already);
    }
}
