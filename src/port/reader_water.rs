//! Reads the channels of water.toml.

use crate::finding::fault::{did_you_mean, quoted};
use crate::finding::table::{Item, Keys};
use crate::port::codes;
use crate::port::water::{Channel, ChannelClass};
use crate::text::quantity;
use crate::tide::under_keel::UnderKeelRule;
use crate::time::moment::Minutes;
use crate::units::length::Metres;
use std::collections::BTreeMap;

/// The deepest dredged channel that is taken for true, in metres (our choice).
const DEEPEST_CHANNEL: f64 = 60.0;

/// The most water under a keel that a rule may ask for, in metres (our choice).
const MOST_UNDER_KEEL: f64 = 10.0;

/// The tables `[[channel]]`; their depths count from the datum of the tide, if the port has one.
#[must_use]
pub fn read_channels(file: &mut Keys<'_>, tide_datum: Option<&str>) -> Vec<Channel> {
    file.tables("channel").iter().filter_map(|item| read_channel(item, tide_datum)).collect()
}

fn read_channel(item: &Item<'_>, tide_datum: Option<&str>) -> Option<Channel> {
    let mut keys = item.keys("a channel")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let name = keys.required("name").and_then(|item| item.text());
    let depth = keys.required("depth").and_then(|item| quantity::metres(&item, 0.5, DEEPEST_CHANNEL));
    let datum = keys.required("datum").and_then(|item| read_datum(&item, tide_datum));
    let under_keel = keys.required("under_keel").and_then(|item| read_under_keel(&item));
    let classes = keys.required("classes").and_then(|item| read_classes(&item));
    let spacing = keys
        .required("spacing")
        .zip(classes.as_deref())
        .and_then(|(item, classes)| read_spacing(&item, classes));
    let clearance = keys.required("clearance").and_then(|item| quantity::lasting_or_none(&item));
    let source = keys.text_or_empty("source");
    keys.finish();
    datum?;
    Some(Channel {
        id: id?.to_owned(),
        name: name?.to_owned(),
        depth: depth?,
        under_keel: under_keel?,
        classes: classes?,
        spacing: spacing?,
        clearance: clearance?,
        source,
    })
}

/// The words for what depths count from: the same for the channel and the tide, or the two cannot be added.
fn read_datum(item: &Item<'_>, tide_datum: Option<&str>) -> Option<()> {
    let datum = item.text()?;
    let Some(tide_datum) = tide_datum.filter(|tide_datum| *tide_datum != datum) else { return Some(()) };
    item.fault(
        codes::OTHER_DATUM,
        format!("this depth counts from \"{datum}\", the tide from \"{tide_datum}\""),
        "one datum for the tide and every channel",
        "convert one of them to the other's datum; if they are the same, write the same words",
    );
    None
}

fn read_under_keel(item: &Item<'_>) -> Option<UnderKeelRule> {
    let mut keys = item.keys("an under-keel rule")?;
    let share = keys.required("share").and_then(|item| quantity::share(&item));
    let least = keys.required("at_least").and_then(|item| quantity::metres(&item, 0.0, MOST_UNDER_KEEL));
    keys.finish();
    // Both are within the rule's own bounds already.
    UnderKeelRule::new(share?.get(), least?).ok()
}

fn read_classes(item: &Item<'_>) -> Option<Vec<ChannelClass>> {
    let mut classes: Vec<ChannelClass> = Vec::new();
    let mut all_read = true;
    for item in item.list() {
        let Some(class) = read_class(&item, classes.last()) else {
            all_read = false;
            continue;
        };
        if classes.iter().any(|other| other.name == class.name) {
            let found = format!("the class \"{}\" stands twice", class.name);
            item.fault(codes::DUPLICATE_ID, found, "each class stands once", "give it another name");
            all_read = false;
        }
        classes.push(class);
    }
    if classes.is_empty() && all_read {
        item.bad_value("there is no class", "at least one class, such as { name = \"all\" }");
    }
    (all_read && !classes.is_empty()).then_some(classes)
}

fn read_class(item: &Item<'_>, shallower: Option<&ChannelClass>) -> Option<ChannelClass> {
    let mut keys = item.keys("a class of ships")?;
    let name = keys.required("name").and_then(|item| item.text());
    let draught_item = match shallower {
        None => keys.optional("draught_over"),
        Some(_) => keys.required("draught_over"),
    };
    let draught_over = draught_item.map(|item| quantity::metres(&item, 0.0, DEEPEST_CHANNEL));
    keys.finish();
    let draught_over = match draught_over {
        Some(draught) => draught?,
        None => Metres::ZERO,
    };
    let is_in_order = match shallower {
        None => draught_over.get() <= 0.0,
        Some(before) => draught_over.get() > before.draught_over.get(),
    };
    if let Some(item) = draught_item.filter(|_| !is_in_order) {
        item.fault(
            codes::CLASS_ORDER,
            "this class is out of order",
            "the first class takes every draught (0 m), each later one begins deeper than the one before",
            "put the classes in order, shallowest first",
        );
        return None;
    }
    Some(ChannelClass { name: name?.to_owned(), draught_over })
}

/// `spacing.light = { light = "30 min", deep = "45 min" }`: the first ship's class, then the second's.
fn read_spacing(item: &Item<'_>, classes: &[ChannelClass]) -> Option<Vec<Vec<Minutes>>> {
    let mut rows: BTreeMap<&str, BTreeMap<&str, Option<Minutes>>> = BTreeMap::new();
    for (first, row) in item.keys("spacing")?.all() {
        let known_first = is_class(&row, first, classes);
        let Some(keys) = row.keys("spacing after one class") else { continue };
        let times = keys.all().into_iter().filter(|(second, item)| is_class(item, second, classes));
        let times = times.map(|(second, item)| (second, quantity::lasting_or_none(&item))).collect();
        if known_first {
            rows.insert(first, times);
        }
    }
    let mut spacing = Vec::new();
    let mut all_read = true;
    for first in classes {
        let mut line = Vec::new();
        for second in classes {
            match rows.get(first.name.as_str()).and_then(|row| row.get(second.name.as_str())) {
                Some(Some(time)) => line.push(*time),
                Some(None) => all_read = false,
                None => {
                    all_read = false;
                    item.fault(
                        codes::NO_SPACING,
                        format!("no spacing for a \"{}\" ship after a \"{}\" one", second.name, first.name),
                        "every class after every class",
                        format!(
                            "add spacing.{} = {{ {} = \"30 min\" }}, with your own time",
                            first.name, second.name
                        ),
                    );
                }
            }
        }
        spacing.push(line);
    }
    all_read.then_some(spacing)
}

fn is_class(item: &Item<'_>, name: &str, classes: &[ChannelClass]) -> bool {
    let is_known = classes.iter().any(|class| class.name == name);
    if !is_known {
        let names: Vec<&str> = classes.iter().map(|class| class.name.as_str()).collect();
        item.fault(
            codes::TABLE.unknown_key,
            format!("\"{name}\" is not a class of this channel"),
            format!("its classes are {}", quoted(&names)),
            did_you_mean(name, names, "correct or remove it"),
        );
    }
    is_known
}
