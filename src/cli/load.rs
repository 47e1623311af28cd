//! Everything that a plan depends on, read from a port's folder and checked; all findings at once.

use crate::advisory::forecast::Advisory;
use crate::advisory::official_odds::OfficialOdds;
use crate::arrival::errors::ErrorTables;
use crate::arrival::errors_reader::read_error_tables;
use crate::cli::exit::Failure;
use crate::cli::folder::{PortFolder, TOO_LONG};
use crate::cli::forecasts::{Taken, doubtful, follows, read_taken};
use crate::cli::kept::{Kept, TEXT, lines_of};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::tell_findings;
use crate::finding::fault::{Finding, has_error, sort_findings};
use crate::finding::source::SourceText;
use crate::plan::in_force::{InForce, in_force};
use crate::port::folder::read_draft;
use crate::port::harbour::Port;
use crate::record::doubt::doubts;
use crate::record::event::Event;
use crate::record::fold::situation;
use crate::record::reader::read_events;
use crate::record::situation::Situation;
use crate::rules::folder::read_folder;
use crate::rules::stage::Rules;
use crate::store::chain::Head;
use crate::time::clock::PortClock;
use crate::time::moment::Moment;
use crate::work::expand::expand;
use crate::work::graph::WorkGraph;
use crate::work::strangers::strangers;
use std::collections::BTreeMap;

/// The error tables that go with the program, for ports without their own.
const SHIPPED_ERRORS: &str = include_str!("../../rules/forecast-errors.toml");
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
    /// The head of the record's chain; `None` if the record is a text.
    pub head: Option<Head>,
}

/// How closely a record that only grows is looked at: what is doubtful in it was told when it was written.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Look {
    /// Faults only.
    Short,
    /// Doubts too.
    Whole,
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
        let then = situation(&self.events, now.to_utc());
        let mut taken = self.taken(&then);
        let last = taken.pop().map(|(_, advisory)| advisory);
        last.is_some_and(|last| taken.iter().any(|(_, one)| follows(one, last) && one.issued > last.issued))
    }

    /// The newest official odds about a storm in a situation, with their file.
    #[must_use]
    pub fn official_odds(&self, storm: &Advisory, then: &Situation) -> Option<(&str, &OfficialOdds)> {
        let taken = then.advisories.iter().filter_map(|taken| self.official_odds.get_key_value(&taken.file));
        let about = taken.filter(|(_, odds)| odds.storm == storm.storm.id);
        about.max_by_key(|(_, odds)| odds.issued).map(|(file, odds)| (file.as_str(), odds))
    }

    /// The advisories taken in a situation and not withdrawn, in the order taken.
    #[must_use]
    pub fn taken(&self, then: &Situation) -> Vec<(&str, &Advisory)> {
        let read = then.advisories.iter().filter_map(|taken| self.forecasts.get_key_value(&taken.file));
        read.map(|(file, advisory)| (file.as_str(), advisory)).collect()
    }

    /// What every page says about the record: its last event and the head of its chain; empty for a text.
    #[must_use]
    pub fn head_words(&self) -> String {
        self.head.as_ref().map_or_else(String::new, Head::to_string)
    }
}

/// Reads a port's folder for a command that needs all of it; warnings are told on standard error.
///
/// # Errors
/// [`Failure::Read`], or [`Failure::Input`] with all findings.
pub fn load(port: &PortArgs) -> Result<Loaded, Failure> {
    let Examined { findings, sources, loaded } = examine(port, Look::Short)?;
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
pub fn examine(port: &PortArgs, look: Look) -> Result<Examined, Failure> {
    let mut folder = PortFolder::open(&port.folder)?;
    let mut kept = Kept::of(port, &mut folder)?;
    let (things, port_findings) = read_folder(&folder.files);
    let mut findings = folder.findings.clone();
    findings.extend(port_findings);
    let things = things.filter(|_| folder.unread.is_empty()).map(|(port, rules)| {
        let (work, work_findings) = expand(&port, &rules);
        findings.extend(work_findings);
        (port, rules, work)
    });
    let clock = read_draft(&folder.files).0.clock;
    let (events, event_findings) = events_of(&mut kept, &folder, clock.as_ref(), look);
    findings.extend(event_findings);
    if let Some((port, rules, work)) = &things {
        findings.extend(strangers(port, rules, work, &events));
    }
    let mut sources: Vec<SourceText> = folder.files.values().cloned().collect();
    let Taken { forecasts, official_odds } =
        read_taken(&folder, &kept, &events, &mut findings, &mut sources)?;
    if matches!(kept, Kept::Text) || look == Look::Whole {
        findings.extend(doubtful(&events, &forecasts, things.as_ref().map(|(port, _, _)| port)));
    }
    let tables = read_tables(&folder, &mut findings, &mut sources);
    if let Kept::Store(kept) = &kept {
        place_in_store(kept.store.shown(), &events, &mut findings, &mut sources);
    }
    sort_findings(&mut findings);
    // A file too long to be read was taken as empty: what follows from that is no news.
    findings.retain(|finding| finding.code == TOO_LONG || !folder.unread.contains(&finding.place.file));
    let loaded = things.zip(tables).filter(|_| !has_error(&findings)).map(|((port, rules, work), tables)| {
        Loaded { port, rules, work, events, forecasts, official_odds, tables, head: kept.head() }
    });
    Ok(Examined { findings, sources, loaded })
}

/// The events in order of time known, with what is wrong or doubtful in them.
fn events_of(
    kept: &mut Kept,
    folder: &PortFolder,
    clock: Option<&PortClock>,
    look: Look,
) -> (Vec<Event>, Vec<Finding>) {
    match kept {
        Kept::Text => folder.files.get(TEXT).map(|source| read_events(source, clock)).unwrap_or_default(),
        Kept::Store(kept) => {
            let mut events = std::mem::take(&mut kept.events);
            let findings = if look == Look::Whole { doubts(&events, clock) } else { Vec::new() };
            events.sort_by_key(|event| event.known);
            (events, findings)
        }
    }
}

/// Findings about events of a store get the place of their line among all events.
fn place_in_store(shown: &str, events: &[Event], findings: &mut [Finding], sources: &mut Vec<SourceText>) {
    if findings.iter().all(|finding| finding.place.file != shown) {
        return;
    }
    let source = lines_of(shown, events);
    for finding in findings.iter_mut().filter(|finding| finding.place.file == shown) {
        finding.place = source.line(finding.place.line);
    }
    sources.push(source);
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
