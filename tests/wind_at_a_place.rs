//! The wind at a place hour by hour: against geometry, common practice, and the odds of the same scenarios.
#![allow(clippy::unwrap_used, reason = "a test without its answer must fail")]

mod storms;

use snugdown::advisory::forecast::{Advisory, Quadrants, Reach, WindRadii};
use snugdown::arrival::errors::ErrorTable;
use snugdown::arrival::odds::{Draw, ask};
use snugdown::arrival::series::{Lasting, View, WindSeries, wind_series};
use snugdown::geo::exposure::{Exposure, ExposureClass, ExposureSector};
use snugdown::geo::position::Position;
use snugdown::units::bearing::Bearing;
use snugdown::units::chance::Chance;
use snugdown::units::length::Metres;
use snugdown::units::speed::Knots;
use snugdown::units::wind::{Averaging, standard_height};
use storms::{advisory, along_the_equator, ask_about, at, constant, degrees, full_forecast, point, shipped};

fn series_in(storm: &Advisory, table: &ErrorTable, position: Position, exposure: &Exposure) -> WindSeries {
    let answers = ask(storm, table, &[ask_about("gale", position, 34.0)], Draw::default());
    let view = View { position, exposure, averaging: storm.averaging, height: standard_height() };
    wind_series(storm, table, view, answers.get("gale").unwrap()).unwrap()
}

fn at_sea(storm: &Advisory, table: &ErrorTable, position: Position) -> WindSeries {
    series_in(storm, table, position, &Exposure::all_round(ExposureClass::AtSea))
}

#[test]
fn a_gale_lasts_as_long_as_the_chord_takes() {
    // Chord 2 sqrt(R^2 - b^2) / c, R 120 n mi, c 10 kt: 24.00, 20.78, 9.59 h at b 0, 60, 110 n mi. Geometry.
    for (aside, hours) in [(0.0, 24.00), (60.0, 20.78), (110.0, 9.59)] {
        let storm = along_the_equator(10.0, 120.0, 400.0, 96);
        let series = at_sea(&storm, &constant(0.0, 0.0), at(degrees(aside), 0.0));
        for length in series.lasts {
            let Lasting::For(length) = length else { panic!("{length:?}") };
            let off = (length.get() as f64 / 60.0 - hours).abs();
            assert!(off < 0.05, "{aside}: {length}");
        }
    }
}

#[test]
fn right_of_the_track_the_wind_veers_and_left_it_backs_in_both_hemispheres() {
    // Common practice; and by geometry from the direction of the wind around a centre (northern: bearing + 90 - 20 degrees).
    for (latitude, right) in [(20.0, -1.0), (-20.0, -1.0)] {
        // Going east: right of the track is south of it.
        let points = (0..=4).map(|i| {
            let hour = f64::from(i) * 12.0;
            point(hour, at(latitude, degrees(10.0 * hour - 240.0)), 60.0, 150.0)
        });
        let storm = advisory(points.collect());
        let of = |side: f64| {
            let place = at(latitude + degrees(80.0) * side, 0.0);
            at_sea(&storm, &constant(0.0, 0.0), place).turning.unwrap()
        };
        let always = Chance::share(1, 1);
        assert_eq!((of(right).veers, of(-right).backs), (always, always), "{latitude}");
        // Over the place itself: a lull, then the other side.
        assert_eq!(of(0.0).eye, always);
    }
}

#[test]
fn a_mirrored_storm_brings_the_same_speeds_and_mirrored_directions() {
    // In the open Pacific, where no land tells north from south.
    let mut north = full_forecast();
    for p in &mut north.points {
        p.position = at(p.position.latitude(), p.position.longitude() - 70.0);
    }
    let mirror = |reach: Reach| match reach {
        Reach::NotGiven => Reach::NotGiven,
        Reach::Given(q) => Reach::Given(Quadrants {
            northeast: q.southeast,
            southeast: q.northeast,
            southwest: q.northwest,
            northwest: q.southwest,
        }),
    };
    let mut south = north.clone();
    for p in &mut south.points {
        p.position = at(-p.position.latitude(), p.position.longitude());
        let WindRadii { gale, storm, hurricane } = p.radii;
        p.radii = WindRadii { gale: mirror(gale), storm: mirror(storm), hurricane: mirror(hurricane) };
    }
    south.motion = None;
    north.motion = None;
    let table = shipped().for_advisory(&north);
    let here = at_sea(&north, &table, at(22.0, -137.0));
    let there = at_sea(&south, &table, at(-22.0, -137.0));
    let mut directions = 0;
    for (a, b) in here.hours.iter().zip(&there.hours) {
        assert_eq!((a.mean, a.gust, a.gale, a.lull), (b.mean, b.gust, b.gale, b.lull));
        if let (Some(a), Some(b)) = (a.from, b.from) {
            directions += 1;
            for (here, there) in [(a.likely, b.likely), (a.left, b.right), (a.right, b.left)] {
                let mirrored = Bearing::wrapped(180.0 - there.get());
                assert!(here.angle_to(mirrored) < 1e-6, "{here} {there}");
            }
        }
    }
    assert!(directions > 20, "{directions} hours with a direction");
}

#[test]
fn bands_stand_in_order_and_agree_with_the_odds_of_the_same_storms() {
    let storm = full_forecast();
    let table = shipped().for_advisory(&storm);
    let position = at(22.0, -67.0);
    let series = at_sea(&storm, &table, position);
    let answers = ask(&storm, &table, &[ask_about("gale", position, 34.0)], Draw::default());
    let gale = answers.get("gale").unwrap();
    for hour in &series.hours {
        for band in [hour.mean, hour.gust] {
            assert!(band.low <= band.middle && band.middle <= band.high);
        }
        // Gusts at sea are 1.11 of the one-minute mean (WMO/TD-No. 1555, table 1.1).
        assert!((hour.gust.high.get() - 1.11 * hour.mean.high.get()).abs() < 1e-9);
        // It blows at most in those scenarios in which it has come.
        assert!(hour.gale <= gale.chance_by(hour.at), "{} {}", hour.gale, gale.chance_by(hour.at));
    }
    let half = series.hours.iter().map(|hour| hour.gale).max_by(|a, b| a.get().total_cmp(&b.get())).unwrap();
    assert!(half.get() > 0.3, "the place lies in the storm's way: {half}");
}

#[test]
fn sectors_count_by_the_direction_of_each_scenario() {
    // The wind at a place south of an eastgoing northern storm's track comes first from the south to west: bearing 180 and
    // more, + 70. A place that is sheltered from those winds alone feels 0.8 of 0.93 x 1.21 there, one open to them all of it.
    let storm = along_the_equator(10.0, 120.0, 400.0, 96);
    let place = at(degrees(-100.0), 0.0);
    let shielded = Exposure {
        otherwise: ExposureClass::AtSea,
        sectors: vec![ExposureSector {
            from: Bearing::wrapped(180.0),
            to: Bearing::wrapped(0.0),
            class: ExposureClass::InLand,
        }],
    };
    let open = at_sea(&storm, &constant(0.0, 0.0), place);
    let behind = series_in(&storm, &constant(0.0, 0.0), place, &shielded);
    let mut sheltered = 0;
    for (a, b) in open.hours.iter().zip(&behind.hours) {
        let Some(from) = a.from else { continue };
        let share = b.mean.middle.get() / a.mean.middle.get();
        if from.likely.get() >= 180.0 {
            sheltered += 1;
            // 0.93 (one minute to ten at sea: 1.03 / 1.11) x 0.8 over land x 1.21 (one minute within ten, in-land).
            assert!((share - 1.03 / 1.11 * 0.8 * 1.21).abs() < 1e-9, "{share}");
        } else {
            assert!((share - 1.0).abs() < 1e-12, "{share}");
        }
    }
    assert!(sheltered > 3);
}

#[test]
fn a_longer_mean_is_lower_and_a_higher_anemometer_reads_more() {
    let storm = full_forecast();
    let table = shipped().for_advisory(&storm);
    let position = at(22.0, -67.0);
    let answers = ask(&storm, &table, &[ask_about("gale", position, 34.0)], Draw::default());
    let exposure = Exposure::all_round(ExposureClass::AtSea);
    let peak = |averaging, height: f64| {
        let height = Metres::new(height).unwrap();
        let view = View { position, exposure: &exposure, averaging, height };
        wind_series(&storm, &table, view, answers.get("gale").unwrap()).unwrap().peak_mean.middle
    };
    let (one, ten) = (peak(Averaging::Minute1, 10.0), peak(Averaging::Minute10, 10.0));
    assert!((ten.get() / one.get() - 1.03 / 1.11).abs() < 1e-9);
    // Logarithmic law over the sea, roughness 0.2 mm: 1.1487 from 10 m to 50 m.
    assert!((peak(Averaging::Minute1, 50.0).get() / one.get() - 1.1487).abs() < 1e-4);
    assert!(one > Knots::GALE);
}
