//! Writes the advisories of the invented storms of demo-port again from their tables in `storms.rs`.
//!
//! `cargo run --example demo_storms`; a test compares what it writes with what is in the folder.
#![expect(clippy::print_stderr, reason = "a program for a terminal")]

mod bulletin;
mod storms;

use std::path::Path;
use std::process::ExitCode;

fn main() -> ExitCode {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-port");
    for (name, text) in storms::STORMS.iter().flat_map(bulletin::texts) {
        if let Err(error) = std::fs::write(root.join(&name), text) {
            eprintln!("{name}: {error}");
            return ExitCode::FAILURE;
        }
    }
    ExitCode::SUCCESS
}
