//! Two centres about one storm, and two storms about one port.
#![allow(clippy::unwrap_used, reason = "a test that finds no plan must fail")]

mod common;

use common::Reading;
use snugdown::advisory::read::read_forecast;
use snugdown::advisory::same_storm::is_same_storm;
use snugdown::arrival::earlier::earlier_of;
use snugdown::arrival::odds::{Answers, Draw, ask};
use snugdown::arrival::onset::Onset;
use snugdown::plan::in_force::in_force;
use snugdown::plan::sheet::Plan;
use snugdown::record::fold::situation;
use snugdown::time::moment::Minutes;
use snugdown::work::questions::questions;

const STORM: &str = include_str!("data/small-port/approach.txt");
const NOW: &str = "2026-09-17T15:00-03:00";

/// The storm twelve hours ahead, by another office.
fn second_centre() -> String {
    let mut text = STORM.replace("CORVANE EXERCISE FORECAST OFFICE ", "SECOND EXERCISE FORECAST CENTRE ");
    for (from, to) in [
        ("18/0000Z 20.5N  36.1W", "18/0000Z 21.1N  38.0W"),
        ("18/1200Z 21.1N  38.0W", "18/1200Z 21.8N  39.7W"),
        ("19/0000Z 21.8N  39.7W", "19/0000Z 22.8N  41.2W"),
        ("19/1200Z 22.8N  41.2W", "19/1200Z 24.0N  42.0W"),
    ] {
        text = text.replace(from, to);
    }
    text
}

/// Another storm that comes from the south, a day later.
fn other_storm() -> String {
    let mut text = STORM.replace("OSKELA", "PERIL").replace("AL992026", "AL982026");
    for (from, to) in [
        ("20.0N  34.5W", "13.0N  37.0W"),
        ("19.8N  34.0W", "12.8N  36.7W"),
        ("20.5N  36.1W", "14.5N  38.0W"),
        ("21.1N  38.0W", "16.5N  39.0W"),
        ("21.8N  39.7W", "18.5N  40.0W"),
        ("22.8N  41.2W", "20.5N  41.0W"),
        ("25.5N  42.5W", "25.0N  42.0W"),
        ("29.0N  41.5W", "30.0N  41.0W"),
    ] {
        text = text.replace(from, to);
    }
    text
}

fn took(at: &str, said: &str) -> String {
    format!(
        "[[event]]\nat = \"2026-09-17T{at}-03:00\"\nby = \"Duty officer\"\ntook_advisory = {{ {said} }}\n\n"
    )
}

/// The small port with an official issuer, and these events.
fn port(events: &str) -> Reading {
    let official = |text: String| {
        text.replace(
            "authority = \"Harbour Master\"",
            "authority = \"Harbour Master\"\nofficial_issuer = \"Corvane Exercise\"",
        )
    };
    let mut reading = Reading::folder_with("tests/data/small-port", &official);
    reading.add_forecast("a.txt", STORM);
    reading.add_forecast("b.txt", &second_centre());
    reading.add_forecast("c.txt", &other_storm());
    reading.set_events(events);
    reading
}

fn plan(events: &str) -> Plan {
    let plan = port(events).plans(NOW).plans.pop().unwrap();
    assert!(plan.breaches.is_empty(), "{:?}", plan.breaches);
    plan
}

/// A plan without what only tells of other centres and of the record.
fn bare(mut plan: Plan) -> Plan {
    plan.warnings.clear();
    plan
}

#[test]
fn a_second_centre_warns_and_changes_nothing() {
    let official = took("12:05", "file = \"a.txt\"");
    let with_second = plan(&(official.clone() + &took("12:30", "file = \"b.txt\"")));
    let alone =
        port(&(official + &took("12:30", "file = \"not-there.txt\""))).plans(NOW).plans.pop().unwrap();
    assert!(alone.warnings.is_empty());
    let [warning] = with_second.warnings.as_slice() else { panic!("{:?}", with_second.warnings) };
    assert!(warning.starts_with("b.txt by SECOND EXERCISE FORECAST CENTRE, a second centre: gales EARLIER THAN YOUR OFFICIAL SOURCE at Pilot boarding place "), "{warning}");
    assert!(warning.ends_with("Nothing in this plan counts on it, unless an order says so."), "{warning}");
    assert_eq!(bare(with_second), bare(alone));
}

#[test]
fn a_second_centre_that_is_not_earlier_says_so() {
    // The official forecast taken under another issuer is not earlier than itself.
    let same = STORM.replace("CORVANE EXERCISE FORECAST OFFICE ", "SECOND EXERCISE FORECAST CENTRE ");
    let mut reading = port(&(took("12:05", "file = \"a.txt\"") + &took("12:30", "file = \"same.txt\"")));
    reading.add_forecast("same.txt", &same);
    let plan = reading.plans(NOW).plans.pop().unwrap();
    assert!(
        plan.warnings[0].contains("gales nowhere earlier than your official source"),
        "{:?}",
        plan.warnings
    );
}

#[test]
fn a_second_centre_alone_is_not_planned_on() {
    let plan = plan(&took("12:30", "file = \"b.txt\""));
    assert!(plan.advisory.is_none() && plan.arrivals.is_empty());
    assert!(
        plan.warnings[0]
            .contains("YOUR OFFICIAL SOURCE HAS NOT TOLD OF THIS STORM; gales at Pilot boarding place"),
        "{:?}",
        plan.warnings
    );
}

#[test]
fn an_order_puts_a_second_centre_in_force_until_the_official_source_speaks_again() {
    let official = took("12:05", "file = \"a.txt\"");
    let known = took("12:30", "file = \"b.txt\"");
    let order = took("12:40", "file = \"b.txt\", by_order = true");
    let ordered = plan(&(official.clone() + &known + &order));
    assert_eq!(ordered.advisory.as_ref().unwrap().file, "b.txt");
    assert!(ordered.warnings.is_empty(), "{:?}", ordered.warnings);
    // A newer official advisory ends it; an older one does not.
    let newer =
        STORM.replace("1500 UTC THU SEP 17", "1700 UTC THU SEP 17").replace("NUMBER   9", "NUMBER  10");
    let newer = newer.replace("34.5W AT 17/1500Z", "34.5W AT 17/1700Z");
    let older =
        STORM.replace("1500 UTC THU SEP 17", "1400 UTC THU SEP 17").replace("NUMBER   9", "NUMBER   8");
    let older = older.replace("34.5W AT 17/1500Z", "34.5W AT 17/1400Z");
    for (file, text, expected) in [("newer.txt", newer, "newer.txt"), ("older.txt", older, "b.txt")] {
        let mut reading = port(&(official.clone() + &order + &took("14:30", &format!("file = \"{file}\""))));
        reading.add_forecast(file, &text);
        let plan = reading.plans(NOW).plans.pop().unwrap();
        assert_eq!(plan.advisory.unwrap().file, expected);
    }
}

#[test]
fn without_an_official_issuer_every_advisory_counts_as_before() {
    let mut reading = Reading::folder("tests/data/small-port");
    reading.add_forecast("a.txt", STORM);
    reading.add_forecast("b.txt", &second_centre());
    reading.set_events(&(took("12:05", "file = \"a.txt\"") + &took("12:30", "file = \"b.txt\"")));
    let plan = reading.plans(NOW).plans.pop().unwrap();
    // Equal issue times: the one taken later.
    assert_eq!(plan.advisory.unwrap().file, "b.txt");
    assert!(plan.warnings.is_empty());
}

#[test]
fn each_storm_keeps_its_own_forecast_and_the_earlier_wind_counts() {
    let both = plan(&(took("12:05", "file = \"a.txt\"") + &took("12:30", "file = \"c.txt\"")));
    let first = plan(&took("12:05", "file = \"a.txt\""));
    let head = both.advisory.as_ref().unwrap();
    assert_eq!((head.file.as_str(), head.storm.as_str()), ("a.txt", "OSKELA"));
    assert_eq!(both.other_advisories.len(), 1);
    assert_eq!(both.other_advisories[0].storm, "PERIL");
    for (together, alone) in both.arrivals.iter().zip(&first.arrivals) {
        assert_eq!((&together.place, together.wind), (&alone.place, alone.wind));
        assert!(together.chance >= alone.chance, "{together:?}");
        assert!(together.computed.is_none_or(|at| alone.computed.is_none_or(|other| at <= other)));
        assert!(together.computed.is_none() || together.storm.as_deref() == Some("OSKELA"), "{together:?}");
    }
    // Alone no storm is named: there is nothing to tell apart.
    assert!(first.arrivals.iter().all(|arrival| arrival.storm.is_none()));
}

fn odds(reading: &Reading, file: &str) -> Answers {
    let advisory = &reading.forecasts[file];
    let asked = questions(&reading.port, &reading.rules, &reading.work, advisory.averaging);
    ask(advisory, &reading.tables.for_advisory(advisory), &asked, Draw { scenarios: 4_000, most: 4_000 })
}

#[test]
fn the_chance_of_either_storm_is_that_of_independent_storms() {
    let reading = port("");
    let (a, c) = (odds(&reading, "a.txt"), odds(&reading, "c.txt"));
    let together = earlier_of(&[&a, &c]).unwrap();
    assert_eq!(together.answers.len(), a.answers.len());
    let mut compared = 0;
    for answer in &together.answers {
        let (of_a, of_c) = (a.get(&answer.key).unwrap(), c.get(&answer.key).unwrap());
        for hours in [12, 24, 36, 48, 72] {
            let t = answer.issued + Minutes::hours(hours);
            let (p1, p2) = (of_a.chance_by(t).get(), of_c.chance_by(t).get());
            let found = answer.chance_by(t).get();
            // 4,000 scenarios: the overlap p1 p2 is met within about 2 % (three standard errors of a share).
            let expected = 1.0 - (1.0 - p1) * (1.0 - p2);
            assert!((found - expected).abs() < 0.025, "{} {hours} h: {found} for {p1}, {p2}", answer.key);
            compared += usize::from(p1 > 0.05 && p2 > 0.05);
        }
        // Scenario by scenario the earlier onset.
        for (scenario, both) in answer.onsets.iter().enumerate() {
            let (x, y) = (of_a.onsets[scenario].onset, of_c.onsets[scenario].onset);
            assert_eq!(both.onset, if x <= y { x } else { y });
            let comes =
                [of_a, of_c].map(|one| &one.onsets[scenario]).into_iter().filter(|o| o.onset != Onset::Never);
            let last = comes
                .map(|one| one.until)
                .max_by_key(|until| until.map_or(i64::MAX, |at| at.epoch_minutes()));
            assert_eq!(both.until, last.flatten());
        }
    }
    assert!(compared >= 3, "too few to compare: {compared}");
    // One storm alone is itself.
    assert_eq!(earlier_of(&[&a]).unwrap(), a);
    assert!(earlier_of(&[]).is_none());
}

#[test]
fn a_storm_whose_forecast_has_run_out_counts_no_longer_beside_another() {
    let reading = port(&(took("12:05", "file = \"a.txt\"") + &took("12:30", "file = \"c.txt\"")));
    let files = |now: &str| {
        let then = situation(&reading.events, reading.moment(now).to_utc());
        let force = in_force(&reading.forecasts, &reading.port, &then.advisories, then.now);
        force.files().into_iter().map(str::to_owned).collect::<Vec<String>>()
    };
    assert_eq!(files("2026-09-17T12:10-03:00"), ["a.txt"]);
    assert_eq!(files("2026-09-17T13:00-03:00"), ["a.txt", "c.txt"]);
    // Both end on the 21st; then the newest one is all there is.
    assert_eq!(files("2026-09-25T12:00-03:00").len(), 1);
}

#[test]
fn two_centres_are_known_to_mean_one_storm() {
    let read = |text: &str| read_forecast("t", text.as_bytes()).advisory.unwrap();
    let (official, other) = (read(STORM), read(&other_storm()));
    let mut second = read(&second_centre());
    assert!(is_same_storm(&official, &second) && !is_same_storm(&official, &other));
    // Without the common id the name tells, and without a name the place.
    second.storm.id = Some("T2611".to_owned());
    assert!(is_same_storm(&official, &second));
    second.storm.name = "UNNAMED".to_owned();
    assert!(is_same_storm(&official, &second) && !is_same_storm(&other, &second));
}
