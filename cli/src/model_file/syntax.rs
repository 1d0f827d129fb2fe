//! Syntax: every error reported, and the rest of the text made fit to be read.
use super::collect::Collector;
use checker::diagnostic::Diagnostic;
use toml::de::DeTable;

/// Largest number of syntax errors that are reported.
const MOST_ERRORS: usize = 200;

/// Reports every syntax error of the model text (the first source of the collector).
///
/// Returns the text with its broken lines blanked out, byte for byte, so that the rest can be looked at too; where that breaks more
/// than it mends, the text as it is; `None` where so much is broken that the rest says nothing.
pub(super) fn check(text: &str, collector: &mut Collector) -> Option<String> {
    let (_, errors) = DeTable::parse_recoverable(text);
    if errors.is_empty() {
        return Some(text.to_owned());
    }
    let mut last_line = usize::MAX;
    for error in errors.iter().take(MOST_ERRORS) {
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
    if errors.len() > MOST_ERRORS {
        return None;
    }
    let mended = mended(text, collector);
    let (_, rest) = DeTable::parse_recoverable(&mended);
    let is_known = |error: &toml::de::Error| error.span().is_some_and(|span| collector.is_on_broken_line(span.start));
    Some(if rest.iter().all(is_known) { mended } else { text.to_owned() })
}

/// The text with its broken lines blanked out; headers of tables stay, for without them their keys would go to another table.
fn mended(text: &str, collector: &Collector) -> String {
    let mut bytes = text.as_bytes().to_vec();
    for line in collector.broken_lines() {
        if !text[line.clone()].trim_start().starts_with('[') {
            bytes[line.clone()].fill(b' ');
        }
    }
    String::from_utf8(bytes).unwrap_or_else(|_| text.to_owned())
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
