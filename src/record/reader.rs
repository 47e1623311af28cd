//! Reads the record as people write it: `events.toml`, one table an event.

use crate::finding::fault::{Finding, sort_findings};
use crate::finding::page::Page;
use crate::finding::source::SourceText;
use crate::finding::table::{Item, Keys};
use crate::record::codes;
use crate::record::doubt::doubts;
use crate::record::event::{Event, Retracted, What};
use crate::record::reader_call;
use crate::record::reader_fact;
use crate::record::taking::read_taking;
use crate::record::telling::{Telling, event_number, named, task_id, wind};
use crate::text::quantity::{id, instant, lasting, lasting_or_none};
use crate::time::clock::PortClock;
use crate::units::wind::Averaging;

/// Reads what one kind of event says.
type Reading = for<'t> fn(&Telling<'_>, &mut Keys<'t>) -> Option<What>;

/// The key of each kind of event, and how it is read.
const KINDS: [(&str, Reading); 41] = [
    ("took_advisory", took_advisory),
    ("adopts_arrival", adopts_arrival),
    ("withdraws_arrival", withdraws_arrival),
    ("declares", declares),
    ("lifts", lifts),
    ("started", started),
    ("done", done),
    ("cannot", cannot),
    ("not_needed", not_needed),
    ("takes", takes),
    ("not_before", not_before),
    ("fixes", fixes),
    ("cuts", cuts),
    ("substitutes", substitutes),
    ("retracts", retracts),
    ("out", out),
    ("back", back),
    ("observed", observed),
    ("issued", issued),
    ("left", left),
    ("stops", reader_fact::stops),
    ("resumes", reader_fact::resumes),
    ("unusable", reader_fact::unusable),
    ("usable", reader_fact::usable),
    ("depth_limit", reader_fact::depth_limit),
    ("signal", reader_fact::signal),
    ("evacuation", reader_fact::evacuation),
    ("curfew", reader_fact::curfew),
    ("sea", reader_fact::sea),
    ("anchorage", reader_fact::anchorage),
    ("holds", reader_fact::holds),
    ("skips", reader_fact::skips),
    ("permits_stay", reader_fact::permits_stay),
    ("waives", reader_fact::waives),
    ("refuses", reader_fact::refuses),
    ("releases_call", reader_call::releases),
    ("told", reader_call::told),
    ("acknowledged", reader_call::acknowledged),
    ("no_answer", reader_call::no_answer),
    ("withdraws", withdraws),
    ("confirms", confirms),
];

/// The periods over which an observed wind may be averaged.
const PERIODS: [(&str, Averaging); 5] = [
    ("3 s", Averaging::Gust3s),
    ("1 min", Averaging::Minute1),
    ("2 min", Averaging::Minute2),
    ("3 min", Averaging::Minute3),
    ("10 min", Averaging::Minute10),
];

/// What can be retracted of a task; `None` is the order that fixed its start.
const RETRACTED: [(&str, Option<Retracted>); 5] = [
    ("progress", Some(Retracted::Progress)),
    ("time_taken", Some(Retracted::Takes)),
    ("not_before", Some(Retracted::NotBefore)),
    ("fixed_start", None),
    ("way", Some(Retracted::Way)),
];

/// Reads all events, in order of time known (ties as in the file), with everything that is wrong or doubtful in them.
///
/// An event at fault is left out, so events may be used only if no finding is an error. Without a `clock` (the port's zone
/// is itself at fault) no time can be trusted: there are no events, only findings about everything else. Ids are not looked
/// up here; see [`crate::record::mention::mentions`].
#[must_use]
pub fn read_events(source: &SourceText, clock: Option<&PortClock>) -> (Vec<Event>, Vec<Finding>) {
    let page = Page::read(source, &codes::TABLE);
    let mut events = Keys::of_file(&page).map(|file| events_of(file, clock)).unwrap_or_default();
    let doubtful = doubts(&events, clock);
    events.sort_by_key(|event| event.known);
    let mut findings = page.into_findings();
    findings.extend(doubtful);
    sort_findings(&mut findings);
    (events, findings)
}

fn events_of<'t>(mut file: Keys<'t>, clock: Option<&PortClock>) -> Vec<Event> {
    let tables = file.tables("event");
    let events = (1..).zip(&tables).filter_map(|(number, item)| event(number, item, clock)).collect();
    file.finish();
    events
}

fn event(number: usize, item: &Item<'_>, clock: Option<&PortClock>) -> Option<Event> {
    let mut keys = item.keys("an event")?;
    let known = keys.required("at").and_then(|at| instant(&at, clock));
    let by = keys.required("by").and_then(|by| by.text());
    let name = keys.text_or_empty("name");
    let on_behalf = keys.text_or_empty("for");
    let awaits_second = keys.optional("awaits_second").map_or(Some(false), |item| item.flag());
    let reason = keys.text_or_empty("reason");
    let kind = keys.one_of(&KINDS.map(|(key, _)| key));
    keys.finish();
    let kind = kind?;
    let (key, reading) = KINDS.iter().find(|(key, _)| *key == kind.key())?;
    let mut said = kind.keys(key)?;
    let known = known.filter(|_| clock.is_some());
    let what = reading(&Telling { known, clock }, &mut said);
    said.finish();
    Some(Event {
        number,
        known: known?,
        by: by?.to_owned(),
        name,
        on_behalf,
        awaits_second: awaits_second?,
        what: what?,
        reason,
        place: kind.place(),
    })
}

fn took_advisory(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    read_taking(keys).map(What::AdvisoryTaken)
}

fn adopts_arrival(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let place = named(keys, "place");
    let wind = wind(keys);
    let time = telling.near(keys, "time");
    Some(What::ArrivalAdopted { place: place?, wind: wind?, time: Some(time?) })
}

fn withdraws_arrival(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let place = named(keys, "place");
    let wind = wind(keys);
    Some(What::ArrivalAdopted { place: place?, wind: wind?, time: None })
}

fn declares(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let stage = named(keys, "stage");
    let from = telling.near_or_known(keys, "from");
    Some(What::StageDeclared { stage: stage?, from: from? })
}

fn lifts(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let stage = named(keys, "stage");
    let from = telling.near_or_known(keys, "from");
    Some(What::StageLifted { stage: stage?, from: from? })
}

fn started(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let task = task(keys);
    let at = telling.past_or_known(keys, "at");
    let members: Option<Vec<String>> = match keys.optional("members") {
        Some(list) => list.list().iter().map(|member| id(member).map(str::to_owned)).collect(),
        None => Some(Vec::new()),
    };
    Some(What::TaskStarted { task: task?, at: at?, members: members? })
}

fn done(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let task = task(keys);
    let at = telling.past_or_known(keys, "at");
    let evidence = keys.text_or_empty("evidence");
    Some(What::TaskDone { task: task?, at: at?, evidence })
}

fn cannot(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    Some(What::TaskCannot { task: task(keys)? })
}

fn not_needed(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    Some(What::TaskNotNeeded { task: task(keys)? })
}

fn takes(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let task = task(keys);
    let takes = keys.required("in_all").and_then(|item| lasting(&item));
    Some(What::TaskTakes { task: task?, takes: takes? })
}

fn left(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let task = task(keys);
    let left = keys.required("still").and_then(|item| lasting_or_none(&item));
    Some(What::TaskLeft { task: task?, left: left? })
}

fn withdraws(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    Some(What::Withdrawn { event: event_number(keys)? })
}

fn confirms(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    Some(What::Confirmed { event: event_number(keys)? })
}

fn not_before(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let task = task(keys);
    let time = telling.near(keys, "time");
    Some(What::TaskNotBefore { task: task?, time: time? })
}

fn fixes(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let task = task(keys);
    let start = telling.near(keys, "start");
    Some(What::TaskFixed { task: task?, start: Some(start?) })
}

fn cuts(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    Some(What::CutOrdered { task: task(keys)? })
}

fn substitutes(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    Some(What::SubstituteOrdered { task: task(keys)? })
}

fn retracts(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let task = task(keys);
    let kind = keys.required("what").and_then(|item| item.word(&RETRACTED));
    let task = task?;
    Some(match kind? {
        Some(kind) => What::TaskRetracted { task, kind },
        None => What::TaskFixed { task, start: None },
    })
}

fn out(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let member = named(keys, "member");
    let (from, until) = telling.from_until(keys);
    Some(What::MeansOut { member: member?, from: from?, until: until? })
}

fn back(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let member = named(keys, "member");
    let from = telling.any_or_known(keys, "from");
    Some(What::MeansBack { member: member?, from: from? })
}

fn observed(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let place = named(keys, "place");
    let wind = wind(keys);
    let averaging = keys.required("over").and_then(|item| item.word(&PERIODS));
    let at = telling.past_or_known(keys, "at");
    Some(What::Observed { place: place?, wind: wind?, averaging: averaging?, at: at? })
}

fn issued(_: &Telling<'_>, _: &mut Keys<'_>) -> Option<What> {
    Some(What::PlanIssued)
}

fn task(keys: &mut Keys<'_>) -> Option<String> {
    keys.required("task").and_then(|item| task_id(&item))
}
