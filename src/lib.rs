//! snugdown: from a tropical-cyclone forecast to a port's timed closure checklist.
//!
//! The rooms stand on floors and import downwards only; `DEVELOPERS.md` draws the house.

pub mod advisory;
pub mod arrival;
pub mod cli;
pub mod finding;
pub mod geo;
pub mod output;
pub mod plan;
pub mod port;
pub mod record;
pub mod rules;
pub mod schedule;
pub mod store;
pub mod text;
pub mod tide;
pub mod time;
pub mod units;
pub mod wind;
pub mod work;
