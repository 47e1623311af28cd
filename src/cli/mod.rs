//! The command line: one file per command; reads the disk and the clock, and writes to the terminal.

pub mod args;
pub mod arrivals;
pub mod changes;
pub mod check;
pub mod clock;
pub mod completions;
pub mod exit;
pub mod folder;
pub mod forecasts;
pub mod load;
pub mod man;
pub mod now;
pub mod plan;
pub mod planning;
pub mod port_args;
pub mod run;
pub mod screen;
pub mod wind;
