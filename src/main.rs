//! The command line's entry: everything else is in the library.

use std::process::ExitCode;

fn main() -> ExitCode {
    snugdown::cli::run::run(std::env::args_os())
}
