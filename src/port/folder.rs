//! The files of a port, and the port they describe.

use crate::finding::fault::{Finding, has_error, nearest, sort_findings};
use crate::finding::page::Page;
use crate::finding::source::SourceText;
use crate::finding::table::{Item, Keys};
use crate::port::codes;
use crate::port::contact::Contact;
use crate::port::fleet::{Berth, Plant, Ship};
use crate::port::harbour::{Place, Port};
use crate::port::kind::Kind;
use crate::port::known::Known;
use crate::port::means::Pool;
use crate::port::reader_contact::read_contacts;
use crate::port::reader_fleet::{read_berths, read_plant, read_ships};
use crate::port::reader_means::read_pools;
use crate::port::reader_places::{Head, read_clock, read_exercise, read_head, read_places};
use crate::port::reader_tide::read_tide;
use crate::port::reader_water::read_channels;
use crate::port::water::Channel;
use crate::tide::heights::Tide;
use crate::time::clock::PortClock;
use chrono::{DateTime, Utc};
use std::collections::BTreeMap;

/// The files of a port by their names within its folder: "ships.toml". Whoever reads the disk fills it.
pub type Folder = BTreeMap<String, SourceText>;

/// The files that a folder may hold, as far as rooms up to the rules read them.
const FILES: [&str; 9] = [
    "port.toml",
    "water.toml",
    "berths.toml",
    "ships.toml",
    "plant.toml",
    "means.toml",
    "rules.toml",
    "tasks.toml",
    "events.toml",
];

/// Where each kind of id is listed: the file's heading for it.
const HEADINGS: [(Kind, &str); 6] = [
    (Kind::Place, "place"),
    (Kind::Berth, "berth"),
    (Kind::Ship, "ship"),
    (Kind::Plant, "plant"),
    (Kind::Pool, "pool"),
    (Kind::Channel, "channel"),
];

/// A port as far as its files could be read: what the rules are checked against even if the port has faults.
#[derive(Clone, Debug)]
pub struct Draft {
    /// Its clock; `None` if the zone is at fault.
    pub clock: Option<PortClock>,
    /// Places without faults.
    pub places: Vec<Place>,
    /// Berths without faults.
    pub berths: Vec<Berth>,
    /// Ships without faults.
    pub ships: Vec<Ship>,
    /// Plant without faults.
    pub plant: Vec<Plant>,
    /// Pools without faults.
    pub pools: Vec<Pool>,
    /// Contacts without faults.
    pub contacts: Vec<Contact>,
    /// Channels without faults.
    pub channels: Vec<Channel>,
    /// The tide, if it is given and without faults.
    pub tide: Option<Tide>,
    /// Whether a tide is given, even if with faults.
    pub has_tide: bool,
    /// Every id, of faulty things too.
    pub known: Known,
    head: Option<Head>,
    exercise: Option<DateTime<Utc>>,
}

/// Reads a port: all findings at once, and the port if none of them is an error.
///
/// Only port.toml must be there; a file that is not there lists nothing. For the rules see
/// [`crate::rules::folder::read_rules`], for both [`crate::rules::folder::read_folder`].
#[must_use]
pub fn read_port(folder: &Folder) -> (Option<Port>, Vec<Finding>) {
    let (draft, findings) = read_draft(folder);
    let port = if has_error(&findings) { None } else { draft.into_port() };
    (port, findings)
}

/// Reads a port as far as it goes.
#[must_use]
pub fn read_draft(folder: &Folder) -> (Draft, Vec<Finding>) {
    let pages: BTreeMap<&str, Page<'_>> = folder
        .iter()
        .filter(|(name, _)| HEADINGS.iter().any(|(kind, _)| kind.file() == name.as_str()))
        .map(|(name, source)| (name.as_str(), Page::read(source, &codes::TABLE)))
        .collect();
    let known = read_ids(&pages);
    let draft = read_things(&pages, known);
    let mut findings = misplaced_files(folder);
    findings.extend(pages.into_values().flat_map(Page::into_findings));
    sort_findings(&mut findings);
    (draft, findings)
}

fn read_ids(pages: &BTreeMap<&str, Page<'_>>) -> Known {
    let mut known = Known::default();
    for (kind, heading) in HEADINGS {
        let Some(page) = pages.get(kind.file()) else {
            // A port without ships has no ships.toml; one without port.toml could have any place.
            if kind == Kind::Place {
                known.could_not_read(kind);
            }
            continue;
        };
        let Some(mut file) = Keys::of_file(page) else {
            known.could_not_read(kind);
            continue;
        };
        let heading_item = file.optional(heading);
        if heading_item.is_some_and(|item| !item.is_list()) {
            // Its wrong form is reported when the things themselves are read.
            known.could_not_read(kind);
            continue;
        }
        let things = heading_item.map(|item| item.list()).unwrap_or_default();
        for thing in things.iter().filter(|thing| thing.is_table()) {
            let Some(mut keys) = thing.keys(heading) else { continue };
            if let Some(id) = keys.optional("id") {
                known.add(kind, &id);
            }
            if kind == Kind::Pool
                && let Some(members) = keys.optional("members").filter(Item::is_list)
            {
                members.list().iter().for_each(|member| add_member(&mut known, member));
            }
        }
    }
    known
}

fn add_member(known: &mut Known, member: &Item<'_>) {
    if !member.is_table() {
        known.add(Kind::Member, member);
    } else if let Some(id) = member.keys("a member").and_then(|mut keys| keys.optional("id")) {
        known.add(Kind::Member, &id);
    }
}

fn read_things(pages: &BTreeMap<&str, Page<'_>>, known: Known) -> Draft {
    let mut files: BTreeMap<&str, Keys<'_>> =
        pages.iter().filter_map(|(name, page)| Some((*name, Keys::of_file(page)?))).collect();
    let clock = files.get_mut("port.toml").and_then(read_clock);
    let clock_now = clock.as_ref();
    let port_file = files.get_mut("port.toml");
    let (head, exercise, places) = port_file.map_or((None, None, Vec::new()), |file| {
        (read_head(file, &known), read_exercise(file, clock_now), read_places(file, &known))
    });
    let mut water = files.get_mut("water.toml");
    let tide = water.as_mut().and_then(|file| read_tide(file, clock_now));
    let datum = tide.as_ref().and_then(|tide| tide.datum);
    let channels = water.map(|file| read_channels(file, datum)).unwrap_or_default();
    let berths = files.get_mut("berths.toml").map(|file| read_berths(file, &known, clock_now));
    let ships = files.get_mut("ships.toml").map(|file| read_ships(file, &known, clock_now));
    let plant = files.get_mut("plant.toml").map(|file| read_plant(file, &known, clock_now));
    let means = files.get_mut("means.toml");
    let means = means.map(|file| (read_pools(file, clock_now), read_contacts(file, &known)));
    let (pools, contacts) = means.unwrap_or_default();
    files.into_values().for_each(Keys::finish);
    Draft {
        clock,
        places,
        berths: berths.unwrap_or_default(),
        ships: ships.unwrap_or_default(),
        plant: plant.unwrap_or_default(),
        pools,
        contacts,
        channels,
        has_tide: tide.is_some(),
        tide: tide.and_then(|read| read.tide),
        known,
        head,
        exercise,
    }
}

/// port.toml if it is missing, and names that are nearly those of our files.
fn misplaced_files(folder: &Folder) -> Vec<Finding> {
    let mut findings = Vec::new();
    if !folder.contains_key("port.toml") {
        findings.push(Finding::error(
            codes::MISSING_FILE,
            SourceText::new("port.toml", "").line(1),
            "there is no port.toml",
            "a port's folder holds at least port.toml, rules.toml and tasks.toml",
            "name the folder of a port, or write the file",
        ));
    }
    for (name, source) in folder.iter().filter(|(name, _)| !FILES.contains(&name.as_str())) {
        if let Some(meant) = nearest(name, FILES).filter(|meant| !folder.contains_key(*meant)) {
            findings.push(Finding::warning(
                codes::UNKNOWN_FILE,
                source.line(1),
                format!("the file {name} is not read"),
                format!("files of a port are {}", FILES.join(", ")),
                format!("did you mean {meant}?"),
            ));
        }
    }
    findings
}

impl Draft {
    /// The port, if its head could be read; ask only if no finding is an error.
    #[must_use]
    pub fn into_port(self) -> Option<Port> {
        let head = self.head?;
        Some(Port {
            name: head.name,
            invented: head.invented,
            clock: self.clock?,
            authority: head.authority,
            official_source: head.official_source,
            official_issuers: head.official_issuers,
            exercise: self.exercise,
            reference: head.reference,
            places: self.places,
            berths: self.berths,
            ships: self.ships,
            plant: self.plant,
            pools: self.pools,
            contacts: self.contacts,
            channels: self.channels,
            tide: self.tide,
        })
    }

    /// A port that is already checked.
    #[must_use]
    pub fn of(port: &Port) -> Draft {
        let mut known = Known::default();
        let members = port.pools.iter().flat_map(|pool| &pool.members);
        port.places.iter().for_each(|place| known.note(Kind::Place, &place.id));
        port.berths.iter().for_each(|berth| known.note(Kind::Berth, &berth.id));
        port.ships.iter().for_each(|ship| known.note(Kind::Ship, &ship.id));
        port.plant.iter().for_each(|piece| known.note(Kind::Plant, &piece.id));
        port.pools.iter().for_each(|pool| known.note(Kind::Pool, &pool.id));
        members.for_each(|member| known.note(Kind::Member, &member.id));
        port.channels.iter().for_each(|channel| known.note(Kind::Channel, &channel.id));
        let copy = port.clone();
        Draft {
            clock: Some(copy.clock),
            places: copy.places,
            berths: copy.berths,
            ships: copy.ships,
            plant: copy.plant,
            pools: copy.pools,
            contacts: copy.contacts,
            channels: copy.channels,
            has_tide: copy.tide.is_some(),
            tide: copy.tide,
            known,
            head: None,
            exercise: copy.exercise,
        }
    }
}
