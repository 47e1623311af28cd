//! Plans of a small port, from its files to the finished sheet.
#![expect(clippy::print_stdout, reason = "for looking at")]

mod common;

use common::Reading;

const STORM: &str = include_str!("data/small-port/approach.txt");

#[test]
fn show() {
    let mut reading = Reading::folder("tests/data/small-port");
    reading.add_forecast("01.txt", STORM);
    reading.set_events("[[event]]\nat = \"2026-09-16T12:05-03:00\"\nby = \"Duty officer\"\ntook_advisory = { file = \"01.txt\" }\n");
    let history = reading.plans("2026-09-16T12:10-03:00");
    let plan = history.latest().unwrap();
    let setting = snugdown::output::setting::Setting::of(&reading.port, &reading.rules);
    println!("{}", snugdown::output::plan_text::plan_text(plan, &setting, 120));
}
