//! Numbers with a unit: finite and in range by construction.

pub mod bearing;
pub mod chance;
pub mod length;
pub mod number;
pub mod pressure;
pub mod speed;
pub mod wind;
