//! The `soakdown` program.
#![deny(unsafe_code)]

mod cli;

fn main() -> std::process::ExitCode {
    cli::start(std::env::args_os()).into()
}
