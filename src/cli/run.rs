//! From arguments to an exit code.

use crate::cli::args::{Args, Command};
use crate::cli::exit::{Exit, Failure};
use crate::cli::screen::{tell, tell_findings};
use crate::cli::tell as telling;
use crate::cli::{
    arrivals, called, calls, changes, check, completions, man, mark, mend, now, order, plan, record, take,
    wind,
};
use clap::{CommandFactory, Parser};
use std::ffi::OsString;
use std::process::ExitCode;

/// Runs a command line; the first argument is the program's own name.
pub fn run(arguments: impl IntoIterator<Item = OsString>) -> ExitCode {
    let args = match Args::try_parse_from(arguments) {
        Ok(args) => args,
        Err(error) => {
            // Help and version come this way too, on standard output and with code 0. A closed pipe is no error.
            let _ = error.print();
            return ExitCode::from(u8::from(error.use_stderr()) * 2);
        }
    };
    match answer(&args.command) {
        Ok(exit) => exit.code(),
        Err(failure) => {
            if let Failure::Input { findings, sources } = &failure {
                tell_findings(findings, sources);
            } else {
                tell(&format!("snugdown: {failure}"));
            }
            failure.code()
        }
    }
}

fn answer(command: &Command) -> Result<Exit, Failure> {
    match command {
        Command::Check(args) => check::run(args),
        Command::Plan(args) => plan::run(args),
        Command::Now(args) => now::run(args),
        Command::Changes(args) => changes::run(args),
        Command::Calls(args) => calls::run(args),
        Command::Called(args) => called::run(args),
        Command::Arrivals(args) => arrivals::run(args),
        Command::Wind(args) => wind::run(args),
        Command::Take(args) => take::run(args),
        Command::Mark(args) => mark::run(args),
        Command::Tell(args) => telling::run(args),
        Command::Order(args) => order::run(args),
        Command::Withdraw(args) => mend::withdraw(args),
        Command::Confirm(args) => mend::confirm(args),
        Command::Record(args) => record::run(args),
        Command::Completions(args) => completions::run(args, Args::command()),
        Command::Man => man::run(Args::command()),
    }
}
