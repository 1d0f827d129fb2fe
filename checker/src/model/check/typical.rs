//! Typical values of common rocks, for warnings about units and slips only.
use super::super::{Rock, RockStrength, StrengthBasis};
use crate::diagnostic::Diagnostic;

/// Ranges of one kind of rock: unit weight kN/m3, modulus MPa, intact tensile strength kPa.
struct Kind {
    word: &'static str,
    unit_weight_kn_m3: [f64; 2],
    modulus_mpa: [f64; 2],
    tensile_kpa: [f64; 2],
}

const fn kind(word: &'static str, unit_weight_kn_m3: [f64; 2], modulus_mpa: [f64; 2], tensile_kpa: [f64; 2]) -> Kind {
    Kind { word, unit_weight_kn_m3, modulus_mpa, tensile_kpa }
}

/// Ranges found in rock-mechanics textbooks, intact rock, from memory and for sanity only; the first word that the name contains counts.
const KINDS: &[Kind] = &[
    kind("chalk", [15.0, 20.0], [500.0, 8_000.0], [100.0, 1_200.0]),
    kind("marl", [19.0, 24.0], [200.0, 8_000.0], [200.0, 3_000.0]),
    kind("calcarenite", [14.0, 22.0], [500.0, 20_000.0], [200.0, 4_000.0]),
    kind("eolianite", [14.0, 22.0], [500.0, 20_000.0], [200.0, 4_000.0]),
    kind("limestone", [14.0, 26.5], [500.0, 70_000.0], [200.0, 12_000.0]),
    kind("sandstone", [18.0, 26.0], [50.0, 40_000.0], [30.0, 10_000.0]),
    kind("tuff", [11.0, 20.0], [500.0, 10_000.0], [200.0, 3_000.0]),
    kind("mudstone", [21.0, 26.0], [1_000.0, 15_000.0], [500.0, 6_000.0]),
    kind("shale", [21.0, 26.0], [1_000.0, 15_000.0], [500.0, 6_000.0]),
    kind("granite", [25.5, 27.0], [30_000.0, 75_000.0], [6_000.0, 16_000.0]),
    kind("basalt", [26.0, 30.0], [40_000.0, 90_000.0], [8_000.0, 20_000.0]),
];

/// Factor beyond the range at which a value is remarked on; weight varies little, a rock mass can be much softer and weaker.
const BEYOND: [[f64; 2]; 3] = [[1.15, 1.15], [10.0, 2.0], [30.0, 3.0]];

pub(super) fn check(rock: &Rock, at: &str, findings: &mut Vec<Diagnostic>) {
    let name = rock.name.to_lowercase();
    let Some(kind) = KINDS.iter().find(|kind| name.contains(kind.word)) else { return };
    let tensile_pa = match &rock.strength {
        RockStrength::Typed(strength) if rock.strength_basis == StrengthBasis::Intact => strength.tensile_strength_pa.mean(),
        _ => f64::NAN,
    };
    let values = [
        (rock.unit_weight_n_per_m3.mean() / 1e3, kind.unit_weight_kn_m3, "unit weight", "kN/m3", "unit_weight_kn_m3"),
        (rock.youngs_modulus_pa / 1e6, kind.modulus_mpa, "modulus", "MPa", "youngs_modulus_mpa"),
        (tensile_pa / 1e3, kind.tensile_kpa, "intact tensile strength", "kPa", "tensile_strength_kpa"),
    ];
    for ((value, [low, high], what, unit, key), [below, above]) in values.into_iter().zip(BEYOND) {
        // A thousandfold slip already draws a warning about the unit where the value is read.
        if value < low / below || value > high * above {
            let message =
                format!("a {what} of {value:.4} {unit} is unusual for {}: {low} to {high} {unit} is common for the intact rock", kind.word);
            let hint = hint(value, [low, high], key);
            findings.push(Diagnostic::warning("value.unusual", format!("{at}.{key}"), message).hint(hint));
        }
    }
}

fn hint(value: f64, [low, high]: [f64; 2], key: &str) -> String {
    let thousand = value * 1e3;
    if thousand >= low / 2.0 && thousand <= high * 2.0 {
        let unit = if key.ends_with("_mpa") { "GPa" } else { "MPa" };
        return format!("likely {unit}: multiply by 1000");
    }
    "check the value and its unit".into()
}
