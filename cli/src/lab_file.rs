//! Laboratory files: CSV with documented columns, or the open AGS4 transfer format, into [`LabResults`] in SI units.
//!
//! Findings name their place as `line 12` of a CSV file and as `line 12, group SHBT, heading SHBT_PEAK` of an AGS4 file. `docs/lab.md` lists
//! columns, groups and units.
mod ags;
mod csv;
mod decode;
pub mod json;
mod plausible;
pub mod plot;
mod rock_table;
pub mod text;
mod units;

use checker::diagnostic::{Checked, Diagnostic, Severity};
use checker::lab::{LabResults, LabRock, LabSummary};

pub use rock_table::rock_table;

/// Format of a laboratory file.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Format {
    /// Comma-separated with named columns.
    Csv,
    /// AGS4 with the edition it states.
    Ags4(String),
}

/// A laboratory file as read.
#[derive(Debug, Clone, PartialEq)]
pub struct LabFile {
    /// Format.
    pub format: Format,
    /// Results in SI units.
    pub results: LabResults,
}

/// The text of a laboratory file, whose lines the findings count.
///
/// # Errors
/// The bytes are no text.
pub fn text_of(bytes: &[u8]) -> Result<String, Diagnostic> {
    decode::decode(bytes)
}

/// Reads a laboratory file of either format.
///
/// # Errors
/// Every fault of the file at once; none of its values is used then.
pub fn read(bytes: &[u8]) -> Result<Checked<LabFile>, Vec<Diagnostic>> {
    let text = decode::decode(bytes).map_err(|fault| vec![fault])?;
    let mut findings = Vec::new();
    let file = match decode::kind(&text) {
        decode::Kind::Ags4 => ags::read(&text, &mut findings),
        decode::Kind::Ags3 => {
            let message = "this is an AGS3 file, an older format";
            return Err(vec![Diagnostic::error("lab.ags3", "line 1", message).hint("ask the laboratory for AGS4, editions 4.0.3 to 4.2")]);
        }
        decode::Kind::Csv => LabFile { format: Format::Csv, results: csv::read(&text, &mut findings) },
    };
    let (faults, mut warnings): (Vec<_>, Vec<_>) = findings.into_iter().partition(|f| f.severity == Severity::Error);
    if !faults.is_empty() {
        return Err(faults);
    }
    if file.results.is_empty() {
        return Err(vec![Diagnostic::error("lab.empty", "the file", "no laboratory result was found").hint("see docs/lab.md")]);
    }
    plausible::check(&file.results, &mut warnings);
    Ok(Checked { value: file, warnings })
}

/// Results of one rock: those that bear its name where the file names rocks, all of them where it names none or only one.
///
/// # Errors
/// Where the file names several rocks and `name` is none of them, or is not given.
pub fn select(results: &LabResults, name: Option<&str>) -> Result<Checked<LabResults>, Diagnostic> {
    let rocks = results.rocks();
    let named = name.filter(|name| rocks.contains(name));
    let wanted = match (named, rocks.as_slice()) {
        (Some(name), _) => name,
        (None, []) => return Ok(Checked { value: results.clone(), warnings: Vec::new() }),
        (None, [only]) => only,
        (None, several) => {
            let list = several.join("`, `");
            let asked = name.map_or_else(String::new, |name| format!("; none of them is `{name}`"));
            let message = format!("the file holds results of several rocks: `{list}`{asked}");
            return Err(
                Diagnostic::error("lab.rock", "the file", message).hint("name one of them: `--rock`, or `lab = \"file#rock\"` in a model")
            );
        }
    };
    let value = results.of_rock(wanted);
    let nameless = results.len() - rocks.iter().map(|rock| results.of_rock(rock).len()).sum::<usize>();
    let mut warnings = Vec::new();
    if 0 < nameless {
        let message = format!("{nameless} results name no rock and are left out beside those of `{wanted}`");
        warnings.push(Diagnostic::warning("lab.nameless", "the file", message));
    }
    Ok(Checked { value, warnings })
}

/// Summary of one rock of a file.
///
/// # Errors
/// As [`select`].
pub fn summary(results: &LabResults, rock: Option<&str>) -> Result<Checked<LabSummary>, Diagnostic> {
    let selected = select(results, rock)?;
    let mut summary = checker::lab::summarize(&selected.value);
    summary.warnings.splice(0..0, selected.warnings);
    Ok(summary)
}

/// Splits the value of a model's `lab` key: file, and the rock's name in it after `#` (else the rock's own name).
pub fn split_reference<'a>(reference: &'a str, own_name: &'a str) -> (&'a str, &'a str) {
    reference.split_once('#').unwrap_or((reference, own_name))
}

/// The strengths that `lab = "file"` gives to a rock of a model; `bytes` are those of the file and `rock` the second part of [`split_reference`].
///
/// # Errors
/// Every fault of the file, or what it lacks for a rock.
pub fn rock_strength(bytes: &[u8], rock: &str) -> Result<Checked<LabRock>, Vec<Diagnostic>> {
    let file = read(bytes)?;
    let summary = summary(&file.value.results, Some(rock)).map_err(|fault| vec![fault])?;
    let value = checker::lab::rock_strength(&summary.value)?;
    let mut warnings = file.warnings;
    warnings.extend(summary.warnings);
    Ok(Checked { value, warnings })
}

#[cfg(test)]
mod tests;
