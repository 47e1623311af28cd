//! From radii as products write them to reaches: the rule of "none" and "not given", and circles and semicircles as
//! quadrants.

use crate::advisory::forecast::{Quadrants, Reach};
use crate::units::length::NauticalMiles;
use crate::units::speed::Knots;

/// What is odd about radii beside the greatest wind.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Oddity {
    /// All zero though the greatest wind is at or above that speed.
    ZeroThoughItBlows,
    /// Not zero though the greatest wind is below that speed.
    ReachesThoughTooWeak,
}

/// How far the wind of `speed` reaches where the greatest wind is `wind` and the product gives `given`.
///
/// * Radii of which any is above zero are taken as they stand; zeros in single quadrants are real.
/// * Greatest wind below `speed`: that wind blows nowhere, so the reach is none, at every forecast time; that follows
///   from what "greatest wind" means, and is no guess about a product that carries no radii at that time.
/// * Greatest wind at or above `speed` and nothing given: not given. Beyond 36 to 48 h (64 kt) and 72 h (34 and 50 kt) the
///   United States' texts of 2003 to 2023 never carry them, however strong the storm, so their absence says nothing.
/// * Greatest wind at or above `speed` and four zeros: a contradiction, or how a deck writes "not given".
#[must_use]
pub fn reach_of(speed: Knots, wind: Knots, given: Option<Quadrants>) -> (Reach, Option<Oddity>) {
    let blows = wind >= speed;
    match given {
        None if blows => (Reach::NotGiven, None),
        None => (Reach::Given(Quadrants::NONE), None),
        Some(quadrants) if quadrants == Quadrants::NONE && blows => {
            (Reach::NotGiven, Some(Oddity::ZeroThoughItBlows))
        }
        Some(quadrants) if quadrants != Quadrants::NONE && !blows => {
            (Reach::Given(quadrants), Some(Oddity::ReachesThoughTooWeak))
        }
        Some(quadrants) => (Reach::Given(quadrants), None),
    }
}

/// Which of the winds of 34, 50 and 64 kt this is, if any: radii of others are not used, 35 is not 34 and 30 is not.
#[must_use]
pub fn threshold(knots: f64) -> Option<usize> {
    [Knots::GALE, Knots::STORM, Knots::HURRICANE].iter().position(|speed| (speed.get() - knots).abs() < 0.5)
}

/// The eight directions in which semicircles lie, clockwise from north, 45 degrees apart.
const DIRECTIONS: [&str; 8] =
    ["NORTH", "NORTHEAST", "EAST", "SOUTHEAST", "SOUTH", "SOUTHWEST", "WEST", "NORTHWEST"];

/// The quadrants of one distance all round, or of a semicircle and the other one.
///
/// A quadrant that lies partly in each semicircle gets the greater of the two distances, as a radius is the greatest
/// reach anywhere in its quadrant. `None` if `towards` is no direction.
#[must_use]
pub fn semicircles(towards: &str, within: NauticalMiles, elsewhere: NauticalMiles) -> Option<Quadrants> {
    let middle = DIRECTIONS.iter().position(|direction| *direction == towards)? as i64 * 45;
    let greater = if within > elsewhere { within } else { elsewhere };
    // The quadrant's two edges lie within 90 degrees of the semicircle's middle, or one of them, or none.
    let reach = |quadrant: i64| {
        let middle_of_quadrant = 45 + 90 * quadrant;
        let apart = (middle_of_quadrant - middle).rem_euclid(360);
        match apart.min(360 - apart) {
            ..=45 => within,
            46..=134 => greater,
            _ => elsewhere,
        }
    };
    Some(Quadrants { northeast: reach(0), southeast: reach(1), southwest: reach(2), northwest: reach(3) })
}

#[cfg(test)]
mod tests {
    use super::semicircles;
    use crate::units::length::NauticalMiles;

    #[test]
    fn a_quadrant_cut_by_two_semicircles_gets_the_greater_reach() {
        let (far, near) = (NauticalMiles::new(120.0).unwrap(), NauticalMiles::new(80.0).unwrap());
        let cases = [
            ("NORTH", [120.0, 80.0, 80.0, 120.0]),
            ("EAST", [120.0, 120.0, 80.0, 80.0]),
            ("SOUTHWEST", [80.0, 120.0, 120.0, 120.0]),
            ("NORTHEAST", [120.0, 120.0, 80.0, 120.0]),
        ];
        for (towards, expected) in cases {
            let found = semicircles(towards, far, near).unwrap().clockwise().map(NauticalMiles::get);
            assert!(found.iter().zip(expected).all(|(a, b)| (a - b).abs() < 1e-9), "{towards}: {found:?}");
        }
        assert_eq!(semicircles("NORTHNORTHEAST", far, near), None);
    }
}
