//! Arrival: error tables, scenarios, and the chance that a wind reaches a place by a time.

pub mod basin;
pub mod course;
pub mod drawing;
pub mod earlier;
pub mod errors;
pub mod errors_reader;
pub mod keyed;
pub mod landfall;
pub mod leg;
pub mod odds;
pub mod onset;
pub mod own_track;
pub mod question;
pub mod scenario;
pub mod seas;
pub mod series;
pub mod spread;
pub mod threads;
