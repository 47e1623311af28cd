//! From the record's first event to now: each plan starts from the one before.

use crate::plan::audit::audit;
use crate::plan::audit_case::AuditInputs;
use crate::plan::calendar::{Calendar, LONGEST_RECORD, REACH};
use crate::plan::call_book::CallInputs;
use crate::plan::calls::calls;
use crate::plan::in_force::{at_adoption, in_force};
use crate::plan::inputs::Inputs;
use crate::plan::make::{Forecast, MakeInputs, make};
use crate::plan::odds::AllOdds;
use crate::plan::sheet::{Breach, Plan};
use crate::plan::storms::{forecast_of, tell_of_storms};
use crate::record::fold::{Fold, in_order, situation};
use crate::record::situation::Situation;
use crate::time::moment::Moment;
use crate::work::reckoned::{AdoptedArrival, ArrivalBook};

/// All plans up to a moment.
#[derive(Clone, Debug)]
pub struct History {
    /// One for each time at which something became known, oldest first, and the one for now; never empty.
    pub plans: Vec<Plan>,
}

impl History {
    /// The plan for now.
    #[must_use]
    pub fn latest(&self) -> Option<&Plan> {
        self.plans.last()
    }

    /// The last plan made at or before a moment.
    #[must_use]
    pub fn at(&self, moment: Moment) -> Option<&Plan> {
        self.plans.iter().rev().find(|plan| plan.now <= moment)
    }
}

/// Folds the record up to `now` and makes a plan at each time at which something became known, and one for `now`. The
/// result depends on the inputs and `now` alone.
///
/// Cost: one set of odds for each advisory, one plan for each time at which something became known.
#[must_use]
pub fn plan_at(inputs: &Inputs<'_>, now: Moment) -> History {
    let last = situation(inputs.events, now.to_utc());
    let mut moments: Vec<Moment> = last.changes.iter().map(|known| Moment::at_or_after(*known)).collect();
    moments.push(now);
    moments.dedup();
    let odds = AllOdds::of(inputs, now, &moments);
    let first = moments.first().copied().unwrap_or(now);
    // A record that begins long ago (or in a mistyped year) must not fill the memory with tides.
    let from = (first - REACH.0).max(now - LONGEST_RECORD);
    let calendar = Calendar::of(inputs.port, from, now + REACH.1);
    let end = moments.len();
    odds.ahead_of(|| {
        let mut plans: Vec<Plan> = Vec::with_capacity(end);
        let mut events = in_order(inputs.events).into_iter().peekable();
        let mut then = Fold::default();
        for (number, moment) in (1..).zip(moments) {
            then.wait_until(moment.to_utc());
            while let Some(event) = events.next_if(|event| event.known <= moment.to_utc()) {
                then.add(event);
            }
            let plan = plan_then(inputs, (&odds, &calendar), then.situation(), plans.last(), number == end);
            plans.push(plan);
        }
        if let Some(mut plan) = plans.pop() {
            tell_who_must_know(inputs, then.situation(), &plans, &mut plan);
            plans.push(plan);
        }
        History { plans }
    })
}

/// The plan for `now` after more events have joined the record, all known at `now`; `earlier` are the plans until `now`
/// without them. The same as the last plan of [`plan_at`], for the work of one plan: nothing before `now` can have changed.
#[must_use]
pub fn plan_again(inputs: &Inputs<'_>, earlier: &History, now: Moment) -> Plan {
    let before = earlier.plans.partition_point(|plan| plan.now < now);
    let before = earlier.plans.get(..before).unwrap_or(&[]);
    let first = earlier.plans.first().map_or(now, |plan| plan.now);
    let from = (first - REACH.0).max(now - LONGEST_RECORD);
    let calendar = Calendar::of(inputs.port, from, now + REACH.1);
    let odds = AllOdds::of(inputs, now, &[now]);
    let then = situation(inputs.events, now.to_utc());
    let mut plan = plan_then(inputs, (&odds, &calendar), &then, before.last(), true);
    tell_who_must_know(inputs, &then, before, &mut plan);
    plan
}

/// Gives a plan its calls: what differs from the plan issued last, and who has been told of it.
fn tell_who_must_know(inputs: &Inputs<'_>, situation: &Situation, before: &[Plan], plan: &mut Plan) {
    let issued_at = situation.issued.last().map(|said| Moment::at_or_after(said.known));
    // What was issued at this very moment is this plan.
    let issued = issued_at.map(|at| before.iter().chain([&*plan]).rev().find(|one| one.now <= at));
    let issued = issued.flatten();
    let found = calls(&CallInputs { port: inputs.port, situation, events: inputs.events, issued, plan });
    plan.calls = found;
}

fn plan_then(
    inputs: &Inputs<'_>,
    (odds, calendar): (&AllOdds<'_>, &Calendar),
    then: &Situation,
    before: Option<&Plan>,
    with_reliefs: bool,
) -> Plan {
    let force = in_force(inputs.forecasts, inputs.port, &then.advisories, then.now);
    let forecast = forecast_of(&force, odds, inputs.port, inputs.rules.reckoning);
    let book = arrival_book(inputs, odds, then, forecast.as_ref());
    let mut plan = make(MakeInputs {
        port: inputs.port,
        calendar,
        rules: inputs.rules,
        work: inputs.work,
        situation: then,
        forecast: forecast.as_ref(),
        book: &book,
        before,
        effort: inputs.effort,
        with_reliefs,
    });
    tell_of_storms(&mut plan, &force, odds, (inputs.port, inputs.rules.reckoning), then);
    plan
}

/// Audits any plan against the record up to its own time: for plans that were made elsewhere, or by hand.
#[must_use]
pub fn audit_plan(inputs: &Inputs<'_>, plan: &Plan) -> Vec<Breach> {
    let then = situation(inputs.events, plan.now.to_utc());
    let odds = AllOdds::of(inputs, plan.now, &[plan.now]);
    let force = in_force(inputs.forecasts, inputs.port, &then.advisories, then.now);
    let forecast = forecast_of(&force, &odds, inputs.port, inputs.rules.reckoning);
    let book = arrival_book(inputs, &odds, &then, forecast.as_ref());
    let Inputs { port, rules, work, .. } = *inputs;
    audit(AuditInputs { port, rules, work, situation: &then, book: &book }, plan)
}

fn arrival_book<'a>(
    inputs: &Inputs<'a>,
    odds: &'a AllOdds<'_>,
    then: &'a Situation,
    forecast: Option<&Forecast<'a>>,
) -> ArrivalBook<'a> {
    let adopted = then.adopted.iter().map(|(place, adopted)| {
        let answers = odds.get(&at_adoption(inputs.forecasts, inputs.port, then, adopted));
        let time = Moment::at_or_before(adopted.time);
        (place.clone(), AdoptedArrival { wind: adopted.wind, time, answers })
    });
    ArrivalBook {
        port: inputs.port,
        situation: then,
        answers: forecast.map(|forecast| forecast.answers),
        adopted: adopted.collect(),
        usual: inputs.rules.reckoning,
    }
}
