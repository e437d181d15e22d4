//! Demands on seams: how they are worded, and `seams.csv`.

use sectile_mesh::domain::seam::Seam;
use sectile_solver::seam::demand::{Demand, Size};

use super::CAUTION;
use super::actions::Table;
use super::digits;
use super::json::number;
use super::units::stress_per_force;
use crate::response::{Names, Responses};
use crate::section::{SeamInput, Units};

/// What every reader of demands must know.
pub const LIMITS: &str = "Seams: the shear flow is that of the elastic section and the line load is \
    added to it as a vector; their resultant over the throat is one stress whatever its direction. \
    Effective throats, lengths that count, the strength of the pieces beside a seam, fatigue and \
    fracture are not judged: check by local codes and licensed practice. A needed size assumes that the \
    flow stays what it is: solve again with that size.";

/// What has to be known of intermittent seams beside it.
pub const INTERMITTENT: &str = "Intermittent seams: the section is solved as if they ran along the \
    whole length, and the flow of one pitch goes through one part; between the parts the pieces are \
    apart and the bar is less stiff.";

/// The columns of `seams.csv`.
pub const SEAMS: [&str; 27] = [
    "action",
    "kind",
    "seam",
    "first",
    "second",
    "joint",
    "x",
    "y",
    "flow",
    "direct_x",
    "direct_y",
    "resultant",
    "throat",
    "throat_stress",
    "allowable",
    "utilisation",
    "leg_first",
    "leg_second",
    "leg_first_needed",
    "leg_second_needed",
    "depth_needed",
    "length",
    "pitch",
    "unit_of_flow",
    "unit_of_length",
    "unit_of_stress",
    "remark",
];

/// `fillet` or `groove`.
#[must_use]
pub fn joint(seam: &Seam) -> &'static str {
    if seam.legs.is_some() {
        "fillet"
    } else {
        "groove"
    }
}

/// The unit of force over length, such as `kN/mm`.
#[must_use]
pub fn unit_of_flow(units: &Units) -> String {
    format!("{}/{}", units.force, units.length)
}

/// What a seam needs, such as `leg 5.2`, `legs 5.2, 6.9` or `depth 3.1`, in the unit of length, rounded
/// up to three digits; empty where nothing is allowed.
#[must_use]
pub fn needs(demand: &Demand) -> String {
    let up = |x: f64| digits::up(x, 3);
    match demand.needed {
        Some(Size::Legs([a, b])) if a == b => format!("leg {}", up(a)),
        Some(Size::Legs([a, b])) => format!("legs {}, {}", up(a), up(b)),
        Some(Size::Depth(depth)) => format!("depth {}", up(depth)),
        None => String::new(),
    }
}

/// The legs or the depth that a seam needs, where something is allowed.
#[must_use]
pub fn sizes(demand: &Demand) -> (Option<[f64; 2]>, Option<f64>) {
    match demand.needed {
        Some(Size::Legs(legs)) => (Some(legs), None),
        Some(Size::Depth(depth)) => (None, Some(depth)),
        None => (None, None),
    }
}

/// One row a seam for every action and combination, then one a seam with the action that asks most of
/// it, `kind` envelope. What is to be known of the figures and the caution are the last rows.
#[must_use]
pub fn csv(units: &Units, names: &Names, responses: &Responses) -> String {
    let mut table = Table::new(&SEAMS);
    for response in &responses.list {
        let kind = if response.combination {
            "combination"
        } else {
            "action"
        };
        for ((seam, stated), demand) in names.joints().zip(&response.seams) {
            table.row(row(
                units,
                names,
                &response.name,
                kind,
                seam,
                stated,
                demand,
            ));
        }
    }
    for (k, (seam, stated)) in names.joints().enumerate() {
        let Some(response) = responses.seams.get(k).and_then(|&r| responses.list.get(r)) else {
            continue;
        };
        if let Some(demand) = response.seams.get(k) {
            table.row(row(
                units,
                names,
                &response.name,
                "envelope",
                seam,
                stated,
                demand,
            ));
        }
    }
    for text in remarks(names).into_iter().chain([CAUTION]) {
        let mut last: [String; SEAMS.len()] = Default::default();
        last[0] = "caution".into();
        last[SEAMS.len() - 1] = text.into();
        table.row(last);
    }
    table.text()
}

/// What is to be known of the demands on these seams; nothing without seams.
#[must_use]
pub fn remarks(names: &Names) -> Vec<&'static str> {
    let mut out = Vec::new();
    if names.joints().next().is_some() {
        out.push(LIMITS);
    }
    if names
        .joints()
        .any(|(_, stated)| stated.intermittent.is_some())
    {
        out.push(INTERMITTENT);
    }
    out
}

fn row(
    units: &Units,
    names: &Names,
    action: &str,
    kind: &str,
    seam: &Seam,
    stated: &SeamInput,
    demand: &Demand,
) -> [String; SEAMS.len()] {
    let some = |x: Option<f64>| x.map(number).unwrap_or_default();
    let [first, second] = seam.between.map(|piece| names.piece(piece).to_string());
    let of = |legs: Option<[f64; 2]>, k: usize| some(legs.map(|legs| legs[k]));
    let (legs_needed, depth_needed) = sizes(demand);
    [
        action.into(),
        kind.into(),
        seam.name.clone(),
        first,
        second,
        joint(seam).into(),
        number(seam.at.x),
        number(seam.at.y),
        number(demand.flow),
        number(stated.direct[0]),
        number(stated.direct[1]),
        number(demand.resultant),
        number(seam.throat_length),
        number(demand.stress * stress_per_force(units)),
        some(stated.allowable),
        some(demand.utilisation),
        of(seam.legs, 0),
        of(seam.legs, 1),
        of(legs_needed, 0),
        of(legs_needed, 1),
        some(depth_needed),
        some(stated.intermittent.map(|i| i.length)),
        some(stated.intermittent.map(|i| i.pitch)),
        unit_of_flow(units),
        units.length.into(),
        units.stress.into(),
        String::new(),
    ]
}
