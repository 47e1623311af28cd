//! Each fault in the port's own files, by the smallest change to a good port that makes it.

mod small_port;

use small_port::{edited, listed, provokes};
use snugdown::rules::folder::read_folder;

#[test]
fn a_text_that_is_not_toml_is_named_with_its_place() {
    provokes("ships.toml", ("id = \"V01\"", "id = ^V01"), "port-syntax", &["mend this first"]);
}

#[test]
fn a_key_that_stands_twice_is_named() {
    provokes(
        "ships.toml",
        ("kind = \"container\"", "kind = \"container\"\n^kind = \"tanker\""),
        "port-duplicate-key",
        &["twice"],
    );
}

#[test]
fn an_unknown_key_is_told_from_the_one_that_was_meant() {
    provokes(
        "ships.toml",
        ("draught = \"11.4 m\"", "draught = \"11.4 m\"\n^draugth = \"11 m\""),
        "port-unknown-key",
        &["a ship has no key \"draugth\"", "did you mean \"draught\"?"],
    );
    provokes(
        "port.toml",
        ("[exercise]", "[^exercize]"),
        "port-unknown-key",
        &["this file has no key", "did you mean \"exercise\"?"],
    );
    provokes(
        "water.toml",
        ("deep = { light", "shallow = ^{ light = \"1 h\", deep = \"1 h\" }\ndeep = { light"),
        "port-unknown-key",
        &["\"shallow\" is not a class of this channel", "\"light\", \"deep\""],
    );
}

#[test]
fn an_issuer_too_short_to_be_known_by_is_named() {
    provokes(
        "port.toml",
        ("authority = \"Harbour Master\"", "official_issuer = [^\"X\"]\nauthority = \"Harbour Master\""),
        "port-bad-value",
        &["too short to know an issuer by"],
    );
}

#[test]
fn a_missing_key_is_named_at_its_table() {
    provokes(
        "berths.toml",
        ("[[berth]]\nid = \"Q2\"\nname = \"Quay 2, general cargo\"", "^[[berth]]\nid = \"Q2\""),
        "port-missing-key",
        &["a berth lacks the key name"],
    );
}

#[test]
fn a_value_of_the_wrong_kind_is_told_what_it_should_be() {
    provokes(
        "ships.toml",
        ("gross_tonnage = 28000", "gross_tonnage = ^\"28000\""),
        "port-wrong-type",
        &["is a text", "a whole number without quotation marks"],
    );
    provokes(
        "ships.toml",
        ("self_propelled = true", "self_propelled = ^\"yes\""),
        "port-wrong-type",
        &["true or false"],
    );
    provokes("plant.toml", ("[[plant]]", "^[plant]"), "port-wrong-type", &["[[plant]]"]);
    provokes(
        "rules.toml",
        ("title = \"Tarrow Haven storm rules\"", "title = ^7"),
        "rules-wrong-type",
        &["title = 7 is a number"],
    );
}

#[test]
fn a_quantity_without_its_unit_is_not_guessed_at() {
    provokes("ships.toml", ("draught = \"11.4 m\"", "draught = ^11.4"), "port-no-unit", &["\"11.4 m\""]);
    provokes("water.toml", ("depth = \"10.6 m\"", "depth = ^\"10.6\""), "port-no-unit", &["\"10.6 m\""]);
    provokes("ships.toml", ("secure = \"3 h\"", "secure = ^3.0"), "port-no-unit", &["\"3.0 h\""]);
    provokes(
        "tasks.toml",
        ("stop_at = { wind = \"30 kt\"", "stop_at = { wind = ^30"),
        "rules-no-unit",
        &["\"30 kt\""],
    );
}

#[test]
fn nan_and_infinity_are_refused() {
    provokes("ships.toml", ("draught = \"11.4 m\"", "draught = ^nan"), "port-bad-value", &["not a number"]);
    provokes(
        "ships.toml",
        ("draught = \"11.4 m\"", "draught = ^\"NaN m\""),
        "port-bad-value",
        &["not a number"],
    );
    provokes(
        "water.toml",
        ("mean_level = \"1.8 m\"", "mean_level = ^\"inf m\""),
        "port-bad-value",
        &["not a number"],
    );
}

#[test]
fn absurd_sizes_are_refused() {
    provokes(
        "ships.toml",
        ("length = \"210 m\"", "length = ^\"0 m\""),
        "port-bad-value",
        &["out of range", "1 m to 500 m"],
    );
    provokes(
        "ships.toml",
        ("length = \"210 m\"", "length = ^\"2100 ft\""),
        "port-bad-value",
        &["out of range"],
    );
    provokes(
        "ships.toml",
        ("draught = \"11.4 m\"", "draught = ^\"-11.4 m\""),
        "port-bad-value",
        &["out of range"],
    );
    provokes(
        "ships.toml",
        ("draught = \"11.4 m\"", "draught = ^\"1140 m\""),
        "port-bad-value",
        &["0.1 m to 30 m"],
    );
    provokes(
        "ships.toml",
        ("draught = \"11.4 m\"", "draught = ^\"11.4 fathoms\""),
        "port-bad-value",
        &["m, cm, ft"],
    );
    provokes(
        "ships.toml",
        ("gross_tonnage = 28000", "gross_tonnage = ^-5"),
        "port-bad-value",
        &["out of range", "1 to 500000"],
    );
    provokes(
        "ships.toml",
        ("gross_tonnage = 28000", "gross_tonnage = ^99999999999999999999999999999999999999999"),
        "port-bad-value",
        &["out of range"],
    );
    provokes("ships.toml", ("name = \"Corrie Weir\"", "name = ^\" \""), "port-bad-value", &["empty"]);
    provokes(
        "tasks.toml",
        ("stop_at = { wind = \"30 kt\"", "stop_at = { wind = ^\"0 kt\""),
        "rules-bad-value",
        &["no wind at all"],
    );
}

#[test]
fn absurd_time_spans_are_refused() {
    provokes(
        "means.toml",
        ("at_most = \"12 h\"", "at_most = ^\"0 h\""),
        "port-bad-value",
        &["at least 1 min"],
    );
}

#[test]
fn an_id_with_blanks_or_slashes_is_refused() {
    provokes("plant.toml", ("id = \"K1\"", "id = ^\"K 1\""), "port-bad-value", &["this cannot be an id"]);
}

#[test]
fn a_word_that_is_not_in_the_list_gets_the_list() {
    provokes(
        "port.toml",
        ("exposure = \"at-sea\"", "exposure = ^\"at-see\""),
        "port-unknown-word",
        &["\"off-sea\"", "did you mean \"at-sea\"?"],
    );
}

#[test]
fn a_time_that_cannot_be_read_is_refused() {
    provokes(
        "port.toml",
        ("clock = \"2026-09-17T06:20-03:00\"", "clock = ^\"yesterday\""),
        "port-bad-time",
        &["is not a time"],
    );
    provokes(
        "port.toml",
        ("clock = \"2026-09-17T06:20-03:00\"", "clock = ^\"2026-02-30T06:20-03:00\""),
        "port-bad-time",
        &["does not exist"],
    );
    provokes("means.toml", ("from = \"06:00\"", "from = ^\"6 am\""), "port-bad-time", &["not a time of day"]);
    provokes(
        "tasks.toml",
        ("clock = \"2026-09-19T12:00-03:00\"", "clock = ^\"2026-09-19T25:00-03:00\""),
        "rules-bad-time",
        &["does not exist"],
    );
}

#[test]
fn an_id_is_given_once_and_never_differs_by_case_only() {
    provokes(
        "ships.toml",
        ("id = \"V02\"", "id = ^\"V01\""),
        "port-duplicate-id",
        &["already that of a ship at ships.toml:4:6"],
    );
    provokes(
        "ships.toml",
        ("id = \"V02\"", "id = ^\"q2\""),
        "port-duplicate-id",
        &["differs by case only from the berth \"Q2\""],
    );
    provokes(
        "means.toml",
        ("members = [\"T1\", \"T2\"]", "members = [\"T1\", ^\"P1\"]"),
        "port-duplicate-id",
        &["\"P1\" is already that of a member"],
    );
    provokes(
        "water.toml",
        ("{ name = \"deep\", draught_over", "^{ name = \"light\", draught_over"),
        "port-duplicate-id",
        &["\"light\" stands twice"],
    );
}

#[test]
fn an_unknown_id_is_named_with_those_that_exist() {
    provokes(
        "ships.toml",
        ("berth = \"Q2\"", "berth = ^\"Q7\""),
        "port-unknown-berth",
        &["berth \"Q7\" is not listed", "berths.toml lists \"Q1\", \"Q2\""],
    );
    provokes(
        "ships.toml",
        ("berth = \"Q2\"", "berth = ^\"quays\""),
        "port-unknown-berth",
        &["\"quays\" is a place, not a berth"],
    );
    provokes(
        "ships.toml",
        ("berth = \"Q2\"", "berth = ^\"q2\""),
        "port-unknown-berth",
        &["did you mean \"Q2\"?"],
    );
    provokes(
        "port.toml",
        ("reference = \"pilot-station\"", "reference = ^\"pilot-staton\""),
        "port-unknown-place",
        &["did you mean \"pilot-station\"?"],
    );
}

#[test]
fn an_unknown_zone_is_refused() {
    provokes(
        "port.toml",
        ("zone = \"Etc/GMT+3\"", "zone = ^\"Etc/GMT+33\""),
        "port-unknown-zone",
        &["is not a time zone"],
    );
}

#[test]
fn a_position_that_cannot_be_read_is_refused() {
    provokes(
        "port.toml",
        ("position = \"22 24.0 N 040 54.0 W\"", "position = ^\"22.4, -40.9\""),
        "port-bad-position",
        &["latitude first"],
    );
    provokes(
        "port.toml",
        ("position = \"22 24.0 N 040 54.0 W\"", "position = ^\"92 24.0 N 040 54.0 W\""),
        "port-bad-position",
        &["beyond 90"],
    );
}

#[test]
fn a_pool_has_members() {
    provokes("means.toml", ("members = [\"L1\"]", "members = ^[]"), "port-empty-pool", &["no members"]);
}

#[test]
fn what_ends_ends_after_it_begins() {
    provokes("means.toml", ("to = \"20:00\"", "to = ^\"06:00\""), "port-bad-span", &["ends when it begins"]);
    provokes(
        "means.toml",
        ("to = \"2026-09-17T02:00-03:00\"", "to = ^\"2026-09-16T02:00-03:00\""),
        "port-bad-span",
        &["2026-09-16T05:00Z, not after it begins, 2026-09-17T01:00Z"],
    );
}

#[test]
fn classes_of_a_channel_stand_in_order_and_have_all_spacings() {
    provokes(
        "water.toml",
        ("draught_over = \"10 m\"", "draught_over = ^\"0 m\""),
        "port-class-order",
        &["shallowest first"],
    );
}

#[test]
fn depths_and_levels_count_from_one_datum() {
    provokes(
        "water.toml",
        (
            "datum = \"chart datum\"                          # what the depth",
            "datum = ^\"mean sea level\"        # what the depth",
        ),
        "port-other-datum",
        &["\"mean sea level\"", "\"chart datum\""],
    );
}

#[test]
fn a_tide_that_cannot_be_is_refused() {
    provokes(
        "water.toml",
        ("constituent = \"S2\"", "constituent = ^\"S9\""),
        "port-bad-tide",
        &["not a tidal constituent"],
    );
    provokes(
        "water.toml",
        ("simple = [\n  { constituent = \"M2\"", "simple = ^[\n  { constituent = \"S2\""),
        "port-bad-tide",
        &["S2 is given twice"],
    );
}

#[test]
fn an_own_value_is_a_count_a_time_span_a_time_or_a_class() {
    provokes(
        "ships.toml",
        ("secure = \"3 h\"", "secure = ^\"3 hrs\""),
        "port-bad-own-value",
        &["{ class = \"3 hrs\" }"],
    );
}

#[test]
fn places_count_from_a_place_that_counts_from_itself() {
    let (old, new) =
        ("name = \"Pilot boarding place\"", "name = \"Pilot boarding place\"\ncounts_from = \"quays\"");
    let (_, findings) = read_folder(&edited("port.toml", old, new).0);
    let codes: Vec<&str> = findings.iter().map(|finding| finding.code).collect();
    assert_eq!(codes, ["port-not-a-reference", "port-not-a-reference"], "{}", listed(&findings));
}

#[test]
fn a_spacing_left_out_is_named() {
    let (old, new) = ("deep = { light = \"45 min\", deep = \"45 min\" }", "deep = { light = \"45 min\" }");
    let (_, findings) = read_folder(&edited("water.toml", old, new).0);
    let text = listed(&findings);
    assert!(text.contains("port-no-spacing: no spacing for a \"deep\" ship after a \"deep\" one"), "{text}");
    assert_eq!(findings.len(), 1, "{text}");
}

#[test]
fn a_contact_is_for_known_pools_and_each_name_and_pool_has_one() {
    provokes(
        "means.toml",
        ("pools = [\"tug\"]", "pools = [^\"tugs\"]"),
        "port-unknown-pool",
        &["not listed", "tug"],
    );
    provokes(
        "means.toml",
        ("who = \"Pilot office\"", "who = ^\"tug OFFICE\""),
        "port-duplicate-contact",
        &["has a contact already"],
    );
    provokes(
        "means.toml",
        ("pools = [\"pilot\"]", "pools = [\"pilot\", ^\"tug\"]"),
        "port-duplicate-contact",
        &["Tug office is called for \"tug\" already"],
    );
}
