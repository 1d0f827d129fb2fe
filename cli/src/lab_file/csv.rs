//! Laboratory results from CSV: one row a result, units in the column names.
use checker::diagnostic::Diagnostic;
use checker::lab::LabResults;

mod columns;
mod rows;

use columns::Columns;

/// Names of all columns, numbers without the ending that gives their unit, and the endings.
#[cfg(test)]
pub(super) fn column_names() -> Vec<(&'static str, Vec<&'static str>)> {
    let texts = columns::TEXTS.iter().map(|text| (*text, Vec::new()));
    texts.chain(columns::NUMBERS.iter().map(|(base, quantity)| (*base, quantity.suffixes()))).collect()
}

/// Reads all rows; findings are added to `findings`, errors among them void the result.
pub(super) fn read(text: &str, findings: &mut Vec<Diagnostic>) -> LabResults {
    let mut results = LabResults::default();
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(delimiter(text))
        .comment(Some(b'#'))
        .trim(csv::Trim::All)
        .has_headers(false)
        .flexible(true)
        .from_reader(text.as_bytes());
    let mut columns: Option<Columns> = None;
    let mut record = csv::StringRecord::new();
    loop {
        match reader.read_record(&mut record) {
            Ok(true) => {}
            Ok(false) => break,
            Err(error) => {
                findings.push(Diagnostic::error("lab.csv", "the file", error.to_string()));
                break;
            }
        }
        let line = record.position().map_or(0, |p| usize::try_from(p.line()).unwrap_or(usize::MAX));
        if record.iter().any(|field| field.contains('\n')) {
            let message = "a quote that is opened in this row is not closed on its line";
            findings.push(Diagnostic::error("lab.quote", format!("line {line}"), message));
            break;
        }
        let Some(known) = &columns else {
            columns = Columns::new(&record, line, findings);
            if columns.is_none() {
                break;
            }
            continue;
        };
        if record.iter().all(str::is_empty) {
            continue;
        }
        if record.len() != known.len() {
            let message = format!("{} fields where the header has {}", record.len(), known.len());
            let hint = "a text with a comma needs quotes; numbers need a decimal point, not a comma";
            findings.push(Diagnostic::error("lab.fields", format!("line {line}"), message).hint(hint));
            continue;
        }
        rows::add(&rows::Row { line, fields: &record, columns: known }, &mut results, findings);
    }
    results
}

/// Semicolon where the header has semicolons and no comma.
fn delimiter(text: &str) -> u8 {
    let header = text.lines().map(str::trim).find(|line| !line.is_empty() && !line.starts_with('#')).unwrap_or("");
    if header.contains(';') && !header.contains(',') { b';' } else { b',' }
}
