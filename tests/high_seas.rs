//! High seas as arrivals of their own: read from official texts, carried with the storm, asked for by rules.
#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests may fail loudly")]

mod small_port;
mod storms;

use small_port::{edited, listed, provokes};
use snugdown::advisory::forecast::{Advisory, Quadrants, Seas};
use snugdown::advisory::read::read_forecast;
use snugdown::arrival::odds::{Answer, Answers, Draw, ask};
use snugdown::arrival::question::{Question, Sought};
use snugdown::geo::position::Position;
use snugdown::rules::folder::read_folder;
use snugdown::rules::limit::Limit;
use snugdown::time::moment::Moment;
use snugdown::units::length::{Metres, NauticalMiles};
use storms::{along_the_equator, at, constant, degrees, issue_time};

fn with_seas(mut advisory: Advisory, [ne, se, sw, nw]: [f64; 4]) -> Advisory {
    let [northeast, southeast, southwest, northwest] =
        [ne, se, sw, nw].map(|nmi| NauticalMiles::new(nmi).unwrap());
    let reach = Quadrants { northeast, southeast, southwest, northwest };
    advisory.points[0].seas = Some(Seas { height: Metres::parse("12 ft").unwrap(), reach });
    advisory
}

fn seas_at(advisory: &Advisory, position: Position, cross: f64) -> Answers {
    let question = Question { key: "seas".to_owned(), position, sought: Sought::Seas };
    ask(advisory, &constant(0.0, cross), &[question], Draw { scenarios: 1_000, most: 1_000 })
}

fn hours(answer: &Answer) -> f64 {
    (answer.single_track.unwrap() - Moment::at_or_before(issue_time())).get() as f64 / 60.0
}

#[test]
fn seas_that_come_straight_on_arrive_after_distance_less_reach_over_speed() {
    // 480 n mi away at 12 kt, reach 180 in the quadrants ahead: 300 / 12 = 25 h; gone (480 + 180) / 12 = 55 h after issue.
    let storm = with_seas(along_the_equator(12.0, 120.0, 480.0, 96), [180.0; 4]);
    let answers = seas_at(&storm, at(0.0, 0.0), 0.0);
    let answer = answers.get("seas").unwrap();
    assert!((hours(answer) - 25.0).abs() < 0.1, "{}", hours(answer));
    let gone = answer.single.until.unwrap() - Moment::at_or_before(issue_time());
    assert!((gone.get() - 55 * 60).abs() < 6, "{gone}");
    assert_eq!(answer.single.from.get().round() as i64, 270, "they come from where the storm is");
}

#[test]
fn a_cross_error_gives_the_normal_chance_of_being_within_reach() {
    // As for winds: passes 80 off with sigma 60 and a reach of 120: P = Phi(40 / 60) - Phi(-200 / 60) = 0.7471.
    let storm = with_seas(along_the_equator(10.0, 60.0, 600.0, 120), [120.0; 4]);
    let answers = seas_at(&storm, at(degrees(80.0), 0.0), 60.0);
    let chance = answers.get("seas").unwrap().chance().get();
    // Looked at every hour: a pass of less than an hour may be missed.
    assert!((chance - 0.7471).abs() < 0.004, "{chance}");
}

#[test]
fn quadrants_are_mirrored_in_the_south() {
    // The storm goes east along the equator. Seas only on its north side reach a place north of the track, and none south.
    let north_only = with_seas(along_the_equator(10.0, 60.0, 600.0, 120), [150.0, 0.0, 0.0, 150.0]);
    let comes = |advisory: &Advisory, latitude: f64| {
        seas_at(advisory, at(degrees(latitude), 0.0), 0.0).get("seas").unwrap().single_track.is_some()
    };
    assert!(comes(&north_only, 60.0) && !comes(&north_only, -60.0));
    let mut southern = north_only.clone();
    for point in &mut southern.points {
        point.position = at(point.position.latitude() - 0.01, point.position.longitude());
    }
    assert!(comes(&southern, 60.0) && !comes(&southern, -60.0));
}

#[test]
fn an_advisory_without_seas_gives_no_answer_and_says_so() {
    let answers = seas_at(&along_the_equator(10.0, 60.0, 600.0, 120), at(0.0, 0.0), 60.0);
    assert!(answers.get("seas").is_none());
    assert!(answers.notes.iter().any(|note| note.contains("does not give the reach of high seas")));
}

#[test]
fn official_texts_give_their_seas_and_a_damaged_line_is_told() {
    // "12 FT SEAS..210NE 120SE  60SW 120NW." in the text of the US National Hurricane Center, EP122024 no. 8.
    let text = std::fs::read_to_string("tests/data/forecast-advisory/ep122024.fstadv.008.txt").unwrap();
    let read = |text: &str| read_forecast("text", text.as_bytes());
    let seas = read(&text).advisory.unwrap().points[0].seas.unwrap();
    assert_eq!(seas.reach.clockwise().map(|nmi| nmi.get() as i64), [210, 120, 60, 120]);
    assert!((seas.height.get() - 3.6576).abs() < 1e-9);
    // Newer texts say "4 M SEAS....".
    let newer = read(&text.replace("12 FT SEAS..", "4 M SEAS....")).advisory.unwrap().points[0].seas.unwrap();
    assert!((newer.height.get() - 4.0).abs() < 1e-9 && newer.reach == seas.reach);
    let damaged = read(&text.replace("12 FT SEAS..210NE 120SE", "12 FT SEAS..210NE 120NE"));
    assert_eq!(damaged.findings.iter().map(|f| f.code).collect::<Vec<_>>(), ["advisory-seas"]);
    assert_eq!(damaged.advisory.unwrap().points[0].seas, None);
}

const STOP: &str = "stop_at = { wind = \"30 kt\", at = \"pilot-station\" }";

#[test]
fn a_task_may_stop_at_high_seas_and_at_no_others() {
    let (folder, ..) = edited("tasks.toml", STOP, "stop_at = { seas = \"12 ft\", at = \"pilot-station\" }");
    let (read, findings) = read_folder(&folder);
    let rules = read.unwrap_or_else(|| panic!("{}", listed(&findings))).1;
    assert!(rules.tasks.iter().flat_map(|t| &t.stops_at).any(|stop| stop.limit == Limit::Seas));
    provokes(
        "tasks.toml",
        (STOP, "stop_at = { seas = ^\"2.5 m\", at = \"pilot-station\" }"),
        "rules-seas-not-given",
        &["12 ft or 4 m"],
    );
}
