//! How people are reached: whom to call for whom, on which channel, and how long before.

use crate::time::moment::Minutes;

/// Somebody who can be called.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Contact {
    /// By this name tasks, approvals and duties speak of them; upper and lower case are alike.
    pub who: String,
    /// The pools for which they are called: an office for its tugs, pilots, gangs.
    pub pools: Vec<String>,
    /// The channel: "VHF", "telephone".
    pub channel: String,
    /// The number or channel there; empty if not given.
    pub number: String,
    /// How long before something they must know it; `None` to take the usual lead.
    pub lead: Option<Minutes>,
}

impl Contact {
    /// "VHF 12".
    #[must_use]
    pub fn channel_words(&self) -> String {
        format!("{} {}", self.channel, self.number).trim_end().to_owned()
    }
}

/// Whether two names are of the same people.
#[must_use]
pub fn is_same_name(one: &str, two: &str) -> bool {
    one.trim().to_lowercase() == two.trim().to_lowercase()
}
