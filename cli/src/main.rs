//! The `sectile` command.

use std::process::ExitCode;

use clap::Parser;
use sectile::command::{Cli, run};

fn main() -> ExitCode {
    ExitCode::from(run(&Cli::parse()).exit_code())
}
