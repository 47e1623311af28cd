//! Forecasts of one tropical cyclone: the model, one reader per kind of product, plausibility.

pub mod forecast;
