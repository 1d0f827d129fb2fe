//! In-situ stress of the unit load cases at a point.
use super::load_cases::LoadCase;

/// In-situ effective stress `[xx, zz, xz]` of a unit load case in Pa at a point of a layer, tension positive.
///
/// `overburden_m[j]` is the thickness of layer `j` in the column above the point up to the un-eroded surface. Source:
/// docs/theory.md eq. (4.1).
pub fn in_situ_pa(case: LoadCase, layer: usize, overburden_m: &[f64]) -> [f64; 3] {
    match case {
        LoadCase::Weight { layer: above } => [0.0, -overburden_m[above], 0.0],
        LoadCase::Horizontal { layer: acts_in, above } if acts_in == layer => [-overburden_m[above], 0.0, 0.0],
        // waters have theirs in `Column`
        _ => [0.0; 3],
    }
}

/// Body force of a unit load case on a layer, N/m3; of the saturated cases below the table.
pub fn body_force_n_per_m3(case: LoadCase, layer: usize) -> [f64; 2] {
    match case {
        LoadCase::Weight { layer: weighs } if weighs == layer => [0.0, -1.0],
        LoadCase::Seaward { layer: shakes } if shakes == layer => [-1.0, 0.0],
        LoadCase::Upward { layer: lifts } if lifts == layer => [0.0, 1.0],
        LoadCase::Saturated { layer: weighs, .. } if weighs == layer => [0.0, -1.0],
        LoadCase::SaturatedSeaward { layer: shakes, .. } if shakes == layer => [-1.0, 0.0],
        LoadCase::SaturatedUpward { layer: lifts, .. } if lifts == layer => [0.0, 1.0],
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
