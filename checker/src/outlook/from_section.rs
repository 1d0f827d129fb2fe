//! From the model and the unit values of a depth series to inputs and a [`DemandModel`].
use super::demand_model::{Coefficient, DemandModel, Factored, Law, Limit, Places, SituationChance, StrengthInputs};
use super::variables::{Correlation, VariableError, Variables};
use crate::analysis::load_cases::{CaseSet, LoadCase, State};
use crate::demand::{CheckKind, LineValue, PlaceValue};
use crate::model::{Carries, Model, RockStrength, Situation, StrengthBasis, Uncertain};
use crate::strength::{StrengthError, StrengthFactors, reductions};

/// Unit values of one depth.
#[derive(Debug, Clone, Copy)]
pub struct SectionValues<'a> {
    /// Undercut depth, m.
    pub depth_m: f64,
    /// Places.
    pub places: &'a [PlaceValue],
    /// Rupture lines.
    pub lines: &'a [LineValue],
}

/// Why the model gives no inputs.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum FromModelError {
    /// A distribution or correlation.
    #[error(transparent)]
    Variable(#[from] VariableError),
    /// A strength.
    #[error("`{rock}`: {error}")]
    Strength {
        /// Rock.
        rock: String,
        /// Why.
        error: StrengthError,
    },
}

/// Inputs of a model and where each of them stands.
#[derive(Debug, Clone, PartialEq)]
pub struct ModelInputs {
    /// The inputs.
    pub variables: Variables,
    /// Strength entry of each rock; `None` = holds nothing or is not in the section.
    pub strengths: Vec<Option<StrengthInputs>>,
    /// Rocks whose k0 was not measured and was taken as equally likely between `nu / (1 - nu)` and 1.
    pub k0_not_measured: Vec<String>,
    unit_weight: Vec<Option<usize>>,
    k0: Vec<Option<usize>>,
    model_factor: usize,
}

impl ModelInputs {
    /// Place of a rock's strengths in the demand model's list.
    pub fn strength_entry(&self, rock: usize) -> Option<usize> {
        self.strengths[rock]?;
        Some(self.strengths[..rock].iter().flatten().count())
    }

    /// Input of a rock's unit weight.
    pub fn unit_weight_input(&self, rock: usize) -> Option<usize> {
        self.unit_weight[rock]
    }
}

/// Collects inputs with their names.
#[derive(Default)]
struct Collector {
    inputs: Vec<(String, Uncertain)>,
    correlations: Vec<Correlation>,
}

impl Collector {
    fn add(&mut self, what: &str, of: &str, value: Uncertain) -> usize {
        self.inputs.push((format!("{what} {of}").trim_end().to_owned(), value));
        self.inputs.len() - 1
    }
}

/// Inputs of all rocks of the section: unit weight, k0, strengths with their correlation, and the model factor.
///
/// # Errors
/// All distributions and strengths that cannot be.
pub fn inputs_of(model: &Model, model_factor: Uncertain, cliff_height_m: f64) -> Result<ModelInputs, Vec<FromModelError>> {
    let used = |rock: usize| model.layers.iter().any(|l| l.rock == rock);
    let mut all = Collector::default();
    let mut errors = Vec::new();
    let n = model.rocks.len();
    let (mut unit_weight, mut k0, mut strengths, mut k0_not_measured) = (vec![None; n], vec![None; n], vec![None; n], Vec::new());
    for (i, rock) in model.rocks.iter().enumerate().filter(|(i, _)| used(*i)) {
        unit_weight[i] = Some(all.add("unit weight", &rock.name, rock.unit_weight_n_per_m3));
        let ratio = rock.k0.unwrap_or_else(|| {
            k0_not_measured.push(rock.name.clone());
            between_the_k0_cases(rock.poissons_ratio)
        });
        k0[i] = Some(all.add("k0", &rock.name, ratio));
        match strength_inputs(model, i, cliff_height_m, &mut all) {
            Ok(inputs) => strengths[i] = inputs,
            Err(error) => errors.push(FromModelError::Strength { rock: rock.name.clone(), error }),
        }
    }
    let model_factor = all.add("model factor", "", model_factor);
    match Variables::new(&all.inputs, &all.correlations) {
        Ok(variables) if errors.is_empty() => Ok(ModelInputs { variables, strengths, k0_not_measured, unit_weight, k0, model_factor }),
        Ok(_) => Err(errors),
        Err(found) => Err(errors.into_iter().chain(found.into_iter().map(FromModelError::from)).collect()),
    }
}

/// Where k0 was not measured the checks look at `nu / (1 - nu)` and at 1; a sample may lie anywhere between.
fn between_the_k0_cases(poissons_ratio: f64) -> Uncertain {
    let elastic = poissons_ratio / (1.0 - poissons_ratio);
    if elastic < 1.0 { Uncertain::Uniform { min: elastic, max: 1.0 } } else { Uncertain::Exact(1.0) }
}

fn strength_inputs(model: &Model, i: usize, cliff_height_m: f64, all: &mut Collector) -> Result<Option<StrengthInputs>, StrengthError> {
    let rock = &model.rocks[i];
    let mass = if rock.strength_basis == StrengthBasis::Intact { [rock.mass_factor.tension, rock.mass_factor.cohesion] } else { [1.0; 2] };
    match &rock.strength {
        RockStrength::None => Ok(None),
        RockStrength::Lab(_) => Err(StrengthError::LabNotRead),
        RockStrength::Typed(typed) => {
            let tensile = all.add("tensile strength", &rock.name, typed.tensile_strength_pa);
            let cohesion = all.add("cohesion", &rock.name, typed.cohesion_pa);
            let friction_angle_rad = all.add("friction angle", &rock.name, typed.friction_angle_rad);
            if typed.cohesion_friction_correlation.abs() > 0.0 {
                all.correlations.push(Correlation { a: cohesion, b: friction_angle_rad, coefficient: typed.cohesion_friction_correlation });
            }
            Ok(Some(StrengthInputs::Typed {
                tensile_pa: Factored { input: tensile, factor: mass[0] * rock.wet_factor },
                cohesion_pa: Factored { input: cohesion, factor: mass[1] * rock.wet_factor },
                friction_angle_rad,
            }))
        }
        RockStrength::HoekBrown(rating) => Ok(Some(StrengthInputs::Rating {
            gsi: all.add("geological strength index", &rock.name, rating.gsi),
            mi: all.add("material constant", &rock.name, rating.mi),
            uniaxial_strength_pa: all.add("uniaxial strength", &rock.name, rating.uniaxial_strength_pa),
            disturbance: rating.disturbance,
            reductions: reductions(rock, StrengthFactors::NONE, cliff_height_m)?,
        })),
    }
}

/// Whether the outlook counts a situation: always, or with its yearly chance; ground motion without one never.
pub fn counts(situation: &Situation) -> bool {
    let moves = situation.inertia_seaward.abs() > 0.0 || situation.inertia_up.abs() > 0.0;
    situation.annual_chance.is_some() || !moves
}

/// The demand model of a depth series.
///
/// `left_out(check, situation)` names checks that are over their limit even without an undercut.
pub fn demand_model(
    model: &Model,
    inputs: &ModelInputs,
    cases: &CaseSet,
    series: &[SectionValues],
    left_out: &dyn Fn(CheckKind, usize) -> bool,
) -> DemandModel {
    let maker = Maker { model, inputs, cases };
    let situations: Vec<usize> = (0..model.situations.len()).filter(|&s| counts(&model.situations[s])).collect();
    let entries: Vec<usize> = (0..model.rocks.len()).filter(|&r| inputs.strengths[r].is_some()).collect();
    let entry_of = |rock: usize| entries.iter().position(|&e| e == rock);
    let mut limits = Vec::new();
    let mut makers: Vec<(CheckKind, usize, Option<usize>)> = Vec::new();
    for (s, &situation) in situations.iter().enumerate() {
        for kind in CheckKind::ALL.into_iter().filter(|k| !left_out(*k, situation)) {
            let mut push = |law, rock| {
                limits.push(Limit { check: kind.id(), situation: s, law });
                makers.push((kind, situation, rock));
            };
            match kind {
                CheckKind::SectionShear => {
                    push(Law::Sliding { strengths: maker.holding_layers().map(|l| l.1).filter_map(entry_of).collect() }, None);
                }
                CheckKind::SectionBending => entries.iter().enumerate().for_each(|(e, r)| push(Law::Fibre { strength: e }, Some(*r))),
                CheckKind::LocalShear => entries.iter().enumerate().for_each(|(e, r)| push(Law::Shear { strength: e }, Some(*r))),
                CheckKind::CliffTopTension | CheckKind::RoofTension => {
                    entries.iter().enumerate().for_each(|(e, r)| push(Law::Tension { strength: e }, Some(*r)));
                }
                // paths of joint sets are not sampled
                CheckKind::JointOpening | CheckKind::JointSlip => {}
            }
        }
    }
    let places =
        series.iter().map(|at| makers.iter().map(|&(kind, situation, rock)| maker.places(at, kind, situation, rock)).collect()).collect();
    DemandModel {
        depths_m: series.iter().map(|s| s.depth_m).collect(),
        coefficients: maker.coefficients(),
        strengths: entries.iter().filter_map(|&r| inputs.strengths[r]).collect(),
        situations: situations
            .iter()
            .map(|&s| SituationChance { name: model.situations[s].name.clone(), annual_chance: model.situations[s].annual_chance })
            .collect(),
        limits,
        places,
        model_factor: Some(inputs.model_factor),
    }
}

struct Maker<'a> {
    model: &'a Model,
    inputs: &'a ModelInputs,
    cases: &'a CaseSet,
}

impl Maker<'_> {
    fn rock_of(&self, layer: usize) -> usize {
        self.model.layers[layer].rock
    }

    /// Layers with strength, each with its rock, top down.
    fn holding_layers(&self) -> impl Iterator<Item = (usize, usize)> {
        let layers = self.model.layers.iter().map(|l| l.rock).enumerate();
        layers.filter(|(_, rock)| self.inputs.strengths[*rock].is_some())
    }

    fn gamma(&self, layer: usize) -> usize {
        self.inputs.unit_weight[self.rock_of(layer)].expect("rocks of layers are inputs")
    }

    fn coefficients(&self) -> Vec<Coefficient> {
        let k0 = |layer: usize| self.inputs.k0[self.rock_of(layer)].expect("rocks of layers are inputs");
        let of = |case: &LoadCase| match *case {
            LoadCase::Weight { layer }
            | LoadCase::Seaward { layer }
            | LoadCase::Upward { layer }
            | LoadCase::Saturated { layer, .. }
            | LoadCase::SaturatedSeaward { layer, .. }
            | LoadCase::SaturatedUpward { layer, .. } => Coefficient::Input(self.gamma(layer)),
            LoadCase::Horizontal { layer, above } | LoadCase::SaturatedHorizontal { layer, above, .. } => {
                Coefficient::Product(k0(layer), self.gamma(above))
            }
            LoadCase::WaterHorizontal { layer, .. } => Coefficient::Input(k0(layer)),
            LoadCase::Surcharge { .. } | LoadCase::SurchargeSeaward { .. } | LoadCase::Water { .. } => Coefficient::One,
        };
        self.cases.cases.iter().map(of).collect()
    }

    /// What a situation multiplies each unit case with, beside its coefficient: the coefficients at unit weights and k0 of 1.
    fn scales(&self, situation: usize) -> Vec<f64> {
        self.cases.coefficients(self.model, &self.state(situation, &vec![1.0; self.model.rocks.len()]))
    }

    fn state(&self, situation: usize, unit_weight_n_per_m3: &[f64]) -> State {
        State { situation, unit_weight_n_per_m3: unit_weight_n_per_m3.to_vec(), k0: vec![1.0; self.model.rocks.len()] }
    }

    fn places(&self, at: &SectionValues, kind: CheckKind, situation: usize, rock: Option<usize>) -> Places {
        match (kind, rock) {
            (CheckKind::SectionShear, _) => self.sliding(at, situation),
            (CheckKind::SectionBending, Some(rock)) => self.fibres(at, situation, rock),
            (_, rock) => {
                let mut places = Places::default();
                let scales = self.scales(situation);
                let own =
                    |p: &&PlaceValue| Some(self.rock_of(p.layer)) == rock && (kind == CheckKind::LocalShear || p.tension == Some(kind));
                for place in at.places.iter().filter(own) {
                    places.at_m.push(place.at_m);
                    for component in 0..3 {
                        places.unit.extend(place.fine.iter().zip(&scales).map(|(tensor, scale)| tensor[component] * scale));
                    }
                }
                places
            }
        }
    }

    /// Section forces `[N, V, M]` of a line for each load case: forces are linear in the unit weights, so those of one rock stand
    /// with the weight of the first layer of that rock, and those of the surcharges and of the water with the first constant case.
    fn line_cases(&self, line: &LineValue, situation: usize) -> Vec<[f64; 3]> {
        let n_rocks = self.model.rocks.len();
        let forces = |weights: &[f64]| {
            let f = line.effective_forces(self.model, &self.state(situation, weights));
            [f.axial_n_per_m, f.shear_n_per_m, f.moment_n]
        };
        let constant = forces(&vec![0.0; n_rocks]);
        let mut seen = vec![false; n_rocks];
        let mut constant_left = Some(constant);
        let of = |case: &LoadCase| match *case {
            LoadCase::Weight { layer } if !seen[self.rock_of(layer)] => {
                let rock = self.rock_of(layer);
                seen[rock] = true;
                let mut one = vec![0.0; n_rocks];
                one[rock] = 1.0;
                let with = forces(&one);
                [0, 1, 2].map(|k| with[k] - constant[k])
            }
            LoadCase::Surcharge { .. } | LoadCase::Water { .. } => constant_left.take().unwrap_or_default(),
            _ => [0.0; 3],
        };
        self.cases.cases.iter().map(of).collect()
    }

    /// Fibre stresses at both ends of the pieces of every line in one rock, by the stiffness-weighted section (eq. (7.6)).
    fn fibres(&self, at: &SectionValues, situation: usize, rock: usize) -> Places {
        let mut places = Places::default();
        for line in at.lines.iter().filter(|l| l.set.is_none()) {
            let stiffness = |layer: usize| match self.model.layers[layer].carries {
                Carries::LoadAndTension => {
                    let rock = &self.model.rocks[self.rock_of(layer)];
                    rock.youngs_modulus_pa / (1.0 - rock.poissons_ratio.powi(2))
                }
                Carries::LoadOnly => 0.0,
            };
            let half = 0.5 * line.length_m();
            let (mut k0, mut k1, mut k2) = (0.0, 0.0, 0.0);
            for piece in &line.pieces {
                let (a, b, e) = (piece.along_m[0] - half, piece.along_m[1] - half, stiffness(piece.layer));
                k0 += e * (b - a);
                k1 += e * (b * b - a * a) / 2.0;
                k2 += e * (b.powi(3) - a.powi(3)) / 3.0;
            }
            let det = k0 * k2 - k1 * k1;
            if det <= 0.0 {
                continue;
            }
            let cases = self.line_cases(line, situation);
            for piece in line.pieces.iter().filter(|p| self.rock_of(p.layer) == rock) {
                for along in piece.along_m {
                    let (y, e) = (along - half, stiffness(piece.layer));
                    places.at_m.push(point_on(line, along));
                    places.unit.extend(cases.iter().map(|[n, _, m]| e * ((n * k2 - m * k1) + (m * k0 - n * k1) * y) / det));
                }
            }
        }
        places
    }

    /// Mean shear on every line with the normal parts of its layers: `N_i = N_i,field + (N - sum N_field) l_i / l`, compression positive.
    fn sliding(&self, at: &SectionValues, situation: usize) -> Places {
        let mut places = Places::default();
        let scales = self.scales(situation);
        let layers: Vec<usize> = self.holding_layers().map(|l| l.0).collect();
        for line in at.lines.iter().filter(|l| l.set.is_none()) {
            let length = line.length_m();
            let cases = self.line_cases(line, situation);
            let field = |layer: usize, k: usize| -> f64 {
                let pieces = line.pieces.iter().filter(|p| p.layer == layer);
                pieces.map(|p| p.normal_pa[k] * scales[k] * (p.along_m[1] - p.along_m[0])).sum()
            };
            let all = |k: usize| -> f64 { line.pieces.iter().map(|p| p.normal_pa[k] * scales[k] * (p.along_m[1] - p.along_m[0])).sum() };
            let share = |layer: usize| -> f64 {
                line.pieces.iter().filter(|p| p.layer == layer).map(|p| (p.along_m[1] - p.along_m[0]) / length).sum()
            };
            places.at_m.push(point_on(line, 0.5 * length));
            places.unit.extend(cases.iter().map(|c| c[1] / length));
            for &layer in &layers {
                places.unit.extend((0..cases.len()).map(|k| -(field(layer, k) + (cases[k][0] - all(k)) * share(layer)) / length));
                places.share.push(share(layer));
            }
        }
        places
    }
}

fn point_on(line: &LineValue, along_m: f64) -> [f64; 2] {
    let t = along_m / line.length_m();
    [0, 1].map(|k| line.from_m[k] + t * (line.to_m[k] - line.from_m[k]))
}

#[cfg(test)]
mod tests;
