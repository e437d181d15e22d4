//! The unknowns of one operator, the pattern of its matrix, and assembly.
//!
//! Unknowns are numbered in the order of elimination, so that the factorisation needs no permutation.
//! The matrix is the upper triangle in compressed columns.

use rayon::prelude::*;
use sectile_mesh::mesh::NONE;
use sprs::CsMat;

use crate::ordering::bucket;
use crate::space::{Entity, Space};

/// How nodes become unknowns.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Condition {
    /// Every node is free but the last eliminated vertex, which fixes the constant.
    FreeUpToConstant,
    /// Nodes on outer edges are zero; those of each hole's edge share one unknown.
    ConstantOnLoops,
}

/// A run of unknowns that always occur together: those of an entity, or a hole's single one.
#[derive(Clone, Debug)]
struct Block {
    start: u32,
    len: u32,
    triangles: Vec<u32>,
}

/// The unknowns of one operator and the pattern of its matrix.
#[derive(Clone, Debug)]
pub struct System {
    /// The unknown of each node; [`NONE`] where the value is zero.
    pub unknown: Vec<u32>,
    /// Number of unknowns.
    pub len: usize,
    /// First entry of each column.
    column: Vec<usize>,
    /// Row of each entry, rising within a column, the diagonal last.
    rows: Vec<usize>,
}

impl System {
    /// Numbers the unknowns of `space` under `condition` in elimination `order` and lays out the matrix.
    #[must_use]
    pub fn new(space: &Space, condition: Condition, order: &[Entity]) -> Self {
        let mesh = space.mesh;
        let loops = mesh.loop_is_outer.len();
        // The loop that an entity lies on.
        let mut vertex_loop = vec![NONE; mesh.vertices.len()];
        if condition == Condition::ConstantOnLoops {
            for side in mesh.sides.iter().filter(|s| s.boundary != NONE) {
                for v in side.vertices {
                    vertex_loop[v as usize] = side.boundary;
                }
            }
        }
        let loop_of = |entity: Entity| match (condition, entity) {
            (Condition::FreeUpToConstant, _) | (_, Entity::Triangle(_)) => NONE,
            (_, Entity::Vertex(v)) => vertex_loop[v],
            (_, Entity::Side(s)) => mesh.sides[s].boundary,
        };
        let stars = bucket(
            mesh.vertices.len(),
            mesh.triangles.iter().flatten().map(|&v| v as usize),
        );
        let fixed = match condition {
            Condition::FreeUpToConstant => order.last().copied(),
            Condition::ConstantOnLoops => None,
        };

        let mut unknown = vec![NONE; space.nodes()];
        let mut blocks = Vec::with_capacity(order.len() + loops);
        let mut next = 0u32;
        for &entity in order {
            let len = space.count(entity);
            if len == 0 || loop_of(entity) != NONE || Some(entity) == fixed {
                continue;
            }
            let first = space.first(entity);
            for k in 0..len {
                unknown[first + k] = next + k as u32;
            }
            let triangles = match entity {
                Entity::Vertex(v) => stars.of(v).iter().map(|&i| i / 3).collect(),
                Entity::Side(s) => {
                    let side = mesh.sides[s];
                    [side.left, side.right]
                        .into_iter()
                        .filter(|&t| t != NONE)
                        .collect()
                }
                Entity::Triangle(t) => vec![t as u32],
            };
            blocks.push(Block {
                start: next,
                len: len as u32,
                triangles,
            });
            next += len as u32;
        }
        if condition == Condition::ConstantOnLoops {
            let mut hole_triangles = vec![Vec::new(); loops];
            for (v, &l) in vertex_loop.iter().enumerate() {
                if l != NONE && !mesh.loop_is_outer[l as usize] {
                    hole_triangles[l as usize].extend(stars.of(v).iter().map(|&i| i / 3));
                }
            }
            let mut hole_unknown = vec![NONE; loops];
            for (l, mut triangles) in hole_triangles.into_iter().enumerate() {
                if mesh.loop_is_outer[l] {
                    continue;
                }
                triangles.sort_unstable();
                triangles.dedup();
                hole_unknown[l] = next;
                blocks.push(Block {
                    start: next,
                    len: 1,
                    triangles,
                });
                next += 1;
            }
            for (v, &l) in vertex_loop.iter().enumerate() {
                if l != NONE {
                    unknown[v] = hole_unknown[l as usize];
                }
            }
            for (s, side) in mesh.sides.iter().enumerate() {
                if side.boundary != NONE {
                    let first = space.first(Entity::Side(s));
                    for k in 0..space.per_side {
                        unknown[first + k] = hole_unknown[side.boundary as usize];
                    }
                }
            }
        }
        let len = next as usize;
        let (column, rows) = pattern(space, &unknown, &blocks, len);
        Self {
            unknown,
            len,
            column,
            rows,
        }
    }

    /// Sums element matrices into the upper triangle. `element(t, out)` fills the symmetric matrix of
    /// triangle `t`, shape `[local × local]`, in the order of [`Space::fill_nodes`].
    ///
    /// The sum runs in the order of the triangles: the result does not depend on threads.
    pub fn assemble(
        &self,
        space: &Space,
        mut element: impl FnMut(usize, &mut [f64]),
    ) -> CsMat<f64> {
        let n = space.local_nodes();
        let mut values = vec![0.0; self.rows.len()];
        let mut matrix = vec![0.0; n * n];
        let mut nodes = Vec::with_capacity(n);
        let mut unknowns = vec![NONE; n];
        // Local positions grouped by entity: vertices, sides, inside.
        let mut runs = [(0usize, 0usize); 7];
        for k in 0..3 {
            runs[k] = (k, 1);
            runs[3 + k] = (3 + k * space.per_side, space.per_side);
        }
        runs[6] = (3 + 3 * space.per_side, space.per_triangle);
        for t in 0..space.mesh.triangles.len() {
            element(t, &mut matrix);
            space.fill_nodes(t, &mut nodes);
            for (u, &node) in unknowns.iter_mut().zip(&nodes) {
                *u = self.unknown[node];
            }
            for &(row_start, row_len) in &runs {
                if row_len == 0 || unknowns[row_start] == NONE {
                    continue;
                }
                // Where the block of rows starts: its least unknown (sides may run backwards).
                let least = unknowns[row_start..row_start + row_len]
                    .iter()
                    .copied()
                    .min()
                    .unwrap_or(NONE);
                for &(column_start, column_len) in &runs {
                    if column_len == 0 || unknowns[column_start] == NONE {
                        continue;
                    }
                    let first_column = unknowns[column_start..column_start + column_len]
                        .iter()
                        .copied()
                        .min()
                        .unwrap_or(NONE);
                    if least > first_column {
                        continue;
                    }
                    let c = first_column as usize;
                    let rows = &self.rows[self.column[c]..self.column[c + 1]];
                    let offset = rows.partition_point(|&r| r < least as usize);
                    for j in column_start..column_start + column_len {
                        let u = unknowns[j];
                        let base = self.column[u as usize] + offset;
                        for i in row_start..row_start + row_len {
                            let r = unknowns[i];
                            if r <= u {
                                values[base + (r - least) as usize] += matrix[i * n + j];
                            }
                        }
                    }
                }
            }
        }
        // Compressed rows of the lower triangle are compressed columns of the upper one.
        CsMat::new_csc(
            (self.len, self.len),
            self.column.clone(),
            self.rows.clone(),
            values,
        )
    }

    /// Adds element vectors: `local` has shape `[triangle × local × columns]`, the result
    /// `[columns]` vectors over the unknowns.
    #[must_use]
    pub fn gather(&self, space: &Space, local: &[f64], columns: usize) -> Vec<Vec<f64>> {
        let n = space.local_nodes();
        let mut out = vec![vec![0.0; self.len]; columns];
        let mut nodes = Vec::with_capacity(n);
        for (t, values) in local.chunks_exact(n * columns).enumerate() {
            space.fill_nodes(t, &mut nodes);
            for (&node, row) in nodes.iter().zip(values.chunks_exact(columns)) {
                let u = self.unknown[node];
                if u != NONE {
                    for (column, value) in out.iter_mut().zip(row) {
                        column[u as usize] += value;
                    }
                }
            }
        }
        out
    }

    /// Values at every node from values of the unknowns.
    #[must_use]
    pub fn expand(&self, x: &[f64]) -> Vec<f64> {
        self.unknown
            .iter()
            .map(|&u| if u == NONE { 0.0 } else { x[u as usize] })
            .collect()
    }
}

/// Column starts and rows of the upper triangle.
fn pattern(
    space: &Space,
    unknown: &[u32],
    blocks: &[Block],
    len: usize,
) -> (Vec<usize>, Vec<usize>) {
    // For each block, where the blocks above it start.
    let above: Vec<Vec<u32>> = blocks
        .par_iter()
        .map(|block| {
            let mut found = Vec::with_capacity(7 * block.triangles.len());
            for &t in &block.triangles {
                for entity in space.entities(t as usize) {
                    if space.count(entity) > 0 {
                        let u = unknown[space.first(entity)];
                        if u < block.start {
                            found.push(u);
                        }
                    }
                }
            }
            found.sort_unstable();
            found.dedup();
            found
        })
        .collect();
    // By block: a hole's unknown is the whole of its block, however many nodes share it.
    let mut lengths = vec![0u32; len];
    for block in blocks {
        lengths[block.start as usize] = block.len;
    }
    let mut column = Vec::with_capacity(len + 1);
    let mut rows = Vec::new();
    column.push(0);
    for (block, above) in blocks.iter().zip(&above) {
        for k in 0..block.len {
            for &start in above {
                rows.extend(start as usize..(start + lengths[start as usize]) as usize);
            }
            rows.extend(block.start as usize..=(block.start + k) as usize);
            column.push(rows.len());
        }
    }
    (column, rows)
}
