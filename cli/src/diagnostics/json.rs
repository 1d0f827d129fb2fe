//! Findings as data.
use super::{Findings, Located, MOST_SHOWN, Place, severity_word};
use serde_json::{Value, json};

/// A JSON list, one object a finding, at most [`MOST_SHOWN`] of them.
pub(super) fn render(findings: &Findings) -> String {
    let list: Vec<Value> = findings.list.iter().take(MOST_SHOWN).map(|one| object(findings, one)).collect();
    format!("{:#}\n", Value::Array(list))
}

fn object(findings: &Findings, one: &Located) -> Value {
    let diagnostic = &one.diagnostic;
    json!({
        "severity": severity_word(diagnostic.severity),
        "code": diagnostic.code,
        "at": diagnostic.at,
        "message": diagnostic.message,
        "hint": diagnostic.hint,
        "place": one.place.as_ref().map(|place| spot(findings, place)),
        "also": one.also.iter().map(|place| spot(findings, place)).collect::<Vec<_>>(),
    })
}

fn spot(findings: &Findings, place: &Place) -> Value {
    let at = findings.position(place);
    json!({
        "file": findings.sources.get(place.source).map(|source| source.name.as_str()),
        "line": at.map(|at| at.line),
        "column": at.map(|at| at.column),
    })
}
