//! What every page says about the port: its name, its clock, who decides there, and whether it is real.

use crate::output::layout::clip;
use crate::port::harbour::Port;
use crate::rules::stage::Rules;
use crate::time::clock::PortClock;
use crate::time::moment::Minutes;

/// The port behind a plan, as far as pages speak of it.
#[derive(Clone, Copy, Debug)]
pub struct Setting<'a> {
    /// The port's name.
    pub port: &'a str,
    /// Words that every page of an invented port carries; empty for a real one.
    pub invented: &'a str,
    /// Whether this is a drill, so that every page says EXERCISE.
    pub is_exercise: bool,
    /// The title of who declares stages.
    pub authority: &'a str,
    /// Whose warnings count.
    pub official_source: &'a str,
    /// The title of the rules.
    pub rules: &'a str,
    /// Since when they are in force, in words.
    pub effective: &'a str,
    /// How much earlier than the adopted arrival the computed one may be before that is said first.
    pub margin: Minutes,
    /// Local time.
    pub clock: &'a PortClock,
    /// How far the port's record goes, in words; empty if it is a text.
    pub record: &'a str,
}

impl<'a> Setting<'a> {
    /// The setting of a port and its rules.
    #[must_use]
    pub fn of(port: &'a Port, rules: &'a Rules) -> Setting<'a> {
        Setting {
            port: &port.name,
            invented: &port.invented,
            is_exercise: port.exercise.is_some(),
            authority: &port.authority,
            official_source: &port.official_source,
            rules: &rules.title,
            effective: &rules.effective,
            margin: rules.adopted_margin,
            clock: &port.clock,
            record: "",
        }
    }

    /// The same, with how far the port's record goes.
    #[must_use]
    pub fn with_record(self, record: &'a str) -> Setting<'a> {
        Setting { record, ..self }
    }

    /// What must stand on every page of a port that is not real, or of a drill; empty otherwise.
    ///
    /// EXERCISE stands where it stays when long words are cut.
    #[must_use]
    pub fn banner(&self) -> String {
        match (self.invented.is_empty(), self.is_exercise) {
            (_, false) => self.invented.to_owned(),
            (true, true) => "EXERCISE".to_owned(),
            (false, true) if clip(self.invented, 40).to_uppercase().contains("EXERCISE") => {
                self.invented.to_owned()
            }
            (false, true) => format!("EXERCISE - {}", self.invented),
        }
    }
}
