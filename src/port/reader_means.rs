//! Reads means.toml: pools of people, craft and machines.

use crate::finding::table::{Item, Keys};
use crate::port::codes;
use crate::port::means::{DutyHours, Member, Pool, Shift};
use crate::text::quantity;
use crate::time::clock::PortClock;
use chrono::{DateTime, Utc};

/// The tables `[[pool]]`.
#[must_use]
pub fn read_pools(file: &mut Keys<'_>, clock: Option<&PortClock>) -> Vec<Pool> {
    file.tables("pool").iter().filter_map(|item| read_pool(item, clock)).collect()
}

fn read_pool(item: &Item<'_>, clock: Option<&PortClock>) -> Option<Pool> {
    let mut keys = item.keys("a pool")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let name = keys.required("name").and_then(|item| item.text());
    let shifts = read_shifts(&mut keys, clock);
    let members_item = keys.required("members");
    let members: Vec<Option<Member>> = members_item
        .map(|item| item.list().iter().map(|item| read_member(item, &shifts, clock)).collect())
        .unwrap_or_default();
    if let Some(item) = members_item.filter(|_| members.is_empty()) {
        item.fault(
            codes::EMPTY_POOL,
            "this pool has no members",
            "a pool has at least one member",
            "name its members, or remove the pool and what needs it",
        );
    }
    let duty = keys.optional("duty").map(|item| read_duty(&item));
    let source = keys.text_or_empty("source");
    keys.finish();
    let members =
        members.into_iter().collect::<Option<Vec<Member>>>().filter(|members| !members.is_empty())?;
    let duty = match duty {
        Some(hours) => Some(hours?),
        None => None,
    };
    Some(Pool { id: id?.to_owned(), name: name?.to_owned(), members, duty, source })
}

/// A member is its id alone, or a table with what it can do, when it works and has worked.
fn read_member(item: &Item<'_>, shifts: &[Shift], clock: Option<&PortClock>) -> Option<Member> {
    if !item.is_table() {
        let id = item.as_text()?.to_owned();
        return Some(Member { id, classes: Vec::new(), shifts: shifts.to_vec(), worked: Vec::new() });
    }
    let mut keys = item.keys("a member")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let classes = keys.texts("classes");
    let own_shifts = read_shifts(&mut keys, clock);
    let worked = keys.one_or_more("worked").iter().map(|item| read_worked(item, clock)).collect::<Vec<_>>();
    keys.finish();
    let shifts = if own_shifts.is_empty() { shifts.to_vec() } else { own_shifts };
    Some(Member { id: id?.to_owned(), classes, shifts, worked: worked.into_iter().collect::<Option<_>>()? })
}

fn read_shifts(keys: &mut Keys<'_>, clock: Option<&PortClock>) -> Vec<Shift> {
    keys.one_or_more("shifts").iter().filter_map(|item| read_shift(item, clock)).collect()
}

/// Two times of day are a shift of every day; two dates with times one that comes once.
fn read_shift(item: &Item<'_>, clock: Option<&PortClock>) -> Option<Shift> {
    let mut keys = item.keys("a shift")?;
    let (from, to) = (keys.required("from"), keys.required("to"));
    keys.finish();
    let (from, to) = (from?, to?);
    let is_dated = |item: &Item<'_>| item.time_text().map(quantity::looks_like_a_time);
    if is_dated(&from)? || is_dated(&to)? {
        let (from, to) = read_span(&from, &to, clock)?;
        return Some(Shift::Once { from, to });
    }
    let (from_time, to_time) = (quantity::time_of_day(&from), quantity::time_of_day(&to));
    let (from_time, to_time) = (from_time?, to_time?);
    if from_time == to_time {
        to.fault(
            codes::BAD_SPAN,
            "this shift ends when it begins",
            "a shift past midnight ends earlier in the day than it begins",
            "correct it; a member who always works needs no shift",
        );
        return None;
    }
    Some(Shift::Daily { from: from_time, to: to_time })
}

fn read_worked(item: &Item<'_>, clock: Option<&PortClock>) -> Option<(DateTime<Utc>, DateTime<Utc>)> {
    let mut keys = item.keys("a duty already worked")?;
    let (from, to) = (keys.required("from"), keys.required("to"));
    keys.finish();
    read_span(&from?, &to?, clock)
}

fn read_span(
    from: &Item<'_>,
    to: &Item<'_>,
    clock: Option<&PortClock>,
) -> Option<(DateTime<Utc>, DateTime<Utc>)> {
    let (start, end) = (quantity::instant(from, clock), quantity::instant(to, clock));
    let (start, end) = (start?, end?);
    if start >= end {
        to.fault(
            codes::BAD_SPAN,
            format!("it ends at {}, not after it begins, {}", quantity::in_utc(end), quantity::in_utc(start)),
            "",
            "correct one of the two times",
        );
        return None;
    }
    Some((start, end))
}

fn read_duty(item: &Item<'_>) -> Option<DutyHours> {
    let mut keys = item.keys("duty hours")?;
    let at_most = keys.required("at_most").and_then(|item| quantity::lasting(&item));
    let then_rest = keys.required("then_rest").and_then(|item| quantity::lasting(&item));
    keys.finish();
    Some(DutyHours { at_most: at_most?, then_rest: then_rest? })
}
