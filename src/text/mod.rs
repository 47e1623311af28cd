//! Values that people write in files: quantities with their units, times and ids.

pub mod quantity;
