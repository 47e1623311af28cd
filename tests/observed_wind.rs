//! What winds observed in the port do to a plan: they satisfy rules and bring the near hours forward, and delay nothing.
#![allow(clippy::unwrap_used, reason = "a test that finds no plan must fail")]

mod common;

use common::Reading;
use snugdown::geo::exposure::{Exposure, ExposureClass};
use snugdown::plan::sheet::Plan;
use snugdown::time::moment::Moment;
use snugdown::units::length::Metres;
use snugdown::units::speed::Knots;
use snugdown::units::wind::{Averaging, WindLimit};
use snugdown::wind::exposure::observed_meets;

const STORM: &str = include_str!("data/small-port/approach.txt");

fn event(at: &str, what: &str) -> String {
    format!("[[event]]\nat = \"2026-09-17T{at}-03:00\"\nby = \"Duty officer\"\n{what}\n\n")
}

fn taken() -> String {
    event("12:05", "took_advisory = { file = \"01.txt\" }")
}

fn observed(at: &str, wind: &str, over: &str) -> String {
    let what = format!("observed = {{ place = \"pilot-station\", wind = \"{wind}\", over = \"{over}\" }}");
    event(at, &what)
}

fn plan(events: &str, now: &str) -> Plan {
    let mut reading = Reading::folder("tests/data/small-port");
    reading.add_forecast("01.txt", STORM);
    reading.set_events(&(taken() + events));
    reading.plans(&format!("2026-09-17T{now}-03:00")).plans.pop().unwrap()
}

fn moment(at: &str) -> Moment {
    Reading::folder("tests/data/small-port").moment(&format!("2026-09-17T{at}-03:00"))
}

/// By when the sweep by launch, which stops at 25 kt at the pilot station, must be over.
fn bound(plan: &Plan) -> Option<Moment> {
    plan.task("H3").unwrap().deadline
}

#[test]
fn a_wind_that_blows_already_stops_work_whatever_the_forecast_says() {
    let without = bound(&plan("", "12:30")).unwrap();
    let with = bound(&plan(&observed("12:20", "26 kt", "1 min"), "12:30")).unwrap();
    assert!(without > moment("12:30") && with == moment("12:20"), "{without} {with}");
}

#[test]
fn an_observation_never_delays_and_fades_unless_it_is_renewed() {
    let calm = observed("12:20", "2 kt", "10 min");
    for now in ["12:30", "14:00"] {
        assert_eq!(bound(&plan(&calm, now)), bound(&plan("", now)), "a calm does not put the gale off");
    }
    let squall = observed("12:20", "30 kt", "1 min");
    // Three hours later without news the forecast counts again; a lower observation ends it at once.
    assert_eq!(bound(&plan(&squall, "15:20")), Some(moment("12:20")));
    assert_eq!(bound(&plan(&squall, "15:21")), bound(&plan("", "15:21")));
    let over = squall.clone() + &observed("12:40", "12 kt", "10 min");
    assert_eq!(bound(&plan(&over, "12:45")), bound(&plan("", "12:45")));
    // As long as it is renewed it counts from its beginning.
    let renewed = squall + &observed("14:50", "28 kt", "1 min");
    assert_eq!(bound(&plan(&renewed, "16:00")), Some(moment("12:20")));
}

#[test]
fn a_gust_says_nothing_about_a_mean() {
    let gust = observed("12:20", "45 kt", "3 s");
    assert_eq!(bound(&plan(&gust, "12:30")), bound(&plan("", "12:30")));
}

#[test]
fn a_stage_comes_due_by_what_is_observed() {
    // "Clear the port" is due at 28 kt over 10 min, or by a forecast; the first of them counts.
    let due = |wind: &str, over: &str| {
        let place = "place = \"pilot-station\", at = \"2026-09-17T02:00-03:00\"";
        let plan = plan(
            &event("12:06", &format!("observed = {{ {place}, wind = \"{wind}\", over = \"{over}\" }}")),
            "12:30",
        );
        let stage = plan.stages.iter().find(|stage| stage.id == "S2").unwrap().clone();
        (stage.due.unwrap(), stage.because.contains("observed"))
    };
    assert_eq!(due("28 kt", "10 min"), (moment("02:00"), true));
    for (wind, over) in [("27 kt", "10 min"), ("40 kt", "1 min")] {
        let (at, is_observed) = due(wind, over);
        assert!(at > moment("02:00") && !is_observed, "{wind} {over}");
    }
}

#[test]
fn a_longer_mean_stands_for_its_gusts_by_the_published_factors() {
    // WMO/TD-No. 1555, table 1.1: onshore, the 3-s gust within 10 min is 1.38 of the mean; and 1.10 is the power law's
    // factor of 0.10 from 10 m to 26 m: (26 / 10)^0.10.
    let shore = Exposure::all_round(ExposureClass::OffSea);
    let gust = |kt: f64, height: f64| WindLimit {
        speed: Knots::new(kt).unwrap(),
        averaging: Averaging::Gust3s,
        height: Metres::new(height).unwrap(),
    };
    let seen = (Knots::new(30.0).unwrap(), Averaging::Minute10);
    assert_eq!(observed_meets(&shore, seen, &gust(41.4, 10.0)), Some(true));
    assert_eq!(observed_meets(&shore, seen, &gust(41.5, 10.0)), Some(false));
    assert_eq!(observed_meets(&shore, seen, &gust(45.5, 26.0)), Some(true));
    let mean = WindLimit { averaging: Averaging::Minute10, ..gust(20.0, 10.0) };
    assert_eq!(observed_meets(&shore, (Knots::new(60.0).unwrap(), Averaging::Gust3s), &mean), None);
}
