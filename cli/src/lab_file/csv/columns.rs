//! The columns of a CSV file: known names, units in their endings.
use checker::diagnostic::Diagnostic;

use super::super::units::Quantity;

/// Text columns.
pub(super) const TEXTS: [&str; 7] = ["specimen", "test", "rock", "state", "drainage", "sheared_along", "remarks"];

/// Number columns without their ending, and what they measure.
pub(super) const NUMBERS: [(&str, Quantity); 17] = [
    ("normal_stress", Quantity::Stress),
    ("residual_normal_stress", Quantity::Stress),
    ("peak_shear_stress", Quantity::Stress),
    ("residual_shear_stress", Quantity::Stress),
    ("shear_rate", Quantity::Rate),
    ("uniaxial_strength", Quantity::Stress),
    ("tensile_strength", Quantity::Stress),
    ("point_load_index", Quantity::Stress),
    ("youngs_modulus", Quantity::Stress),
    ("poissons_ratio", Quantity::Plain),
    ("load", Quantity::Force),
    ("diameter", Quantity::Length),
    ("length", Quantity::Length),
    ("width", Quantity::Length),
    ("bulk_density", Quantity::Density),
    ("dry_density", Quantity::Density),
    ("porosity", Quantity::Share),
];

/// One column.
#[derive(Debug, Clone, PartialEq)]
struct Column {
    /// Name without unit.
    base: &'static str,
    /// Name as in the file.
    full: String,
    /// Factor to SI; `None` of a text.
    factor: Option<f64>,
}

/// All columns of a file.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Columns {
    columns: Vec<Column>,
}

impl Columns {
    /// Recognizes the header; `None` after at least one error was found.
    pub(super) fn new(header: &csv::StringRecord, line: usize, findings: &mut Vec<Diagnostic>) -> Option<Self> {
        let at = format!("line {line}");
        let before = findings.len();
        let mut columns: Vec<Column> = Vec::new();
        for field in header {
            match recognize(field) {
                Ok(column) => {
                    if let Some(twin) = columns.iter().find(|c| c.base == column.base) {
                        let message = format!("columns `{}` and `{field}` give the same quantity", twin.full);
                        findings.push(Diagnostic::error("lab.column-twice", at.clone(), message));
                    }
                    columns.push(column);
                }
                Err((message, hint)) => findings.push(Diagnostic::error("lab.column", at.clone(), message).hint(hint)),
            }
        }
        for required in ["specimen", "test"] {
            if findings.len() == before && !columns.iter().any(|c| c.base == required) {
                findings
                    .push(Diagnostic::error("lab.column", at.clone(), format!("column `{required}` is missing")).hint("see docs/lab.md"));
            }
        }
        (findings.len() == before).then_some(Self { columns })
    }

    /// Number of columns.
    pub(super) fn len(&self) -> usize {
        self.columns.len()
    }

    /// Position, full name and factor of a column.
    pub(super) fn find(&self, base: &str) -> Option<(usize, &str, Option<f64>)> {
        self.columns.iter().position(|c| c.base == base).map(|i| (i, self.columns[i].full.as_str(), self.columns[i].factor))
    }
}

fn recognize(field: &str) -> Result<Column, (String, String)> {
    let lower = field.to_ascii_lowercase();
    if let Some(base) = TEXTS.into_iter().find(|text| *text == lower) {
        return Ok(Column { base, full: field.to_owned(), factor: None });
    }
    // The longest name that fits: `residual_normal_stress_kpa` is not `residual_…` of something else.
    let fitting = NUMBERS.iter().filter(|(base, _)| lower == *base || lower.strip_prefix(base).is_some_and(|rest| rest.starts_with('_')));
    if let Some((base, quantity)) = fitting.max_by_key(|(base, _)| base.len()) {
        let ending = lower[base.len()..].trim_start_matches('_');
        if let Some(factor) = quantity.suffix_factor(ending) {
            return Ok(Column { base, full: field.to_owned(), factor: Some(factor) });
        }
        let endings: Vec<String> = quantity.suffixes().iter().map(|s| format!("`{base}_{s}`")).collect();
        let hint = if endings.is_empty() { format!("call it `{base}`") } else { format!("one of {}", endings.join(", ")) };
        return Err((format!("column `{field}` needs the unit of {} in its name", quantity.name()), hint));
    }
    Err((format!("column `{field}` is not known"), nearest(&lower)))
}

fn nearest(name: &str) -> String {
    let all = TEXTS.iter().map(|t| (*t).to_owned());
    let all = all.chain(NUMBERS.iter().flat_map(|(base, quantity)| match quantity.suffixes().as_slice() {
        [] => vec![(*base).to_owned()],
        suffixes => suffixes.iter().map(|s| format!("{base}_{s}")).collect(),
    }));
    all.map(|known| (strsim::jaro_winkler(name, &known), known))
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .filter(|(likeness, _)| 0.8 < *likeness)
        .map_or_else(|| "see docs/lab.md for the columns".to_owned(), |(_, known)| format!("`{known}`?"))
}
