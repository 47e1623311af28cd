//! Arrival: error tables, scenarios, and the chance that a wind reaches a place by a time.

pub mod basin;
pub mod course;
pub mod errors;
pub mod errors_reader;
pub mod keyed;
pub mod leg;
pub mod odds;
pub mod onset;
pub mod question;
pub mod scenario;
pub mod spread;
