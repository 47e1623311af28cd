//! Each fault in the files of rules and tasks, by the smallest change to a good port that makes it.

mod small_port;

use small_port::{edited, listed, provokes, small_port};
use snugdown::finding::source::SourceText;
use snugdown::rules::folder::read_folder;

#[test]
fn a_text_that_is_not_toml_is_named_with_its_place() {
    provokes("rules.toml", ("title = \"Tarrow", "title = ^Tarrow"), "rules-syntax", &["mend this first"]);
}

#[test]
fn a_key_that_stands_twice_is_named() {
    provokes(
        "tasks.toml",
        ("gate = \"R\"", "gate = \"R\"\n^gate = \"S1\""),
        "rules-duplicate-key",
        &["twice"],
    );
}

#[test]
fn an_unknown_key_is_told_from_the_one_that_was_meant() {
    provokes(
        "tasks.toml",
        ("daylight = \"whole\"", "^dayligth = \"whole\""),
        "rules-unknown-key",
        &["did you mean \"daylight\"?"],
    );
    provokes(
        "tasks.toml",
        ("{ plant = { tagged", "{ plant = { ^draught_over = \"3 m\", tagged"),
        "rules-unknown-key",
        &["a choice of plant has no key"],
    );
    provokes(
        "tasks.toml",
        ("stop_at = { wind = \"30 kt\", at", "stop_at = { gust = ^\"30 kt\", wind = \"30 kt\", at"),
        "rules-unknown-key",
        &["says gust as well as wind"],
    );
}

#[test]
fn a_missing_key_is_named_at_its_table() {
    provokes(
        "tasks.toml",
        ("{ wind = \"34 kt\", at = \"quays\", lead = \"1 h\" }", "^{ wind = \"34 kt\", at = \"quays\" }"),
        "rules-missing-key",
        &["before a wind lacks the key lead"],
    );
    provokes(
        "tasks.toml",
        ("not_before = [{ stage = \"R\", after = \"0 min\" }]", "not_before = [^{ after = \"0 min\" }]"),
        "rules-missing-key",
        &["says none of wind, gust, seas, stage, clock"],
    );
}

#[test]
fn a_quantity_without_its_unit_is_not_guessed_at() {
    provokes(
        "rules.toml",
        ("reckoning = { chance = \"10 %\" }", "reckoning = { chance = ^10 }"),
        "rules-no-unit",
        &["\"10 %\""],
    );
}

#[test]
fn nan_and_infinity_are_refused() {
    provokes(
        "tasks.toml",
        ("stop_at = { wind = \"30 kt\"", "stop_at = { wind = ^inf"),
        "rules-bad-value",
        &["not a number"],
    );
}

#[test]
fn absurd_sizes_are_refused() {
    provokes(
        "tasks.toml",
        ("height = \"45 m\"", "height = ^\"4500 m\""),
        "rules-bad-value",
        &["1 m to 250 m"],
    );
    provokes("tasks.toml", ("weight = 500", "weight = ^0"), "rules-bad-value", &["1 to 1000"]);
}

#[test]
fn absurd_time_spans_are_refused() {
    provokes(
        "tasks.toml",
        ("takes = \"20 min\"", "takes = ^\"0 min\""),
        "rules-bad-value",
        &["at least 1 min"],
    );
    provokes(
        "tasks.toml",
        ("takes = \"20 min\"", "takes = ^\"-20 min\""),
        "rules-bad-value",
        &["at least 1 min"],
    );
    provokes(
        "tasks.toml",
        ("takes = \"20 min\"", "takes = ^\"400 d\""),
        "rules-bad-value",
        &["at most 30 days"],
    );
    provokes(
        "tasks.toml",
        ("takes = \"20 min\"", "takes = ^\"20 minutes or so\""),
        "rules-bad-value",
        &["not a time span"],
    );
    provokes(
        "tasks.toml",
        ("lead = \"4 h\"", "lead = ^\"99 d\""),
        "rules-bad-value",
        &["30 days either way"],
    );
}

#[test]
fn an_id_with_blanks_or_slashes_is_refused() {
    provokes("tasks.toml", ("id = \"R1\"", "id = ^\"R/1\""), "rules-bad-value", &["this cannot be an id"]);
}

#[test]
fn a_word_that_is_not_in_the_list_gets_the_list() {
    provokes(
        "tasks.toml",
        ("direction = \"out\"", "direction = ^\"outwards\""),
        "rules-unknown-word",
        &["\"out\", \"in\""],
    );
    provokes(
        "rules.toml",
        ("averaging = \"10 min\"", "averaging = ^\"5 min\""),
        "rules-unknown-word",
        &["\"1 min\""],
    );
}

#[test]
fn an_id_is_given_once_and_never_differs_by_case_only() {
    provokes(
        "tasks.toml",
        ("id = \"H2\"", "id = ^\"h1\""),
        "rules-duplicate-id",
        &["differs by case only from the task \"H1\""],
    );
    provokes(
        "tasks.toml",
        ("id = \"R1\"", "id = ^\"R\""),
        "rules-duplicate-id",
        &["already that of the stage at rules.toml:"],
    );
}

#[test]
fn an_unknown_id_is_named_with_those_that_exist() {
    provokes(
        "rules.toml",
        ("at = \"pilot-station\", lead", "at = ^\"bar\", lead"),
        "rules-unknown-place",
        &["place \"bar\" is not listed", "\"pilot-station\", \"quays\""],
    );
    provokes("tasks.toml", ("berths = [\"Q1\"]", "berths = [^\"Q3\"]"), "rules-unknown-berth", &["\"Q3\""]);
    provokes(
        "tasks.toml",
        ("for_each = { ships = {} }", "for_each = { ships = { ids = [\"V01\", ^\"V09\"] } }"),
        "rules-unknown-ship",
        &["\"V01\", \"V02\""],
    );
    provokes(
        "tasks.toml",
        ("{ plant = { tagged", "{ plant = { ids = [^\"K9\"], tagged"),
        "rules-unknown-plant",
        &["piece of plant \"K9\""],
    );
    provokes(
        "tasks.toml",
        ("needs = { pool = \"gang\"", "needs = { pool = ^\"gangs\""),
        "rules-unknown-pool",
        &["did you mean \"gang\"?"],
    );
    provokes(
        "tasks.toml",
        ("passage = { channel = \"main\"", "passage = { channel = ^\"north\""),
        "rules-unknown-channel",
        &["water.toml lists \"main\""],
    );
    provokes(
        "tasks.toml",
        ("gate = \"S2\"", "gate = ^\"S4\""),
        "rules-unknown-stage",
        &["stage \"S4\" is not listed", "\"R\", \"S1\", \"S2\""],
    );
    provokes("rules.toml", ("stage = \"S2\"", "stage = ^\"S3\""), "rules-unknown-stage", &["did you mean"]);
}

#[test]
fn the_earliest_or_likely_arrival_needs_a_least_chance() {
    provokes(
        "rules.toml",
        ("reckoning = { chance = \"10 %\" }", "reckoning = ^\"likely\""),
        "rules-no-least-chance",
        &["likely arrival without"],
    );
    provokes(
        "rules.toml",
        ("{ earliest = { at_least = \"20 %\" } } } }", "{ earliest = ^{} } } }"),
        "rules-no-least-chance",
        &["{ earliest = { at_least"],
    );
    provokes(
        "rules.toml",
        ("{ earliest = { at_least = \"20 %\" } } } }", "{ likely = ^true } } }"),
        "rules-no-least-chance",
        &["the likely arrival"],
    );
}

#[test]
fn a_chance_that_is_always_or_never_reached_is_refused() {
    provokes(
        "rules.toml",
        ("reckoning = { chance = \"10 %\" }", "reckoning = { chance = ^\"0 %\" }"),
        "rules-bad-chance",
        &["always or never"],
    );
    provokes(
        "rules.toml",
        ("least_chance = \"5 %\"", "least_chance = ^\"100 %\""),
        "rules-bad-chance",
        &["less than 100 %"],
    );
}

#[test]
fn a_stage_does_not_wait_for_itself() {
    provokes(
        "rules.toml",
        ("stage = { id = \"S1\"", "stage = { id = ^\"S2\""),
        "rules-stage-itself",
        &["\"S2\" waits for itself"],
    );
}

#[test]
fn a_need_is_for_members_that_the_pool_has() {
    provokes(
        "tasks.toml",
        ("needs = { pool = \"gang\", count = 1", "needs = { pool = \"gang\", count = ^0"),
        "rules-zero-count",
        &["a need for 0"],
    );
    provokes(
        "tasks.toml",
        ("needs = { pool = \"tug\", count = 2", "needs = { pool = \"tug\", count = ^3"),
        "rules-too-few",
        &["3 of \"tug\" needed, and there are 2"],
    );
    provokes(
        "tasks.toml",
        ("count = 1, class = { own = \"pilot\" }", "count = ^2, class = { own = \"pilot\" }"),
        "rules-too-few",
        &["of class \"unlimited\" needed for V01, and there are 1"],
    );
    provokes(
        "tasks.toml",
        ("count = 1, class = { own = \"pilot\" }", "count = 1, class = ^\"unlimted\""),
        "rules-unknown-class",
        &["no member of \"pilot\" has the class", "did you mean \"unlimited\"?"],
    );
}

#[test]
fn a_value_of_its_own_belongs_to_a_thing() {
    provokes(
        "tasks.toml",
        ("takes = \"30 min\"                               #", "takes = { own = ^\"secure\" } #"),
        "rules-own-without-thing",
        &["nothing is repeated"],
    );
    provokes(
        "tasks.toml",
        ("\"T1-moor\", { every", "{ same = ^\"sail\" }, { every"),
        "rules-own-without-thing",
        &["same = \"sail\""],
    );
    provokes(
        "tasks.toml",
        ("takes = { own = \"clear\" }", "takes = { own = ^\"cleer\" }"),
        "rules-own-missing",
        &["no own value \"cleer\" for \"Q1\", \"Q2\""],
    );
    provokes(
        "tasks.toml",
        ("takes = { own = \"tie\" }", "takes = { own = ^\"tei\" }"),
        "rules-own-missing",
        &["\"K1\""],
    );
    provokes(
        "tasks.toml",
        ("takes = { own = \"secure\" }\n", "takes = { own = ^\"tugs\" }\n"),
        "rules-own-wrong",
        &["\"V01\", \"V02\"", "a time span"],
    );
}

#[test]
fn a_shorter_way_is_shorter() {
    provokes(
        "tasks.toml",
        (
            "takes = \"4 h\"",
            "takes = \"4 h\"\nmay_be_cut = { to = ^\"4 h\", price = \"fewer lines\", leave = \"permitted\" }",
        ),
        "rules-not-shorter",
        &["less than 4 h"],
    );
}

#[test]
fn a_part_of_a_task_lies_within_it() {
    provokes(
        "tasks.toml",
        ("leaves = \"1 h 15 min\"", "leaves = ^\"10 min\""),
        "rules-bad-part",
        &["is not after enters"],
    );
    provokes(
        "tasks.toml",
        ("leaves = \"1 h 15 min\"", "leaves = ^\"2 h\""),
        "rules-bad-part",
        &["after the end of the task"],
    );
}

#[test]
fn a_thing_that_needs_more_than_there_are_is_named() {
    let (_, findings) = read_folder(&edited("ships.toml", "tugs = 1", "tugs = 5").0);
    let text = listed(&findings);
    assert!(text.contains("rules-too-few: 5 of \"tug\" needed for V02, and there are 2"), "{text}");
    assert_eq!(findings.len(), 1, "{text}");
}

#[test]
fn a_template_that_makes_no_task_is_a_warning() {
    let edit = ("kinds = [\"quay crane\"], berths", "kinds = [\"yard crane\"], berths");
    let (read, findings) = read_folder(&edited("tasks.toml", edit.0, edit.1).0);
    let text = listed(&findings);
    assert!(text.contains("rules-picks-nothing (warning): no piece of plant passes"), "{text}");
    assert!(text.contains("kinds in port: \"quay crane\""), "{text}");
    assert!(read.is_some() && findings.len() == 1, "{text}");
}

#[test]
fn a_ship_that_no_tide_floats_is_a_warning() {
    let (read, findings) =
        read_folder(&edited("ships.toml", "draught = \"11.4 m\"", "draught = \"13.4 m\"").0);
    let text = listed(&findings);
    assert!(
        text.contains(
            "rules-never-floats (warning): no tide gives enough water in channel \"main\" for \"V01\""
        ),
        "{text}"
    );
    assert!(read.is_some() && findings.len() == 1, "{text}");
}

#[test]
fn a_tide_that_is_needed_but_not_given_is_named() {
    let mut folder = small_port();
    let text = folder.get("water.toml").unwrap().text().to_owned();
    let (start, end) = (text.find("[tide]").unwrap(), text.find("[[channel]]").unwrap());
    let without = format!("{}{}", &text[..start], &text[end..]);
    folder.insert("water.toml".to_owned(), SourceText::new("water.toml", without));
    let (_, findings) = read_folder(&folder);
    let codes: Vec<&str> = findings.iter().map(|finding| finding.code).collect();
    assert_eq!(codes, ["rules-no-tide"], "{}", listed(&findings));
}

#[test]
fn local_times_that_clocks_skip_or_show_twice_are_refused_with_both_instants() {
    let in_new_york = |file: &str, old: &str, new: &str| {
        let mut folder = edited(file, old, new).0;
        let port = folder.get("port.toml").unwrap().text().replace("Etc/GMT+3", "America/New_York");
        folder.insert("port.toml".to_owned(), SourceText::new("port.toml", port));
        let (_, findings) = read_folder(&folder);
        assert_eq!(findings.len(), 1, "{}", listed(&findings));
        (findings[0].code, findings[0].found.clone())
    };
    let clock = "clock = \"2026-09-17T06:20-03:00\"";
    let (code, found) = in_new_york("port.toml", clock, "clock = \"2026-03-08 02:30\"");
    assert_eq!(code, "port-time-gap", "{found}");
    assert!(found.contains("02:00") && found.contains("03:00"), "{found}");
    let (code, found) = in_new_york("port.toml", clock, "clock = \"2026-11-01 01:30\"");
    assert_eq!(code, "port-time-fold", "{found}");
    assert!(
        found.contains("2026-11-01T01:30:00-04:00 or 2026-11-01T01:30:00-05:00")
            || found.contains("01:30-04:00"),
        "{found}"
    );
    let deadline = "clock = \"2026-09-19T12:00-03:00\"";
    assert_eq!(in_new_york("tasks.toml", deadline, "clock = \"2026-03-08 02:30\"").0, "rules-time-gap");
    assert_eq!(in_new_york("tasks.toml", deadline, "clock = \"2026-11-01 01:30\"").0, "rules-time-fold");
}
