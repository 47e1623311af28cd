//! A port's rules: stages, duties, and the tasks that closing it takes.

pub mod limit;
pub mod pick;
pub mod stage;
pub mod task;
