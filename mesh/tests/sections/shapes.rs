//! Sections that the checks run on.

use std::f64::consts::{PI, TAU};

use sectile_mesh::outline::corner::{Corner, ring_from_corners};
use sectile_mesh::outline::piece::{Outline, Piece, Ring};
use sectile_mesh::outline::place::{Placement, placed};
use sectile_mesh::outline::profile::{Dimensions, Form, profile};
use sectile_mesh::outline::shape::{bar, circle, polygon, tube};
use sectile_mesh::outline::side::{Arc, Circle, Side};
use sectile_mesh::{Point, Vector};

pub fn point(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

pub fn points(list: &[[f64; 2]]) -> Vec<Point> {
    list.iter().map(|p| point(p[0], p[1])).collect()
}

pub fn piece(name: &str, outline: Outline) -> Piece {
    Piece {
        name: name.into(),
        outline,
        material: 0,
    }
}

pub fn of_rings(outer: Ring, holes: Vec<Ring>) -> Outline {
    Outline { outer, holes }
}

pub fn of_points(list: &[[f64; 2]]) -> Outline {
    of_rings(polygon(&points(list)), Vec::new())
}

/// A corner `(x, y, round, via)`.
pub fn corner(x: f64, y: f64, round: Option<f64>, via: Option<[f64; 2]>) -> Corner {
    Corner {
        at: point(x, y),
        round,
        via: via.map(|v| point(v[0], v[1])),
    }
}

pub fn of_corners(corners: &[Corner]) -> Outline {
    of_rings(ring_from_corners(corners).expect("corners"), Vec::new())
}

/// An arc from `from` to `to` about `centre`, `sweep` signed.
pub fn arc(centre: Point, from: Point, to: Point, sweep: f64) -> Side {
    Side {
        from,
        to,
        arc: Some(Arc {
            circle: Circle {
                centre,
                radius: from.distance(centre),
            },
            sweep,
        }),
        corner: 0,
    }
}

pub fn line(from: Point, to: Point) -> Side {
    Side {
        from,
        to,
        arc: None,
        corner: 0,
    }
}

pub fn rectangle(x0: f64, y0: f64, x1: f64, y1: f64) -> Outline {
    of_points(&[[x0, y0], [x1, y0], [x1, y1], [x0, y1]])
}

pub fn moved(outline: &Outline, x: f64, y: f64, turn: f64) -> Outline {
    placed(
        outline,
        &Placement {
            at: point(x, y),
            turn,
            mirror: None,
        },
    )
}

/// The 200 × 80 channel, web 8, flanges 12, sharp corners.
pub fn channel() -> Outline {
    let d = Dimensions {
        h: 200.0,
        b: 80.0,
        tw: 8.0,
        tf: 12.0,
        ..Dimensions::default()
    };
    profile(Form::Channel, &d).expect("fits")
}

/// A rolled I-section 300 × 150 with root radius `r`.
pub fn i_section(r: f64) -> Outline {
    let d = Dimensions {
        h: 300.0,
        b: 150.0,
        tw: 7.1,
        tf: 10.7,
        r,
        ..Dimensions::default()
    };
    profile(Form::I, &d).expect("fits")
}

/// An even number of upright walls of thickness 1 and height 500, each joined to the next above and
/// below in turn: one long folded strip.
pub fn zigzag(walls: usize) -> Outline {
    let h = 500.0;
    let mut left = Vec::new();
    let mut right = Vec::new();
    for k in 0..walls {
        let x = 20.0 * k as f64;
        if k % 2 == 0 {
            left.extend([[x, if k == 0 { 0.0 } else { 1.0 }], [x, h]]);
            right.extend([[x + 1.0, 0.0], [x + 1.0, h - 1.0]]);
        } else {
            left.extend([
                [x + 1.0, h],
                [x + 1.0, if k + 1 == walls { 0.0 } else { 1.0 }],
            ]);
            right.extend([[x, h - 1.0], [x, 0.0]]);
        }
    }
    right.reverse();
    left.extend(right);
    of_points(&left)
}

/// A wall of a comb: a bar of thickness 10 with `walls` teeth of 1 × 500.
pub fn comb(walls: usize) -> Outline {
    let mut list = vec![[0.0, -10.0], [20.0 * walls as f64, -10.0]];
    list.push([20.0 * walls as f64, 0.0]);
    for k in (0..walls).rev() {
        let x = 20.0 * k as f64 + 10.0;
        list.extend([[x + 1.0, 0.0], [x + 1.0, 500.0], [x, 500.0], [x, 0.0]]);
    }
    list.push([0.0, 0.0]);
    of_points(&list)
}

/// A sector of radius 10 and the given angle.
pub fn sector(degrees: f64) -> Outline {
    let c = point(0.0, 0.0);
    let a = point(10.0, 0.0);
    let b = c + Vector::at_angle(degrees.to_radians()) * 10.0;
    of_rings(
        Ring {
            sides: vec![line(c, a), arc(c, a, b, degrees.to_radians()), line(b, c)],
        },
        Vec::new(),
    )
}

/// A shaft of radius 10 with a semicircular-bottomed keyway: a groove circle of radius 3 about a point
/// of the edge.
pub fn grooved_shaft() -> Outline {
    let (r, g) = (10.0_f64, 3.0_f64);
    let c = point(0.0, 0.0);
    let e = point(r, 0.0);
    // Both circles meet at angle ±α seen from the centre.
    let alpha = 2.0 * (0.5 * g / r).asin();
    let (p, q) = (
        c + Vector::at_angle(alpha) * r,
        c + Vector::at_angle(-alpha) * r,
    );
    let (up, low) = ((p - e).angle(), (q - e).angle().rem_euclid(TAU));
    of_rings(
        Ring {
            sides: vec![arc(c, p, q, TAU - 2.0 * alpha), arc(e, q, p, up - low)],
        },
        Vec::new(),
    )
}

/// A lens of two arcs of radius `r` over a chord of 2: cusps at both ends.
pub fn lens(r: f64) -> Outline {
    let h = (r * r - 1.0).sqrt();
    let (a, b) = (point(-1.0, 0.0), point(1.0, 0.0));
    let sweep = 2.0 * (1.0 / r).asin();
    of_rings(
        Ring {
            sides: vec![
                arc(point(0.0, h), a, b, sweep),
                arc(point(0.0, -h), b, a, sweep),
            ],
        },
        Vec::new(),
    )
}

/// A wavy circle of `n` corners.
pub fn wavy(n: usize) -> Outline {
    let list: Vec<Point> = (0..n)
        .map(|k| {
            let a = TAU * k as f64 / n as f64;
            point(0.0, 0.0) + Vector::at_angle(a) * (100.0 * (1.0 + 0.1 * (12.0 * a).sin()))
        })
        .collect();
    of_rings(polygon(&list), Vec::new())
}

/// Sections whose pieces meet at small angles or over thin gaps.
fn delicate() -> Vec<(&'static str, Vec<Piece>, bool)> {
    let one = |o: Outline| vec![piece("one", o)];
    let c = |x: f64, y: f64| corner(x, y, None, None);
    let by = |x: f64, y: f64, via: [f64; 2]| corner(x, y, None, Some(via));
    let wedge = |k: i32| {
        let p = |k: i32, r: f64| {
            let v = Vector::at_angle(f64::from(k) * PI / 40.0) * r;
            [v.x, v.y]
        };
        let r = 10.0 + f64::from(k);
        piece("wedge", of_points(&[[0.0, 0.0], p(k, r), p(k + 1, r)]))
    };
    vec![
        (
            "tee with two fillet seams",
            vec![
                piece("flange", rectangle(-50.0, 0.0, 50.0, 10.0)),
                piece("web", rectangle(-4.0, -100.0, 4.0, 0.0)),
                piece("left", of_points(&[[-4.0, 0.0], [-9.0, 0.0], [-4.0, -5.0]])),
                piece("right", of_points(&[[4.0, 0.0], [4.0, -5.0], [9.0, 0.0]])),
            ],
            false,
        ),
        (
            "bar on a plate with flat fillet seams",
            vec![
                piece("plate", rectangle(-50.0, 0.0, 50.0, 10.0)),
                piece("bar", rectangle(-4.0, 10.0, 4.0, 30.0)),
                piece(
                    "left",
                    of_points(&[[-4.0, 10.0], [-4.0, 13.0], [-15.0, 10.0]]),
                ),
                piece(
                    "right",
                    of_points(&[[4.0, 10.0], [15.0, 10.0], [4.0, 13.0]]),
                ),
            ],
            false,
        ),
        (
            "fan of wedges about one point",
            (0..12).map(wedge).collect(),
            false,
        ),
        (
            "flat segment of a circle",
            one(of_corners(&[c(0.0, 0.0), by(10.0, 0.0, [5.0, -0.4])])),
            false,
        ),
        (
            "hole that is a thin lens",
            one(of_rings(
                rectangle(-5.0, -5.0, 5.0, 5.0).outer,
                vec![lens(10.0).outer],
            )),
            true,
        ),
        (
            "void lens between pieces",
            vec![
                piece(
                    "low",
                    of_corners(&[
                        c(-5.0, -5.0),
                        c(5.0, -5.0),
                        c(5.0, 0.0),
                        c(1.0, 0.0),
                        by(-1.0, 0.0, [0.0, -0.05]),
                        c(-5.0, 0.0),
                    ]),
                ),
                piece(
                    "high",
                    of_corners(&[
                        c(-5.0, 5.0),
                        c(-5.0, 0.0),
                        c(-1.0, 0.0),
                        by(1.0, 0.0, [0.0, 0.02]),
                        c(5.0, 0.0),
                        c(5.0, 5.0),
                    ]),
                ),
            ],
            true,
        ),
        (
            "shaft in a hollow bed",
            vec![
                piece(
                    "bed",
                    of_corners(&[
                        c(-20.0, -10.0),
                        c(20.0, -10.0),
                        c(20.0, -4.0),
                        c(3.0, -4.0),
                        by(-3.0, -4.0, [0.0, -5.0]),
                        c(-20.0, -4.0),
                    ]),
                ),
                piece("shaft", of_rings(circle(point(0.0, 0.0), 10.0), vec![])),
            ],
            true,
        ),
        (
            "sharp block on a large plate",
            vec![
                piece("plate", rectangle(0.0, 0.0, 1000.0, 100.0)),
                piece(
                    "block",
                    of_points(&[[500.0, 100.0], [501.0, 100.0], [500.0, 100.05]]),
                ),
            ],
            false,
        ),
    ]
}

/// Sections of one piece or several that must mesh, by name. The flag says that no angle between
/// sides of one piece is below 60°.
pub fn good() -> Vec<(&'static str, Vec<Piece>, bool)> {
    let one = |o: Outline| vec![piece("one", o)];
    let plate = of_rings(
        rectangle(-50.0, -30.0, 50.0, 30.0).outer,
        vec![circle(point(0.0, 0.0), 20.0)],
    );
    let cap = {
        let d = Dimensions {
            h: 200.0,
            b: 60.0,
            tw: 8.0,
            tf: 11.0,
            r: 10.0,
            ..Dimensions::default()
        };
        moved(
            &profile(Form::Channel, &d).expect("fits"),
            0.0,
            158.0,
            -90.0,
        )
    };
    let two_cell = of_rings(
        rectangle(0.0, 0.0, 200.0, 100.0).outer,
        vec![
            rectangle(5.0, 5.0, 90.0, 95.0).outer,
            rectangle(95.0, 5.0, 195.0, 95.0).outer,
        ],
    );
    let slit = {
        let (r, half) = (10.0, 0.05_f64);
        let c = point(0.0, 0.0);
        let p = c + Vector::at_angle(half) * r;
        let q = c + Vector::at_angle(-half) * r;
        of_rings(
            Ring {
                sides: vec![line(c, p), arc(c, p, q, TAU - 2.0 * half), line(q, c)],
            },
            Vec::new(),
        )
    };
    let half_disc = of_rings(
        Ring {
            sides: vec![
                line(point(-5.0, 0.0), point(5.0, 0.0)),
                arc(point(0.0, 0.0), point(5.0, 0.0), point(-5.0, 0.0), PI),
            ],
        },
        Vec::new(),
    );
    let perforated = of_rings(
        rectangle(0.0, 0.0, 200.0, 100.0).outer,
        (0..32)
            .map(|k| {
                circle(
                    point(
                        12.5 + 25.0 * f64::from(k % 8),
                        12.5 + 25.0 * f64::from(k / 8),
                    ),
                    18.0,
                )
            })
            .collect(),
    );
    let mut list = vec![
        ("channel", one(channel()), true),
        ("I with fillets", one(i_section(15.0)), true),
        ("I, tiny fillets", one(i_section(0.15)), true),
        ("zigzag of 40 walls", one(zigzag(40)), true),
        ("comb of 40 walls", one(comb(40)), true),
        (
            "circle",
            one(of_rings(circle(point(1.0, 2.0), 3.0), vec![])),
            true,
        ),
        ("tube 1:10", one(tube(point(0.0, 0.0), 100.0, 5.0)), true),
        ("tube 1:100", one(tube(point(0.0, 0.0), 100.0, 0.5)), true),
        ("tube 1:1000", one(tube(point(0.0, 0.0), 100.0, 0.05)), true),
        (
            "eccentric tube",
            one(of_rings(
                circle(point(0.0, 0.0), 100.0),
                vec![circle(point(2.9, 0.0), 94.0)],
            )),
            true,
        ),
        ("two-cell box", one(two_cell), true),
        ("perforated plate", one(perforated), true),
        ("grooved shaft", one(grooved_shaft()), true),
        ("sector 300", one(sector(300.0)), true),
        ("sector 90", one(sector(90.0)), true),
        ("sector 5", one(sector(5.0)), false),
        ("slit circle", one(slit), true),
        ("half disc", one(half_disc), true),
        (
            "arc of more than half a turn",
            one(of_corners(&[
                corner(-1.0, 0.0, None, None),
                corner(1.0, 0.0, None, None),
                corner(1.0, 1.0, None, None),
                corner(-1.0, 1.0, None, Some([0.0, 8.0])),
            ])),
            true,
        ),
        (
            "triangle with an angle of 5",
            one(of_points(&[[0.0, 0.0], [10.0, 0.0], [10.0, 0.8748866]])),
            false,
        ),
        ("lens of 60", one(lens(2.0)), true),
        ("lens of 12", one(lens(10.0)), false),
        ("lens of 1", one(lens(100.0)), false),
        (
            "crescent",
            one(of_rings(
                Ring {
                    sides: vec![
                        arc(point(0.0, 0.0), point(10.0, 0.0), point(-10.0, 0.0), PI),
                        arc(
                            point(0.0, -10.0),
                            point(-10.0, 0.0),
                            point(10.0, 0.0),
                            -0.5 * PI,
                        ),
                    ],
                },
                vec![],
            )),
            false,
        ),
        (
            "T-junction of plates",
            vec![
                piece("flange", rectangle(-50.0, 0.0, 50.0, 10.0)),
                piece("web", rectangle(-4.0, -100.0, 4.0, 0.0)),
            ],
            true,
        ),
        (
            "plates side by side, offset",
            vec![
                piece("a", rectangle(0.0, 0.0, 10.0, 100.0)),
                piece("b", rectangle(10.0, 37.0, 20.0, 300.0)),
            ],
            true,
        ),
        (
            "three plates, one point of three",
            vec![
                piece("a", rectangle(0.0, 0.0, 10.0, 20.0)),
                piece("b", rectangle(10.0, 0.0, 20.0, 10.0)),
                piece("c", rectangle(10.0, 10.0, 30.0, 20.0)),
            ],
            true,
        ),
        (
            "cap channel on I",
            vec![piece("I", i_section(15.0)), piece("cap", cap)],
            true,
        ),
        (
            "round bar in a round hole",
            vec![
                piece("plate", plate.clone()),
                piece("bar", of_rings(circle(point(0.0, 0.0), 20.0), vec![])),
            ],
            true,
        ),
        (
            "turned round bar in a round hole",
            vec![
                piece("plate", plate.clone()),
                piece(
                    "bar",
                    moved(
                        &of_rings(circle(point(0.0, 0.0), 20.0), vec![]),
                        0.0,
                        0.0,
                        33.0,
                    ),
                ),
            ],
            true,
        ),
        (
            "tube in tube in plate",
            vec![
                piece("plate", plate.clone()),
                piece("liner", tube(point(0.0, 0.0), 20.0, 0.5)),
                piece("bar", of_rings(circle(point(0.0, 0.0), 19.0), vec![])),
            ],
            true,
        ),
        (
            "two half discs",
            vec![
                piece(
                    "low",
                    moved(
                        &of_rings(
                            Ring {
                                sides: vec![
                                    line(point(-5.0, 0.0), point(5.0, 0.0)),
                                    arc(point(0.0, 0.0), point(5.0, 0.0), point(-5.0, 0.0), PI),
                                ],
                            },
                            vec![],
                        ),
                        0.0,
                        0.0,
                        180.0,
                    ),
                ),
                piece(
                    "high",
                    of_rings(
                        Ring {
                            sides: vec![
                                line(point(-5.0, 0.0), point(5.0, 0.0)),
                                arc(point(0.0, 0.0), point(5.0, 0.0), point(-5.0, 0.0), PI),
                            ],
                        },
                        vec![],
                    ),
                ),
            ],
            true,
        ),
        (
            "separate parts",
            vec![
                piece("a", rectangle(0.0, 0.0, 10.0, 10.0)),
                piece("b", rectangle(20.0, 0.0, 30.0, 10.0)),
            ],
            true,
        ),
        (
            "bar loose in a hole",
            vec![
                piece("plate", plate),
                piece("bar", bar(point(0.0, 0.0), 4.0, 4.0)),
            ],
            true,
        ),
        (
            "wedge let into a wedge",
            vec![
                piece("a", of_points(&[[0.0, 0.0], [100.0, 0.0], [100.0, 10.0]])),
                piece("b", of_points(&[[0.0, 0.0], [100.0, 10.0], [100.0, 30.0]])),
            ],
            false,
        ),
        (
            "tiny block on a large plate",
            vec![
                piece("plate", rectangle(0.0, 0.0, 1000.0, 100.0)),
                piece("block", rectangle(500.0, 100.0, 500.5, 100.5)),
            ],
            true,
        ),
        (
            "plate let into a turned frame",
            vec![
                piece("a", moved(&rectangle(0.0, 0.0, 30.0, 7.0), 3.0, 4.0, 17.0)),
                piece("b", moved(&rectangle(5.0, 7.0, 50.0, 12.0), 3.0, 4.0, 17.0)),
                piece(
                    "c",
                    moved(&rectangle(30.0, -3.0, 44.0, 7.0), 3.0, 4.0, 17.0),
                ),
            ],
            true,
        ),
        (
            "turned cap on a turned I",
            vec![
                piece("I", moved(&i_section(15.0), 1000.0, -77.0, 31.7)),
                piece(
                    "plate",
                    moved(&rectangle(-60.0, 150.0, 60.0, 160.0), 1000.0, -77.0, 31.7),
                ),
            ],
            true,
        ),
    ];
    list.extend(delicate());
    list
}
