//! From a model to what all depths share: site, load cases, strengths, averaging length.
use crate::analysis::load_cases::CaseSet;
use crate::analysis::water::WaterField;
use crate::demand::{K0Case, RockEnds, k0_cases, rock_ends};
use crate::depth::{Budget, Context};
use crate::diagnostic::Diagnostic;
use crate::model::{Averaging, Carries, Groundwater, Model, SeaLevel};
use crate::section::{Section, Site};
use crate::strength::joint_set::JointCapacity;
use crate::strength::{Inputs, RockCapacity, Strength, design, mean, strength_factors};

/// Longest averaging length that is chosen by the tool, m.
const LONGEST_AVERAGING_M: f64 = 1.0;
/// Averaging length over overhang thickness.
const AVERAGING_SHARE: f64 = 0.1;
/// Largest mesh of one depth, triangles; about 400,000 unknowns.
const MOST_TRIANGLES: usize = 100_000;
/// Angle between the strike of a set and the cliff line beyond which a plane section is doubtful, rad (30 degrees).
const STRIKE_OFF_CLIFF_RAD: f64 = std::f64::consts::FRAC_PI_6;
/// Young's modulus below which a layer without tensile strength only loads, Pa.
const SOFT_PA: f64 = 100e6;

/// A model made ready.
#[derive(Debug)]
pub struct Prepared<'a> {
    /// The model.
    pub model: std::borrow::Cow<'a, Model>,
    /// Its section at all depths.
    pub site: Site,
    cases: CaseSet,
    best: Vec<Option<Strength>>,
    cautious: Vec<Option<Strength>>,
    joints: [Vec<JointCapacity>; 2],
    ends: Vec<RockEnds>,
    k0_cases: Vec<K0Case>,
    /// Averaging length, m.
    pub averaging_length_m: f64,
    /// What was done to the strengths, for the report.
    pub strength_notes: Vec<String>,
    /// Warnings from section and strengths.
    pub warnings: Vec<Diagnostic>,
}

impl Prepared<'_> {
    /// The context that every depth works in.
    pub fn context(&self) -> Context<'_> {
        Context {
            model: &self.model,
            site: &self.site,
            cases: self.cases.clone(),
            best: self.best.clone(),
            cautious: self.cautious.clone(),
            joints: self.joints.clone(),
            ends: self.ends.clone(),
            k0_cases: self.k0_cases.clone(),
            averaging_length_m: self.averaging_length_m,
            budget: Budget { triangles: MOST_TRIANGLES },
        }
    }

    /// Choices of the in-situ stress ratio.
    pub fn k0_cases(&self) -> &[K0Case] {
        &self.k0_cases
    }

    /// The same with the in-situ stress ratios of another preparation.
    #[must_use]
    pub fn with_k0_of(mut self, other: &Prepared<'_>) -> Self {
        self.k0_cases.clone_from(&other.k0_cases);
        self
    }

    /// The same with the load cases of another preparation, whose solutions are used again.
    #[must_use]
    pub fn with_cases_of(mut self, other: &Prepared<'_>) -> Self {
        self.cases.clone_from(&other.cases);
        self
    }

    /// The same with another averaging length held, m.
    #[must_use]
    pub fn with_averaging_length(mut self, length_m: f64) -> Self {
        self.averaging_length_m = length_m;
        self
    }
}

/// Reads the section, resolves the strengths and fixes the averaging length.
///
/// # Errors
/// Everything that keeps the section or a strength from being made.
pub fn prepare(model: &Model) -> Result<Prepared<'_>, Vec<Diagnostic>> {
    let (model, soft) = soft_layers(model);
    let site = Site::new(&model)?;
    let mut warnings = site.warnings;
    warnings.extend(soft);
    let site = site.value;
    let mut faults = Vec::new();
    let mut notes = Vec::new();
    let mut resolve = |inputs: Inputs| {
        let mut strengths = Vec::with_capacity(model.rocks.len());
        for (r, rock) in model.rocks.iter().enumerate() {
            let holds = model.layers.iter().any(|l| l.rock == r && l.carries == Carries::LoadAndTension);
            if !holds {
                strengths.push(None);
                continue;
            }
            match design(rock, inputs, &model.checks.partial_factors, site.cliff_height_m()) {
                Ok(resolved) => {
                    warnings.extend(resolved.warnings.into_iter().filter(|_| inputs == Inputs::Cautious));
                    // what was done to the means is in the model file; the cautious values are the ones to explain
                    let said = resolved.value.notes.into_iter().filter(|_| inputs == Inputs::Cautious);
                    notes.extend(said.map(|note| format!("`{}`: {note}", rock.name)));
                    strengths.push(match resolved.value.capacity {
                        RockCapacity::Resists(strength) => Some(strength),
                        RockCapacity::NoStrength => None,
                    });
                }
                Err(found) => faults.extend(found),
            }
        }
        strengths
    };
    let best = resolve(Inputs::BestEstimate);
    let cautious = resolve(Inputs::Cautious);
    let mut ends = Vec::new();
    for rock in &model.rocks {
        match rock_ends(rock) {
            Ok(of_rock) => ends.push(of_rock),
            Err(error) => faults.push(Diagnostic::error("rock.distribution", format!("rocks.{}", rock.name), error.to_string())),
        }
    }
    let joints = [false, true].map(|cautious| joint_capacities(&model, cautious, &mut faults));
    warnings.extend(joint_warnings(&model));
    let averaging_length_m = averaging_length(&model, &site, &mut faults);
    if !faults.is_empty() {
        faults.dedup();
        return Err(faults);
    }
    notes.dedup();
    warnings.extend(water_warnings(&model, &site));
    let (cases, k0_cases) = (CaseSet::new(&model), k0_cases(&model));
    Ok(Prepared { cases, best, cautious, joints, ends, k0_cases, averaging_length_m, strength_notes: notes, warnings, site, model })
}

/// Strength of every joint set, by means or by the low ends of its inputs.
fn joint_capacities(model: &Model, cautious: bool, faults: &mut Vec<Diagnostic>) -> Vec<JointCapacity> {
    let factors = strength_factors(&model.checks.partial_factors, cautious);
    let mut capacities = Vec::new();
    for (s, set) in model.joint_sets.iter().enumerate() {
        match JointCapacity::new(set, cautious, &factors) {
            Ok(capacity) => capacities.push(capacity),
            Err(error) => {
                let message = format!("`{}`: {error}", set.name);
                faults.push(Diagnostic::error("joints.strength", format!("joint_sets[{}]", s + 1), message));
            }
        }
    }
    capacities
}

/// Sets whose strike lies far off the cliff line, and sets too flat to come up to the ground.
fn joint_warnings(model: &Model) -> Vec<Diagnostic> {
    let mut warnings = Vec::new();
    for (s, set) in model.joint_sets.iter().enumerate() {
        let at = format!("joint_sets[{}]", s + 1);
        if let Some(strike) = set.strike_off_cliff_rad.filter(|a| STRIKE_OFF_CLIFF_RAD < *a) {
            let message = format!(
                "the strike of `{}` lies {:.0} degrees off the cliff line: a plane section overstates how far such planes cut the rock off",
                set.name,
                strike.to_degrees()
            );
            warnings.push(Diagnostic::warning("joints.strike", at.clone(), message));
        }
        if crate::depth::joint_lean_rad(set).is_none() {
            let message =
                format!("`{}` is too flat to come up to the ground within the section: it has no path and is not checked", set.name);
            warnings.push(Diagnostic::warning("joints.flat", at, message));
        }
    }
    warnings
}

/// Water tables that hang above a free face, and seas without a table, one warning a situation.
fn water_warnings(model: &Model, site: &Site) -> Vec<Diagnostic> {
    let sections: Vec<_> = [site.surveyed_depth_m(), site.search_to_depth_m()].into_iter().filter_map(|d| site.at_depth(d).ok()).collect();
    let mut warnings = Vec::new();
    for (s, situation) in model.situations.iter().enumerate() {
        let drop_m = |section: &Section| (WaterField::new(section, situation).map_or(0.0, |field| field.drawdown_m), section.depth_m());
        let worst = sections.iter().map(drop_m).max_by(|a, b| a.0.total_cmp(&b.0));
        if let Some((drawdown_m, depth_m)) = worst.filter(|w| 0.0 < w.0) {
            let message = format!(
                "the water table of `{}` lies up to {drawdown_m:.1} m above a free face (at an undercut depth of {depth_m:.1} m): it is drawn \
                 down to the face over a distance equal to the head difference",
                situation.name
            );
            let hint = "a table that hangs above a free face would give tension that is not there; give it as it meets the face";
            warnings.push(Diagnostic::warning("water.drawdown", format!("situations[{}].groundwater", s + 1), message).hint(hint));
        }
        if matches!(situation.sea_level, SeaLevel::Level(_)) && !matches!(situation.groundwater, Some(Groundwater::Table(_))) {
            let message =
                format!("`{}` has the sea on the face and no water table: the ground below sea level is taken as full", situation.name);
            warnings.push(Diagnostic::warning("water.sea-without-table", format!("situations[{}].sea_level_m", s + 1), message));
        }
    }
    warnings
}

/// A layer softer than 100 MPa without a tensile strength only loads, with a note.
fn soft_layers(model: &Model) -> (std::borrow::Cow<'_, Model>, Vec<Diagnostic>) {
    let soft = |layer: &crate::model::Layer| {
        let rock = &model.rocks[layer.rock];
        layer.carries == Carries::LoadAndTension
            && rock.youngs_modulus_pa < SOFT_PA
            && matches!(&rock.strength, crate::model::RockStrength::None)
    };
    let found: Vec<usize> = (0..model.layers.len()).filter(|&i| soft(&model.layers[i])).collect();
    if found.is_empty() {
        return (std::borrow::Cow::Borrowed(model), Vec::new());
    }
    let mut copy = model.clone();
    let mut notes = Vec::new();
    for i in found {
        copy.layers[i].carries = Carries::LoadOnly;
        let name = &model.rocks[model.layers[i].rock].name;
        let message = format!("`{name}` is softer than 100 MPa and has no tensile strength: taken as a layer that only loads");
        notes.push(Diagnostic::warning("layer.soft", format!("layers[{i}]"), message).hint("write `carries = \"load only\"` to say so"));
    }
    (std::borrow::Cow::Owned(copy), notes)
}

/// Averaging length, m: given, else a tenth of the overhang thickness at the surveyed (else first) depth and at most 1 m; a toughness
/// may only shorten it.
///
/// ```text
/// 2 L_c,   L_c = (1/pi) (K_Ic / sigma_t)^2      line method of the theory of critical distances
/// ```
///
/// from the intact means of the rock of the roof.
fn averaging_length(model: &Model, site: &Site, faults: &mut Vec<Diagnostic>) -> f64 {
    let depth = if 0.0 < site.surveyed_depth_m() { site.surveyed_depth_m() } else { model.undercut.depth_step_m };
    let section = match site.at_depth(depth) {
        Ok(section) => section,
        Err(error) => {
            faults.push(Diagnostic::error("undercut.depth", "undercut", error.to_string()));
            return LONGEST_AVERAGING_M;
        }
    };
    let tenth = AVERAGING_SHARE * section.thickness_m();
    if let Averaging::Given(length) = model.checks.averaging {
        return length;
    }
    let lip = section.lip_m();
    let rock = &model.rocks[section.rock_at([lip[0], lip[1] + 0.5 * tenth])];
    let by_toughness = rock.fracture_toughness_pa_sqrt_m.as_ref().and_then(|toughness| {
        let crate::model::RockStrength::Typed(typed) = &rock.strength else { return None };
        let ratio = mean(*toughness).ok()? / mean(typed.tensile_strength_pa).ok()?;
        Some(2.0 / std::f64::consts::PI * ratio * ratio)
    });
    tenth.min(LONGEST_AVERAGING_M).min(by_toughness.unwrap_or(f64::INFINITY))
}
