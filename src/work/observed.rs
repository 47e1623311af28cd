//! What winds observed in the port say: they satisfy rules and bring the near hours forward; they never delay anything.

use crate::port::harbour::Port;
use crate::record::situation::Observation;
use crate::rules::limit::LimitAt;
use crate::time::moment::{Minutes, Moment};
use crate::wind::exposure::observed_meets;

/// For so long after it was observed a wind counts as blowing, unless a later observation says otherwise. Our choice:
/// long enough for the gaps between routine reports, short enough that a squall does not shut the port for a night.
pub const STANDS: Minutes = Minutes::hours(3);

/// When a limit was first observed to be met at its place; `None` if it never was.
#[must_use]
pub fn first_met(limit: &LimitAt, port: &Port, observed: &[Observation]) -> Option<Moment> {
    let met = observed.iter().filter(|seen| verdict(limit, port, seen) == Some(true));
    met.map(|seen| Moment::at_or_before(seen.at)).min()
}

/// Since when a limit is met by what is observed at its place: the first of the last unbroken row of observations that
/// meet it, if the last of them is not older than [`STANDS`] at `now`.
#[must_use]
pub fn met_since(limit: &LimitAt, port: &Port, observed: &[Observation], now: Moment) -> Option<Moment> {
    let mut verdicts: Vec<(Moment, bool)> = observed
        .iter()
        .filter_map(|seen| Some((Moment::at_or_before(seen.at), verdict(limit, port, seen)?)))
        .filter(|(at, _)| *at <= now)
        .collect();
    // Of several at one time one that meets it decides: the safe side.
    verdicts.sort_unstable();
    let (last, _) = verdicts.last()?;
    if now - *last > STANDS {
        return None;
    }
    verdicts.iter().rev().take_while(|(_, meets)| *meets).map(|(at, _)| *at).last()
}

/// Whether an observation meets a limit; `None` if it says nothing about it: another place, high seas, or a shorter
/// average than the limit's, as a gust says little about a mean.
fn verdict(limit: &LimitAt, port: &Port, seen: &Observation) -> Option<bool> {
    let wind = limit.limit.wind().filter(|_| seen.place == limit.place)?;
    let place = port.place(&limit.place)?;
    observed_meets(&place.exposure, (seen.wind, seen.averaging), wind)
}
