//! The command `colure`: hands its arguments over and ends with the status it gets back.

use std::process::ExitCode;

fn main() -> ExitCode {
    ExitCode::from(colure::cli::run(std::env::args_os()))
}
