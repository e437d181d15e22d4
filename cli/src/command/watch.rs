//! `solve --watch`: answer again whenever a file is saved.

use std::fs;
use std::io::{Write, stderr};
use std::path::Path;
use std::thread::sleep;
use std::time::Duration;

use super::Outcome;
use super::solve::{SolveArgs, folder, one};
use crate::report;
use crate::write::files;

/// How often the files are looked at.
const PAUSE: Duration = Duration::from_millis(250);

/// Answers every file, and again whenever its content changes; ends when the process is stopped. Results
/// are written whole or not at all, so that a stop leaves nothing half-written.
pub fn run(args: &SolveArgs) -> Outcome {
    let mut seen: Vec<Option<Vec<u8>>> = vec![None; args.files.len()];
    let mut first = true;
    loop {
        for (file, seen) in args.files.iter().zip(&mut seen) {
            // A file that is being replaced may be missing for a moment: it is looked at again.
            let content = match fs::read(file) {
                Ok(content) => content,
                Err(_) if !first => continue,
                Err(_) => Vec::new(),
            };
            if seen.as_ref() == Some(&content) {
                continue;
            }
            answer(args, file, &content);
            *seen = Some(content);
        }
        if first {
            let _ = writeln!(stderr(), "Watching; Ctrl-C ends it.");
            first = false;
        }
        sleep(PAUSE);
    }
}

/// One answer or refusal, told on the terminal and to an open report.
fn answer(args: &SolveArgs, file: &Path, content: &[u8]) {
    let refusal = one(args, file).err();
    if let Some(refusal) = &refusal {
        refusal.print();
    }
    if args.report
        && let Some(folder) = folder(args, file)
        && folder.is_dir()
    {
        let text = refusal.map(|r| r.text());
        let state = report::state(content, text.as_deref());
        if let Err(error) = files::write(&folder.join(report::STATE), &state) {
            let _ = writeln!(stderr(), "{error}");
        }
    }
}
