//! How long a whole plan takes: odds, graph, search, reliefs and audit, for the small port and for an invented large one.
//!
//! "Early" there is time for everything; "late" there is not, and reliefs are searched for.

#[path = "../tests/common/mod.rs"]
mod common;
#[path = "../tests/large_port/mod.rs"]
mod large_port;

use common::Reading;
use divan::Bencher;
use large_port::{EARLY, LATE, large_port};
use snugdown::arrival::odds::Draw;
use snugdown::plan::fold::plan_at;
use snugdown::plan::inputs::Inputs;

fn main() {
    divan::main();
}

/// The plan that the commands would make.
fn plan(bencher: Bencher, reading: &Reading, now: &str) {
    let inputs = Inputs { draw: Draw::default(), ..reading.inputs() };
    let now = reading.moment(now);
    bencher.bench_local(|| plan_at(&inputs, now));
}

#[divan::bench(sample_count = 10)]
fn small_port(bencher: Bencher) {
    let mut reading = Reading::folder("tests/data/small-port");
    reading.add_forecast("01.txt", include_str!("../tests/data/small-port/approach.txt"));
    let now = "2026-09-17T12:05-03:00";
    reading.set_events(&format!(
        "[[event]]\nat = \"{now}\"\nby = \"Duty officer\"\ntook_advisory = {{ file = \"01.txt\" }}\n"
    ));
    plan(bencher, &reading, now);
}

/// 100 to 2,000 tasks.
#[divan::bench(args = [20, 40, 100, 200, 400], sample_count = 3)]
fn large_port_early(bencher: Bencher, ships: usize) {
    plan(bencher, &large_port(ships, EARLY), EARLY);
}

/// The same, with reliefs.
#[divan::bench(args = [20, 40, 100, 200, 400], sample_count = 3)]
fn large_port_late(bencher: Bencher, ships: usize) {
    plan(bencher, &large_port(ships, LATE), LATE);
}
