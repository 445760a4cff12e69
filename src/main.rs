//! The program: hands the arguments to the library and returns its exit code.

#![forbid(unsafe_code)]

use std::process::ExitCode;

#[global_allocator]
static ALLOCATOR: mimalloc::MiMalloc = mimalloc::MiMalloc;

fn main() -> ExitCode {
    tailchase::cli::run(std::env::args_os())
}
