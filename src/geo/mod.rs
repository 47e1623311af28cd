//! The earth: positions, distances and bearings, exposure, light.

pub mod daylight;
pub mod exposure;
pub mod geodesic;
pub mod land;
pub mod position;
pub mod position_text;
