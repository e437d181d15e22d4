//! `completions` and `manual`: what shells and manual readers want to know of the commands.

use std::io::{Write, stderr, stdout};
use std::path::{Path, PathBuf};

use clap::{Args, CommandFactory};
use clap_complete::Shell;

use super::{Cli, Outcome};
use crate::write::files;

/// Options of `completions`.
#[derive(Args, Clone, Debug)]
#[command(after_help = "Examples:\n  \
    sectile completions bash > ~/.local/share/bash-completion/completions/sectile\n  \
    sectile completions fish > ~/.config/fish/completions/sectile.fish")]
pub struct CompletionsArgs {
    /// The shell.
    #[arg(value_name = "SHELL")]
    pub shell: Shell,
}

/// Options of `manual`.
#[derive(Args, Clone, Debug)]
#[command(after_help = "Examples:\n  \
    sectile manual --out ~/.local/share/man/man1     then `man sectile-solve` shows the page of solve")]
pub struct ManualArgs {
    /// The folder to write the pages to; pages of the same names are replaced.
    #[arg(long, value_name = "DIR")]
    pub out: PathBuf,
}

/// Runs `completions`.
#[must_use]
pub fn completions(args: &CompletionsArgs) -> Outcome {
    let mut script = Vec::new();
    clap_complete::generate(args.shell, &mut Cli::command(), "sectile", &mut script);
    // A reader that closed the pipe has all that it wants.
    let _ = stdout().write_all(&script);
    Outcome::Answered
}

/// Runs `manual`.
#[must_use]
pub fn manual(args: &ManualArgs) -> Outcome {
    match write_pages(&args.out) {
        Ok(()) => Outcome::Answered,
        Err(message) => {
            let _ = writeln!(stderr(), "{message}");
            Outcome::NoAnswer
        }
    }
}

fn write_pages(folder: &Path) -> Result<(), String> {
    let refused = |error: &dyn std::fmt::Display| {
        format!("{} could not be written: {error}", folder.display())
    };
    std::fs::create_dir_all(folder).map_err(|error| refused(&error))?;
    let mut whole = Cli::command().disable_help_subcommand(true);
    whole.build();
    let pages = whole.get_subcommands().chain([&whole]).cloned();
    for page in pages {
        let page = clap_mangen::Man::new(page);
        let mut text = Vec::new();
        page.render(&mut text).map_err(|error| refused(&error))?;
        let text = String::from_utf8(text).map_err(|error| refused(&error))?;
        files::write(&folder.join(page.get_filename()), &text).map_err(|e| e.to_string())?;
    }
    Ok(())
}
