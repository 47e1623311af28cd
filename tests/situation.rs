//! What follows from the record: which of two events counts, and that nothing but what was known by then does.

use chrono::{DateTime, TimeDelta, Utc};
use proptest::prelude::{Just, Strategy, any, prop_oneof, proptest};
use snugdown::finding::fault::Place;
use snugdown::record::call::{CallReport, CallStep, Substance};
use snugdown::record::event::{Event, Retracted, What};
use snugdown::record::fact::Fact;
use snugdown::record::fold::{Fold, in_order, situation};
use snugdown::record::mention::{MentionKind, mentions};
use snugdown::record::ruling::Ruling;
use snugdown::record::situation::{Outcome, Situation, TaskState, Way};
use snugdown::record::taking::Taking;
use snugdown::time::moment::Minutes;
use snugdown::units::speed::Knots;
use snugdown::units::wind::Averaging;

/// So many minutes after 1970-01-01T00:00Z.
fn at(minute: i64) -> DateTime<Utc> {
    DateTime::UNIX_EPOCH + TimeDelta::minutes(minute)
}

fn event(known: i64, what: What) -> Event {
    let place = Place { file: "events.toml".into(), line: 1, column: 1, start: 0, end: 0 };
    Event {
        number: 1,
        known: at(known),
        by: "Duty officer".into(),
        name: String::new(),
        on_behalf: String::new(),
        awaits_second: false,
        what,
        reason: String::new(),
        place,
    }
}

fn told(events: &[(i64, What)]) -> Situation {
    let events: Vec<Event> = events.iter().map(|(known, what)| event(*known, what.clone())).collect();
    situation(&events, at(100_000))
}

fn told_of_task(events: &[(i64, What)]) -> TaskState {
    told(events).tasks.remove("T").unwrap_or_default()
}

fn started(minute: i64) -> What {
    What::TaskStarted { task: "T".into(), at: at(minute), members: vec!["P1".into()] }
}

fn done(minute: i64) -> What {
    What::TaskDone { task: "T".into(), at: at(minute), evidence: String::new() }
}

fn cannot() -> What {
    What::TaskCannot { task: "T".into() }
}

fn declared(stage: &str, from: i64) -> What {
    What::StageDeclared { stage: stage.into(), from: at(from) }
}

fn lifted(stage: &str, from: i64) -> What {
    What::StageLifted { stage: stage.into(), from: at(from) }
}

fn out(from: i64, until: Option<i64>) -> What {
    What::MeansOut { member: "T3".into(), from: at(from), until: until.map(at) }
}

fn back(from: i64) -> What {
    What::MeansBack { member: "T3".into(), from: at(from) }
}

fn outages(events: &[(i64, What)]) -> Vec<(DateTime<Utc>, Option<DateTime<Utc>>)> {
    let means = told(events).means;
    means
        .get("T3")
        .map(|list| list.iter().map(|outage| (outage.from, outage.until)).collect())
        .unwrap_or_default()
}

fn taken(file: &str) -> What {
    What::AdvisoryTaken(Taking::of(file))
}

fn adopted(time: Option<i64>) -> What {
    What::ArrivalAdopted { place: "pilots".into(), wind: Knots::GALE, time: time.map(at) }
}

fn observed(wind: f64, minute: i64) -> What {
    What::Observed {
        place: "signal".into(),
        wind: Knots::clamped(wind),
        averaging: Averaging::Minute10,
        at: at(minute),
    }
}

#[test]
fn a_done_told_after_cannot_counts() {
    let task = told_of_task(&[(1, cannot()), (5, done(4))]);
    assert_eq!(task.done_at(), Some(at(4)));
}

#[test]
fn a_cannot_told_after_done_counts() {
    let task = told_of_task(&[(5, done(4)), (6, cannot())]);
    assert!(matches!(task.outcome, Some(Outcome::Cannot { .. })));
    assert_eq!(task.done_at(), None);
}

#[test]
fn a_start_told_late_leaves_the_task_done() {
    let task = told_of_task(&[(60, done(55)), (70, started(10))]);
    assert_eq!(task.done_at(), Some(at(55)));
    assert_eq!(task.started.unwrap().at, at(10));
}

#[test]
fn a_task_begun_again_after_it_was_done_is_open() {
    let task = told_of_task(&[(60, done(55)), (70, started(70))]);
    assert_eq!(task.outcome, None);
    assert_eq!(task.started.unwrap().at, at(70));
}

#[test]
fn a_finish_before_the_start_told_so_far_takes_the_start_away() {
    let task = told_of_task(&[(30, started(30)), (40, done(20))]);
    assert_eq!(task.started, None);
    assert_eq!(task.done_at(), Some(at(20)));
}

#[test]
fn progress_taken_back_leaves_the_orders() {
    let fixed = What::TaskFixed { task: "T".into(), start: Some(at(90)) };
    let wrong_line = What::TaskRetracted { task: "T".into(), kind: Retracted::Progress };
    let task = told_of_task(&[(1, fixed), (2, started(2)), (3, done(3)), (4, wrong_line)]);
    assert_eq!((task.started, task.outcome), (None, None));
    assert_eq!(task.fixed.unwrap().value, at(90));
}

#[test]
fn each_kind_of_order_can_be_taken_back() {
    let task = "T".to_owned();
    let orders = [
        (1, What::TaskTakes { task: task.clone(), takes: Minutes::hours(2) }),
        (2, What::TaskNotBefore { task: task.clone(), time: at(90) }),
        (3, What::CutOrdered { task: task.clone() }),
        (4, What::TaskFixed { task: task.clone(), start: Some(at(90)) }),
    ];
    let given = told_of_task(&orders);
    assert_eq!(given.takes.map(|takes| takes.value), Some(Minutes::hours(2)));
    assert_eq!(given.not_before.map(|time| time.value), Some(at(90)));
    assert_eq!(given.way.map(|way| way.value), Some(Way::Cut));

    let back = [Retracted::Takes, Retracted::NotBefore, Retracted::Way]
        .map(|kind| (5, What::TaskRetracted { task: task.clone(), kind }));
    let lifted = (5, What::TaskFixed { task, start: None });
    let all: Vec<(i64, What)> = orders.into_iter().chain(back).chain([lifted]).collect();
    assert_eq!(told_of_task(&all), TaskState::default());
}

#[test]
fn of_a_cut_and_a_substitute_the_one_ordered_last_counts() {
    let cut = What::CutOrdered { task: "T".into() };
    let substitute = What::SubstituteOrdered { task: "T".into() };
    assert_eq!(told_of_task(&[(1, cut), (2, substitute)]).way.unwrap().value, Way::Substitute);
}

#[test]
fn the_order_in_force_is_the_stage_declared_last_and_not_lifted() {
    let mut orders = vec![(1, declared("S2", 1)), (5, declared("S3", 5))];
    assert_eq!(told(&orders).order_in_force(), Some("S3"));
    orders.push((9, lifted("S3", 9)));
    assert_eq!(told(&orders).order_in_force(), Some("S2"));
    orders.push((10, lifted("S2", 10)));
    assert_eq!(told(&orders).order_in_force(), None);
    orders.push((11, declared("S3", 11)));
    assert_eq!(told(&orders).order_in_force(), Some("S3"));
}

#[test]
fn a_stage_declared_for_later_is_not_in_force_before() {
    let events = [event(1, declared("S2", 1)), event(2, declared("S3", 60)), event(3, lifted("S3", 90))];
    assert_eq!(situation(&events, at(59)).order_in_force(), Some("S2"));
    assert_eq!(situation(&events, at(60)).order_in_force(), Some("S3"));
    assert_eq!(situation(&events, at(90)).order_in_force(), Some("S2"));
}

#[test]
fn of_two_stages_declared_at_once_the_one_told_last_is_in_force() {
    assert_eq!(told(&[(1, declared("S3", 1)), (1, declared("S2", 1))]).order_in_force(), Some("S2"));
}

#[test]
fn an_adopted_arrival_remembers_the_advisory_it_was_adopted_on_until_withdrawn() {
    let mut events =
        vec![(1, taken("11.txt")), (2, taken("12.txt")), (3, adopted(Some(900))), (4, taken("13.txt"))];
    let now = told(&events);
    let arrival = now.adopted.get("pilots").unwrap();
    assert_eq!((arrival.time, arrival.advisory_file.as_deref()), (at(900), Some("12.txt")));
    assert_eq!(arrival.said.known, at(3));
    events.push((5, adopted(None)));
    assert!(told(&events).adopted.is_empty());
}

#[test]
fn a_file_taken_twice_counts_from_the_first_time_and_changes_nothing() {
    let once = told(&[(1, taken("11.txt")), (2, taken("12.txt"))]);
    let twice = told(&[(1, taken("11.txt")), (2, taken("12.txt")), (9, taken("11.txt"))]);
    assert_eq!(once, twice);
}

#[test]
fn news_of_a_running_outage_moves_its_end() {
    assert_eq!(outages(&[(10, out(10, None)), (20, out(20, Some(60)))]), [(at(10), Some(at(60)))]);
    assert_eq!(outages(&[(10, out(10, Some(40))), (20, out(20, Some(30)))]), [(at(10), Some(at(30)))]);
    assert_eq!(outages(&[(10, out(10, Some(40))), (20, out(20, None))]), [(at(10), None)]);
}

#[test]
fn an_outage_after_another_is_one_more() {
    let two = [(at(10), Some(at(20))), (at(20), None)];
    assert_eq!(outages(&[(5, out(20, None)), (10, out(10, Some(20)))]), two);
}

#[test]
fn back_ends_what_runs_and_leaves_what_is_planned_for_later() {
    let planned = (1, out(500, Some(600)));
    let ended = outages(&[planned.clone(), (10, out(10, None)), (30, back(30))]);
    assert_eq!(ended, [(at(10), Some(at(30))), (at(500), Some(at(600)))]);
    assert_eq!(outages(&[planned, (10, back(500))]), []);
}

#[test]
fn a_member_back_from_its_only_outage_before_it_began_is_not_listed() {
    assert!(told(&[(1, out(10, None)), (2, back(10))]).means.is_empty());
    assert!(told(&[(2, back(10))]).means.is_empty());
}

#[test]
fn the_latest_wind_is_the_one_that_blew_last_and_a_mistyped_one_is_replaced() {
    let now = told(&[(10, observed(28.0, 9)), (12, observed(24.0, 5)), (13, observed(23.0, 9))]);
    assert_eq!(now.latest_observed("signal").map(|seen| seen.wind.to_string()), Some("23 kt".to_owned()));
    assert_eq!(now.observed.len(), 2);
    assert!(now.latest_observed("elsewhere").is_none());
}

#[test]
fn each_time_at_which_something_became_known_is_a_change_once() {
    let now = told(&[(9, What::PlanIssued), (5, cannot()), (5, taken("11.txt")), (7, taken("11.txt"))]);
    assert_eq!(now.changes, [at(5), at(9)]);
    assert_eq!(now.issued.iter().map(|said| said.known).collect::<Vec<_>>(), [at(9)]);
}

#[test]
fn an_event_tells_what_it_names() {
    let work = event(1, started(1));
    let named: Vec<(MentionKind, &str)> = mentions(&work).iter().map(|m| (m.kind, m.id)).collect();
    assert_eq!(named, [(MentionKind::Task, "T"), (MentionKind::Member, "P1")]);
    let kinds = [taken("11.txt"), adopted(None), declared("S2", 1), cannot(), back(1)]
        .map(|what| mentions(&event(1, what)).first().map(|m| m.kind));
    let expected =
        [MentionKind::File, MentionKind::Place, MentionKind::Stage, MentionKind::Task, MentionKind::Member];
    assert_eq!(kinds, expected.map(Some));
    assert_eq!(mentions(&event(1, What::PlanIssued)), []);
}

fn minute() -> impl Strategy<Value = i64> {
    0_i64..40
}

fn task_id() -> impl Strategy<Value = String> {
    prop_oneof![Just("T".to_owned()), Just("U".to_owned())]
}

fn told_call(m: i64) -> What {
    let step = if m % 2 == 0 { CallStep::Told } else { CallStep::Acknowledged };
    let (call, to, about) = ("C3F9A1".to_owned(), "Tug office".to_owned(), "T".to_owned());
    What::Call(CallReport { call, step, to, about, substance: Some(Substance::Start(at(m))), at: at(m) })
}

#[test]
fn a_call_is_remembered_and_no_plan_is_made_for_it() {
    let now = told(&[(1, What::PlanIssued), (2, told_call(3)), (4, told_call(4))]);
    assert_eq!(now.changes, [at(1)]);
    let steps: Vec<CallStep> = now.calls.iter().map(|heard| heard.report.step).collect();
    assert_eq!(steps, [CallStep::Acknowledged, CallStep::Told]);
    assert_eq!(
        mentions(&event(1, told_call(3))).first().map(|m| (m.kind, m.id)),
        Some((MentionKind::Call, "C3F9A1"))
    );
}

/// Any kind of event about one of a few things, so that events meet.
fn some_what() -> impl Strategy<Value = What> {
    let orders = prop_oneof![
        minute().prop_map(|m| taken(&format!("{}.txt", m % 4))),
        proptest::option::of(minute()).prop_map(adopted),
        (minute(), any::<bool>()).prop_map(|(m, two)| declared(if two { "S2" } else { "S3" }, m)),
        (minute(), any::<bool>()).prop_map(|(m, two)| lifted(if two { "S2" } else { "S3" }, m)),
        Just(What::PlanIssued),
        (minute(), minute()).prop_map(|(wind, m)| observed(wind as f64, m)),
        minute().prop_map(told_call),
    ];
    let means = prop_oneof![
        (minute(), proptest::option::of(minute())).prop_map(|(from, until)| out(from, until)),
        minute().prop_map(back),
    ];
    let tasks = (task_id(), minute(), 0..11).prop_map(|(task, m, kind)| match kind {
        0 => What::TaskStarted { task, at: at(m), members: Vec::new() },
        1 => What::TaskDone { task, at: at(m), evidence: "seen".into() },
        2 => What::TaskCannot { task },
        3 => What::TaskNotNeeded { task },
        4 => What::TaskTakes { task, takes: Minutes::new(m) },
        5 => What::TaskNotBefore { task, time: at(m) },
        6 => What::TaskFixed { task, start: (m % 2 == 0).then(|| at(m)) },
        7 => What::CutOrdered { task },
        8 => What::SubstituteOrdered { task },
        9 => What::TaskRetracted { task, kind: Retracted::Progress },
        _ => What::TaskRetracted { task, kind: Retracted::Way },
    });
    prop_oneof![orders, means, tasks]
}

/// Events that become known at different times, in that order.
fn some_events() -> impl Strategy<Value = Vec<Event>> {
    proptest::collection::vec((some_what(), 1_i64..4), 0..25).prop_map(|list| {
        let mut known = 0;
        list.into_iter()
            .map(|(what, later)| {
                known += later;
                event(known, what)
            })
            .collect()
    })
}

proptest! {
    #[test]
    fn the_order_in_the_file_does_not_matter(
        (events, mixed) in some_events().prop_flat_map(|e| (Just(e.clone()), Just(e).prop_shuffle())),
        now in 0_i64..80,
    ) {
        assert_eq!(situation(&mixed, at(now)), situation(&events, at(now)));
    }

    #[test]
    fn what_became_known_later_does_not_count(events in some_events(), now in 0_i64..80) {
        let known: Vec<Event> = events.iter().filter(|e| e.known <= at(now)).cloned().collect();
        assert_eq!(situation(&events, at(now)), situation(&known, at(now)));
    }

    #[test]
    fn the_same_event_twice_changes_nothing(events in some_events(), pick in any::<proptest::sample::Index>()) {
        let mut twice = events.clone();
        if !events.is_empty() {
            let mut again = pick.get(&events).clone();
            again.place.line = 99;
            twice.push(again);
        }
        assert_eq!(situation(&twice, at(100)), situation(&events, at(100)));
    }

    #[test]
    fn a_task_never_starts_after_it_is_done(events in some_events()) {
        for task in situation(&events, at(100)).tasks.values() {
            if let (Some(started), Some(done)) = (&task.started, task.done_at()) {
                assert!(started.at <= done);
            }
        }
    }

    #[test]
    fn outages_are_in_order_and_none_is_empty(events in some_events()) {
        for list in situation(&events, at(100)).means.values() {
            assert!(!list.is_empty());
            assert!(list.is_sorted_by_key(|outage| outage.from));
            assert!(list.iter().all(|outage| outage.until.is_none_or(|until| outage.from < until)));
        }
    }

    #[test]
    fn a_member_is_in_service_when_it_has_just_come_back(events in some_events(), minute in minute()) {
        let mut events = events;
        events.push(event(99, back(minute)));
        let now = situation(&events, at(100));
        assert!(now.means.get("T3").is_none_or(|list| list.iter().all(|outage| !outage.holds(at(minute)))));
    }

    #[test]
    fn only_now_advances_and_nothing_but_now_changes(events in some_events(), later in 0_i64..1000) {
        let (first, then) = (situation(&events, at(200)), situation(&events, at(200 + later)));
        assert_eq!(Situation { now: first.now, ..then }, first);
    }
}

/// Events numbered from 1, each known at its minute and told by its voice.
fn numbered(events: &[(i64, &str, What)]) -> Vec<Event> {
    let one = |(number, (known, by, what)): (usize, &(i64, &str, What))| Event {
        number,
        by: (*by).into(),
        ..event(*known, what.clone())
    };
    (1..).zip(events).map(one).collect()
}

#[test]
fn a_withdrawn_event_counts_as_never_said_but_not_before_that_is_known() {
    let events = numbered(&[(1, "A", done(1)), (5, "A", What::Withdrawn { event: 1 })]);
    assert_eq!(situation(&events, at(4)).tasks["T"].done_at(), Some(at(1)));
    let then = situation(&events, at(5));
    assert!(then.tasks.is_empty());
    // A plan is made at each time at which something became known, a withdrawn report too.
    assert_eq!(then.changes, [at(1), at(5)]);
}

#[test]
fn a_withdrawal_that_is_itself_withdrawn_lets_the_event_count_again() {
    let events = numbered(&[
        (1, "A", done(1)),
        (2, "A", What::Withdrawn { event: 1 }),
        (3, "A", What::Withdrawn { event: 2 }),
    ]);
    assert_eq!(situation(&events, at(3)).tasks["T"].done_at(), Some(at(1)));
}

#[test]
fn what_is_withdrawn_can_be_said_again_in_the_same_minute() {
    let events = numbered(&[(1, "A", done(1)), (1, "A", What::Withdrawn { event: 1 }), (1, "A", done(1))]);
    assert_eq!(situation(&events, at(1)).tasks["T"].done_at(), Some(at(1)));
}

#[test]
fn an_advisory_taken_by_mistake_and_withdrawn_is_not_in_force() {
    let take = |file: &str| What::AdvisoryTaken(Taking::of(file));
    let events =
        numbered(&[(1, "A", take("1")), (2, "A", take("2")), (3, "A", What::Withdrawn { event: 2 })]);
    let files: Vec<String> =
        situation(&events, at(3)).advisories.into_iter().map(|taken| taken.file).collect();
    assert_eq!(files, ["1"]);
}

#[test]
fn events_folded_one_by_one_give_the_same_situation_as_all_at_once() {
    let events = numbered(&[
        (1, "A", started(1)),
        (2, "A", out(2, None)),
        (3, "A", done(3)),
        (4, "A", What::Withdrawn { event: 3 }),
        (5, "A", What::TaskLeft { task: "T".into(), left: Minutes::new(30) }),
        (6, "A", What::Withdrawn { event: 4 }),
        (6, "A", back(6)),
    ]);
    let mut fold = Fold::default();
    for event in in_order(&events) {
        fold.add(event);
        fold.wait_until(event.known);
    }
    assert_eq!(*fold.situation(), situation(&events, at(6)));
}

#[test]
fn an_order_that_awaits_a_second_person_counts_from_another_persons_confirmation() {
    let mut events = numbered(&[
        (1, "Harbour Master", declared("S4", 1)),
        (2, "Harbour Master", What::Confirmed { event: 1 }),
        (3, "Deputy", What::Confirmed { event: 1 }),
    ]);
    events[0].awaits_second = true;
    let waiting = situation(&events, at(2));
    assert!(waiting.stages.is_empty() && waiting.waiting.contains_key(&1));
    let confirmed = situation(&events, at(3));
    assert_eq!(confirmed.order_in_force(), Some("S4"));
    assert!(confirmed.waiting.is_empty());
    // Two persons of one title are told apart by their names.
    events[0].name = "A. Quill".into();
    events[1].name = "B. Sallow".into();
    assert_eq!(situation(&events, at(2)).order_in_force(), Some("S4"));
}

#[test]
fn what_is_left_counts_from_when_it_is_known() {
    let left = |minutes| What::TaskLeft { task: "T".into(), left: Minutes::new(minutes) };
    assert_eq!(told_of_task(&[(100, left(60))]).takes.unwrap().value, Minutes::new(60));
    // Begun at 40, known at 100 that 60 minutes are left: 120 in all.
    assert_eq!(told_of_task(&[(50, started(40)), (100, left(60))]).takes.unwrap().value, Minutes::new(120));
}

#[test]
fn a_place_is_out_of_use_until_it_can_be_used_again() {
    let unusable = |from, until: Option<i64>| {
        What::Told(Fact::Unusable { spot: "Q1".into(), from: at(from), until: until.map(at) })
    };
    let usable = |from| What::Told(Fact::Usable { spot: "Q1".into(), from: at(from) });
    assert_eq!(told(&[(1, unusable(5, None))]).unusable("Q1"), Some((at(5), None)));
    assert_eq!(told(&[(1, unusable(5, None)), (2, usable(9))]).unusable("Q1"), Some((at(5), Some(at(9)))));
    assert_eq!(told(&[(1, unusable(5, None)), (2, usable(3))]).unusable("Q1"), None);
    assert_eq!(told(&[(1, unusable(5, None))]).unusable("Q2"), None);
}

#[test]
fn declaring_a_stage_ends_the_hold_on_it() {
    let hold = What::Ruled(Ruling::Hold { stage: "S2".into(), until: None });
    assert_eq!(told(&[(1, hold.clone())]).rulings.len(), 1);
    assert!(told(&[(1, hold), (2, declared("S2", 2))]).rulings.is_empty());
}
