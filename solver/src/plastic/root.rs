//! Zeros of continuous functions of one variable.

/// A zero of `f` between `a` and `b`, to rounding. Where the signs at the ends do not differ, the end
/// of smaller magnitude.
///
/// Inverse quadratic interpolation wherever three points promise it converges, else bisection: T. R.
/// Chandrupatla, A new hybrid quadratic/bisection algorithm for finding the zero of a nonlinear
/// function without using derivatives, Adv. Eng. Softw. 28, 1997 (from memory).
pub fn zero(mut f: impl FnMut(f64) -> f64, a: f64, b: f64) -> f64 {
    let absolute = f64::EPSILON * (b - a).abs();
    let (mut a, mut b) = (a, b);
    let (mut fa, mut fb) = (f(a), f(b));
    if fa * fb > 0.0 || fa == 0.0 || fb == 0.0 {
        return if fa.abs() <= fb.abs() { a } else { b };
    }
    let mut t = 0.5;
    for _ in 0..MOST_STEPS {
        let x = a + t * (b - a);
        let fx = f(x);
        // [a, b] stays a bracket with a the newest point; c is the one that left it.
        let (c, fc);
        if (fx > 0.0) == (fa > 0.0) {
            (c, fc) = (a, fa);
        } else {
            (c, fc) = (b, fb);
            (b, fb) = (a, fa);
        }
        (a, fa) = (x, fx);
        let (best, least) = if fa.abs() < fb.abs() {
            (a, fa)
        } else {
            (b, fb)
        };
        let share = (2.0 * f64::EPSILON * best.abs() + absolute) / (b - a).abs();
        if share > 0.5 || least == 0.0 {
            return best;
        }
        let xi = (a - b) / (c - b);
        let phi = (fa - fb) / (fc - fb);
        t = if phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi {
            let direct = fa / (fb - fa) * fc / (fb - fc);
            direct + (c - a) / (b - a) * fa / (fc - fa) * fb / (fc - fb)
        } else {
            0.5
        };
        t = t.clamp(share, 1.0 - share);
    }
    a
}

/// More than bisection needs to go through all of double precision's exponents of interest.
const MOST_STEPS: usize = 200;

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn zeros_of_smooth_kinked_and_flat_functions() {
        assert!((zero(|x| x * x - 2.0, 0.0, 2.0) - 2.0_f64.sqrt()).abs() < 1e-15);
        assert!((zero(|x| 2.0 - x * x, 2.0, 0.0) - 2.0_f64.sqrt()).abs() < 1e-15);
        assert!((zero(|x: f64| x.cos() - x, 0.0, 1.0) - 0.739_085_133_215_160_6).abs() < 1e-15);
        let kinked = |x: f64| if x < 0.3 { x - 0.3 } else { 1e6 * (x - 0.3) };
        assert!((zero(kinked, -1.0, 1.0) - 0.3).abs() < 1e-15);
        let flat = |x: f64| (x - 0.5).powi(9);
        assert!((zero(flat, 0.0, 2.0) - 0.5).abs() < 1e-2);
        assert_eq!(zero(|x| x, 0.0, 1.0), 0.0);
        // No sign change: the better end.
        assert_eq!(zero(|x| x + 1.0, 0.0, 1.0), 0.0);
    }

    #[test]
    fn smooth_functions_take_few_evaluations() {
        let mut count = 0;
        let f = |x: f64| {
            count += 1;
            x * x * x - 2.0 * x - 5.0
        };
        // Wallis' equation, root 2.0945514815423265 (from memory).
        assert!((zero(f, 2.0, 3.0) - 2.094_551_481_542_326_5).abs() < 1e-15);
        assert!(count < 14, "{count}");
    }
}
