//! How long the arrival odds take, and how that grows with scenarios, places and limits.

#[path = "../tests/storms/mod.rs"]
mod storms;

use snugdown::arrival::odds::{Draw, ask};
use snugdown::arrival::question::Question;
use storms::{ask_about, at, full_forecast, shipped};

fn main() {
    divan::main();
}

/// Places in rows along the made-up forecast's coast: some on the track, most beside it.
fn questions(places: usize, limits: &[f64]) -> Vec<Question> {
    (0..places)
        .flat_map(|i| {
            let position =
                at(18.0 + (i % 10) as f64 * 1.2, -64.0 - (i / 10) as f64 * 4.0 - (i % 10) as f64 * 0.8);
            limits.iter().map(move |limit| ask_about(&format!("{i} {limit}"), position, *limit))
        })
        .collect()
}

fn run(bencher: divan::Bencher, scenarios: usize, most: usize, questions: Vec<Question>) {
    let storm = full_forecast();
    let table = shipped().for_advisory(&storm);
    bencher.bench(|| ask(&storm, &table, &questions, Draw { scenarios, most }));
}

const GIVEN: [f64; 3] = [34.0, 50.0, 64.0];

#[divan::bench(args = [100, 1_000, 10_000], sample_count = 10)]
fn by_scenarios_20_places_3_limits(bencher: divan::Bencher, scenarios: usize) {
    run(bencher, scenarios, scenarios, questions(20, &GIVEN));
}

#[divan::bench(args = [1, 5, 20, 100], sample_count = 10)]
fn by_places_1000_scenarios_3_limits(bencher: divan::Bencher, places: usize) {
    run(bencher, 1_000, 1_000, questions(places, &GIVEN));
}

#[divan::bench(args = [1, 3, 10], sample_count = 10)]
fn by_limits_1000_scenarios_20_places(bencher: divan::Bencher, limits: usize) {
    let limits: Vec<f64> =
        [34.0, 50.0, 64.0, 22.0, 27.0, 30.0, 40.0, 45.0, 55.0, 70.0].into_iter().take(limits).collect();
    run(bencher, 1_000, 1_000, questions(20, &limits));
}

/// As the commands draw: up to 10,000 scenarios where a wind is rare.
#[divan::bench(sample_count = 10)]
fn as_shipped_20_places_3_limits(bencher: divan::Bencher) {
    run(bencher, 1_000, 10_000, questions(20, &GIVEN));
}
