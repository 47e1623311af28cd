//! What calls follow from, what was told so far, and by which id a call is known.

use crate::plan::call::{Addressee, Standing};
use crate::plan::sheet::Plan;
use crate::port::contact::{Contact, is_same_name};
use crate::port::harbour::Port;
use crate::record::call::{CallStep, Substance};
use crate::record::event::Event;
use crate::record::reader_call::said_word;
use crate::record::situation::{CallHeard, Situation};
use crate::time::moment::{Minutes, Moment};
use sha2::{Digest, Sha256};

/// How long before something people must know it, where their contact says nothing else. Our choice.
pub const USUAL_LEAD: Minutes = Minutes::new(30);

/// Letters and digits that are told apart on paper and over the radio: Crockford's base 32, without I, L, O and U.
const ALPHABET: [char; 32] = [
    '0', '1', '2', '3', '4', '5', '6', '7', '8', '9', 'A', 'B', 'C', 'D', 'E', 'F', 'G', 'H', 'J', 'K', 'M',
    'N', 'P', 'Q', 'R', 'S', 'T', 'V', 'W', 'X', 'Y', 'Z',
];

/// Characters of an id: 32^6 is a thousand million, so that of a thousand calls hardly two are ever alike.
const ID: usize = 6;

/// What calls follow from.
#[derive(Clone, Copy, Debug)]
pub struct CallInputs<'a> {
    /// The port.
    pub port: &'a Port,
    /// What is known at the time of the plan.
    pub situation: &'a Situation,
    /// The record.
    pub events: &'a [Event],
    /// The plan issued last; `None` if none was: then nobody holds a time that could have moved.
    pub issued: Option<&'a Plan>,
    /// The plan now.
    pub plan: &'a Plan,
}

/// How long before something these people must know it.
#[must_use]
pub fn lead(port: &Port, who: &str) -> Minutes {
    port.contact(who).and_then(|contact| contact.lead).unwrap_or(USUAL_LEAD)
}

/// On which channel they are reached.
#[must_use]
pub fn channel(port: &Port, who: &str) -> Option<String> {
    port.contact(who).map(Contact::channel_words)
}

/// What was said to somebody about something, oldest first among all reports.
#[derive(Clone, Copy, Debug)]
pub struct Talk<'a> {
    /// The reports that count.
    pub reports: &'a [&'a CallHeard],
    /// To whom.
    pub to: &'a Addressee,
    /// About what.
    pub about: &'a str,
}

/// A call's id and what became of it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ToldSoFar {
    /// Its id.
    pub id: String,
    /// What became of it.
    pub standing: Standing,
    /// Who released it.
    pub released_by: Option<String>,
}

impl Talk<'_> {
    fn own(&self) -> impl Iterator<Item = &CallHeard> {
        let words = self.to.words();
        let is_own = move |heard: &&&CallHeard| {
            let report = &heard.report;
            report.about == self.about && is_same_name(&report.to, &words)
        };
        self.reports.iter().filter(is_own).copied()
    }

    /// Whether they hold something else than this, because they were told so.
    #[must_use]
    pub fn was_told_otherwise(&self, now: Substance) -> bool {
        let is_told = |step| matches!(step, CallStep::Told | CallStep::Acknowledged);
        self.own().any(|heard| {
            let said = heard.report.substance;
            is_told(heard.report.step) && said.is_some_and(|said| !said.is_as_good_as(now))
        })
    }

    /// The id of a call that says this, and what became of it: a call that said as good as this keeps its id.
    #[must_use]
    pub fn told(&self, now: Substance) -> ToldSoFar {
        let last = self.own().last().map(|heard| &heard.report);
        let same = last.filter(|report| report.substance.is_some_and(|said| said.is_as_good_as(now)));
        let id = same.map_or_else(|| id(self.to, self.about, now), |report| report.call.clone());
        let mut standing = Standing::Open;
        let mut released_by = None;
        for heard in self.reports {
            let CallHeard { report, who, .. } = heard;
            let at = Moment::at_or_before(report.at);
            if report.call == id {
                match report.step {
                    CallStep::Released => released_by = Some(who.clone()),
                    CallStep::Told => standing = Standing::Told(at),
                    CallStep::Acknowledged => standing = Standing::Acknowledged(at),
                    CallStep::NoAnswer => standing = Standing::NoAnswer(at),
                }
            } else if self.own().any(|own| own.said.nth == heard.said.nth) {
                // They were told something else since.
                (standing, released_by) = (Standing::Open, None);
            }
        }
        ToldSoFar { id, standing, released_by }
    }
}

/// The id of a call: the first 30 bits of SHA-256 over addressee, matter and what is said, in base 32.
#[must_use]
pub fn id(to: &Addressee, about: &str, now: Substance) -> String {
    let bytes = Sha256::digest(format!("{}\n{about}\n{}", to.words().to_lowercase(), said(now)).as_bytes());
    let bits = bytes.iter().take(5).fold(0_u64, |bits, byte| (bits << 8) | u64::from(*byte));
    let digit = |nth: usize| ALPHABET.get((bits >> (35 - 5 * nth)) as usize & 31).copied().unwrap_or('0');
    (0..ID).map(digit).collect()
}

fn said(now: Substance) -> String {
    match now {
        Substance::Start(start) => format!("start {}", Moment::at_or_before(start).epoch_minutes()),
        Substance::GivenUp
        | Substance::NotNeeded
        | Substance::Waits
        | Substance::Unreported
        | Substance::Decision
        | Substance::Duty
        | Substance::Stay => said_word(now).unwrap_or_default().to_owned(),
    }
}
