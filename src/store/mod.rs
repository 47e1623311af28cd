//! The port's record on disk: one file that only grows, each event chained to the one before.

pub mod chain;
pub mod error;
pub mod file;
pub mod form;
pub mod form_back;
pub mod schema;
pub mod share;
pub mod written;
