//! What a solve that lasts shows on a terminal: level, unknowns, the worst remaining error.

use std::time::{Duration, Instant};

use indicatif::{ProgressBar, ProgressDrawTarget, ProgressStyle};
use sectile_solver::solution::Level;

/// Solves shorter than this show nothing.
const PATIENCE: Duration = Duration::from_millis(400);

/// A line on standard error that follows the adaptive loop.
#[derive(Debug)]
pub struct LevelProgress {
    bar: ProgressBar,
    start: Instant,
    level: usize,
}

impl LevelProgress {
    /// A line if `on`, else nothing at all.
    #[must_use]
    pub fn new(on: bool) -> Self {
        let target = if on {
            ProgressDrawTarget::stderr()
        } else {
            ProgressDrawTarget::hidden()
        };
        let bar = ProgressBar::with_draw_target(None, target);
        if let Ok(style) = ProgressStyle::with_template("{elapsed:>4} {msg}") {
            bar.set_style(style);
        }
        Self {
            bar,
            start: Instant::now(),
            level: 0,
        }
    }

    /// Shows a finished level, once the solve has lasted a while.
    pub fn show(&mut self, level: &Level) {
        self.level += 1;
        if self.start.elapsed() > PATIENCE {
            self.bar.set_message(format!(
                "level {}: {} unknowns, largest remaining error {:.1e} ({})",
                self.level,
                level.unknowns,
                level.worst_error,
                level.worst.key(),
            ));
            self.bar.tick();
        }
    }

    /// Takes the line away.
    pub fn finish(&self) {
        self.bar.finish_and_clear();
    }
}
