//! The Beaufort scale in knots, for words such as "gale".

use crate::units::speed::{Knots, METRES_PER_SECOND_PER_KNOT};

/// Least speed in whole knots of forces 1 to 12 (WMO, Manual on Codes, table 1100; 10-minute means).
const LEAST_KT: [u16; 12] = [1, 4, 7, 11, 17, 22, 28, 34, 41, 48, 56, 64];

/// The Beaufort force of a wind, 0 to 12; speeds are rounded to whole knots first, as the scale is given in
/// them.
#[must_use]
pub fn force(wind: Knots) -> u8 {
    let knots = wind.get().round();
    LEAST_KT.iter().filter(|least| knots >= f64::from(**least)).count() as u8
}

/// The speed in the middle of a force.
///
/// v = 0.836 B^1.5 m/s (WMO, Commission for Maritime Meteorology).
#[must_use]
pub fn middle(force: u8) -> Knots {
    let b = f64::from(force.min(17));
    Knots::clamped(0.836 * b * b.sqrt() / METRES_PER_SECOND_PER_KNOT)
}
