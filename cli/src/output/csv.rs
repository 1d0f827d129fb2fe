//! `depths.csv`: one row a depth, situation, inputs and check, for spreadsheets and scripts.
use checker::outcome::{CheckResult, Outcome};

/// Column names; units are part of them.
pub const COLUMNS: [&str; 20] = [
    "depth_m",
    "situation",
    "inputs",
    "check",
    "demand_kpa",
    "capacity_kpa",
    "utilization",
    "error",
    "background_kpa",
    "over",
    "x_m",
    "z_m",
    "rock",
    "averaging_length_m",
    "closed_form_demand_kpa",
    "k0_case",
    "demand_kn_per_m",
    "capacity_kn_per_m",
    "zone_m2",
    "remarks",
];

/// The table as text. Numbers have a decimal point; an empty field means "no value".
///
/// # Errors
/// [`csv::Error`] as the writer reports it.
pub fn depths(outcome: &Outcome) -> Result<Vec<u8>, csv::Error> {
    let mut writer = csv::Writer::from_writer(Vec::new());
    writer.write_record(COLUMNS)?;
    if outcome.depths.is_empty() {
        for check in &outcome.surveyed.checks {
            writer.write_record(row(outcome.surveyed.depth_m, check))?;
        }
    }
    for depth in &outcome.depths {
        for check in &depth.checks {
            writer.write_record(row(depth.depth_m, check))?;
        }
    }
    writer.into_inner().map_err(|error| error.into_error().into())
}

fn row(depth_m: f64, check: &CheckResult) -> [String; 20] {
    let optional = |value: Option<f64>| value.map_or_else(String::new, |value| value.to_string());
    let remarks = [(check.beyond_apex, "beyond apex"), (check.short_segment, "segment cut below half its length")];
    let remarks: Vec<&str> = remarks.iter().filter(|(holds, _)| *holds).map(|(_, text)| *text).collect();
    [
        depth_m.to_string(),
        text_cell(&check.situation),
        check.inputs.to_owned(),
        check.check.to_owned(),
        check.demand_kpa.to_string(),
        check.capacity_kpa.to_string(),
        optional(check.utilization),
        check.error.to_string(),
        optional(check.background_kpa),
        check.over.to_string(),
        check.at[0].to_string(),
        check.at[1].to_string(),
        text_cell(&check.rock),
        optional(check.averaging_length_m),
        optional(check.closed_form_demand_kpa),
        check.k0_case.clone().unwrap_or_default(),
        optional(check.demand_kn_per_m),
        optional(check.capacity_kn_per_m),
        optional(check.zone_m2),
        remarks.join("; "),
    ]
}

/// A name from the model file; a leading sign would make a spreadsheet take it for a formula.
fn text_cell(text: &str) -> String {
    if text.starts_with(['=', '+', '-', '@', '\t', '\r']) { format!("'{text}") } else { text.to_owned() }
}

#[cfg(test)]
mod tests {
    use super::super::fixture;
    use super::{COLUMNS, depths, text_cell};

    #[test]
    fn one_row_a_depth_situation_inputs_and_check() {
        let outcome = fixture::outcome();
        let expected: usize = outcome.depths.iter().map(|depth| depth.checks.len()).sum();
        let bytes = depths(&outcome).unwrap();
        let mut reader = csv::Reader::from_reader(bytes.as_slice());
        assert_eq!(reader.headers().unwrap().iter().collect::<Vec<_>>(), COLUMNS);
        let rows: Vec<csv::StringRecord> = reader.records().map(Result::unwrap).collect();
        assert_eq!(rows.len(), expected);
        let first = &outcome.depths[0].checks[0];
        assert_eq!(rows[0][4].parse::<f64>().unwrap().to_bits(), first.demand_kpa.to_bits());
    }

    #[test]
    fn a_name_never_becomes_a_formula() {
        assert_eq!(text_cell("=1+1"), "'=1+1");
        assert_eq!(text_cell("clay, grey"), "clay, grey");
    }
}
