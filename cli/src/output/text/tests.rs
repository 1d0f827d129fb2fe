//! The words and tables of the terminal summary.
use super::super::{fixture, words};
use super::{TODAY_ONLY, TextParts, summary};

const ALL: TextParts = TextParts { tables: true, today_only: false };

#[test]
fn numbers_stand_with_unit_error_and_limit() {
    let text = summary(&fixture::outcome(), &fixture::provenance(), ALL);
    for part in [
        "undercut depth (horizontal) as surveyed 2.30 m",
        "DRAFT, NOT CHECKED",
        "cautious inputs  5.10 ± 0.05 m, by cliff-top tension (wet winter, lowest tide); ground lost behind the brow 8.10 m",
        "best estimate    not reached down to 10.0 m; nothing is known beyond",
        "DEFAULT checks.target_error = 0.02",
        "warning[k0.not-measured]",
        "Keep people off",
    ] {
        assert!(text.contains(part), "missing `{part}` in\n{text}");
    }
}

#[test]
fn quiet_keeps_headline_warnings_and_cautions() {
    let text = summary(&fixture::outcome(), &fixture::provenance(), TextParts { tables: false, today_only: false });
    for part in ["it may still fall", "warning[survey.old]", "Cautions", "Keep people off", "Critical undercut depth (horizontal)"] {
        assert!(text.contains(part), "missing `{part}` in\n{text}");
    }
    assert!(!text.contains("Numerical quality"));
}

#[test]
fn check_ends_with_its_reservation() {
    let text = summary(&fixture::outcome(), &fixture::provenance(), TextParts { tables: true, today_only: true });
    assert_eq!(text.lines().last(), Some(TODAY_ONLY));
    assert!(!text.contains("Critical undercut depth of each check"));
}

#[test]
fn no_word_promises_anything() {
    let text = summary(&fixture::outcome(), &fixture::provenance(), ALL);
    assert_eq!(words::forbidden(&text), Vec::<String>::new());
}

#[test]
fn a_title_cannot_steer_the_terminal() {
    let mut outcome = fixture::outcome();
    outcome.model.title = "a\u{1b}[2Jb".into();
    assert!(!summary(&outcome, &fixture::provenance(), ALL).contains('\u{1b}'));
}
