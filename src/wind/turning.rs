//! How the wind's direction turns with time, and how far directions spread.

use crate::units::bearing::Bearing;

/// How the wind turns.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Turn {
    /// Clockwise: as it does at a place to the right of a storm's track, in both hemispheres.
    Veers,
    /// Anticlockwise: to the left of the track.
    Backs,
    /// Less than [`LEAST_TURN_DEGREES`] either way.
    Steady,
}

/// A smaller turn is not told: nobody moves a line for it. Our choice.
pub const LEAST_TURN_DEGREES: f64 = 30.0;

/// How the wind turned over these directions, in order of time: the sum of the changes from each to the next, each taken
/// the shorter way round.
#[must_use]
pub fn turn(directions: &[Bearing]) -> Turn {
    let steps = directions.windows(2).map(|pair| match pair {
        [from, to] => signed(*from, *to),
        _ => 0.0,
    });
    let total: f64 = steps.sum();
    if total >= LEAST_TURN_DEGREES {
        Turn::Veers
    } else if total <= -LEAST_TURN_DEGREES {
        Turn::Backs
    } else {
        Turn::Steady
    }
}

/// The 10, 50 and 90 % points of directions, clockwise, counted from their mean direction; `None` if there are none or
/// they point evenly all round.
///
/// The mean direction is that of the sum of their unit vectors.
#[must_use]
pub fn fan(directions: &[Bearing]) -> Option<[Bearing; 3]> {
    let (east, north) = directions.iter().fold((0.0, 0.0), |(east, north), direction| {
        let (sin, cos) = libm::sincos(direction.get().to_radians());
        (east + sin, north + cos)
    });
    let length = f64::sqrt(east * east + north * north) / directions.len().max(1) as f64;
    if length < LEAST_CONCENTRATION {
        return None;
    }
    let mean = Bearing::wrapped(libm::atan2(east, north).to_degrees());
    let mut offsets: Vec<f64> = directions.iter().map(|direction| signed(mean, *direction)).collect();
    offsets.sort_unstable_by(f64::total_cmp);
    // Counted from both ends alike, so that a mirrored storm has the mirrored fan.
    let outer = offsets.len().div_ceil(10) - 1;
    let last = offsets.len() - 1;
    let at = |index: usize| offsets.get(index).copied().unwrap_or(0.0);
    let middle = (at(last / 2) + at(offsets.len() / 2)) / 2.0;
    Some([at(outer), middle, at(last - outer)].map(|offset| Bearing::wrapped(mean.get() + offset)))
}

/// Below this length of the mean unit vector directions have no middle worth telling. Our choice.
const LEAST_CONCENTRATION: f64 = 0.2;

/// From one direction to another the shorter way round: -180 to 180 degrees, clockwise positive.
fn signed(from: Bearing, to: Bearing) -> f64 {
    let turned = (to.get() - from.get()).rem_euclid(360.0);
    if turned > 180.0 { turned - 360.0 } else { turned }
}

#[cfg(test)]
mod tests {
    use super::{Turn, fan, turn};
    use crate::units::bearing::Bearing;

    fn all(degrees: &[f64]) -> Vec<Bearing> {
        degrees.iter().map(|d| Bearing::wrapped(*d)).collect()
    }

    #[test]
    fn the_wind_veers_through_north_and_backs_through_north() {
        assert_eq!(turn(&all(&[300.0, 340.0, 20.0, 60.0])), Turn::Veers);
        assert_eq!(turn(&all(&[60.0, 20.0, 340.0, 300.0])), Turn::Backs);
        assert_eq!(turn(&all(&[350.0, 10.0, 350.0])), Turn::Steady);
        assert_eq!(turn(&all(&[10.0])), Turn::Steady);
    }

    #[test]
    fn a_fan_across_north_is_told_from_left_to_right() {
        let spread: Vec<f64> = (0..=100).map(|i| 340.0 + f64::from(i) * 0.4).collect();
        let [left, middle, right] = fan(&all(&spread)).unwrap().map(Bearing::get);
        assert!((left - 344.0).abs() < 1.0 && middle.min(360.0 - middle) < 1.0 && (right - 16.0).abs() < 1.0);
        assert!(fan(&all(&[0.0, 90.0, 180.0, 270.0])).is_none());
        assert!(fan(&[]).is_none());
    }
}
