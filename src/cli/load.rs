//! Everything that a plan depends on, read from a port's folder and checked; all findings at once.

use crate::advisory::forecast::Advisory;
use crate::advisory::official_odds::OfficialOdds;
use crate::arrival::errors::ErrorTables;
use crate::arrival::errors_reader::read_error_tables;
use crate::cli::exit::Failure;
use crate::cli::folder::{PortFolder, TOO_LONG};
use crate::cli::forecasts::{Taken, doubtful, follows, read_taken, taking};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::tell_findings;
use crate::finding::fault::{Finding, has_error, sort_findings};
use crate::finding::source::SourceText;
use crate::plan::in_force::{InForce, in_force};
use crate::port::folder::read_draft;
use crate::port::harbour::Port;
use crate::record::event::Event;
use crate::record::reader::read_events;
use crate::record::situation::Situation;
use crate::rules::folder::read_folder;
use crate::rules::stage::Rules;
use crate::time::moment::Moment;
use crate::work::expand::expand;
use crate::work::graph::WorkGraph;
use crate::work::strangers::strangers;
use std::collections::BTreeMap;

/// The error tables that go with the program, for ports without their own.
const SHIPPED_ERRORS: &str = include_str!("../../rules/forecast-errors.toml");
/// A port's record within its folder.
const RECORD: &str = "events.toml";
/// A port's own error tables within its folder.
const OWN_ERRORS: &str = "forecast-errors.toml";

/// What a port's folder holds.
#[derive(Clone, Debug)]
pub struct Examined {
    /// All findings, by file and place.
    pub findings: Vec<Finding>,
    /// The texts they are in.
    pub sources: Vec<SourceText>,
    /// What plans are made from; `None` if any finding is an error.
    pub loaded: Option<Loaded>,
}

/// What plans are made from.
#[derive(Clone, Debug)]
pub struct Loaded {
    /// The port.
    pub port: Port,
    /// Its rules.
    pub rules: Rules,
    /// The graph of its tasks and stages.
    pub work: WorkGraph,
    /// Its record.
    pub events: Vec<Event>,
    /// The forecasts that the record names, by file.
    pub forecasts: BTreeMap<String, Advisory>,
    /// The official odds that it takes, by file.
    pub official_odds: BTreeMap<String, OfficialOdds>,
    /// The error tables: its own, or those that go with the program.
    pub tables: ErrorTables,
}

impl Loaded {
    /// The advisories in force at `now`, one for each storm, and what second centres say.
    #[must_use]
    pub fn in_force<'a>(&'a self, then: &'a Situation) -> InForce<'a> {
        in_force(&self.forecasts, &self.port, &then.advisories, then.now)
    }

    /// Whether the last advisory taken by `now` was issued before one of the same office and storm taken earlier.
    #[must_use]
    pub fn is_out_of_order(&self, now: Moment) -> bool {
        let mut taken: Vec<&Advisory> = self.taken_by(now).collect();
        let last = taken.pop();
        last.is_some_and(|last| taken.iter().any(|one| follows(one, last) && one.issued > last.issued))
    }

    /// The newest official odds about a storm that were taken by `now`, with their file.
    #[must_use]
    pub fn official_odds(&self, storm: &Advisory, now: Moment) -> Option<(&str, &OfficialOdds)> {
        let known = self.events.iter().filter(|event| event.known <= now.to_utc());
        let taken = known.filter_map(|event| {
            let (file, odds) = self.official_odds.get_key_value(&taking(event)?.key())?;
            Some((file.as_str(), odds))
        });
        taken.filter(|(_, odds)| odds.storm == storm.storm.id).max_by_key(|(_, odds)| odds.issued)
    }

    fn taken_by(&self, now: Moment) -> impl Iterator<Item = &Advisory> {
        let known = self.events.iter().filter(move |event| event.known <= now.to_utc());
        known.filter_map(|event| self.forecasts.get(&taking(event)?.key()))
    }
}

/// Reads a port's folder for a command that needs all of it; warnings are told on standard error.
///
/// # Errors
/// [`Failure::Read`], or [`Failure::Input`] with all findings.
pub fn load(port: &PortArgs) -> Result<Loaded, Failure> {
    let Examined { findings, sources, loaded } = examine(port)?;
    match loaded {
        Some(loaded) => {
            tell_findings(&findings, &sources);
            Ok(loaded)
        }
        None => Err(Failure::Input { findings, sources }),
    }
}

/// Reads a port's folder and everything that its record names.
///
/// # Errors
/// [`Failure::Read`] if the disk does not give what is there.
pub fn examine(port: &PortArgs) -> Result<Examined, Failure> {
    let mut folder = PortFolder::open(&port.folder)?;
    if let Some(record) = &port.record {
        folder.replace(RECORD, record)?;
    }
    let (things, port_findings) = read_folder(&folder.files);
    let mut findings = folder.findings.clone();
    findings.extend(port_findings);
    let things = things.filter(|_| folder.unread.is_empty()).map(|(port, rules)| {
        let (work, work_findings) = expand(&port, &rules);
        findings.extend(work_findings);
        (port, rules, work)
    });
    let clock = read_draft(&folder.files).0.clock;
    let (events, event_findings) =
        folder.files.get(RECORD).map(|source| read_events(source, clock.as_ref())).unwrap_or_default();
    findings.extend(event_findings);
    if let Some((port, rules, work)) = &things {
        findings.extend(strangers(port, rules, work, &events));
    }
    let mut sources: Vec<SourceText> = folder.files.values().cloned().collect();
    let Taken { forecasts, official_odds } = read_taken(&folder, &events, &mut findings, &mut sources)?;
    findings.extend(doubtful(&events, &forecasts, things.as_ref().map(|(port, _, _)| port)));
    let tables = read_tables(&folder, &mut findings, &mut sources);
    sort_findings(&mut findings);
    // A file too long to be read was taken as empty: what follows from that is no news.
    findings.retain(|finding| finding.code == TOO_LONG || !folder.unread.contains(&finding.place.file));
    let loaded = things.zip(tables).filter(|_| !has_error(&findings)).map(|((port, rules, work), tables)| {
        Loaded { port, rules, work, events, forecasts, official_odds, tables }
    });
    Ok(Examined { findings, sources, loaded })
}

fn read_tables(
    folder: &PortFolder,
    findings: &mut Vec<Finding>,
    sources: &mut Vec<SourceText>,
) -> Option<ErrorTables> {
    let own = folder.files.get(OWN_ERRORS).cloned();
    let source =
        own.unwrap_or_else(|| SourceText::new("the program's own forecast-errors.toml", SHIPPED_ERRORS));
    match read_error_tables(&source) {
        Ok(tables) => Some(tables),
        Err(faults) => {
            findings.extend(faults);
            sources.push(source);
            None
        }
    }
}

/// The error tables that go with the program.
///
/// # Errors
/// [`Failure::Input`]: the build is at fault, and says where.
pub fn shipped_tables() -> Result<ErrorTables, Failure> {
    let source = SourceText::new("the program's own forecast-errors.toml", SHIPPED_ERRORS);
    read_error_tables(&source).map_err(|findings| Failure::Input { findings, sources: vec![source] })
}
