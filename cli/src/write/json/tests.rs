#![allow(clippy::unwrap_used)]
use super::*;
use sectile_mesh::Point;
use sectile_solver::figure::{Figure, Trust};
use sectile_solver::quantity::Quantity;
use sectile_solver::solution::{Level, Note as Finding};

pub(crate) fn sample_units() -> Units {
    Units {
        length: "mm",
        force: "kN",
        moment: "kN m".into(),
        stress: "MPa",
    }
}

/// A solution of a rectangle, its numbers replaced by awkward ones.
pub(crate) fn sample_solution() -> Solution {
    let awkward = [
        (0.1 + 0.2, 1e-3, Trust::Bounded),
        (-0.0, 0.0, Trust::Exact),
        (115_811.016_512_345_6, 0.5, Trust::Bounded),
        (1.234_567_890_123e-17, 1e-6, Trust::Estimated),
        (6.022e23, 1e18, Trust::Estimated),
        (-1.0 / 3.0, 1e-12, Trust::Exact),
    ];
    let mut solution = crate::figure::samples::solved(&crate::figure::samples::rectangle(2.0, 1.0));
    solution.properties = Quantity::ALL
        .iter()
        .enumerate()
        .map(|(i, &q)| {
            let (value, half, trust) = awkward[i % awkward.len()];
            (q, Figure::around(value, half, trust))
        })
        .collect();
    solution.levels = vec![
        Level {
            triangles: 1,
            unknowns: 10,
            worst: Quantity::TorsionConstant,
            worst_error: 1e-2,
        },
        Level {
            triangles: 1,
            unknowns: 1234,
            worst: Quantity::WarpingConstant,
            worst_error: 7e-5,
        },
    ];
    solution.notes = vec![Finding {
        kind: "sharp-corner",
        text: "The corner at (8, -0) is sharp and re-entrant.".into(),
        at: Some(Point::new(8.0, -0.0)),
    }];
    solution
}

fn results() -> Results {
    let run = Run {
        read: 0.001,
        actions: 0.25,
        write: 0.002,
        total: 0.05,
        peak_memory: Some(12_345_678),
    };
    Results::new(
        "Odd \"one\"",
        "odd.section.toml",
        &sample_units(),
        &sample_solution(),
        &run,
    )
}

#[test]
fn contract_keys_are_there() {
    let value: serde_json::Value = serde_json::from_str(&results().line()).unwrap();
    for key in [
        "title",
        "source",
        "program",
        "caution",
        "units",
        "properties",
        "actions",
        "mesh",
        "timings",
        "notes",
    ] {
        assert!(value.get(key).is_some(), "{key}");
    }
    for key in ["value", "low", "high", "trust", "unit", "symbol"] {
        assert!(
            value["properties"]["torsion_constant"].get(key).is_some(),
            "{key}"
        );
    }
    for key in [
        "read",
        "mesh",
        "order",
        "assemble",
        "factor",
        "solve",
        "bounds",
        "write",
        "total",
        "peak_memory",
    ] {
        assert!(value["timings"][key].is_number(), "{key}");
    }
    assert_eq!(value["mesh"]["unknowns"], 1234);
    assert_eq!(value["actions"], serde_json::json!([]));
    assert_eq!(value["properties"]["second_moment_x"]["unit"], "mm4");
    assert_eq!(value["notes"][0]["kind"], "sharp-corner");
    assert!(value["program"].as_str().unwrap().starts_with("sectile "));
}

#[test]
fn numbers_read_back_to_the_last_bit() {
    // By the standard library's reader: that of serde_json is off by a bit without a feature of its own.
    let text = results().line();
    for (quantity, figure) in &sample_solution().properties {
        let start = text.find(&format!("\"{}\":", quantity.key())).unwrap();
        let object = &text[start..start + text[start..].find('}').unwrap()];
        for (key, expected) in [
            ("value", figure.value),
            ("low", figure.low),
            ("high", figure.high),
        ] {
            let name = format!("\"{key}\":");
            let rest = &object[object.find(&name).unwrap() + name.len()..];
            let number = rest.split(',').next().unwrap();
            assert_eq!(number.parse::<f64>().unwrap(), expected, "{number}");
        }
    }
}

#[test]
fn minus_zero_is_zero_and_no_end_is_null() {
    let text = results().pretty();
    assert!(
        !text.contains("-0.0,") && !text.contains("-0.0\n"),
        "{text}"
    );
    let mut solution = sample_solution();
    solution.properties[0].1.high = f64::INFINITY;
    let text = Results::new("t", "s", &sample_units(), &solution, &Run::default()).line();
    let value: serde_json::Value = serde_json::from_str(&text).unwrap();
    assert!(value["properties"]["area"]["high"].is_null());
    assert!(value["timings"].get("peak_memory").is_none());
}

#[test]
fn properties_keep_reading_order() {
    let text = results().line();
    let mut last = 0;
    for quantity in Quantity::ALL {
        let at = text.find(&format!("\"{}\":", quantity.key())).unwrap();
        assert!(at > last, "{}", quantity.key());
        last = at;
    }
}

#[test]
fn plain_numbers() {
    assert_eq!(number(-0.0), "0");
    assert_eq!(number(0.1 + 0.2), "0.30000000000000004");
    assert_eq!(number(1e-17), "1e-17");
    assert_eq!(number(6.022e23), "6.022e23");
    assert_eq!(number(f64::INFINITY), "");
}
