//! What a report says.

use sectile_mesh::domain::piece_extent;
use sectile_solver::quantity::Group;
use sectile_solver::stress::extreme::Extreme;
use sectile_solver::stress::measure::Measure;

use super::Input;
use super::document::{Block, Figure, Row, Table};
use crate::digest::sha256;
use crate::response::{Response, Responses};
use crate::write::digits::{self, short};
use crate::write::units::{moment_per_force, pretty, stress_per_force, unit_of_bimoment};
use crate::write::{CAUTION, seams, wording};

/// The blocks of the report, in order.
#[must_use]
pub fn blocks(input: &Input) -> Vec<Block> {
    let mut out = vec![
        Block::Heading(input.section.title.clone()),
        Block::Table(identity(input)),
        Block::Caution(CAUTION.into()),
        Block::Signatures,
        Block::Heading("What is stated".into()),
    ];
    stated(input, &mut out);
    out.push(Block::Heading("Properties".into()));
    out.push(Block::Table(properties(input)));
    out.push(Block::List(
        [
            sectile_solver::figure::Trust::Exact,
            sectile_solver::figure::Trust::Bounded,
            sectile_solver::figure::Trust::Estimated,
        ]
        .map(|t| format!("{}: {}.", wording::trust(t), wording::promise(t)))
        .into(),
    ));
    if let Some(responses) = input.responses {
        answers(input, responses, &mut out);
    }
    out.push(Block::Sheet);
    out.push(Block::Heading("Figures".into()));
    for (file, svg) in input.figures {
        out.push(Block::Figure(Figure {
            file: file.clone(),
            svg: svg.clone(),
            caption: caption(file),
        }));
    }
    if !input.solution.notes.is_empty() {
        out.push(Block::Heading("Notes".into()));
        let notes = input.solution.notes.iter().map(|n| match n.at {
            Some(p) => format!("At ({}, {}): {}", short(p.x, 6), short(p.y, 6), n.text),
            None => n.text.clone(),
        });
        out.push(Block::List(notes.collect()));
    }
    out.push(Block::Heading("Method".into()));
    out.extend(METHOD.map(|text| Block::Text(text.into())));
    out.push(Block::List(SOURCES.map(String::from).into()));
    out.push(Block::Heading("Section file".into()));
    out.push(Block::Verbatim(input.text.into()));
    out
}

const METHOD: [&str; 4] = [
    "The section is the outline as stated, circular sides being true circles. It is divided into \
     triangles; Saint-Venant torsion, flexure, what Poisson's ratio adds to it, and restrained warping \
     are each solved twice, by displacements and by stress functions. The difference of the two energies \
     bounds the error of both, without unknown constants, and says where the triangles must be smaller.",
    "Stresses shown are the mean of the two solutions. Normal stress follows from plane sections and the \
     warping of restrained torsion. Material is linear-elastic; the bar is straight and of one section.",
    "Signs: z towards the reader, M_x = ∫σ y dA and M_y = ∫σ x dA about the centroid, T anticlockwise \
     about the shear centre, B = ∫σ ω dA, tension positive. Shear forces without a line of action act at \
     the shear centre, by the definition that is independent of Poisson's ratio (energy).",
    "Extremes are sought at many points of every triangle and then around the best of them; close to \
     sharp re-entrant corners, where the calculated stress has no limit, none is quoted.",
];

const SOURCES: [&str; 4] = [
    "W. Prager, J. L. Synge, Approximations in elasticity based on the concept of function space, Quart. \
     Appl. Math. 5 (1947) 241–269: the bounds.",
    "E. Trefftz, Über den Schubmittelpunkt in einem durch eine Einzellast gebogenen Balken, ZAMM 15 \
     (1935) 220–225; A. Weinstein, The center of shear and the center of twist, Quart. Appl. Math. 5 \
     (1947) 97–99: the shear centre (from memory).",
    "S. P. Timoshenko, J. N. Goodier, Theory of Elasticity, 3rd ed. 1970, ch. 10 and 11: torsion and \
     flexure (from memory).",
    "V. Z. Vlasov, Thin-Walled Elastic Beams, 1961: bimoment and restrained warping (from memory).",
];

fn identity(input: &Input) -> Table {
    let solution = input.solution;
    let hash = sha256(input.text.as_bytes());
    let row = |a: &str, b: String| Row::Cells(vec![a.into(), b]);
    let u = &input.section.units;
    let reached = if solution.reached {
        "met by every figure"
    } else {
        "not met, see the notes"
    };
    Table {
        caption: String::new(),
        columns: vec!["Item", "Value"],
        rows: vec![
            row("Section file", input.source.into()),
            row("SHA-256 of the section file", hash),
            row(
                "Program",
                format!("{} {}", env!("CARGO_PKG_NAME"), env!("CARGO_PKG_VERSION")),
            ),
            row(
                "Units",
                format!(
                    "length {}, force {}, moment {}, stress {}",
                    u.length, u.force, u.moment, u.stress
                ),
            ),
            row(
                "Mesh",
                format!(
                    "{} triangles of order {}, {} unknowns, {} levels",
                    solution.mesh.triangles.len(),
                    solution.order,
                    solution.levels.last().map_or(0, |l| l.unknowns),
                    solution.levels.len()
                ),
            ),
            row("Tolerance", reached.into()),
        ],
    }
}

fn stated(input: &Input, out: &mut Vec<Block>) {
    let section = input.section;
    let stress = section.units.stress;
    let optional = |x: Option<f64>| x.map_or("–".into(), |x| short(x, 7));
    if !section.assumed_material {
        out.push(Block::Table(Table {
            caption: format!("Materials: moduli and yield in {stress}, density in kg/m³"),
            columns: vec!["Material", "#E", "#ν", "#G", "#Yield", "#Density"],
            rows: section
                .materials
                .iter()
                .map(|m| {
                    Row::Cells(vec![
                        m.name.clone(),
                        short(m.young, 7),
                        short(m.poisson, 7),
                        short(m.shear, 7),
                        optional(m.yield_stress),
                        optional(m.density),
                    ])
                })
                .collect(),
        }));
    }
    out.push(Block::Table(Table {
        caption: format!(
            "Pieces: box and number of sides, lengths in {}; every dimension is in the section file at \
             the end",
            section.units.length
        ),
        columns: vec![
            "Piece", "Material", "#x from", "#x to", "#y from", "#y to", "#Sides", "#Holes",
        ],
        rows: section
            .pieces
            .iter()
            .map(|piece| {
                let ring = &piece.outline.outer;
                let around = piece_extent(piece);
                let material = section
                    .materials
                    .get(piece.material)
                    .filter(|_| !section.assumed_material)
                    .map_or("–".into(), |m| m.name.clone());
                let mut cells = vec![piece.name.clone(), material];
                cells.extend(around.map(|x| short(x, 7)));
                cells.push(ring.sides.len().to_string());
                cells.push(piece.outline.holes.len().to_string());
                Row::Cells(cells)
            })
            .collect(),
    }));
    let length = section.units.length;
    let joints: Vec<Row> = input
        .names
        .joints()
        .map(|(seam, stated)| {
            let [a, b] = seam.between.map(|p| input.names.piece(p).to_owned());
            let size = match seam.legs {
                Some([a, b]) if a == b => format!("leg {}", short(a, 5)),
                Some([a, b]) => format!("legs {}, {}", short(a, 5), short(b, 5)),
                None => format!("depth {}", short(seam.throat_length, 5)),
            };
            Row::Cells(vec![
                seam.name.clone(),
                seams::joint(seam).into(),
                format!("{a} to {b}"),
                size,
                short(seam.throat_length, 5),
                optional(stated.allowable),
            ])
        })
        .collect();
    if !joints.is_empty() {
        out.push(Block::Table(Table {
            caption: format!("Seams: lengths in {length}, allowable throat stress in {stress}"),
            columns: vec!["Seam", "Joint", "Pieces", "Size", "#Throat", "#Allowable"],
            rows: joints,
        }));
    }
}

fn properties(input: &Input) -> Table {
    let units = &input.section.units;
    let mut group: Option<Group> = None;
    let mut rows = Vec::new();
    for (quantity, figure) in &input.solution.properties {
        if group != Some(quantity.group()) {
            group = Some(quantity.group());
            rows.push(Row::Group(wording::heading(quantity.group()).into()));
        }
        let [low, high] = digits::ends(figure);
        rows.push(Row::Cells(vec![
            wording::name(*quantity).into(),
            quantity.symbol().into(),
            digits::minus_sign(&digits::print(figure).line()),
            low,
            high,
            pretty(quantity.dimension(), units),
            wording::trust(figure.trust).into(),
        ]));
    }
    Table {
        caption: match input.reference {
            Some(m) => format!(
                "Every figure with the ends of its enclosure; moduli refer to {}",
                m.name
            ),
            None => "Every figure with the ends of its enclosure".into(),
        },
        columns: vec![
            "Property", "Symbol", "#Value", "#Low", "#High", "Unit", "Trust",
        ],
        rows,
    }
}

fn answers(input: &Input, responses: &Responses, out: &mut Vec<Block>) {
    let units = &input.section.units;
    let moment = moment_per_force(units);
    out.push(Block::Heading("Actions".into()));
    let place = |r: &Response| match r.at {
        Some(p) => format!("({}, {})", short(p.x, 6), short(p.y, 6)),
        None if r.combination => "as its actions".into(),
        None => "shear centre".into(),
    };
    out.push(Block::Table(Table {
        caption: format!(
            "Section forces: N, V in {}, moments and torques in {}, B in {}; T with the torque of the line of \
             action, which is given beside it",
            units.force,
            units.moment,
            unit_of_bimoment(units)
        ),
        columns: vec![
            "Action", "#N", "#V_x", "#V_y", "V through", "#M_x", "#M_y", "#T", "#of the line", "#T_w", "#B",
        ],
        rows: responses
            .list
            .iter()
            .map(|r| {
                let f = &r.forces;
                let number = |x: f64| short(x + 0.0, 6);
                Row::Cells(vec![
                    r.name.clone(),
                    number(f.n),
                    number(f.vx),
                    number(f.vy),
                    place(r),
                    number(f.mx * moment),
                    number(f.my * moment),
                    number(f.t * moment),
                    number(r.offset_torque * moment),
                    number(f.tw * moment),
                    number(f.b * moment),
                ])
            })
            .collect(),
    }));
    let mut rows = Vec::new();
    for response in &responses.list {
        rows.push(Row::Group(summary(response)));
        for (measure, extreme) in &response.extremes.0 {
            rows.push(extreme_row(input, *measure, extreme, None));
        }
        for (material, extremes) in &response.materials {
            let material = input.names.material(*material);
            rows.push(Row::Group(format!("{}, in {material}", response.name)));
            for (measure, extreme) in &extremes.0 {
                rows.push(extreme_row(input, *measure, extreme, None));
            }
        }
    }
    if responses.list.len() > 1 {
        rows.push(Row::Group("Envelope of all".into()));
        for (measure, index, extreme) in &responses.envelope {
            let action = responses.list.get(*index).map(|r| r.name.as_str());
            rows.push(extreme_row(input, *measure, extreme, action));
        }
    }
    out.push(Block::Table(Table {
        caption: format!(
            "Extremes, stresses in {}, at least {} of the wall away from sharp corners",
            units.stress,
            short(responses.exclusion, 3)
        ),
        columns: vec![
            "Measure", "#Value", "At", "Piece", "#σ", "#τ_x", "#τ_y", "Action",
        ],
        rows,
    }));
    readings(input, responses, out);
    demands(input, responses, out);
}

fn summary(response: &Response) -> String {
    let factor = response.load_factor.map_or(String::new(), |f| {
        format!(", first yield at {} times", short(f, 4))
    });
    let plastic = response.plastic_factor.map_or(String::new(), |f| {
        format!(
            ", N, M_x and M_y alone fully plastic at {} times",
            short(f, 4)
        )
    });
    format!(
        "{}{factor}{plastic}; error of the shear stress in energy at most {}",
        response.name,
        digits::percent_up(response.energy_error)
    )
}

fn extreme_row(input: &Input, measure: Measure, extreme: &Extreme, action: Option<&str>) -> Row {
    let factor = stress_per_force(&input.section.units);
    let pure = measure == Measure::Utilisation;
    let value = if pure {
        extreme.value
    } else {
        extreme.value * factor
    };
    let stress = |x: f64| short(x * factor + 0.0, 4);
    Row::Cells(vec![
        wording::measure(measure).into(),
        short(value + 0.0, 5),
        format!("({}, {})", short(extreme.at.x, 6), short(extreme.at.y, 6)),
        input.names.piece(extreme.piece).into(),
        stress(extreme.stress.sigma),
        stress(extreme.stress.tau.x),
        stress(extreme.stress.tau.y),
        action.unwrap_or("").into(),
    ])
}

/// Probes and cuts.
fn readings(input: &Input, responses: &Responses, out: &mut Vec<Block>) {
    let units = &input.section.units;
    let factor = stress_per_force(units);
    let number = |x: f64| short(x + 0.0, 5);
    let mut rows = Vec::new();
    for response in &responses.list {
        for (index, found) in &response.probes {
            let name = input.names.probes.get(*index).map_or("", |p| &p.name);
            for probe in found {
                let s = &probe.stress;
                rows.push(Row::Cells(vec![
                    response.name.clone(),
                    name.into(),
                    input.names.piece(probe.piece).into(),
                    number(s.sigma * factor),
                    number(s.tau.x * factor),
                    number(s.tau.y * factor),
                    number(s.von_mises() * factor),
                ]));
            }
        }
    }
    if !rows.is_empty() {
        out.push(Block::Table(Table {
            caption: format!("Stresses at the probes, {}", units.stress),
            columns: vec![
                "Action",
                "Probe",
                "Piece",
                "#σ",
                "#τ_x",
                "#τ_y",
                "#Von Mises",
            ],
            rows,
        }));
    }
    let mut rows = Vec::new();
    for response in &responses.list {
        for (index, cut) in &response.cuts {
            let name = input.names.cuts.get(*index).map_or("", |c| &c.name);
            rows.push(Row::Cells(vec![
                response.name.clone(),
                name.into(),
                number(cut.shear_flow),
                number(cut.normal_force),
                number(cut.material),
            ]));
        }
    }
    if !rows.is_empty() {
        out.push(Block::Table(Table {
            caption: format!(
                "What crosses the cuts, {}/{}; length in the material in {}",
                units.force, units.length, units.length
            ),
            columns: vec!["Action", "Cut", "#Shear flow", "#Normal force", "#Length"],
            rows,
        }));
    }
}

fn demands(input: &Input, responses: &Responses, out: &mut Vec<Block>) {
    if input.names.seams.is_empty() {
        return;
    }
    let units = &input.section.units;
    let factor = stress_per_force(units);
    let number = |x: f64| short(x + 0.0, 5);
    let mut rows = Vec::new();
    for response in &responses.list {
        for ((seam, _), demand) in input.names.joints().zip(&response.seams) {
            rows.push(Row::Cells(vec![
                response.name.clone(),
                seam.name.clone(),
                number(demand.flow),
                number(demand.resultant),
                number(demand.stress * factor),
                demand.utilisation.map_or("–".into(), |u| digits::up(u, 3)),
                seams::needs(demand),
            ]));
        }
    }
    out.push(Block::Heading("Seams".into()));
    out.push(Block::Table(Table {
        caption: format!(
            "Flow in {} of bar, resultant in {} of weld, throat stress in {}, sizes in {}",
            seams::unit_of_flow(units),
            seams::unit_of_flow(units),
            units.stress,
            units.length
        ),
        columns: vec![
            "Action",
            "Seam",
            "#Flow",
            "#Resultant",
            "#Throat stress",
            "#Utilisation",
            "Needs",
        ],
        rows,
    }));
    out.push(Block::Caution(seams::LIMITS.into()));
}

/// A caption from the name of a figure's file.
fn caption(file: &str) -> String {
    let stem = file.strip_suffix(".svg").unwrap_or(file).replace('-', " ");
    let mut letters = stem.chars();
    letters
        .next()
        .map_or(String::new(), |c| c.to_uppercase().chain(letters).collect())
}
