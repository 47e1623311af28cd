//! The scheduling engine against an independent check, a slow obvious solver, and changes whose effect is known.

#![expect(clippy::unwrap_used, reason = "in a test, a value that is missing is a failure")]

mod brute;
mod changed;
mod checker;
mod damage;
mod explained;
mod instances;
mod kept;
mod malformed;
mod oracle;
mod port;
mod sailings;
mod synthetic;
