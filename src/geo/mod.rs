//! The earth: positions, distances and bearings, exposure, light.

pub mod exposure;
pub mod daylight;
pub mod geodesic;
pub mod position;
pub mod position_text;
