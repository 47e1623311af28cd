//! `snugdown man`: the manual page.

use crate::cli::exit::{Exit, Failure};
use crate::cli::screen::show;
use clap::Command;
use clap_mangen::Man;

/// Writes the page of the program, and behind it one section for each command.
///
/// # Errors
/// [`Failure::Write`].
pub fn run(mut command: Command) -> Result<Exit, Failure> {
    command.build();
    let mut page = Vec::new();
    Man::new(command.clone()).render(&mut page)?;
    for one in command.get_subcommands().filter(|one| one.get_name() != "help") {
        render_options(one, &mut page)?;
    }
    show(&String::from_utf8_lossy(&page))?;
    Ok(Exit::Fits)
}

fn render_options(command: &Command, page: &mut Vec<u8>) -> Result<(), Failure> {
    let title = command.get_bin_name().unwrap_or_default().to_uppercase();
    page.extend(format!(".SH {title}\n").bytes());
    let man = Man::new(command.clone());
    man.render_synopsis_section(page)?;
    man.render_description_section(page)?;
    man.render_options_section(page)?;
    for one in command.get_subcommands().filter(|one| one.get_name() != "help") {
        render_options(one, page)?;
    }
    Ok(())
}
