//! Forecasts of one tropical cyclone: the model, one reader per kind of product, plausibility.

pub mod cursor;
pub mod forecast;
pub mod marine;
pub mod marine_body;
pub mod marine_head;
pub mod marine_state;
pub mod notes;
pub mod words;
