//! The earth: positions, distances and bearings, light.

pub mod position;
