//! In-situ stress of the unit load cases at a point.
use super::load_cases::{CaseSet, LoadCase};

/// In-situ effective stress `[xx, zz, xz]` of a unit load case in Pa at a point of a layer, tension positive.
///
/// `overburden_m[j]` is the thickness of layer `j` in the column above the point up to the un-eroded surface. Source:
/// docs/theory.md eq. (4.1).
pub fn in_situ_pa(case: LoadCase, layer: usize, overburden_m: &[f64]) -> [f64; 3] {
    match case {
        LoadCase::Weight { layer: above } => [0.0, -overburden_m[above], 0.0],
        LoadCase::Horizontal { layer: acts_in, above } if acts_in == layer => [-overburden_m[above], 0.0, 0.0],
        LoadCase::Horizontal { .. }
        | LoadCase::Seaward { .. }
        | LoadCase::Upward { .. }
        | LoadCase::Surcharge { .. }
        | LoadCase::SurchargeSeaward { .. } => [0.0; 3],
    }
}

/// Body force of a unit load case on a layer, N/m3.
pub fn body_force_n_per_m3(case: LoadCase, layer: usize) -> [f64; 2] {
    match case {
        LoadCase::Weight { layer: weighs } if weighs == layer => [0.0, -1.0],
        LoadCase::Seaward { layer: shakes } if shakes == layer => [-1.0, 0.0],
        LoadCase::Upward { layer: lifts } if lifts == layer => [0.0, 1.0],
        _ => [0.0; 2],
    }
}

/// Pressure on the ground, `[x, z]` in Pa, of the surcharge that a unit load case stands for.
pub fn surcharge_traction_pa(case: LoadCase) -> Option<(usize, [f64; 2])> {
    match case {
        LoadCase::Surcharge { surcharge } => Some((surcharge, [0.0, -1.0])),
        LoadCase::SurchargeSeaward { surcharge } => Some((surcharge, [-1.0, 0.0])),
        _ => None,
    }
}

/// In-situ effective stress of a superposition at a point of a layer, Pa.
pub fn in_situ_of_state(cases: &CaseSet, coefficients: &[f64], layer: usize, overburden_m: &[f64]) -> [f64; 3] {
    let mut sum = [0.0; 3];
    for (&case, c) in cases.cases.iter().zip(coefficients) {
        let stress = in_situ_pa(case, layer, overburden_m);
        for k in 0..3 {
            sum[k] += c * stress[k];
        }
    }
    sum
}
