//! `summary.json`: the published results, key for key as [`Outcome`] names them.
use checker::outcome::Outcome;

use minijinja::value::{Serde, Value, ValueKind};

use super::Provenance;

/// The results object as text, ended by a line feed; the provenance is added under `"run"`.
///
/// # Errors
/// When a number is not finite: such a result is never published.
pub fn summary(outcome: &Outcome, provenance: &Provenance) -> Result<String, NotFinite> {
    if let Some(key) = not_finite(&Value::from(Serde(outcome)), "") {
        return Err(NotFinite { key });
    }
    let mut value = serde_json::to_value(outcome)?;
    if let Some(object) = value.as_object_mut() {
        object.insert("run".to_owned(), serde_json::json!({ "command": provenance.command, "seed": provenance.seed }));
    }
    let mut text = serde_json::to_string_pretty(&value)?;
    text.push('\n');
    Ok(text)
}

/// A result that cannot be written as a number.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
#[error("`{key}` of the results is not a finite number; nothing is published")]
pub struct NotFinite {
    /// Its place in the results object.
    pub key: String,
}

impl From<serde_json::Error> for NotFinite {
    fn from(error: serde_json::Error) -> Self {
        Self { key: error.to_string() }
    }
}

/// The first number that is none. The JSON writer would turn it into `null`, which means "no value" and not "nonsense".
fn not_finite(value: &Value, path: &str) -> Option<String> {
    match value.kind() {
        ValueKind::Number => f64::try_from(value.clone()).is_ok_and(|number| !number.is_finite()).then(|| path.to_owned()),
        ValueKind::Seq => value.try_iter().ok()?.enumerate().find_map(|(i, item)| not_finite(&item, &format!("{path}[{i}]"))),
        ValueKind::Map => value.try_iter().ok()?.find_map(|key| {
            let dot = if path.is_empty() { "" } else { "." };
            not_finite(&value.get_item(&key).ok()?, &format!("{path}{dot}{key}"))
        }),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::super::fixture;
    use super::summary;

    #[test]
    fn nonsense_is_named_and_not_published() {
        let mut outcome = fixture::outcome();
        outcome.depths[2].checks[1].demand_kpa = f64::NAN;
        let error = summary(&outcome, &fixture::provenance()).unwrap_err();
        assert_eq!(error.to_string(), "`depths[2].checks[1].demand_kpa` of the results is not a finite number; nothing is published");
        outcome.depths[2].checks[1].demand_kpa = 1.0;
        outcome.hangs_on[0].critical_depth_m[1] = Some(f64::INFINITY);
        assert!(summary(&outcome, &fixture::provenance()).is_err());
    }

    #[test]
    fn the_contracts_keys_are_there() {
        let text = summary(&fixture::outcome(), &fixture::provenance()).unwrap();
        let value: serde_json::Value = serde_json::from_str(&text).unwrap();
        for key in ["program", "status", "headline", "model", "section", "numerics", "surveyed", "critical_depth", "depths", "hangs_on"] {
            assert!(!value[key].is_null(), "{key}");
        }
        assert_eq!(value["status"], "complete");
        assert_eq!(value["surveyed"]["checks"][0]["check"], "cliff-top tension");
        assert!(value["critical_depth"]["cautious"]["depth_m"].is_f64());
        assert!(text.ends_with("}\n"));
    }
}
