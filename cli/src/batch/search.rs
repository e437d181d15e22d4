//! The place at which a quantity meets a target: a bracket that shrinks at every trial.
//!
//! Interpolate, truncate, project (I. F. D. Oliveira, R. H. C. Takahashi, ACM Trans. Math. Softw. 47,
//! 2020; from memory): the secant's estimate, moved towards the middle and kept so near to it that
//! bisection's number of trials, and one more, is never exceeded.

/// A quantity at a trial, with its enclosure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Trial {
    /// Where.
    pub at: f64,
    /// The quantity less its target.
    pub excess: f64,
    /// Whether the enclosure holds the target, so that nothing more can be told.
    pub met: bool,
}

/// How the search ended.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Found {
    /// The last trial's enclosure holds the target.
    Met(Trial),
    /// The place is known as exactly as was asked for: between these two, the nearer first.
    Bracket(Trial, Trial),
    /// Both ends miss the target on the same side.
    SameSide(Trial, Trial),
}

/// The place is sought to this part of itself.
pub const RELATIVE: f64 = 1e-6;

/// Searches between `from` and `to`, which are unlike.
///
/// # Errors
/// The first fault of a trial.
pub fn search<E>(
    from: f64,
    to: f64,
    trial: &mut dyn FnMut(f64) -> Result<Trial, E>,
) -> Result<Found, E> {
    let (mut a, mut b) = (trial(from)?, trial(to)?);
    for end in [a, b] {
        if end.met {
            return Ok(Found::Met(end));
        }
    }
    if (a.excess > 0.0) == (b.excess > 0.0) {
        return Ok(Found::SameSide(a, b));
    }
    if a.at > b.at {
        std::mem::swap(&mut a, &mut b);
    }
    let whole = b.at - a.at;
    // No place is told apart beyond this, even at zero.
    let least = 1e-3 * RELATIVE * whole;
    // Half of the bracket that the number of trials is counted for, and that number.
    let half = 0.5 * least;
    let most = (whole / least).log2().ceil() + 1.0;
    let mut done = 0.0;
    while b.at - a.at > (RELATIVE * a.at.abs().max(b.at.abs())).max(least) {
        let width = b.at - a.at;
        let middle = 0.5 * (a.at + b.at);
        let secant = (b.excess * a.at - a.excess * b.at) / (b.excess - a.excess);
        let towards = if middle < secant { -1.0 } else { 1.0 };
        let shift = 0.2 / whole * width * width;
        let moved = if shift <= (middle - secant).abs() {
            secant + towards * shift
        } else {
            middle
        };
        let reach = (half * f64::exp2(most - done) - 0.5 * width).max(0.0);
        let mut next = if (moved - middle).abs() <= reach {
            moved
        } else {
            middle - towards * reach
        };
        if !(a.at < next && next < b.at) {
            next = middle;
        }
        if !(a.at < next && next < b.at) {
            break;
        }
        let tried = trial(next)?;
        if tried.met {
            return Ok(Found::Met(tried));
        }
        if (tried.excess > 0.0) == (a.excess > 0.0) {
            a = tried;
        } else {
            b = tried;
        }
        done += 1.0;
    }
    Ok(if a.excess.abs() <= b.excess.abs() {
        Found::Bracket(a, b)
    } else {
        Found::Bracket(b, a)
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::convert::Infallible;

    fn run(from: f64, to: f64, f: impl Fn(f64) -> f64) -> (Found, usize) {
        let mut trials = 0;
        let found = search(from, to, &mut |at| {
            trials += 1;
            let excess = f(at);
            Ok::<_, Infallible>(Trial {
                at,
                excess,
                met: excess == 0.0,
            })
        });
        (found.unwrap_or_else(|never| match never {}), trials)
    }

    #[test]
    fn roots_of_many_shapes_are_found_in_few_trials() {
        type Shape = (fn(f64) -> f64, f64, f64, f64);
        let shapes: [Shape; 6] = [
            (|x| x.powi(3) - 343.0, 1.0, 50.0, 7.0),
            (|x| 343.0 - x.powi(3), 50.0, 1.0, 7.0),
            (|x| x.exp() - 2.0, -3.0, 9.0, 2f64.ln()),
            (|x| x.powi(21), -1.0, 1.3, 0.0),
            (|x| 1.0 / x - 1e-4, 1.0, 1e5, 1e4),
            (|x| if x < 3.0 { -1.0 } else { 5.0 }, 0.0, 10.0, 3.0),
        ];
        for (i, (f, from, to, root)) in shapes.into_iter().enumerate() {
            let (found, trials) = run(from, to, f);
            let at = match found {
                Found::Met(trial) | Found::Bracket(trial, _) => trial.at,
                Found::SameSide(..) => f64::NAN,
            };
            let slack = (RELATIVE * root.abs()).max(1e-9 * (to - from).abs());
            assert!((at - root).abs() <= slack, "{i}: {at} after {trials}");
            assert!(trials <= 34, "{i}: {trials} trials");
            if i < 3 {
                assert!(trials <= 14, "{i}: {trials} trials");
            }
        }
    }

    #[test]
    fn without_a_change_of_sign_both_ends_are_told() {
        let (found, trials) = run(1.0, 2.0, |x| x);
        assert!(matches!(found, Found::SameSide(a, b) if a.at == 1.0 && b.at == 2.0));
        assert_eq!(trials, 2);
    }
}
