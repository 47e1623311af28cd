//! Measures the record: opening 100,000 events, and a whole `mark` at 10,000. Run it with `--release`, after
//! `cargo build --release`.
#![allow(
    clippy::unwrap_used,
    clippy::print_stdout,
    reason = "a measuring program that cannot set up must stop"
)]

use chrono::{DateTime, TimeDelta, Utc};
use snugdown::finding::fault::Place;
use snugdown::record::event::{Event, What};
use snugdown::record::fold::situation;
use snugdown::store::chain::Head;
use snugdown::store::file::{Addition, Store};
use std::path::{Path, PathBuf};
use std::process::Command;
use std::time::{Duration, Instant};

/// The tasks of the small port that are ticked over and over.
const TASKS: [&str; 6] = ["H1", "H2", "V01/secure", "V02/secure", "K1/tie-down", "H4"];

fn begin() -> DateTime<Utc> {
    DateTime::parse_from_rfc3339("2026-09-16T12:00:00Z").unwrap().with_timezone(&Utc)
}

/// A record of so many reports, a hundred of them at each of its times.
fn record(folder: &Path, count: usize) -> PathBuf {
    let path = folder.join("record.sqlite");
    let _ = std::fs::remove_file(&path);
    let event = |number: usize| {
        let known = begin() + TimeDelta::minutes(i64::try_from(number / 100).unwrap());
        Event {
            number,
            known,
            by: "Duty officer".into(),
            name: "A. Quill".into(),
            on_behalf: String::new(),
            awaits_second: false,
            what: What::TaskDone {
                task: TASKS[number % TASKS.len()].into(),
                at: known,
                evidence: format!("sheet {number}"),
            },
            reason: "told by radio".into(),
            place: Place { file: String::new(), line: 1, column: 1, start: 0, end: 0 },
        }
    };
    let events: Vec<Event> = (1..=count).map(event).collect();
    let mut store = Store::create(&path).unwrap();
    store.append(&Head::beginning(), Addition { events: &events, papers: &[], recorded: begin() }).unwrap();
    path
}

fn port() -> PathBuf {
    let folder = std::env::temp_dir().join(format!("snugdown-record-speed-{}", std::process::id()));
    std::fs::create_dir_all(&folder).unwrap();
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/small-port");
    for entry in std::fs::read_dir(source).unwrap() {
        let path = entry.unwrap().path();
        if path.file_name().unwrap() != "events.toml" {
            std::fs::copy(&path, folder.join(path.file_name().unwrap())).unwrap();
        }
    }
    folder
}

fn quantile(times: &mut [Duration], share: f64) -> f64 {
    times.sort();
    let last = times.len() - 1;
    times[((last as f64) * share).round() as usize].as_secs_f64() * 1000.0
}

fn show(what: &str, times: &mut [Duration]) {
    let (half, most) = (quantile(times, 0.5), quantile(times, 0.95));
    println!("{what:58} {half:8.1} ms {most:8.1} ms  {:4}", times.len());
}

fn timed(times: usize, mut run: impl FnMut(usize)) -> Vec<Duration> {
    let one = |number| {
        let start = Instant::now();
        run(number);
        start.elapsed()
    };
    (0..times).map(one).collect()
}

fn main() {
    let folder = port();
    println!("{:58} {:>11} {:>11}  runs", "", "p50", "p95");
    for count in [10_000, 100_000] {
        let path = record(&folder, count);
        let mut opening = timed(10, |_| {
            assert_eq!(Store::open(&path).unwrap().read().unwrap().len(), count);
        });
        show(&format!("open and check {count} events"), &mut opening);
        let entries = Store::open(&path).unwrap().read().unwrap();
        let events: Vec<Event> = entries.into_iter().map(|entry| entry.event).collect();
        let end = events.last().unwrap().known;
        let mut folding = timed(5, |_| assert_eq!(situation(&events, end).tasks.len(), TASKS.len()));
        show(&format!("situation from {count} events"), &mut folding);
    }
    let program = std::env::current_exe().unwrap().parent().unwrap().join("../snugdown");
    for (count, runs, more) in
        [(10_000, 200, Some("--record-only")), (100_000, 10, Some("--record-only")), (10_000, 3, None)]
    {
        record(&folder, count);
        let mut marking = timed(runs, |number| {
            let mut command = Command::new(&program);
            command.args(["mark"]).arg(&folder).args(["done", "H1", "--by", "Duty officer"]);
            command.args(["--now", "2026-10-30 12:00", "--evidence", &format!("more {number}")]).args(more);
            assert!(command.output().unwrap().status.success());
        });
        let how = if more.is_some() { "recorded only" } else { "planned again" };
        show(&format!("mark, the whole process, at {count} events, {how}"), &mut marking);
    }
    std::fs::remove_dir_all(&folder).unwrap();
}
