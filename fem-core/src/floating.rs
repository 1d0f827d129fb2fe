//! Parts of the body that can move without straining: found before the factorization fails on them.
use crate::element::SIDES;
use crate::mesh::Mesh;
use crate::supports::Supports;
use nalgebra::{DMatrix, SymmetricEigen};
use std::collections::BTreeMap;

/// A part that is free to shift or turn.
#[derive(Debug, Clone, PartialEq)]
pub struct FloatingPart {
    /// Its elements, ascending.
    pub elements: Vec<u32>,
    /// A point in it, m: the middle of its element nearest to the mean of all.
    pub place_m: [f64; 2],
    /// Area in m².
    pub area_m2: f64,
}

/// Eigenvalues of the constraint matrix below this share of the largest count as zero; the modes are scaled to order 1.
const RANK_TOLERANCE: f64 = 1e-10;

/// Parts of the mesh that the supports leave free to move as rigid bodies, also by turning about a shared corner.
///
/// Elements that share a side belong to one rigid body. Each body has three modes: two shifts and a turn about its own mean, scaled by the size
/// of the mesh. Prescribed unknowns and springs give one row of constraints each, a corner shared by two bodies gives two; a body floats when it
/// takes part in a null vector of the sum of their outer products.
pub fn floating_parts(mesh: &Mesh, supports: &Supports) -> Vec<FloatingPart> {
    let body_of = bodies(mesh);
    let n_bodies = body_of.iter().max().map_or(0, |&b| b as usize + 1);
    let nodes_of = node_bodies(mesh, &body_of);
    let (means, length_m) = (body_means_m(mesh, &body_of, n_bodies), size_m(mesh));
    // Row of "displacement of this node as part of this body in direction d".
    let row = |node: usize, body: u32, direction: [f64; 2], sign: f64| {
        let [x, y] = mesh.points_m[node];
        let [xc, yc] = means[body as usize];
        let turn = (direction[1] * (x - xc) - direction[0] * (y - yc)) / length_m;
        let b = 3 * body as usize;
        [(b, sign * direction[0]), (b + 1, sign * direction[1]), (b + 2, sign * turn)]
    };
    let mut gram = DMatrix::<f64>::zeros(3 * n_bodies, 3 * n_bodies);
    let mut add = |entries: &[(usize, f64)]| {
        for &(i, a) in entries {
            for &(j, b) in entries {
                gram[(i, j)] += a * b;
            }
        }
    };
    for (dof, _) in supports.prescribed_m().iter().enumerate().filter(|(_, p)| p.is_some()) {
        let direction = if dof % 2 == 0 { [1.0, 0.0] } else { [0.0, 1.0] };
        add(&row(dof / 2, nodes_of[dof / 2][0], direction, 1.0));
    }
    for spring in supports.springs() {
        add(&row(spring.node as usize, nodes_of[spring.node as usize][0], spring.direction, 1.0));
    }
    for (node, list) in nodes_of.iter().enumerate() {
        for pair in list.windows(2) {
            for direction in [[1.0, 0.0], [0.0, 1.0]] {
                add(&[row(node, pair[0], direction, 1.0), row(node, pair[1], direction, -1.0)].concat());
            }
        }
    }
    let eigen = SymmetricEigen::new(gram);
    let limit = RANK_TOLERANCE * eigen.eigenvalues.amax().max(1.0);
    let mut floats = vec![false; n_bodies];
    for (k, _) in eigen.eigenvalues.iter().enumerate().filter(|(_, v)| **v <= limit) {
        for (i, entry) in eigen.eigenvectors.column(k).iter().enumerate() {
            floats[i / 3] |= entry.abs() > 1e-6;
        }
    }
    (0..n_bodies as u32).filter(|&b| floats[b as usize]).map(|b| part(mesh, &body_of, b)).collect()
}

/// Number of the rigid body of each element: elements joined by sides. Bodies are numbered by their first element.
pub fn bodies(mesh: &Mesh) -> Vec<u32> {
    let mut parent: Vec<u32> = (0..mesh.triangles.len() as u32).collect();
    let mut at_side = vec![u32::MAX; mesh.points_m.len()];
    for (element, triangle) in mesh.triangles.iter().enumerate() {
        for [_, _, m] in SIDES {
            let other = &mut at_side[triangle[m] as usize];
            if *other == u32::MAX {
                *other = element as u32;
            } else {
                let (a, b) = (root(&mut parent, *other), root(&mut parent, element as u32));
                parent[a.max(b) as usize] = a.min(b);
            }
        }
    }
    let mut number = BTreeMap::new();
    (0..parent.len() as u32)
        .map(|e| {
            let next = number.len() as u32;
            *number.entry(root(&mut parent, e)).or_insert(next)
        })
        .collect()
}

fn root(parent: &mut [u32], mut element: u32) -> u32 {
    while parent[element as usize] != element {
        parent[element as usize] = parent[parent[element as usize] as usize];
        element = parent[element as usize];
    }
    element
}

/// Bodies at each node, ascending, each once.
fn node_bodies(mesh: &Mesh, body_of: &[u32]) -> Vec<Vec<u32>> {
    let mut lists: Vec<Vec<u32>> = vec![Vec::new(); mesh.points_m.len()];
    for (triangle, &body) in mesh.triangles.iter().zip(body_of) {
        for &node in triangle {
            let list = &mut lists[node as usize];
            if let Err(place) = list.binary_search(&body) {
                list.insert(place, body);
            }
        }
    }
    lists
}

fn body_means_m(mesh: &Mesh, body_of: &[u32], n_bodies: usize) -> Vec<[f64; 2]> {
    let mut sums = vec![[0.0; 3]; n_bodies];
    for (element, &body) in body_of.iter().enumerate() {
        let [x, y] = mesh.corner_mean_m(element);
        let s = &mut sums[body as usize];
        *s = [s[0] + x, s[1] + y, s[2] + 1.0];
    }
    sums.iter().map(|s| [s[0] / s[2], s[1] / s[2]]).collect()
}

fn size_m(mesh: &Mesh) -> f64 {
    let extent = |k: usize| {
        let (low, high) = mesh.points_m.iter().fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), p| (l.min(p[k]), h.max(p[k])));
        high - low
    };
    extent(0).max(extent(1))
}

fn part(mesh: &Mesh, body_of: &[u32], body: u32) -> FloatingPart {
    let elements: Vec<u32> = (0..body_of.len() as u32).filter(|&e| body_of[e as usize] == body).collect();
    let count = elements.len() as f64;
    let centers: Vec<[f64; 2]> = elements.iter().map(|&e| mesh.corner_mean_m(e as usize)).collect();
    let mean = [0, 1].map(|k| centers.iter().map(|c| c[k]).sum::<f64>() / count);
    let distance = |c: &[f64; 2]| (c[0] - mean[0]).hypot(c[1] - mean[1]);
    let place_m = centers.iter().copied().min_by(|a, b| distance(a).total_cmp(&distance(b))).unwrap_or(mean);
    let area_m2 = elements.iter().map(|&e| mesh.area_m2(e as usize)).sum();
    FloatingPart { elements, place_m, area_m2 }
}

#[cfg(test)]
mod tests;
