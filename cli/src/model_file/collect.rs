//! Gathers findings and remembers where every key of the file stands.
use crate::diagnostics::{Findings, Located, Place, Source};
use checker::diagnostic::Diagnostic;
use std::collections::HashMap;
use std::ops::Range;
use std::sync::Arc;

/// Largest number of findings that are kept.
const MOST_KEPT: usize = 2000;

/// Where every key of the file stands, by key path.
#[derive(Debug, Clone, Default)]
pub(crate) struct Places {
    spans: HashMap<String, Place>,
}

impl Places {
    pub(crate) fn insert(&mut self, path: &str, source: usize, span: Range<usize>) {
        self.spans.insert(path.to_owned(), Place { source, span });
    }

    /// The place of a key path, or of the nearest key above it.
    pub(crate) fn find(&self, path: &str) -> Option<Place> {
        let mut path = path;
        loop {
            if let Some(place) = self.spans.get(path) {
                return Some(place.clone());
            }
            path = parent(path)?;
        }
    }
}

/// The key path without its last part; `None` at the top.
fn parent(path: &str) -> Option<&str> {
    let mut quoted = false;
    let mut cut = None;
    for (i, c) in path.char_indices() {
        match c {
            '"' => quoted = !quoted,
            '.' | '[' if !quoted && i > 0 => cut = Some(i),
            _ => {}
        }
    }
    cut.map(|i| &path[..i])
}

/// Findings on the way, the texts in which they stand and the places of all keys.
#[derive(Debug, Default)]
pub(crate) struct Collector {
    pub(crate) sources: Vec<Source>,
    pub(crate) places: Places,
    list: Vec<Located>,
    /// Lines of the model file with a syntax error, as byte ranges: what else is wrong there is a consequence.
    broken_lines: Vec<Range<usize>>,
}

impl Collector {
    /// A finding at a key path.
    pub(crate) fn add(&mut self, diagnostic: Diagnostic) {
        let place = self.places.find(&diagnostic.at);
        self.push(diagnostic, place);
    }

    /// A finding at bytes of a text.
    pub(crate) fn add_at(&mut self, diagnostic: Diagnostic, source: usize, span: Range<usize>) {
        self.push(diagnostic, Some(Place { source, span }));
    }

    /// A finding about the syntax; silences all other findings on its line.
    pub(crate) fn add_syntax(&mut self, diagnostic: Diagnostic, span: Range<usize>) {
        self.push(diagnostic, Some(Place { source: 0, span: span.clone() }));
        let text = &self.sources[0].text;
        let start = text[..span.start].rfind('\n').map_or(0, |i| i + 1);
        let end = text[span.start..].find('\n').map_or(text.len(), |i| span.start + i);
        self.broken_lines.push(start..end);
    }

    /// Whether a key is written on a line with a syntax error, so that it is not simply missing.
    pub(crate) fn key_is_on_broken_line(&self, key: &str) -> bool {
        self.broken_lines.iter().any(|line| self.sources[0].text[line.clone()].contains(key))
    }

    /// Lines with a syntax error.
    pub(crate) fn broken_lines(&self) -> &[Range<usize>] {
        &self.broken_lines
    }

    /// Whether a byte of the model file stands on a line with a syntax error.
    pub(crate) fn is_on_broken_line(&self, byte: usize) -> bool {
        self.broken_lines.iter().any(|line| line.start <= byte && byte <= line.end)
    }

    /// Whether a byte stands on the header of a table that holds a broken line: what that table lacks may stand there.
    fn is_header_of_broken_table(&self, byte: usize) -> bool {
        if self.broken_lines.is_empty() {
            return false;
        }
        let text = &self.sources[0].text;
        let start = text[..byte].rfind('\n').map_or(0, |i| i + 1);
        let end = text[byte..].find("\n[").map_or(text.len(), |i| byte + i);
        text[start..].starts_with('[') && self.broken_lines.iter().any(|line| start <= line.start && line.start < end)
    }

    /// Whether something is wrong, beside keys that are only not available yet.
    pub(crate) fn has_faults(&self) -> bool {
        self.list
            .iter()
            .any(|one| one.diagnostic.severity == checker::diagnostic::Severity::Error && one.diagnostic.code != "key.not-available")
    }

    /// Number of errors so far.
    pub(crate) fn n_errors(&self) -> usize {
        self.list.iter().filter(|one| one.diagnostic.severity == checker::diagnostic::Severity::Error).count()
    }

    fn push(&mut self, diagnostic: Diagnostic, place: Option<Place>) {
        if self.list.len() >= MOST_KEPT {
            return;
        }
        let is_consequence =
            |start| self.is_on_broken_line(start) || (diagnostic.code != "key.missing" && self.is_header_of_broken_table(start));
        let on_broken_line = place.as_ref().is_some_and(|place| place.source == 0 && is_consequence(place.span.start));
        let known = self.list.iter().any(|one| one.diagnostic.at == diagnostic.at && one.diagnostic.message == diagnostic.message);
        if on_broken_line || (known && !diagnostic.at.is_empty()) {
            return;
        }
        let also = diagnostic.also.iter().filter_map(|path| self.places.find(path)).collect();
        self.list.push(Located { diagnostic, place, also });
    }

    /// All findings in the order of the texts, and the places.
    pub(crate) fn finish(mut self) -> (Findings, Places) {
        self.list.sort_by_key(|one| one.place.as_ref().map_or((0, 0), |place| (place.source, place.span.start)));
        (Findings { sources: Arc::new(self.sources), list: self.list }, self.places)
    }
}

/// Findings of a later stage, placed in the texts of the model.
pub(crate) fn locate(diagnostics: &[Diagnostic], places: &Places, sources: &Arc<Vec<Source>>) -> Findings {
    let list = diagnostics.iter().map(|diagnostic| Located {
        place: places.find(&diagnostic.at),
        also: diagnostic.also.iter().filter_map(|path| places.find(path)).collect(),
        diagnostic: diagnostic.clone(),
    });
    Findings { sources: Arc::clone(sources), list: list.collect() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_path_is_found_at_itself_or_above() {
        let mut places = Places::default();
        places.insert("rocks.\"a.b[1] c\"", 0, 3..5);
        places.insert("layers[2]", 0, 7..9);
        assert_eq!(places.find("rocks.\"a.b[1] c\".cohesion_kpa.mean").unwrap().span, 3..5);
        assert_eq!(places.find("layers[2].base[3]").unwrap().span, 7..9);
        assert_eq!(places.find("layers[3]"), None);
    }
}
