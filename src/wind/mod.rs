//! Wind: the track between forecast points, the vortex around it, and what a wind means at a place.

pub mod averaging;
pub mod beaufort;
pub mod climatology;
pub mod exposure;
pub mod field;
pub mod height;
pub mod inland;
pub mod profile;
pub mod sphere;
pub mod structure;
pub mod swell;
pub mod track;
pub mod turning;
