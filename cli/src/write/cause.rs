//! Which part of an action causes a stress.
//!
//! Every measure m is homogeneous of degree one in the stress, so that `m = Σ ∂m/∂s · s_i` over the
//! parts i of the action (Euler). The share of part i is its term over m: the shares add up to one, a
//! part that relieves has a negative one.

use sectile_solver::stress::extreme::Extreme;
use sectile_solver::stress::forces::PART_NAMES;
use sectile_solver::stress::measure::Measure;
use sectile_solver::stress::state::Stress;

/// The part of an action with the largest share in an extreme.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cause {
    /// One of [`PART_NAMES`].
    pub part: &'static str,
    /// Its share; above 1 where other parts relieve.
    pub share: f64,
}

/// The main cause of an extreme; `None` where there is no stress.
#[must_use]
pub fn main(measure: Measure, extreme: &Extreme) -> Option<Cause> {
    let shares = shares(measure, &extreme.stress, &extreme.parts)?;
    let mut best = 0;
    for i in 1..shares.len() {
        if shares[i] > shares[best] {
            best = i;
        }
    }
    Some(Cause {
        part: PART_NAMES[best],
        share: shares[best],
    })
}

/// The shares of all parts, in the order of [`PART_NAMES`]; `None` where there is no stress.
#[must_use]
pub fn shares(measure: Measure, stress: &Stress, parts: &[Stress; 8]) -> Option<[f64; 8]> {
    let (s, t) = (stress.sigma, stress.tau);
    // Derivative of the measure with respect to σ and, over τ, with respect to τ; and its value.
    let (value, by_sigma, by_tau) = match measure {
        Measure::SigmaMax | Measure::SigmaMin => (s, 1.0, 0.0),
        Measure::Tau => (stress.shear(), 0.0, 1.0 / stress.shear()),
        Measure::VonMises | Measure::Utilisation => {
            let m = stress.von_mises();
            (m, s / m, 3.0 / m)
        }
        Measure::Tresca => {
            let m = stress.tresca();
            (m, s / m, 4.0 / m)
        }
        Measure::Principal1 | Measure::Principal3 => {
            let i = usize::from(measure == Measure::Principal3);
            let sign = if i == 0 { 1.0 } else { -1.0 };
            let root = stress.tresca();
            let value = stress.principal()[i];
            (value, 0.5 + sign * 0.5 * s / root, sign * 2.0 / root)
        }
    };
    if value == 0.0 || !value.is_finite() {
        return None;
    }
    Some(parts.map(|p| (by_sigma * p.sigma + by_tau * t.dot(p.tau)) / value))
}

#[cfg(test)]
mod tests {
    use super::*;
    use sectile_mesh::{Point, Vector};

    #[test]
    fn shares_add_up_to_one_and_name_the_main_part() {
        let mut parts = [Stress::default(); 8];
        parts[0].sigma = 20.0;
        parts[3].sigma = -130.0;
        parts[2].tau = Vector::new(3.0, 40.0);
        parts[5].tau = Vector::new(-1.0, 25.0);
        let sum = parts.iter().fold(Stress::default(), |a, p| Stress {
            sigma: a.sigma + p.sigma,
            tau: a.tau + p.tau,
        });
        for &measure in Measure::ALL {
            let Some(value) = measure.of(&sum, Some(235.0)) else {
                continue;
            };
            let shares = shares(measure, &sum, &parts).expect("stress");
            assert!(
                (shares.iter().sum::<f64>() - 1.0).abs() < 1e-12,
                "{measure:?}"
            );
            // Against the difference quotient: the measure grows by share · value per unit of a part.
            for (i, part) in parts.iter().enumerate() {
                let h = 1e-6;
                let more = Stress {
                    sigma: sum.sigma + h * part.sigma,
                    tau: sum.tau + part.tau * h,
                };
                let slope = (measure.of(&more, Some(235.0)).expect("yield") - value) / h;
                assert!(
                    (slope - shares[i] * value).abs() < 1e-4 * value.abs(),
                    "{measure:?} {i}: {slope} {}",
                    shares[i] * value
                );
            }
        }
        let extreme = Extreme {
            value: 0.0,
            at: Point::default(),
            piece: 0,
            stress: sum,
            parts,
        };
        let part = |m| main(m, &extreme).map(|c| c.part);
        assert_eq!(part(Measure::SigmaMin), Some("Mx"));
        assert_eq!(part(Measure::Tau), Some("Vy"));
        assert_eq!(part(Measure::VonMises), Some("Mx"));
    }

    #[test]
    fn no_stress_has_no_cause() {
        for &measure in Measure::ALL {
            assert_eq!(
                shares(measure, &Stress::default(), &[Stress::default(); 8]),
                None
            );
        }
    }
}
