//! The command line: what was typed becomes what the library needs; messages and exit codes. One file a command.

pub mod audit;
pub mod clips;
pub mod demo;
pub mod field_size;
pub mod inspect;
pub mod needs;
pub mod outcome;
pub mod print;
pub mod progress;
pub mod rank;
pub mod scout;
pub mod settings;
pub mod settings_file;
pub mod sheet;
pub mod typed;

pub use outcome::{CliError, Outcome};
pub use settings_file::{RANGES, check_settings, read_settings, settings_toml};

use clap::Parser;
use std::ffi::OsString;
use std::process::ExitCode;
use typed::{Command, Typed};

/// Runs the program with the given arguments, the program's own name first.
pub fn run(arguments: impl IntoIterator<Item = OsString>) -> ExitCode {
    let typed = match Typed::try_parse_from(arguments) {
        Ok(typed) => typed,
        Err(error) => {
            // Help and version come here too; clap knows which stream and which exit code.
            let _ = error.print();
            return u8::try_from(error.exit_code()).map_or(ExitCode::from(outcome::FAILED), ExitCode::from);
        }
    };
    let common = typed.common;
    let done = match typed.command {
        Command::Demo(arguments) => demo::run(&arguments, &common),
        Command::Inspect(arguments) => inspect::run(&arguments, &common),
        Command::Audit(arguments) => audit::run(&arguments, &common),
        Command::Rank(arguments) => rank::run(&arguments, &common),
        Command::Scout(arguments) => scout::run(&arguments, &common),
        Command::Clips(arguments) => clips::run(&arguments),
        Command::Sheet(arguments) => sheet::run(&arguments),
        Command::Settings(arguments) => settings::run(&arguments),
    };
    match done {
        Ok(outcome) => outcome.into(),
        Err(error) => {
            print::note(false, &format!("tailchase: {}", outcome::chain(&error)));
            ExitCode::from(outcome::FAILED)
        }
    }
}
