//! Consistent node loads of the unit load cases on a mesh.
use std::cell::{Cell, RefCell};

use fem_core::assembly::{body_force_of, body_force_split, edge_traction, initial_stress_of, initial_stress_split};
use fem_core::mesh::{Mesh, TaggedEdge};
use fem_core::quadrature::TRIANGLE_DEGREE_4;
use fem_core::supports::Supports;

use super::columns::Columns;
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
pub fn unit_loads(model: &Model, section: &Section, mesh: &Mesh, cases: &CaseSet, columns: &Columns) -> Vec<Vec<f64>> {
    let overburden = Overburden::new(section, mesh);
    let one = |&case: &LoadCase| match case.water() {
        Some(_) => water_load(section, mesh, case, columns),
        None => unit_load(model, section, mesh, case, &overburden),
    };
    cases.cases.iter().map(one).collect()
}

/// Loads of a case of the water: pore pressure, in-situ stress, weight below the table, sea on the surface.
fn water_load(section: &Section, mesh: &Mesh, case: LoadCase, columns: &Columns) -> Vec<f64> {
    let Some(field) = case.water().map(|w| &columns.fields[w]) else { return vec![0.0; 2 * mesh.points_m.len()] };
    let layer = |t: usize| mesh.regions[t] as usize;
    let kinks = |t: usize| field.kinks(&mesh.triangles[t].map(|n| mesh.points_m[n as usize]));
    let all = || 0..mesh.triangles.len() as u32;
    let of = |layer: usize| all().filter(move |&t| mesh.regions[t as usize] as usize == layer);
    let in_situ = |t: usize, p: [f64; 2]| columns.at(section, p).in_situ_pa(case, layer(t));
    let below = |p: [f64; 2]| p[1] < field.table.level_m(p[0]);
    let weight = |t: usize, p: [f64; 2]| if below(p) { body_force_n_per_m3(case, layer(t)) } else { [0.0; 2] };
    match case {
        LoadCase::Water { .. } => {
            // in-situ effective stress less pore pressure on the diagonal: nothing is left of the vertical
            let total = |_: usize, p: [f64; 2]| [-field.pressure_pa(p), 0.0, 0.0];
            let mut load = initial_stress_split(mesh, &total, &kinks, all());
            if let Some((level, _)) = field.sea {
                let sea = edge_traction(mesh, &surface_edges(mesh), &sea_ends_m(section, level), &|p, n| {
                    let pressure = field.sea_pressure_pa(p[1]);
                    [-pressure * n[0], -pressure * n[1]]
                });
                load.iter_mut().zip(sea).for_each(|(sum, add)| *sum += add);
            }
            load
        }
        LoadCase::WaterHorizontal { layer, .. } | LoadCase::SaturatedHorizontal { layer, .. } => {
            initial_stress_split(mesh, &in_situ, &kinks, of(layer))
        }
        LoadCase::Saturated { layer, .. } => {
            let mut load = body_force_split(mesh, &weight, &kinks, of(layer));
            load.iter_mut().zip(initial_stress_split(mesh, &in_situ, &kinks, all())).for_each(|(sum, add)| *sum += add);
            load
        }
        LoadCase::SaturatedSeaward { layer, .. } | LoadCase::SaturatedUpward { layer, .. } => {
            body_force_split(mesh, &weight, &kinks, of(layer))
        }
        _ => vec![0.0; 2 * mesh.points_m.len()],
    }
}

/// Sides of the whole surface, on which the sea may stand.
pub fn surface_edges(mesh: &Mesh) -> Vec<TaggedEdge> {
    mesh.edges.iter().filter(|e| tags::is_surface(e.tag)).copied().collect()
}

/// Where a level meets the surface, m.
pub fn sea_ends_m(section: &Section, level_m: f64) -> Vec<[f64; 2]> {
    let hits = section.surface().segments().flat_map(|s| s.line_hits([0.0, level_m], [1.0, 0.0]));
    hits.map(|(x, _)| [x, level_m]).collect()
}

fn unit_load(model: &Model, section: &Section, mesh: &Mesh, case: LoadCase, overburden: &Overburden<'_>) -> Vec<f64> {
    let of_layer = |layer: usize| (0..mesh.triangles.len() as u32).filter(move |&t| mesh.regions[t as usize] as usize == layer);
    let stress = |elements: &mut dyn Iterator<Item = u32>| {
        initial_stress_of(mesh, &|t, point| overburden.with(t, point, |h| in_situ_pa(case, mesh.regions[t] as usize, h)), elements)
    };
    match case {
        LoadCase::Surcharge { .. } | LoadCase::SurchargeSeaward { .. } => surcharge_load(model, section, mesh, case),
        LoadCase::Horizontal { layer, .. } => stress(&mut of_layer(layer)),
        LoadCase::Weight { layer } | LoadCase::Seaward { layer } | LoadCase::Upward { layer } => {
            let mut load = body_force_of(mesh, &|_, _| body_force_n_per_m3(case, layer), of_layer(layer));
            if matches!(case, LoadCase::Weight { .. }) {
                for (sum, add) in load.iter_mut().zip(stress(&mut (0..mesh.triangles.len() as u32))) {
                    *sum += add;
                }
            }
            load
        }
        _ => vec![0.0; 2 * mesh.points_m.len()],
    }
}

/// Body force of a state at a point of a layer, N/m3: weight less its uplift, and drag toward the sea.
pub fn body_force_of_state(cases: &CaseSet, columns: &Columns, coefficients: &[f64], (layer, p): (usize, [f64; 2])) -> [f64; 2] {
    let mut sum = [0.0; 2];
    for (&case, c) in cases.cases.iter().zip(coefficients).filter(|(_, c)| 0.0 < c.abs()) {
        if case.is_saturated() && case.water().is_some_and(|w| columns.fields[w].table.level_m(p[0]) <= p[1]) {
            continue;
        }
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
    let one = CaseSet { cases: vec![case], waters: Vec::new(), water_of_situation: Vec::new() };
    edge_traction(mesh, &ground_edges(section, mesh), &surcharge_ends_m(model, section), &|point, normal| {
        traction_of_state(model, &one, &[1.0], point, normal)
    })
}

/// Overburden at the integration points, computed when first asked for and reused by every load case.
struct Overburden<'a> {
    section: &'a Section,
    n_layers: usize,
    /// Element and number of the point last asked for: the points of an element are asked for in the same order every time.
    last: Cell<(usize, usize)>,
    stored_m: RefCell<Vec<f64>>,
}

/// Integration points of an element.
const POINTS: usize = TRIANGLE_DEGREE_4.len();

impl<'a> Overburden<'a> {
    fn new(section: &'a Section, mesh: &Mesh) -> Self {
        let n_layers = section.n_layers();
        let stored_m = RefCell::new(vec![f64::NAN; mesh.triangles.len() * POINTS * n_layers]);
        Self { section, n_layers, last: Cell::new((usize::MAX, 0)), stored_m }
    }

    fn with(&self, element: usize, point: [f64; 2], use_it: impl FnOnce(&[f64]) -> [f64; 3]) -> [f64; 3] {
        let (last, k) = self.last.get();
        let k = if last == element && k + 1 < POINTS { k + 1 } else { 0 };
        self.last.set((element, k));
        let start = (element * POINTS + k) * self.n_layers;
        let mut stored = self.stored_m.borrow_mut();
        let row = &mut stored[start..start + self.n_layers];
        if row[0].is_nan() {
            self.section.overburden_into(point, row);
        }
        use_it(row)
    }
}
