//! The pure engine that places tasks: whole minutes, indices, windows, capacities; it knows no port.

pub mod bound;
pub mod causes;
pub mod change;
pub mod check;
pub mod explain;
pub mod lane;
pub mod latest;
pub mod model;
pub mod outcome;
pub mod place;
pub mod problem;
pub mod random;
pub mod roster;
pub mod score;
pub mod search;
pub mod seeds;
pub mod team;
