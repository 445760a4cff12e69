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

/// Says how many charged pursuits count as no chance, where there are any.
pub fn tell_set_aside(broken_accounts: usize, quiet: bool) {
    if broken_accounts > 0 {
        note(quiet, &format!("{broken_accounts} charged pursuits have no whole account; they are listed but count as no chance"));
    }
}

/// Says how many pursuits are in no side's figures, where there are any.
pub fn tell_without_side(without_side: usize, quiet: bool) {
    if without_side > 0 {
        note(quiet, &format!("{without_side} pursuits of defenders without a side are in no side's figures"));
    }
}
