//! The `brinkline` binary.
use std::process::ExitCode;

use brinkline::args::Cli;
use clap::Parser;

fn main() -> ExitCode {
    brinkline::commands::run(&Cli::parse()).into()
}
