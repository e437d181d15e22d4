//! The `sectile` command as the tests of this crate start it: Cargo hands a crate's tests its own
//! binaries only.

use std::process::ExitCode;

use clap::Parser;
use sectile::command::{Cli, run};

fn main() -> ExitCode {
    ExitCode::from(run(&Cli::parse()).exit_code())
}
