//! The channel: depth, under-keel rule and spacing of ships.

use crate::tide::under_keel::UnderKeelRule;
use crate::time::moment::Minutes;
use crate::units::length::Metres;

/// A channel in which ships follow each other.
#[derive(Clone, Debug, PartialEq)]
pub struct Channel {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// Dredged depth below the datum of the tide.
    pub depth: Metres,
    /// How much water must be under a keel.
    pub under_keel: UnderKeelRule,
    /// Classes of ships by draught, shallowest first; a ship belongs to the last whose `draught_over` she exceeds.
    pub classes: Vec<ChannelClass>,
    /// Entry to entry in the same direction, by class of the first and then of the second ship.
    pub spacing: Vec<Vec<Minutes>>,
    /// Opposite directions: the second enters this long after the first has left.
    pub clearance: Minutes,
    /// Where the rule is written.
    pub source: String,
}

/// A class of ships for the spacing in a channel.
#[derive(Clone, Debug, PartialEq)]
pub struct ChannelClass {
    /// Its name: "deep".
    pub name: String,
    /// Ships with more draught than this; zero for the first class.
    pub draught_over: Metres,
}

impl Channel {
    /// The index of the class that a ship of this draught belongs to.
    #[must_use]
    pub fn class_of(&self, draught: Metres) -> usize {
        self.classes.iter().rposition(|class| draught.get() > class.draught_over.get()).unwrap_or(0)
    }
}
