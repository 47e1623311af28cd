//! Reads amounts that a template states, or that each thing has for itself.

use crate::finding::fault::quoted;
use crate::finding::table::Item;
use crate::port::fleet::OwnValue;
use crate::rules::codes;
use crate::rules::reader_pick::Thing;
use crate::rules::task::Amount;

/// The sorts of own values.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum OwnSort {
    /// How many.
    Count,
    /// How long.
    Lasting,
    /// When.
    At,
    /// A class of pool member.
    Class,
}

impl OwnSort {
    fn of(value: &OwnValue) -> OwnSort {
        match value {
            OwnValue::Count(_) => OwnSort::Count,
            OwnValue::Lasting(_) => OwnSort::Lasting,
            OwnValue::At(_) => OwnSort::At,
            OwnValue::Class(_) => OwnSort::Class,
        }
    }

    fn words(self) -> &'static str {
        match self {
            OwnSort::Count => "a count, such as 2",
            OwnSort::Lasting => "a time span, such as \"3 h\"",
            OwnSort::At => "a time, such as \"2026-09-17T19:00-03:00\"",
            OwnSort::Class => "a class, such as \"unlimited\"",
        }
    }
}

/// A stated value, or `{ own = "secure" }`: the value of this name that each of `things` must then have.
#[must_use]
pub fn read_amount<T>(
    item: &Item<'_>,
    sort: OwnSort,
    things: Option<&[Thing<'_>]>,
    stated: impl FnOnce(&Item<'_>) -> Option<T>,
) -> Option<Amount<T>> {
    if !item.is_table() {
        return stated(item).map(Amount::Stated);
    }
    let mut keys = item.keys("an amount")?;
    let own = keys.required("own");
    keys.finish();
    read_own_name(&own?, sort, things).map(Amount::Own)
}

/// The name of an own value, checked against everything the template is repeated for.
#[must_use]
pub fn read_own_name(item: &Item<'_>, sort: OwnSort, things: Option<&[Thing<'_>]>) -> Option<String> {
    let name = item.text()?;
    let Some(things) = things else {
        item.fault(
            codes::OWN_WITHOUT_THING,
            format!("own = \"{name}\" where nothing is repeated"),
            "only a task with for_each has things with values of their own",
            "state the value here",
        );
        return None;
    };
    let missing: Vec<&str> =
        things.iter().filter(|thing| !thing.own.contains_key(name)).map(|thing| thing.id).collect();
    if !missing.is_empty() {
        item.fault(
            codes::OWN_MISSING,
            format!("no own value \"{name}\" for {}", quoted(&missing)),
            format!("everything this task is repeated for has {}", sort.words()),
            format!("add own = {{ {name} = ... }} there, or state the value here"),
        );
    }
    let is_wrong = |thing: &&Thing<'_>| thing.own.get(name).is_some_and(|value| OwnSort::of(value) != sort);
    let wrong: Vec<&str> = things.iter().filter(is_wrong).map(|thing| thing.id).collect();
    if !wrong.is_empty() {
        item.fault(
            codes::OWN_WRONG,
            format!("the own value \"{name}\" of {} is of another sort", quoted(&wrong)),
            format!("here it must be {}", sort.words()),
            "correct it there, or ask for another value",
        );
    }
    (missing.is_empty() && wrong.is_empty()).then(|| name.to_owned())
}

/// The value for one thing: stated, or its own.
#[must_use]
pub fn own_count(amount: &Amount<u32>, thing: Option<&Thing<'_>>) -> Option<u32> {
    match amount {
        Amount::Stated(count) => Some(*count),
        Amount::Own(name) => match thing?.own.get(name)? {
            OwnValue::Count(count) => Some(*count),
            OwnValue::Lasting(_) | OwnValue::At(_) | OwnValue::Class(_) => None,
        },
    }
}

/// The class for one thing: stated, or its own.
#[must_use]
pub fn own_class<'a>(amount: &'a Amount<String>, thing: Option<&Thing<'a>>) -> Option<&'a str> {
    match amount {
        Amount::Stated(class) => Some(class),
        Amount::Own(name) => match thing?.own.get(name)? {
            OwnValue::Class(class) => Some(class),
            OwnValue::Lasting(_) | OwnValue::At(_) | OwnValue::Count(_) => None,
        },
    }
}
