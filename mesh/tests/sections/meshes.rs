//! Every good section meshes, with what a mesh promises.

use sectile_mesh::domain::{Domain, build};
use sectile_mesh::mesh::Mesh;
use sectile_mesh::outline::piece::Piece;
use sectile_mesh::outline::place::{Placement, placed};
use sectile_mesh::quality::least_angle;
use sectile_mesh::triangulate::{MeshError, Sizing, triangulate};

use crate::check::{check_triangulation, exact_area};
use crate::shapes::{comb, good, of_points, piece, point, wavy, zigzag};

/// Least angle asked for, degrees, with room for rounding.
const LEAST: f64 = 25.0 - 0.01;

fn domain_and_mesh(name: &str, pieces: &[Piece]) -> (Domain, Mesh) {
    let domain = build(pieces).unwrap_or_else(|f| panic!("{name}: {f:?}"));
    let mesh = triangulate(&domain, &Sizing::default()).unwrap_or_else(|e| panic!("{name}: {e}"));
    (domain, mesh)
}

#[test]
fn good_sections_mesh_well() {
    for (name, pieces, roomy) in good() {
        let (domain, mesh) = domain_and_mesh(name, &pieces);
        check_triangulation(name, &mesh, &domain, exact_area(&pieces));
        let least = least_angle(&mesh);
        assert!(!roomy || least > LEAST, "{name}: an angle of {least}°");
    }
}

/// Below a sharp corner's own angle nothing falls but where arcs meet: there chords do.
#[test]
fn sharp_corners_keep_their_angle() {
    for (name, least) in [
        ("sector 5", 5.0),
        ("triangle with an angle of 5", 5.0),
        ("wedge let into a wedge", 0.1_f64.atan().to_degrees()),
        ("tee with two fillet seams", 25.0),
        (
            "bar on a plate with flat fillet seams",
            (3.0_f64 / 11.0).atan().to_degrees(),
        ),
        ("fan of wedges about one point", 4.5),
        ("sharp block on a large plate", 0.05_f64.atan().to_degrees()),
        ("lens of 12", 0.7 * 2.0 * 0.1_f64.asin().to_degrees()),
        ("lens of 1", 0.7 * 2.0 * 0.01_f64.asin().to_degrees()),
    ] {
        let pieces = good().into_iter().find(|g| g.0 == name).unwrap().1;
        let (_, mesh) = domain_and_mesh(name, &pieces);
        assert!(
            least_angle(&mesh) > least - 0.01,
            "{name}: {}",
            least_angle(&mesh)
        );
        // The sharp corners stay few among well-shaped triangles.
        let thin = mesh
            .triangles
            .iter()
            .filter(|t| {
                let p = t.map(|v| mesh.vertices[v as usize]);
                (0..3).any(|k| {
                    let (u, v) = (p[(k + 1) % 3] - p[k], p[(k + 2) % 3] - p[k]);
                    u.cross(v).atan2(u.dot(v)).to_degrees() < LEAST
                })
            })
            .count();
        assert!(thin <= 5 * pieces.len(), "{name}: {thin} thin triangles");
    }
}

#[test]
fn thin_walls_and_tiny_fillets_need_few_triangles() {
    for (name, most) in [
        ("channel", 60),
        ("I with fillets", 150),
        ("I, tiny fillets", 600),
        // 40 walls of 1 : 500 in triangles about as large as the wall is thick.
        ("zigzag of 40 walls", 25_000),
        ("comb of 40 walls", 25_000),
        ("tube 1:100", 1000),
        ("tube 1:1000", 8000),
    ] {
        let pieces = good().into_iter().find(|g| g.0 == name).unwrap().1;
        let (_, mesh) = domain_and_mesh(name, &pieces);
        assert!(
            mesh.triangles.len() <= most,
            "{name}: {} triangles",
            mesh.triangles.len()
        );
    }
}

#[test]
fn largest_area_is_kept() {
    for (name, pieces, _) in good() {
        let area = exact_area(&pieces);
        if name.contains("1:1000") || name.contains("40 walls") {
            continue;
        }
        let domain = build(&pieces).unwrap();
        let most = area / 500.0;
        let sizing = Sizing {
            max_area: Some(most),
            ..Sizing::default()
        };
        let mesh = triangulate(&domain, &sizing).unwrap();
        check_triangulation(name, &mesh, &domain, area);
        for t in &mesh.triangles {
            let [a, b, c] = t.map(|v| mesh.vertices[v as usize]);
            let own = 0.5 * (b - a).cross(c - a);
            assert!(own <= most * (1.0 + 1e-9), "{name}: a triangle of {own}");
        }
    }
}

#[test]
fn the_same_input_gives_the_same_mesh_in_any_thread() {
    let names = [
        "I with fillets",
        "cap channel on I",
        "perforated plate",
        "fan of wedges about one point",
    ];
    for name in names {
        let pieces = good().into_iter().find(|g| g.0 == name).unwrap().1;
        let first = domain_and_mesh(name, &pieces);
        // spade hashes with keys that differ from thread to thread.
        let same = std::thread::scope(|scope| {
            let runs: Vec<_> = (0..20)
                .map(|_| scope.spawn(|| domain_and_mesh(name, &pieces) == first))
                .collect();
            runs.into_iter().all(|r| r.join().unwrap())
        });
        assert!(same, "{name}");
    }
}

/// A fingerprint that survives from one process to the next.
#[test]
fn the_same_input_gives_the_same_mesh_in_any_process() {
    const KEY: &str = "SECTILE_MESH_FINGERPRINT";
    let name = "cap channel on I";
    let pieces = good().into_iter().find(|g| g.0 == name).unwrap().1;
    let (_, mesh) = domain_and_mesh(name, &pieces);
    let print = format!("{:?}", mesh)
        .bytes()
        .fold(0xcbf2_9ce4_8422_2325_u64, |h, b| {
            (h ^ u64::from(b)).wrapping_mul(0x0100_0000_01b3)
        });
    if let Ok(expected) = std::env::var(KEY) {
        assert_eq!(expected, print.to_string());
        return;
    }
    let this = std::env::current_exe().unwrap();
    for _ in 0..8 {
        let out = std::process::Command::new(&this)
            .args([
                "--exact",
                "meshes::the_same_input_gives_the_same_mesh_in_any_process",
            ])
            .env(KEY, print.to_string())
            .output()
            .unwrap();
        assert!(
            out.status.success(),
            "{}",
            String::from_utf8_lossy(&out.stdout)
        );
        assert!(String::from_utf8_lossy(&out.stdout).contains("1 passed"));
    }
}

#[test]
fn far_from_the_origin_and_at_any_size() {
    for (name, pieces, roomy) in good() {
        if name.contains("40 walls") || name.contains("1:1000") {
            continue;
        }
        let scaled = |s: f64| -> Vec<Piece> {
            pieces
                .iter()
                .map(|p| {
                    let mut p = p.clone();
                    for ring in std::iter::once(&mut p.outline.outer).chain(&mut p.outline.holes) {
                        for side in &mut ring.sides {
                            side.from = point(side.from.x * s, side.from.y * s);
                            side.to = point(side.to.x * s, side.to.y * s);
                            if let Some(arc) = &mut side.arc {
                                let c = arc.circle.centre;
                                arc.circle.centre = point(c.x * s, c.y * s);
                                arc.circle.radius *= s;
                            }
                        }
                    }
                    p
                })
                .collect()
        };
        let moved = |x: f64, y: f64| -> Vec<Piece> {
            pieces
                .iter()
                .map(|p| {
                    let placement = Placement {
                        at: point(x, y),
                        turn: 0.0,
                        mirror: None,
                    };
                    piece(&p.name, placed(&p.outline, &placement))
                })
                .collect()
        };
        for other in [scaled(1e-6), scaled(1e6), moved(1e6, 0.0), moved(-3e5, 1e6)] {
            let (domain, mesh) = domain_and_mesh(name, &other);
            check_triangulation(name, &mesh, &domain, exact_area(&other));
            let least = least_angle(&mesh);
            assert!(!roomy || least > LEAST, "{name}: an angle of {least}°");
        }
    }
}

#[test]
fn many_corners_are_no_trouble() {
    // Most corners on one line: a rectangle with a finely divided side.
    let n = 10_000;
    let mut list = vec![[0.0, 0.0], [100.0, 0.0], [100.0, 100.0]];
    list.extend((0..n).map(|k| [0.0, 100.0 - 100.0 * f64::from(k) / f64::from(n)]));
    for outline in [wavy(10_000), of_points(&list)] {
        let pieces = [piece("many", outline)];
        let (domain, mesh) = domain_and_mesh("many", &pieces);
        check_triangulation("many", &mesh, &domain, exact_area(&pieces));
        assert!(least_angle(&mesh) > LEAST);
    }
}

#[test]
fn the_limit_of_vertices_is_kept_and_named() {
    for outline in [zigzag(40), comb(40)] {
        let domain = build(&[piece("walls", outline)]).unwrap();
        let sizing = Sizing {
            max_area: None,
            max_vertices: 100,
        };
        assert_eq!(
            triangulate(&domain, &sizing),
            Err(MeshError::TooManyVertices {
                piece: "walls".into(),
                limit: 100
            })
        );
    }
}
