//! Plans built by hand: a rich one, an empty one, and any number of odd ones.

use proptest::prelude::{Just, Strategy, any, prop_oneof};
use snugdown::output::setting::Setting;
use snugdown::plan::sheet::{
    AdvisoryInForce, Arrival, Breach, ChainLink, Clash, DutyLine, DutyState, GivenUp, JointChance, Overtaken,
    Plan, Point, Relief, ReliefKind, ReliefStep, StageLine, StageStatus, TaskLine, TaskState,
};
use snugdown::rules::stage::StageDirection;
use snugdown::rules::task::Stake;
use snugdown::time::clock::PortClock;
use snugdown::time::moment::{Minutes, Moment};
use snugdown::units::chance::Chance;
use snugdown::units::speed::Knots;
use snugdown::units::wind::{Averaging, WindLimit, standard_height};

/// Names that break careless output: markup, quotes, separators, a line end, text turned round, wide characters.
pub const ODD: &str = "<b>&\"';,\n\u{202e}\u{1b}[2J⚓ 港";

pub fn clock() -> PortClock {
    PortClock::of("Etc/GMT+3").unwrap()
}

pub fn setting(clock: &PortClock) -> Setting<'_> {
    Setting {
        port: "Quillhaven",
        invented: "INVENTED - no such port, no such storm",
        is_exercise: true,
        authority: "Harbour Master",
        official_source: "the national meteorological service",
        rules: "Quillhaven by-law 7",
        effective: "2026-06-01",
        margin: Minutes::hours(1),
        clock,
        record: "",
    }
}

/// A local time of the port: day of September 2026, hour, minute.
pub fn at(day: i64, hour: i64, minute: i64) -> Moment {
    let first = PortClock::utc().read("2026-09-01T03:00Z").unwrap();
    Moment::at_or_before(first) + Minutes::new((day - 1) * 1440 + hour * 60 + minute)
}

pub fn gale() -> WindLimit {
    WindLimit { speed: Knots::GALE, averaging: Averaging::Minute1, height: standard_height() }
}

pub fn empty() -> Plan {
    Plan {
        now: at(17, 6, 20),
        advisory: None,
        other_advisories: vec![],
        warnings: vec![],
        arrivals: vec![],
        stages: vec![],
        tasks: vec![],
        reliefs: vec![],
        duties: vec![],
        joint: None,
        if_adopted: Vec::new(),
        calls: Vec::new(),
        overtaken: vec![],
        clashes: vec![],
        breaches: vec![],
        notes: vec![],
    }
}

pub fn task(id: &str, name: &str, state: TaskState) -> TaskLine {
    TaskLine {
        id: id.into(),
        name: name.into(),
        state,
        start: None,
        finish: None,
        latest_start: None,
        deadline: None,
        due: None,
        takes: Minutes::new(90),
        members: vec![],
        who: String::new(),
        at: String::new(),
        approvers: vec![],
        confirm: String::new(),
        stake: Stake::Harm,
        caught: None,
        if_declared: None,
        is_ordered: false,
        is_unreported: false,
        cut: None,
        stands_in_for: None,
        late_by: Minutes::ZERO,
        chain: vec![],
        chain_from: at(17, 6, 20),
        given_up: None,
        basis: "common practice, no source; unconfirmed".into(),
    }
}

fn planned(id: &str, name: &str, start: Moment, takes: i64, latest: Moment) -> TaskLine {
    TaskLine {
        start: Some(start),
        finish: Some(start + Minutes::new(takes)),
        latest_start: Some(latest),
        takes: Minutes::new(takes),
        caught: Some(Chance::share(3, 1000)),
        ..task(id, name, TaskState::Planned)
    }
}

fn pools(list: &[(&str, &[&str])]) -> Vec<(String, Vec<String>)> {
    list.iter().map(|(pool, names)| ((*pool).into(), names.iter().map(|n| (*n).into()).collect())).collect()
}

fn link(what: &str, minutes: i64) -> ChainLink {
    ChainLink { what: what.into(), minutes: Minutes::new(minutes) }
}

fn given_up_sailing() -> TaskLine {
    TaskLine {
        deadline: Some(at(18, 2, 0)),
        takes: Minutes::new(90),
        who: "pilot office".into(),
        given_up: Some(GivenUp {
            why: "ready Thu 19:00, after her tide ends at 17:35, and the next tide opens after the port must be clear".into(),
            would_finish: Some(at(18, 4, 10)),
            late_by: Some(Minutes::new(130)),
            is_proved: true,
            chain: vec![link("V01/cargo", 760), link("waits for the tide", 460), link("V01/sail", 90)],
            chain_from: at(17, 6, 20),
        }),
        ..task("V01/sail", "Ternaby Reach to sea", TaskState::GivenUp)
    }
}

fn advisory() -> AdvisoryInForce {
    AdvisoryInForce {
        file: "advisories/12.txt".into(),
        storm: "OSKELA".into(),
        issuer: "INVENTED FORECAST OFFICE".into(),
        number: Some(12),
        is_corrected: false,
        issued: at(17, 6, 0),
        known: at(17, 6, 5),
        next_due: Some(at(17, 12, 0)),
        age: Minutes::new(20),
        is_overdue: false,
        is_last: false,
        assumed: vec![],
        forecast_end: at(22, 3, 0),
    }
}

fn arrival(place: &str, name: &str, is_reference: bool) -> Arrival {
    Arrival {
        place: place.into(),
        place_name: name.into(),
        is_reference,
        wind: gale(),
        adopted: is_reference.then(|| at(18, 22, 0)),
        computed: Some(at(18, 14, 0)),
        storm: None,
        earliest: Point::At(at(18, 14, 3)),
        likely: Point::At(at(18, 20, 17)),
        latest: Point::At(at(19, 9, 41)),
        single_track: Some(at(18, 20, 0)),
        chance: Chance::share(71, 100),
        already: Chance::NEVER,
        over_by: Point::AfterEnd,
    }
}

fn stage(id: &str, name: &str, status: StageStatus, due: Option<Moment>) -> StageLine {
    StageLine {
        id: id.into(),
        name: name.into(),
        direction: StageDirection::Closing,
        status,
        due,
        because: due.map_or(String::new(), |_| "34 kt within 24 h at Pilot boarding place".into()),
        declared: (status == StageStatus::Declared).then(|| (at(16, 12, 0), "Harbour Master".into())),
        lifted: None,
        port_status: vec![("inbound".into(), "closed".into()), ("outbound".into(), "by permission".into())],
        source: "by-law 7, para 4".into(),
    }
}

fn tasks() -> Vec<TaskLine> {
    let mut secure =
        planned("V03/secure", "Secure Brackwell Tarn for sea", at(17, 6, 20), 150, at(17, 9, 18));
    secure.who = "master".into();
    secure.at = "J1".into();
    secure.confirm = "second person at each hatch".into();
    secure.is_unreported = true;
    let mut tow = planned("V13/tow", "Tow Oxbow Low to shelter", at(17, 7, 3), 240, at(17, 7, 4));
    tow.members = pools(&[("tug", &["T3", "T4"])]);
    tow.approvers = vec!["Harbour Master".into(), "works manager".into()];
    tow.state = TaskState::Planned;
    let mut sail = planned("V04/sail", "Lunden Gale to sea", at(17, 10, 0), 90, at(17, 14, 12));
    sail.members = pools(&[("pilot", &["P1"]), ("tug", &["T1", "T2"])]);
    sail.if_declared = Some("S3".into());
    sail.deadline = Some(at(18, 2, 0));
    let mut ordered = planned("V09/sail", "Merrow Star to sea", at(17, 18, 7), 90, at(17, 23, 0));
    ordered.is_ordered = true;
    let mut late = planned("H04", "Ask all ships what they intend", at(17, 9, 0), 60, at(17, 8, 0));
    late.due = Some(at(17, 9, 0));
    late.late_by = Minutes::new(60);
    let mut cut = planned("V05/cargo", "Corrigan Moor stops cargo", at(18, 9, 41), 480, at(18, 16, 0));
    cut.cut = Some("4,000 t left behind".into());
    let mut done = planned("H01", "Open the log", at(17, 6, 5), 15, at(17, 8, 0));
    done.state = TaskState::Done;
    let mut begun = planned("G01", "Stop empties in", at(17, 6, 0), 60, at(17, 8, 0));
    begun.state = TaskState::Started;
    let mut stays = task("V01/moor", "Extra moorings for Ternaby Reach", TaskState::NotNeeded);
    stays.stands_in_for = Some("V01/sail".into());
    let mut waiting = task("R03", "Sweep the channel", TaskState::Waiting);
    waiting.if_declared = Some("R".into());
    vec![given_up_sailing(), begun, secure, tow, late, sail, ordered, cut, stays, waiting, done]
}

/// A plan in which something of every kind happens.
pub fn rich() -> Plan {
    Plan {
        advisory: Some(advisory()),
        other_advisories: vec![],
        warnings: vec![],
        arrivals: vec![
            arrival("pilot-station", "Pilot boarding place", true),
            arrival("c1", "Greywether Container Terminal", false),
        ],
        stages: vec![
            stage("S1", "Watch", StageStatus::Superseded, Some(at(15, 14, 0))),
            stage("S2", "Prepare", StageStatus::Declared, Some(at(16, 14, 0))),
            stage("S3", "Clear the port", StageStatus::Computed, Some(at(17, 11, 17))),
            stage("R", "Recovery", StageStatus::NotDue, None),
        ],
        tasks: tasks(),
        reliefs: vec![Relief {
            steps: vec![
                ReliefStep {
                    kind: ReliefKind::Cut,
                    about: "V01/cargo".into(),
                    what: "stop cargo on V01 early".into(),
                    price: "260 container moves left behind".into(),
                },
                ReliefStep {
                    kind: ReliefKind::OneMore,
                    about: "pilot".into(),
                    what: "one more pilot".into(),
                    price: String::new(),
                },
            ],
            relieves: vec!["V01/sail".into()],
            leaves: vec!["V08/sail".into()],
            gives_up: Vec::new(),
            decide_by: at(17, 12, 3),
        }],
        duties: vec![DutyLine {
            id: "D1".into(),
            stage: "S2".into(),
            who: "masters".into(),
            act: "say whether they sail or stay".into(),
            by: Some(at(17, 12, 0)),
            state: DutyState::Open,
            missing: vec![],
            source: "by-law 7, para 5".into(),
        }],
        joint: Some(JointChance { chance: Chance::share(93, 100), tasks: 42, scenarios: 1000 }),
        if_adopted: Vec::new(),
        calls: Vec::new(),
        overtaken: vec![Overtaken {
            place: "pilot-station".into(),
            adopted: at(18, 22, 0),
            computed: at(18, 14, 0),
            endangers: vec!["V05/cargo".into(), "V09/sail".into()],
        }],
        clashes: vec![Clash {
            task: "V09/sail".into(),
            what: "her master reports ready at 19:00 only".into(),
        }],
        notes: vec!["advisory 11 was taken twice; the first taking counts".into()],
        ..empty()
    }
}

/// Every text of the rich plan replaced by an odd name.
pub fn odd() -> Plan {
    let mut plan = rich();
    for task in &mut plan.tasks {
        task.id = ODD.into();
        task.name = ODD.into();
        task.who = ODD.into();
        task.at = ODD.into();
        task.approvers = vec![ODD.into()];
        task.members = vec![(ODD.into(), vec![ODD.into()])];
    }
    for stage in &mut plan.stages {
        stage.id = ODD.into();
        stage.name = ODD.into();
        stage.because = ODD.into();
    }
    for arrival in &mut plan.arrivals {
        arrival.place_name = ODD.into();
    }
    plan.notes = vec![ODD.into()];
    plan.breaches = vec![Breach { code: "audit-overlap", about: ODD.into(), what: ODD.into() }];
    plan
}

fn some_name() -> impl Strategy<Value = String> {
    prop_oneof!["[A-Za-z0-9/ ]{0,12}", "[a-z]{40,120}", any::<String>(), Just(ODD.repeat(8))]
}

fn some_moment() -> impl Strategy<Value = Moment> {
    (-5000_i64..20_000).prop_map(|minutes| at(17, 6, 20) + Minutes::new(minutes))
}

fn some_task() -> impl Strategy<Value = TaskLine> {
    let state = prop_oneof![
        Just(TaskState::GivenUp),
        Just(TaskState::Planned),
        Just(TaskState::Planned),
        Just(TaskState::Started),
        Just(TaskState::Waiting),
        Just(TaskState::Done),
    ];
    (some_name(), some_name(), state, some_moment(), some_moment(), any::<(bool, bool, bool)>()).prop_map(
        |(id, name, state, start, latest, (is_unreported, is_late, is_gated))| {
            let mut task = TaskLine { state, ..planned(&id, &name, start, 90, latest) };
            task.is_unreported = is_unreported;
            task.late_by = Minutes::new(if is_late { 1_000_000 } else { 0 });
            task.if_declared = is_gated.then(|| name.clone());
            task.members = vec![(name.clone(), vec![id.clone(); 9])];
            task.who = name;
            if state == TaskState::GivenUp {
                task.given_up = given_up_sailing().given_up;
            }
            task
        },
    )
}

/// Plans of any size with names of any length.
pub fn some_plan() -> impl Strategy<Value = Plan> {
    let sizes = (0_usize..4, 0_usize..4, 0_usize..4);
    (proptest::collection::vec(some_task(), 0..60), some_name(), some_moment(), sizes, any::<bool>())
        .prop_map(|(tasks, name, when, (wide, deep, long), is_bare)| {
            let mut plan = if is_bare { empty() } else { rich() };
            plan.tasks = tasks;
            if let Some(advisory) = &mut plan.advisory {
                advisory.storm = name.clone();
                advisory.is_overdue = wide > 1;
                advisory.next_due = (deep > 0).then_some(when);
                advisory.age = plan.now - when;
            }
            for arrival in &mut plan.arrivals {
                arrival.place_name = name.clone();
                arrival.is_reference = true;
                arrival.adopted = (wide > 0).then_some(when);
                arrival.already = Chance::share(deep, 10);
                arrival.latest = if long > 1 { Point::AfterEnd } else { Point::At(when) };
            }
            for stage in &mut plan.stages {
                stage.id = name.clone();
                stage.name = name.clone();
                stage.due = Some(when);
            }
            plan.reliefs = plan.reliefs.iter().cycle().take(plan.reliefs.len() * wide).cloned().collect();
            plan.overtaken =
                plan.overtaken.iter().cycle().take(plan.overtaken.len() * deep).cloned().collect();
            plan.duties = plan.duties.iter().cycle().take(plan.duties.len() * long * 5).cloned().collect();
            plan.breaches = vec![Breach { code: "audit-x", about: name.clone(), what: name }; long];
            plan
        })
}
