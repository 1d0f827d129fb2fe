//! `lab = "file"`: strengths of a rock from its laboratory file.
use super::super::files::{self, FileFault};
use super::super::tree::Tab;
use super::{Build, ExtraFile};
use crate::diagnostics::Source;
use crate::lab_file;
use checker::diagnostic::{Diagnostic, nth};
use checker::lab::LabRock;
use std::ops::Range;

impl Build<'_> {
    /// Reads the file that the rock's `lab` names; `None` after an error.
    pub(super) fn lab(&mut self, name: &str, table: &Tab) -> Option<LabRock> {
        let reference = table.text_if("lab")?;
        let at = table.at("lab");
        let (file, rock) = lab_file::split_reference(reference, name);
        let read = files::inside(self.folder, file).and_then(|path| {
            let bytes = files::bytes(&path, files::LARGEST_EXTRA_BYTES)?;
            Ok(ExtraFile { name: file.to_owned(), path, bytes })
        });
        let extra = match read {
            Ok(extra) => extra,
            Err(fault) => {
                self.unreadable |= matches!(fault, FileFault::Unreadable(_));
                self.collector.add(fault.diagnostic(&at));
                return None;
            }
        };
        let (findings, strength) = match lab_file::rock_strength(&extra.bytes, rock) {
            Ok(checked) => (checked.warnings, Some(checked.value)),
            Err(faults) => (faults, None),
        };
        if let Ok(text) = lab_file::text_of(&extra.bytes) {
            self.collector.sources.push(Source { name: file.to_owned(), text });
        }
        let source = self.collector.sources.len() - 1;
        for finding in findings {
            self.lab_finding(finding, &at, source);
        }
        if !self.extra_files.iter().any(|known| known.path == extra.path) {
            self.extra_files.push(extra);
        }
        strength
    }

    /// Places a finding at its line of the laboratory file, or at the key where it has none.
    fn lab_finding(&mut self, mut finding: Diagnostic, at: &str, source: usize) {
        let (place, rest) = finding.at.split_once(", ").unwrap_or((&finding.at, ""));
        let line = place.strip_prefix("line ").and_then(|line| line.split(' ').next()).and_then(|line| line.parse::<usize>().ok());
        if !rest.is_empty() {
            finding.message = format!("{rest}: {}", finding.message);
        }
        let span = line.and_then(|line| line_span(&self.collector.sources[source].text, line));
        if let (Some(line), Some(span)) = (line, span) {
            finding.at = nth(at, line - 1);
            self.collector.add_at(finding, source, span);
        } else {
            at.clone_into(&mut finding.at);
            self.collector.add(finding);
        }
    }
}

/// Bytes of a line, counted from 1, without its end.
fn line_span(text: &str, line: usize) -> Option<Range<usize>> {
    let mut start = 0;
    for (i, one) in text.split_inclusive('\n').enumerate() {
        if i + 1 == line {
            return Some(start..start + one.trim_end().len());
        }
        start += one.len();
    }
    None
}
