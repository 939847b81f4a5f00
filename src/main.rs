//! The program: hands its arguments to the library's command line and ends with its status.

use std::process::ExitCode;

fn main() -> ExitCode {
    ExitCode::from(slabwright::cli::run(std::env::args_os()))
}
