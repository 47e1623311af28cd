//! What tests of whole plans share: reading a folder and a forecast, and planning on them.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test that cannot read its port must fail")]
#![allow(dead_code, reason = "not every test file uses all of it")]

use snugdown::advisory::forecast::Advisory;
use snugdown::advisory::read::read_forecast;
use snugdown::arrival::errors::ErrorTables;
use snugdown::arrival::errors_reader::read_error_tables;
use snugdown::arrival::odds::Draw;
use snugdown::finding::source::SourceText;
use snugdown::plan::fold::{History, plan_at};
use snugdown::plan::inputs::Inputs;
use snugdown::port::harbour::Port;
use snugdown::record::event::Event;
use snugdown::record::reader::read_events;
use snugdown::rules::folder::read_folder;
use snugdown::rules::stage::Rules;
use snugdown::schedule::search::Effort;
use snugdown::time::moment::Moment;
use snugdown::work::expand::expand;
use snugdown::work::graph::WorkGraph;
use std::collections::BTreeMap;
use std::path::Path;

/// A port's folder, read.
pub struct Reading {
    pub port: Port,
    pub rules: Rules,
    pub work: WorkGraph,
    pub events: Vec<Event>,
    pub forecasts: BTreeMap<String, Advisory>,
    pub tables: ErrorTables,
}

impl Reading {
    /// The TOML files of a folder below the package's root.
    pub fn folder(path: &str) -> Reading {
        Reading::folder_with(path, &|text| text)
    }

    /// The same, each file changed as it is read.
    pub fn folder_with(path: &str, change: &dyn Fn(String) -> String) -> Reading {
        let root = Path::new(env!("CARGO_MANIFEST_DIR")).join(path);
        let mut files = BTreeMap::new();
        for entry in std::fs::read_dir(&root).unwrap() {
            let path = entry.unwrap().path();
            let name = path.file_name().unwrap().to_string_lossy().into_owned();
            if name.ends_with(".toml") {
                let text = change(std::fs::read_to_string(&path).unwrap());
                files.insert(name.clone(), SourceText::new(name, text));
            }
        }
        let mut reading = Reading::files(files);
        let advisories = root.join("advisories");
        if advisories.is_dir() {
            for entry in std::fs::read_dir(advisories).unwrap() {
                let path = entry.unwrap().path();
                let name = format!("advisories/{}", path.file_name().unwrap().to_string_lossy());
                reading.add_forecast(&name, &std::fs::read_to_string(&path).unwrap());
            }
        }
        reading
    }

    /// The files of a folder, without its advisories.
    pub fn files(mut files: BTreeMap<String, SourceText>) -> Reading {
        let events_source = files.remove("events.toml");
        let errors_source = files.remove("forecast-errors.toml");
        let (read, findings) = read_folder(&files);
        let Some((port, rules)) = read else { panic!("{findings:?}") };
        let (work, findings) = expand(&port, &rules);
        assert!(findings.is_empty(), "{findings:?}");
        let events = events_source.map_or_else(Vec::new, |source| events(&source, &port));
        let shipped =
            || SourceText::new("forecast-errors.toml", include_str!("../../rules/forecast-errors.toml"));
        let tables = read_error_tables(&errors_source.unwrap_or_else(shipped)).unwrap();
        Reading { port, rules, work, events, forecasts: BTreeMap::new(), tables }
    }

    /// Adds a forecast under a file name.
    pub fn add_forecast(&mut self, name: &str, text: &str) {
        let reading = read_forecast(name, text.as_bytes());
        let Some(advisory) = reading.advisory else { panic!("{name}: {:?}", reading.findings) };
        self.forecasts.insert(name.to_owned(), advisory);
    }

    /// Replaces the record.
    pub fn set_events(&mut self, text: &str) {
        self.events = events(&SourceText::new("events.toml", text), &self.port);
    }

    /// All plans up to a time in the port's clock.
    pub fn plans(&self, now: &str) -> History {
        plan_at(&self.inputs(), self.moment(now))
    }

    /// What plans are made from.
    pub fn inputs(&self) -> Inputs<'_> {
        Inputs {
            port: &self.port,
            rules: &self.rules,
            work: &self.work,
            events: &self.events,
            forecasts: &self.forecasts,
            tables: &self.tables,
            // Fewer scenarios than people get: what is tested here does not depend on their number.
            draw: Draw { scenarios: 300, most: 600 },
            effort: Effort::usual(self.work.graph.node_count()),
        }
    }

    /// A time as the port writes it.
    pub fn moment(&self, text: &str) -> Moment {
        Moment::at_or_after(self.port.clock.read(text).unwrap())
    }
}

fn events(source: &SourceText, port: &Port) -> Vec<Event> {
    let (events, findings) = read_events(source, Some(&port.clock));
    assert!(!snugdown::finding::fault::has_error(&findings), "{findings:?}");
    events
}
