//! The rock of a model, ready to paste, from a laboratory summary.
use std::fmt::Write;

use checker::lab::{LabSummary, rock_strength};
use checker::model::{TestedState, Uncertain};

use super::text::significant;

/// TOML of a rock table; what no test of the file gives stands as a comment that says so.
pub fn rock_table(name: &str, source: &str, summary: &LabSummary) -> String {
    let mut out = String::new();
    line(&mut out, &format!("[rocks.{}]", toml_string(name)));
    line(&mut out, &format!("# from {}", source.replace(char::is_control, " ")));
    weights(&mut out, summary);
    stiffness(&mut out, summary);
    line(&mut out, "strength_basis = \"intact\"");
    line(&mut out, "# mass_factor = { tension = , cohesion = }   # required: from specimen to rock mass; no test gives it");
    strengths(&mut out, summary);
    if let Some(tested) = summary.tested {
        let word = match tested {
            TestedState::Dry => "dry",
            TestedState::Natural => "natural",
            TestedState::Saturated => "saturated",
        };
        line(&mut out, &format!("tested = \"{word}\""));
    }
    if let Some(value) = &summary.uniaxial {
        line(&mut out, &format!("uniaxial_strength_mpa = {}", number(value.sample.uncertain(), 1e6)));
    }
    out
}

fn weights(out: &mut String, summary: &LabSummary) {
    match &summary.unit_weight {
        Some(value) => line(out, &format!("unit_weight_kn_m3 = {}", number(value.sample.uncertain(), 1e3))),
        None => line(out, "# unit_weight_kn_m3 =    # required; no bulk density in the file"),
    }
    if let Some(saturated) = &summary.saturated_unit_weight {
        line(out, &format!("saturated_unit_weight_kn_m3 = {}", number(saturated.uncertain(), 1e3)));
    }
}

fn stiffness(out: &mut String, summary: &LabSummary) {
    let measured = summary.youngs_modulus.as_ref().map_or_else(String::new, |m| format!("; specimens: {}", significant(m.mean / 1e6)));
    line(out, &format!("# youngs_modulus_mpa =    # required, of the rock mass{measured}"));
    match &summary.poissons_ratio {
        Some(ratio) => line(out, &format!("poissons_ratio = {}", significant(ratio.mean))),
        None => line(out, "# poissons_ratio =    # required; not in the file"),
    }
}

fn strengths(out: &mut String, summary: &LabSummary) {
    let Ok(rock) = rock_strength(summary) else {
        line(out, "# strengths: the file lacks tensile tests (3 or more) or a peak shear fit; what it has:");
        if let Some(value) = &summary.tensile {
            line(out, &format!("# tensile_strength_kpa = {}", number(value.sample.uncertain(), 1e3)));
        }
        if let Some(fit) = &summary.peak {
            line(out, &format!("# cohesion_kpa = {}", significant(fit.cohesion_pa / 1e3)));
            line(out, &format!("# friction_angle_deg = {}", significant(fit.friction_angle_rad().to_degrees())));
        }
        return;
    };
    line(out, &format!("tests = {}", rock.tests));
    line(out, &format!("tensile_strength_kpa = {}", number(rock.cohesive.tensile_strength_pa, 1e3)));
    line(out, &format!("cohesion_kpa = {}", number(rock.cohesive.cohesion_pa, 1e3)));
    line(out, &format!("friction_angle_deg = {}", number(rock.cohesive.friction_angle_rad, 1_f64.to_radians())));
    line(out, &format!("correlation = {{ cohesion_friction = {:.2} }}", rock.cohesive.cohesion_friction_correlation));
}

fn line(out: &mut String, text: &str) {
    let _ = writeln!(out, "{text}");
}

fn number(value: Uncertain, unit: f64) -> String {
    match value {
        Uncertain::Lognormal { mean, cov } => format!("{{ mean = {}, cov = {} }}", significant(mean / unit), significant(cov)),
        Uncertain::Exact(value) => significant(value / unit),
        // The fits give no other kind.
        Uncertain::Normal { mean, standard_deviation } | Uncertain::TruncatedNormal { mean, standard_deviation, .. } => {
            format!(
                "{{ mean = {}, standard_deviation = {}, distribution = \"normal\" }}",
                significant(mean / unit),
                significant(standard_deviation / unit)
            )
        }
        Uncertain::Uniform { min, max } => format!("{{ min = {}, max = {} }}", significant(min / unit), significant(max / unit)),
    }
}

/// A basic TOML string.
fn toml_string(text: &str) -> String {
    let mut out = String::from("\"");
    for c in text.chars() {
        match c {
            '"' => out.push_str("\\\""),
            '\\' => out.push_str("\\\\"),
            c if c.is_control() => out.push(' '),
            c => out.push(c),
        }
    }
    out.push('"');
    out
}
