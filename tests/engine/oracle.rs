//! The engine against the independent check and the slow obvious solver, over random problems.

use crate::brute::least_given_up;
use crate::checker::violations;
use crate::instances::random;
use snugdown::schedule::search::{Effort, solve};

#[test]
fn every_schedule_of_thousands_of_random_problems_keeps_every_rule() {
    for seed in 0..4_000 {
        let problem = random(seed, 12);
        for decodes in [1, 60] {
            let schedule = solve(&problem, Effort { seed, decodes }).unwrap();
            assert_eq!(violations(&problem, &schedule), Vec::<String>::new(), "seed {seed}, {decodes} decodes");
        }
    }
}

#[test]
fn a_schedule_never_gives_up_less_than_the_slow_solver_and_nearly_always_as_little() {
    let (mut told, mut met, mut proved) = (0, 0, 0);
    for seed in 10_000..12_000 {
        let problem = random(seed, 6);
        let Some(least) = least_given_up(&problem) else { continue };
        let schedule = solve(&problem, Effort::usual(problem.tasks.len())).unwrap();
        let given_up: Vec<u64> = schedule.score.classes.iter().map(|class| class.given_up).collect();
        let bound: Vec<u64> = schedule.bound.classes.iter().map(|class| class.given_up).collect();
        assert!(given_up >= least, "seed {seed}: {given_up:?} beats {least:?}");
        assert!(bound <= least, "seed {seed}: the bound {bound:?} is above {least:?}");
        told += 1;
        met += usize::from(given_up == least);
        proved += usize::from(given_up == bound);
        if given_up != least {
            println!("seed {seed}: {given_up:?} against {least:?}");
        }
    }
    println!("gives up the least in {met} of {told} problems; {proved} proved by the bound");
    assert!(told > 1_800 && met * 100 >= told * 95);
}
