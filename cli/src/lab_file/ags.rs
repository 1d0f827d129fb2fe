//! Laboratory groups of the open AGS4 transfer format, editions 4.0.3 to 4.2.
use checker::diagnostic::Diagnostic;

mod groups;
mod lab;
mod table;

use super::{Format, LabFile};
use groups::Group;

/// Editions this reader was written for.
const EDITIONS: [&str; 5] = ["4.0.3", "4.0.4", "4.1", "4.1.1", "4.2"];
/// Groups that every transfer must hold.
const REQUIRED: [&str; 4] = ["PROJ", "TRAN", "UNIT", "TYPE"];

/// Reads the laboratory groups; findings are added to `findings`, errors among them void the result.
pub(super) fn read(text: &str, findings: &mut Vec<Diagnostic>) -> LabFile {
    let groups = groups::parse(text, findings);
    let last_line = text.lines().count();
    for required in REQUIRED {
        if !groups.iter().any(|g| g.name == required) {
            let message = format!("group {required} is missing; every AGS4 transfer must hold it");
            let hint = "the file may be cut off; ask the laboratory to send it again";
            findings.push(
                Diagnostic::error("lab.group-missing", format!("line {last_line} (end of file), group {required}"), message).hint(hint),
            );
        }
    }
    let edition = edition(&groups, findings);
    warn_unlisted_units(&groups, findings);
    let results = lab::results(&groups, findings);
    LabFile { format: Format::Ags4(edition), results }
}

fn edition(groups: &[Group], findings: &mut Vec<Diagnostic>) -> String {
    let Some(tran) = groups.iter().find(|g| g.name == "TRAN") else { return String::new() };
    let stated = tran.rows.first().and_then(|row| tran.field(row, "TRAN_AGS")).unwrap_or("").trim().to_owned();
    if !EDITIONS.contains(&stated.as_str()) {
        let at = format!("line {}, group TRAN, heading TRAN_AGS", tran.rows.first().map_or(tran.line, |row| row.line));
        let message = format!("edition `{stated}` is not one of {}; read as the newest of them", EDITIONS.join(", "));
        findings.push(Diagnostic::warning("lab.edition", at, message));
    }
    stated
}

/// Units used by laboratory groups and not listed in group UNIT.
fn warn_unlisted_units(groups: &[Group], findings: &mut Vec<Diagnostic>) {
    let Some(list) = groups.iter().find(|g| g.name == "UNIT") else { return };
    let listed: Vec<&str> = list.rows.iter().filter_map(|row| list.field(row, "UNIT_UNIT")).collect();
    for group in groups.iter().filter(|g| lab::GROUPS.contains(&g.name.as_str())) {
        let mut unlisted: Vec<&str> =
            group.units.iter().map(String::as_str).filter(|unit| !unit.is_empty() && !listed.contains(unit)).collect();
        unlisted.sort_unstable();
        unlisted.dedup();
        if !unlisted.is_empty() {
            let at = format!("line {}, group {}", group.unit_line, group.name);
            let message = format!("units not listed in group UNIT: {}", unlisted.join(", "));
            findings.push(Diagnostic::warning("lab.unit-unlisted", at, message));
        }
    }
}
