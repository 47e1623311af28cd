//! Everything that a plan depends on, read from a port's folder and checked; all findings at once.

use crate::advisory::forecast::Advisory;
use crate::advisory::read::read_forecast;
use crate::arrival::errors::ErrorTables;
use crate::arrival::errors_reader::read_error_tables;
use crate::cli::exit::Failure;
use crate::cli::folder::{PortFolder, TOO_LONG};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::tell_findings;
use crate::finding::fault::{Finding, has_error, nearest, sort_findings};
use crate::finding::source::SourceText;
use crate::port::folder::read_draft;
use crate::port::harbour::Port;
use crate::record::event::{Event, What};
use crate::record::reader::read_events;
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

/// An event takes an advisory whose file is not in the folder.
pub const ADVISORY_MISSING: &str = "cli-advisory-missing";
/// Warning: an advisory was issued before one that was taken earlier.
pub const ADVISORY_OLDER: &str = "cli-advisory-older";

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
    /// The error tables: its own, or those that go with the program.
    pub tables: ErrorTables,
}

impl Loaded {
    /// The advisory in force at `now`, with its file: of those taken by then the newest by issue; a correction goes before
    /// what it corrects, and what was taken later before what was taken earlier.
    #[must_use]
    pub fn in_force(&self, now: Moment) -> Option<(&str, &Advisory)> {
        self.taken_by(now).max_by_key(|(_, advisory)| (advisory.issued, advisory.is_corrected))
    }

    /// Whether the last advisory taken by `now` was issued before one taken earlier.
    #[must_use]
    pub fn is_out_of_order(&self, now: Moment) -> bool {
        let last = self.taken_by(now).last();
        last.is_some_and(|(_, last)| self.taken_by(now).any(|(_, earlier)| earlier.issued > last.issued))
    }

    fn taken_by(&self, now: Moment) -> impl Iterator<Item = (&str, &Advisory)> {
        let known = self.events.iter().filter(move |event| event.known <= now.to_utc());
        known.filter_map(taken).filter_map(|file| Some((file, self.forecasts.get(file)?)))
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
    let forecasts = read_forecasts(&folder, &events, &mut findings, &mut sources)?;
    findings.extend(out_of_order(&events, &forecasts));
    let tables = read_tables(&folder, &mut findings, &mut sources);
    sort_findings(&mut findings);
    // A file too long to be read was taken as empty: what follows from that is no news.
    findings.retain(|finding| finding.code == TOO_LONG || !folder.unread.contains(&finding.place.file));
    let loaded = things
        .zip(tables)
        .filter(|_| !has_error(&findings))
        .map(|((port, rules, work), tables)| Loaded { port, rules, work, events, forecasts, tables });
    Ok(Examined { findings, sources, loaded })
}

fn read_forecasts(
    folder: &PortFolder,
    events: &[Event],
    findings: &mut Vec<Finding>,
    sources: &mut Vec<SourceText>,
) -> Result<BTreeMap<String, Advisory>, Failure> {
    let mut forecasts = BTreeMap::new();
    let mut seen: BTreeMap<&str, &Event> = BTreeMap::new();
    for event in events {
        if let Some(file) = taken(event) {
            seen.entry(file).or_insert(event);
        }
    }
    for (file, event) in seen {
        let Some(bytes) = folder.bytes(file)? else {
            findings.push(missing(folder, file, event));
            continue;
        };
        let reading = read_forecast(&folder.shown(file), &bytes);
        findings.extend(reading.findings);
        sources.push(reading.source);
        if let Some(advisory) = reading.advisory {
            forecasts.insert(file.to_owned(), advisory);
        }
    }
    Ok(forecasts)
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

/// A warning for each advisory that was issued before one taken earlier.
fn out_of_order(events: &[Event], forecasts: &BTreeMap<String, Advisory>) -> Vec<Finding> {
    let mut newest: Option<(&str, &Advisory)> = None;
    let mut findings = Vec::new();
    for event in events {
        let Some((file, advisory)) = taken(event).and_then(|file| Some((file, forecasts.get(file)?))) else {
            continue;
        };
        match newest {
            Some((before, newer)) if newer.issued > advisory.issued => findings.push(Finding::warning(
                ADVISORY_OLDER,
                event.place.clone(),
                format!("{file} was issued before {before}, which was taken earlier"),
                "the newest advisory stays in force",
                "look whether the right file was taken",
            )),
            _ => newest = Some((file, advisory)),
        }
    }
    findings
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

fn taken(event: &Event) -> Option<&str> {
    if let What::AdvisoryTaken { file } = &event.what { Some(file) } else { None }
}
