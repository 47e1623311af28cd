//! Orders about a stage, a ship or a rule that move no time by themselves: they are told, and stand on every plan.

use chrono::{DateTime, Utc};

/// One ruling of whoever has the authority.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Ruling {
    /// A stage is not declared for now, though it may be due.
    Hold {
        /// The stage.
        stage: String,
        /// Until when; `None` until another order.
        until: Option<DateTime<Utc>>,
    },
    /// A stage is passed over: the next one follows.
    Skip {
        /// The stage.
        stage: String,
    },
    /// A ship may stay in port.
    Stay {
        /// The ship.
        ship: String,
        /// On which conditions, in words; empty if on none.
        conditions: String,
        /// Until when; `None` until another order.
        until: Option<DateTime<Utc>>,
    },
    /// A rule or limit is waived.
    Waive {
        /// What is waived, in words.
        waived: String,
        /// On which conditions, in words; empty if on none.
        conditions: String,
        /// Until when: no waiver is for ever.
        until: DateTime<Utc>,
    },
    /// Something that was asked for is refused.
    Refuse {
        /// What, in words.
        refused: String,
    },
}

impl Ruling {
    /// What it is about: of two rulings about the same the later one counts.
    #[must_use]
    pub fn about(&self) -> (RulingKind, &str) {
        match self {
            Ruling::Hold { stage, .. } | Ruling::Skip { stage } => (RulingKind::Stage, stage),
            Ruling::Stay { ship, .. } => (RulingKind::Ship, ship),
            Ruling::Waive { waived, .. } => (RulingKind::Request, waived),
            Ruling::Refuse { refused } => (RulingKind::Request, refused),
        }
    }

    /// When it ends; `None` if it does not by itself.
    #[must_use]
    pub fn until(&self) -> Option<DateTime<Utc>> {
        match self {
            Ruling::Hold { until, .. } | Ruling::Stay { until, .. } => *until,
            Ruling::Waive { until, .. } => Some(*until),
            Ruling::Skip { .. } | Ruling::Refuse { .. } => None,
        }
    }
}

/// The kinds of thing that a ruling can be about.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum RulingKind {
    /// A stage.
    Stage,
    /// A ship.
    Ship,
    /// Something that somebody asked for, in words.
    Request,
}
