//! Facts about the port beyond its tasks and means: services that stop, places that cannot be used, signals, orders of the
//! civil authorities, sea and anchorages.

use crate::units::length::Metres;
use chrono::{DateTime, Utc};

/// One fact. A time `until` that is `None` means: until something else is told.
#[derive(Clone, Debug, PartialEq, PartialOrd)]
pub enum Fact {
    /// A service stops: bridge, traffic service, road, airport. For pilots and tugs take their pool out of service.
    Stops {
        /// The service, in words.
        service: String,
        /// From when.
        from: DateTime<Utc>,
        /// Until when.
        until: Option<DateTime<Utc>>,
    },
    /// A service works again.
    Resumes {
        /// The service, in the same words.
        service: String,
        /// From when.
        from: DateTime<Utc>,
    },
    /// A place, berth or channel cannot be used.
    Unusable {
        /// Its id.
        spot: String,
        /// From when.
        from: DateTime<Utc>,
        /// Until when.
        until: Option<DateTime<Utc>>,
    },
    /// A place, berth or channel can be used again.
    Usable {
        /// Its id.
        spot: String,
        /// From when.
        from: DateTime<Utc>,
    },
    /// Less water than charted: the deepest draught that may pass.
    DepthLimit {
        /// The place, berth or channel.
        spot: String,
        /// The deepest draught.
        draught: Metres,
        /// From when.
        from: DateTime<Utc>,
        /// Until when.
        until: Option<DateTime<Utc>>,
    },
    /// A warning signal is shown.
    Signal {
        /// Which, in words.
        shown: String,
        /// From when.
        from: DateTime<Utc>,
        /// Until when.
        until: Option<DateTime<Utc>>,
    },
    /// The civil authorities clear an area, or keep people indoors.
    Authorities {
        /// Which of the two.
        measure: Measure,
        /// The area, in words.
        area: String,
        /// From when.
        from: DateTime<Utc>,
        /// Until when.
        until: Option<DateTime<Utc>>,
    },
    /// A sea was observed: its significant height.
    Sea {
        /// The place.
        spot: String,
        /// The height.
        height: Metres,
        /// When.
        at: DateTime<Utc>,
    },
    /// The state of an anchorage.
    Anchorage {
        /// Its id.
        spot: String,
        /// The state.
        state: AnchorageState,
        /// From when.
        from: DateTime<Utc>,
    },
}

/// What the civil authorities order.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Measure {
    /// Everybody leaves the area.
    Evacuation,
    /// Everybody stays indoors.
    Curfew,
}

/// How an anchorage stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum AnchorageState {
    /// There is room.
    Open,
    /// There is no room left.
    Full,
    /// It may not be used.
    Closed,
}

impl Fact {
    /// What the fact is about: of two facts about the same the later one counts.
    #[must_use]
    pub fn about(&self) -> (FactKind, &str) {
        match self {
            Fact::Stops { service, .. } | Fact::Resumes { service, .. } => (FactKind::Service, service),
            Fact::Unusable { spot, .. } | Fact::Usable { spot, .. } => (FactKind::Use, spot),
            Fact::DepthLimit { spot, .. } => (FactKind::Depth, spot),
            Fact::Signal { .. } => (FactKind::Signal, ""),
            Fact::Authorities { measure: Measure::Evacuation, area, .. } => (FactKind::Evacuation, area),
            Fact::Authorities { measure: Measure::Curfew, area, .. } => (FactKind::Curfew, area),
            Fact::Sea { spot, .. } => (FactKind::Sea, spot),
            Fact::Anchorage { spot, .. } => (FactKind::Anchorage, spot),
        }
    }

    /// When it ends; `None` if nobody has said.
    #[must_use]
    pub fn until(&self) -> Option<DateTime<Utc>> {
        match self {
            Fact::Stops { until, .. }
            | Fact::Unusable { until, .. }
            | Fact::DepthLimit { until, .. }
            | Fact::Signal { until, .. }
            | Fact::Authorities { until, .. } => *until,
            Fact::Resumes { .. } | Fact::Usable { .. } | Fact::Sea { .. } | Fact::Anchorage { .. } => None,
        }
    }

    /// From when it holds.
    #[must_use]
    pub fn from(&self) -> DateTime<Utc> {
        match self {
            Fact::Stops { from, .. }
            | Fact::Resumes { from, .. }
            | Fact::Unusable { from, .. }
            | Fact::Usable { from, .. }
            | Fact::DepthLimit { from, .. }
            | Fact::Signal { from, .. }
            | Fact::Authorities { from, .. }
            | Fact::Anchorage { from, .. } => *from,
            Fact::Sea { at, .. } => *at,
        }
    }

    /// The place, berth, channel or anchorage that it names, if it names one.
    #[must_use]
    pub fn spot(&self) -> Option<&str> {
        match self {
            Fact::Unusable { spot, .. }
            | Fact::Usable { spot, .. }
            | Fact::DepthLimit { spot, .. }
            | Fact::Sea { spot, .. }
            | Fact::Anchorage { spot, .. } => Some(spot),
            Fact::Stops { .. } | Fact::Resumes { .. } | Fact::Signal { .. } | Fact::Authorities { .. } => {
                None
            }
        }
    }

    /// The same fact, ended at `end` if it would last longer.
    #[must_use]
    pub fn ended(mut self, end: DateTime<Utc>) -> Fact {
        if let Fact::Stops { until, .. } | Fact::Unusable { until, .. } = &mut self {
            *until = Some(until.map_or(end, |until| until.min(end)));
        }
        self
    }
}

/// The kinds of thing that a fact can be about.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum FactKind {
    /// A service.
    Service,
    /// The use of a place, berth or channel.
    Use,
    /// The depth of one.
    Depth,
    /// The warning signal.
    Signal,
    /// An evacuation.
    Evacuation,
    /// A curfew.
    Curfew,
    /// The sea.
    Sea,
    /// An anchorage.
    Anchorage,
}
