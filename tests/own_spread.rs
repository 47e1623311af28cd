//! An office's own word on how sure it is of its track: what it does to the odds.
#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests may fail loudly")]

mod storms;

use chrono::TimeDelta;
use snugdown::advisory::forecast::{Advisory, ProbabilityCircle};
use snugdown::advisory::read::read_forecast;
use snugdown::arrival::odds::{Answers, Draw, Quantile, ask};
use snugdown::units::chance::Chance;
use snugdown::units::length::NauticalMiles;
use storms::{ask_about, at, full_forecast, shipped};

fn odds(advisory: &Advisory) -> Answers {
    // On the track at about 57 h, and far to its left.
    let questions = [ask_about("on", at(23.5, -71.0), 34.0), ask_about("off", at(19.5, -72.5), 34.0)];
    ask(advisory, &shipped().for_advisory(advisory), &questions, Draw { scenarios: 2_000, most: 2_000 })
}

/// The storm with circles of this many times the table's deviations at 24, 48 and 72 h.
fn with_circles(times: f64) -> Advisory {
    let mut advisory = full_forecast();
    let table = shipped().for_advisory(&advisory);
    advisory.circles = [24.0, 48.0, 72.0]
        .map(|lead| {
            let [along, cross, ..] = table.at(lead).deviation;
            // r70 = 1.5518 sigma, with sigma^2 the mean of the two squared deviations.
            let sigma = f64::sqrt((along * along + cross * cross) / 2.0);
            ProbabilityCircle {
                valid: advisory.base + TimeDelta::hours(lead as i64),
                radius: NauticalMiles::new(1.551_755_653 * sigma * times).unwrap(),
                chance: Chance::new(0.7).unwrap(),
            }
        })
        .to_vec();
    advisory
}

/// Minutes from earliest to latest.
fn span(answers: &Answers) -> i64 {
    let answer = answers.get("on").unwrap();
    let (Quantile::At(earliest), Quantile::At(latest)) = (answer.earliest(), answer.latest()) else {
        panic!("{answer:?}")
    };
    (latest - earliest).get()
}

#[test]
fn circles_as_wide_as_the_table_change_nothing_that_matters() {
    let (plain, same) = (odds(&full_forecast()), odds(&with_circles(1.0)));
    assert!((span(&plain) - span(&same)).abs() <= 2, "{} {}", span(&plain), span(&same));
    assert!(same.notes.iter().any(|note| note == "track errors: from the office's own probability circles"));
    assert!(!plain.notes.iter().any(|note| note.contains("own")));
}

#[test]
fn an_office_that_is_surer_of_its_track_gives_sharper_odds_and_a_doubtful_one_wider_ones() {
    let [sure, plain, doubtful] = [0.5, 1.0, 2.0].map(|times| odds(&with_circles(times)));
    assert!(span(&sure) < span(&plain) && span(&plain) < span(&doubtful));
    let off = |answers: &Answers| answers.get("off").unwrap().chance().get();
    assert!(
        off(&sure) < off(&plain) && off(&plain) < off(&doubtful),
        "{} {} {}",
        off(&sure),
        off(&plain),
        off(&doubtful)
    );
}

#[test]
fn a_real_advisorys_own_error_line_is_told_with_the_odds() {
    // "ERRORS FOR TRACK HAVE AVERAGED NEAR 100 NM ON DAY 4 AND 125 NM ON DAY 5".
    let text = std::fs::read("tests/data/forecast-advisory/ep122024.fstadv.008.txt").unwrap();
    let advisory = read_forecast("kristy", &text).advisory.unwrap();
    let own = advisory.own_track_deviations();
    // sigma = mean / 1.2533, at 96 and 120 h after the base time.
    assert!(
        (own[0].lead_h - 96.0).abs() < 1e-9 && (own[0].deviation_nmi - 100.0 / 1.2533).abs() < 0.01,
        "{own:?}"
    );
    assert!((own[1].lead_h - 120.0).abs() < 1e-9 && (own[1].deviation_nmi - 125.0 / 1.2533).abs() < 0.01);
    let notes = odds(&advisory).notes;
    assert!(
        notes
            .iter()
            .any(|note| note.starts_with("track errors on day 4 and day 5: the office's own means, 100")),
        "{notes:?}"
    );
}
