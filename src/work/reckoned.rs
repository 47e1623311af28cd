//! The working arrival time of a wind: adopted by order, or computed from the odds.

use crate::arrival::odds::{Answer, Answers, Quantile};
use crate::port::harbour::Port;
use crate::record::situation::Situation;
use crate::rules::limit::{Limit, LimitAt, Reckoning};
use crate::time::moment::Moment;
use crate::units::speed::Knots;
use crate::units::wind::{Averaging, standard_height};
use crate::work::observed::met_since;
use crate::work::questions::{head_key, question_key};
use std::collections::BTreeMap;

/// What arrivals are counted from: the odds of the advisory in force, and the adopted times with the odds at the time of
/// their adoption.
#[derive(Clone, Debug)]
pub struct ArrivalBook<'a> {
    /// The port, for which place counts from which.
    pub port: &'a Port,
    /// The record, for what is observed now.
    pub situation: &'a Situation,
    /// Answers for the advisory in force; `None` before the first.
    pub answers: Option<&'a Answers>,
    /// Adopted arrivals by reference place.
    pub adopted: BTreeMap<String, AdoptedArrival<'a>>,
    /// How the rules reckon where nothing else is said.
    pub usual: Reckoning,
}

/// An arrival that the harbourmaster has adopted as the port's working time.
#[derive(Clone, Copy, Debug)]
pub struct AdoptedArrival<'a> {
    /// The wind it is about.
    pub wind: Knots,
    /// The working time.
    pub time: Moment,
    /// The odds of the advisory that was in force when it was ordered: other winds and places keep the lead they had
    /// then, so that nothing moves until the next order.
    pub answers: Option<&'a Answers>,
}

/// A working arrival time.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct WorkingArrival {
    /// When.
    pub at: Moment,
    /// What it rests on.
    pub basis: Basis,
}

/// What a time rests on.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Basis {
    /// The odds of the advisory in force, or an order.
    Computed,
    /// An arrival that the harbourmaster adopted.
    Adopted,
    /// What was observed in the port.
    Observed,
}

/// The time that a way of reckoning makes of an answer; `None` if the wind does not come with chance enough.
#[must_use]
pub fn reckon(answer: &Answer, reckoning: Reckoning) -> Option<Moment> {
    let point = |at_least, quantile| moment_of(quantile).filter(|_| answer.chance() >= at_least);
    match reckoning {
        Reckoning::FirstReaching(chance) => answer.first_reaching(chance),
        Reckoning::Earliest { at_least } => point(at_least, answer.earliest()),
        Reckoning::Likely { at_least } => point(at_least, answer.likely()),
    }
}

/// The time of a quantile, if it is one.
#[must_use]
pub fn moment_of(quantile: Quantile) -> Option<Moment> {
    match quantile {
        Quantile::At(moment) => Some(moment),
        Quantile::AfterEnd | Quantile::TooFew => None,
    }
}

impl ArrivalBook<'_> {
    /// The working arrival of a wind at a place, reckoned as the rules usually do.
    #[must_use]
    pub fn usual_arrival(&self, wind: &LimitAt) -> Option<WorkingArrival> {
        self.arrival(wind, self.usual)
    }

    /// The working arrival of a wind at a place: adopted or computed, or the time since which it is observed to blow if
    /// that is earlier.
    #[must_use]
    pub fn arrival(&self, limit: &LimitAt, reckoning: Reckoning) -> Option<WorkingArrival> {
        let seen =
            met_since(limit, self.port, &self.situation.observed, Moment::at_or_after(self.situation.now));
        let seen = seen.map(|at| WorkingArrival { at, basis: Basis::Observed });
        let told = self.told(limit, reckoning);
        // What is observed never delays.
        seen.into_iter().chain(told).min_by_key(|arrival| arrival.at)
    }

    /// The adopted or computed arrival.
    ///
    /// With an adopted time for the place it counts from:
    /// T = T_adopted + (R(wind, place) - R(adopted wind, reference place)), where R is the reckoned time in the odds at
    /// adoption. Where those odds do not give both, the computed time counts, so that a wind that was out of reach at
    /// adoption is not overlooked later.
    fn told(&self, wind: &LimitAt, reckoning: Reckoning) -> Option<WorkingArrival> {
        let computed = || {
            let at = self.computed(wind, reckoning)?;
            Some(WorkingArrival { at, basis: Basis::Computed })
        };
        let reference = self.port.place(&wind.place).map(|place| place.counts_from.as_str());
        let Some((reference, adopted)) = reference.and_then(|id| Some((id, self.adopted.get(id)?))) else {
            return computed();
        };
        if wind.place == reference && is_adopted_wind(&wind.limit, adopted.wind) {
            return Some(WorkingArrival { at: adopted.time, basis: Basis::Adopted });
        }
        let reckoned = |key: &str| adopted.answers?.get(key).and_then(|answer| reckon(answer, reckoning));
        match (reckoned(&question_key(wind)), reckoned(&head_key(reference, adopted.wind))) {
            (Some(this), Some(of_adopted)) => {
                Some(WorkingArrival { at: adopted.time + (this - of_adopted), basis: Basis::Adopted })
            }
            (None, _) | (_, None) => computed(),
        }
    }

    /// The computed arrival of a wind at a place on the advisory in force.
    #[must_use]
    pub fn computed(&self, wind: &LimitAt, reckoning: Reckoning) -> Option<Moment> {
        self.answer(&question_key(wind)).and_then(|answer| reckon(answer, reckoning))
    }

    /// The answer to a question on the advisory in force.
    #[must_use]
    pub fn answer(&self, key: &str) -> Option<&Answer> {
        self.answers.and_then(|answers| answers.get(key))
    }
}

/// Two speeds nearer than this are the same limit: half a unit of the last digit that files give.
const SAME_SPEED_KT: f64 = 0.05;

/// Whether a limit is the very wind that an adopted time is about: the same speed as a sustained mean at 10 m.
fn is_adopted_wind(limit: &Limit, adopted: Knots) -> bool {
    let Limit::Wind(limit) = limit else { return false };
    (limit.speed.get() - adopted.get()).abs() < SAME_SPEED_KT
        && limit.averaging != Averaging::Gust3s
        && (limit.height.get() - standard_height().get()).abs() < SAME_HEIGHT_M
}

/// Two heights nearer than this are the same.
const SAME_HEIGHT_M: f64 = 0.05;
