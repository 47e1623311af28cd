//! How long the engine takes on an invented port: one schedule, and a whole search with the usual effort.
//!
//! `cargo bench --bench placing` prints each for 25 to 500 ships (100 to 2,000 tasks), loose (72 h) and tight (40 h).

#![expect(clippy::print_stdout, reason = "a measuring program shows what it measured")]

#[path = "../tests/engine/instances.rs"]
#[allow(dead_code, reason = "the tests use the rest")]
mod instances;
#[path = "../tests/engine/port.rs"]
mod port;

use divan::Bencher;
use port::port;
use snugdown::schedule::search::{Effort, solve};

const CASES: [(usize, i64); 8] =
    [(25, 72), (25, 40), (50, 72), (50, 40), (125, 40), (250, 40), (500, 72), (500, 40)];

fn main() {
    divan::main();
}

/// Reading the problem, its bounds, and one schedule with its causes.
#[divan::bench(args = CASES)]
fn one_schedule(bencher: Bencher, (ships, hours): (usize, i64)) {
    let problem = port(ships, hours, 1);
    bencher.bench(|| solve(&problem, Effort { seed: 1, decodes: 1 }));
}

/// A search with the usual effort.
#[divan::bench(args = CASES, sample_count = 10)]
fn usual_search(bencher: Bencher, (ships, hours): (usize, i64)) {
    let problem = port(ships, hours, 1);
    let tasks = problem.tasks.len();
    if let Ok(schedule) = solve(&problem, Effort::usual(tasks)) {
        let (score, bound) = (&schedule.score, &schedule.bound);
        println!(
            "{tasks} tasks, {} decodes: {:?}, bound {:?}",
            schedule.decodes, score.classes, bound.classes
        );
    }
    bencher.bench(|| solve(&problem, Effort::usual(tasks)));
}
