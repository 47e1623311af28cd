//! Reads tasks.toml: tasks and task templates.

use crate::finding::table::{Item, Keys};
use crate::rules::codes;
use crate::rules::desk::Desk;
use crate::rules::limit::{Anchor, Deadline, LimitAt};
use crate::rules::reader_amount::{OwnSort, read_amount, read_own_name};
use crate::rules::reader_limit::{read_anchor, read_deadline, read_wind_at};
use crate::rules::reader_link::read_links;
use crate::rules::reader_need::{read_needs, read_passage, read_tide};
use crate::rules::reader_pick::{Thing, read_for_each, things};
use crate::rules::task::{Amount, Cut, DaylightNeed, Leave, NotBefore, Stake, Substitute, TaskSpec};
use crate::text::quantity;
use crate::time::moment::Minutes;

/// The consequence of a task that does not state one (our choice): the middle, on a scale of ratios.
const USUAL_WEIGHT: u32 = 100;

/// The words for what is at stake.
const STAKES: [(&str, Stake); 4] =
    [("life", Stake::Life), ("harm", Stake::Harm), ("loss", Stake::Loss), ("order", Stake::Order)];

/// The words for whether the plan may choose by itself.
const LEAVES: [(&str, Leave); 2] = [("permitted", Leave::Permitted), ("by order", Leave::ByOrder)];

/// The tables `[[task]]`.
#[must_use]
pub fn read_tasks(file: &mut Keys<'_>, desk: &Desk<'_>) -> Vec<TaskSpec> {
    file.tables("task").iter().filter_map(|item| read_task(item, desk)).collect()
}

/// A list or a single table under a key that may be left out, all of them read before a faulty one spoils the list.
fn read_all<'t, T>(
    keys: &mut Keys<'t>,
    key: &'static str,
    read: impl FnMut(&Item<'t>) -> Option<T>,
) -> Option<Vec<T>> {
    let Some(item) = keys.optional(key) else { return Some(Vec::new()) };
    let values: Vec<Option<T>> = item.one_or_more().iter().map(read).collect();
    values.into_iter().collect()
}

/// A value under a key that may be left out, but not be faulty.
fn read_one<'t, T>(
    keys: &mut Keys<'t>,
    key: &'static str,
    read: impl FnOnce(&Item<'t>) -> Option<T>,
) -> Option<Option<T>> {
    match keys.optional(key) {
        Some(item) => read(&item).map(Some),
        None => Some(None),
    }
}

fn read_task(item: &Item<'_>, desk: &Desk<'_>) -> Option<TaskSpec> {
    let mut keys = item.keys("a task")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let name = keys.required("name").and_then(|item| item.text());
    let for_each = read_one(&mut keys, "for_each", |item| read_for_each(item, desk.draft));
    // A faulty choice of things is taken for a choice of none, so that own values are not reported as well.
    let things: Option<Vec<Thing<'_>>> = match &for_each {
        Some(Some(for_each)) => Some(things(for_each, desk.draft)),
        Some(None) => None,
        None => Some(Vec::new()),
    };
    let things = things.as_deref();
    let takes_item = keys.required("takes");
    let takes = takes_item.and_then(|item| read_amount(&item, OwnSort::Lasting, things, quantity::lasting));
    let stated = match &takes {
        Some(Amount::Stated(takes)) => Some(*takes),
        Some(Amount::Own(_)) | None => None,
    };
    let may_be_cut = read_one(&mut keys, "may_be_cut", |item| read_cut(item, stated, things));
    let or_else = read_one(&mut keys, "or_else", read_substitute);
    let after = read_links(&mut keys, things.is_some());
    let gate = read_one(&mut keys, "gate", |item| desk.stage(item));
    let not_before = read_all(&mut keys, "not_before", |item| read_not_before(item, things, desk));
    let done_before: Option<Vec<Deadline>> =
        read_all(&mut keys, "done_before", |item| read_deadline(item, desk));
    let stops_at = read_all(&mut keys, "stop_at", |item| read_stop(item, desk));
    let tide = read_one(&mut keys, "tide", |item| read_tide(item, stated, things, desk));
    let daylight = read_one(&mut keys, "daylight", |item| {
        item.word(&[("whole", DaylightNeed::Whole), ("start", DaylightNeed::Start)])
    });
    let passage = read_one(&mut keys, "passage", |item| read_passage(item, stated, desk));
    let needs = read_needs(&mut keys, things, desk);
    let words = read_words(&mut keys);
    keys.finish();
    let words = words?;
    Some(TaskSpec {
        id: id?.to_owned(),
        name: name?.to_owned(),
        for_each: for_each?,
        takes: takes?,
        may_be_cut: may_be_cut?,
        or_else: or_else?,
        after: after?,
        gate: gate?,
        not_before: not_before?,
        done_before: done_before?,
        stops_at: stops_at?,
        tide: tide?,
        daylight: daylight?,
        passage: passage?,
        needs: needs?,
        who: words.who,
        approvers: words.approvers,
        confirm: words.confirm,
        at: words.at,
        stake: words.stake,
        weight: words.weight,
        basis: words.basis,
        written: item.place(),
    })
}

/// What a task says for people, and what is at stake.
struct Words {
    who: String,
    approvers: Vec<String>,
    confirm: String,
    at: String,
    stake: Stake,
    weight: u32,
    basis: String,
}

fn read_words(keys: &mut Keys<'_>) -> Option<Words> {
    let who = keys.required("who").and_then(|item| item.text());
    let approvers = keys.texts("approved_by");
    let (confirm, at) = (keys.text_or_empty("confirm"), keys.text_or_empty("at"));
    let stake = keys.required("stake").and_then(|item| item.word(&STAKES));
    let weight = keys.optional("weight").map_or(Some(USUAL_WEIGHT), |item| item.count(1, 1000));
    let basis = keys.text_or_empty("source");
    Some(Words { who: who?.to_owned(), approvers, confirm, at, stake: stake?, weight: weight?, basis })
}

fn read_cut(item: &Item<'_>, takes: Option<Minutes>, things: Option<&[Thing<'_>]>) -> Option<Cut> {
    let mut keys = item.keys("a cut")?;
    let to_item = keys.required("to");
    let to = to_item.and_then(|item| read_amount(&item, OwnSort::Lasting, things, quantity::lasting));
    let price = keys.required("price").and_then(|item| item.text());
    let leave = keys.required("leave").and_then(|item| item.word(&LEAVES));
    keys.finish();
    if let (Some(item), Some(Amount::Stated(to)), Some(takes)) = (to_item, &to, takes)
        && *to >= takes
    {
        let found = format!("cut to {to}, and the task takes {takes}");
        item.fault(codes::NOT_SHORTER, found, format!("less than {takes}"), "correct one of the two");
        return None;
    }
    Some(Cut { to: to?, price: price?.to_owned(), leave: leave? })
}

fn read_substitute(item: &Item<'_>) -> Option<Substitute> {
    let mut keys = item.keys("a substitute")?;
    let tasks_item = keys.required("tasks");
    let tasks = tasks_item.map(|item| item.texts()).unwrap_or_default();
    let price = keys.required("price").and_then(|item| item.text());
    let leave = keys.required("leave").and_then(|item| item.word(&LEAVES));
    keys.finish();
    if tasks.is_empty() {
        if let Some(item) = tasks_item.filter(|item| item.is_list()) {
            item.bad_value("no task stands in", "at least one task");
        }
        return None;
    }
    Some(Substitute { tasks, price: price?.to_owned(), leave: leave? })
}

fn read_not_before(item: &Item<'_>, things: Option<&[Thing<'_>]>, desk: &Desk<'_>) -> Option<NotBefore> {
    let mut keys = item.keys("a not_before")?;
    if let Some(own) = keys.optional("own") {
        keys.finish();
        return read_own_name(&own, OwnSort::At, things).map(NotBefore::Own);
    }
    let anchor = read_anchor(&mut keys, desk);
    let not_before = match anchor {
        Some((Anchor::Clock(time), _)) => Some(NotBefore::At(time)),
        Some((anchor, _)) => {
            let after = keys.required("after").and_then(|item| quantity::shift(&item));
            after.map(|after| NotBefore::After(anchor, after))
        }
        None => {
            // What it counts from is faulty; the key itself is still a good one.
            keys.pass_over(&["after"]);
            None
        }
    };
    keys.finish();
    not_before
}

fn read_stop(item: &Item<'_>, desk: &Desk<'_>) -> Option<LimitAt> {
    let mut keys = item.keys("a wind")?;
    let wind = read_wind_at(&mut keys, desk);
    keys.finish();
    wind
}
