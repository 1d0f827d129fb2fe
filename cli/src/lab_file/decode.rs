//! From bytes to text, and which format the text is.
use checker::diagnostic::Diagnostic;

/// Which reader a text needs.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Kind {
    Csv,
    Ags3,
    Ags4,
}

/// UTF-8 with or without byte order mark, else ISO-8859-1, in which every byte is a character.
pub(super) fn decode(bytes: &[u8]) -> Result<String, Diagnostic> {
    let at = "the file";
    if bytes.starts_with(&[0xFF, 0xFE]) || bytes.starts_with(&[0xFE, 0xFF]) {
        return Err(Diagnostic::error("lab.encoding", at, "the file is UTF-16").hint("save it as UTF-8"));
    }
    if let Some(i) = bytes.iter().position(|b| *b == 0) {
        let line = bytes[..i].split(|b| *b == b'\n').count();
        return Err(Diagnostic::error("lab.encoding", format!("line {line}"), "a zero byte: this is no text file"));
    }
    let bytes = bytes.strip_prefix(&[0xEF, 0xBB, 0xBF]).unwrap_or(bytes);
    Ok(match std::str::from_utf8(bytes) {
        Ok(text) => text.to_owned(),
        Err(_) => bytes.iter().map(|b| char::from(*b)).collect(),
    })
}

/// Tells the formats apart by the first line that is not blank.
pub(super) fn kind(text: &str) -> Kind {
    let first = text.lines().map(str::trim).find(|line| !line.is_empty()).unwrap_or("");
    if first.starts_with("\"**") || first.starts_with("**") {
        Kind::Ags3
    } else if first.trim_start_matches('"').to_ascii_uppercase().starts_with("GROUP") {
        Kind::Ags4
    } else {
        Kind::Csv
    }
}
