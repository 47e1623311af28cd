//! What the reader of the record takes, and what it says about everything else.

use proptest::prelude::{any, proptest};
use snugdown::finding::fault::{Finding, Severity, has_error};
use snugdown::finding::source::SourceText;
use snugdown::record::event::{Event, Retracted, What};
use snugdown::record::fold::situation;
use snugdown::record::reader::read_events;
use snugdown::time::clock::PortClock;

const EXAMPLE: &str = include_str!("data/events/example.toml");

fn read_in(zone: &str, text: &str) -> (Vec<Event>, Vec<Finding>) {
    read_events(&SourceText::new("events.toml", text), PortClock::of(zone).ok().as_ref())
}

fn read(text: &str) -> (Vec<Event>, Vec<Finding>) {
    read_in("Etc/GMT+3", text)
}

/// An event known at 10:00 that says `what`.
fn event(what: &str) -> String {
    event_at("2026-09-17 10:00", what)
}

fn event_at(at: &str, what: &str) -> String {
    format!("[[event]]\nat = \"{at}\"\nby = \"Duty officer\"\n{what}\n")
}

fn codes(text: &str) -> Vec<&'static str> {
    read(text).1.iter().map(|finding| finding.code).collect()
}

#[test]
fn the_example_holds_every_kind_of_event_without_a_finding() {
    let (events, findings) = read(EXAMPLE);
    assert_eq!(findings, []);
    assert_eq!(events.len(), 42);
    let kinds: std::collections::BTreeSet<String> =
        events.iter().map(|event| format!("{:?}", std::mem::discriminant(&event.what))).collect();
    // All kinds but a retracted task: what the example retracts is the order that fixed a start.
    assert_eq!(kinds.len(), 23);
}

#[test]
fn the_example_folds_into_the_situation_it_tells_of() {
    let (events, _) = read(EXAMPLE);
    let now = situation(&events, events.last().unwrap().known);
    assert_eq!(now.advisories.len(), 1);
    assert!(now.adopted.is_empty());
    // Declared again by the Harbour Master, and confirmed by the Deputy.
    assert_eq!(now.order_in_force(), Some("S3"));
    assert_eq!(now.tasks["C11/tie-down"].done_at().unwrap().to_rfc3339(), "2026-09-17T11:15:00+00:00");
    assert_eq!(now.tasks["V01/sail"].fixed, None);
    assert_eq!(now.means["T3"][0].until.unwrap().to_rfc3339(), "2026-09-17T14:40:00+00:00");
    assert_eq!(now.latest_observed("signal-station").unwrap().wind.to_string(), "24 kt");
    assert_eq!(now.issued.len(), 1);
}

#[test]
fn a_time_left_out_is_the_time_at_which_it_was_known() {
    let (events, findings) = read(&event("done = { task = \"H05\" }"));
    assert_eq!(findings, []);
    let known = events[0].known;
    assert_eq!(events[0].what, What::TaskDone { task: "H05".into(), at: known, evidence: String::new() });
}

#[test]
fn local_time_and_time_with_an_offset_are_the_same_instant() {
    let local = read(&event_at("2026-09-17 10:00", "issued = {}")).0;
    for text in ["2026-09-17T10:00-03:00", "2026-09-17T13:00Z"] {
        assert_eq!(read(&event_at(text, "issued = {}")).0[0].known, local[0].known, "{text}");
    }
    let bare = "[[event]]\nat = 2026-09-17T10:00:00-03:00\nby = \"x\"\nissued = {}\n";
    assert_eq!(read(bare).0[0].known, local[0].known);
}

#[test]
fn every_kind_of_retraction_has_its_word() {
    for (word, kind) in [
        ("progress", Retracted::Progress),
        ("time_taken", Retracted::Takes),
        ("not_before", Retracted::NotBefore),
        ("way", Retracted::Way),
    ] {
        let (events, findings) = read(&event(&format!("retracts = {{ task = \"H05\", what = \"{word}\" }}")));
        assert_eq!(events[0].what, What::TaskRetracted { task: "H05".into(), kind });
        assert_eq!(findings[0].code, "record-no-effect");
    }
}

#[test]
fn each_fault_has_its_code_and_keeps_the_event_out() {
    let faults = [
        ("record-syntax", "[[event]\n".to_owned()),
        ("record-duplicate-key", event("issued = {}\nby = \"x\"")),
        ("record-unknown-key", event("done = { task = \"H05\", tsak = \"H06\" }")),
        ("record-unknown-key", format!("zone = \"UTC\"\n{}", event("issued = {}"))),
        ("record-unknown-key", event("cannot = { task = \"H05\" }\nnot_needed = { task = \"H05\" }")),
        ("record-missing-key", event("reason = \"none of the kinds\"")),
        ("record-missing-key", event("done = {}")),
        ("record-missing-key", "[[event]]\nissued = {}\n".to_owned()),
        ("record-wrong-type", event("issued = true")),
        ("record-wrong-type", "event = 1\n".to_owned()),
        ("record-no-unit", event("observed = { place = \"A\", wind = 24, over = \"10 min\" }")),
        ("record-bad-value", event("observed = { place = \"A\", wind = \"500 kt\", over = \"10 min\" }")),
        ("record-bad-value", event("observed = { place = \"A\", wind = \"nan kt\", over = \"10 min\" }")),
        ("record-bad-value", event("takes = { task = \"H05\", in_all = \"-1 h\" }")),
        ("record-bad-value", event("takes = { task = \"H05\", in_all = \"5000 h\" }")),
        ("record-bad-value", event("done = { task = \"V01/\" }")),
        ("record-bad-value", event("back = { member = \"\" }")),
        ("record-unknown-word", event("observed = { place = \"A\", wind = \"24 kt\", over = \"5 min\" }")),
        ("record-bad-time", event_at("yesterday", "issued = {}")),
        ("record-bad-time", event_at("2026-02-30 10:00", "issued = {}")),
        (
            "record-absurd-wind",
            event("adopts_arrival = { place = \"A\", wind = \"340 kt\", time = \"2026-09-18 14:00\" }"),
        ),
        ("record-not-yet", event("done = { task = \"H05\", at = \"2026-09-17 10:30\" }")),
        ("record-far-off", event("fixes = { task = \"H05\", start = \"2062-09-17 13:00\" }")),
        ("record-far-off", event("started = { task = \"H05\", at = \"2025-09-17 09:00\" }")),
        (
            "record-ends-before-it-begins",
            event("out = { member = \"T3\", from = \"2026-09-17 10:00\", until = \"2026-09-17 10:00\" }"),
        ),
        ("record-bad-value", event("took_advisory = { file = \"d.dat\", cycle = \"2018-08-30\" }")),
        ("record-bad-value", event("took_advisory = { file = \"d.dat\", technique = \"of cl\" }")),
        ("record-wrong-type", event("took_advisory = { file = \"d.dat\", by_order = \"yes\" }")),
        ("record-file-outside", event("took_advisory = { file = \"../12.txt\" }")),
        ("record-file-outside", event("took_advisory = { file = \"/advisories/12.txt\" }")),
        ("record-file-outside", event("took_advisory = { file = \"advisories\\\\12.txt\" }")),
    ];
    for (code, text) in faults {
        let (_, findings) = read(&text);
        assert!(findings.iter().any(|finding| finding.code == code), "{code} for {text}: {findings:?}");
        assert!(has_error(&findings), "{code}");
    }
}

#[test]
fn a_local_time_that_never_comes_or_comes_twice_is_refused_with_both_instants() {
    let zone = "America/New_York";
    let (events, findings) = read_in(zone, &event_at("2026-11-01 01:30", "issued = {}"));
    assert_eq!(events, []);
    assert_eq!(findings[0].code, "record-time-fold");
    for instant in ["2026-11-01T01:30-04:00", "2026-11-01T01:30-05:00"] {
        assert!(findings[0].found.contains(instant), "{}", findings[0].found);
    }
    let (events, findings) = read_in(zone, &event_at("2026-03-08 02:30", "issued = {}"));
    assert_eq!(events, []);
    assert_eq!(findings[0].code, "record-time-gap");
}

#[test]
fn events_out_of_order_are_sorted_with_a_warning_and_none_is_lost() {
    let text = event_at("2026-09-17 10:00", "issued = {}")
        + &event_at("2026-09-17 09:00", "cannot = { task = \"H05\" }");
    let (events, findings) = read(&text);
    assert_eq!(
        events.iter().map(|e| e.known.to_rfc3339()).collect::<Vec<_>>(),
        ["2026-09-17T12:00:00+00:00", "2026-09-17T13:00:00+00:00"]
    );
    assert_eq!(
        findings[0].to_string(),
        concat!(
            "events.toml:8:10 record-out-of-order (warning): this was known 2026-09-17 09:00 -03, but the event above it ",
            "2026-09-17 10:00 -03; events stand in the order in which they became known; it counts from its own time; ",
            "move it, or correct the time that is wrong"
        )
    );
}

#[test]
fn the_same_event_twice_is_a_harmless_warning() {
    let text = event("cannot = { task = \"H05\" }");
    let (events, findings) = read(&(text.clone() + &text));
    assert_eq!(
        findings.iter().map(|f| (f.code, f.place.line)).collect::<Vec<_>>(),
        [("record-same-twice", 8)]
    );
    assert_eq!(situation(&events, events[0].known), situation(&read(&text).0, events[0].known));
}

#[test]
fn a_finish_before_the_start_is_a_warning_whichever_was_told_first() {
    let start = "started = { task = \"H05\", at = \"2026-09-17 09:30\" }";
    let finish = "done = { task = \"H05\", at = \"2026-09-17 09:00\" }";
    let (first, then) = ("2026-09-17 10:00", "2026-09-17 10:05");
    for text in
        [event_at(first, start) + &event_at(then, finish), event_at(first, finish) + &event_at(then, start)]
    {
        assert_eq!(codes(&text), ["record-done-before-started"]);
    }
    let late = "started = { task = \"H05\", at = \"2026-09-17 08:00\" }";
    assert_eq!(codes(&(event_at(first, finish) + &event_at(then, late))), [] as [&str; 0]);
}

#[test]
fn an_event_that_ends_what_never_began_is_a_warning() {
    for what in [
        "withdraws_arrival = { place = \"A\", wind = \"34 kt\" }",
        "lifts = { stage = \"S3\" }",
        "back = { member = \"T3\" }",
        "retracts = { task = \"H05\", what = \"fixed_start\" }",
    ] {
        let (events, findings) = read(&event(what));
        assert_eq!(events.len(), 1);
        assert_eq!(
            findings.iter().map(|f| (f.code, f.severity)).collect::<Vec<_>>(),
            [("record-no-effect", Severity::Warning)]
        );
    }
    let taken = "took_advisory = { file = \"12.txt\" }";
    assert_eq!(codes(&(event(taken) + &event_at("2026-09-17 11:00", taken))), ["record-no-effect"]);
    // Another base time of the same deck is another forecast, and an order to plan on one is news.
    let cycle = |hour: &str| format!("took_advisory = {{ file = \"d.dat\", cycle = \"20260917{hour}\" }}");
    assert_eq!(codes(&(event(&cycle("00")) + &event_at("2026-09-17 11:00", &cycle("06")))), [""; 0]);
    let order = "took_advisory = { file = \"12.txt\", by_order = true }";
    assert_eq!(codes(&(event(taken) + &event_at("2026-09-17 11:00", order))), [""; 0]);
    assert_eq!(codes(&(event(order) + &event_at("2026-09-17 11:00", order))), ["record-no-effect"]);
}

#[test]
fn all_faults_of_an_event_are_found_at_once() {
    let text = "[[event]]\nat = \"noon\"\nobserved = { place = \"a b\", wind = \"24\", over = \"5 min\", hight = \"10 m\" }\n";
    assert_eq!(
        codes(text),
        [
            "record-missing-key",
            "record-bad-time",
            "record-bad-value",
            "record-no-unit",
            "record-unknown-word",
            "record-unknown-key"
        ]
    );
}

#[test]
fn a_misspelt_kind_is_told_what_it_may_mean() {
    let (_, findings) = read(&event("declare = { stage = \"S3\" }"));
    assert!(findings.iter().any(|finding| finding.to_do == "did you mean \"declares\"?"), "{findings:?}");
}

#[test]
fn without_a_clock_no_time_is_compared_and_no_event_counts() {
    let text = event_at("2026-09-17 10:00", "done = { task = \"H05\", at = \"2026-09-17T12:30Z\" }")
        + &event_at(
            "2026-09-17 09:00",
            "out = { member = \"T3\", from = \"2026-09-17 10:00\", until = \"2026-09-17T09:30Z\" }",
        )
        + &event_at("2026-09-17 11:00", "cannot = { tsak = \"H05\", task = \"H05\" }");
    let (events, findings) = read_events(&SourceText::new("events.toml", text), None);
    assert_eq!(events, []);
    assert_eq!(findings.iter().map(|finding| finding.code).collect::<Vec<_>>(), ["record-unknown-key"]);
}

#[test]
fn a_record_saved_by_another_system_reads_the_same() {
    let saved = format!("\u{feff}{}", EXAMPLE.replace('\n', "\r\n"));
    let (events, findings) = read(&saved);
    assert_eq!(findings, []);
    let what = |events: &[Event]| events.iter().map(|event| event.what.clone()).collect::<Vec<_>>();
    assert_eq!(what(&events), what(&read(EXAMPLE).0));
}

#[test]
fn a_call_says_a_start_or_something_else_and_not_both() {
    let both = "told = { call = \"C3F9A1\", start = \"2026-09-17 18:00\", said = \"waits\" }";
    assert_eq!(codes(&event(both)), ["record-bad-value"]);
    assert_eq!(codes(&event("told = { call = \"C3F9A1\", said = \"later\" }")), ["record-unknown-word"]);
    assert_eq!(
        codes(&event("no_answer = { call = \"C3F9A1\", at = \"2026-09-17 11:00\" }")),
        ["record-not-yet"]
    );
    assert_eq!(codes(&event("acknowledged = { call = \"C3F9A1\" }")), [""; 0]);
}

#[test]
fn an_empty_record_is_no_fault() {
    assert_eq!(read(""), (Vec::new(), Vec::new()));
}

proptest! {
    #[test]
    fn a_damaged_record_never_stops_the_reader(
        at in any::<proptest::sample::Index>(),
        length in 0_usize..40,
        new in proptest::collection::vec(any::<u8>(), 0..12),
    ) {
        let mut bytes = EXAMPLE.as_bytes().to_vec();
        let start = at.index(bytes.len());
        let end = (start + length).min(bytes.len());
        bytes.splice(start..end, new);
        let text = String::from_utf8_lossy(&bytes).into_owned();
        let (events, findings) = read(&text);
        assert!(events.len() <= 42);
        assert!(events.len() == 42 || !findings.is_empty() || length > 0);
        assert!(findings.iter().all(|finding| finding.place.end <= text.len()));
    }

    #[test]
    fn any_bytes_at_all_are_read_or_refused(bytes in proptest::collection::vec(any::<u8>(), 0..400)) {
        let (events, _) = read(&String::from_utf8_lossy(&bytes));
        assert!(events.is_empty());
    }
}
