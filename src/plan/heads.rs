//! The head of a plan: arrivals, stages, duties, the joint chance, and what the computed arrival endangers.

use crate::arrival::odds::{Answer, Answers, Quantile};
use crate::arrival::onset::Onset;
use crate::plan::sheet::{
    Arrival, DutyLine, DutyState, JointChance, Overtaken, Point, StageLine, StageStatus, TaskLine, TaskState,
};
use crate::port::harbour::Port;
use crate::record::situation::Situation;
use crate::rules::limit::{Anchor, Binding, Deadline};
use crate::rules::stage::{Rules, Trigger};
use crate::time::moment::{Minutes, Moment};
use crate::units::chance::Chance;
use crate::units::wind::Averaging;
use crate::work::graph::WorkGraph;
use crate::work::questions::{HEAD_WINDS, head_key, head_wind};
use crate::work::reckoned::{ArrivalBook, Basis, reckon};
use crate::work::timed::{Standing, Timed};

/// Gale, storm and hurricane force at every place, reference places first.
#[must_use]
pub fn arrivals(port: &Port, book: &ArrivalBook<'_>, averaging: Averaging) -> Vec<Arrival> {
    let is_reference = |id: &str| port.places.iter().any(|place| place.counts_from == id);
    let mut places: Vec<_> = port.places.iter().collect();
    places.sort_by_key(|place| (place.id != port.reference, !is_reference(&place.id)));
    let mut arrivals = Vec::new();
    for place in places {
        for wind in HEAD_WINDS {
            let Some(answer) = book.answer(&head_key(&place.id, wind)) else { continue };
            let adopted = book.adopted.get(&place.id).filter(|a| (a.wind.get() - wind.get()).abs() < 0.05);
            arrivals.push(Arrival {
                place: place.id.clone(),
                place_name: place.name.clone(),
                is_reference: is_reference(&place.id),
                wind: head_wind(wind, averaging),
                adopted: adopted.map(|adopted| adopted.time),
                computed: reckon(answer, book.usual),
                storm: None,
                earliest: point(answer.earliest()),
                likely: point(answer.likely()),
                latest: point(answer.latest()),
                single_track: answer.single_track,
                chance: answer.chance(),
                already: answer.already_share(),
                over_by: point(answer.end_quantile(Chance::share(9, 10))),
            });
        }
    }
    arrivals
}

fn point(quantile: Quantile) -> Point {
    match quantile {
        Quantile::At(moment) => Point::At(moment),
        Quantile::AfterEnd => Point::AfterEnd,
        Quantile::TooFew => Point::Unknown,
    }
}

/// Every stage as it stands.
#[must_use]
pub fn stages(rules: &Rules, timed: &Timed, situation: &Situation, port: &Port) -> Vec<StageLine> {
    let lines = rules.stages.iter().zip(&timed.stages).map(|(stage, times)| {
        let state = situation.stages.get(&stage.id);
        let by = state.and_then(|s| s.declared.as_ref()).map(|told| told.said.by.clone());
        StageLine {
            id: stage.id.clone(),
            name: stage.name.clone(),
            direction: stage.direction,
            status: match times.standing {
                Standing::NotDue => StageStatus::NotDue,
                Standing::Later => StageStatus::Computed,
                Standing::DueNow => StageStatus::Recommended,
                Standing::Declared => StageStatus::Declared,
                Standing::Superseded => StageStatus::Superseded,
                Standing::Lifted => StageStatus::Lifted,
            },
            due: times.due,
            because: times
                .trigger
                .and_then(|t| stage.any.get(t))
                .map_or_else(String::new, |trigger| trigger_words(trigger, port, times.basis)),
            declared: times.declared.map(|from| (from, by.unwrap_or_default())),
            lifted: times.lifted,
            port_status: stage.status.clone(),
            source: stage.source.clone(),
        }
    });
    lines.collect()
}

fn trigger_words(trigger: &Trigger, port: &Port, basis: Basis) -> String {
    let place = |id: &str| port.place(id).map_or_else(|| id.to_owned(), |place| place.name.clone());
    match trigger {
        Trigger::Forecast { wind, within, .. } => {
            let counted = match basis {
                Basis::Adopted => "adopted",
                Basis::Computed => "computed",
                Basis::Observed => "observed",
            };
            format!("{within} before the {counted} arrival of {} at {}", wind.limit, place(&wind.place))
        }
        Trigger::Observed { wind } => format!("{} observed at {}", wind.limit, place(&wind.place)),
        Trigger::Stage { stage, after } if *after < Minutes::ZERO => {
            format!("{} before stage {stage}", -*after)
        }
        Trigger::Stage { stage, after } => format!("{after} after stage {stage}"),
        Trigger::WindOver { wind, after } => {
            format!("{after} after {} at {} is over", wind.limit, place(&wind.place))
        }
    }
}

/// Every duty as it stands.
#[must_use]
pub fn duties(
    rules: &Rules,
    work: &WorkGraph,
    timed: &Timed,
    book: &ArrivalBook<'_>,
    tasks: &[TaskLine],
) -> Vec<DutyLine> {
    let line = |duty: &crate::rules::stage::Duty| {
        let position = rules.stages.iter().position(|stage| stage.id == duty.stage);
        let times = position.and_then(|position| timed.stages.get(position));
        let stage_time = times.and_then(|times| times.declared.or(times.due));
        let by = match &duty.by {
            Some(deadline) => deadline_time(deadline, rules, timed, book),
            None => stage_time,
        };
        let fulfilling: Vec<&TaskLine> = tasks
            .iter()
            .filter(|task| {
                let template = task.id.rsplit('/').next().unwrap_or(&task.id);
                work.task(&task.id).is_some()
                    && duty.fulfilled_by.iter().any(|id| *id == task.id || id == template)
                    && task.state != TaskState::NotNeeded
            })
            .collect();
        let is_late = |task: &&&TaskLine| match (task.state, task.finish, by) {
            (TaskState::GivenUp, _, _) => true,
            (_, Some(finish), Some(by)) => finish > by,
            (_, None, _) | (_, _, None) => false,
        };
        let missing: Vec<String> = fulfilling.iter().filter(is_late).map(|task| task.id.clone()).collect();
        let all_done = !fulfilling.is_empty() && fulfilling.iter().all(|task| task.state == TaskState::Done);
        let state = match (times.map(|times| times.standing), all_done, missing.is_empty()) {
            (_, true, _) => DutyState::Fulfilled,
            (None | Some(Standing::NotDue | Standing::Lifted), false, _) => DutyState::NotDue,
            (Some(_), false, false) => DutyState::Missed,
            (Some(_), false, true) => DutyState::Open,
        };
        DutyLine {
            id: duty.id.clone(),
            stage: duty.stage.clone(),
            who: duty.who.clone(),
            act: duty.act.clone(),
            by,
            state,
            missing,
            source: duty.source.clone(),
        }
    };
    rules.duties.iter().map(line).collect()
}

fn deadline_time(
    deadline: &Deadline,
    rules: &Rules,
    timed: &Timed,
    book: &ArrivalBook<'_>,
) -> Option<Moment> {
    let anchor = match &deadline.anchor {
        Anchor::Wind(wind) => book.usual_arrival(wind).map(|arrival| arrival.at),
        Anchor::Stage(stage) => {
            let position = rules.stages.iter().position(|candidate| candidate.id == *stage)?;
            timed.stages.get(position).and_then(|times| times.declared.or(times.due))
        }
        Anchor::Clock(time) => Some(Moment::at_or_before(*time)),
    };
    anchor.map(|at| at - deadline.lead)
}

/// In how many of the scenarios every hard task of the plan is finished before each wind that limits it.
///
/// For tasks i with finish F_i, and the onset O_i(s) of the earliest wind that limits i in scenario s:
/// chance = share of s in which F_i <= O_i(s) for all i. One set of scenarios serves all places, so that what happens
/// together is counted together.
#[must_use]
pub fn joint_chance(
    answers: &Answers,
    work: &WorkGraph,
    timed: &Timed,
    tasks: &[TaskLine],
) -> Option<JointChance> {
    let mut limits: Vec<(Moment, &Answer)> = Vec::new();
    let mut counted = 0;
    for line in tasks.iter().filter(|line| matches!(line.state, TaskState::Planned | TaskState::Started)) {
        let (Some(finish), Some(node)) = (line.finish, work.find(&line.id)) else { continue };
        let is_hard = work.task(&line.id).is_some_and(|task| {
            !task.stops_at.is_empty()
                || task.done_before.iter().any(|deadline| deadline.binds == Binding::Hard)
        });
        let Some(times) = timed.tasks.get(&node).filter(|times| is_hard && !times.risks.is_empty()) else {
            continue;
        };
        counted += 1;
        limits.extend(times.risks.iter().filter_map(|key| answers.get(key)).map(|answer| (finish, answer)));
    }
    let scenarios = answers.joint;
    if counted == 0 || scenarios == 0 {
        return None;
    }
    let safe = (0..scenarios)
        .filter(|scenario| limits.iter().all(|(finish, answer)| comes_after(answer, *scenario, *finish)))
        .count();
    Some(JointChance { chance: Chance::share(safe, scenarios), tasks: counted, scenarios })
}

/// Whether the wind of `answer` comes no sooner than `finish` in a scenario.
fn comes_after(answer: &Answer, scenario: usize, finish: Moment) -> bool {
    match answer.onsets.get(scenario).map(|scenario| scenario.onset) {
        Some(Onset::Already) => false,
        Some(Onset::At(onset)) => finish <= onset,
        Some(Onset::Never) | None => true,
    }
}

/// Adopted arrivals that the computed one precedes by more than the rules' margin, and the tasks that are planned to
/// finish when the computed arrival would not allow it any more.
#[must_use]
pub fn overtaken(
    rules: &Rules,
    work: &WorkGraph,
    book: &ArrivalBook<'_>,
    arrivals: &[Arrival],
    tasks: &[TaskLine],
) -> Vec<Overtaken> {
    arrivals
        .iter()
        .filter_map(|arrival| {
            let (adopted, computed) = (arrival.adopted?, arrival.computed?);
            let earlier = adopted - computed;
            if earlier <= rules.adopted_margin {
                return None;
            }
            let counts_from_it = |line: &&TaskLine| {
                let Some(task) = work.task(&line.id) else { return false };
                let Some(finish) = line.finish.filter(|_| line.state != TaskState::Done) else {
                    return false;
                };
                let wind_bounds = task.done_before.iter().filter_map(|deadline| match &deadline.anchor {
                    Anchor::Wind(wind) => Some((wind, deadline.lead)),
                    Anchor::Stage(_) | Anchor::Clock(_) => None,
                });
                let stops = task.stops_at.iter().map(|wind| (wind, Minutes::ZERO));
                let by_wind = wind_bounds.chain(stops).any(|(wind, lead)| {
                    let here = book.port.place(&wind.place).is_some_and(|p| p.counts_from == arrival.place);
                    here && book.computed(wind, book.usual).is_some_and(|at| finish > at - lead)
                });
                // Stages count from the same arrival: a task bound to one is endangered by as much.
                let by_stage =
                    task.done_before.iter().any(|deadline| matches!(deadline.anchor, Anchor::Stage(_)))
                        && line.deadline.or(line.due).is_some_and(|bound| finish > bound - earlier);
                by_wind || by_stage
            };
            let endangers = tasks.iter().filter(counts_from_it).map(|line| line.id.clone()).collect();
            Some(Overtaken { place: arrival.place_name.clone(), adopted, computed, endangers })
        })
        .collect()
}
