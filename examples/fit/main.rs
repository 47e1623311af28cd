//! Fits the table of Atlantic forecast errors to an archive of past storms.
//!
//! `cargo run --release --example fit -- ARCHIVE [--without SEASON] --out FILE`
//!
//! FILE is a whole file of error tables: the fitted one in place of the Atlantic's, the others as they go with the program.

#![allow(
    clippy::print_stdout,
    clippy::unwrap_used,
    clippy::panic,
    reason = "a measuring program shows what it measured, and must fail if it cannot measure"
)]

#[path = "../archive/mod.rs"]
mod archive;

use archive::Archive;
use snugdown::arrival::errors::{COLUMNS, ErrorTable, SCALING};
use std::fmt::Write;
use std::path::PathBuf;

const SHIPPED: &str = include_str!("../../rules/forecast-errors.toml");

/// Between two tables of the file.
const TABLE: &str = "\n[[table]]\n";

fn main() {
    let mut words = std::env::args().skip(1);
    let (mut folder, mut without, mut out) = (None, None, None);
    while let Some(word) = words.next() {
        match word.as_str() {
            "--without" => without = words.next(),
            "--out" => out = words.next(),
            _ => folder = Some(PathBuf::from(word)),
        }
    }
    let folder = folder.unwrap_or_else(|| panic!("fit ARCHIVE [--without SEASON] --out FILE"));
    let archive = Archive::read(&folder);
    let seasons: Vec<String> =
        archive.seasons().into_iter().filter(|season| Some(season) != without.as_ref()).collect();
    let text = file(&archive::fitted::table(&archive, without.as_deref()), &seasons);
    match out {
        Some(out) => std::fs::write(&out, text).unwrap_or_else(|error| panic!("{out}: {error}")),
        None => println!("{text}"),
    }
}

/// The shipped file with the fitted table in place of its first one.
fn file(table: &ErrorTable, seasons: &[String]) -> String {
    let mut parts = SHIPPED.splitn(3, TABLE);
    let (head, rest) = (parts.next().unwrap(), parts.nth(1).unwrap());
    format!("{head}{TABLE}{}{TABLE}{rest}", body(table, seasons))
}

fn body(table: &ErrorTable, seasons: &[String]) -> String {
    let mut text = String::new();
    let (first, last) = (seasons.first().unwrap(), seasons.last().unwrap());
    writeln!(text, "# Written by the example `fit` from {} seasons, {first} to {last}.", seasons.len())
        .unwrap();
    writeln!(text, "name = \"Atlantic, fitted to {first}-{last}\"\nbasins = [\"AL\"]").unwrap();
    writeln!(
        text,
        "sources = [\"our own calculation from advisories of the US National Hurricane Center and HURDAT2, {first}-{last}\"]"
    )
    .unwrap();
    let leads = [0.0, 12.0, 24.0, 36.0, 48.0, 60.0, 72.0, 96.0, 120.0];
    let mut column = |name: &str, values: &[f64]| {
        let numbers: Vec<String> = values.iter().map(|value| format!("{value:>5}")).collect();
        writeln!(text, "{name:<16} = [{}]", numbers.join(", ")).unwrap();
    };
    column("lead_h", &leads);
    for (i, name) in COLUMNS[0].iter().enumerate() {
        column(name.name, &leads.map(|lead| table.at(lead).deviation[i]));
    }
    for (i, name) in COLUMNS[2].iter().enumerate() {
        column(name.name, &leads.map(|lead| table.at(lead).serial[i]));
    }
    let settings = table.settings();
    for (name, value) in SCALING.iter().zip(settings.scaling) {
        writeln!(text, "{name} = {value}").unwrap();
    }
    writeln!(text, "accuracy_usual_nmi = {}", settings.accuracy_usual_nmi).unwrap();
    writeln!(text, "accuracy_power = {}", settings.accuracy_power).unwrap();
    writeln!(text, "accuracy_fades_h = {}", settings.accuracy_fades_h).unwrap();
    writeln!(text, "radii_relaxation_h = {}", settings.radii_relaxation_h).unwrap();
    writeln!(text, "size_follows_intensity = {}", settings.size_follows_intensity).unwrap();
    writeln!(text, "intensity_with_size = {}", settings.intensity_with_size).unwrap();
    text
}
