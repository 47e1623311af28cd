//! Which ships, plant or berths a rule or a task template is for.

use crate::port::fleet::{Berth, Plant, Ship};
use crate::units::length::Metres;

/// What a template is repeated for.
#[derive(Clone, Debug, PartialEq)]
pub enum ForEach {
    /// Every ship that passes.
    Ship(Pick),
    /// Every piece of plant that passes.
    Plant(Pick),
    /// Every berth that passes.
    Berth(Pick),
}

/// Conditions that must all hold; an empty list asks nothing.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Pick {
    /// One of these ids.
    pub ids: Vec<String>,
    /// One of these kinds.
    pub kinds: Vec<String>,
    /// At one of these berths.
    pub berths: Vec<String>,
    /// Carries all of these tags.
    pub tagged: Vec<String>,
    /// Carries none of these tags.
    pub not_tagged: Vec<String>,
    /// Ships: gross tonnage at least this.
    pub gross_tonnage_at_least: Option<u32>,
    /// Ships: gross tonnage below this.
    pub gross_tonnage_below: Option<u32>,
    /// Ships: draught over this.
    pub draught_over: Option<Metres>,
    /// Ships: self-propelled or not.
    pub self_propelled: Option<bool>,
}

impl Pick {
    /// Whether a ship passes.
    #[must_use]
    pub fn takes_ship(&self, ship: &Ship) -> bool {
        self.passes(&ship.id, &ship.kind, &ship.berth, &ship.tags)
            && self.gross_tonnage_at_least.is_none_or(|least| ship.gross_tonnage >= least)
            && self.gross_tonnage_below.is_none_or(|most| ship.gross_tonnage < most)
            && self.draught_over.is_none_or(|draught| ship.draught.get() > draught.get())
            && self.self_propelled.is_none_or(|wanted| ship.is_self_propelled == wanted)
    }

    /// Whether a piece of plant passes.
    #[must_use]
    pub fn takes_plant(&self, plant: &Plant) -> bool {
        self.passes(&plant.id, &plant.kind, &plant.berth, &plant.tags)
    }

    /// Whether a berth passes.
    #[must_use]
    pub fn takes_berth(&self, berth: &Berth) -> bool {
        self.passes(&berth.id, "", &berth.id, &berth.tags)
    }

    fn passes(&self, id: &str, kind: &str, berth: &str, tags: &[String]) -> bool {
        let one_of = |list: &[String], value: &str| list.is_empty() || list.iter().any(|item| item == value);
        one_of(&self.ids, id)
            && one_of(&self.kinds, kind)
            && one_of(&self.berths, berth)
            && self.tagged.iter().all(|tag| tags.contains(tag))
            && !self.not_tagged.iter().any(|tag| tags.contains(tag))
    }
}
