//! The program that people start.

use std::process::ExitCode;

fn main() -> ExitCode {
    elbowroom::cli::run()
}
