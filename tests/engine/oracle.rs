//! The engine against the independent check and the slow obvious solver, over random problems.

use crate::brute::best_classes;
use crate::checker::violations;
use crate::instances::random;
use snugdown::schedule::search::{Effort, solve};

#[test]
fn every_schedule_of_thousands_of_random_problems_keeps_every_rule() {
    for seed in 0..4_000 {
        let problem = random(seed, 12);
        for decodes in [1, 60] {
            let schedule = solve(&problem, Effort { seed, decodes }).unwrap();
            assert_eq!(
                violations(&problem, &schedule),
                Vec::<String>::new(),
                "seed {seed}, {decodes} decodes"
            );
        }
    }
}

#[test]
fn a_schedule_is_never_safer_than_the_slow_solver_finds_and_nearly_always_as_safe() {
    let (mut told, mut met, mut proved) = (0, 0, 0);
    for seed in 10_000..12_000 {
        let problem = random(seed, 6);
        let Some(best) = best_classes(&problem) else { continue };
        let schedule = solve(&problem, Effort::usual(problem.tasks.len())).unwrap();
        let (found, bound) = (&schedule.score.classes, &schedule.bound.classes);
        assert!(*found >= best, "seed {seed}: {found:?} beats {best:?}");
        assert!(*bound <= best, "seed {seed}: the bound {bound:?} is above {best:?}");
        told += 1;
        met += usize::from(*found == best);
        proved += usize::from(found == bound);
        if *found != best {
            println!("seed {seed}: {found:?} against {best:?}");
        }
    }
    println!("as safe as can be in {met} of {told} problems, {proved} of them proved by the bound");
    assert!(told > 1_800 && met * 100 >= told * 99);
}
