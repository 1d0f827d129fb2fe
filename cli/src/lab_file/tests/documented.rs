//! The example of docs/lab.md prints what the document shows.
use super::*;

const DOCUMENT: &str = include_str!("../../../../docs/lab.md");

/// Text of the `n`th fenced block of a kind.
fn block(kind: &str, n: usize) -> &'static str {
    let mark = format!("```{kind}\n");
    let rest = DOCUMENT.split(mark.as_str()).nth(n + 1).unwrap_or_else(|| panic!("no {kind} block {n}"));
    rest.split("```").next().unwrap()
}

#[test]
fn the_shown_output_is_that_of_the_shown_file() {
    let file = good(block("csv", 0).as_bytes()).value;
    let summary = summary(&file.results, None).unwrap();
    let printed = text::summary(&summary.value).unwrap();
    let table = rock_table("rock", "tern-lab.csv", &summary.value);
    let line = |w: &Diagnostic| format!("warning: tern-lab.csv: {}: {}\n  hint: {}\n", w.at, w.message, w.hint.as_deref().unwrap_or(""));
    let warnings = summary.warnings.iter().map(line).collect::<Vec<_>>().concat();
    assert_eq!(
        block("console", 0),
        format!("$ brinkline lab tern-lab.csv\n{warnings}tern-lab.csv (CSV)\n\n{printed}rock table for a model file:\n\n{table}")
    );
}

#[test]
fn every_column_is_documented() {
    for (column, _) in super::super::csv::column_names() {
        assert!(DOCUMENT.contains(&format!("`{column}")), "{column}");
    }
}
