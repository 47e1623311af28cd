//! Water level: heights and the windows in which there is enough of it.

pub mod heights;
pub mod window;
