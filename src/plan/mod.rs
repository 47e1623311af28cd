//! From rules, record and odds to a timed plan; its audit; what changed since the one before.

pub mod changes;
pub mod sheet;
