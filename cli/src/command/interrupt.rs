//! What Ctrl-C does: nothing half-written is left behind, and the exit code is 130.
//!
//! A command that appends rows ends by itself after the rows it is at; any other is ended at once, its
//! temporary files removed. A second Ctrl-C ends either at once.

use std::sync::atomic::{AtomicBool, Ordering};
use std::sync::{Arc, Once};
use std::thread;
use std::time::Duration;

use signal_hook::consts::TERM_SIGNALS;
use signal_hook::flag::register;

use crate::write::files;

/// 128 and the number of the signal, as shells count it.
pub const EXIT_CODE: u8 = 130;

/// How long a signal may wait to be seen.
const PATIENCE: Duration = Duration::from_millis(20);

static ASKED: AtomicBool = AtomicBool::new(false);
static GENTLE: AtomicBool = AtomicBool::new(false);

/// Takes charge of Ctrl-C and of the signals that ask a process to end.
pub fn heed() {
    static ONCE: Once = Once::new();
    ONCE.call_once(|| {
        // A signal may come at any moment, so it only raises a flag; a thread that may lock and write
        // looks at it.
        let raised = Arc::new(AtomicBool::new(false));
        for &signal in TERM_SIGNALS {
            // Where the system refuses, the signal keeps its usual effect.
            let _ = register(signal, Arc::clone(&raised));
        }
        thread::spawn(move || {
            loop {
                thread::sleep(PATIENCE);
                if raised.swap(false, Ordering::SeqCst) {
                    told();
                }
            }
        });
    });
}

fn told() {
    let again = ASKED.swap(true, Ordering::SeqCst);
    if GENTLE.load(Ordering::SeqCst) && !again {
        return;
    }
    let _none_is_put_in_place = files::abandon();
    std::process::exit(i32::from(EXIT_CODE));
}

/// From here on the command looks by itself at the flag that this returns, and ends as soon as it can.
#[must_use]
pub fn gently() -> &'static AtomicBool {
    GENTLE.store(true, Ordering::SeqCst);
    &ASKED
}
