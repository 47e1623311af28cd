//! What a port is: places, water, berths, ships, plant, people and craft.

pub mod fleet;
pub mod harbour;
pub mod means;
pub mod water;
