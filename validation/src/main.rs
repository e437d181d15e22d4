//! Runs every reference case and prints the comparison, or puts it into a README.

use std::process::ExitCode;

use sectile_validation::{cases, readme, solve, table};

const USAGE: &str = "usage: sectile-validation [--tolerance T] [--all] [--readme PATH]

Compares every reference case with its sources and prints the table as Markdown.
  --tolerance T   half-width of the bounds over the value (default 1e-4)
  --all           every value, not only those that the README shows
  --readme PATH   put the table between its two marker comments in PATH instead";

struct Options {
    tolerance: f64,
    all: bool,
    readme: Option<String>,
}

fn options() -> Result<Options, String> {
    let mut options = Options {
        tolerance: 1e-4,
        all: false,
        readme: None,
    };
    let mut args = std::env::args().skip(1);
    while let Some(arg) = args.next() {
        let mut value = || args.next().ok_or(format!("{arg} needs a value\n{USAGE}"));
        match arg.as_str() {
            "--tolerance" => {
                let text = value()?;
                options.tolerance = text
                    .parse()
                    .map_err(|_| format!("`{text}` is not a number\n{USAGE}"))?;
            }
            "--readme" => options.readme = Some(value()?),
            "--all" => options.all = true,
            "--help" | "-h" => {
                println!("{USAGE}");
                std::process::exit(0);
            }
            other => return Err(format!("unknown argument `{other}`\n{USAGE}")),
        }
    }
    Ok(options)
}

fn run() -> Result<bool, String> {
    let options = options()?;
    let cases = cases::all().map_err(|e| e.to_string())?;
    let rows =
        solve::all_rows(&cases, &solve::settings(options.tolerance)).map_err(|e| e.to_string())?;
    let text = format!(
        "{}\n\n{}",
        table::summary(&rows, options.tolerance),
        table::markdown(&rows, |r| options.all || r.show)
    );
    match &options.readme {
        None => print!("{text}"),
        Some(path) => {
            let old = std::fs::read_to_string(path).map_err(|e| format!("{path}: {e}"))?;
            let new = readme::replace(&old, &text).ok_or_else(|| {
                format!(
                    "{path}: put the lines `{}` and `{}` where the table belongs",
                    readme::START,
                    readme::END
                )
            })?;
            if new != old {
                std::fs::write(path, new).map_err(|e| format!("{path}: {e}"))?;
            }
        }
    }
    let mut fine = true;
    for row in rows.iter().filter(|r| !r.as_expected()) {
        fine = false;
        eprintln!("not as expected: {}", row.line());
    }
    Ok(fine)
}

fn main() -> ExitCode {
    match run() {
        Ok(true) => ExitCode::SUCCESS,
        Ok(false) => ExitCode::from(1),
        Err(message) => {
            eprintln!("{message}");
            ExitCode::from(2)
        }
    }
}
