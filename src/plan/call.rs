//! A call as plain data: who must be told what, by when, on which channel, and what became of it.

use crate::record::call::Substance;
use crate::rules::task::Stake;
use crate::time::moment::{Minutes, Moment};

/// Something that somebody must be told. The program tells nobody; people do.
#[derive(Clone, Debug, PartialEq)]
pub struct Call {
    /// Its id; it stays as long as the same people must be told the same: "C3F9A1".
    pub id: String,
    /// Whom it is for.
    pub to: Addressee,
    /// The channel and number there; `None` if the port's files do not give it.
    pub channel: Option<String>,
    /// When telling it is of use at the latest.
    pub by: Moment,
    /// How long that is before the thing itself.
    pub lead: Minutes,
    /// Whether it passes on an order, as opposed to advice.
    pub is_order: bool,
    /// The task, stage or place that it is about, by id.
    pub about: String,
    /// What it says of that.
    pub substance: Substance,
    /// The same with its particulars.
    pub matter: Matter,
    /// Where; empty if not said.
    pub place: String,
    /// Why, in words.
    pub reason: String,
    /// What is at stake.
    pub stake: Stake,
    /// What became of it.
    pub standing: Standing,
    /// Who released its text; `None` while it is a draft.
    pub released_by: Option<String>,
}

/// Whom a call is for.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Addressee {
    /// By title or office.
    pub who: String,
    /// The ship whose master, agent or officers they are; empty if none.
    pub ship: String,
}

impl Addressee {
    /// "agent, V04 Dunsel".
    #[must_use]
    pub fn words(&self) -> String {
        if self.ship.is_empty() { self.who.clone() } else { format!("{}, {}", self.who, self.ship) }
    }
}

/// What a call is about, with its particulars.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Matter {
    /// A task that is no longer as it was issued; how it is now says the call's substance.
    Task {
        /// What is done.
        name: String,
        /// Its start as issued.
        issued: Option<Moment>,
        /// Its latest start.
        latest: Option<Moment>,
    },
    /// Something that would make tasks fit, if it is decided in time.
    Relief {
        /// What.
        what: String,
        /// Its price; empty if not said.
        price: String,
        /// How many tasks then fit.
        relieves: usize,
        /// By when it must be decided.
        decide_by: Moment,
    },
    /// A stage is due and not declared.
    Declare {
        /// Its name.
        name: String,
        /// When it was or is due.
        due: Moment,
    },
    /// The adopted arrival is left behind by the computed one.
    Adopt {
        /// The adopted time.
        adopted: Moment,
        /// The computed one.
        computed: Moment,
    },
    /// An order waits for a second person.
    Confirm {
        /// The order, in words.
        order: String,
    },
    /// A stage has been declared, and lays a duty on people.
    Duty {
        /// The stage's id and name.
        stage: String,
        /// What they must do.
        act: String,
        /// By when; `None` if not known yet.
        by: Option<Moment>,
    },
    /// A ship may stay in port.
    Stay {
        /// On which conditions; empty if on none.
        conditions: String,
        /// Until when; `None` until another order.
        until: Option<Moment>,
    },
}

/// What became of a call.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Standing {
    /// Nobody has called yet.
    Open,
    /// Called, and nobody answered.
    NoAnswer(Moment),
    /// Told, and not yet confirmed.
    Told(Moment),
    /// Confirmed by whom it is for.
    Acknowledged(Moment),
}

impl Call {
    /// Whether it still waits for a confirmation.
    #[must_use]
    pub fn is_unanswered(&self) -> bool {
        !matches!(self.standing, Standing::Acknowledged(_))
    }

    /// Whether it is unanswered past its time.
    #[must_use]
    pub fn is_overdue(&self, now: Moment) -> bool {
        self.is_unanswered() && self.by < now
    }
}
