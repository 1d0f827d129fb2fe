//! One row of a CSV file into one result.
use checker::diagnostic::Diagnostic;
use checker::lab::{
    DensityTest, Drainage, LabResults, ModulusTest, Origin, ShearStage, ShearedAlong, StrengthTest, disc_tensile_strength_pa,
    equivalent_core_diameter_m, point_load_index_pa,
};
use checker::model::TestedState;

use super::columns::Columns;

/// A row with its columns.
pub(super) struct Row<'a> {
    pub line: usize,
    pub fields: &'a csv::StringRecord,
    pub columns: &'a Columns,
}

/// Reads one row's values and remembers what is wrong with it.
struct Cells<'a> {
    row: &'a Row<'a>,
    faults: Vec<Diagnostic>,
}

/// Adds the row's result, or its faults.
pub(super) fn add(row: &Row<'_>, results: &mut LabResults, findings: &mut Vec<Diagnostic>) {
    let mut cells = Cells { row, faults: Vec::new() };
    let origin = Origin { line: row.line, specimen: cells.specimen(), rock: cells.text("rock").map(str::to_owned) };
    match cells.text("test").map(str::to_ascii_lowercase).as_deref() {
        Some("direct shear") => shear(&mut cells, origin, results),
        Some("uniaxial" | "uniaxial compression") => uniaxial(&mut cells, origin, results),
        Some("tensile" | "disc" | "direct tension") => tensile(&mut cells, origin, results),
        Some("point load") => point_load(&mut cells, origin, results),
        Some("density") => density(&mut cells, origin, results),
        other => {
            let got = other.map_or_else(|| "column `test` is empty".to_owned(), |other| format!("test `{other}` is not known"));
            cells.fault("lab.test", got, "one of `direct shear`, `uniaxial`, `tensile`, `point load`, `density`");
        }
    }
    findings.append(&mut cells.faults);
}

fn shear(cells: &mut Cells<'_>, origin: Origin, results: &mut LabResults) {
    let normal = cells.number("normal_stress", Sign::NotNegative);
    let residual_normal = cells.number("residual_normal_stress", Sign::NotNegative);
    let (peak_pa, residual_pa) = (cells.number("peak_shear_stress", Sign::Positive), cells.number("residual_shear_stress", Sign::Positive));
    let drainage = cells.word("drainage", &[("drained", Drainage::Drained), ("undrained", Drainage::Undrained)]);
    let along = cells.word("sheared_along", &[("rock", ShearedAlong::Intact), ("joint", ShearedAlong::Joint)]);
    if peak_pa.is_none() && residual_pa.is_none() {
        cells.missing("peak_shear_stress or residual_shear_stress");
    }
    let Some(normal) = normal else { return cells.missing("normal_stress") };
    results.shear.push(ShearStage {
        origin,
        normal_at_peak_pa: normal,
        peak_pa,
        normal_at_residual_pa: residual_normal.unwrap_or(normal),
        residual_pa,
        rate_m_per_s: cells.number("shear_rate", Sign::Positive),
        drainage,
        along: along.unwrap_or(ShearedAlong::NotStated),
        remoulded: false,
        state: cells.state(),
    });
}

fn uniaxial(cells: &mut Cells<'_>, origin: Origin, results: &mut LabResults) {
    let [diameter_m, length_m] = ["diameter", "length"].map(|name| cells.number(name, Sign::Positive));
    let from_load = cells.number("load", Sign::Positive).zip(diameter_m).map(|(load, d)| load / (0.25 * std::f64::consts::PI * d * d));
    let modulus = cells.number("youngs_modulus", Sign::Positive);
    if let Some(youngs_modulus_pa) = modulus {
        let poissons_ratio = cells.number("poissons_ratio", Sign::Positive);
        results.modulus.push(ModulusTest { origin: origin.clone(), youngs_modulus_pa, poissons_ratio });
    }
    match cells.number("uniaxial_strength", Sign::Positive).or(from_load) {
        Some(value_pa) => results.uniaxial.push(StrengthTest { origin, value_pa, diameter_m, length_m, state: cells.state() }),
        None if modulus.is_none() => cells.missing("uniaxial_strength (or load and diameter)"),
        None => {}
    }
}

fn tensile(cells: &mut Cells<'_>, origin: Origin, results: &mut LabResults) {
    let [diameter_m, length_m, load] = ["diameter", "length", "load"].map(|name| cells.number(name, Sign::Positive));
    let from_load = match (load, diameter_m, length_m) {
        (Some(load), Some(d), Some(t)) => Some(disc_tensile_strength_pa(load, d, t)),
        _ => None,
    };
    let Some(value_pa) = cells.number("tensile_strength", Sign::Positive).or(from_load) else {
        return cells.missing("tensile_strength (or load, diameter and length)");
    };
    results.tensile.push(StrengthTest { origin, value_pa, diameter_m, length_m, state: cells.state() });
}

fn point_load(cells: &mut Cells<'_>, origin: Origin, results: &mut LabResults) {
    let [diameter_m, width_m, load] = ["diameter", "width", "load"].map(|name| cells.number(name, Sign::Positive));
    let equivalent = diameter_m.map(|d| width_m.map_or(d, |w| equivalent_core_diameter_m(w, d)));
    let from_load = load.zip(equivalent).map(|(load, d)| point_load_index_pa(load, d));
    let Some(value_pa) = cells.number("point_load_index", Sign::Positive).or(from_load) else {
        return cells.missing("point_load_index (or load and diameter)");
    };
    results.point_load.push(StrengthTest { origin, value_pa, diameter_m: equivalent, length_m: None, state: cells.state() });
}

fn density(cells: &mut Cells<'_>, origin: Origin, results: &mut LabResults) {
    let [bulk_kg_per_m3, dry_kg_per_m3, porosity] =
        ["bulk_density", "dry_density", "porosity"].map(|name| cells.number(name, Sign::Positive));
    if bulk_kg_per_m3.is_none() && dry_kg_per_m3.is_none() {
        return cells.missing("bulk_density or dry_density");
    }
    if porosity.is_some_and(|n| 1.0 <= n) {
        cells.fault("lab.value", "porosity must be under 100 %".to_owned(), "see docs/lab.md");
    }
    results.density.push(DensityTest { origin, bulk_kg_per_m3, dry_kg_per_m3, porosity });
}

/// Which numbers a cell may hold.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Sign {
    Positive,
    NotNegative,
}

impl<'a> Cells<'a> {
    fn at(&self) -> String {
        format!("line {}", self.row.line)
    }

    fn fault(&mut self, code: &'static str, message: String, hint: &str) {
        self.faults.push(Diagnostic::error(code, self.at(), message).hint(hint));
    }

    fn missing(&mut self, what: &str) {
        // A cell that was there and wrong has its own fault.
        if self.faults.is_empty() {
            self.fault("lab.missing-value", format!("this test needs {what}"), "see docs/lab.md");
        }
    }

    fn text(&self, base: &str) -> Option<&'a str> {
        let (i, ..) = self.row.columns.find(base)?;
        self.row.fields.get(i).filter(|text| !text.is_empty())
    }

    fn specimen(&mut self) -> String {
        let name = self.text("specimen");
        if name.is_none() {
            self.fault("lab.specimen", "column `specimen` is empty".to_owned(), "name the specimen as on its box");
        }
        name.unwrap_or_default().to_owned()
    }

    fn word<T: Copy>(&mut self, base: &str, known: &[(&str, T)]) -> Option<T> {
        let text = self.text(base)?;
        let found = known.iter().find(|(word, _)| word.eq_ignore_ascii_case(text)).map(|(_, value)| *value);
        if found.is_none() {
            let words: Vec<String> = known.iter().map(|(word, _)| format!("`{word}`")).collect();
            self.fault("lab.word", format!("{base} `{text}` is not known"), &format!("one of {}", words.join(", ")));
        }
        found
    }

    fn state(&mut self) -> Option<TestedState> {
        self.word("state", &[("dry", TestedState::Dry), ("natural", TestedState::Natural), ("saturated", TestedState::Saturated)])
    }

    /// The cell in SI units; `None` where it is empty or wrong.
    fn number(&mut self, base: &str, sign: Sign) -> Option<f64> {
        let (i, full, factor) = self.row.columns.find(base)?;
        let text = self.row.fields.get(i).filter(|text| !text.is_empty())?;
        let lowest = if sign == Sign::Positive { "above 0" } else { "0 or more" };
        match text.parse::<f64>() {
            Ok(value) if value.is_finite() && (0.0 < value || (sign == Sign::NotNegative && 0.0 <= value)) => {
                Some(value * factor.unwrap_or(1.0))
            }
            Ok(value) => {
                self.fault(
                    "lab.value",
                    format!("`{full}` must be a finite number {lowest}, got {value}"),
                    "leave a value that was not measured empty",
                );
                None
            }
            Err(_) => {
                let hint =
                    if text.contains(',') { "write a decimal point, not a comma" } else { "leave a value that was not measured empty" };
                self.fault("lab.value", format!("`{full}` must be a number, got `{text}`"), hint);
                None
            }
        }
    }
}
