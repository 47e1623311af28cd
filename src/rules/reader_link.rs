//! Reads what a task or a stage waits for.

use crate::finding::table::{Item, Keys};
use crate::rules::codes;
use crate::rules::task::{IfGivenUp, LinkKind, LinkSpec, LinkTarget};
use crate::text::quantity;
use crate::time::moment::Minutes;

/// The words for the ends that a link ties.
const KINDS: [(&str, LinkKind); 4] = [
    ("finish-start", LinkKind::FinishStart),
    ("start-start", LinkKind::StartStart),
    ("finish-finish", LinkKind::FinishFinish),
    ("start-finish", LinkKind::StartFinish),
];

/// The words for what becomes of a task when the one before it is given up.
const IF_GIVEN_UP: [(&str, IfGivenUp); 2] =
    [("give-up-too", IfGivenUp::GiveUpToo), ("start-at-decision", IfGivenUp::StartAtDecision)];

/// The list `after`: ids, or tables that say more. `is_repeated` permits the forms that start from a thing.
#[must_use]
pub fn read_links(keys: &mut Keys<'_>, is_repeated: bool) -> Option<Vec<LinkSpec>> {
    let Some(item) = keys.optional("after") else { return Some(Vec::new()) };
    let links: Vec<Option<LinkSpec>> =
        item.one_or_more().iter().map(|item| read_link(item, is_repeated)).collect();
    links.into_iter().collect()
}

fn read_link(item: &Item<'_>, is_repeated: bool) -> Option<LinkSpec> {
    if !item.is_table() {
        let task = LinkTarget::Task(item.text()?.to_owned());
        let written = item.place();
        let (kind, if_given_up) = (LinkKind::FinishStart, IfGivenUp::GiveUpToo);
        return Some(LinkSpec { task, kind, lag: Minutes::ZERO, if_given_up, written });
    }
    let mut keys = item.keys("a link")?;
    let way = keys.one_of(&["task", "same", "every", "ships_at_berth", "plant_at_berth"]);
    let kind = keys.optional("link").map_or(Some(LinkKind::FinishStart), |item| item.word(&KINDS));
    let lag = keys.optional("lag").map_or(Some(Minutes::ZERO), |item| quantity::shift(&item));
    let if_given_up =
        keys.optional("if_given_up").map_or(Some(IfGivenUp::GiveUpToo), |item| item.word(&IF_GIVEN_UP));
    keys.finish();
    let way = way?;
    let target = way.text()?.to_owned();
    if !is_repeated && !matches!(way.key(), "task" | "every") {
        way.fault(
            codes::OWN_WITHOUT_THING,
            format!("{} = \"{target}\" where nothing is repeated", way.key()),
            "only a task with for_each has a thing of its own to go by",
            "name the task by its full id (\"V01/sail\"), or write every = \"...\"",
        );
        return None;
    }
    let task = match way.key() {
        "task" => LinkTarget::Task(target),
        "same" => LinkTarget::Same(target),
        "every" => LinkTarget::Every(target),
        "ships_at_berth" => LinkTarget::ShipsAtBerth(target),
        _ => LinkTarget::PlantAtBerth(target),
    };
    Some(LinkSpec { task, kind: kind?, lag: lag?, if_given_up: if_given_up?, written: item.place() })
}
