//! Faults in files that people write or bring: what, where, what is allowed, what to do.

pub mod fault;
pub mod page;
pub mod render;
pub mod source;
pub mod table;
