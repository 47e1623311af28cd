//! The wind at one place, with all that is told about it.

use crate::advisory::forecast::Advisory;
use crate::arrival::odds::Answer;
use crate::arrival::series::WindSeries;
use crate::geo::exposure::Exposure;
use crate::geo::position::Position;
use crate::output::setting::Setting;
use crate::time::moment::Moment;
use crate::units::length::Metres;
use crate::units::wind::Averaging;
use crate::wind::swell::StormWaves;

/// What is told about one place.
#[derive(Clone, Debug)]
pub struct WindAsked<'a> {
    /// The port.
    pub setting: &'a Setting<'a>,
    /// The advisory, and the file it was read from.
    pub advisory: (&'a Advisory, &'a str),
    /// The present time.
    pub now: Moment,
    /// The place's name.
    pub place: String,
    /// Where it is.
    pub position: Position,
    /// How open it lies.
    pub exposure: &'a Exposure,
    /// Over which time mean winds are averaged here.
    pub averaging: Averaging,
    /// At which height they and the gusts are told.
    pub height: Metres,
    /// Hour by hour.
    pub series: WindSeries,
    /// 34 kt over the open sea, as the advisory averages.
    pub gale: &'a Answer,
    /// High seas; `None` where the advisory does not give their reach.
    pub seas: Option<&'a Answer>,
    /// When the first swell that left the storm at issue is here: of the longest period, and of the shorter.
    pub swell: [Moment; 2],
    /// Waves near the storm's centre at issue; `None` where the formula does not hold.
    pub waves: Option<StormWaves>,
    /// What the port's files limit by a wind or by seas here.
    pub limits: Vec<LimitAsked<'a>>,
    /// What must be said with the odds.
    pub notes: Vec<String>,
}

/// One limit at the place.
#[derive(Clone, Debug)]
pub struct LimitAsked<'a> {
    /// "25 kt (3-s gust at 50 m)".
    pub limit: String,
    /// Whom it stops or binds: ids of tasks, stages and duties.
    pub used_by: Vec<String>,
    /// When it is met.
    pub answer: &'a Answer,
}
