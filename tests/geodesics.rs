//! Distances, bearings and destinations against the published GeodTest set, and the quick ones against the exact.

#![expect(clippy::unwrap_used, reason = "a helper of these tests fails by panicking, as a test does")]

use approx::assert_abs_diff_eq;
use proptest::prelude::{Strategy, proptest};
use snugdown::geo::geodesic::{
    Fix, bearing, destination, displaced, distance, quick_destination, quick_distance_bearing,
};
use snugdown::geo::position::Position;
use snugdown::units::bearing::Bearing;
use snugdown::units::length::NauticalMiles;

/// From, bearing at from, to, distance in n mi.
fn published() -> Vec<(Position, f64, Position, f64)> {
    include_str!("data/geodtest/geodtest-20.dat")
        .lines()
        .map(|line| {
            let c: Vec<f64> = line.split(' ').map(|word| word.parse().unwrap()).collect();
            assert_eq!(c.len(), 12, "{line}");
            (Position::new(c[0], c[1]).unwrap(), c[2], Position::new(c[3], c[4]).unwrap(), c[6] / 1852.0)
        })
        .collect()
}

fn angle(a: f64, b: f64) -> f64 {
    Bearing::wrapped(a).angle_to(Bearing::wrapped(b))
}

#[test]
fn exact_distances_and_bearings_are_the_published_ones() {
    let cases = published();
    assert_eq!(cases.len(), 20);
    for (from, azimuth, to, nm) in cases {
        assert_abs_diff_eq!(distance(from, to).get(), nm, epsilon = 1e-6);
        assert!(angle(bearing(from, to).get(), azimuth) < 1e-6, "{from}");
        let reached = destination(from, Bearing::wrapped(azimuth), NauticalMiles::new(nm).unwrap());
        assert!(distance(reached, to).get() < 1e-6, "{from}");
    }
}

#[test]
fn quick_distances_and_bearings_keep_their_stated_error_on_the_published_set() {
    for (from, azimuth, to, nm) in published() {
        let (quick_nm, quick_degrees) = quick_distance_bearing(from, to);
        let share = (quick_nm - nm).abs() / nm;
        assert!(share < if nm < 5_400.0 { 1e-4 } else { 5e-3 }, "{from} {to}: {quick_nm} for {nm}");
        if nm < 5_400.0 {
            assert!(angle(quick_degrees, azimuth) < 0.2, "{from} {to}: {quick_degrees} for {azimuth}");
        }
    }
}

#[test]
fn poles_antipodes_and_a_position_to_itself_give_numbers() {
    let p = |lat, lon| Position::new(lat, lon).unwrap();
    for a in [p(90.0, 0.0), p(-90.0, 77.0), p(0.0, 180.0), p(0.0, 0.0), p(18.0, -179.999)] {
        for b in [p(90.0, 10.0), p(-90.0, 0.0), p(0.0, -180.0), p(0.0, 0.0), p(-18.0, 0.001), a] {
            let (nm, degrees) = quick_distance_bearing(a, b);
            assert!((nm - distance(a, b).get()).abs() <= 0.005 * nm + 1e-9, "{a} {b}: {nm}");
            assert!((0.0..360.0).contains(&degrees), "{a} {b}: {degrees}");
        }
    }
    assert_eq!(quick_distance_bearing(p(20.0, -60.0), p(20.0, -60.0)), (0.0, 0.0));
}

#[test]
fn a_way_over_the_pole_or_the_date_line_ends_on_the_other_side() {
    let over_the_pole = quick_destination(Position::new(89.0, 10.0).unwrap(), 0.0, 120.0);
    assert_abs_diff_eq!(over_the_pole.latitude(), 89.0, epsilon = 0.02);
    assert_abs_diff_eq!(over_the_pole.longitude(), -170.0, epsilon = 1e-9);
    let over_the_line = quick_destination(Position::new(-18.0, 179.5).unwrap(), 90.0, 60.0);
    assert_abs_diff_eq!(over_the_line.longitude(), -179.45, epsilon = 0.01);
}

#[test]
fn right_of_a_northward_heading_is_east_and_behind_is_south() {
    let start = Position::new(20.0, -60.0).unwrap();
    let moved = displaced(start, Bearing::NORTH, -60.0, 60.0);
    assert_abs_diff_eq!(moved.latitude(), 19.0, epsilon = 0.02);
    assert_abs_diff_eq!(moved.longitude(), -58.94, epsilon = 0.02);
}

fn anywhere() -> impl Strategy<Value = Position> {
    (-75.0..75.0_f64, -180.0..180.0_f64).prop_map(|(lat, lon)| Position::new(lat, lon).unwrap())
}

proptest! {
    #[test]
    fn within_storm_range_the_quick_answer_is_the_exact_one(
        from in anywhere(), degrees in 0.0..360.0_f64, nm in 1.0..1500.0_f64, limit in 0.0..2000.0_f64
    ) {
        let to = destination(from, Bearing::wrapped(degrees), NauticalMiles::new(nm).unwrap());
        let (quick_nm, quick_degrees) = quick_distance_bearing(from, to);
        assert!((quick_nm - nm).abs() < 1e-4 * nm, "{quick_nm} for {nm}");
        assert!(angle(quick_degrees, degrees) < 0.1, "{quick_degrees} for {degrees}");
        if Fix::of(from).is_beyond(&Fix::of(to), limit) {
            assert!(nm > limit, "{nm} is called beyond {limit}");
        } else {
            assert!(nm < limit * 1.03 + 1e-6, "{nm} is not called beyond {limit}");
        }
    }

    #[test]
    fn a_quick_destination_lies_where_it_should(
        from in anywhere(), degrees in 0.0..360.0_f64, nm in 1.0..1500.0_f64
    ) {
        let quick = quick_destination(from, degrees, nm);
        let exact = destination(from, Bearing::wrapped(degrees), NauticalMiles::new(nm).unwrap());
        assert!(distance(quick, exact).get() < 0.006 * nm, "{quick} for {exact}");
    }
}
