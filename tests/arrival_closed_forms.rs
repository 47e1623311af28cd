//! Arrival odds against cases whose answer is known in closed form or from an independent simulation.
#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests may fail loudly")]

mod storms;

use snugdown::arrival::errors::{ErrorRow, ErrorTable};
use snugdown::arrival::odds::{Answer, Draw, Quantile, ask};
use snugdown::arrival::onset::Onset;
use snugdown::time::moment::{Minutes, Moment};
use storms::{SETTINGS, advisory, along_the_equator, ask_about, at, constant, degrees, issue_time, point};

const TEN_THOUSAND: Draw = Draw { scenarios: 10_000, most: 10_000 };

fn hours_of(quantile: Quantile) -> f64 {
    let Quantile::At(moment) = quantile else { panic!("{quantile:?}") };
    (moment - Moment::at_or_before(issue_time())).get() as f64 / 60.0
}

fn one(answers: snugdown::arrival::odds::Answers) -> Answer {
    answers.answers.into_iter().next().unwrap()
}

/// Three standard deviations of a share among `n` independent draws; stratified draws stay well within.
fn sampling(p: f64, n: f64) -> f64 {
    3.0 * (p * (1.0 - p) / n).sqrt()
}

#[test]
fn a_single_moment_gives_the_non_central_chi_square_chance_of_being_within_the_radius() {
    // P(centre within R | miss distance, sigma): non-central chi-square with two degrees of freedom.
    for (miss, radius, sigma, p) in [
        (100.0, 100.0, 42.0, 0.4141),
        (0.0, 100.0, 42.0, 0.9413),
        (200.0, 100.0, 42.0, 0.0057),
        (100.0, 120.0, 64.1, 0.4995),
    ] {
        let storm = advisory(vec![point(0.0, at(0.0, 0.0), 60.0, radius)]);
        let question = ask_about("q", at(degrees(miss), 0.0), 34.0);
        let answer = one(ask(&storm, &constant(sigma, sigma), &[question], TEN_THOUSAND));
        assert!(
            (answer.chance().get() - p).abs() < sampling(p, 1e4),
            "{miss} {radius}: {}",
            answer.chance().get()
        );
        assert_eq!(answer.chance(), answer.already_share());
    }
}

#[test]
fn a_track_with_a_constant_cross_error_reaches_a_place_with_the_normal_chance() {
    // Passes 80 n mi off with sigma 60 and a radius of 120: P = Phi(40 / 60) - Phi(-200 / 60) = 0.7471,
    // whatever the speed.
    let storm = along_the_equator(10.0, 120.0, 600.0, 120);
    let question = ask_about("q", at(degrees(80.0), 0.0), 34.0);
    let answer = one(ask(&storm, &constant(0.0, 60.0), &[question], Draw::default()));
    // One error frozen over the whole track, one scenario in each thousandth of its distribution: exact but
    // for the last.
    assert!((answer.chance().get() - 0.7471).abs() < 0.0015, "{}", answer.chance().get());
}

#[test]
fn a_constant_along_error_spreads_the_onset_by_error_over_speed() {
    // 432 n mi away at 12 kt, radius 120: onset at 26 h, sigma 30 / 12 h: 10 % and 90 % at 22.80 and 29.20 h.
    let storm = along_the_equator(12.0, 120.0, 432.0, 120);
    let question = ask_about("q", at(0.0, 0.0), 34.0);
    let answer = one(ask(&storm, &constant(30.0, 0.0), &[question], Draw::default()));
    assert_eq!(answer.chance().get().to_bits(), 1.0_f64.to_bits());
    for (quantile, hours) in [(answer.earliest(), 22.80), (answer.likely(), 26.00), (answer.latest(), 29.20)]
    {
        assert!((hours_of(quantile) - hours).abs() < 0.05, "{} for {hours}", hours_of(quantile));
    }
    // Exactly on the minute: the outer end of the last two seconds may round to the minute before.
    let late = Moment::at_or_before(issue_time()) + Minutes::hours(26) - answer.single_track.unwrap();
    assert!((0..=1).contains(&late.get()), "{late}");
}

#[test]
fn growing_correlated_errors_agree_with_an_independent_simulation() {
    // 480 n mi ahead and 60 off the track, 10 kt, radius 100, sigma 6 at issue and the 2026 Atlantic ones
    // after, correlation 0.85 in 12 h. An independent simulation of 200,000 cases at hourly steps: P = 0.847
    // (+- 0.003), onset 36 / 40 / 46 h, duration 8 / 15 / 20 h, single track 40 h.
    let rows = [0.0, 12.0, 24.0, 36.0, 48.0, 60.0, 72.0, 96.0, 120.0]
        .into_iter()
        .zip([6.0, 16.9, 26.3, 33.1, 41.8, 51.9, 64.1, 90.4, 134.9])
        .map(|(lead_h, s)| ErrorRow {
            lead_h,
            deviation: [s, s, 0.0, 0.0],
            bias: [0.0; 4],
            serial: [0.85; 4],
        })
        .collect();
    let table = ErrorTable::new("2026", Vec::new(), rows, SETTINGS).unwrap();
    let storm = along_the_equator(10.0, 100.0, 480.0, 120);
    let question = ask_about("q", at(degrees(60.0), 0.0), 34.0);
    let answer = one(ask(&storm, &table, &[question], TEN_THOUSAND));
    let p = answer.chance().get();
    assert!((p - 0.847).abs() < 0.003 + sampling(0.847, 1e4), "{p}");
    // Its hours are whole and rounded up, ours are minutes: half an hour less, and one more for its rounding.
    for (quantile, hours) in [(answer.earliest(), 36.0), (answer.likely(), 40.0), (answer.latest(), 46.0)] {
        assert!((hours_of(quantile) - (hours - 0.5)).abs() < 1.0, "{} for {hours}", hours_of(quantile));
    }
    let single = answer.single_track.unwrap() - Moment::at_or_before(issue_time());
    assert!((0..=1).contains(&(Minutes::hours(40) - single).get()), "{single}");
    let mut lengths: Vec<i64> = answer
        .onsets
        .iter()
        .filter_map(|s| match s.onset {
            Onset::At(onset) => Some((s.until? - onset).get()),
            Onset::Already | Onset::Never => None,
        })
        .collect();
    lengths.sort_unstable();
    for (tenth, hours) in [(1, 8.0), (5, 15.0), (9, 20.0)] {
        let length = lengths[lengths.len() * tenth / 10] as f64 / 60.0;
        // Last less first whole hour inside is an hour short on average.
        assert!((length - (hours + 1.0)).abs() < 1.0, "{length} for {hours}");
    }
}

#[test]
fn the_gale_lasts_as_long_as_the_chord_through_the_radius() {
    // 2 sqrt(R^2 - b^2) / c for R = 120, c = 10.
    for (off, hours) in [(0.0, 24.0), (60.0, 20.785), (110.0, 9.592)] {
        let storm = along_the_equator(10.0, 120.0, 600.0, 120);
        let question = ask_about("q", at(degrees(off), 0.0), 34.0);
        let answer = one(ask(&storm, &constant(0.0, 0.0), &[question], Draw { scenarios: 1, most: 1 }));
        let (Onset::At(onset), Some(until)) = (answer.onsets[0].onset, answer.onsets[0].until) else {
            panic!("{:?}", answer.onsets[0])
        };
        let minutes = (until - onset).get() as f64;
        // Onset rounded down, end rounded up; the circle as seen on the sphere.
        assert!(minutes >= hours * 60.0 - 1.0 && minutes < hours * 60.0 + 3.0, "{off}: {minutes}");
    }
}

#[test]
fn a_storm_that_brushes_a_place_between_two_hours_is_not_missed() {
    // A radius of 120 passes a place 119.9 off at 20 kt: a chord of 9.8 n mi, 29 minutes, centred at 30.5 h.
    let storm = along_the_equator(20.0, 120.0, 610.0, 60);
    let question = ask_about("q", at(degrees(119.9), 0.0), 34.0);
    let answer = one(ask(&storm, &constant(0.0, 0.0), &[question], Draw { scenarios: 1, most: 1 }));
    let onset = answer.single_track.unwrap() - Moment::at_or_before(issue_time());
    assert!((onset.get() - (30 * 60 + 15)).abs() <= 2, "{onset}");
}
