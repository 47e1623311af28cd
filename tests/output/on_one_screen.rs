//! `now` fits on one screen, whatever the plan.

use crate::fixture::{ODD, clock, empty, rich, setting, some_plan};
use proptest::prelude::{any, proptest};
use snugdown::output::layout::columns;
use snugdown::output::now_lists::NowOptions;
use snugdown::output::now_text::{COLUMNS, LINES, now_text};
use snugdown::time::moment::Minutes;

fn everybody() -> NowOptions {
    NowOptions { concerning: None, ahead: Minutes::hours(6) }
}

#[test]
fn a_rich_plan_on_one_screen() {
    insta::assert_snapshot!(now_text(&rich(), &setting(&clock()), &everybody()));
}

#[test]
fn an_empty_plan_on_one_screen() {
    insta::assert_snapshot!(now_text(&empty(), &setting(&clock()), &everybody()));
}

#[test]
fn only_what_concerns_the_tugs() {
    let options = NowOptions { concerning: Some("T4".into()), ahead: Minutes::hours(6) };
    insta::assert_snapshot!(now_text(&rich(), &setting(&clock()), &options));
}

#[test]
fn a_long_list_is_cut_with_a_count_and_keeps_its_first_line() {
    let mut plan = rich();
    let next = plan.tasks.iter().find(|task| task.id == "V04/sail").unwrap().clone();
    for number in 0..50 {
        let mut task = next.clone();
        task.id = format!("X{number:02}/sail");
        plan.tasks.push(task);
    }
    let text = now_text(&plan, &setting(&clock()), &everybody());
    assert!(text.contains(" more)"), "{text}");
    assert!(text.contains("V01/sail") && text.contains("DECISIONS DUE"), "{text}");
    assert_eq!(text.lines().count(), LINES, "{text}");
}

proptest! {
    #[test]
    fn it_is_never_more_than_24_lines_of_80_columns(
        plan in some_plan(), who in proptest::option::of(any::<String>()), hours in 0_i64..400, long_names in any::<bool>(),
    ) {
        let clock = clock();
        let long = ODD.repeat(9);
        let mut setting = setting(&clock);
        if long_names {
            (setting.port, setting.authority, setting.official_source) = (&long, &long, &long);
            setting.invented = &long;
        }
        let text = now_text(&plan, &setting, &NowOptions { concerning: who, ahead: Minutes::hours(hours) });
        assert!(text.lines().count() <= LINES, "{text}");
        for line in text.lines() {
            assert!(columns(line) <= COLUMNS, "{} columns: {line}", columns(line));
            assert!(!line.contains(['\u{202e}', '\u{1b}']), "{line:?}");
        }
        for label in ["in force", "advisory", "NO LONGER FITS", "NOT REPORTED", "START NOW", "DECISIONS DUE"] {
            assert!(text.lines().any(|line| line.starts_with(label)), "{label} is missing:\n{text}");
        }
    }
}
