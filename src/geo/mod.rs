//! The earth: positions, distances and bearings, light.

pub mod daylight;
pub mod geodesic;
pub mod position;
