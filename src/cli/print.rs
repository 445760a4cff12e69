//! Printing: results to stdout, everything about the run to stderr.

use super::CliError;
use std::io::{ErrorKind, Write};

/// Writes a result to stdout. A reader that has seen enough (`| head`) is no failure.
///
/// # Errors
/// When stdout cannot be written for another reason.
pub fn print(text: &str) -> Result<(), CliError> {
    let mut out = std::io::stdout().lock();
    match out.write_all(text.as_bytes()).and_then(|()| out.flush()) {
        Err(source) if source.kind() != ErrorKind::BrokenPipe => Err(CliError::Print { source }),
        _ => Ok(()),
    }
}

/// A line about the run on stderr, unless the user wants quiet.
pub fn note(quiet: bool, line: &str) {
    if !quiet {
        // Nobody reads stderr if this fails.
        let _ = writeln!(std::io::stderr(), "{line}");
    }
}
