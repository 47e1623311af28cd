//! One graph of tasks and stages, and what times the odds and the record give it.

pub mod circle;
pub mod expand;
pub mod graph;
pub mod observed;
pub mod questions;
pub mod reckoned;
pub mod strangers;
pub mod timed;
