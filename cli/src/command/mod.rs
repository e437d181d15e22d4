//! The commands, one a file.

pub mod new;
pub mod progress;
pub mod respond;
pub mod solve;
mod watch;

use std::io::{IsTerminal, stdout};

use clap::{Parser, Subcommand};

/// Properties of any bar's cross-section, each figure with its bounds.
///
/// Linear-elastic section analysis: check against local codes and by licensed practice.
#[derive(Debug, Parser)]
#[command(name = "sectile", version, about, long_about)]
pub struct Cli {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// The commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Write a commented starter section file.
    New(new::NewArgs),
    /// Properties of sections, with tables, results and figures.
    Solve(solve::SolveArgs),
}

/// How a command ended; the worst of several files counts.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Outcome {
    /// Answered.
    Answered,
    /// Answered, with a finding that the user must see.
    Finding,
    /// Could not answer.
    NoAnswer,
}

impl Outcome {
    /// The process's exit code.
    #[must_use]
    pub fn exit_code(self) -> u8 {
        match self {
            Self::Answered => 0,
            Self::Finding => 1,
            Self::NoAnswer => 2,
        }
    }
}

/// Runs what the command line asks for.
#[must_use]
pub fn run(cli: &Cli) -> Outcome {
    match &cli.command {
        Command::New(args) => new::run(args),
        Command::Solve(args) => solve::run(args),
    }
}

/// Columns of the terminal; 100 where there is none.
fn terminal_width() -> u16 {
    comfy_table::Table::new().width().unwrap_or(100)
}

/// Whether output to `stream` may carry colour and weight.
fn styled(stream: &impl IsTerminal) -> bool {
    stream.is_terminal() && std::env::var_os("NO_COLOR").is_none_or(|v| v.is_empty())
}

/// Whether standard output is a terminal that takes style.
#[must_use]
pub fn standard_output_is_styled() -> bool {
    styled(&stdout())
}
