//! Reads what events say of calls.

use crate::finding::table::Keys;
use crate::record::call::{CallReport, CallStep, Substance};
use crate::record::event::What;
use crate::record::telling::{Telling, named};
use crate::text::quantity::instant;

/// What a call can say besides a start.
pub const SAID: [(&str, Substance); 7] = [
    ("given-up", Substance::GivenUp),
    ("not-needed", Substance::NotNeeded),
    ("waits", Substance::Waits),
    ("unreported", Substance::Unreported),
    ("decision", Substance::Decision),
    ("duty", Substance::Duty),
    ("stay", Substance::Stay),
];

/// The word of what a call says; `None` for a start, which is a time.
#[must_use]
pub fn said_word(substance: Substance) -> Option<&'static str> {
    SAID.iter().find(|(_, known)| *known == substance).map(|(word, _)| *word)
}

/// A call's text was released.
pub fn releases(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    report(telling, keys, CallStep::Released)
}

/// A call was made.
pub fn told(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    report(telling, keys, CallStep::Told)
}

/// A call was confirmed.
pub fn acknowledged(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    report(telling, keys, CallStep::Acknowledged)
}

/// Nobody answered.
pub fn no_answer(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    report(telling, keys, CallStep::NoAnswer)
}

fn report(telling: &Telling<'_>, keys: &mut Keys<'_>, step: CallStep) -> Option<What> {
    let call = named(keys, "call");
    let to = keys.text_or_empty("to");
    let about = keys.text_or_empty("about");
    let start = keys.optional("start");
    let said = keys.optional("said");
    let at = telling.past_or_known(keys, "at");
    let substance = match (start, said) {
        (Some(start), Some(said)) => {
            said.bad_value("a call says a start or something else, not both", "one of start and said");
            instant(&start, telling.clock)?;
            return None;
        }
        (Some(start), None) => Some(Substance::Start(instant(&start, telling.clock)?)),
        (None, Some(said)) => Some(said.word(&SAID)?),
        (None, None) => None,
    };
    Some(What::Call(CallReport { call: call?, step, to, about, substance, at: at? }))
}
