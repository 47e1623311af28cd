//! Wind: the track between forecast points, the vortex around it, and what a wind means at a place.

pub mod climatology;
pub mod field;
pub mod profile;
pub mod sphere;
pub mod structure;
pub mod track;
