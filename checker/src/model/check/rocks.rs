//! Rocks: strengths where they are needed, strengths that fit each other, values that fit the rock's name.
use super::super::{Carries, Cohesive, Groundwater, Model, RemedyKind, Rock, RockStrength, SeaLevel, TestedState};
use super::layers::level_m;
use super::typical;
use crate::diagnostic::{Diagnostic, child};

/// Height above the sea that spray keeps wet, m. Common practice, no source.
const SPLASH_ZONE_M: f64 = 5.0;

/// Modulus over tensile strength below which the modulus is likely in another unit; rocks lie between about 300 and 20,000.
const LEAST_MODULUS_RATIO: f64 = 30.0;

pub(super) fn check(model: &Model, findings: &mut Vec<Diagnostic>) {
    for (i_rock, rock) in model.rocks.iter().enumerate() {
        let at = child("rocks", &rock.name);
        let layers = || model.layers.iter().filter(move |layer| layer.rock == i_rock);
        let carries = layers().any(|layer| layer.carries == Carries::LoadAndTension);
        let used = layers().next().is_some() || is_fill(model, i_rock);
        if !used {
            let message = format!("the rock {:?} is used nowhere", rock.name);
            findings.push(Diagnostic::warning("rock.unused", at.clone(), message).hint("leave it out, or name it in a layer"));
        }
        match &rock.strength {
            RockStrength::None if carries => {
                let message = format!("the rock {:?} carries tension but has no strength", rock.name);
                let hint = "add tensile_strength_kpa, cohesion_kpa and friction_angle_deg, all three; or write carries = \"load only\" in its layer";
                findings.push(Diagnostic::error("rock.no-strength", at.clone(), message).hint(hint));
            }
            RockStrength::Typed(strength) => typed(rock, strength, &at, findings),
            RockStrength::None | RockStrength::Lab(_) | RockStrength::HoekBrown(_) => {}
        }
        if carries {
            wetting(model, i_rock, rock, &at, findings);
        }
        saturated(rock, &at, findings);
        typical::check(rock, &at, findings);
    }
}

fn is_fill(model: &Model, i_rock: usize) -> bool {
    model.remedies.iter().any(|remedy| matches!(remedy.kind, RemedyKind::Fill { rock, .. } if rock == i_rock))
}

fn typed(rock: &Rock, strength: &Cohesive, at: &str, findings: &mut Vec<Diagnostic>) {
    let tension_pa = strength.tensile_strength_pa.mean() * rock.mass_factor.tension;
    let cohesion_pa = strength.cohesion_pa.mean() * rock.mass_factor.cohesion;
    let apex_pa = cohesion_pa / strength.friction_angle_rad.mean().tan();
    // The apex of the Mohr-Coulomb law: no tension beyond c / tan(phi) can be carried.
    if tension_pa > apex_pa {
        let message = format!(
            "the tensile strength of the rock mass, {:.0} kPa, is above c / tan(phi) = {:.0} kPa, where the shear strength ends",
            tension_pa / 1e3,
            apex_pa / 1e3
        );
        let hint = "the calculation cuts it to c / tan(phi); check tensile strength, cohesion, friction angle and mass_factor";
        findings.push(Diagnostic::warning("rock.tension-cut", format!("{at}.tensile_strength_kpa"), message).hint(hint));
    }
    if rock.youngs_modulus_pa < LEAST_MODULUS_RATIO * strength.tensile_strength_pa.mean() {
        let message = format!(
            "a modulus of {:.4} MPa is only {:.1} times the tensile strength; was another unit meant?",
            rock.youngs_modulus_pa / 1e6,
            rock.youngs_modulus_pa / strength.tensile_strength_pa.mean()
        );
        let hint = "likely GPa: 8 GPa is 8000 MPa";
        findings.push(Diagnostic::warning("value.unit", format!("{at}.youngs_modulus_mpa"), message).hint(hint));
    }
}

/// Strengths of dry specimens need a factor where the rock is wet.
fn wetting(model: &Model, i_rock: usize, rock: &Rock, at: &str, findings: &mut Vec<Diagnostic>) {
    let given = !model.defaults_used.iter().any(|line| line.starts_with(&format!("{at}.wet_factor = ")));
    if rock.tested != Some(TestedState::Dry) || given {
        return;
    }
    let Some(first) = model.section.surface.first() else { return };
    let wet_to_m = water_levels_m(model).fold(first.z_m + SPLASH_ZONE_M, f64::max);
    let reaches_down = model.layers.iter().any(|layer| {
        let base = layer.base.as_ref().map_or(f64::NEG_INFINITY, |base| level_m(base, first.x_m));
        layer.rock == i_rock && base < wet_to_m
    });
    if reaches_down {
        let message = format!(
            "the strengths of {:?} are those of dry specimens, but the rock reaches below {wet_to_m} m, where it is wet",
            rock.name
        );
        let hint = "add wet_factor: strength saturated over strength dry; weak limestones and sandstones lose some 20 to 50 %";
        findings.push(Diagnostic::error("rock.wet-factor", format!("{at}.tested"), message).hint(hint));
    }
}

fn water_levels_m(model: &Model) -> impl Iterator<Item = f64> + '_ {
    model.situations.iter().flat_map(|situation| {
        let sea = if let SeaLevel::Level(z_m) = situation.sea_level { Some(z_m + SPLASH_ZONE_M) } else { None };
        let table = if let Some(Groundwater::Table(points)) = &situation.groundwater { points.as_slice() } else { &[] };
        table.iter().map(|point| point[1]).chain(sea)
    })
}

fn saturated(rock: &Rock, at: &str, findings: &mut Vec<Diagnostic>) {
    let (moist, wet) = (rock.unit_weight_n_per_m3.mean(), rock.saturated_unit_weight_n_per_m3.mean());
    if wet < moist {
        let message = format!("the saturated unit weight, {:.2} kN/m3, is less than the moist one, {:.2} kN/m3", wet / 1e3, moist / 1e3);
        let diagnostic = Diagnostic::error("rock.saturated-weight", format!("{at}.saturated_unit_weight_kn_m3"), message);
        findings.push(diagnostic.hint("swap the two, or leave the saturated one out").also(format!("{at}.unit_weight_kn_m3")));
    }
}
