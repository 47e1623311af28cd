//! What is asked of the scenarios: does this wind, or the high seas, reach this place?

use crate::geo::position::Position;
use crate::units::speed::Knots;

/// What is looked for at a place.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Sought {
    /// This wind over the open sea, 10 m above it, in the advisory's own averaging. For a limit that means something
    /// else (a gust at a crane's height, a place behind the coast) take [`crate::wind::exposure::open_sea_limit`].
    Wind(Knots),
    /// The high seas whose reach the advisory gives.
    Seas,
}

/// One limit at one place.
#[derive(Clone, Debug, PartialEq)]
pub struct Question {
    /// A name that no other question of the same ask bears; the answer is found by it.
    pub key: String,
    /// Where.
    pub position: Position,
    /// What is looked for there.
    pub sought: Sought,
}
