//! Lines, columns and excerpts; text of unknown origin made fit for a terminal.

/// Line and column, both from 1; the column counts characters.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Position {
    /// Line.
    pub line: usize,
    /// Column.
    pub column: usize,
}

/// Longest stretch of one line that is shown, in characters.
const LONGEST_EXCERPT: usize = 160;

/// The position of a byte in a text; beyond the end it is the end.
pub fn position(text: &str, byte: usize) -> Position {
    let byte = floor_boundary(text, byte);
    let line_start = text[..byte].rfind('\n').map_or(0, |i| i + 1);
    let line = text[..line_start].bytes().filter(|b| *b == b'\n').count() + 1;
    Position { line, column: text[line_start..byte].chars().count() + 1 }
}

/// The text without control characters and direction marks, which could rewrite a terminal; tabs and line breaks become spaces.
pub fn clean(text: &str) -> String {
    text.chars()
        .filter_map(|c| match c {
            '\t' | '\n' | '\r' => Some(' '),
            c if c.is_control() || is_direction_mark(c) => None,
            c => Some(c),
        })
        .collect()
}

/// The cleaned text, cut to so many characters.
pub fn clip(text: &str, n_longest: usize) -> String {
    let mut cut: String = clean(&text.chars().take(n_longest).collect::<String>());
    if text.chars().nth(n_longest).is_some() {
        cut.push('…');
    }
    cut
}

/// One line of a text around a place.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Excerpt {
    /// The line, cut where it is long, fit for a terminal.
    pub(super) text: String,
    /// Bytes of `text` that are meant.
    pub(super) from: usize,
    /// To here.
    pub(super) to: usize,
    /// Whether the start of the line is cut off.
    pub(super) is_cut: bool,
    /// Line and column in the whole text.
    pub(super) position: Position,
}

/// The first line of a span, cut to a window around its start.
pub(super) fn excerpt(text: &str, from: usize, to: usize) -> Excerpt {
    let from = floor_boundary(text, from);
    let to = floor_boundary(text, to.max(from));
    let line_start = text[..from].rfind('\n').map_or(0, |i| i + 1);
    let line_end = text[from..].find('\n').map_or(text.len(), |i| from + i);
    let to = to.min(line_end);
    let before = last_chars(&text[line_start..from], LONGEST_EXCERPT / 2);
    let marked = first_chars(&text[from..to], LONGEST_EXCERPT / 2);
    let after = if marked.len() < to - from { "" } else { first_chars(&text[to..line_end], LONGEST_EXCERPT / 2) };
    let mut shown = String::new();
    let is_cut = before.len() < from - line_start;
    if is_cut {
        shown.push('…');
    }
    shown += &printable(before);
    let start = shown.len();
    shown += &printable(marked);
    let end = shown.len();
    shown += &printable(after);
    if marked.len() + after.len() < line_end - from {
        shown.push('…');
    }
    Excerpt { text: shown, from: start, to: end, is_cut, position: position(text, from) }
}

/// The same text with a visible stand-in for every control character, so that columns stay.
fn printable(text: &str) -> String {
    text.chars()
        .map(|c| {
            if c == '\t' {
                ' '
            } else if c.is_control() || is_direction_mark(c) {
                '\u{fffd}'
            } else {
                c
            }
        })
        .collect()
}

fn is_direction_mark(c: char) -> bool {
    matches!(c, '\u{200e}' | '\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}')
}

fn floor_boundary(text: &str, byte: usize) -> usize {
    let mut byte = byte.min(text.len());
    while !text.is_char_boundary(byte) {
        byte -= 1;
    }
    byte
}

fn first_chars(text: &str, n: usize) -> &str {
    text.char_indices().nth(n).map_or(text, |(i, _)| &text[..i])
}

fn last_chars(text: &str, n: usize) -> &str {
    if n == 0 {
        return "";
    }
    text.char_indices().rev().nth(n - 1).map_or(text, |(i, _)| &text[i..])
}

#[cfg(test)]
mod tests;
