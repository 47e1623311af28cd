//! The tide: water levels above chart datum, and when there is enough of it.

pub mod astronomy;
pub mod constituent;
pub mod error;
pub mod harmonic;
pub mod heights;
pub mod simple;
pub mod table;
pub mod under_keel;
pub mod window;
