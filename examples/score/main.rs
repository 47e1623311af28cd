//! Scores the odds of arrival on an archive of past storms, beside the official odds of the same places and times.
//!
//! `cargo run --release --example score -- ARCHIVE [--leave-out season] [--table FILE] [--out DIR]`
//!
//! With `--leave-out season` each season is scored with a table fitted without it; otherwise with FILE, or with the table
//! that goes with the program.

#![expect(clippy::print_stdout, reason = "a measuring program shows what it measured")]
#![allow(clippy::unwrap_used, clippy::panic, reason = "a measuring program that cannot measure must fail")]

#[path = "../archive/mod.rs"]
mod archive;
mod brier;
mod coverage;
mod recalibrated;
mod reckoned;
mod reliability;
mod resampled;

use archive::Archive;
use reckoned::Row;
use snugdown::advisory::forecast::Advisory;
use snugdown::arrival::errors::ErrorTables;
use snugdown::arrival::errors_reader::read_error_tables;
use snugdown::cli::load::shipped_tables;
use snugdown::finding::source::SourceText;
use std::fmt::Write;
use std::path::{Path, PathBuf};

struct Asked {
    archive: PathBuf,
    leaves_out_season: bool,
    table: Option<PathBuf>,
    out: Option<PathBuf>,
}

const USAGE: &str = "score ARCHIVE [--leave-out season] [--table FILE] [--out DIR]";

fn asked() -> Asked {
    let mut words = std::env::args().skip(1);
    let mut asked = Asked { archive: PathBuf::new(), leaves_out_season: false, table: None, out: None };
    while let Some(word) = words.next() {
        match word.as_str() {
            "--leave-out" => asked.leaves_out_season = words.next().as_deref() == Some("season"),
            "--table" => asked.table = words.next().map(PathBuf::from),
            "--out" => asked.out = words.next().map(PathBuf::from),
            _ => asked.archive = PathBuf::from(word),
        }
    }
    assert!(asked.archive.is_dir(), "{USAGE}");
    asked
}

fn tables(file: Option<&Path>) -> ErrorTables {
    let Some(file) = file else { return shipped_tables().unwrap_or_else(|failure| panic!("{failure}")) };
    let text = std::fs::read_to_string(file).unwrap_or_else(|error| panic!("{}: {error}", file.display()));
    read_error_tables(&SourceText::new(file.to_string_lossy(), text)).unwrap_or_else(|f| panic!("{f:?}"))
}

fn main() {
    let asked = asked();
    let archive = Archive::read(&asked.archive);
    let tables = tables(asked.table.as_deref());
    let mut rows: Vec<Row> = Vec::new();
    for season in archive.seasons() {
        let left_out = asked.leaves_out_season.then(|| archive::fitted::table(&archive, Some(&season)));
        let table = |advisory: &Advisory| left_out.clone().unwrap_or_else(|| tables.for_advisory(advisory));
        rows.extend(reckoned::rows(&archive, &season, table));
    }
    let seasons = archive.seasons();
    recalibrated::fill(&mut rows, &seasons);
    let mut page = String::new();
    for (advisories, track) in &archive.renumbered {
        writeln!(page, "The best track of {advisories} bears the number {track}.").unwrap();
    }
    let storms = resampled::storms(&rows);
    writeln!(
        page,
        "{} advisory-place rows of {} storms, {} with an onset.\n",
        rows.len(),
        storms.len(),
        rows.iter().filter(|row| row.onset_h.is_some()).count()
    )
    .unwrap();
    let brier = brier::table(&rows);
    let reliability = reliability::table(&rows);
    let coverage = coverage::table(&rows);
    for table in [&brier, &reliability, &coverage] {
        page.push_str(&table.markdown());
        page.push('\n');
    }
    println!("{page}");
    if let Some(out) = asked.out {
        std::fs::create_dir_all(&out).unwrap();
        let files = [
            ("rows.csv", reckoned::csv(&rows)),
            ("brier.csv", brier.csv()),
            ("reliability.csv", reliability.csv()),
            ("coverage.csv", coverage.csv()),
            ("score.md", page),
        ];
        for (name, text) in files {
            std::fs::write(out.join(name), text).unwrap();
        }
    }
}
