//! The record's file: what goes in comes out, nothing in it can be changed unseen, and what is not a record is refused.
#![cfg(test)]

use chrono::{DateTime, Utc};
use rusqlite::Connection;
use snugdown::finding::fault::has_error;
use snugdown::finding::source::SourceText;
use snugdown::record::event::Event;
use snugdown::record::reader::read_events;
use snugdown::store::chain::{Head, digest};
use snugdown::store::error::StoreError;
use snugdown::store::file::{Addition, Entry, Store};
use snugdown::store::schema::{STEPS, format_of, raise};
use snugdown::store::written::events_toml;
use snugdown::time::clock::PortClock;
use std::fs;
use std::path::{Path, PathBuf};

/// Every kind of event.
const EXAMPLE: &str = include_str!("data/events/example.toml");

fn events(text: &str) -> Vec<Event> {
    let clock = PortClock::of("Etc/GMT+3").unwrap();
    let (mut events, findings) = read_events(&SourceText::new("events.toml", text), Some(&clock));
    assert!(!has_error(&findings), "{findings:?}");
    events.sort_by_key(|event| event.number);
    events
}

fn now() -> DateTime<Utc> {
    DateTime::parse_from_rfc3339("2026-09-17T12:00:00Z").unwrap().with_timezone(&Utc)
}

fn path(name: &str) -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(format!("store-{name}"));
    let _ = fs::remove_dir_all(&folder);
    fs::create_dir_all(&folder).unwrap();
    folder.join("record.sqlite")
}

fn add(store: &mut Store, expected: &Head, events: &[Event]) -> Result<Head, StoreError> {
    store.append(expected, Addition { events, papers: &[], recorded: now() })
}

/// A record that holds the example.
fn example(name: &str) -> PathBuf {
    let path = path(name);
    let mut store = Store::create(&path).unwrap();
    add(&mut store, &Head::beginning(), &events(EXAMPLE)).unwrap();
    path
}

/// What an event says, wherever it stands.
fn said(events: impl IntoIterator<Item = Event>) -> Vec<Event> {
    let nowhere =
        snugdown::finding::fault::Place { file: String::new(), line: 1, column: 1, start: 0, end: 0 };
    events.into_iter().map(|event| Event { place: nowhere.clone(), ..event }).collect()
}

fn read(path: &Path) -> Vec<Entry> {
    Store::open(path).unwrap().read().unwrap()
}

fn damage(path: &Path) -> String {
    match Store::open(path).and_then(|store| store.read()) {
        Err(StoreError::Damaged { what, .. }) => what,
        other => panic!("{other:?}"),
    }
}

#[test]
fn every_kind_of_event_comes_out_as_it_went_in() {
    let entries = read(&example("round-trip"));
    assert_eq!(said(entries.into_iter().map(|entry| entry.event)), said(events(EXAMPLE)));
}

#[test]
fn events_written_as_text_read_back_the_same() {
    let clock = PortClock::of("Etc/GMT+3").unwrap();
    let before = events(EXAMPLE);
    let text = events_toml(&before, &clock, "INVENTED\nTarrow Haven").unwrap();
    assert!(text.starts_with("# INVENTED\n# Tarrow Haven\n\n[[event]]\nat = \"2026-09-17T"), "{text}");
    assert_eq!(said(events(&text)), said(before));
}

#[test]
fn odd_names_and_exact_quantities_come_back_too() {
    let odd = r#"<b>&"';,\n\u202E 港 = """#;
    let text = format!(
        "[[event]]\nat = \"2026-09-17T09:00:30Z\"\nby = \"{odd}\"\nreason = \"{odd}\"\n\
         observed = {{ place = \"x\", wind = \"17.3 m/s\", over = \"3 s\" }}\n",
        odd = odd.replace('"', "\\\"")
    );
    let before = events(&text);
    let path = path("odd");
    add(&mut Store::create(&path).unwrap(), &Head::beginning(), &before).unwrap();
    let after: Vec<Event> = read(&path).into_iter().map(|entry| entry.event).collect();
    assert_eq!(said(after.clone()), said(before.clone()));
    let clock = PortClock::utc();
    assert_eq!(said(events(&events_toml(&after, &clock, "").unwrap())), said(before));
}

#[test]
fn nothing_in_the_record_can_be_changed_or_taken_out() {
    let path = example("triggers");
    let raw = Connection::open(&path).unwrap();
    for change in [
        "UPDATE event SET text = '{}' WHERE number = 3",
        "DELETE FROM event WHERE number = 42",
        "INSERT INTO event (number, text, hash) VALUES (50, '{}', printf('%064d', 0))",
        "INSERT OR REPLACE INTO event (number, text, hash) VALUES (3, '{}', printf('%064d', 0))",
    ] {
        let refused = raw.execute(change, []).unwrap_err().to_string();
        assert!(
            refused.contains("never rewritten") || refused.contains("without gaps"),
            "{change}: {refused}"
        );
    }
    assert_eq!(read(&path).len(), 42);
}

#[test]
fn an_event_changed_past_the_triggers_is_found_and_named() {
    for (name, change, found) in [
        ("text", "UPDATE event SET text = replace(text, 'Duty', 'Night') WHERE number = 1", "event 1 is not"),
        ("hash", "UPDATE event SET hash = printf('%064d', 7) WHERE number = 5", "event 5 is not as it was"),
        ("gone", "DELETE FROM event WHERE number = 4", "event 4 is missing"),
        ("first", "DELETE FROM event WHERE number = 1", "event 1 is missing"),
    ] {
        let path = example(&format!("changed-{name}"));
        let raw = Connection::open(&path).unwrap();
        raw.execute_batch("DROP TRIGGER event_kept; DROP TRIGGER event_unchanged;").unwrap();
        assert_eq!(raw.execute(change, []).unwrap(), 1, "{name}");
        assert!(damage(&path).contains(found), "{name}: {}", damage(&path));
    }
}

#[test]
fn two_events_that_change_places_are_found() {
    let path = example("swapped");
    let raw = Connection::open(&path).unwrap();
    raw.execute_batch(
        "DROP TRIGGER event_unchanged;
         CREATE TABLE two AS SELECT * FROM event WHERE number IN (2, 3);
         UPDATE event SET text = (SELECT text FROM two WHERE number = 3),
                          hash = (SELECT hash FROM two WHERE number = 3) WHERE number = 2;
         UPDATE event SET text = (SELECT text FROM two WHERE number = 2),
                          hash = (SELECT hash FROM two WHERE number = 2) WHERE number = 3;",
    )
    .unwrap();
    assert!(damage(&path).contains("event 2"), "{}", damage(&path));
}

#[test]
fn a_paper_that_was_changed_is_found() {
    let path = path("paper");
    let mut store = Store::create(&path).unwrap();
    let paper = b"BULLETIN".to_vec();
    let addition =
        Addition { events: &events(EXAMPLE), papers: std::slice::from_ref(&paper), recorded: now() };
    store.append(&Head::beginning(), addition).unwrap();
    assert_eq!(store.paper(&digest(&paper)).unwrap(), Some(paper.clone()));
    assert_eq!(store.paper(&digest(b"another")).unwrap(), None);
    let raw = Connection::open(&path).unwrap();
    assert!(raw.execute("UPDATE paper SET bytes = x'00'", []).is_err());
    raw.execute_batch("DROP TRIGGER paper_unchanged; UPDATE paper SET bytes = x'00';").unwrap();
    assert!(matches!(store.paper(&digest(&paper)), Err(StoreError::Damaged { .. })));
}

#[test]
fn what_is_added_after_another_head_is_refused_and_leaves_nothing() {
    let path = example("moved");
    let (mut one, mut two) = (Store::open(&path).unwrap(), Store::open(&path).unwrap());
    let head = one.head().unwrap();
    let new = &events(EXAMPLE)[..2];
    add(&mut one, &head, new).unwrap();
    assert!(matches!(add(&mut two, &head, new), Err(StoreError::Moved { now: 44, .. })));
    assert_eq!(read(&path).len(), 44);
}

#[test]
fn threads_that_read_again_and_try_again_all_get_their_events_in() {
    let path = example("threads");
    std::thread::scope(|scope| {
        for _ in 0..4 {
            scope.spawn(|| {
                let mut store = Store::open(&path).unwrap();
                let new = &events(EXAMPLE)[..1];
                for _ in 0..10 {
                    loop {
                        let head = store.head().unwrap();
                        match add(&mut store, &head, new) {
                            Ok(_) => break,
                            Err(StoreError::Moved { .. }) => {}
                            Err(error) => panic!("{error}"),
                        }
                    }
                }
            });
        }
    });
    assert_eq!(read(&path).len(), 42 + 40);
}

#[test]
fn a_backup_made_while_others_write_is_a_whole_record() {
    let path = example("backup");
    let copies: Vec<(PathBuf, Head)> = std::thread::scope(|scope| {
        let writer = scope.spawn(|| {
            let mut store = Store::open(&path).unwrap();
            for _ in 0..30 {
                let head = store.head().unwrap();
                add(&mut store, &head, &events(EXAMPLE)[..1]).unwrap();
            }
        });
        let store = Store::open(&path).unwrap();
        let copy = |number: usize| {
            let to = path.with_file_name(format!("copy-{number}.sqlite"));
            let head = store.back_up(&to).unwrap();
            (to, head)
        };
        let copies = (0..5).map(copy).collect();
        writer.join().unwrap();
        copies
    });
    let whole = read(&path);
    for (copy, head) in copies {
        let entries = read(&copy);
        assert_eq!(entries.last().unwrap().head, head);
        assert_eq!(whole[head.number - 1].head, head);
        assert!(matches!(Store::open(&path).unwrap().back_up(&copy), Err(StoreError::Exists { .. })));
    }
}

#[test]
fn a_record_is_made_once_and_never_over_another() {
    let path = example("twice");
    assert!(matches!(Store::create(&path), Err(StoreError::Exists { .. })));
    assert_eq!(read(&path).len(), 42);
}

#[test]
fn what_is_no_record_is_refused() {
    let empty = path("empty");
    fs::write(&empty, b"").unwrap();
    assert!(matches!(Store::open(&empty), Err(StoreError::Damaged { .. })));
    let garbage = path("garbage");
    fs::write(&garbage, vec![0xA5; 10_000]).unwrap();
    assert!(matches!(Store::open(&garbage), Err(StoreError::Damaged { .. })));
    let other = path("other");
    Connection::open(&other).unwrap().execute_batch("CREATE TABLE x (y)").unwrap();
    assert!(matches!(Store::open(&other), Err(StoreError::NotARecord { .. })));
    assert!(Store::open(&path("none")).is_err());
}

#[test]
fn a_record_cut_short_or_with_a_flipped_byte_is_found_wherever_it_is() {
    let whole = fs::read(example("flip")).unwrap();
    let path = path("flipped");
    let sound = read(&example("flip-sound"));
    let (mut found, mut harmless) = (0, 0);
    for at in (0..whole.len()).step_by(97) {
        let mut bytes = whole.clone();
        bytes[at] ^= 0x10;
        fs::write(&path, &bytes).unwrap();
        match Store::open(&path).and_then(|store| Ok((store.page_faults()?, store.read()?))) {
            Err(_) => found += 1,
            Ok((faults, _)) if !faults.is_empty() => found += 1,
            // Unused bytes of a page carry nothing.
            Ok((_, entries)) => {
                assert_eq!(entries, renamed(&sound, &path), "byte {at}");
                harmless += 1;
            }
        }
    }
    for length in (4096..whole.len()).step_by(4096) {
        fs::write(&path, &whole[..length]).unwrap();
        let read = Store::open(&path).and_then(|store| Ok((store.page_faults()?, store.read()?)));
        assert!(read.is_err() || read.is_ok_and(|(faults, _)| !faults.is_empty()), "cut to {length}");
    }
    println!(
        "a flipped bit in {} places: {found} found, {harmless} in bytes that carry nothing",
        found + harmless
    );
    assert!(found > 20);
}

/// The same entries as read from a file of another name.
fn renamed(entries: &[Entry], path: &Path) -> Vec<Entry> {
    let mut entries = entries.to_vec();
    entries.iter_mut().for_each(|entry| entry.event.place.file = path.display().to_string());
    entries
}

#[test]
fn an_older_program_refuses_a_newer_record() {
    let path = example("newer");
    Connection::open(&path).unwrap().pragma_update(None, "user_version", 9).unwrap();
    let error = Store::open(&path).unwrap_err();
    assert!(matches!(error, StoreError::TooNew { found: 9, known: 1, .. }), "{error}");
    assert!(error.to_string().contains("use that program"));
}

#[test]
fn a_format_is_raised_whole_or_not_at_all() {
    let path = example("raise");
    let mut raw = Connection::open(&path).unwrap();
    let next: &[snugdown::store::schema::Step] = &[
        STEPS[0],
        |change| change.execute_batch("CREATE TABLE issued (number INTEGER PRIMARY KEY) STRICT;"),
        |change| change.execute_batch("CREATE TABLE issued (twice TEXT) STRICT;"),
    ];
    assert!(raise(&mut raw, "record", 1, next).is_err());
    assert_eq!(format_of(&raw, "record", 3).unwrap(), 1);
    assert!(raw.prepare("SELECT * FROM issued").is_err(), "half a step is left");
    raise(&mut raw, "record", 1, &next[..2]).unwrap();
    assert_eq!(format_of(&raw, "record", 2).unwrap(), 2);
    // Raised already by somebody else: nothing happens.
    raise(&mut raw, "record", 1, &next[..2]).unwrap();
    assert!(raw.prepare("SELECT * FROM issued").is_ok());
    assert!(matches!(format_of(&raw, "record", 1), Err(StoreError::TooNew { .. })));
}

#[test]
fn the_hash_of_an_event_is_the_one_that_any_program_can_compute() {
    // Computed with Python's hashlib from the three lines of text; see tests/outside/record_chain.py.
    let head = Head::beginning().then("{\"at\":\"2026-09-17T09:20:00Z\"}");
    assert_eq!(head.hash, "3a4368b5a78fc7993375bd576eca96b1bd9659759304fe0d2870755437ecd177");
}
