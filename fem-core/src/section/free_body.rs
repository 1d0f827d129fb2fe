//! Resultants from consistent node forces: exact to round-off, whatever the mesh and the singularities.
//!
//! The free body is made of whole elements, so its face is jagged. The forces on the line itself follow by moving the loads on the strip between
//! face and line to the other side; with the weight constant in each element they are integrated exactly over the clipped, possibly curved
//! elements. Source: docs/theory.md eq. (1.17).
use super::{Cut, Resultants};
use crate::assembly::{
    KinksOf, body_force_split, edge_pieces, edge_traction, initial_stress_split, internal_forces_of, side_point, side_slope, walk_edge,
};
use crate::crossing::{crossings, pieces};
use crate::elasticity::Elastic;
use crate::element::{SIDES, element_points_m};
use crate::locate::Locator;
use crate::mesh::{Mesh, NO_ELEMENT, TaggedEdge};
use crate::quadrature::gauss_unit;

/// The loads that act in one load case, as they were assembled.
#[derive(Clone, Copy)]
pub struct CutLoads<'a> {
    /// Body force in N/m³ at a point of an element. Where the cut passes through an element its value at the mean of the corners counts
    /// for what lies between the face and the line: exact for a force constant in each element.
    pub body_force_n_per_m3: &'a dyn Fn(usize, [f64; 2]) -> [f64; 2],
    /// Lines on which body force or given stress kink or jump inside an element.
    pub kinks: KinksOf<'a>,
    /// Loaded sides.
    pub edges: &'a [TaggedEdge],
    /// Points at which the traction jumps or kinks, m.
    pub breaks_m: &'a [[f64; 2]],
    /// Traction in Pa at a point with outward normal.
    pub traction_pa: &'a dyn Fn([f64; 2], [f64; 2]) -> [f64; 2],
    /// Total stress less `D ε(u)`, Pa: initial stress less pore pressure on the diagonal.
    pub given_stress_pa: &'a dyn Fn(usize, [f64; 2]) -> [f64; 3],
}

/// Part of the body on the right of a cut (on the side away from its normal).
#[derive(Debug, Clone, PartialEq)]
pub struct FreeBody {
    /// The cut.
    pub cut: Cut,
    /// Elements of the part, ascending.
    pub elements: Vec<u32>,
    /// Nodes shared with the rest of the body, ascending.
    pub interface_nodes: Vec<u32>,
    /// Elements of the rest that reach over the cut, ascending.
    reaching: Vec<u32>,
}

/// Why a cut has no free body.
#[derive(Debug, Clone, Copy, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum FreeBodyError {
    /// No element lies beside the cut on its right.
    #[error("no element lies to the right of the cut from ({:.3}, {:.3}) to ({:.3}, {:.3}) m", .0.from_m[0], .0.from_m[1], .0.to_m[0], .0.to_m[1])]
    Nothing(Cut),
    /// The part on the right hangs together with the rest away from the cut: the cut does not sever the body.
    #[error("the cut does not sever the body, it still hangs together at ({x_m:.3}, {y_m:.3}) m")]
    NotSevered {
        /// A place away from the cut where both sides hang together, x in m.
        x_m: f64,
        /// The same, y in m.
        y_m: f64,
    },
}

/// Finds the part of the body that a cut severs on its right.
///
/// The elements whose corner mean lies on the right of the cut's line and that hang together by sides with one at the cut.
///
/// # Errors
/// [`FreeBodyError`] when there is nothing on the right or the cut does not sever the body.
pub fn free_body(mesh: &Mesh, locator: &Locator, cut: Cut) -> Result<FreeBody, FreeBodyError> {
    let on_right = |e: u32| cut.coordinates_m(mesh.corner_mean_m(e as usize)).0 < 0.0;
    let along = pieces(mesh, locator, (cut.from_m, cut.to_m), &|_| true);
    // Step 1: elements on the right at the cut. On a cut along sides the middle of a piece belongs to both, so ask for the right one.
    let mut inside = vec![false; mesh.triangles.len()];
    let mut queue = Vec::new();
    for piece in &along {
        let t = 0.5 * (piece.start + piece.end);
        let middle_m = [0, 1].map(|k| cut.from_m[k] + t * (cut.to_m[k] - cut.from_m[k]));
        if let Some(found) = locator.locate_where(mesh, middle_m, 1e-9 * cut.length_m(), &on_right)
            && !inside[found.element as usize]
        {
            inside[found.element as usize] = true;
            queue.push(found.element);
        }
    }
    if queue.is_empty() {
        return Err(FreeBodyError::Nothing(cut));
    }
    // Step 2: all that hang together with them on the right.
    let beside = side_neighbors(mesh);
    while let Some(e) = queue.pop() {
        for other in beside[e as usize].into_iter().filter(|&o| o != NO_ELEMENT) {
            if !inside[other as usize] && on_right(other) {
                inside[other as usize] = true;
                queue.push(other);
            }
        }
    }
    check_severed(mesh, &cut, &inside, &beside)?;
    // Step 3: nodes on the face, and elements of the rest that reach over the line.
    let mut touched = vec![[false; 2]; mesh.points_m.len()];
    for (triangle, &is_in) in mesh.triangles.iter().zip(&inside) {
        for &n in triangle {
            touched[n as usize][usize::from(is_in)] = true;
        }
    }
    let interface_nodes = (0..touched.len() as u32).filter(|&n| touched[n as usize] == [true, true]).collect();
    let mut reaching: Vec<u32> = along.iter().filter_map(|p| p.element).filter(|&e| !inside[e as usize]).collect();
    reaching.sort_unstable();
    reaching.dedup();
    let elements = (0..inside.len() as u32).filter(|&e| inside[e as usize]).collect();
    Ok(FreeBody { cut, elements, interface_nodes, reaching })
}

/// Elements across the three sides of each element, [`NO_ELEMENT`] at the boundary.
fn side_neighbors(mesh: &Mesh) -> Vec<[u32; 3]> {
    let mut beside = vec![[NO_ELEMENT; 3]; mesh.triangles.len()];
    let mut first = vec![(NO_ELEMENT, 0usize); mesh.points_m.len()];
    for (e, triangle) in mesh.triangles.iter().enumerate() {
        for (side, &[_, _, m]) in SIDES.iter().enumerate() {
            let (other, other_side) = first[triangle[m] as usize];
            if other == NO_ELEMENT {
                first[triangle[m] as usize] = (e as u32, side);
            } else {
                beside[e][side] = other;
                beside[other as usize][other_side] = e as u32;
            }
        }
    }
    beside
}

/// Every side between the part and the rest must belong to an element that the cut crosses or touches.
fn check_severed(mesh: &Mesh, cut: &Cut, inside: &[bool], beside: &[[u32; 3]]) -> Result<(), FreeBodyError> {
    let half = 0.5 * cut.length_m();
    for (e, neighbors) in beside.iter().enumerate().filter(|(e, _)| inside[*e]) {
        for (side, &other) in neighbors.iter().enumerate() {
            if other == NO_ELEMENT || inside[other as usize] {
                continue;
            }
            let place = mesh.points_m[mesh.triangles[e][SIDES[side][2]] as usize];
            let size = mesh.area_m2(e).max(mesh.area_m2(other as usize)).sqrt();
            let (nu, eta) = cut.coordinates_m(place);
            let is_near = nu.abs() <= 3.0 * size && eta.abs() <= half + 2.0 * size;
            if !is_near {
                return Err(FreeBodyError::NotSevered { x_m: place[0], y_m: place[1] });
            }
        }
    }
    Ok(())
}

impl FreeBody {
    /// Resultants of the **total** stress on the cut in one load case.
    ///
    /// Exact up to the residual of the solution, provided that no support and no spring acts on a node of the face.
    pub fn resultants(&self, mesh: &Mesh, materials: &[Elastic], displacements_m: &[f64], loads: &CutLoads) -> Resultants {
        // Step 1: forces that the rest gives to the part at the nodes of the face.
        let elements = || self.elements.iter().copied();
        let mut forces = internal_forces_of(mesh, materials, displacements_m, elements());
        let own_edges = edges_of(loads.edges, &self.elements);
        let given = [
            body_force_split(mesh, loads.body_force_n_per_m3, loads.kinks, elements()),
            initial_stress_split(mesh, loads.given_stress_pa, loads.kinks, elements()),
            edge_traction(mesh, &own_edges, loads.breaks_m, loads.traction_pa),
        ];
        for load in &given {
            forces.iter_mut().zip(load).for_each(|(f, l)| *f -= l);
        }
        let mut sum = Resultants::default();
        for &node in &self.interface_nodes {
            let i = 2 * node as usize;
            sum = sum.plus(Resultants::of_force(&self.cut, mesh.points_m[node as usize], [forces[i], forces[i + 1]]), 1.0);
        }
        // Step 2: from the jagged face to the line, + loads on the part beyond the line, − loads on the rest before it.
        for (list, beyond, factor) in [(&self.elements, 1.0, 1.0), (&self.reaching, -1.0, -1.0)] {
            for &e in list {
                sum = sum.plus(self.weight_beyond(mesh, e as usize, beyond, loads), factor);
            }
            for edge in edges_of(loads.edges, list) {
                sum = sum.plus(self.traction_beyond(mesh, &edge, beyond, loads), factor);
            }
        }
        sum
    }

    /// Resultants of the body force on the part of an element where `sign · ν > 0`.
    ///
    /// Area and first moments as boundary integrals, `A = ∮ ν dη`, `∫ν = ∮ ν²/2 dη`, `∫η = ∮ ν η dη`: all vanish along the line `ν = 0`, so only
    /// the parts of the (curved) sides beyond it count.
    fn weight_beyond(&self, mesh: &Mesh, element: usize, sign: f64, loads: &CutLoads) -> Resultants {
        let points = element_points_m(mesh, element);
        if points.iter().all(|&p| sign * self.cut.coordinates_m(p).0 <= 0.0) {
            return Resultants::default();
        }
        let (n, e) = (self.cut.normal(), self.cut.axis());
        let (mut area, mut nu_moment, mut eta_moment) = (0.0, 0.0, 0.0);
        for [i, j, m] in SIDES {
            let side = [points[i], points[j], points[m]];
            for piece in self.side_parts(&side).windows(2) {
                if sign * self.cut.coordinates_m(side_point(&side, 0.5 * (piece[0] + piece[1]))).0 <= 0.0 {
                    continue;
                }
                for (x, weight) in gauss_unit(4) {
                    let s = piece[0] + x * (piece[1] - piece[0]);
                    let (nu, eta) = self.cut.coordinates_m(side_point(&side, s));
                    let slope = side_slope(&side, s);
                    let d_eta = weight * (piece[1] - piece[0]) * (slope[0] * e[0] + slope[1] * e[1]);
                    area += nu * d_eta;
                    nu_moment += 0.5 * nu * nu * d_eta;
                    eta_moment += nu * eta * d_eta;
                }
            }
        }
        let b = (loads.body_force_n_per_m3)(element, mesh.corner_mean_m(element));
        let (normal, shear) = (b[0] * n[0] + b[1] * n[1], b[0] * e[0] + b[1] * e[1]);
        Resultants { normal_n_per_m: area * normal, shear_n_per_m: area * shear, moment_n: eta_moment * normal - nu_moment * shear }
    }

    /// Resultants of the traction on the part of a side where `sign · ν > 0`.
    fn traction_beyond(&self, mesh: &Mesh, edge: &TaggedEdge, sign: f64, loads: &CutLoads) -> Resultants {
        let side = edge.nodes.map(|n| mesh.points_m[n as usize]);
        if side.iter().all(|&p| sign * self.cut.coordinates_m(p).0 <= 0.0) {
            return Resultants::default();
        }
        let mut parameters = self.side_parts(&side);
        parameters.extend(edge_pieces(&side, loads.breaks_m));
        parameters.sort_by(f64::total_cmp);
        let mut sum = Resultants::default();
        walk_edge(mesh, edge, &parameters, &mut |at| {
            if 0.0 < sign * self.cut.coordinates_m(at.point_m).0 {
                sum = sum.plus(Resultants::of_force(&self.cut, at.point_m, (loads.traction_pa)(at.point_m, at.normal)), at.weight_m);
            }
        });
        sum
    }

    /// Parameters 0, crossings with the line of the cut, 1.
    fn side_parts(&self, side_m: &[[f64; 2]; 3]) -> Vec<f64> {
        let along = [self.cut.to_m[0] - self.cut.from_m[0], self.cut.to_m[1] - self.cut.from_m[1]];
        let mut parameters = vec![0.0];
        parameters.extend(crossings(side_m, self.cut.from_m, along));
        parameters.push(1.0);
        parameters
    }
}

/// Loaded sides of the listed elements (ascending); a side counts to its left element, if it has one.
fn edges_of(edges: &[TaggedEdge], elements: &[u32]) -> Vec<TaggedEdge> {
    let owner = |e: &TaggedEdge| if e.left == NO_ELEMENT { e.right } else { e.left };
    edges.iter().copied().filter(|e| elements.binary_search(&owner(e)).is_ok()).collect()
}
