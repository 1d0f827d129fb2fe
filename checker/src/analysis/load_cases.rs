//! Unit load cases: every state of weights, in-situ stress and loads is an exact superposition of them.
//!
//! For layers numbered from the top, `t_j` the thickness of layer `j` in the column above a point up to the un-eroded
//! surface, `gamma_j` its unit weight and `k0_i` the in-situ stress ratio of layer `i`:
//!
//! ```text
//! sigma0_zz = - sum_j gamma_j t_j                      case Weight(j),         coefficient gamma_j
//! sigma0_xx = - sum_j k0_i gamma_j t_j  in layer i     case Horizontal(i, j),  coefficient k0_i gamma_j
//! ```
//!
//! With `p` the pore pressure times its area ratio (see [`super::water`]) and `s_j` the part of `t_j` below the table, water adds
//!
//! ```text
//! sigma0_zz = + p                        case Water(w),                   coefficient 1, with pore pressure and sea as loads
//! sigma0_xx = + k0_i p  in layer i       case WaterHorizontal(w, i),      coefficient k0_i
//! sigma0_zz = - sum_j dgamma_j s_j       case Saturated(w, j),            coefficient dgamma_j = saturated less moist unit weight
//! sigma0_xx = - sum_j k0_i dgamma_j s_j  case SaturatedHorizontal(w,i,j), coefficient k0_i dgamma_j
//! ```
//!
//! Ground motion adds `k_h gamma_j` seaward and takes `k_v gamma_j` off the weight without touching the in-situ stress.
use super::water::waters;
use crate::model::{Model, Situation};

/// One unit load case.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum LoadCase {
    /// Weight of a layer with its vertical in-situ stress; unit 1 N/m3.
    Weight {
        /// Layer.
        layer: usize,
    },
    /// Horizontal in-situ stress in a layer from the unit weight of a layer above it or itself; unit 1 N/m3.
    Horizontal {
        /// Layer in which the stress acts.
        layer: usize,
        /// Layer that weighs.
        above: usize,
    },
    /// Body force toward the sea on a layer; unit 1 N/m3.
    Seaward {
        /// Layer.
        layer: usize,
    },
    /// Body force upward on a layer, without in-situ stress; unit 1 N/m3.
    Upward {
        /// Layer.
        layer: usize,
    },
    /// Pressure of a surcharge on the ground; unit 1 Pa.
    Surcharge {
        /// Surcharge.
        surcharge: usize,
    },
    /// Seaward drag of a surcharge whose mass shakes; unit 1 Pa.
    SurchargeSeaward {
        /// Surcharge.
        surcharge: usize,
    },
    /// Pore pressure, its share in the vertical in-situ stress, and the sea on the surface, of one water; unit 1.
    Water {
        /// Water.
        water: usize,
    },
    /// Its share in the horizontal in-situ stress of a layer; unit 1.
    WaterHorizontal {
        /// Water.
        water: usize,
        /// Layer in which the stress acts.
        layer: usize,
    },
    /// Weight of a layer below the table with its vertical in-situ stress; unit 1 N/m3.
    Saturated {
        /// Water.
        water: usize,
        /// Layer.
        layer: usize,
    },
    /// Horizontal in-situ stress in a layer from the weight of one below the table; unit 1 N/m3.
    SaturatedHorizontal {
        /// Water.
        water: usize,
        /// Layer in which the stress acts.
        layer: usize,
        /// Layer that weighs.
        above: usize,
    },
    /// Body force toward the sea on a layer below the table; unit 1 N/m3.
    SaturatedSeaward {
        /// Water.
        water: usize,
        /// Layer.
        layer: usize,
    },
    /// Body force upward on a layer below the table; unit 1 N/m3.
    SaturatedUpward {
        /// Water.
        water: usize,
        /// Layer.
        layer: usize,
    },
}

impl LoadCase {
    /// The water that it belongs to.
    pub fn water(self) -> Option<usize> {
        match self {
            Self::Water { water }
            | Self::WaterHorizontal { water, .. }
            | Self::Saturated { water, .. }
            | Self::SaturatedHorizontal { water, .. }
            | Self::SaturatedSeaward { water, .. }
            | Self::SaturatedUpward { water, .. } => Some(water),
            _ => None,
        }
    }

    /// Whether it stands for ground below the table.
    pub fn is_saturated(&self) -> bool {
        self.water().is_some() && !matches!(self, Self::Water { .. } | Self::WaterHorizontal { .. })
    }
}

/// Values of the inputs that act linearly on stress.
#[derive(Debug, Clone, PartialEq)]
pub struct State {
    /// Situation.
    pub situation: usize,
    /// Unit weight of each rock, N/m3.
    pub unit_weight_n_per_m3: Vec<f64>,
    /// In-situ horizontal over vertical stress of each rock.
    pub k0: Vec<f64>,
}

/// All unit load cases that the model's situations need.
#[derive(Debug, Clone, PartialEq)]
pub struct CaseSet {
    /// The cases, in the order of the solutions.
    pub cases: Vec<LoadCase>,
    /// A situation of each different water.
    pub waters: Vec<usize>,
    /// Water of each situation.
    pub water_of_situation: Vec<Option<usize>>,
}

impl CaseSet {
    /// The cases of a model.
    pub fn new(model: &Model) -> Self {
        let n = model.layers.len();
        let mut cases: Vec<LoadCase> = (0..n).map(|layer| LoadCase::Weight { layer }).collect();
        cases.extend((0..n).flat_map(|layer| (0..=layer).map(move |above| LoadCase::Horizontal { layer, above })));
        if model.situations.iter().any(|s| s.inertia_seaward.abs() > 0.0) {
            cases.extend((0..n).map(|layer| LoadCase::Seaward { layer }));
        }
        if model.situations.iter().any(|s| s.inertia_up.abs() > 0.0) {
            cases.extend((0..n).map(|layer| LoadCase::Upward { layer }));
        }
        cases.extend((0..model.surcharges.len()).map(|surcharge| LoadCase::Surcharge { surcharge }));
        let shaking = |s: &Situation, q: usize| s.inertia_seaward.abs() > 0.0 && s.surcharges.contains(&q) && model.surcharges[q].inertia;
        let dragged = (0..model.surcharges.len()).filter(|&q| model.situations.iter().any(|s| shaking(s, q)));
        cases.extend(dragged.map(|surcharge| LoadCase::SurchargeSeaward { surcharge }));
        let (water_of_situation, waters) = waters(model);
        for water in 0..waters.len() {
            cases.extend(water_cases(model, water, &water_of_situation));
        }
        Self { cases, waters, water_of_situation }
    }

    /// Coefficient of every case in a state; shape `[n_cases]`.
    pub fn coefficients(&self, model: &Model, state: &State) -> Vec<f64> {
        let situation = &model.situations[state.situation];
        let gamma = |layer: usize| state.unit_weight_n_per_m3[model.layers[layer].rock];
        let k0 = |layer: usize| state.k0[model.layers[layer].rock];
        let acts = |surcharge: usize| situation.surcharges.contains(&surcharge);
        let own = |water: usize| if self.water_of_situation[state.situation] == Some(water) { 1.0 } else { 0.0 };
        let wetter = |layer: usize| gamma(layer) * saturated_surplus(model, layer);
        let coefficient = |case: &LoadCase| match *case {
            LoadCase::Water { water } => own(water),
            LoadCase::WaterHorizontal { water, layer } => own(water) * k0(layer),
            LoadCase::Saturated { water, layer } => own(water) * wetter(layer),
            LoadCase::SaturatedHorizontal { water, layer, above } => own(water) * k0(layer) * wetter(above),
            LoadCase::SaturatedSeaward { water, layer } => own(water) * situation.inertia_seaward * wetter(layer),
            LoadCase::SaturatedUpward { water, layer } => own(water) * situation.inertia_up * wetter(layer),
            LoadCase::Weight { layer } => gamma(layer),
            LoadCase::Horizontal { layer, above } => k0(layer) * gamma(above),
            LoadCase::Seaward { layer } => situation.inertia_seaward * gamma(layer),
            LoadCase::Upward { layer } => situation.inertia_up * gamma(layer),
            LoadCase::Surcharge { surcharge } if acts(surcharge) => (1.0 - situation.inertia_up) * model.surcharges[surcharge].pressure_pa,
            LoadCase::SurchargeSeaward { surcharge } if acts(surcharge) && model.surcharges[surcharge].inertia => {
                situation.inertia_seaward * model.surcharges[surcharge].pressure_pa
            }
            LoadCase::Surcharge { .. } | LoadCase::SurchargeSeaward { .. } => 0.0,
        };
        self.cases.iter().map(coefficient).collect()
    }
}

/// Saturated over moist unit weight of a layer's rock, less 1, from the means.
pub fn saturated_surplus(model: &Model, layer: usize) -> f64 {
    let rock = &model.rocks[model.layers[layer].rock];
    rock.saturated_unit_weight_n_per_m3.mean() / rock.unit_weight_n_per_m3.mean() - 1.0
}

/// Cases of one water: those of the saturated ground only where it is heavier than the moist.
fn water_cases(model: &Model, water: usize, of_situation: &[Option<usize>]) -> Vec<LoadCase> {
    let n = model.layers.len();
    let shaken =
        |of: &dyn Fn(&Situation) -> f64| model.situations.iter().zip(of_situation).any(|(s, w)| *w == Some(water) && 0.0 < of(s).abs());
    let heavier: Vec<usize> = (0..n).filter(|&j| 1e-9 < saturated_surplus(model, j).abs()).collect();
    let mut cases = vec![LoadCase::Water { water }];
    cases.extend((0..n).map(|layer| LoadCase::WaterHorizontal { water, layer }));
    for &above in &heavier {
        cases.push(LoadCase::Saturated { water, layer: above });
        cases.extend((above..n).map(|layer| LoadCase::SaturatedHorizontal { water, layer, above }));
    }
    if shaken(&|s| s.inertia_seaward) {
        cases.extend(heavier.iter().map(|&layer| LoadCase::SaturatedSeaward { water, layer }));
    }
    if shaken(&|s| s.inertia_up) {
        cases.extend(heavier.iter().map(|&layer| LoadCase::SaturatedUpward { water, layer }));
    }
    cases
}

/// Sum of tensors times coefficients, `sum_c coefficient_c * tensor_c`.
///
/// # Panics
/// If there is not one tensor a coefficient.
pub fn superpose(coefficients: &[f64], tensors: &[[f64; 3]]) -> [f64; 3] {
    assert_eq!(coefficients.len(), tensors.len(), "one tensor a load case");
    let mut sum = [0.0; 3];
    for (c, t) in coefficients.iter().zip(tensors) {
        for k in 0..3 {
            sum[k] += c * t[k];
        }
    }
    sum
}
