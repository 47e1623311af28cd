//! The scheduling engine against an independent check, a slow obvious solver, and changes whose effect is known.

mod brute;
mod checker;
mod instances;
mod oracle;
mod port;
