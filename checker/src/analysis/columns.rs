//! What the in-situ stress of a point hangs on: ground and water above it.
use fem_core::assembly::KinkLine;

use super::in_situ::in_situ_pa;
use super::load_cases::{CaseSet, LoadCase};
use super::samples::Weighted;
use super::water::WaterField;
use crate::model::Model;
use crate::section::Section;

/// The waters of all situations in one section.
#[derive(Debug, Clone, PartialEq)]
pub struct Columns {
    /// Each different water.
    pub fields: Vec<WaterField>,
    /// Whether any case asks for the ground below the table.
    has_saturated: bool,
}

/// Ground and water above a point, or their means over several points of one layer.
#[derive(Debug, Clone, PartialEq)]
pub struct Column {
    /// Thickness of each layer up to the un-eroded surface, m.
    pub overburden_m: Vec<f64>,
    /// Pore pressure times its area ratio of each water, Pa.
    pub pressure_pa: Vec<f64>,
    /// The part of the overburden below the table of each water, m, shape `[n_waters][n_layers]`; empty where nobody asks.
    pub submerged_m: Vec<Vec<f64>>,
}

impl Columns {
    /// The waters of a model in a section.
    pub fn new(model: &Model, section: &Section, cases: &CaseSet) -> Self {
        let fields = cases.waters.iter().filter_map(|&s| WaterField::new(section, &model.situations[s])).collect();
        let has_saturated = cases.cases.iter().any(LoadCase::is_saturated);
        Self { fields, has_saturated }
    }

    /// Whether saturated rock weighs more than moist somewhere.
    pub fn has_saturated(&self) -> bool {
        self.has_saturated
    }

    /// Ground and water above a point.
    pub fn at(&self, section: &Section, p: [f64; 2]) -> Column {
        self.mean(section, &[(p, 1.0)])
    }

    /// Means over samples, by their weights.
    pub fn mean(&self, section: &Section, samples: &[Weighted]) -> Column {
        let n = section.n_layers();
        let total: f64 = samples.iter().map(|s| s.1).sum();
        let submerged_m = if self.has_saturated { vec![vec![0.0; n]; self.fields.len()] } else { Vec::new() };
        let mut mean = Column { overburden_m: vec![0.0; n], pressure_pa: vec![0.0; self.fields.len()], submerged_m };
        let (mut one, mut above) = (vec![0.0; n], vec![0.0; n]);
        for &(p, weight) in samples {
            let share = weight / total;
            section.overburden_into(p, &mut one);
            for (m, t) in mean.overburden_m.iter_mut().zip(&one) {
                *m += share * t;
            }
            for (w, field) in self.fields.iter().enumerate() {
                mean.pressure_pa[w] += share * field.pressure_pa(p);
                let Some(submerged) = mean.submerged_m.get_mut(w) else { continue };
                let level = field.table.level_m(p[0]);
                if p[1] < level {
                    section.overburden_into([p[0], level], &mut above);
                    for (m, (t, a)) in submerged.iter_mut().zip(one.iter().zip(&above)) {
                        *m += share * (t - a);
                    }
                }
            }
        }
        mean
    }

    /// Lines on which any water kinks or jumps inside a box of points.
    pub fn kinks_of(&self, water: Option<usize>, points_m: &[[f64; 2]]) -> Vec<KinkLine> {
        water.map_or_else(Vec::new, |w| self.fields[w].kinks(points_m))
    }
}

impl Column {
    /// In-situ effective stress `[xx, zz, xz]` of a unit load case in Pa in a layer, tension positive.
    pub fn in_situ_pa(&self, case: LoadCase, layer: usize) -> [f64; 3] {
        match case {
            LoadCase::Water { water } => [0.0, self.pressure_pa[water], 0.0],
            LoadCase::WaterHorizontal { water, layer: acts_in } if acts_in == layer => [self.pressure_pa[water], 0.0, 0.0],
            LoadCase::Saturated { water, layer: above } => [0.0, -self.submerged_m[water][above], 0.0],
            LoadCase::SaturatedHorizontal { water, layer: acts_in, above } if acts_in == layer => {
                [-self.submerged_m[water][above], 0.0, 0.0]
            }
            dry => in_situ_pa(dry, layer, &self.overburden_m),
        }
    }

    /// In-situ effective stress of a superposition in a layer, Pa.
    pub fn in_situ_of_state(&self, cases: &CaseSet, coefficients: &[f64], layer: usize) -> [f64; 3] {
        let mut sum = [0.0; 3];
        for (&case, c) in cases.cases.iter().zip(coefficients) {
            let stress = self.in_situ_pa(case, layer);
            for k in 0..3 {
                sum[k] += c * stress[k];
            }
        }
        sum
    }

    /// Pore pressure times its area ratio of a situation's water, Pa; 0 for a dry one.
    pub fn pressure_of_pa(&self, water: Option<usize>) -> f64 {
        water.map_or(0.0, |w| self.pressure_pa[w])
    }
}
