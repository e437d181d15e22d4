//! What `solve` prints.

use std::io::{Write, stderr, stdout};
use std::path::Path;

use sectile_solver::solution::Solution;

use super::SolveArgs;
use super::answer::Answer;
use crate::command::{styled, terminal_width};
use crate::write::json::Run;
use crate::write::table;

/// The answer on standard output; seconds by stage on standard error if they are asked for.
pub(super) fn print(args: &SolveArgs, folder: Option<&Path>, answer: &Answer, run: &Run) {
    let section = &answer.read.section;
    let mut text = String::new();
    if args.json {
        text = answer.results(run).line();
        text.push('\n');
    } else if !args.quiet {
        let look = table::Look {
            width: terminal_width(),
            styled: styled(&stdout()),
        };
        text = table::render(
            &section.title,
            &section.units,
            &answer.solution,
            answer.reference(),
            look,
        );
        if let Some(responses) = &answer.responses {
            text.push('\n');
            text.push_str(&table::actions::render(
                &section.units,
                &answer.names(),
                &answer.solution,
                responses,
                look,
            ));
            let (units, names) = (&section.units, answer.names());
            for part in [
                table::materials::render(units, &names, responses, look),
                table::seams::render(units, &names, responses, look),
            ] {
                if !part.is_empty() {
                    text.push('\n');
                    text.push_str(&part);
                }
            }
        }
        if let Some(folder) = folder {
            text.push_str(&format!(
                "Results and figures are in {}\n",
                folder.display()
            ));
        }
    }
    // A reader that closed the pipe has all that it wants.
    let _ = stdout().write_all(text.as_bytes());
    if args.timings {
        let _ = stderr().write_all(timings(&answer.solution, run).as_bytes());
    }
}

fn timings(solution: &Solution, run: &Run) -> String {
    let t = &solution.timings;
    let rows = [
        ("read", run.read),
        ("mesh", t.mesh),
        ("order", t.order),
        ("assemble", t.assemble),
        ("factor", t.factor),
        ("solve", t.solve),
        ("bounds", t.bounds),
        ("actions", run.actions),
        ("write", run.write),
        ("total", run.total),
    ];
    let mut text = String::from("Seconds by stage\n");
    for (name, seconds) in rows {
        text.push_str(&format!("  {name:<10}{seconds:>10.4}\n"));
    }
    if let Some(bytes) = run.peak_memory {
        text.push_str(&format!(
            "  peak memory {:.1} MB\n",
            bytes as f64 / 1_048_576.0
        ));
    }
    text
}

/// The most memory that the process has held, where the system tells.
pub(super) fn peak_memory() -> Option<u64> {
    let status = std::fs::read_to_string("/proc/self/status").ok()?;
    let line = status.lines().find(|l| l.starts_with("VmHWM:"))?;
    let kilobytes: u64 = line.split_whitespace().nth(1)?.parse().ok()?;
    Some(kilobytes * 1024)
}
