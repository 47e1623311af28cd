//! What an id of a port stands for.

/// What an id stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Kind {
    /// A place at which the wind matters.
    Place,
    /// A berth.
    Berth,
    /// A ship.
    Ship,
    /// A piece of plant.
    Plant,
    /// A pool.
    Pool,
    /// A member of a pool.
    Member,
    /// A channel.
    Channel,
}

impl Kind {
    /// The word for it.
    #[must_use]
    pub fn word(self) -> &'static str {
        match self {
            Kind::Place => "place",
            Kind::Berth => "berth",
            Kind::Ship => "ship",
            Kind::Plant => "piece of plant",
            Kind::Pool => "pool",
            Kind::Member => "member",
            Kind::Channel => "channel",
        }
    }

    /// The file that lists it.
    #[must_use]
    pub fn file(self) -> &'static str {
        match self {
            Kind::Place => "port.toml",
            Kind::Berth => "berths.toml",
            Kind::Ship => "ships.toml",
            Kind::Plant => "plant.toml",
            Kind::Pool | Kind::Member => "means.toml",
            Kind::Channel => "water.toml",
        }
    }
}
