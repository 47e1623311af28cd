//! The invented port of many ships: its schedules keep every rule, and it is placed whole where there is time.

use crate::checker::violations;
use crate::port::port;
use snugdown::schedule::search::{Effort, solve};

#[test]
fn a_port_of_fifty_ships_is_placed_whole_in_72_hours() {
    let problem = port(50, 72, 1);
    let schedule = solve(&problem, Effort::usual(problem.tasks.len())).unwrap();
    assert_eq!(violations(&problem, &schedule), Vec::<String>::new());
    assert!(schedule.is_proved());
}

#[test]
fn a_port_that_is_too_tight_gives_up_something_and_breaks_no_rule() {
    for seed in 1..4 {
        let problem = port(50, 40, seed);
        let schedule = solve(&problem, Effort { seed, decodes: 40 }).unwrap();
        assert_eq!(violations(&problem, &schedule), Vec::<String>::new());
        assert_eq!(schedule.score.classes[0].given_up, 0);
    }
}
