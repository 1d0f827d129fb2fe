//! Consistent node loads of the unit load cases on a mesh.
use std::cell::{Cell, RefCell};

use fem_core::assembly::{body_force, edge_traction, initial_stress};
use fem_core::mesh::{Mesh, TaggedEdge};
use fem_core::supports::Supports;

use super::in_situ::{body_force_n_per_m3, in_situ_pa, surcharge_traction_pa};
use super::load_cases::{CaseSet, LoadCase};
use crate::model::Model;
use crate::section::{Section, tags};

/// Base fixed, sides on rollers.
pub fn supports(mesh: &Mesh) -> Supports {
    let mut supports = Supports::none(mesh.points_m.len());
    for edge in &mesh.edges {
        for node in edge.nodes {
            match edge.tag {
                tags::BASE => supports.fix(node),
                tags::SEAWARD_SIDE | tags::LANDWARD_SIDE => supports.prescribe(node, 0, 0.0),
                _ => {}
            }
        }
    }
    supports
}

/// Load vectors of all unit load cases, shape `[n_cases][2 * n_nodes]`, N/m.
pub fn unit_loads(model: &Model, section: &Section, mesh: &Mesh, cases: &CaseSet) -> Vec<Vec<f64>> {
    let overburden = Overburden::new(section);
    cases.cases.iter().map(|&case| unit_load(model, section, mesh, case, &overburden)).collect()
}

fn unit_load(model: &Model, section: &Section, mesh: &Mesh, case: LoadCase, overburden: &Overburden<'_>) -> Vec<f64> {
    let layer = |element: usize| mesh.regions[element] as usize;
    if surcharge_traction_pa(case).is_some() {
        return surcharge_load(model, section, mesh, case);
    }
    let mut load = body_force(mesh, &|element, _| body_force_n_per_m3(case, layer(element)));
    if matches!(case, LoadCase::Weight { .. } | LoadCase::Horizontal { .. }) {
        overburden.rewind();
        let stress = initial_stress(mesh, &|element, point| overburden.with(point, |t| in_situ_pa(case, layer(element), t)));
        for (sum, add) in load.iter_mut().zip(stress) {
            *sum += add;
        }
    }
    load
}

/// Body force of a state on a layer, N/m3: weight less its uplift, and drag toward the sea.
pub fn body_force_of_state(cases: &CaseSet, coefficients: &[f64], layer: usize) -> [f64; 2] {
    let mut sum = [0.0; 2];
    for (&case, c) in cases.cases.iter().zip(coefficients) {
        let b = body_force_n_per_m3(case, layer);
        sum = [sum[0] + c * b[0], sum[1] + c * b[1]];
    }
    sum
}

/// Sides of the highest surface, which carry surcharges.
pub fn ground_edges(section: &Section, mesh: &Mesh) -> Vec<TaggedEdge> {
    let on_ground = |edge: &&TaggedEdge| {
        let middle = mesh.points_m[edge.nodes[2] as usize];
        tags::is_surface(edge.tag) && (middle[1] - section.ground_level_m(middle[0])).abs() <= 1e-3
    };
    mesh.edges.iter().filter(on_ground).copied().collect()
}

/// Ends of all surcharges on the ground, m, where the traction jumps.
pub fn surcharge_ends_m(model: &Model, section: &Section) -> Vec<[f64; 2]> {
    model.surcharges.iter().flat_map(|s| s.x_m).map(|x| [x, section.ground_level_m(x)]).collect()
}

/// Traction of a state at a point of the ground, Pa.
pub fn traction_of_state(model: &Model, cases: &CaseSet, coefficients: &[f64], point: [f64; 2], normal: [f64; 2]) -> [f64; 2] {
    // the pressure is given per plan area: on a sloping piece it is spread over the longer slope
    let plan = normal[1].abs();
    let mut sum = [0.0; 2];
    for (&case, c) in cases.cases.iter().zip(coefficients) {
        let Some((surcharge, direction)) = surcharge_traction_pa(case) else { continue };
        let [from, to] = model.surcharges[surcharge].x_m;
        if from <= point[0] && point[0] <= to {
            sum = [sum[0] + c * plan * direction[0], sum[1] + c * plan * direction[1]];
        }
    }
    sum
}

/// Unit traction per plan length over the strip of a surcharge on the highest surface.
fn surcharge_load(model: &Model, section: &Section, mesh: &Mesh, case: LoadCase) -> Vec<f64> {
    let one = CaseSet { cases: vec![case] };
    edge_traction(mesh, &ground_edges(section, mesh), &surcharge_ends_m(model, section), &|point, normal| {
        traction_of_state(model, &one, &[1.0], point, normal)
    })
}

/// Overburden at the integration points, computed for the first load case and reused: every case asks for the same points in the
/// same order.
struct Overburden<'a> {
    section: &'a Section,
    n_layers: usize,
    next: Cell<usize>,
    stored_m: RefCell<Vec<f64>>,
}

impl<'a> Overburden<'a> {
    fn new(section: &'a Section) -> Self {
        Self { section, n_layers: section.n_layers(), next: Cell::new(0), stored_m: RefCell::new(Vec::new()) }
    }

    fn rewind(&self) {
        self.next.set(0);
    }

    fn with(&self, point: [f64; 2], use_it: impl FnOnce(&[f64]) -> [f64; 3]) -> [f64; 3] {
        let start = self.next.get();
        let end = start + self.n_layers;
        self.next.set(end);
        let mut stored = self.stored_m.borrow_mut();
        if stored.len() < end {
            stored.resize(end, 0.0);
            self.section.overburden_into(point, &mut stored[start..end]);
        }
        use_it(&stored[start..end])
    }
}
