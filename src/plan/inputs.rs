//! What plans are made from: a port's folder, read.

use crate::advisory::forecast::Advisory;
use crate::arrival::errors::ErrorTables;
use crate::arrival::odds::Draw;
use crate::port::harbour::Port;
use crate::record::event::Event;
use crate::rules::stage::Rules;
use crate::schedule::search::Effort;
use crate::work::graph::WorkGraph;
use std::collections::BTreeMap;

/// Everything that plans depend on: what stands in the port's folder.
#[derive(Clone, Copy, Debug)]
pub struct Inputs<'a> {
    /// The port.
    pub port: &'a Port,
    /// Its rules.
    pub rules: &'a Rules,
    /// The graph of its tasks and stages; see [`crate::work::expand::expand`].
    pub work: &'a WorkGraph,
    /// The record.
    pub events: &'a [Event],
    /// Forecasts by file name.
    pub forecasts: &'a BTreeMap<String, Advisory>,
    /// The error tables of the odds.
    pub tables: &'a ErrorTables,
    /// How many scenarios.
    pub draw: Draw,
    /// How long to search for each plan.
    pub effort: Effort,
}
