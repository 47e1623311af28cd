//! The earth: positions, distances and bearings, light.

pub mod geodesic;
pub mod position;
pub mod position_text;
