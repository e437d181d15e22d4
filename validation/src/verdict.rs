//! Compares what a source says with what the solver gives.
//!
//! | status | rule |
//! | --- | --- |
//! | exact | the true value lies in the printed enclosure, `bounded` or `estimated` alike |
//! | numeric | it lies in the enclosure widened by one unit in the source's last trustworthy place |
//! | others | it differs by no more than half a unit in the last printed place and the stated tolerance |
//!
//! The enclosure speaks of the outline that the solver was given. An ellipse reaches it as a chain of
//! arcs between the ellipses scaled by 1 ± ε; J is monotone in the material (E. Trefftz's and
//! Diaz & Weinstein's extremal principles: a larger section admits more stress functions), so it lies
//! within the factors (1 ± ε)⁴, and what has length to the power n is taken to lie within 2 n ε.

use sectile_solver::figure::{Figure, Trust};
use sectile_solver::quantity::Quantity;
use sectile_solver::solution::Solution;

use crate::cases::{Case, Claim, Status, power};

/// Rounding of the coordinates and of the value itself, when both are given to 15 digits.
const INPUT_ROUNDING: f64 = 4e-15;

/// A value compared.
#[derive(Clone, Debug)]
pub struct Row {
    /// The case.
    pub case: String,
    /// What the section is.
    pub title: String,
    /// The value that was compared.
    pub claim: Claim,
    /// Ours.
    pub figure: Figure,
    /// Absolute widening of the comparison that the source's digits and the outline allow.
    pub allowance: f64,
    /// By how much the comparison failed, in the unit of the value; zero or less: it holds.
    pub excess: f64,
    /// Whether the solver reached its tolerance.
    pub reached: bool,
    /// Whether the README's table shows it.
    pub show: bool,
}

impl Row {
    /// Whether the comparison holds.
    #[must_use]
    pub fn holds(&self) -> bool {
        self.excess <= 0.0
    }

    /// Whether the row is as it should be: it holds, or is known not to.
    #[must_use]
    pub fn as_expected(&self) -> bool {
        self.reached && self.holds() == self.claim.known_failure.is_none()
    }

    /// One line for messages.
    #[must_use]
    pub fn line(&self) -> String {
        let c = &self.claim;
        format!(
            "{} {}{} (nu = {}, {}): source {} = {:.15e}, ours {:.15e} in [{:.15e}, {:.15e}] {:?}, \
             allowance {:.2e}, excess {:.2e}{}{}",
            self.case,
            c.quantity.key(),
            c.over.map_or(String::new(), |o| format!(" / {}", o.key())),
            c.nu,
            c.status.word(),
            c.printed,
            c.value,
            self.figure.value,
            self.figure.low,
            self.figure.high,
            self.figure.trust,
            self.allowance,
            self.excess,
            if self.reached {
                ""
            } else {
                ", TOLERANCE NOT REACHED"
            },
            c.known_failure
                .as_ref()
                .map_or(String::new(), |r| format!(", known failure: {r}")),
        )
    }
}

/// Judges one value. `departure`: ε of the module's text.
///
/// # Errors
/// The solver gives no such figure.
pub fn judge(
    case: &Case,
    claim: &Claim,
    solution: &Solution,
    departure: f64,
) -> Result<Row, String> {
    let get = |q: Quantity| {
        solution
            .get(q)
            .ok_or_else(|| format!("the solver gives no `{}`", q.key()))
    };
    let mut figure = get(claim.quantity)?;
    if let Some(over) = claim.over {
        figure = figure.over(get(over)?);
    }
    let mut value = claim.value;
    if claim.quantity == Quantity::PrincipalAngle {
        // An axis has no sense: angles are compared within half a turn.
        value += 180.0 * ((figure.value - value) / 180.0).round();
    }
    let size = size(claim, solution)?;
    let dimension = power(claim.quantity) - claim.over.map_or(0, power);
    let outline =
        (2.0 * departure * f64::from(dimension.max(1)) + INPUT_ROUNDING) * value.abs().max(size);
    let (allowance, excess) = match claim.status {
        Status::Exact => (outline, outside(&figure, value) - outline),
        Status::Numeric => {
            let allowance = 2.0 * claim.half_place + outline;
            (allowance, outside(&figure, value) - allowance)
        }
        Status::Published | Status::Memory | Status::CommonPractice => {
            let allowance = claim.tolerance + claim.half_place;
            (allowance, (figure.value - value).abs() - allowance)
        }
    };
    Ok(Row {
        case: case.id.clone(),
        title: case.title.clone(),
        claim: claim.clone(),
        figure,
        allowance,
        excess,
        reached: solution.reached,
        show: claim.leading && case.show.iter().any(|k| k == claim.quantity.key()),
    })
}

/// How far `value` lies outside the enclosure; negative inside.
fn outside(figure: &Figure, value: f64) -> f64 {
    (figure.low - value).max(value - figure.high)
}

/// For what may be zero by a choice of axes, the size that its rounding is measured by.
fn size(claim: &Claim, solution: &Solution) -> Result<f64, String> {
    use Quantity as Q;
    let area = solution
        .get(Q::Area)
        .ok_or_else(|| "the solver gives no area".to_owned())?
        .value;
    let length = area.sqrt();
    Ok(match claim.quantity {
        Q::CentroidX
        | Q::CentroidY
        | Q::ShearCentreX
        | Q::ShearCentreY
        | Q::FlexureCentreX
        | Q::FlexureCentreY
        | Q::PlasticCentroidX
        | Q::PlasticCentroidY
        | Q::MonosymmetryX
        | Q::MonosymmetryY => length,
        Q::ProductMoment => length.powi(4),
        Q::PrincipalAngle => 180.0,
        _ => 0.0,
    })
}

/// Rows of exact values whose enclosure is more than rounding: how many there are of each trust, and
/// how many of them hold.
#[must_use]
pub fn enclosure_count(rows: &[Row], trust: Trust) -> (usize, usize) {
    let exact = rows
        .iter()
        .filter(|r| r.claim.status == Status::Exact && r.figure.trust == trust);
    exact.fold((0, 0), |(all, held), r| {
        (all + 1, held + usize::from(r.holds()))
    })
}
