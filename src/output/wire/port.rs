//! The port of a document in JSON.

use crate::output::setting::Setting;
use serde::{Deserialize, Serialize};

/// The port that a document is about.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct PortOut {
    /// Its name.
    pub name: String,
    /// Words that must be shown with everything about an invented port or a drill; empty otherwise.
    pub banner: String,
    /// The time zone's name.
    pub zone: String,
    /// The title of the rules.
    pub rules: String,
    /// The title of who declares stages.
    pub authority: String,
    /// Whose warnings count.
    pub official_source: String,
    /// How far the port's record goes: its last event and the head of its chain; left out if the record is a text.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub record: Option<String>,
}

/// The port of a setting.
#[must_use]
pub fn port(setting: &Setting) -> PortOut {
    PortOut {
        name: setting.port.to_owned(),
        banner: setting.banner(),
        zone: setting.clock.zone_name().to_owned(),
        rules: setting.rules.to_owned(),
        authority: setting.authority.to_owned(),
        official_source: setting.official_source.to_owned(),
        record: (!setting.record.is_empty()).then(|| setting.record.to_owned()),
    }
}
