//! The edge's loops and their heights.
//!
//! The outer edge lies at height 0. A hole's edge is level, with a flat top over the hole, as high as
//! the shortest way from the outer edge across the material; a way through another hole costs nothing
//! there. Ways may be measured straight, whatever they cross: one that leaves the material meets a loop
//! from which it is shorter.

use sectile_mesh::domain::Domain;

use super::face::Face;
use crate::property::boundary::directed_edges;

/// The edge of the material.
#[derive(Clone, Debug)]
pub struct Edge {
    /// The sides.
    pub faces: Vec<Face>,
    /// Height of each loop; the sides of a loop hang together by their end points.
    pub heights: Vec<f64>,
    /// `Σ height · area` of the holes.
    pub tops: f64,
}

impl Edge {
    /// The edge of a domain.
    #[must_use]
    pub fn new(domain: &Domain) -> Self {
        let mut faces: Vec<Face> = directed_edges(domain)
            .map(|e| Face::new(e.side, [e.from, e.to]))
            .collect();
        let count = gather(&mut faces, domain.points.len());
        let extents: Vec<[f64; 4]> = faces.iter().map(|f| f.side.extent()).collect();
        let leftmost = (0..faces.len()).min_by(|&i, &j| extents[i][0].total_cmp(&extents[j][0]));
        let outer = leftmost.map_or(0, |i| faces[i].owner as usize);

        let mut own: Vec<Vec<usize>> = vec![Vec::new(); count];
        for (i, face) in faces.iter().enumerate() {
            own[face.owner as usize].push(i);
        }
        // Dijkstra's search over the loops.
        let mut heights = vec![f64::INFINITY; count];
        let mut settled = vec![false; count];
        if let Some(height) = heights.get_mut(outer) {
            *height = 0.0;
        }
        while let Some(k) = (0..count)
            .filter(|&k| !settled[k])
            .min_by(|&i, &j| heights[i].total_cmp(&heights[j]))
        {
            settled[k] = true;
            for j in (0..count).filter(|&j| !settled[j]) {
                let mut least = heights[j] - heights[k];
                for (&a, &b) in own[k]
                    .iter()
                    .flat_map(|a| own[j].iter().map(move |b| (a, b)))
                {
                    if apart(&extents[a], &extents[b]) < least {
                        least = least.min(faces[a].gap(&faces[b]));
                    }
                }
                heights[j] = heights[k] + least;
            }
        }
        let tops = (0..count)
            .filter(|&k| k != outer)
            .map(|k| heights[k] * enclosed(&faces, &own[k]))
            .sum();
        Self {
            faces,
            heights,
            tops,
        }
    }

    /// Height of the loop that a side belongs to.
    #[must_use]
    pub fn height(&self, face: &Face) -> f64 {
        self.heights[face.owner as usize]
    }
}

/// Numbers the loops, sides that share end points together, and returns how many there are.
fn gather(faces: &mut [Face], points: usize) -> usize {
    let mut parent: Vec<usize> = (0..points).collect();
    fn root(parent: &mut [usize], mut i: usize) -> usize {
        while parent[i] != i {
            parent[i] = parent[parent[i]];
            i = parent[i];
        }
        i
    }
    for face in faces.iter() {
        let [a, b] = face.ends.map(|p| root(&mut parent, p as usize));
        parent[a.max(b)] = a.min(b);
    }
    let mut number = vec![None; points];
    let mut count = 0;
    for face in faces.iter_mut() {
        let root = root(&mut parent, face.ends[0] as usize);
        face.owner = *number[root].get_or_insert_with(|| {
            count += 1;
            count as u32 - 1
        });
    }
    count
}

/// Distance between two boxes.
fn apart(a: &[f64; 4], b: &[f64; 4]) -> f64 {
    let x = (a[0] - b[1]).max(b[0] - a[1]).max(0.0);
    let y = (a[2] - b[3]).max(b[2] - a[3]).max(0.0);
    x.hypot(y)
}

/// Area of a hole: its edge has the material to the left.
fn enclosed(faces: &[Face], own: &[usize]) -> f64 {
    let Some(&first) = own.first() else {
        return 0.0;
    };
    let origin = faces[first].side.from;
    -own.iter()
        .map(|&i| faces[i].side.relative_to(origin).integrate_dy(|p| [p.x])[0])
        .sum::<f64>()
}
