//! Reads what a task holds: people, craft and machines; and the water and channel it needs.

use crate::finding::fault::{did_you_mean, quoted};
use crate::finding::table::{Item, Keys};
use crate::port::folder::Draft;
use crate::port::kind::Kind;
use crate::port::means::Pool;
use crate::rules::codes;
use crate::rules::desk::Desk;
use crate::rules::reader_amount::{OwnSort, own_class, own_count, read_amount};
use crate::rules::reader_pick::Thing;
use crate::rules::task::{NeedSpec, Passage, TideNeed};
use crate::text::quantity;
use crate::tide::under_keel::needed_level;
use crate::time::moment::Minutes;
use crate::units::length::Metres;

/// The list `needs`.
#[must_use]
pub fn read_needs(
    keys: &mut Keys<'_>,
    things: Option<&[Thing<'_>]>,
    desk: &Desk<'_>,
) -> Option<Vec<NeedSpec>> {
    let Some(item) = keys.optional("needs") else { return Some(Vec::new()) };
    let needs: Vec<Option<NeedSpec>> =
        item.one_or_more().iter().map(|item| read_need(item, things, desk)).collect();
    needs.into_iter().collect()
}

fn read_need(item: &Item<'_>, things: Option<&[Thing<'_>]>, desk: &Desk<'_>) -> Option<NeedSpec> {
    let mut keys = item.keys("a need")?;
    let pool = keys
        .required("pool")
        .and_then(|item| desk.draft.known.refer(&item, Kind::Pool, codes::unknown(Kind::Pool)));
    let count_item = keys.required("count");
    let count = count_item.and_then(|item| read_amount(&item, OwnSort::Count, things, read_count));
    let class_item = keys.optional("class");
    let class = class_item
        .map(|item| read_amount(&item, OwnSort::Class, things, |item| item.text().map(str::to_owned)));
    let before = keys.optional("before").map_or(Some(Minutes::ZERO), |item| quantity::lasting_or_none(&item));
    let after = keys.optional("after").map_or(Some(Minutes::ZERO), |item| quantity::lasting_or_none(&item));
    keys.finish();
    let class = match class {
        Some(read) => Some(read?),
        None => None,
    };
    let need = NeedSpec { pool: pool?, count: count?, class, before: before?, after: after? };
    // A pool with faults of its own is not in the draft; it has its own findings.
    if let Some(pool) = desk.draft.pools.iter().find(|pool| pool.id == need.pool) {
        check_enough(&count_item?, class_item.as_ref(), &need, pool, things);
    }
    Some(need)
}

fn read_count(item: &Item<'_>) -> Option<u32> {
    let count = item.count(0, 10_000)?;
    if count == 0 {
        item.fault(
            codes::ZERO_COUNT,
            "a need for 0",
            "at least 1, or a thing's own count, which may be 0",
            "remove the need if nobody is needed",
        );
        return None;
    }
    Some(count)
}

/// Whether the pool has so many, for each thing that the task is repeated for.
fn check_enough(
    count_item: &Item<'_>,
    class_item: Option<&Item<'_>>,
    need: &NeedSpec,
    pool: &Pool,
    things: Option<&[Thing<'_>]>,
) {
    let cases: Vec<Option<&Thing<'_>>> = match things {
        Some(things) => things.iter().map(Some).collect(),
        None => vec![None],
    };
    for thing in cases {
        let whose = thing.map_or_else(String::new, |thing| format!(" for {}", thing.id));
        let class = need.class.as_ref().and_then(|class| own_class(class, thing));
        let able =
            pool.members.iter().filter(|member| class.is_none_or(|class| has_class(&member.classes, class)));
        let able = able.count();
        if let (Some(class), Some(item), 0) = (class, class_item, able) {
            let classes: Vec<&str> = classes_of(pool);
            item.fault(
                codes::UNKNOWN_CLASS,
                format!("no member of \"{}\" has the class \"{class}\"{whose}", pool.id),
                if classes.is_empty() {
                    "its members have no classes".to_owned()
                } else {
                    format!("its classes are {}", quoted(&classes))
                },
                did_you_mean(class, classes, "correct the class, or give it to a member"),
            );
            return;
        }
        let wanted = own_count(&need.count, thing).unwrap_or(0);
        if usize::try_from(wanted).is_ok_and(|wanted| wanted > able) {
            let of_class = class.map_or_else(String::new, |class| format!(" of class \"{class}\""));
            count_item.fault(
                codes::TOO_FEW,
                format!("{wanted} of \"{}\"{of_class} needed{whose}, and there are {able}", pool.id),
                format!("at most {able}"),
                "ask for fewer, or add members to the pool",
            );
            return;
        }
    }
}

fn has_class(classes: &[String], class: &str) -> bool {
    classes.iter().any(|other| other == class)
}

fn classes_of(pool: &Pool) -> Vec<&str> {
    let mut classes: Vec<&str> =
        pool.members.iter().flat_map(|member| &member.classes).map(String::as_str).collect();
    classes.sort_unstable();
    classes.dedup();
    classes
}

/// `tide = { channel = "main", from = "1 h", until = "1 h 20 min" }`, within a task that takes `takes` if it says so.
#[must_use]
pub fn read_tide(
    item: &Item<'_>,
    takes: Option<Minutes>,
    things: Option<&[Thing<'_>]>,
    desk: &Desk<'_>,
) -> Option<TideNeed> {
    let mut keys = item.keys("a tide")?;
    let channel = keys
        .required("channel")
        .and_then(|item| desk.draft.known.refer(&item, Kind::Channel, codes::unknown(Kind::Channel)));
    let (from, until) = read_part(&mut keys, ("from", "until"), takes);
    keys.finish();
    if !desk.draft.has_tide && desk.draft.known.could_read(Kind::Channel) {
        item.fault(
            codes::NO_TIDE,
            "this task needs the tide, and the port has none",
            "water.toml gives the tide",
            "add a tide to water.toml, or remove this need",
        );
        return None;
    }
    let need = TideNeed { channel: channel?, from: from?, until: until? };
    warn_of_too_deep(item, &need.channel, things.unwrap_or_default(), desk.draft);
    Some(need)
}

fn warn_of_too_deep(item: &Item<'_>, channel: &str, things: &[Thing<'_>], draft: &Draft) {
    let channel = draft.channels.iter().find(|other| other.id == channel);
    let (Some(channel), Some(tide)) = (channel, &draft.tide) else { return };
    let needed = |draught| needed_level(draught, channel.depth, channel.under_keel, Metres::ZERO);
    let is_too_deep =
        |thing: &&Thing<'_>| thing.draught.is_some_and(|draught| needed(draught) > tide.ceiling());
    let too_deep: Vec<&str> = things.iter().filter(is_too_deep).map(|thing| thing.id).collect();
    if !too_deep.is_empty() {
        item.warn(
            codes::NEVER_FLOATS,
            format!("no tide gives enough water in channel \"{}\" for {}", channel.id, quoted(&too_deep)),
            format!(
                "the tide never exceeds {:.2} m, the dredged depth is {}",
                tide.ceiling().get(),
                channel.depth
            ),
            "check draught, depth and under-keel rule; she cannot sail as she is",
        );
    }
}

/// `passage = { channel = "main", direction = "out", enters = "10 min", leaves = "1 h 20 min" }`.
#[must_use]
pub fn read_passage(item: &Item<'_>, takes: Option<Minutes>, desk: &Desk<'_>) -> Option<Passage> {
    let mut keys = item.keys("a passage")?;
    let channel = keys
        .required("channel")
        .and_then(|item| desk.draft.known.refer(&item, Kind::Channel, codes::unknown(Kind::Channel)));
    let outbound = keys.required("direction").and_then(|item| item.word(&[("out", true), ("in", false)]));
    let (enters, leaves) = read_part(&mut keys, ("enters", "leaves"), takes);
    keys.finish();
    Some(Passage { channel: channel?, outbound: outbound?, enters: enters?, leaves: leaves? })
}

/// Two times after the start of a task: the second later than the first, and within the task.
fn read_part(
    keys: &mut Keys<'_>,
    names: (&'static str, &'static str),
    takes: Option<Minutes>,
) -> (Option<Minutes>, Option<Minutes>) {
    let from = keys.required(names.0).and_then(|item| quantity::lasting_or_none(&item));
    let until_item = keys.required(names.1);
    let until = until_item.and_then(|item| quantity::lasting_or_none(&item));
    let (Some(item), Some(start), Some(end)) = (until_item, from, until) else { return (from, until) };
    let fault = |found: String| {
        item.fault(
            codes::BAD_PART,
            found,
            "times count from the start of the task",
            "correct one of the times",
        );
        (None, None)
    };
    if start >= end {
        return fault(format!("{} = \"{end}\" is not after {} = \"{start}\"", names.1, names.0));
    }
    match takes {
        Some(takes) if end > takes => {
            fault(format!("{} = \"{end}\" is after the end of the task, which takes {takes}", names.1))
        }
        _ => (from, until),
    }
}
