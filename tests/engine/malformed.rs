//! Problems that are not well formed: every fault is named, and the engine refuses them.

use crate::instances::{empty, plain, random, slot, slots, task};
use snugdown::schedule::check::{Fault, Kind, Length, Place, Refused, faults};
use snugdown::schedule::problem::{
    Direction, Duty, Fixed, IfGivenUp, Issued, Lane, LaneUse, Link, LinkKind, Member, Need, Pool, Problem,
    Way,
};
use snugdown::schedule::search::{Effort, solve};
use snugdown::time::moment::Minutes;
use snugdown::time::windows::WindowSet;

fn small() -> Problem {
    let mut problem = empty(slot(10));
    let zero = Minutes::ZERO;
    let duty = Some(Duty { at_most: slots(3), then_rest: slots(3) });
    let member = Member { available: WindowSet::always(), duty, worked: vec![] };
    problem.pools.push(Pool { members: vec![member] });
    problem.lanes.push(Lane { spacing: vec![vec![zero]], clearance: zero });
    problem.windows.push(WindowSet::always());
    let need = Need { pool: 0, count: 1, able: vec![0], before: zero, after: zero };
    let passage = LaneUse { lane: 0, enter: zero, leave: slots(1), direction: Direction::In, class: 0 };
    let way = Way { needs: vec![need], lane: Some(passage), ..plain(slots(1)) };
    problem.tasks = vec![task(way.clone()), task(way)];
    let (kind, lag, if_given_up) = (LinkKind::FinishStart, zero, IfGivenUp::GiveUpToo);
    problem.links.push(Link { before: 0, after: 1, kind, lag, if_given_up });
    problem
}

fn not_there(by: Place, what: Kind) -> Fault {
    Fault::NotThere { by, what, index: 9 }
}

/// One kind of damage and the fault that names it.
type Damage = (fn(&mut Problem), Fault);

#[test]
fn every_kind_of_fault_is_named_and_refused() {
    let minus = slots(-1);
    assert_eq!(minus, Minutes::new(-10));
    let first = Place::Way(0, 0);
    let need = Place::Need(0, 0, 0);
    let negative = |at, length| Fault::Negative { at, length };
    let damages: Vec<Damage> = vec![
        (|p| p.horizon = slot(-1), Fault::HorizonBeforeNow),
        (|p| p.least_move = slots(-1), Fault::NegativeLeastMove),
        (|p| p.tasks[0].ways.clear(), Fault::NoWays { task: 0 }),
        (|p| p.tasks[0].ways[0].takes = slots(-1), negative(first, Length::Takes)),
        (|p| p.tasks[0].ways[0].whole_in.push(9), not_there(first, Kind::Window)),
        (|p| p.tasks[0].ways[0].start_in.push(9), not_there(first, Kind::Window)),
        (|p| p.tasks[0].ways[0].needs[0].pool = 9, not_there(need, Kind::Pool)),
        (|p| p.tasks[0].ways[0].needs[0].able.push(9), not_there(need, Kind::Member)),
        (|p| p.tasks[0].ways[0].needs[0].able.push(0), Fault::Repeated { at: need, member: 0 }),
        (|p| p.tasks[0].ways[0].needs[0].before = slots(-1), negative(need, Length::Before)),
        (|p| p.tasks[0].ways[0].needs[0].after = slots(-1), negative(need, Length::After)),
        (|p| passage(p).lane = 9, not_there(first, Kind::Lane)),
        (|p| passage(p).class = 9, not_there(first, Kind::LaneClass)),
        (|p| passage(p).enter = slots(-1), negative(first, Length::Enter)),
        (|p| passage(p).enter = slots(2), negative(first, Length::Passage)),
        (|p| p.lanes[0].spacing[0][0] = slots(-1), negative(Place::Lane(0), Length::Spacing)),
        (|p| p.lanes[0].clearance = slots(-1), negative(Place::Lane(0), Length::Clearance)),
        (|p| p.lanes[0].spacing[0].clear(), Fault::SpacingNotSquare { lane: 0 }),
        (|p| duty(p).at_most = Minutes::ZERO, negative(Place::Member(0, 0), Length::Duty)),
        (|p| duty(p).then_rest = slots(-1), negative(Place::Member(0, 0), Length::Rest)),
        (|p| p.links[0].after = 9, not_there(Place::Link(0), Kind::Task)),
        (|p| p.links[0].after = 0, Fault::Circle { tasks: vec![0] }),
        (|p| fix(p, 9, 1, 0), not_there(Place::Fixed(0), Kind::Way)),
        (|p| fix(p, 0, 1, 9), not_there(Place::Fixed(0), Kind::Member)),
        (|p| fix(p, 0, -1, 0), Fault::FixedBackwards { task: 0 }),
        (|p| issue(p, vec![]), Fault::MembersDoNotMatch { at: Place::Issued(0) }),
        (|p| issue(p, vec![vec![0, 0]]), Fault::Repeated { at: Place::Issued(0), member: 0 }),
    ];
    assert_eq!(faults(&small()), vec![]);
    for (damage, fault) in damages {
        let mut problem = small();
        damage(&mut problem);
        assert!(faults(&problem).contains(&fault), "{fault:?} is not among {:?}", faults(&problem));
        assert!(matches!(solve(&problem, Effort::usual(2)), Err(Refused::Malformed(_))));
    }
}

fn passage(problem: &mut Problem) -> &mut LaneUse {
    problem.tasks[0].ways[0].lane.as_mut().unwrap()
}

fn duty(problem: &mut Problem) -> &mut Duty {
    problem.pools[0].members[0].duty.as_mut().unwrap()
}

fn fix(problem: &mut Problem, way: usize, finish: i64, member: usize) {
    let members = vec![vec![member]];
    problem.tasks[0].fixed = Some(Fixed { way, start: slot(0), finish: slot(finish), members });
}

fn issue(problem: &mut Problem, members: Vec<Vec<usize>>) {
    problem.tasks[0].issued = Some(Issued { way: 0, start: slot(0), members });
}

#[test]
fn a_problem_with_times_at_the_ends_of_the_calendar_is_solved_all_the_same() {
    for seed in 0..200 {
        let mut problem = random(seed, 6);
        problem.horizon = snugdown::time::moment::Moment::LATEST;
        problem.tasks[0].deadline = Some(snugdown::time::moment::Moment::EARLIEST);
        problem.tasks[1].release = snugdown::time::moment::Moment::LATEST;
        problem.tasks[1].ways[0].takes = Minutes::new(i64::MAX);
        assert!(solve(&problem, Effort { seed, decodes: 20 }).is_ok());
    }
}
