//! Calls that follow from what is to be decided, and from what was ordered since the plan was issued.

use crate::plan::call::{Addressee, Call, Matter};
use crate::plan::call_book::{CallInputs, Talk, channel, lead};
use crate::plan::news::news_words;
use crate::plan::sheet::{DutyLine, DutyState, Overtaken, Plan, Relief, StageLine, StageStatus};
use crate::record::call::Substance;
use crate::record::event::Event;
use crate::record::ruling::Ruling;
use crate::record::situation::{CallHeard, Told};
use crate::rules::task::Stake;
use crate::time::moment::{Minutes, Moment};

/// What a decision or order is about, before it is known what was told of it.
struct Open {
    who: String,
    ship: String,
    about: String,
    substance: Substance,
    matter: Matter,
    reason: String,
    stake: Stake,
    /// The time before which they must know it, `None` for at once.
    before: Option<Moment>,
}

/// The calls about reliefs, stages and arrivals to whoever has the authority, and about duties and permissions to those
/// whom they bind.
#[must_use]
pub fn decisions_and_orders(inputs: &CallInputs<'_>) -> Vec<Call> {
    let mut open = reliefs(inputs);
    open.extend(stages_due(inputs));
    open.extend(arrivals_left_behind(inputs));
    open.extend(orders_alone(inputs));
    open.extend(duties(inputs));
    open.extend(permissions(inputs));
    let reports: Vec<&CallHeard> = inputs.situation.calls.iter().collect();
    open.into_iter().map(|open| call(inputs, &reports, open)).collect()
}

fn call(inputs: &CallInputs<'_>, reports: &[&CallHeard], open: Open) -> Call {
    let Open { who, ship, about, substance, matter, reason, stake, before } = open;
    let to = Addressee { who, ship };
    let told = Talk { reports, to: &to, about: &about }.told(substance);
    let lead = lead(inputs.port, &to.who);
    Call {
        id: told.id,
        channel: channel(inputs.port, &to.who),
        by: before.map_or(inputs.plan.now, |before| before - lead),
        lead,
        is_order: matches!(substance, Substance::Duty | Substance::Stay),
        to,
        about,
        substance,
        matter,
        place: String::new(),
        reason,
        stake,
        standing: told.standing,
        released_by: told.released_by,
    }
}

fn to_authority(inputs: &CallInputs<'_>, about: String, matter: Matter) -> Open {
    Open {
        who: inputs.port.authority.clone(),
        ship: String::new(),
        about,
        substance: Substance::Decision,
        matter,
        reason: String::new(),
        stake: Stake::Life,
        before: None,
    }
}

fn reliefs(inputs: &CallInputs<'_>) -> Vec<Open> {
    let plan = inputs.plan;
    let weighed = |ids: &[String]| ids.iter().filter_map(|id| plan.task(id)).map(|task| task.stake).min();
    let open = |relief: &Relief| {
        let steps: Vec<&str> = relief.steps.iter().map(|step| step.what.as_str()).collect();
        let prices: Vec<&str> =
            relief.steps.iter().map(|step| step.price.as_str()).filter(|price| !price.is_empty()).collect();
        let matter = Matter::Relief {
            what: steps.join(" and "),
            price: prices.join("; "),
            relieves: relief.relieves.len(),
            decide_by: relief.decide_by,
        };
        let about: Vec<&str> = relief.steps.iter().map(|step| step.about.as_str()).collect();
        Open {
            reason: format!("{} cannot be done in time", relief.relieves.join(", ")),
            stake: weighed(&relief.relieves).unwrap_or(Stake::Order),
            before: Some(relief.decide_by),
            ..to_authority(inputs, format!("{}: {}", about.join("+"), steps.join(" and ")), matter)
        }
    };
    plan.reliefs.iter().map(open).collect()
}

fn stages_due(inputs: &CallInputs<'_>) -> Vec<Open> {
    let is_due = |stage: &&StageLine| stage.status == StageStatus::Recommended;
    let open = |stage: &StageLine| {
        let due = stage.due?;
        let matter = Matter::Declare { name: stage.name.clone(), due };
        Some(Open {
            reason: stage.because.clone(),
            before: Some(due),
            ..to_authority(inputs, stage.id.clone(), matter)
        })
    };
    inputs.plan.stages.iter().filter(is_due).filter_map(open).collect()
}

fn arrivals_left_behind(inputs: &CallInputs<'_>) -> Vec<Open> {
    let open = |overtaken: &Overtaken| {
        let (adopted, computed) = (overtaken.adopted, overtaken.computed);
        let name = inputs.port.place(&overtaken.place).map_or(&overtaken.place, |place| &place.name);
        Open {
            reason: format!("it endangers {}", tasks(overtaken.endangers.len())),
            ..to_authority(inputs, name.clone(), Matter::Adopt { adopted, computed })
        }
    };
    inputs.plan.overtaken.iter().map(open).collect()
}

fn tasks(number: usize) -> String {
    if number == 1 { String::from("1 task") } else { format!("{number} tasks") }
}

/// Orders that wait for a second person.
fn orders_alone(inputs: &CallInputs<'_>) -> Vec<Open> {
    let clock = &inputs.port.clock;
    let open = |order: &Event| Open {
        reason: String::from("the rules ask for two persons, and it does not count yet"),
        ..to_authority(
            inputs,
            format!("order {}", order.number),
            Matter::Confirm { order: news_words(order, clock) },
        )
    };
    inputs.situation.waiting.values().map(open).collect()
}

/// Duties of stages that were not yet declared in the plan issued last.
fn duties(inputs: &CallInputs<'_>) -> Vec<Open> {
    let stage = |plan: &Plan, id: &str| {
        let stage = plan.stages.iter().find(|stage| stage.id == id)?;
        Some((format!("{} {}", stage.id, stage.name), stage.status, stage.declared.clone()))
    };
    let is_news = |id: &str| {
        let issued = inputs.issued.and_then(|issued| stage(issued, id));
        !matches!(issued, Some((_, StageStatus::Declared, _)))
    };
    let open = |duty: &DutyLine| {
        let (name, status, declared) = stage(inputs.plan, &duty.stage)?;
        let is_open = matches!(duty.state, DutyState::Open | DutyState::Missed);
        if status != StageStatus::Declared || !is_open || !is_news(&duty.stage) {
            return None;
        }
        let (since, by_whom) = declared?;
        Some(Open {
            who: duty.who.clone(),
            ship: String::new(),
            about: duty.id.clone(),
            substance: Substance::Duty,
            matter: Matter::Duty { stage: name, act: duty.act.clone(), by: duty.by },
            reason: format!("stage {} declared by {by_whom}; {}", duty.stage, duty.source),
            stake: Stake::Life,
            // What is declared is told within the lead.
            before: Some(duty.by.unwrap_or(since).max(since + Minutes::hours(1))),
        })
    };
    inputs.plan.duties.iter().filter_map(open).collect()
}

/// Ships that were permitted to stay since the plan was issued.
fn permissions(inputs: &CallInputs<'_>) -> Vec<Open> {
    let issued = inputs.situation.issued.last().map(|said| said.nth);
    let recent = inputs.situation.rulings.values().filter(|told| {
        let is_over = told.value.until().is_some_and(|until| until <= inputs.situation.now);
        !is_over && issued.is_none_or(|issue| issue < told.said.nth)
    });
    let open = |told: &Told<Ruling>| {
        let Ruling::Stay { ship, conditions, until } = &told.value else { return None };
        let name = inputs.port.ships.iter().find(|known| known.id == *ship).map(|known| known.name.as_str());
        Some(Open {
            who: String::from("master"),
            ship: format!("{ship} {}", name.unwrap_or_default()).trim_end().to_owned(),
            about: ship.clone(),
            substance: Substance::Stay,
            matter: Matter::Stay { conditions: conditions.clone(), until: until.map(Moment::at_or_before) },
            reason: format!("permitted by {}", told.said.by),
            stake: Stake::Harm,
            before: Some(Moment::at_or_after(told.said.known) + Minutes::hours(1)),
        })
    };
    recent.filter_map(open).collect()
}
