//! What was known, ordered, told and done, as plain values, and the situation that follows from it.

pub mod call;
pub mod codes;
pub mod doubt;
pub mod event;
pub mod fact;
pub mod fold;
pub mod mention;
pub mod reader;
pub mod reader_call;
pub mod reader_fact;
pub mod ruling;
pub mod situation;
pub mod taking;
pub mod telling;
