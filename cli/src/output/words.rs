//! Numbers and sentences for people: one way to write each, and the words that are never used about a cliff.
use checker::outcome::{CheckResult, CriticalDepth, Outcome, PointXz, Status};

/// What is never said about a cliff, because no calculation can promise it.
pub const NEVER_SAID: [&str; 6] = ["safe", "stable", "ok", "pass", "passes", "low risk"];

/// What is said of a check that is under its limit.
pub const UNDER: &str = "under its limit by this model; it may still fall";

/// How the depth is named at first use.
pub const DEPTH_NAME: &str = "undercut depth (horizontal)";

/// A number with three figures, without an exponent up to a million.
pub fn figures(value: f64) -> String {
    let size = value.abs();
    // A value that would round to zero at this many places is written as zero without a sign.
    let decimals = match size {
        s if 100.0 <= s => 0,
        s if 10.0 <= s => 1,
        s if 1.0 <= s => 2,
        _ => 3,
    };
    if 1e6 <= size {
        return format!("{value:.2e}");
    }
    let text = format!("{value:.decimals$}");
    if text.trim_start_matches(['-', '0', '.']).is_empty() { text.trim_start_matches('-').to_owned() } else { text }
}

/// [`figures`] without zeros at the end of its decimals, for values as a person typed them.
pub fn plain(value: f64) -> String {
    let text = figures(value);
    if text.contains('.') && !text.contains('e') { text.trim_end_matches('0').trim_end_matches('.').to_owned() } else { text }
}

/// A numerical error of a utilization; one that would read as zero says that it is small.
pub fn error(value: f64) -> String {
    if 0.0 < value && value < 0.0005 { "< 0.001".to_owned() } else { fixed(value, 3) }
}

/// A length in m with two decimals and its unit.
pub fn meters(value_m: f64) -> String {
    format!("{} m", fixed(value_m, 2))
}

/// A number with fixed decimals and no minus before a zero.
pub fn fixed(value: f64, decimals: usize) -> String {
    let text = format!("{value:.decimals$}");
    if text.trim_start_matches(['-', '0', '.']).is_empty() { text.trim_start_matches('-').to_owned() } else { text }
}

/// A point as `x, z`.
pub fn place(at: PointXz) -> String {
    format!("{}, {}", fixed(at[0], 1), fixed(at[1], 1))
}

/// A utilization, or a word where there is none.
pub fn utilization(check: &CheckResult) -> String {
    match check.utilization {
        Some(value) => fixed(value, 2),
        None if check.beyond_apex => "beyond apex".to_owned(),
        None => "no capacity".to_owned(),
    }
}

/// A demand with its nature in words: tension and compression are told apart, signs are not.
pub fn demand(check: &CheckResult) -> String {
    match check.check {
        "joint opening" => format!("{} m open", figures(check.demand_kpa)),
        "local shear" | "section shear" | "joint slip" => format!("{} kPa", figures(check.demand_kpa)),
        _ if check.demand_kpa < 0.0 => format!("{} kPa compression", figures(-check.demand_kpa)),
        _ => format!("{} kPa", figures(check.demand_kpa)),
    }
}

/// Whether a check is over its limit, in words.
pub fn verdict(check: &CheckResult) -> &'static str {
    if check.over { "OVER its limit" } else { "under its limit" }
}

/// The critical depth in one phrase with error, check and situation.
pub fn critical(depth: &CriticalDepth) -> String {
    let Some(depth_m) = depth.depth_m.filter(|_| depth.found) else {
        let default = || format!("not reached down to {:.1} m; nothing is known beyond", depth.searched_to_m);
        return depth.note.clone().unwrap_or_else(default);
    };
    let error = depth.error_m.map_or_else(String::new, |error_m| format!(" ± {error_m:.2}"));
    let check = depth.check.map_or_else(String::new, |check| format!(", by {check}"));
    let situation = depth.situation.as_ref().map_or_else(String::new, |name| format!(" ({name})"));
    format!("{depth_m:.2}{error} m{check}{situation}")
}

/// The status in words, with what it means.
pub fn status(status: Status) -> &'static str {
    match status {
        Status::Complete => "complete: everything asked for was answered",
        Status::PartRefused => "part refused: see the reasons below",
        Status::TargetMissed => "target missed: the numerical error is larger than asked for; see the reached error",
    }
}

/// Whether no checker is named.
pub fn is_draft(outcome: &Outcome) -> bool {
    outcome.report.checked_by.is_none()
}

/// Words of [`NEVER_SAID`] that stand in a text as words of their own.
pub fn forbidden(text: &str) -> Vec<String> {
    let lower = text.to_lowercase();
    let is_word = |c: char| c.is_alphanumeric() || c == '-' || c == '_';
    NEVER_SAID
        .iter()
        .filter(|word| {
            lower.match_indices(**word).any(|(start, found)| {
                let before = lower[..start].chars().next_back();
                let after = lower[start + found.len()..].chars().next();
                !before.is_some_and(is_word) && !after.is_some_and(is_word)
            })
        })
        .map(|word| (*word).to_owned())
        .collect()
}

#[cfg(test)]
mod tests {
    use super::{figures, fixed, forbidden, plain};

    #[test]
    fn numbers_read_as_a_person_writes_them() {
        let cases = [(61.24, "61.2"), (210.4, "210"), (3.456, "3.46"), (0.0414, "0.041"), (-0.0001, "0.000"), (1234.5, "1234")];
        for (value, text) in cases {
            assert_eq!(figures(value), text);
        }
        assert_eq!([plain(0.3), plain(2.0), plain(100.0), plain(0.0)], ["0.3", "2", "100", "0"]);
        assert_eq!(fixed(-0.001, 2), "0.00");
        assert_eq!(fixed(-1.005, 1), "-1.0");
    }

    #[test]
    fn forbidden_words_are_found_as_words_only() {
        assert_eq!(forbidden("The cliff is Safe."), ["safe"]);
        assert_eq!(forbidden("a low  risk; low risk"), ["low risk"]);
        assert!(forbidden("passage, unsafe side, stably, look, safety").is_empty());
    }
}
