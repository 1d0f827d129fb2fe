//! `summary.json`: the published results, key for key as [`Outcome`] names them.
use checker::outcome::Outcome;

use super::Provenance;

/// The results object as text, ended by a line feed; the provenance is added under `"run"`.
///
/// # Errors
/// When a number is not finite: such a result is never published.
pub fn summary(outcome: &Outcome, provenance: &Provenance) -> Result<String, NotFinite> {
    let mut value = serde_json::to_value(outcome).map_err(|_| NotFinite)?;
    if let Some(object) = value.as_object_mut() {
        object.insert("run".to_owned(), serde_json::json!({ "command": provenance.command, "seed": provenance.seed }));
    }
    let mut text = serde_json::to_string_pretty(&value).map_err(|_| NotFinite)?;
    text.push('\n');
    Ok(text)
}

/// A result that cannot be written as a number.
#[derive(Debug, Clone, Copy, PartialEq, Eq, thiserror::Error)]
#[error("a result is not a finite number; nothing is published")]
pub struct NotFinite;

#[cfg(test)]
mod tests {
    use super::super::fixture;
    use super::summary;

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
