//! How much tide a ship needs to float over the bottom with room to spare.

use crate::units::length::Metres;
use crate::units::number::{NumberError, in_range};

/// A port's rule for the water under the keel: a share of the draught, but never less than so much.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct UnderKeelRule {
    share: f64,
    least: Metres,
}

impl UnderKeelRule {
    /// A rule of `share` of the draught (0.1 for 10 %), at least `least`.
    ///
    /// # Errors
    /// A share outside 0 to 1, or a least clearance outside 0 to 20 m.
    pub fn new(share: f64, least: Metres) -> Result<UnderKeelRule, NumberError> {
        let share = in_range(share, 0.0, 1.0, "of the draught")?;
        in_range(least.get(), 0.0, 20.0, "m")?;
        Ok(UnderKeelRule { share, least })
    }

    /// The water to be left under the keel of a ship of this draught.
    #[must_use]
    pub fn clearance(self, draught: Metres) -> Metres {
        Metres::clamped((self.share * draught.get()).max(self.least.get()))
    }
}

/// The least level above chart datum at which a ship may pass over a bottom `depth` below it.
///
/// `squat` is what she sinks by moving. Negative where she passes at any low water.
///
/// ```
/// use snugdown::tide::under_keel::{UnderKeelRule, needed_level};
/// use snugdown::units::length::Metres;
/// let rule = UnderKeelRule::new(0.10, Metres::new(1.0)?)?;
/// let needed = needed_level(Metres::new(12.6)?, Metres::new(12.0)?, rule, Metres::new(0.4)?);
/// assert!((needed.get() - 2.26).abs() < 1e-9); // 12.6 + 0.4 + 1.26 - 12.0
/// # Ok::<(), snugdown::units::number::NumberError>(())
/// ```
#[must_use]
pub fn needed_level(draught: Metres, depth: Metres, rule: UnderKeelRule, squat: Metres) -> Metres {
    // level + depth >= draught + squat + max(share draught, least)
    let keel = draught.get() + squat.get();
    Metres::clamped(keel + rule.clearance(draught).get() - depth.get())
}
