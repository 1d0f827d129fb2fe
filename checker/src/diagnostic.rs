//! What is wrong or doubtful about a model: plain data that the boundary turns into text.

/// How much a finding matters.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// No result can be given.
    Error,
    /// A result is given with a reservation.
    Warning,
}

/// One finding about a model.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Diagnostic {
    /// Error or warning.
    pub severity: Severity,
    /// Stable name such as `rock.unit-weight`, listed in `docs/model-file.md`.
    pub code: &'static str,
    /// Key path in the model file, for example `rocks.sandstone.unit_weight_kn_m3` or `layers[2].base` (see [`nth`] and [`child`]; the first
    /// entry of a list is 1).
    pub at: String,
    /// Value, unit and limit; no final full stop.
    pub message: String,
    /// What to do about it.
    pub hint: Option<String>,
    /// Key paths of other places that the finding is about.
    pub also: Vec<String>,
}

/// Key path of an entry of a list, counted from 1 as people count: `nth("layers", 0)` is `layers[1]`.
pub fn nth(list: &str, i_entry: usize) -> String {
    format!("{list}[{}]", i_entry + 1)
}

/// Key path below another one, quoted where the file needs quotes: `child("rocks", "clay cap")` is `rocks."clay cap"`.
pub fn child(parent: &str, key: &str) -> String {
    let bare = !key.is_empty() && key.bytes().all(|b| b.is_ascii_alphanumeric() || b == b'_' || b == b'-');
    match (parent.is_empty(), bare) {
        (true, true) => key.to_owned(),
        (false, true) => format!("{parent}.{key}"),
        (true, false) => format!("\"{key}\""),
        (false, false) => format!("{parent}.\"{key}\""),
    }
}

impl Diagnostic {
    /// An error at a key path.
    pub fn error(code: &'static str, at: impl Into<String>, message: impl Into<String>) -> Self {
        Self { severity: Severity::Error, code, at: at.into(), message: message.into(), hint: None, also: Vec::new() }
    }

    /// A warning at a key path.
    pub fn warning(code: &'static str, at: impl Into<String>, message: impl Into<String>) -> Self {
        Self { severity: Severity::Warning, code, at: at.into(), message: message.into(), hint: None, also: Vec::new() }
    }

    /// The same finding with a remedy.
    #[must_use]
    pub fn hint(mut self, hint: impl Into<String>) -> Self {
        self.hint = Some(hint.into());
        self
    }

    /// The same finding with one more place, as a key path.
    #[must_use]
    pub fn also(mut self, at: impl Into<String>) -> Self {
        self.also.push(at.into());
        self
    }
}

/// A value that passed its checks, with the warnings that must reach the report.
#[must_use = "the warnings must reach the report"]
#[derive(Debug, Clone, PartialEq)]
pub struct Checked<T> {
    /// The value.
    pub value: T,
    /// Findings that do not prevent a result.
    pub warnings: Vec<Diagnostic>,
}
