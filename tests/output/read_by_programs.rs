//! The JSON forms: their keys, and that nothing is lost or rounded on the way.

use crate::fixture::{ODD, at, clock, empty, odd, rich, setting, some_plan};
use proptest::prelude::proptest;
use serde_json::{Value, json};
use snugdown::output::now_lists::{NowOptions, now_of};
use snugdown::output::wire::changes::{ChangesOut, changes_out};
use snugdown::output::wire::now::{NowOut, now_out};
use snugdown::output::wire::plan::{PlanOut, plan_out};
use snugdown::output::wire::value::to_text;
use snugdown::plan::changes::{Changes, TaskMoved};
use snugdown::time::moment::Minutes;

fn moved() -> Changes {
    let task = TaskMoved {
        id: "V04/sail".into(),
        name: "Lunden Gale to sea".into(),
        from: at(17, 12, 0),
        to: at(17, 10, 0),
        cause: "T1 is needed by V03/sail".into(),
    };
    Changes {
        from: at(16, 18, 20),
        to: at(17, 6, 20),
        news: vec![],
        arrivals: vec![],
        stages: vec![],
        moved: vec![task],
        turned: vec![],
    }
}

#[test]
fn the_plan_as_json() {
    insta::assert_snapshot!(to_text(&plan_out(&rich(), &setting(&clock()), Some(&moved()))).unwrap());
}

#[test]
fn a_task_keeps_its_promised_keys() {
    let plan: Value =
        serde_json::from_str(&to_text(&plan_out(&rich(), &setting(&clock()), Some(&moved()))).unwrap())
            .unwrap();
    let sail = &plan["tasks"][0];
    for key in ["id", "start", "finish", "latest_start", "members", "state", "given_up"] {
        assert!(sail.get(key).is_some(), "{key}");
    }
    assert_eq!(sail["state"], "given_up");
    assert_eq!(sail["given_up"]["proved"], true);
    assert!(sail["given_up"]["why"].as_str().unwrap().contains("tide"));
    assert_eq!(plan["schema"], 1);
    assert_eq!(plan["stages"][1]["status"], "declared");
    assert_eq!(plan["moved"][0]["from"], "2026-09-17T15:00:00Z");
    assert_eq!(plan["moved"][0]["cause"], "T1 is needed by V03/sail");
}

#[test]
fn times_in_json_are_exact_where_people_are_told_rounded_ones() {
    let plan = plan_out(&rich(), &setting(&clock()), None);
    let cut = plan.tasks.iter().find(|task| task.id == "V05/cargo").unwrap();
    assert_eq!(cut.start.as_deref(), Some("2026-09-18T12:41:00Z"));
    assert_eq!(plan.reliefs[0].decide_by, "2026-09-17T15:03:00Z");
}

#[test]
fn the_links_of_a_chain_add_up_to_the_finish_it_explains() {
    let plan = plan_out(&rich(), &setting(&clock()), None);
    let given_up = plan.tasks[0].given_up.as_ref().unwrap();
    let minutes: i64 = given_up.chain.links.iter().map(|link| link.minutes).sum();
    assert_eq!(given_up.chain.from, "2026-09-17T09:20:00Z");
    assert_eq!(minutes, (at(18, 4, 10) - at(17, 6, 20)).get());
}

#[test]
fn odd_names_come_through_json_unharmed_and_unseen() {
    let text = to_text(&plan_out(&odd(), &setting(&clock()), None)).unwrap();
    assert!(!text.contains(['\u{202e}', '\u{1b}']));
    let back: PlanOut = serde_json::from_str(&text).unwrap();
    assert_eq!(back.tasks[0].name, ODD);
}

#[test]
fn an_empty_plan_has_all_keys_and_nulls() {
    let plan = serde_json::to_value(plan_out(&empty(), &setting(&clock()), None)).unwrap();
    assert_eq!((&plan["advisory"], &plan["joint"], &plan["tasks"]), (&Value::Null, &Value::Null, &json!([])));
    assert_eq!(plan["fits"], true);
}

#[test]
fn changes_come_back_as_they_went() {
    let out = changes_out(&moved(), &setting(&clock()));
    assert_eq!(out.moved[0].by_min, -120);
    assert_eq!(serde_json::from_str::<ChangesOut>(&to_text(&out).unwrap()).unwrap(), out);
}

proptest! {
    #[test]
    fn plans_and_screens_come_back_as_they_went(plan in some_plan()) {
        let clock = clock();
        let setting = setting(&clock);
        let out = plan_out(&plan, &setting, None);
        assert_eq!(serde_json::from_str::<PlanOut>(&to_text(&out).unwrap()).unwrap(), out);
        let options = NowOptions { concerning: None, ahead: Minutes::hours(6) };
        let now = now_out(&plan, &setting, &options, &now_of(&plan, &options));
        assert_eq!(serde_json::from_str::<NowOut>(&to_text(&now).unwrap()).unwrap(), now);
    }
}
