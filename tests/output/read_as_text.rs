//! Plans and changes as plain text.

use crate::fixture::{at, clock, empty, odd, rich, setting, some_plan};
use proptest::prelude::proptest;
use snugdown::output::changes_text::changes_text;
use snugdown::output::layout::columns;
use snugdown::output::plan_text::plan_text;
use snugdown::plan::changes::{ArrivalMoved, Changes, StageMoved, TaskMoved, TaskTurned, Turn};
use snugdown::plan::sheet::StageStatus;

#[test]
fn a_rich_plan_at_80_columns() {
    insta::assert_snapshot!(plan_text(&rich(), &setting(&clock()), 80));
}

#[test]
fn a_rich_plan_at_120_columns() {
    insta::assert_snapshot!(plan_text(&rich(), &setting(&clock()), 120));
}

#[test]
fn an_empty_plan_at_80_columns() {
    insta::assert_snapshot!(plan_text(&empty(), &setting(&clock()), 80));
}

#[test]
fn odd_names_are_shown_and_not_obeyed() {
    let text = plan_text(&odd(), &setting(&clock()), 80);
    assert!(!text.contains(['\u{202e}', '\u{1b}']));
    // Words are broken at the margin, so look for the name without its breaks.
    let squeezed: String = text.split_whitespace().collect();
    assert!(squeezed.contains("<b>&\"';,\\n\\u{202e}\\u{1b}[2J⚓港"), "{text}");
}

#[test]
fn an_overdue_advisory_is_said_loudly() {
    let mut plan = rich();
    if let Some(advisory) = &mut plan.advisory {
        advisory.is_overdue = true;
        advisory.next_due = Some(at(17, 5, 0));
    }
    let text = plan_text(&plan, &setting(&clock()), 120);
    assert!(text.contains("NOT CURRENT: "), "{text}");
    assert!(text.contains("1 h 20 min OVERDUE"), "{text}");
}

#[test]
fn the_overtaken_adopted_arrival_comes_before_the_order_in_force() {
    let text = plan_text(&rich(), &setting(&clock()), 80);
    let overtaken = text.find("EARLIER THAN ADOPTED").unwrap();
    assert!(overtaken < text.find("in force").unwrap());
    assert!(overtaken < text.find("CANNOT BE DONE").unwrap());
}

#[test]
fn every_earliest_time_stands_in_a_sentence_with_the_chance_that_it_comes() {
    let text = plan_text(&rich(), &setting(&clock()), 160);
    let joined = text.replace("\n              ", " ");
    let with_times: Vec<&str> = joined.lines().filter(|line| line.contains("earliest")).collect();
    assert_eq!(with_times.len(), 2, "{text}");
    assert!(with_times.iter().all(|line| line.contains("71 % chance that it comes")), "{text}");
}

#[test]
fn changes_at_80_columns() {
    insta::assert_snapshot!(changes_text(&changes(), &setting(&clock()), 80));
}

#[test]
fn no_changes_at_80_columns() {
    let changes = Changes {
        arrivals: vec![],
        stages: vec![],
        moved: vec![],
        turned: vec![],
        news: vec![],
        ..changes()
    };
    insta::assert_snapshot!(changes_text(&changes, &setting(&clock()), 80));
}

fn changes() -> Changes {
    let turned = |id: &str, turn, cause: &str| TaskTurned {
        id: id.into(),
        name: format!("{id} by name"),
        turn,
        cause: cause.into(),
    };
    Changes {
        from: at(16, 18, 20),
        to: at(17, 6, 20),
        news: vec!["advisory 12 taken".into(), "T3 out of service".into()],
        arrivals: vec![ArrivalMoved {
            place: "Pilot boarding place".into(),
            wind: "34 kt".into(),
            is_adopted: false,
            from: Some(at(18, 22, 0)),
            to: Some(at(18, 14, 0)),
            cause: "advisory 12 is faster and larger".into(),
        }],
        stages: vec![StageMoved {
            id: "S3".into(),
            name: "Clear the port".into(),
            from: Some(at(17, 22, 0)),
            to: Some(at(17, 14, 0)),
            was: StageStatus::NotDue,
            is: StageStatus::Computed,
            cause: "34 kt is computed 8 h earlier".into(),
        }],
        moved: vec![TaskMoved {
            id: "V04/sail".into(),
            name: "Lunden Gale to sea".into(),
            from: at(17, 12, 0),
            to: at(17, 10, 0),
            cause: "T1 is needed by V03/sail from 11:30".into(),
        }],
        turned: vec![
            turned("V01/sail", Turn::GivenUp, "the port must be clear 8 h earlier"),
            turned("V02/sail", Turn::Relieved, "one more pilot"),
            turned("H01", Turn::Done, ""),
        ],
    }
}

proptest! {
    #[test]
    fn no_line_of_a_plan_is_wider_than_asked(plan in some_plan(), width in 60_usize..140) {
        let clock = clock();
        for line in plan_text(&plan, &setting(&clock), width).lines() {
            assert!(columns(line) <= width, "{line}");
        }
    }
}
