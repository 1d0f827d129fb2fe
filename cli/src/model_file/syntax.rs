//! Syntax: text to a tree of keys and values with their places, every syntax error reported.
use super::collect::Collector;
use checker::diagnostic::Diagnostic;
use toml::Spanned;
use toml::de::DeTable;

/// Parses the model text (the first source of the collector); what could be made out of a broken file is returned too.
pub(super) fn parse<'t>(text: &'t str, collector: &mut Collector) -> Spanned<DeTable<'t>> {
    let (table, errors) = DeTable::parse_recoverable(text);
    let mut last_line = usize::MAX;
    for error in errors.iter().take(200) {
        let span = error.span().map_or(0..0, |span| span.start.min(text.len())..span.end.min(text.len()));
        let line_start = text[..floor(text, span.start)].rfind('\n').map_or(0, |i| i + 1);
        if line_start == last_line {
            continue;
        }
        last_line = line_start;
        let line = text[line_start..].lines().next().unwrap_or_default();
        let message = format!("this is not valid TOML: {}", first_line(error.message()));
        let duplicate = error.message().contains("duplicate key");
        let diagnostic = if duplicate {
            Diagnostic::error("key.twice", "", "this key or table is written twice")
                .hint("keep one of the two; a list of tables is written [[name]]")
        } else {
            Diagnostic::error("file.syntax", "", message)
        };
        let diagnostic = match hint(line, error.message()) {
            Some(hint) if !duplicate => diagnostic.hint(hint),
            _ => diagnostic,
        };
        collector.add_syntax(diagnostic, floor(text, span.start)..span.end);
    }
    table
}

fn floor(text: &str, byte: usize) -> usize {
    (0..=byte.min(text.len())).rev().find(|i| text.is_char_boundary(*i)).unwrap_or(0)
}

fn first_line(message: &str) -> &str {
    message.lines().next().unwrap_or_default()
}

/// What to do about a broken line, from what it looks like.
fn hint(line: &str, message: &str) -> Option<String> {
    let short: String = line.chars().take(500).collect();
    let value = short.split_once('=').map(|(_, value)| value.trim());
    if let Some(value) = value {
        if let Some(comma) = decimal_comma(value) {
            return Some(format!("a decimal point is written as a point: {}", comma.replace(',', ".")));
        }
        if value.is_empty() || value.starts_with('#') {
            return Some("write a value after the equals sign, or leave the key out".into());
        }
        if value.starts_with(|c: char| c.is_alphabetic()) && !matches!(value, "true" | "false") {
            return Some("text stands in quotes: key = \"text\"".into());
        }
        let unit = value.trim_start_matches(|c: char| c.is_ascii_digit() || matches!(c, '.' | '-' | '+' | '_' | ' '));
        if value.starts_with(|c: char| c.is_ascii_digit() || c == '-')
            && unit.starts_with(|c: char| c.is_alphabetic() || c == '°' || c == '%')
        {
            return Some("write the number without its unit; the unit is in the name of the key".into());
        }
        let key = short.split('=').next().unwrap_or_default().trim();
        if key.contains(' ') && !key.contains('"') {
            return Some("a key with spaces stands in quotes".into());
        }
    }
    if short.trim_start().starts_with('[') && short.contains(' ') && !short.contains('"') {
        return Some("a name with spaces stands in quotes: [rocks.\"upper limestone\"]".into());
    }
    if message.contains("unclosed") || message.contains("expected") {
        return Some("check quotes, brackets and commas here and on the line before".into());
    }
    None
}

/// The number with a decimal comma at the start of a value: `8,5` but not `8, 5` or a list.
fn decimal_comma(value: &str) -> Option<&str> {
    let end = value.find(|c: char| !(c.is_ascii_digit() || matches!(c, ',' | '-' | '+'))).unwrap_or(value.len());
    let number = &value[..end];
    let (whole, rest) = number.split_once(',')?;
    let digits = |text: &str| !text.is_empty() && text.bytes().all(|b| b.is_ascii_digit());
    (digits(whole.trim_start_matches(['-', '+'])) && digits(rest)).then_some(number)
}
