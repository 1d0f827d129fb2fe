//! Findings for people: title, excerpt, remedy.
use super::place::{clean, excerpt};
use super::{Findings, Located, MOST_SHOWN, Place, Source, more};
use annotate_snippets::{AnnotationKind, Group, Level, Origin, Renderer, Snippet};
use checker::diagnostic::Severity;

/// All findings, one block each, and a last line that counts them.
pub(super) fn render(findings: &Findings, color: bool) -> String {
    let renderer = if color { Renderer::styled() } else { Renderer::plain() };
    let mut text = String::new();
    for one in findings.list.iter().take(MOST_SHOWN) {
        text += &renderer.render(&[block(findings, one)]);
        text += "\n\n";
    }
    text += &more(findings);
    text + &counts(findings)
}

fn block<'a>(findings: &'a Findings, one: &'a Located) -> Group<'a> {
    let diagnostic = &one.diagnostic;
    let level = match diagnostic.severity {
        Severity::Error => Level::ERROR,
        Severity::Warning => Level::WARNING,
    };
    let mut group = Group::with_title(level.primary_title(clean(&diagnostic.message)).id(diagnostic.code));
    let places = one.place.iter().map(|place| (place, AnnotationKind::Primary));
    for (place, kind) in places.chain(one.also.iter().map(|place| (place, AnnotationKind::Primary))) {
        if let Some(source) = findings.sources.get(place.source) {
            group = with_excerpt(group, source, place, kind);
        }
    }
    if !diagnostic.at.is_empty() {
        group = group.element(Level::NOTE.with_name("key").message(clean(&diagnostic.at)));
    }
    if let Some(hint) = &diagnostic.hint {
        group = group.element(Level::HELP.message(clean(hint)));
    }
    group
}

/// The column is given apart from the excerpt where the start of the line is cut off.
fn with_excerpt<'a>(group: Group<'a>, source: &Source, place: &Place, kind: AnnotationKind) -> Group<'a> {
    let excerpt = excerpt(&source.text, place.span.start, place.span.end);
    let (name, is_cut) = (clean(&source.name), excerpt.is_cut);
    let annotation = kind.span(excerpt.from..excerpt.to);
    let snippet = Snippet::source(excerpt.text).line_start(excerpt.position.line).fold(false).annotation(annotation);
    if is_cut {
        let origin = Origin::path(name).line(excerpt.position.line).char_column(excerpt.position.column);
        return group.element(origin).element(snippet);
    }
    group.element(snippet.path(name))
}

fn counts(findings: &Findings) -> String {
    let n_errors = findings.n_errors();
    let n_warnings = findings.list.len() - n_errors;
    let word = |n: usize, one: &str| if n == 1 { format!("1 {one}") } else { format!("{n} {one}s") };
    match (n_errors, n_warnings) {
        (0, 0) => String::new(),
        (0, _) => format!("{}\n", word(n_warnings, "warning")),
        (_, 0) => format!("{}; nothing was written\n", word(n_errors, "error")),
        _ => format!("{}, {}; nothing was written\n", word(n_errors, "error"), word(n_warnings, "warning")),
    }
}
