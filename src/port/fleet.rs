//! Berths, ships and plant: the things that tasks are made for.

use crate::time::moment::Minutes;
use crate::units::length::Metres;
use chrono::{DateTime, Utc};
use std::collections::BTreeMap;

/// A berth, basin or anchorage.
#[derive(Clone, Debug, PartialEq)]
pub struct Berth {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// The place whose wind it has.
    pub place: String,
    /// Who runs it: "Greywether Container Terminal".
    pub operator: String,
    /// Free words that templates select by.
    pub tags: Vec<String>,
    /// Its own values, by name.
    pub own: BTreeMap<String, OwnValue>,
}

/// A ship, barge or dredger in port or due.
#[derive(Clone, Debug, PartialEq)]
pub struct Ship {
    /// Its id: "V01".
    pub id: String,
    /// Its name.
    pub name: String,
    /// "container", "tanker": what templates select by.
    pub kind: String,
    /// The berth it lies at.
    pub berth: String,
    /// Gross tonnage (a number without a unit, ITC 1969).
    pub gross_tonnage: u32,
    /// Length over all.
    pub length: Metres,
    /// Deepest draught as she will sail.
    pub draught: Metres,
    /// False for a barge or a ship without her engine.
    pub is_self_propelled: bool,
    /// Her agent, for calls.
    pub agent: String,
    /// Free words that templates select by.
    pub tags: Vec<String>,
    /// Her own values, by name: `tugs = 2`, `secure = "3 h"`.
    pub own: BTreeMap<String, OwnValue>,
}

/// A crane, loading arm, or other plant.
#[derive(Clone, Debug, PartialEq)]
pub struct Plant {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// "quay crane", "yard crane", "loading arm".
    pub kind: String,
    /// Where it stands.
    pub berth: String,
    /// Free words that templates select by.
    pub tags: Vec<String>,
    /// Its own values, by name.
    pub own: BTreeMap<String, OwnValue>,
}

/// A value that a ship, berth or piece of plant has for itself, and that a task template asks for by name.
#[derive(Clone, Debug, PartialEq)]
pub enum OwnValue {
    /// How many: tugs, boxes.
    Count(u32),
    /// How long.
    Lasting(Minutes),
    /// When.
    At(DateTime<Utc>),
    /// A class of pool member: "unlimited".
    Class(String),
}
