//! The commands, one a file.

pub mod fit;
pub mod interrupt;
pub mod manners;
pub mod many;
pub mod new;
pub mod progress;
pub mod respond;
pub mod solve;
pub mod trace;
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
    /// Make a section file from a drawing.
    Trace(trace::TraceArgs),
    /// One row a section, or a point of a sweep, on all cores.
    Many(many::ManyArgs),
    /// The dimension at which a property meets a target.
    Fit(fit::FitArgs),
    /// Completions of commands and options for a shell, to standard output.
    Completions(manners::CompletionsArgs),
    /// Manual pages, one a command.
    Manual(manners::ManualArgs),
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
    /// Ended by Ctrl-C before all was answered.
    Interrupted,
}

impl Outcome {
    /// The process's exit code.
    #[must_use]
    pub fn exit_code(self) -> u8 {
        match self {
            Self::Answered => 0,
            Self::Finding => 1,
            Self::NoAnswer => 2,
            Self::Interrupted => interrupt::EXIT_CODE,
        }
    }
}

/// Runs what the command line asks for.
#[must_use]
pub fn run(cli: &Cli) -> Outcome {
    interrupt::heed();
    match &cli.command {
        Command::New(args) => new::run(args),
        Command::Solve(args) => solve::run(args),
        Command::Trace(args) => trace::run(args),
        Command::Many(args) => many::run(args),
        Command::Fit(args) => fit::run(args),
        Command::Completions(args) => manners::completions(args),
        Command::Manual(args) => manners::manual(args),
    }
}

/// A tolerance that a solve can aim at.
fn tolerance(text: &str) -> Result<f64, String> {
    match text.trim().parse::<f64>() {
        Ok(tolerance) if tolerance > 0.0 && tolerance < 1.0 => Ok(tolerance),
        _ => Err("a tolerance lies between 0 and 1, such as 1e-3".into()),
    }
}

/// An order of the elements.
fn order(text: &str) -> Result<usize, String> {
    match text.trim().parse::<usize>() {
        Ok(order) if (1..=6).contains(&order) => Ok(order),
        _ => Err("an order is a whole number, 1 to 6".into()),
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
