//! From the record's first event to now: each plan starts from the one before.

use crate::advisory::forecast::Advisory;
use crate::arrival::errors::ErrorTables;
use crate::arrival::odds::{Draw, ask};
use crate::plan::audit::audit;
use crate::plan::audit_case::AuditInputs;
use crate::plan::calendar::{Calendar, LONGEST_RECORD, REACH};
use crate::plan::in_force::in_force;
use crate::plan::make::{Forecast, MakeInputs, make};
use crate::plan::sheet::{Breach, Plan};
use crate::plan::storms::{Odds, forecast_of, tell_of_storms};
use crate::plan::threads::each;
use crate::port::harbour::Port;
use crate::record::event::Event;
use crate::record::situation::{Adopted, Said, Situation, situation};
use crate::rules::stage::Rules;
use crate::schedule::search::Effort;
use crate::time::moment::Moment;
use crate::work::graph::WorkGraph;
use crate::work::questions::questions;
use crate::work::reckoned::{AdoptedArrival, ArrivalBook};
use std::collections::{BTreeMap, BTreeSet};

/// Everything that plans depend on: what stands in the port's folder.
#[derive(Clone, Copy, Debug)]
pub struct Inputs<'a> {
    /// The port.
    pub port: &'a Port,
    /// Its rules.
    pub rules: &'a Rules,
    /// The graph of its tasks and stages; see [`crate::work::expand::expand`].
    pub work: &'a WorkGraph,
    /// The record.
    pub events: &'a [Event],
    /// Forecasts by file name.
    pub forecasts: &'a BTreeMap<String, Advisory>,
    /// The error tables of the odds.
    pub tables: &'a ErrorTables,
    /// How many scenarios.
    pub draw: Draw,
    /// How long to search for each plan.
    pub effort: Effort,
}

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
    let odds = all_odds(inputs, &last, &moments);
    let first = moments.first().copied().unwrap_or(now);
    // A record that begins long ago (or in a mistyped year) must not fill the memory with tides.
    let from = (first - REACH.0).max(now - LONGEST_RECORD);
    let calendar = Calendar::of(inputs.port, from, now + REACH.1);
    let mut plans: Vec<Plan> = Vec::with_capacity(moments.len());
    let end = moments.len();
    for (number, moment) in (1..).zip(moments) {
        let then = situation(inputs.events, moment.to_utc());
        let plan = plan_then(inputs, (&odds, &calendar), &then, plans.last(), number == end);
        plans.push(plan);
    }
    History { plans }
}

fn plan_then(
    inputs: &Inputs<'_>,
    (odds, calendar): (&Odds, &Calendar),
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
    let odds = all_odds(inputs, &then, &[plan.now]);
    let force = in_force(inputs.forecasts, inputs.port, &then.advisories, then.now);
    let forecast = forecast_of(&force, &odds, inputs.port, inputs.rules.reckoning);
    let book = arrival_book(inputs, &odds, &then, forecast.as_ref());
    let Inputs { port, rules, work, .. } = *inputs;
    audit(AuditInputs { port, rules, work, situation: &then, book: &book }, plan)
}

fn arrival_book<'a>(
    inputs: &Inputs<'a>,
    odds: &'a Odds,
    then: &Situation,
    forecast: Option<&Forecast<'a>>,
) -> ArrivalBook<'a> {
    let adopted = then.adopted.iter().map(|(place, adopted)| {
        let answers = odds.of(&at_adoption(inputs, then, adopted));
        let time = Moment::at_or_before(adopted.time);
        (place.clone(), AdoptedArrival { wind: adopted.wind, time, answers })
    });
    ArrivalBook {
        port: inputs.port,
        answers: forecast.map(|forecast| forecast.answers),
        adopted: adopted.collect(),
        usual: inputs.rules.reckoning,
    }
}

/// The advisories that were in force when an arrival was adopted.
fn at_adoption<'a>(inputs: &Inputs<'a>, then: &'a Situation, adopted: &Adopted) -> Vec<&'a str> {
    let told = |said: &Said| (said.known, said.nth);
    let before = then.advisories.iter().take_while(|taken| told(&taken.said) < told(&adopted.said)).count();
    let taken = then.advisories.get(..before).unwrap_or(&[]);
    in_force(inputs.forecasts, inputs.port, taken, adopted.said.known).files()
}

/// The odds of every advisory that was taken, and of storms that were in force together at one of `moments`; the work is
/// shared among threads, each advisory a piece of its own, so that their number changes nothing but the time.
fn all_odds(inputs: &Inputs<'_>, last: &Situation, moments: &[Moment]) -> Odds {
    let taken: BTreeMap<&str, &Advisory> = last
        .advisories
        .iter()
        .filter_map(|taken| Some((taken.file.as_str(), inputs.forecasts.get(&taken.file)?)))
        .collect();
    let jobs: Vec<(&str, &Advisory)> = taken.into_iter().collect();
    let answers = each(&jobs, |(file, advisory)| {
        let asked = questions(inputs.port, inputs.rules, inputs.work, advisory.averaging);
        ((*file).to_owned(), ask(advisory, &inputs.tables.for_advisory(advisory), &asked, inputs.draw))
    });
    let mut sets: BTreeSet<Vec<String>> = BTreeSet::new();
    let owned = |files: Vec<&str>| files.into_iter().map(str::to_owned).collect();
    for moment in moments {
        let then = situation(inputs.events, moment.to_utc());
        sets.insert(owned(in_force(inputs.forecasts, inputs.port, &then.advisories, then.now).files()));
        sets.extend(then.adopted.values().map(|adopted| owned(at_adoption(inputs, &then, adopted))));
    }
    Odds::new(answers.into_iter().collect(), &sets)
}
