//! Work shared among all cores, its results taken in order.

use std::collections::BTreeMap;
use std::num::NonZero;
use std::ops::Range;
use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};
use std::sync::mpsc::{Sender, channel};
use std::thread;

/// Calls `work` for each number of `range` on `threads` threads and `take` on this one with the results
/// in the order of the numbers, until `take` says no or `stop` is set; what has been begun by then is
/// still finished and taken.
///
/// Numbers are handed out one by one, so that what is done is always nearly all of a beginning. Each
/// call has its own thread and uses no other unless there are fewer numbers than threads: for sections
/// that take milliseconds this is faster than sharing out the loops inside of each.
pub fn in_order<T: Send>(
    range: Range<usize>,
    threads: NonZero<usize>,
    stop: &AtomicBool,
    work: &(dyn Fn(usize) -> T + Sync),
    take: &mut dyn FnMut(usize, T) -> bool,
) {
    let workers = threads.get().min(range.len());
    if workers == 0 {
        return;
    }
    let inside = threads.get() / workers;
    let next = AtomicUsize::new(range.start);
    let enough = AtomicBool::new(false);
    let (sender, receiver) = channel();
    let share = |sender: &Sender<(usize, T)>| {
        while !stop.load(Ordering::Relaxed) && !enough.load(Ordering::Relaxed) {
            let i = next.fetch_add(1, Ordering::Relaxed);
            if i >= range.end || sender.send((i, work(i))).is_err() {
                break;
            }
        }
    };
    thread::scope(|scope| {
        for sender in vec![sender.clone(); workers] {
            let share = &share;
            scope.spawn(move || {
                match rayon::ThreadPoolBuilder::new().num_threads(inside).build() {
                    Ok(pool) => pool.install(|| share(&sender)),
                    // The system gives no more threads: the common pool serves.
                    Err(_) => share(&sender),
                }
            });
        }
        drop(sender);
        let mut waiting = BTreeMap::new();
        let mut due = range.start;
        for (i, result) in receiver {
            waiting.insert(i, result);
            while let Some(result) = waiting.remove(&due) {
                if !enough.load(Ordering::Relaxed) && !take(due, result) {
                    enough.store(true, Ordering::Relaxed);
                }
                due += 1;
            }
        }
    });
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::time::Duration;

    #[test]
    fn results_come_in_order_whatever_the_order_in_which_they_finish() {
        for threads in [1, 2, 7] {
            let mut taken = Vec::new();
            in_order(
                3..20,
                NonZero::new(threads).unwrap_or(NonZero::<usize>::MIN),
                &AtomicBool::new(false),
                &|i| {
                    thread::sleep(Duration::from_millis((20 - i as u64) / 4));
                    i * i
                },
                &mut |i, square| {
                    taken.push((i, square));
                    true
                },
            );
            assert_eq!(taken, (3..20).map(|i| (i, i * i)).collect::<Vec<_>>());
        }
    }

    #[test]
    fn what_was_begun_when_told_to_stop_is_taken_without_a_gap() {
        let stop = AtomicBool::new(false);
        let mut taken = Vec::new();
        in_order(
            0..1000,
            NonZero::<usize>::MIN,
            &stop,
            &|i| {
                if i == 17 {
                    stop.store(true, Ordering::Relaxed);
                }
                i
            },
            &mut |i, _| {
                taken.push(i);
                true
            },
        );
        assert_eq!(taken, (0..18).collect::<Vec<_>>());
        let mut taken = 0;
        in_order(
            0..1000,
            NonZero::<usize>::MIN,
            &AtomicBool::new(false),
            &|i| i,
            &mut |i, _| {
                taken += 1;
                i < 5
            },
        );
        assert_eq!(taken, 6);
    }
}
