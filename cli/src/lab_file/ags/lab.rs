//! The laboratory groups: shear box, uniaxial compression, tension, point load, density.
use checker::diagnostic::Diagnostic;
use checker::lab::{DensityTest, LabResults, ModulusTest, OwnFit, ShearStage, ShearedAlong, StrengthTest};
use checker::model::TestedState;

use super::super::units::Quantity::{Angle, Density, Length, Plain, Rate, Share, Stress};
use super::groups::{Group, Row};
use super::table::{Heading, Stratum, Table};

/// Groups that this reader takes results from.
pub(super) const GROUPS: [&str; 6] = ["SHBG", "SHBT", "RUCS", "RTEN", "RPLT", "RDEN"];

const SHBG: [Heading; 2] = [("SHBG_PCOH", Stress, "kPa"), ("SHBG_PHI", Angle, "deg")];
const SHBT: [Heading; 6] = [
    ("SHBT_NORM", Stress, "kPa"),
    ("SHBT_PVST", Stress, "kPa"),
    ("SHBT_RVST", Stress, "kPa"),
    ("SHBT_PEAK", Stress, "kPa"),
    ("SHBT_RES", Stress, "kPa"),
    ("SHBT_DISP", Rate, "mm/min"),
];
const RUCS: [Heading; 11] = [
    ("RUCS_SDIA", Length, "mm"),
    ("RUCS_LEN", Length, "mm"),
    ("RUCS_UCS", Stress, "MPa"),
    ("RUCS_EAVG", Stress, "GPa"),
    ("RUCS_ETAN", Stress, "GPa"),
    ("RUCS_ESEC", Stress, "GPa"),
    ("RUCS_E", Stress, "GPa"),
    ("RUCS_MUAV", Plain, ""),
    ("RUCS_MUT", Plain, ""),
    ("RUCS_MUS", Plain, ""),
    ("RUCS_MU", Plain, ""),
];
const RTEN: [Heading; 3] = [("RTEN_SDIA", Length, "mm"), ("RTEN_LEN", Length, "mm"), ("RTEN_TENS", Stress, "MPa")];
const RPLT: [Heading; 2] = [("RPLT_PLS", Stress, "MPa"), ("RPLT_PLSI", Stress, "MPa")];
const RDEN: [Heading; 3] = [("RDEN_BDEN", Density, "kg/m3"), ("RDEN_DDEN", Density, "kg/m3"), ("RDEN_PORO", Share, "%")];
const GEOL: [Heading; 2] = [("GEOL_TOP", Length, "m"), ("GEOL_BASE", Length, "m")];

/// Reads every laboratory group.
pub(super) fn results(groups: &[Group], findings: &mut Vec<Diagnostic>) -> LabResults {
    let strata = strata(groups, findings);
    let mut results = LabResults::default();
    for group in groups {
        let mut table = |wanted: &[Heading]| Table::new(group, wanted, &strata, findings);
        match group.name.as_str() {
            "SHBG" => own_fits(&table(&SHBG), &mut results, findings),
            "SHBT" => shear(&table(&SHBT), groups, &mut results, findings),
            "RUCS" => uniaxial(&table(&RUCS), &mut results, findings),
            "RTEN" => tensile(&table(&RTEN), &mut results, findings),
            "RPLT" => point_load(&table(&RPLT), &mut results, findings),
            "RDEN" => density(&table(&RDEN), &mut results, findings),
            _ => {}
        }
    }
    if groups.iter().any(|g| g.name == "SHBG") && !groups.iter().any(|g| g.name == "SHBT") {
        let message = "group SHBG gives fitted shear strengths, but group SHBT with the stages behind them is missing";
        let at = "the end of file, group SHBT";
        findings.push(
            Diagnostic::error("lab.group-missing", at, message)
                .hint("ask the laboratory for the stages: a fit without them has no scatter"),
        );
    }
    results
}

/// Rocks along the holes, where group GEOL names them.
fn strata(groups: &[Group], findings: &mut Vec<Diagnostic>) -> Vec<Stratum> {
    let Some(group) = groups.iter().find(|g| g.name == "GEOL") else { return Vec::new() };
    let table = Table::new(group, &GEOL, &[], findings);
    let mut strata = Vec::new();
    for row in &group.rows {
        let ends = table.number(row, "GEOL_TOP", true, findings).zip(table.number(row, "GEOL_BASE", true, findings));
        let rock = table.text(row, "GEOL_LEG").or_else(|| table.text(row, "GEOL_GEOL"));
        if let (Some((top_m, base_m)), Some(hole), Some(rock)) = (ends, table.text(row, "LOCA_ID"), rock) {
            strata.push(Stratum { hole: hole.to_owned(), top_m, base_m, rock: rock.to_owned() });
        }
    }
    strata
}

/// Names a heading without which a group says nothing; `true` where one of them is there.
fn require(table: &Table<'_>, headings: &[&str], findings: &mut Vec<Diagnostic>) -> bool {
    let there = headings.iter().any(|h| table.has(h));
    if !there && !table.group.headings.is_empty() {
        let at = format!("line {}, group {}", table.group.line, table.group.name);
        let message = format!("heading {} is missing", headings.join(" or "));
        findings.push(Diagnostic::error("lab.heading-missing", at, message).hint("without it the group gives no result"));
    }
    there
}

fn own_fits(table: &Table<'_>, results: &mut LabResults, findings: &mut Vec<Diagnostic>) {
    for row in &table.group.rows {
        let cohesion = table.number(row, "SHBG_PCOH", true, findings);
        let angle = table.number(row, "SHBG_PHI", true, findings);
        if let Some((cohesion_pa, friction_angle_rad)) = cohesion.zip(angle) {
            results.own_fits.push(OwnFit { origin: table.origin(row), cohesion_pa, friction_angle_rad });
        }
    }
}

fn shear(table: &Table<'_>, groups: &[Group], results: &mut LabResults, findings: &mut Vec<Diagnostic>) {
    let normal = require(table, &["SHBT_NORM", "SHBT_PVST"], findings);
    let sheared = require(table, &["SHBT_PEAK", "SHBT_RES"], findings);
    if !(normal && sheared) {
        return;
    }
    let general = groups.iter().find(|g| g.name == "SHBG").map(|group| Table::new(group, &[], &[], findings));
    for row in &table.group.rows {
        let peak_pa = table.number(row, "SHBT_PEAK", false, findings);
        let residual_pa = table.number(row, "SHBT_RES", false, findings);
        // The stress at the event where the edition has it, else the one applied.
        let at_peak = table.first(row, &["SHBT_PVST", "SHBT_NORM"], true, findings);
        let at_residual = table.first(row, &["SHBT_RVST", "SHBT_NORM", "SHBT_PVST"], true, findings);
        if peak_pa.is_none() && residual_pa.is_none() {
            continue;
        }
        let Some((normal_at_peak_pa, normal_at_residual_pa)) = at_peak.zip(at_residual) else {
            let at = format!("line {}, group SHBT, heading SHBT_NORM", row.line);
            findings.push(Diagnostic::error("lab.missing-value", at, "a stage without normal stress"));
            continue;
        };
        let origin = table.origin(row);
        let about = general.as_ref().and_then(|g| g.group.rows.iter().find(|r| g.origin(r).specimen == origin.specimen).map(|r| (g, r)));
        let said = |heading: &str| about.and_then(|(g, r)| g.text(r, heading)).unwrap_or("").to_lowercase();
        results.shear.push(ShearStage {
            origin,
            normal_at_peak_pa,
            peak_pa,
            normal_at_residual_pa,
            residual_pa,
            rate_m_per_s: table.number(row, "SHBT_DISP", false, findings),
            drainage: None,
            along: along(&[said("SHBG_REM"), said("SPEC_DESC"), said("SHBG_COND")].join(" ")),
            remoulded: said("SHBG_COND").contains("remould") || said("SHBG_COND").contains("recompact"),
            state: state(&said("SPEC_PREP")),
        });
    }
}

fn along(words: &str) -> ShearedAlong {
    let joint = ["joint", "discontinuity", "bedding plane", "fracture"].iter().any(|word| words.contains(word));
    if joint { ShearedAlong::Joint } else { ShearedAlong::NotStated }
}

fn state(words: &str) -> Option<TestedState> {
    let words = words.to_lowercase();
    if words.contains("saturat") || words.contains("soaked") {
        Some(TestedState::Saturated)
    } else if words.contains("dry") || words.contains("dried") {
        Some(TestedState::Dry)
    } else if words.contains("natural") || words.contains("as received") || words.contains("in situ moisture") {
        Some(TestedState::Natural)
    } else {
        None
    }
}

fn uniaxial(table: &Table<'_>, results: &mut LabResults, findings: &mut Vec<Diagnostic>) {
    if !require(table, &["RUCS_UCS"], findings) {
        return;
    }
    for row in &table.group.rows {
        let origin = table.origin(row);
        let modulus = table.first(row, &["RUCS_EAVG", "RUCS_ETAN", "RUCS_ESEC", "RUCS_E"], false, findings);
        if let Some(youngs_modulus_pa) = modulus {
            let poissons_ratio = table.first(row, &["RUCS_MUAV", "RUCS_MUT", "RUCS_MUS", "RUCS_MU"], false, findings);
            results.modulus.push(ModulusTest { origin: origin.clone(), youngs_modulus_pa, poissons_ratio });
        }
        if let Some(value_pa) = table.number(row, "RUCS_UCS", false, findings) {
            let [diameter_m, length_m] = ["RUCS_SDIA", "RUCS_LEN"].map(|h| table.number(row, h, false, findings));
            results.uniaxial.push(StrengthTest { origin, value_pa, diameter_m, length_m, state: condition(table, row, "RUCS_COND") });
        }
    }
}

fn condition(table: &Table<'_>, row: &Row, heading: &str) -> Option<TestedState> {
    table.text(row, heading).or_else(|| table.text(row, "SPEC_PREP")).and_then(state)
}

fn tensile(table: &Table<'_>, results: &mut LabResults, findings: &mut Vec<Diagnostic>) {
    if !require(table, &["RTEN_TENS"], findings) {
        return;
    }
    for row in &table.group.rows {
        if let Some(value_pa) = table.number(row, "RTEN_TENS", false, findings) {
            let [diameter_m, length_m] = ["RTEN_SDIA", "RTEN_LEN"].map(|h| table.number(row, h, false, findings));
            let state = condition(table, row, "RTEN_COND");
            results.tensile.push(StrengthTest { origin: table.origin(row), value_pa, diameter_m, length_m, state });
        }
    }
}

fn point_load(table: &Table<'_>, results: &mut LabResults, findings: &mut Vec<Diagnostic>) {
    if !require(table, &["RPLT_PLSI"], findings) {
        return;
    }
    let mut without = 0;
    for row in &table.group.rows {
        let reduced = table.number(row, "RPLT_PLSI", false, findings);
        if reduced.is_none() && table.number(row, "RPLT_PLS", false, findings).is_some() {
            without += 1;
        }
        if let Some(value_pa) = reduced {
            let state = condition(table, row, "RPLT_REM");
            results.point_load.push(StrengthTest { origin: table.origin(row), value_pa, diameter_m: None, length_m: None, state });
        }
    }
    if 0 < without {
        let at = format!("line {}, group RPLT, heading RPLT_PLSI", table.group.line);
        let message = format!("{without} point load tests give no index for 50 mm and no size to reduce them by; they are left out");
        findings.push(Diagnostic::warning("lab.point-load-size", at, message));
    }
}

fn density(table: &Table<'_>, results: &mut LabResults, findings: &mut Vec<Diagnostic>) {
    if !require(table, &["RDEN_BDEN", "RDEN_DDEN"], findings) {
        return;
    }
    for row in &table.group.rows {
        let [bulk_kg_per_m3, dry_kg_per_m3] = ["RDEN_BDEN", "RDEN_DDEN"].map(|h| table.number(row, h, false, findings));
        let porosity = table.number(row, "RDEN_PORO", false, findings);
        if porosity.is_some_and(|n| 1.0 <= n) {
            let at = format!("line {}, group RDEN, heading RDEN_PORO", row.line);
            findings.push(Diagnostic::error("lab.value", at, "porosity must be under 100 %"));
        }
        if bulk_kg_per_m3.is_some() || dry_kg_per_m3.is_some() {
            results.density.push(DensityTest { origin: table.origin(row), bulk_kg_per_m3, dry_kg_per_m3, porosity });
        }
    }
}
