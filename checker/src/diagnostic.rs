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
    /// Key path in the model file, for example `rocks.sandstone.unit_weight_kn_m3` or `layers[2].base`.
    pub at: String,
    /// Value, unit and limit; no final full stop.
    pub message: String,
    /// What to do about it.
    pub hint: Option<String>,
}

impl Diagnostic {
    /// An error at a key path.
    pub fn error(code: &'static str, at: impl Into<String>, message: impl Into<String>) -> Self {
        Self { severity: Severity::Error, code, at: at.into(), message: message.into(), hint: None }
    }

    /// A warning at a key path.
    pub fn warning(code: &'static str, at: impl Into<String>, message: impl Into<String>) -> Self {
        Self { severity: Severity::Warning, code, at: at.into(), message: message.into(), hint: None }
    }

    /// The same finding with a remedy.
    #[must_use]
    pub fn hint(mut self, hint: impl Into<String>) -> Self {
        self.hint = Some(hint.into());
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
