//! The port as a whole: its name, clock, authority and places.

use crate::geo::exposure::Exposure;
use crate::geo::position::Position;
use crate::port::contact::{Contact, is_same_name};
use crate::port::fleet::{Berth, Plant, Ship};
use crate::port::means::Pool;
use crate::port::water::Channel;
use crate::tide::heights::Tide;
use crate::time::clock::PortClock;
use chrono::{DateTime, Utc};

/// A port as its files describe it. Ids are unique across places, berths, ships, plant and pools, and every id that one
/// part names exists in the other: the reader has checked that.
#[derive(Clone, Debug)]
pub struct Port {
    /// The port's name.
    pub name: String,
    /// Words that every page must carry when the port is not a real one; empty for a real port.
    pub invented: String,
    /// Local time.
    pub clock: PortClock,
    /// The title of who declares stages: "Harbour Master".
    pub authority: String,
    /// Whose warnings count for the port: "the national meteorological service".
    pub official_source: String,
    /// Names of its issuers as their products write them: only those advisories are planned on; empty if any may be.
    pub official_issuers: Vec<String>,
    /// In a drill the clock stands here and every page says EXERCISE.
    pub exercise: Option<DateTime<Utc>>,
    /// The id of the place at which the head of a plan gives the gale's arrival.
    pub reference: String,
    /// Places that matter.
    pub places: Vec<Place>,
    /// Berths, basins and anchorages.
    pub berths: Vec<Berth>,
    /// Ships and barges in port or due.
    pub ships: Vec<Ship>,
    /// Cranes, arms and other plant to be secured.
    pub plant: Vec<Plant>,
    /// People, craft and machines that tasks share.
    pub pools: Vec<Pool>,
    /// How people are reached.
    pub contacts: Vec<Contact>,
    /// Channels.
    pub channels: Vec<Channel>,
    /// Water level; `None` if the port has no tide file.
    pub tide: Option<Tide>,
}

/// A place at which the wind matters.
#[derive(Clone, Debug, PartialEq)]
pub struct Place {
    /// Its id.
    pub id: String,
    /// Its name for people.
    pub name: String,
    /// Where it is.
    pub position: Position,
    /// How open it lies.
    pub exposure: Exposure,
    /// The listed place of the official odds that stands for it; `None` to go by name and position.
    pub official_place: Option<String>,
    /// The reference place whose adopted arrival time its own deadlines count from; itself for a reference place.
    pub counts_from: String,
}

impl Port {
    /// The place with this id.
    #[must_use]
    pub fn place(&self, id: &str) -> Option<&Place> {
        self.places.iter().find(|place| place.id == id)
    }

    /// The berth with this id.
    #[must_use]
    pub fn berth(&self, id: &str) -> Option<&Berth> {
        self.berths.iter().find(|berth| berth.id == id)
    }

    /// The pool with this id.
    #[must_use]
    pub fn pool(&self, id: &str) -> Option<&Pool> {
        self.pools.iter().find(|pool| pool.id == id)
    }

    /// The contact of people by their name.
    #[must_use]
    pub fn contact(&self, who: &str) -> Option<&Contact> {
        self.contacts.iter().find(|contact| is_same_name(&contact.who, who))
    }

    /// The channel with this id.
    #[must_use]
    pub fn channel(&self, id: &str) -> Option<&Channel> {
        self.channels.iter().find(|channel| channel.id == id)
    }
}
