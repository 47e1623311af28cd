//! The audit against the record: what is done stays done, and no order is moved or dropped.

use crate::plan::audit_case::{AuditInputs, breach};
use crate::plan::sheet::{Breach, Plan, TaskState};
use crate::record::situation::Outcome;
use crate::time::moment::Moment;

/// Holds a plan against what was reported and ordered.
pub fn record(inputs: AuditInputs<'_>, plan: &Plan, breaches: &mut Vec<Breach>) {
    for (id, state) in &inputs.situation.tasks {
        let Some(line) = plan.task(id) else { continue };
        let mut say = |code, what: String| breaches.push(breach(code, id, what));
        match &state.outcome {
            Some(Outcome::Done { at, .. }) => {
                if line.state != TaskState::Done || line.finish != Some(Moment::at_or_after(*at)) {
                    say(
                        "audit-done-changed",
                        String::from("it is reported done, and the plan has it otherwise"),
                    );
                }
                continue;
            }
            Some(Outcome::NotNeeded { .. }) if line.state != TaskState::NotNeeded => {
                say(
                    "audit-report-ignored",
                    String::from("it is reported not needed, and the plan has it otherwise"),
                );
            }
            Some(Outcome::Cannot { .. }) if line.state != TaskState::GivenUp => {
                say(
                    "audit-report-ignored",
                    String::from("it is reported impossible, and the plan has it otherwise"),
                );
            }
            Some(Outcome::NotNeeded { .. } | Outcome::Cannot { .. }) => continue,
            None => {}
        }
        if let Some(started) = &state.started
            && (line.state != TaskState::Started || line.start != Some(Moment::at_or_before(started.at)))
        {
            say("audit-started-changed", String::from("it is reported begun, and the plan has it otherwise"));
        }
        if let Some(fixed) = &state.fixed
            && state.started.is_none()
            && line.state == TaskState::Planned
            && line.start != Some(Moment::at_or_after(fixed.value))
        {
            say("audit-order-moved", format!("{} fixed its start, and the plan moves it", fixed.said.by));
        }
    }
    for line in &plan.tasks {
        let state = inputs.situation.tasks.get(&line.id);
        let is_reported = match line.state {
            TaskState::Done => state.is_some_and(|s| matches!(s.outcome, Some(Outcome::Done { .. }))),
            TaskState::Started => state.is_some_and(|s| s.started.is_some()),
            TaskState::Planned | TaskState::GivenUp | TaskState::Waiting | TaskState::NotNeeded => true,
        };
        if !is_reported {
            breaches.push(breach("audit-not-reported", &line.id, String::from("nobody has reported that")));
        }
    }
    for arrival in &plan.arrivals {
        let Some(adopted) = inputs.situation.adopted.get(&arrival.place) else {
            if arrival.adopted.is_some() {
                breaches.push(breach(
                    "audit-not-adopted",
                    &arrival.place,
                    String::from("nobody has adopted that arrival"),
                ));
            }
            continue;
        };
        let is_its_wind = (adopted.wind.get() - arrival.wind.speed.get()).abs() < 0.05;
        if is_its_wind && arrival.adopted != Some(Moment::at_or_before(adopted.time)) {
            breaches.push(breach(
                "audit-adopted-changed",
                &arrival.place,
                String::from("the adopted arrival is shown otherwise"),
            ));
        }
    }
}
