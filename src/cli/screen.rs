//! Standard output and standard error: data on the one, messages on the other; how wide the terminal is.

use crate::cli::exit::Failure;
use crate::finding::fault::Finding;
use crate::finding::render::with_source;
use crate::finding::source::SourceText;
use crate::output::escape::visible_lines;
use std::io::{self, ErrorKind, IsTerminal, Write};

/// Columns where nothing says how many there are: plain paper and old terminals.
const USUAL_WIDTH: usize = 80;

/// Writes data to standard output. Whoever closes it early (`head`, `less`) has read enough: that is no error.
///
/// # Errors
/// Any other failure to write.
pub fn show(text: &str) -> Result<(), Failure> {
    let mut output = io::stdout().lock();
    match output.write_all(text.as_bytes()).and_then(|()| output.flush()) {
        Err(error) if error.kind() == ErrorKind::BrokenPipe => Ok(()),
        other => Ok(other?),
    }
}

/// Writes a message to standard error; where even that fails there is nobody left to tell.
pub fn tell(message: &str) {
    let _ = writeln!(io::stderr().lock(), "{}", visible_lines(message).trim_end());
}

/// Writes findings with their source lines to standard error; nothing if there are none.
pub fn tell_findings(findings: &[Finding], sources: &[SourceText]) {
    if !findings.is_empty() {
        tell(&with_source(findings, sources));
    }
}

/// How wide text is to be: as asked, else as COLUMNS says, else as the terminal is, else 80.
#[must_use]
pub fn width(asked: Option<usize>) -> usize {
    let from_environment = || std::env::var("COLUMNS").ok()?.trim().parse().ok();
    let from_terminal = || {
        let is_terminal = io::stdout().is_terminal();
        let (width, _) = terminal_size::terminal_size().filter(|_| is_terminal)?;
        Some(usize::from(width.0))
    };
    asked.or_else(from_environment).or_else(from_terminal).unwrap_or(USUAL_WIDTH)
}
