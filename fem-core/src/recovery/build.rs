//! Builds the recovery operator: patches, their fits, one sparse row per recovered node.
use super::patch::Fit;
use super::{RecoveredLayout, Recovery, RecoveryParams, sample_places_m};
use crate::assembly::elements_of_nodes;
use crate::element::{NODE_XI, SIDES};
use crate::mesh::Mesh;

/// Elements that a patch at the boundary is widened to: 18 samples for 6 terms, as many as a usual inner patch has.
const BOUNDARY_PATCH: usize = 6;
/// Elements that an inner patch is widened to when fewer meet at its node.
const INNER_PATCH: usize = 4;
/// Widening stops at this many elements; a patch that is still short gets a linear polynomial.
const LARGEST_PATCH: usize = 24;

struct Patch {
    elements: Vec<u32>,
    fit: Fit,
}

struct Builder<'a> {
    mesh: &'a Mesh,
    groups: &'a [u32],
    singular: Vec<bool>,
    places_m: Vec<[f64; 2]>,
    node_starts: Vec<u32>,
    node_elements: Vec<u32>,
    element_nodes: Vec<[u32; 6]>,
    /// Patch of each recovered corner node, `None` at singular ones.
    patches: Vec<Option<Patch>>,
    /// Mesh node, first element and local number of each recovered node.
    origin: Vec<(u32, u32, u8)>,
}

pub(super) fn build(mesh: &Mesh, params: &RecoveryParams) -> Recovery {
    let mut singular = vec![false; mesh.points_m.len()];
    for &node in params.singular_nodes {
        singular[node as usize] = true;
    }
    let (node_starts, node_elements) = elements_of_nodes(mesh);
    let mut builder = Builder {
        mesh,
        groups: params.groups,
        singular,
        places_m: sample_places_m(mesh),
        node_starts,
        node_elements,
        element_nodes: vec![[u32::MAX; 6]; mesh.triangles.len()],
        patches: Vec::new(),
        origin: Vec::new(),
    };
    builder.number();
    builder.fit_patches();
    builder.rows()
}

impl Builder<'_> {
    fn around(&self, node: u32) -> &[u32] {
        &self.node_elements[self.node_starts[node as usize] as usize..self.node_starts[node as usize + 1] as usize]
    }

    /// Numbers the recovered nodes: one per node and group, at singular nodes one per element. Corner nodes come first, as in the mesh.
    fn number(&mut self) {
        for node in 0..self.mesh.points_m.len() as u32 {
            let around: Vec<u32> = self.around(node).to_vec();
            let mut known: Vec<(u32, u32)> = Vec::new();
            for e in around {
                let k = self.mesh.triangles[e as usize].iter().position(|&n| n == node).expect("the element is around this node");
                let key = if self.singular[node as usize] { e } else { self.groups[e as usize] };
                let found = known.iter().find(|(g, _)| *g == key).map(|(_, id)| *id);
                let id = found.unwrap_or_else(|| {
                    let id = self.origin.len() as u32;
                    self.origin.push((node, e, k as u8));
                    known.push((key, id));
                    id
                });
                self.element_nodes[e as usize][k] = id;
            }
        }
    }

    fn fit_patches(&mut self) {
        for id in 0..self.origin.len() {
            let (node, first, _) = self.origin[id];
            if self.mesh.n_corners <= node as usize {
                break;
            }
            let patch = (!self.singular[node as usize]).then(|| self.patch(node, self.groups[first as usize]));
            self.patches.push(patch);
        }
    }

    /// The elements of the group around the node, widened across sides until a quadratic is well determined.
    fn patch(&self, node: u32, group: u32) -> Patch {
        let mut elements: Vec<u32> = self.around(node).iter().copied().filter(|&e| self.groups[e as usize] == group).collect();
        let mut least = if self.is_closed(node, &elements) { INNER_PATCH } else { BOUNDARY_PATCH };
        let center = self.mesh.points_m[node as usize];
        loop {
            let grew = elements.len() < least && self.widen(&mut elements, group);
            if elements.len() < least && grew {
                continue;
            }
            if let Some(fit) = self.fit(center, &elements, 6) {
                return Patch { elements, fit };
            }
            least = elements.len() + 1;
            if LARGEST_PATCH <= elements.len() || !self.widen(&mut elements, group) {
                break;
            }
        }
        let fit = [3, 1].into_iter().find_map(|n| self.fit(center, &elements, n)).expect("a mean needs one sample");
        Patch { elements, fit }
    }

    fn fit(&self, center: [f64; 2], elements: &[u32], n_terms: usize) -> Option<Fit> {
        let points: Vec<[f64; 2]> =
            elements.iter().flat_map(|&e| self.places_m[3 * e as usize..3 * e as usize + 3].iter().copied()).collect();
        Fit::new(center, &points, n_terms)
    }

    /// Whether the elements surround the node: then each side from the node belongs to two of them.
    fn is_closed(&self, node: u32, elements: &[u32]) -> bool {
        let mut ends: Vec<u32> =
            elements.iter().flat_map(|&e| &self.mesh.triangles[e as usize][..3]).copied().filter(|&n| n != node).collect();
        ends.sort_unstable();
        ends.dedup();
        ends.len() == elements.len()
    }

    /// Adds the neighbors across sides that are in the group; whether there were any. Elements that touch a singular node are taken only when
    /// no other neighbor is left, one ring at a time.
    fn widen(&self, elements: &mut Vec<u32>, group: u32) -> bool {
        let before = elements.len();
        let mut beside_singular = Vec::new();
        for i in 0..before {
            for [_, _, m] in SIDES {
                let middle = self.mesh.triangles[elements[i] as usize][m];
                for &other in self.around(middle) {
                    if self.groups[other as usize] != group || elements.contains(&other) || beside_singular.contains(&other) {
                        continue;
                    }
                    let touches = self.mesh.triangles[other as usize][..3].iter().any(|&n| self.singular[n as usize]);
                    if touches { beside_singular.push(other) } else { elements.push(other) }
                }
            }
        }
        if elements.len() == before {
            elements.append(&mut beside_singular);
        }
        before < elements.len()
    }

    fn rows(self) -> Recovery {
        let mut row_starts = vec![0u32];
        let (mut elements, mut weights) = (Vec::new(), Vec::new());
        for &(node, element, local) in &self.origin {
            let start = elements.len();
            let at = self.mesh.points_m[node as usize];
            let sources = self.sources(element, local as usize);
            let share = 1.0 / sources.iter().flatten().count() as f64;
            if sources.iter().all(Option::is_none) {
                elements.push(element);
                weights.push(extrapolation(NODE_XI[local as usize]));
            }
            for patch in sources.into_iter().flatten() {
                let own = elements.len();
                for (&e, w) in patch.elements.iter().zip(patch.fit.weights_at(at, share)) {
                    // Patches of both ends share elements: add up, keep one entry an element.
                    if let Some(k) = elements[start..own].iter().position(|&known| known == e) {
                        for i in 0..3 {
                            weights[start + k][i] += w[i];
                        }
                    } else {
                        elements.push(e);
                        weights.push(w);
                    }
                }
            }
            row_starts.push(elements.len() as u32);
        }
        let layout = RecoveredLayout { n: self.origin.len(), element_nodes: self.element_nodes };
        Recovery { layout, row_starts, elements, weights }
    }

    /// Patches that give the value at a local node of an element: its own, those of both ends of its side, or those of the other two corners of
    /// the element at a singular corner.
    fn sources(&self, element: u32, local: usize) -> [Option<&Patch>; 2] {
        let of = |k: usize| self.patches[self.element_nodes[element as usize][k] as usize].as_ref();
        match local {
            3.. => [of(SIDES[local - 3][0]), of(SIDES[local - 3][1])],
            _ if of(local).is_some() => [of(local), None],
            _ => [of((local + 1) % 3), of((local + 2) % 3)],
        }
    }
}

/// Linear extrapolation from the element's own three samples, where no patch is left: `L_i` of the sample triangle is `2 L_i − 1/3`.
fn extrapolation(xi: [f64; 2]) -> [f64; 3] {
    // The samples lie toward the corners in the order of TRIANGLE_DEGREE_2.
    [1.0 - xi[0] - xi[1], xi[0], xi[1]].map(|l| 2.0 * l - 1.0 / 3.0)
}
