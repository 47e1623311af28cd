//! When there is enough water.

use crate::units::chance::Chance;
use crate::units::length::Metres;

/// How much water must be under a keel: a share of the draught, and at least so much.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct UnderKeelRule {
    /// Share of the draught.
    pub share: Chance,
    /// At least this much.
    pub least: Metres,
}
