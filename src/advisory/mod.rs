//! Forecasts of one tropical cyclone: the model, one reader per kind of product, plausibility.

pub mod assume;
pub mod choice;
pub mod codes;
pub mod cursor;
pub mod forecast;
pub mod kind;
pub mod marine;
pub mod marine_body;
pub mod marine_head;
pub mod marine_state;
pub mod notes;
pub mod own_spread;
pub mod plausible;
pub mod read;
pub mod typed;
pub mod typed_table;
pub mod typed_values;
pub mod words;
