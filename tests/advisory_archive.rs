//! The archive that odds are fitted to and scored on: nothing missing becomes a zero, and each storm meets its own track.
#![allow(clippy::unwrap_used, reason = "a test that cannot read its data must fail")]

#[path = "../examples/archive/mod.rs"]
mod archive;

use archive::Archive;
use archive::best_track::There;
use snugdown::advisory::forecast::{Advisory, Quadrants, Reach};
use snugdown::units::length::NauticalMiles;
use snugdown::wind::sphere::vector;
use std::path::Path;

fn read() -> Archive {
    Archive::read(&Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/advisory-archive"))
}

fn advisory<'a>(archive: &'a Archive, key: &str) -> &'a Advisory {
    &archive.entries.iter().find(|entry| entry.key == key).unwrap().advisory
}

#[test]
fn radii_are_as_written_none_where_the_wind_is_weaker_and_not_given_where_it_is_not() {
    let archive = read();
    let weak = advisory(&archive, "AL052006");
    let [northeast, none, northwest] = [75.0, 0.0, 40.0].map(|miles| NauticalMiles::new(miles).unwrap());
    let written = Quadrants { northeast, southeast: none, southwest: none, northwest };
    assert_eq!(weak.points[0].radii.gale, Reach::Given(written));
    assert_eq!(weak.points[0].radii.storm, Reach::Given(Quadrants::NONE));
    let strong = advisory(&archive, "AL092008");
    let last = strong.points.last().unwrap();
    assert!(last.max_wind.get() >= 64.0);
    assert!(last.radii.by_speed().iter().all(|(_, reach)| *reach == Reach::NotGiven));
}

#[test]
fn hours_count_from_the_base_time_and_a_forecast_of_five_days_has_no_end() {
    let archive = read();
    for key in ["AL052006", "AL092008"] {
        let advisory = advisory(&archive, key);
        assert_eq!((advisory.issued - advisory.base).num_hours(), 3);
        assert_eq!(advisory.ends, None);
    }
}

#[test]
fn a_storm_meets_its_own_track_though_that_bears_another_number() {
    let archive = read();
    assert_eq!(archive.renumbered, [("AL052006".to_owned(), "AL062006".to_owned())]);
    let first = &advisory(&archive, "AL052006").points[0];
    let came = archive.tracks["AL052006"].at(first.valid).unwrap();
    // Half way from 23.2 N 79.3 W at 12 UTC to 23.9 N 79.9 W at 18 UTC.
    assert!((came.latitude - 23.55).abs() < 1e-9 && (came.longitude + 79.6).abs() < 1e-9);
    // 90 and 75 n mi in the north-east, 60 and 0 in the south-east.
    assert!(
        came.reach_nmi[0]
            .is_some_and(|reach| (reach[0] - 82.5).abs() < 1e-9 && (reach[1] - 30.0).abs() < 1e-9)
    );
}

#[test]
fn a_landfall_line_without_radii_is_no_fix_and_an_onset_is_the_first_half_hour_within_the_radius() {
    let archive = read();
    let track = &archive.tracks["AL052006"];
    assert!(track.fixes().iter().all(|fix| fix.reach_nmi[0].is_some()));
    let place = archive.sites.iter().find(|site| site.name == "MIAMI FL").unwrap().position;
    let issued = advisory(&archive, "AL052006").issued;
    let onset = track.onset(place, issued, issued + chrono::TimeDelta::hours(48)).unwrap().unwrap();
    assert_eq!(track.gale_at(vector(place), onset), There::Yes);
    assert_eq!(track.gale_at(vector(place), onset - chrono::TimeDelta::minutes(30)), There::No);
}

#[test]
fn official_odds_are_read_for_places_with_a_position_only() {
    let archive = read();
    let odds = &archive.official[&("AL052006".to_owned(), "2006-08-29T15:00Z".to_owned())];
    let names: Vec<&str> = odds.iter().map(|odds| archive.sites[odds.site].name.as_str()).collect();
    assert_eq!(names, ["CHARLESTON SC", "MIAMI FL"]);
    assert!((odds[1].chances[0] - 0.60).abs() < 1e-12 && (odds[1].chances[6] - 0.84).abs() < 1e-12);
}
