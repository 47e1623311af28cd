//! Prints how long the program's work takes, how that grows, and how much memory it has needed at most.
//!
//! `cargo run --release --example measure [PORT-FOLDER]...`: arrivals, the whole plan of each folder, and an invented port
//! of 100 to 2,000 tasks.

#![expect(clippy::print_stdout, reason = "a measuring program shows what it measured")]
#![allow(clippy::unwrap_used, clippy::panic, reason = "a measuring program that cannot measure must fail")]

#[path = "../tests/common/mod.rs"]
mod common;
#[path = "../tests/large_port/mod.rs"]
mod large_port;
#[path = "../tests/storms/mod.rs"]
mod storms;

use large_port::{EARLY, LATE, large_port};
use snugdown::arrival::odds::{Draw, ask_on};
use snugdown::arrival::question::Question;
use snugdown::cli::load::load;
use snugdown::cli::planning::plans_until;
use snugdown::cli::port_args::PortArgs;
use snugdown::plan::fold::plan_at;
use snugdown::plan::inputs::Inputs;
use snugdown::plan::sheet::{Plan, TaskState};
use snugdown::time::moment::Moment;
use std::path::Path;
use std::time::Instant;

fn main() {
    arrivals();
    for folder in std::env::args().skip(1) {
        whole_folder(Path::new(&folder));
    }
    for (word, taken) in [("early", EARLY), ("late", LATE)] {
        for ships in [20, 40, 100, 200, 400] {
            large(ships, word, taken);
        }
    }
}

/// The least of five runs, or of as many as fit into two seconds, in milliseconds; with the last result.
fn timed<T>(mut run: impl FnMut() -> T) -> (f64, T) {
    let mut best = f64::INFINITY;
    let (begun, mut runs) = (Instant::now(), 0);
    loop {
        let start = Instant::now();
        let result = run();
        best = best.min(start.elapsed().as_secs_f64() * 1000.0);
        runs += 1;
        if runs == 5 || begun.elapsed().as_secs() >= 2 {
            return (best, result);
        }
    }
}

/// What the process has needed at most, where the system tells.
fn peak() -> String {
    let status = std::fs::read_to_string("/proc/self/status").unwrap_or_default();
    let line = status.lines().find_map(|line| line.strip_prefix("VmHWM:"));
    line.map_or_else(|| String::from("not told"), |kib| kib.trim().to_owned())
}

/// How the odds grow with scenarios, places and limits; the first rows on one core.
fn arrivals() {
    let storm = storms::full_forecast();
    let table = storms::shipped().for_advisory(&storm);
    let cases = [
        (1, 1_000, 1_000, 20, 3),
        (1, 1_000, 1_000, 20, 8),
        (1, 1_000, 1_000, 20, 1),
        (1, 1_000, 1_000, 40, 3),
        (1, 2_000, 2_000, 20, 3),
        (1, 1_000, 10_000, 20, 3),
        (2, 10_000, 10_000, 20, 3),
        (2, 10_000, 10_000, 100, 3),
    ];
    for (threads, scenarios, most, places, limits) in cases {
        let asked = questions(places, limits);
        let (ms, _) = timed(|| ask_on(threads, &storm, &table, &asked, Draw { scenarios, most }));
        println!(
            "arrivals, {scenarios} to {most} scenarios x {places} places x {limits} limits, {threads} threads: {ms:.1} ms, \
             peak {}",
            peak()
        );
    }
}

/// Places on both sides of the storm's track, ten to a row, with limits from 25 kt up.
fn questions(places: u32, limits: u32) -> Vec<Question> {
    let at = |i: u32| {
        let (row, column) = (f64::from(i % 10), f64::from(i / 10));
        storms::at(18.0 + row * 1.2, -64.0 - column * 8.0 / f64::from(places.div_ceil(10)) - row * 0.8)
    };
    // 34, 50 and 64 kt where there are three, as advisories have them.
    let limit = |n: u32| if limits == 3 { [34.0, 50.0, 64.0][n as usize] } else { 25.0 + 6.0 * f64::from(n) };
    (0..places)
        .flat_map(|i| (0..limits).map(move |n| storms::ask_about(&format!("{i} {n}"), at(i), limit(n))))
        .collect()
}

fn told(plan: &Plan) -> String {
    let count = |state| plan.tasks.iter().filter(|line| line.state == state).count();
    format!(
        "{} planned, {} given up, {} reliefs, {} breaches, peak {}",
        count(TaskState::Planned),
        count(TaskState::GivenUp),
        plan.reliefs.len(),
        plan.breaches.len(),
        peak()
    )
}

/// Reading a folder and making all plans of its record, up to its exercise clock.
fn whole_folder(folder: &Path) {
    let (ms, history) = timed(|| {
        let loaded = load(&PortArgs::of(folder.to_path_buf())).unwrap_or_else(|failure| panic!("{failure}"));
        let now = Moment::at_or_after(loaded.port.exercise.unwrap());
        plans_until(&loaded, now)
    });
    let plans = history.plans.len();
    println!("{}, {plans} plans: {ms:.0} ms; {}", folder.display(), told(history.latest().unwrap()));
}

fn large(ships: usize, word: &str, taken: &str) {
    let reading = large_port(ships, taken);
    let inputs = Inputs { draw: Draw::default(), ..reading.inputs() };
    let now = reading.moment(taken);
    let (ms, history) = timed(|| plan_at(&inputs, now));
    let tasks = ships * 5;
    println!("large port, {word}, {tasks} tasks: {ms:.0} ms; {}", told(history.latest().unwrap()));
}
