//! From a loaded folder to its plans.

use crate::arrival::odds::Draw;
use crate::cli::exit::{Exit, Failure};
use crate::cli::load::Loaded;
use crate::plan::fold::{History, plan_again, plan_at};
use crate::plan::inputs::Inputs;
use crate::plan::sheet::Plan;
use crate::record::fold::situation;
use crate::schedule::search::Effort;
use crate::time::moment::{Minutes, Moment};

/// All plans up to a moment, with the usual number of scenarios and the usual effort.
#[must_use]
pub fn plans_until(loaded: &Loaded, now: Moment) -> History {
    plan_at(&inputs_of(loaded), now)
}

/// The plan for `now` after events known at `now` have joined the record; `earlier` are the plans until `now` without them.
#[must_use]
pub fn plan_with_news(loaded: &Loaded, earlier: &History, now: Moment) -> Plan {
    plan_again(&inputs_of(loaded), earlier, now)
}

fn inputs_of(loaded: &Loaded) -> Inputs<'_> {
    Inputs {
        port: &loaded.port,
        rules: &loaded.rules,
        work: &loaded.work,
        events: &loaded.events,
        forecasts: &loaded.forecasts,
        tables: &loaded.tables,
        // The same scenarios for every advisory and every place: what happens together is counted together, and an
        // arrival adopted earlier is held against the same count. `arrivals` draws more for what is rare.
        draw: Draw { most: Draw::default().scenarios, ..Draw::default() },
        effort: Effort::usual(loaded.work.task_ids().count()),
    }
}

/// The plan for the moment that was asked for.
///
/// # Errors
/// [`Failure::NoPlan`] if there is none, which a sound fold never leaves.
pub fn latest(history: &History) -> Result<&Plan, Failure> {
    history.latest().ok_or(Failure::NoPlan)
}

/// The moment with which a plan is compared if nobody names one: when the last plan was issued; if none was, just before
/// the last advisory was taken; `None` if none was taken either.
#[must_use]
pub fn compared_with(loaded: &Loaded, now: Moment) -> Option<Moment> {
    let then = situation(&loaded.events, now.to_utc());
    let issued = then.issued.last().map(|said| Moment::at_or_after(said.known));
    issued.or_else(|| Some(Moment::at_or_after(then.advisories.last()?.said.known) - Minutes::new(1)))
}

/// How a command ends that showed this plan: what cannot be done in time goes before a stale forecast.
#[must_use]
pub fn exit_of(plan: &Plan, loaded: &Loaded) -> Exit {
    let is_overdue = plan.advisory.iter().chain(&plan.other_advisories).any(|advisory| advisory.is_overdue);
    if !plan.fits() {
        Exit::CannotBeDone
    } else if is_overdue || loaded.is_out_of_order(plan.now) {
        Exit::Stale
    } else {
        Exit::Fits
    }
}
