//! The record when things fail: killed at every step and at random, power cut, disk full, broken or read-only, two at once.
//!
//! `SNUGDOWN_LONG=1` makes the long run; `--nocapture` shows the figures. The failing disk is `faults/shim.c`, built with the C
//! compiler that the program itself needs.
#![cfg(test)]
#![cfg(target_os = "linux")]

use snugdown::store::file::{Entry, Store};
use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};
use std::sync::OnceLock;
use std::time::Duration;

fn is_long() -> bool {
    std::env::var_os("SNUGDOWN_LONG").is_some()
}

/// The failing disk, built once.
fn shim() -> &'static Path {
    static SHIM: OnceLock<PathBuf> = OnceLock::new();
    SHIM.get_or_init(|| {
        let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/faults/shim.c");
        let built = Path::new(env!("CARGO_TARGET_TMPDIR")).join("failing-disk.so");
        let compiler = std::env::var("CC").unwrap_or_else(|_| "cc".to_owned());
        let status = Command::new(compiler)
            .args(["-shared", "-fPIC", "-O1", "-o"])
            .args([&built, &source])
            .arg("-ldl")
            .status()
            .expect("a C compiler, which the program itself is built with");
        assert!(status.success());
        built
    })
}

/// A fresh copy of the small port without a record.
fn port(name: &str) -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(format!("faults-{name}"));
    let _ = fs::remove_dir_all(&folder);
    fs::create_dir_all(&folder).unwrap();
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/small-port");
    for entry in fs::read_dir(source).unwrap() {
        let path = entry.unwrap().path();
        let name = path.file_name().unwrap();
        if name != "events.toml" {
            fs::copy(&path, folder.join(name)).unwrap();
        }
    }
    folder
}

/// A command that records one event, `number` telling it from the others.
fn mark(folder: &Path, number: usize) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_snugdown"));
    command.arg("mark").arg(folder).args(["done", "H1", "--by", "Duty officer", "--record-only"]);
    command.args(["--now", "2026-09-16 12:00", "--evidence", &format!("sheet {number}")]);
    command.stdin(Stdio::null());
    command
}

/// A command that takes an advisory, so that a paper is written besides the event.
fn take(folder: &Path) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_snugdown"));
    command.arg("take").arg(folder).arg(folder.join("approach.txt"));
    command.args(["--by", "Duty officer", "--record-only", "--now", "2026-09-17 12:10"]);
    command.stdin(Stdio::null());
    command
}

fn failing<'a>(command: &'a mut Command, folder: &Path, how: &str, at: usize) -> &'a mut Command {
    command
        .env("LD_PRELOAD", shim())
        .env("FAULT_FOLDER", folder)
        .env("FAULT_DO", how)
        .env("FAULT_AT", at.to_string())
}

fn is_acknowledged(output: &Output) -> bool {
    String::from_utf8_lossy(&output.stdout).starts_with("recorded: ")
}

/// Every event that the record holds; the reading checks the chain.
fn entries(folder: &Path) -> Vec<Entry> {
    let path = folder.join("record.sqlite");
    if path.exists() { Store::open(&path).unwrap().read().unwrap() } else { Vec::new() }
}

/// Fails every command at its first operation, its second ..., until it comes through. After each failure whatever was
/// acknowledged is there, and at most the one that was under way besides. Gives the number of points.
fn at_every_point(name: &str, how: &str, judge: &dyn Fn(&Path, &Output, usize)) -> usize {
    let mut points = 0;
    // The short run kills at every point, and tries the other failures at every third.
    let stride = if is_long() || how == "kill" { 1 } else { 3 };
    type Making = fn(&Path) -> Command;
    let cases: [(&str, usize, Making); 3] =
        [("first", 0, |folder| mark(folder, 0)), ("next", 3, |folder| mark(folder, 3)), ("paper", 1, take)];
    for (case, before, make) in cases {
        let seed = port(&format!("{name}-{case}-seed"));
        for number in 0..before {
            assert!(is_acknowledged(&mark(&seed, number).output().unwrap()));
        }
        for at in (1..).step_by(stride) {
            let folder = port(&format!("{name}-{case}"));
            if before > 0 {
                fs::copy(seed.join("record.sqlite"), folder.join("record.sqlite")).unwrap();
            }
            let output = failing(&mut make(&folder), &folder, how, at).output().unwrap();
            if is_acknowledged(&output) && output.status.success() {
                assert!(at > 10, "{how} {case}: the disk never failed");
                assert_eq!(entries(&folder).len(), before + 1);
                break;
            }
            points += 1;
            let there = entries(&folder).len();
            assert!((before..=before + 1).contains(&there), "{how} {case} {at}: {there} events");
            judge(&folder, &output, at);
            // And afterwards all goes on.
            assert!(is_acknowledged(&mark(&folder, 99).output().unwrap()), "{how} {case} {at}");
            assert_eq!(entries(&folder).len(), there + 1);
        }
    }
    points
}

#[test]
fn killed_at_every_step_nothing_acknowledged_is_lost() {
    let killed = |_: &Path, output: &Output, at: usize| assert_eq!(output.status.code(), None, "{at}");
    let whole = at_every_point("kill", "kill", &killed);
    let torn = at_every_point("tear", "tear", &killed);
    println!(
        "killed at every operation: {whole} points, and {torn} with the write torn in half: 0 events lost"
    );
}

#[test]
fn killed_at_any_moment_nothing_acknowledged_is_lost() {
    let folder = port("random");
    let kills = if is_long() { 1000 } else { 60 };
    let (mut acknowledged, mut killed) = (0, 0);
    // A fixed sequence (Knuth's constants for a 64-bit linear congruential generator) spreads the moments.
    let mut state = 20_260_917_u64;
    let mut longest_us = 30_000;
    for number in 0.. {
        if killed == kills {
            break;
        }
        let mut child = mark(&folder, number).stdout(Stdio::piped()).stderr(Stdio::null()).spawn().unwrap();
        state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        std::thread::park_timeout(Duration::from_micros((state >> 33) % longest_us));
        let was_running = child.try_wait().unwrap().is_none();
        child.kill().unwrap();
        let output = child.wait_with_output().unwrap();
        acknowledged += usize::from(is_acknowledged(&output));
        killed += usize::from(was_running);
        // Moments are spread over the time that a command takes on this machine.
        longest_us = if was_running { (longest_us * 21 / 20).min(400_000) } else { longest_us * 19 / 20 };
        if number % 20 == 0 || killed == kills {
            let there = entries(&folder).len();
            assert!(there >= acknowledged, "{there} of {acknowledged} events are left");
            assert!(there <= number + 1);
        }
    }
    let sheets: Vec<String> =
        entries(&folder).iter().map(|entry| format!("{:?}", entry.event.what)).collect();
    println!("killed at {kills} random moments: {acknowledged} acknowledged, {} there, 0 lost", sheets.len());
}

/// One operation of the failing disk's log.
#[derive(Clone, Debug)]
struct Operation {
    kind: u8,
    path: String,
    offset: usize,
    bytes: Vec<u8>,
}

fn operations(log: &Path) -> Vec<Operation> {
    let data = fs::read(log).unwrap();
    let mut rest = data.as_slice();
    let mut next = |length: usize| {
        let (part, after) = rest.split_at(length);
        rest = after;
        part.to_vec()
    };
    let mut found = Vec::new();
    let mut left = data.len();
    while left > 0 {
        let kind = next(1)[0];
        let number = |bytes: Vec<u8>| usize::try_from(u64::from_le_bytes(bytes.try_into().unwrap())).unwrap();
        let length = number(next(8));
        let path = String::from_utf8(next(length)).unwrap();
        let offset = number(next(8));
        let size = number(next(8));
        let bytes = if matches!(kind, b'W' | b'L' | b'A') { next(size) } else { Vec::new() };
        left -= 25 + length + bytes.len();
        found.push(Operation { kind, path, offset, bytes });
    }
    found
}

/// A folder as a power cut leaves it: contents are safe once synced, names once the folder is.
#[derive(Clone, Debug, Default)]
struct Disk {
    /// What each file holds: surely, and what was written since.
    files: Vec<(Vec<u8>, Vec<Operation>)>,
    names: BTreeMap<String, usize>,
    safe_names: BTreeMap<String, usize>,
}

impl Disk {
    fn apply(&mut self, operation: &Operation) {
        match operation.kind {
            b'C' => {
                self.files.push((Vec::new(), Vec::new()));
                self.names.insert(operation.path.clone(), self.files.len() - 1);
            }
            b'W' | b'T' => {
                let file = self.names[&operation.path];
                self.files[file].1.push(operation.clone());
            }
            b'U' => {
                self.names.remove(&operation.path);
            }
            b'L' => {
                let file = self.names[&operation.path];
                self.names.insert(String::from_utf8(operation.bytes.clone()).unwrap(), file);
            }
            b'S' => match self.names.get(&operation.path) {
                Some(file) => {
                    let (safe, pending) = &mut self.files[*file];
                    *safe = written(safe, pending, &|_| true);
                    pending.clear();
                }
                None => self.safe_names = self.names.clone(),
            },
            _ => {}
        }
    }

    /// The record and its journal as they stand after the cut: those unsynced writes are left that `is_kept` says.
    fn after_cut(&self, is_kept: &dyn Fn(usize) -> bool) -> BTreeMap<String, Vec<u8>> {
        let file = |(path, file): (&String, &usize)| {
            let (safe, pending) = &self.files[*file];
            (path.clone(), written(safe, pending, is_kept))
        };
        self.safe_names.iter().map(file).collect()
    }
}

fn written(safe: &[u8], pending: &[Operation], is_kept: &dyn Fn(usize) -> bool) -> Vec<u8> {
    let mut bytes = safe.to_vec();
    for (_, operation) in pending.iter().enumerate().filter(|(number, _)| is_kept(*number)) {
        let end = operation.offset + operation.bytes.len();
        if operation.kind == b'T' || bytes.len() < end {
            bytes.resize(end, 0);
        }
        bytes[operation.offset..end].copy_from_slice(&operation.bytes);
    }
    bytes
}

#[test]
fn a_power_cut_after_any_write_or_sync_loses_nothing_acknowledged() {
    let folder = port("power");
    let log = folder.with_extension("log");
    let _ = fs::remove_file(&log);
    let commands = [mark(&folder, 0), mark(&folder, 1), take(&folder), mark(&folder, 2)];
    for mut command in commands {
        let output = failing(&mut command, &folder, "", 0).env("FAULT_LOG", &log).output().unwrap();
        assert!(is_acknowledged(&output), "{output:?}");
    }
    let operations = operations(&log);
    let mut disk = Disk::default();
    let (mut acknowledged, mut cuts) = (0, 0);
    for operation in &operations {
        disk.apply(operation);
        acknowledged += usize::from(operation.kind == b'A');
        // All unsynced writes lost; every other one; the first half; pseudo-random ones.
        let turn = cuts;
        let ways: [&dyn Fn(usize) -> bool; 5] =
            [&|_| false, &|n| n % 2 == 0, &|n| n % 2 == 1, &|n| n < 2, &|n| {
                (n * 2_654_435_761 + turn) % 7 < 3
            }];
        for way in ways {
            let after = Path::new(env!("CARGO_TARGET_TMPDIR")).join("faults-after-cut");
            let _ = fs::remove_dir_all(&after);
            fs::create_dir_all(&after).unwrap();
            for (path, bytes) in disk.after_cut(way) {
                fs::write(after.join(Path::new(&path).file_name().unwrap()), bytes).unwrap();
            }
            let there = entries(&after).len();
            assert!(there >= acknowledged, "cut {cuts}: {there} of {acknowledged} events are left");
            cuts += 1;
        }
    }
    assert_eq!(acknowledged, 4);
    println!(
        "power cut: {} recorded operations, {cuts} states of the disk after them: 0 events lost",
        operations.len()
    );
}

#[test]
fn a_full_disk_is_told_and_reading_goes_on() {
    let judge = |folder: &Path, output: &Output, at: usize| {
        let told = String::from_utf8_lossy(&output.stderr);
        assert_eq!(output.status.code(), Some(1), "{at}: {told}");
        // Where a file cannot even be made, the database does not say why.
        let is_told =
            told.contains("the disk is full; nothing was recorded") || told.contains("unable to open");
        assert!(is_told, "{at}: {told}");
        assert_eq!(list(folder).status.code(), Some(0), "{at}");
    };
    println!("disk full at {} writes: each told, 0 events lost", at_every_point("full", "full", &judge));
}

#[test]
fn a_disk_that_fails_is_told_and_loses_nothing() {
    let judge = |folder: &Path, output: &Output, at: usize| {
        let told = String::from_utf8_lossy(&output.stderr);
        assert_eq!(output.status.code(), Some(1), "{at}: {told}");
        assert!(told.contains("the disk failed"), "{at}: {told}");
        assert_eq!(list(folder).status.code(), Some(0), "{at}");
    };
    println!(
        "disk failing from {} operations on: each told, 0 lost",
        at_every_point("error", "error", &judge)
    );
}

fn list(folder: &Path) -> Output {
    let mut command = Command::new(env!("CARGO_BIN_EXE_snugdown"));
    command.args(["record", "list"]).arg(folder).output().unwrap()
}

#[test]
fn a_read_only_disk_is_told_and_reading_goes_on() {
    let folder = port("locked");
    let first = failing(&mut mark(&folder, 0), &folder, "locked", 1).output().unwrap();
    assert_eq!(first.status.code(), Some(1));
    assert!(is_acknowledged(&mark(&folder, 0).output().unwrap()));
    let output = failing(&mut mark(&folder, 1), &folder, "locked", 1).output().unwrap();
    let told = String::from_utf8_lossy(&output.stderr);
    assert_eq!(output.status.code(), Some(1), "{told}");
    assert!(told.contains("it cannot be written"), "{told}");
    let mut reading = Command::new(env!("CARGO_BIN_EXE_snugdown"));
    reading.args(["record", "list"]).arg(&folder);
    let read = failing(&mut reading, &folder, "locked", 1).output().unwrap();
    assert_eq!(read.status.code(), Some(0), "{}", String::from_utf8_lossy(&read.stderr));
    assert!(String::from_utf8_lossy(&read.stdout).contains("H1 done"));
}

#[test]
fn several_processes_on_one_folder_all_get_their_events_in() {
    let folder = port("many");
    let (writers, each) = (4, if is_long() { 50 } else { 6 });
    let counts: Vec<usize> = std::thread::scope(|scope| {
        let writer = |writer: usize| {
            let folder = &folder;
            scope.spawn(move || {
                let one = |number: usize| {
                    let mut command = mark(folder, writer * 1000 + number);
                    // Each ticks a task of its own: ticking one that another has just ticked is a stale write.
                    let task = ["H2", "H3", "H4", "R1"][writer];
                    let arguments: Vec<_> = command.get_args().map(|a| a.to_owned()).collect();
                    let mut changed = Command::new(command.get_program());
                    changed.args(arguments.iter().map(|a| if a == "H1" { task.into() } else { a.clone() }));
                    command = changed;
                    let output = command.output().unwrap();
                    assert!(is_acknowledged(&output), "{}", String::from_utf8_lossy(&output.stderr));
                };
                (0..each).for_each(one);
                each
            })
        };
        let handles: Vec<_> = (0..writers).map(writer).collect();
        handles.into_iter().map(|handle| handle.join().unwrap()).collect()
    });
    let there = entries(&folder).len();
    assert_eq!(there, counts.iter().sum::<usize>());
    println!("{writers} processes at once, {each} events each: {there} there, 0 lost");
}
