//! What must hold for any arrival odds: order, symmetry, repeatability, honest ends.
#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests may fail loudly")]

mod storms;

use chrono::TimeDelta;
use snugdown::advisory::forecast::{
    Advisory, Assumption, Ending, ForecastPoint, Quadrants, Reach, Widening, WindRadii,
};
use snugdown::arrival::errors::{ErrorRow, ErrorTable};
use snugdown::arrival::odds::{Answer, Answers, Draw, LEAST_ONSETS, Quantile, ask, ask_on};
use snugdown::arrival::onset::Onset;
use snugdown::arrival::question::Question;
use snugdown::geo::position::{Position, wrap_longitude};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::units::chance::Chance;
use snugdown::units::speed::Knots;
use storms::{
    SETTINGS, advisory, along_the_equator, ask_about, at, constant, degrees, full_forecast, issue_time,
    point, shipped,
};

/// Places around the made-up forecast: on the track, left and right of it, near its start and its end.
const PLACES: [(f64, f64); 6] =
    [(21.0, -66.9), (18.4, -66.0), (25.5, -70.0), (25.0, -77.3), (19.3, -61.0), (33.5, -74.0)];

fn questions() -> Vec<Question> {
    PLACES
        .iter()
        .enumerate()
        .flat_map(|(i, (latitude, longitude))| {
            [20.0, 34.0, 42.0, 50.0, 64.0]
                .map(|limit| ask_about(&format!("{i} {limit}"), at(*latitude, *longitude), limit))
        })
        .collect()
}

fn ask_all(advisory: &Advisory) -> Answers {
    ask(advisory, &shipped().for_advisory(advisory), &questions(), Draw { scenarios: 1000, most: 1000 })
}

fn hours_after_issue(hours: i64) -> Moment {
    Moment::at_or_before(issue_time()) + Minutes::hours(hours)
}

fn get<'a>(answers: &'a Answers, key: &str) -> &'a Answer {
    answers.get(key).unwrap()
}

#[test]
fn a_chance_never_falls_with_time_and_stays_flat_after_the_forecast() {
    for answer in &ask_all(&full_forecast()).answers {
        let mut last = Chance::NEVER;
        for hour in 0..=160 {
            let now = answer.chance_by(hours_after_issue(hour));
            assert!(now >= last, "{} at {hour} h", answer.key);
            last = now;
            if hour >= 117 {
                assert_eq!(now, answer.chance(), "{} at {hour} h", answer.key);
            }
        }
        assert_eq!(answer.chance_by(hours_after_issue(-1)), Chance::NEVER);
    }
}

#[test]
fn a_stronger_wind_is_never_likelier_nor_sooner_than_a_weaker_one() {
    let answers = ask_all(&full_forecast());
    for place in 0..PLACES.len() {
        for pair in [[20, 34], [34, 42], [42, 50], [50, 64]] {
            let [weak, strong] = pair.map(|limit| get(&answers, &format!("{place} {limit}")));
            for (i, (w, s)) in weak.onsets.iter().zip(&strong.onsets).take(answers.joint).enumerate() {
                assert!(w.onset <= s.onset, "place {place}, {pair:?} kt, scenario {i}: {w:?} {s:?}");
            }
        }
    }
}

#[test]
fn without_errors_every_scenario_is_the_single_track() {
    let mut storm = full_forecast();
    storm.accuracy = None;
    let answers = ask(&storm, &constant(0.0, 0.0), &questions(), Draw { scenarios: 50, most: 50 });
    assert!(answers.answers.iter().any(|answer| answer.chance() > Chance::NEVER));
    for answer in &answers.answers {
        assert!(answer.onsets.iter().all(|scenario| *scenario == answer.single), "{}", answer.key);
    }
}

#[test]
fn the_same_forecast_issued_again_gives_the_same_answer() {
    let first = full_forecast();
    let mut again = first.clone();
    again.number = Some(13);
    again.is_corrected = true;
    assert_eq!(ask_all(&first), ask_all(&again));
}

#[test]
fn neither_the_order_of_the_questions_nor_other_questions_change_an_answer() {
    let storm = full_forecast();
    let table = shipped().for_advisory(&storm);
    let few = Draw { scenarios: 300, most: 300 };
    let all = ask(&storm, &table, &questions(), few);
    let mut turned = questions();
    turned.reverse();
    let reversed = ask(&storm, &table, &turned, few);
    for answer in &all.answers {
        assert_eq!(Some(answer), reversed.get(&answer.key));
    }
    // The peak is told where the place lies deepest within its lowest limit, so only onsets are compared with
    // a question asked alone.
    for question in questions() {
        let alone = ask(&storm, &table, std::slice::from_ref(&question), few);
        let (one, of_all) = (&alone.answers[0], get(&all, &question.key));
        assert_eq!(one.onsets.len(), of_all.onsets.len());
        assert!(one.onsets.iter().zip(&of_all.onsets).all(|(a, b)| (a.onset, a.until) == (b.onset, b.until)));
    }
}

fn mirrored(storm: &Advisory) -> Advisory {
    let turn = |reach: Reach| match reach {
        Reach::NotGiven => Reach::NotGiven,
        Reach::Given(q) => Reach::Given(Quadrants {
            northeast: q.southeast,
            southeast: q.northeast,
            southwest: q.northwest,
            northwest: q.southwest,
        }),
    };
    let points = storm
        .points
        .iter()
        .map(|p| ForecastPoint {
            position: at(-p.position.latitude(), p.position.longitude()),
            radii: WindRadii {
                gale: turn(p.radii.gale),
                storm: turn(p.radii.storm),
                hurricane: turn(p.radii.hurricane),
            },
            ..p.clone()
        })
        .collect();
    Advisory { points, ..storm.clone() }
}

/// The made-up forecast and its questions, moved west: in the open Pacific no land is near, on either side of the equator and
/// of the date line, as land would tell the two apart.
fn in_open_sea(west: f64) -> (Advisory, Vec<Question>) {
    let shift = |p: Position| Position::new(p.latitude(), wrap_longitude(p.longitude() - west)).unwrap();
    let mut storm = full_forecast();
    for p in &mut storm.points {
        p.position = shift(p.position);
    }
    let moved = questions().into_iter().map(|q| Question { position: shift(q.position), ..q }).collect();
    (storm, moved)
}

#[test]
fn a_mirrored_storm_has_the_same_odds_to_the_byte_and_mirrored_winds() {
    let (north, asked) = in_open_sea(70.0);
    let south = mirrored(&north);
    let table = shipped().for_advisory(&north);
    let flipped: Vec<Question> = asked
        .iter()
        .map(|q| Question { position: at(-q.position.latitude(), q.position.longitude()), ..q.clone() })
        .collect();
    let up = ask(&north, &table, &asked, Draw::default());
    let down = ask(&south, &table, &flipped, Draw::default());
    let mut directions = 0;
    for (a, b) in up.answers.iter().zip(&down.answers) {
        assert_eq!((a.single_track, a.chance()), (b.single_track, b.chance()));
        for (x, y) in a.onsets.iter().zip(&b.onsets) {
            assert_eq!((x.onset, x.until, x.peak, x.is_cut_off), (y.onset, y.until, y.peak, y.is_cut_off));
            if x.onset != Onset::Never {
                directions += 1;
                let turned = (180.0 - x.from.get()).rem_euclid(360.0);
                assert!((turned - y.from.get()).abs() < 1e-9 || (turned - y.from.get()).abs() > 359.0);
            }
        }
    }
    assert!(directions > 1000);
}

#[test]
fn the_date_line_is_no_seam() {
    let (here, asked) = in_open_sea(70.0);
    let (there, moved) = in_open_sea(113.0);
    let table = shipped().for_advisory(&here);
    let a = ask(&here, &table, &asked, Draw::default());
    let b = ask(&there, &table, &moved, Draw::default());
    for (x, y) in a.answers.iter().zip(&b.answers) {
        assert_eq!(x.onsets.len(), y.onsets.len());
        for (p, q) in x.onsets.iter().zip(&y.onsets) {
            // Longitudes are rounded differently in the last bit: an onset may fall on the other side of a
            // whole minute.
            let near = match (p.onset, q.onset) {
                (Onset::At(m), Onset::At(n)) => (m - n).get().abs() <= 1,
                (m, n) => m == n,
            };
            assert!(near, "{}: {:?} {:?}", x.key, p.onset, q.onset);
        }
    }
}

#[test]
fn a_gale_that_blows_at_issue_counts_at_once_and_gives_already() {
    let answers = ask_all(&full_forecast());
    let near = get(&answers, "4 34");
    assert!(near.already());
    assert_eq!(near.chance_by(near.issued), near.already_share());
    assert_eq!(near.single_track, Some(near.issued));
    assert_eq!(near.first_reaching(Chance::new(0.5).unwrap()), Some(near.issued));
    assert!(!get(&answers, "3 34").already());
}

#[test]
fn below_thirty_onsets_there_is_no_quantile_and_more_are_drawn_first() {
    let storm = along_the_equator(10.0, 120.0, 480.0, 96);
    // 120 + 2.5 x 30 off: about 0.6 % of the scenarios; 2.0 x 30: about 2.3 %; at most 1,000 are drawn or
    // 10,000.
    let rare = ask_about("rare", at(degrees(120.0 + 75.0), 0.0), 34.0);
    let scarce = ask_about("scarce", at(degrees(120.0 + 60.0), 0.0), 34.0);
    let far = ask_about("far", at(40.0, 0.0), 34.0);
    let table = constant(0.0, 30.0);
    let few = ask(
        &storm,
        &table,
        &[rare.clone(), scarce.clone(), far.clone()],
        Draw { scenarios: 1000, most: 1000 },
    );
    let onsets = |answer: &Answer| answer.onsets.iter().filter(|s| matches!(s.onset, Onset::At(_))).count();
    for answer in &few.answers {
        assert!(onsets(answer) < LEAST_ONSETS);
        assert_eq!((answer.earliest(), answer.latest()), (Quantile::TooFew, Quantile::TooFew));
    }
    let many = ask(&storm, &table, &[rare, scarce, far], Draw::default());
    let [rare, scarce, far] = [0, 1, 2].map(|i| &many.answers[i]);
    assert_eq!((rare.onsets.len(), scarce.onsets.len(), far.onsets.len()), (5000, 2000, 1000));
    assert!(matches!(rare.earliest(), Quantile::At(_)));
    assert_eq!(rare.onsets[..1000], few.answers[0].onsets[..]);
    assert_eq!(far.latest(), Quantile::TooFew);
}

#[test]
fn a_storm_still_drawing_near_when_the_forecast_ends_gives_no_latest_time() {
    // The edge reaches the place at 48 h on the single track, where the forecast ends: half of the scenarios
    // bring it by then, the rest would soon after.
    let storm = along_the_equator(10.0, 120.0, 600.0, 48);
    let question = ask_about("q", at(0.0, 0.0), 34.0);
    let answer =
        &ask(&storm, &constant(40.0, 0.0), std::slice::from_ref(&question), Draw::default()).answers[0];
    assert!((answer.chance().get() - 0.5).abs() < 0.01);
    assert!(matches!(answer.earliest(), Quantile::At(_)));
    assert_eq!(answer.latest(), Quantile::AfterEnd);
    assert!(answer.quantile_within(Chance::new(0.9).unwrap()).is_some_and(|m| m <= answer.forecast_end));
    // If the storm is forecast to end there, nothing more comes.
    let mut ending = storm;
    ending.ends = Some(Ending::Absorbed(issue_time() + TimeDelta::hours(48)));
    let answer = &ask(&ending, &constant(40.0, 0.0), &[question], Draw::default()).answers[0];
    assert!(matches!(answer.latest(), Quantile::At(_)));
}

#[test]
fn a_storm_that_dissipates_brings_no_gale_afterwards() {
    let place = at(0.0, degrees(300.0));
    let mut storm = advisory(vec![
        point(0.0, at(0.0, 0.0), 60.0, 100.0),
        point(12.0, at(0.0, degrees(120.0)), 50.0, 80.0),
    ]);
    let question = ask_about("q", place, 34.0);
    // Going on at 10 kt it would be there at 22 h or so; it is to be gone by 24 h and loses its gales on the
    // way.
    storm.ends = Some(Ending::Dissipated(issue_time() + TimeDelta::hours(24)));
    let answer = &ask(&storm, &constant(0.0, 0.0), &[question], Draw { scenarios: 10, most: 10 }).answers[0];
    assert_eq!(answer.single_track, None);
    assert_eq!(answer.forecast_end, hours_after_issue(24));
    assert!(answer.onsets.iter().all(|s| !s.is_cut_off));
}

#[test]
fn what_a_typed_forecast_leaves_open_widens_the_spread() {
    let storm = along_the_equator(10.0, 120.0, 600.0, 120);
    let mut short = storm.clone();
    short.assumed.push(Assumption {
        what: "positions after 12 h: the present motion kept".to_owned(),
        widens: Widening { track: 2.0, intensity: 1.0, size: 1.0 },
    });
    let question = ask_about("q", at(0.0, 0.0), 34.0);
    let spread = |storm: &Advisory| {
        let answers = ask(storm, &constant(20.0, 0.0), std::slice::from_ref(&question), Draw::default());
        let answer = &answers.answers[0];
        match (answer.earliest(), answer.latest()) {
            (Quantile::At(early), Quantile::At(late)) => ((late - early).get(), answers.notes.len()),
            other => panic!("{other:?}"),
        }
    };
    let ((full, notes), (widened, more_notes)) = (spread(&storm), spread(&short));
    assert!((widened - 2 * full).abs() <= 2, "{full} {widened}");
    assert_eq!(more_notes, notes + 1);
}

#[test]
fn a_storm_in_a_sea_without_a_table_says_so_and_is_wider() {
    let mut storm = full_forecast();
    storm.storm.id = Some("SH052026".to_owned());
    let tables = shipped();
    let (there, west) = (tables.for_advisory(&storm), &tables.tables()[3].1);
    assert!(there.notes().iter().any(|note| note.starts_with("not fitted here")), "{:?}", there.notes());
    assert!(there.at(48.0).deviation[0] > west.at(48.0).deviation[0]);
    assert!(tables.for_advisory(&full_forecast()).notes().is_empty());
}

#[test]
fn a_depression_forecast_to_stay_one_still_has_a_small_chance_of_gales() {
    let points = (0..=4)
        .map(|i| {
            let hour = f64::from(i) * 12.0;
            let mut p = point(hour, at(20.0, -60.0 - degrees(10.0 * hour)), 30.0, 0.0);
            p.radii = WindRadii::NOT_GIVEN;
            p
        })
        .collect();
    let storm = advisory(points);
    let question = ask_about("q", at(20.0, -60.0 - degrees(240.0)), 34.0);
    let answers = ask(&storm, &shipped().for_advisory(&storm), &[question], Draw::default());
    let answer = &answers.answers[0];
    assert_eq!(answer.single_track, None);
    assert!(answer.chance().get() > 0.05 && answer.chance().get() < 0.6, "{}", answer.chance());
    assert!(answers.notes.iter().any(|note| note.contains("no wind radii given")), "{:?}", answers.notes);
}

#[test]
fn an_advisory_without_points_is_answered_with_never() {
    let mut storm = full_forecast();
    storm.points.clear();
    let answers = ask_all(&storm);
    assert!(answers.answers.iter().all(|answer| answer.chance() == Chance::NEVER));
}

#[test]
fn radii_that_are_none_and_radii_not_given_are_different() {
    let mut none = along_the_equator(10.0, 0.0, 480.0, 96);
    let question = ask_about("q", at(0.0, 0.0), 34.0);
    let single = |storm: &Advisory| {
        ask(storm, &constant(0.0, 0.0), std::slice::from_ref(&question), Draw { scenarios: 1, most: 1 })
            .answers[0]
            .single_track
    };
    assert_eq!(single(&none), None);
    for p in &mut none.points {
        p.radii = WindRadii::NOT_GIVEN;
    }
    assert!(single(&none).is_some());
}

#[test]
fn the_eye_does_not_end_the_gale_but_is_told_as_a_lull() {
    let mut storm = along_the_equator(10.0, 120.0, 600.0, 120);
    for p in &mut storm.points {
        p.max_wind = Knots::new(90.0).unwrap();
    }
    let over = ask_about("over", at(0.0, 0.0), 34.0);
    let beside = ask_about("beside", at(degrees(60.0), 0.0), 34.0);
    let answers = ask(&storm, &constant(0.0, 0.0), &[over, beside], Draw { scenarios: 1, most: 1 });
    let [over, beside] = [0, 1].map(|i| answers.answers[i].single);
    assert!(over.has_lull && !beside.has_lull);
    assert!(over.peak.get() > 80.0 && beside.peak.get() < 80.0);
    let Onset::At(onset) = over.onset else { panic!("{over:?}") };
    assert!((over.until.unwrap() - onset).get() >= 24 * 60 - 1);
    // East of an approaching storm in the north the wind is from 160, and it has gone round when it leaves.
    assert!(over.from.angle_to(snugdown::units::bearing::Bearing::wrapped(160.0)) < 1.0, "{}", over.from);
}

#[test]
fn a_no_skill_table_spreads_the_odds_and_keeps_their_order() {
    // Stress table for tests only: mean errors of a forecast without skill, 45.1 to 426.6 n mi at 12 to 120 h
    // (published mean errors of the climatology and persistence model, Atlantic 2020-2024), / sqrt(pi / 2).
    let rows = [0.0, 12.0, 24.0, 36.0, 48.0, 60.0, 72.0, 96.0, 120.0]
        .into_iter()
        .zip([10.0, 36.0, 76.4, 120.4, 162.1, 201.6, 235.7, 292.2, 340.4])
        .map(|(lead_h, s)| ErrorRow {
            lead_h,
            deviation: [s, s, 20.0, 0.4],
            bias: [0.0; 4],
            serial: [0.85; 4],
        })
        .collect();
    let table = ErrorTable::new("no skill", Vec::new(), rows, SETTINGS).unwrap();
    let storm = full_forecast();
    let skilled = ask_all(&storm);
    let unskilled = ask(&storm, &table, &questions(), Draw::default());
    let [a, b] = [get(&skilled, "2 34"), get(&unskilled, "2 34")];
    assert!(b.chance() < a.chance());
    let (Quantile::At(early), Quantile::At(sooner)) = (a.earliest(), b.earliest()) else { panic!() };
    assert!(sooner < early);
}

#[test]
fn ends_have_their_own_odds() {
    let answers = ask_all(&full_forecast());
    let passed = get(&answers, "1 34");
    let late = Moment::at_or_before(issue_time()) + Minutes::hours(116);
    assert!(passed.chance_over_by(late) > Chance::new(0.9).unwrap());
    let half = Chance::new(0.5).unwrap();
    match (passed.end_quantile(half), passed.likely()) {
        (Quantile::At(end), Quantile::At(onset)) => assert!(end > onset),
        other => panic!("{other:?}"),
    }
}

#[test]
fn any_number_of_threads_gives_the_same_answers() {
    let storm = full_forecast();
    let table = shipped().for_advisory(&storm);
    // Some near, some rarely reached, so that more scenarios are drawn for them.
    let asked: Vec<Question> = (0..6)
        .map(|i| ask_about(&format!("q{i}"), at(20.0 + 2.5 * f64::from(i), -68.0), 34.0 + 8.0 * f64::from(i)))
        .collect();
    let draw = Draw { scenarios: 3_500, most: 6_000 };
    let alone = ask_on(1, &storm, &table, &asked, draw);
    assert!(alone.answers.iter().any(|answer| answer.onsets.len() > 3_500), "none is drawn further");
    for threads in [2, 7] {
        assert!(ask_on(threads, &storm, &table, &asked, draw) == alone, "{threads} threads");
    }
}
