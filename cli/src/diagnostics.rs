//! Findings about a model as text or data: with file, line, column and an excerpt of the source.
mod human;
mod json;
mod place;

use crate::args::DiagnosticsForm;
use checker::diagnostic::{Diagnostic, Severity};
use std::ops::Range;
use std::sync::Arc;

pub use place::{Position, clean, clip, position};

/// Largest number of findings that are shown.
pub const MOST_SHOWN: usize = 100;

/// One text in which findings are placed.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Source {
    /// File name as printed.
    pub name: String,
    /// The whole text.
    pub text: String,
}

/// A place in a text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Place {
    /// Index of the text.
    pub source: usize,
    /// Bytes from and to.
    pub span: Range<usize>,
}

/// A finding with its places.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Located {
    /// The finding.
    pub diagnostic: Diagnostic,
    /// Where it stands, if it stands anywhere.
    pub place: Option<Place>,
    /// Further places that it is about.
    pub also: Vec<Place>,
}

/// Findings with the texts in which they stand.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Findings {
    /// The texts; the first is the model file.
    pub sources: Arc<Vec<Source>>,
    /// The findings in the order of the texts.
    pub list: Vec<Located>,
}

impl Findings {
    /// Number of errors.
    pub fn n_errors(&self) -> usize {
        self.list.iter().filter(|one| one.diagnostic.severity == Severity::Error).count()
    }

    /// Line and column of a place.
    pub fn position(&self, place: &Place) -> Option<Position> {
        self.sources.get(place.source).map(|source| position(&source.text, place.span.start))
    }
}

/// The findings as text; `color` adds terminal colors to the human form only.
///
/// At most [`MOST_SHOWN`] findings are printed; a last line counts the rest.
pub fn render(findings: &Findings, form: DiagnosticsForm, color: bool) -> String {
    match form {
        DiagnosticsForm::Human => human::render(findings, color),
        DiagnosticsForm::Short => short(findings),
        DiagnosticsForm::Json => json::render(findings),
    }
}

/// "error" or "warning".
pub(crate) fn severity_word(severity: Severity) -> &'static str {
    match severity {
        Severity::Error => "error",
        Severity::Warning => "warning",
    }
}

fn short(findings: &Findings) -> String {
    let mut text = String::new();
    for one in findings.list.iter().take(MOST_SHOWN) {
        let diagnostic = &one.diagnostic;
        let place = one.place.as_ref().and_then(|place| Some((findings.sources.get(place.source)?, findings.position(place)?)));
        let head = match place {
            Some((source, at)) => format!("{}:{}:{}", source.name, at.line, at.column),
            None => findings.sources.first().map_or_else(String::new, |source| source.name.clone()),
        };
        let also: Vec<String> =
            one.also.iter().filter_map(|place| findings.position(place)).map(|at| format!("line {}", at.line)).collect();
        let mut line = format!("{head}: {}: {}", severity_word(diagnostic.severity), diagnostic.message);
        if !also.is_empty() {
            line += " (see also ";
            line += &also.join(", ");
            line += ")";
        }
        if let Some(hint) = &diagnostic.hint {
            line += "; ";
            line += hint;
        }
        text += &clean(&line);
        text.push('\n');
    }
    text + &more(findings)
}

/// The line that counts what is not shown; empty if all is shown.
fn more(findings: &Findings) -> String {
    let n_more = findings.list.len().saturating_sub(MOST_SHOWN);
    if n_more == 0 { String::new() } else { format!("{n_more} more findings are not shown\n") }
}

/// Writes findings to standard error; colors only on a terminal and without NO_COLOR.
pub(crate) fn show(findings: &Findings, form: DiagnosticsForm) {
    use std::io::Write;
    if findings.list.is_empty() && form != DiagnosticsForm::Json {
        return;
    }
    let mut stderr = anstream::stderr().lock();
    // A closed standard error is no reason to stop.
    let _ = stderr.write_all(render(findings, form, true).as_bytes());
}
