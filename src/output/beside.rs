//! The official odds of a place beside ours, as plain values: same winds, same times.

use crate::advisory::official_odds::OfficialOdds;
use crate::advisory::official_rows::{OfficialRow, Percent};
use crate::arrival::odds::Answer;
use crate::time::moment::{Minutes, Moment};
use crate::units::chance::Chance;
use crate::units::speed::Knots;

/// Which of the two the rules use: said wherever both are shown.
pub const RULES_USE: &str = "ours";

/// The official odds that stand beside ours, and where they come from.
#[derive(Clone, Copy, Debug)]
pub struct OfficialSource<'a> {
    /// The file.
    pub file: &'a str,
    /// What it says.
    pub odds: &'a OfficialOdds,
}

/// Official and own chances at one place.
#[derive(Clone, Debug, PartialEq)]
pub struct Beside {
    /// The listed place; `None` if the text lists nothing for this place.
    pub listed: Option<String>,
    /// The ends of the periods.
    pub times: Vec<Moment>,
    /// Wind by wind, weakest first.
    pub winds: Vec<BesideWind>,
}

/// Official and own chances of one wind.
#[derive(Clone, Debug, PartialEq)]
pub struct BesideWind {
    /// The wind.
    pub wind: Knots,
    /// The official chance that it has come by each time; `None` if the wind is not listed.
    pub official: Option<Vec<Percent>>,
    /// Ours.
    pub ours: Vec<Chance>,
}

/// Puts the official rows of a place beside the answers for its winds.
#[must_use]
pub fn beside(odds: &OfficialOdds, rows: &[&OfficialRow], winds: &[(Knots, &Answer)]) -> Beside {
    let base = Moment::at_or_before(odds.base);
    let times: Vec<Moment> = odds.hours.iter().map(|hour| base + Minutes::hours(*hour)).collect();
    let winds = winds
        .iter()
        .map(|(wind, answer)| {
            let row = rows.iter().find(|row| (row.wind.get() - wind.get()).abs() < 0.5);
            BesideWind {
                wind: *wind,
                official: row.map(|row| row.by_then.clone()),
                ours: times.iter().map(|time| answer.chance_by(*time)).collect(),
            }
        })
        .collect();
    Beside { listed: rows.first().map(|row| row.place.clone()), times, winds }
}
