//! The forecasts that a port's record takes, read from its folder; and what is odd about taking them.

use crate::advisory::choice::Choice;
use crate::advisory::forecast::Advisory;
use crate::advisory::official_odds::{OfficialOdds, is_official_odds, read_official_odds};
use crate::advisory::read::read_chosen;
use crate::advisory::same_storm::is_same_storm;
use crate::cli::exit::Failure;
use crate::cli::folder::PortFolder;
use crate::cli::kept::Kept;
use crate::finding::fault::{Finding, nearest};
use crate::finding::source::SourceText;
use crate::plan::in_force::is_official;
use crate::port::harbour::Port;
use crate::record::event::{Event, What};
use crate::record::taking::Taking;
use crate::store::chain::digest;
use std::collections::BTreeMap;

/// An event takes an advisory whose file is not in the folder.
pub const ADVISORY_MISSING: &str = "cli-advisory-missing";
/// The file of an advisory is not the one that was taken.
pub const ADVISORY_CHANGED: &str = "cli-advisory-changed";
/// Warning: an advisory was issued before one that was taken earlier.
pub const ADVISORY_OLDER: &str = "cli-advisory-older";
/// A forecast for drills in a port that holds none.
pub const DRILL_IN_EARNEST: &str = "cli-drill-in-earnest";
/// Warning: an advisory is not from the port's official source.
pub const SECOND_CENTRE: &str = "cli-second-centre";

/// What the record takes.
#[derive(Clone, Debug, Default)]
pub struct Taken {
    /// Forecasts by the name under which they were taken.
    pub forecasts: BTreeMap<String, Advisory>,
    /// Official odds, by file.
    pub official_odds: BTreeMap<String, OfficialOdds>,
}

/// Reads every file that the record takes, each choice once; of two events that take the same the first one's time says
/// which base time of a deck had come.
///
/// # Errors
/// [`Failure::Read`] if the disk does not give what is there.
pub fn read_taken(
    folder: &PortFolder,
    kept: &Kept,
    events: &[Event],
    findings: &mut Vec<Finding>,
    sources: &mut Vec<SourceText>,
) -> Result<Taken, Failure> {
    let mut seen: BTreeMap<String, (&Taking, &Event)> = BTreeMap::new();
    for event in events {
        if let Some(taking) = taking(event) {
            seen.entry(taking.key()).or_insert((taking, event));
        }
    }
    let mut taken = Taken::default();
    for (key, (taking, event)) in seen {
        let Some(bytes) = paper(folder, kept, taking)? else {
            findings.push(missing(folder, &taking.file, event));
            continue;
        };
        findings.extend(changed(event, taking, &bytes));
        let name = folder.shown(&taking.file);
        let (found, source) = if is_official_odds(&bytes) {
            let reading = read_official_odds(&name, &bytes);
            taken.official_odds.extend(reading.odds.map(|odds| (key, odds)));
            (reading.findings, reading.source)
        } else {
            let choice = Choice {
                storm: taking.storm.clone(),
                technique: taking.technique.clone(),
                cycle: taking.cycle,
                taken: Some(event.known),
            };
            let reading = read_chosen(&name, &bytes, &choice);
            taken.forecasts.extend(reading.advisory.map(|advisory| (key, advisory)));
            (reading.findings, reading.source)
        };
        findings.extend(found);
        sources.push(source);
    }
    Ok(taken)
}

/// An advisory as it came: from the store, else from the folder.
fn paper(folder: &PortFolder, kept: &Kept, taking: &Taking) -> Result<Option<Vec<u8>>, Failure> {
    match kept {
        Kept::Store(kept) if !taking.digest.is_empty() => Ok(kept.store.paper(&taking.digest)?),
        Kept::Store(_) | Kept::Text => folder.bytes(&taking.file),
    }
}

/// An advisory whose file was changed after it was taken: plans made from it cannot be made again.
fn changed(event: &Event, taking: &Taking, bytes: &[u8]) -> Option<Finding> {
    let is_changed = !taking.digest.is_empty() && taking.digest != digest(bytes);
    is_changed.then(|| {
        Finding::error(
            ADVISORY_CHANGED,
            event.place.clone(),
            format!("{} is not the file that was taken: its SHA-256 is {}", taking.file, digest(bytes)),
            "an advisory stays as it came; a correction is a file of its own",
            "put the file back as it was",
        )
    })
}

/// What an event takes, if it takes an advisory.
#[must_use]
pub fn taking(event: &Event) -> Option<&Taking> {
    if let What::AdvisoryTaken(taking) = &event.what { Some(taking) } else { None }
}

fn missing(folder: &PortFolder, file: &str, event: &Event) -> Finding {
    let beside = folder.beside(file);
    let to_do = nearest(file, beside.iter().map(String::as_str))
        .map_or("put the file there, or correct the name".to_owned(), |meant| {
            format!("did you mean {meant}?")
        });
    Finding::error(
        ADVISORY_MISSING,
        event.place.clone(),
        format!("there is no file {file} in the port's folder"),
        "an advisory that was taken is kept in the folder, so that plans can be made again from it",
        to_do,
    )
}

/// Findings about taking forecasts that are themselves sound: one issued before one taken earlier by the same office for
/// the same storm, one from a second centre, a drill in a port that holds none.
#[must_use]
pub fn doubtful(
    events: &[Event],
    forecasts: &BTreeMap<String, Advisory>,
    port: Option<&Port>,
) -> Vec<Finding> {
    let mut newest: Vec<(String, &Advisory)> = Vec::new();
    let mut findings = Vec::new();
    for event in events {
        let Some(taking) = taking(event) else { continue };
        let key = taking.key();
        let Some(advisory) = forecasts.get(&key) else { continue };
        if let Some(port) = port {
            findings.extend(of_source(&key, taking, advisory, port, event));
        }
        let before = newest.iter_mut().find(|(_, one)| follows(one, advisory));
        match before {
            Some((before, newer)) if newer.issued > advisory.issued && !taking.by_order => {
                findings.push(Finding::warning(
                    ADVISORY_OLDER,
                    event.place.clone(),
                    format!("{key} was issued before {before}, which was taken earlier"),
                    "the newest advisory stays in force",
                    "look whether the right file was taken",
                ));
            }
            Some(before) => *before = (key, advisory),
            None => newest.push((key, advisory)),
        }
    }
    findings
}

/// Whether two advisories belong to one series: the same office's about the same storm.
#[must_use]
pub fn follows(a: &Advisory, b: &Advisory) -> bool {
    a.issuer == b.issuer && is_same_storm(a, b)
}

fn of_source(key: &str, taking: &Taking, advisory: &Advisory, port: &Port, event: &Event) -> Option<Finding> {
    if advisory.is_drill && port.exercise.is_none() {
        return Some(Finding::error(
            DRILL_IN_EARNEST,
            event.place.clone(),
            format!("{key} is a best track, for drills only, and {} holds no drill", port.name),
            "a port that takes one has a table [exercise] in port.toml, and every page says EXERCISE",
            "take an office's advisory, or add [exercise]",
        ));
    }
    (!is_official(port, advisory) && !taking.by_order).then(|| {
        Finding::warning(
            SECOND_CENTRE,
            event.place.clone(),
            format!("{key} is by {}, not by the port's official source", advisory.issuer),
            "such an advisory changes no plan; a plan says where it is earlier",
            "write by_order = true if it is to be planned on",
        )
    })
}
