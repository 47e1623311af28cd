//! The pure engine that places tasks: whole minutes, indices, windows, capacities; it knows no port.

pub mod outcome;
pub mod problem;
