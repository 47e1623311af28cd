//! The calls to be made in JSON.

use crate::output::call_text::call_text;
use crate::output::setting::Setting;
use crate::output::wire::port::{PortOut, port};
use crate::output::wire::value::{SCHEMA, instant, maybe, time};
use crate::output::words::stake;
use crate::plan::call::{Call, Matter, Standing};
use crate::plan::sheet::Plan;
use crate::record::call::Substance;
use crate::record::reader_call::said_word;
use crate::time::moment::Moment;
use serde::{Deserialize, Serialize};

/// All calls.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct CallsOut {
    /// Version of this form.
    pub schema: u32,
    /// "calls".
    pub kind: String,
    /// The port.
    pub port: PortOut,
    /// The time of the plan from which they follow.
    pub now: String,
    /// Most urgent first; those confirmed last.
    pub calls: Vec<CallOut>,
}

/// A call.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct CallOut {
    /// Its id.
    pub id: String,
    /// Whom it is for, by title.
    pub who: String,
    /// The ship whose people they are; null if none.
    pub ship: Option<String>,
    /// The channel and number there; null if not given.
    pub channel: Option<String>,
    /// By when it is of use.
    pub by: String,
    /// How long that is before the thing itself.
    pub lead_min: i64,
    /// Whether it passes on an order.
    pub order: bool,
    /// The task, stage or place.
    pub about: String,
    /// "start", "given-up", "not-needed", "waits", "unreported", "decision", "duty" or "stay".
    pub says: String,
    /// The start that it tells; null if it tells none.
    pub start: Option<String>,
    /// The start as issued; null if there was none.
    pub issued_start: Option<String>,
    /// Where; null if not said.
    pub place: Option<String>,
    /// Why, in words.
    pub reason: String,
    /// What is at stake.
    pub stake: String,
    /// "open", "no_answer", "told" or "acknowledged".
    pub standing: String,
    /// Since when; null if open.
    pub since: Option<String>,
    /// Whether it is unanswered past its time.
    pub overdue: bool,
    /// Who released it; null while it is a draft.
    pub released_by: Option<String>,
    /// The text to paste or read out: ASCII, at most 700 characters.
    pub text: String,
}

/// Calls in their JSON form.
#[must_use]
pub fn calls_out(calls: &[&Call], plan: &Plan, setting: &Setting) -> CallsOut {
    CallsOut {
        schema: SCHEMA,
        kind: "calls".to_owned(),
        port: port(setting),
        now: time(plan.now),
        calls: calls.iter().map(|one| call(one, plan, setting)).collect(),
    }
}

/// A call in its JSON form.
#[must_use]
pub fn call(call: &Call, plan: &Plan, setting: &Setting) -> CallOut {
    let said = |text: &str| (!text.is_empty()).then(|| text.to_owned());
    let start = if let Substance::Start(start) = call.substance { Some(instant(start)) } else { None };
    let issued: Option<Moment> = if let Matter::Task { issued, .. } = &call.matter { *issued } else { None };
    let (standing, since) = match call.standing {
        Standing::Open => ("open", None),
        Standing::NoAnswer(at) => ("no_answer", Some(at)),
        Standing::Told(at) => ("told", Some(at)),
        Standing::Acknowledged(at) => ("acknowledged", Some(at)),
    };
    CallOut {
        id: call.id.clone(),
        who: call.to.who.clone(),
        ship: said(&call.to.ship),
        channel: call.channel.clone(),
        by: time(call.by),
        lead_min: call.lead.get(),
        order: call.is_order,
        about: call.about.clone(),
        says: said_word(call.substance).unwrap_or("start").to_owned(),
        start,
        issued_start: maybe(issued),
        place: said(&call.place),
        reason: call.reason.clone(),
        stake: stake(call.stake).to_owned(),
        standing: standing.to_owned(),
        since: maybe(since),
        overdue: call.is_overdue(plan.now),
        released_by: call.released_by.clone(),
        text: call_text(call, plan, setting),
    }
}
