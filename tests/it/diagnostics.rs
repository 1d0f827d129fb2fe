//! Faulty models: every fault is found at its line, in words, without a panic; and nothing else is reported.
//!
//! The files in `tests/data/bad` name their faults themselves: a comment `# FAULT code: words` at the end of the faulty line,
//! `# FAULT-AT line code: words`, or `# FAULT-IN file:line code: words`; `# EXIT n` on the first line is the exit code.
use brinkline::args::DiagnosticsForm;
use brinkline::diagnostics::{Findings, render};
use brinkline::model_file::{self, Failure};
use checker::diagnostic::Severity;
use std::path::{Path, PathBuf};
use std::time::{Duration, Instant};

/// Far above what the slowest case takes (about 1 s on a quiet machine), far below a search that grows with the square of the text.
const TOO_SLOW: Duration = Duration::from_secs(60);

/// One promised finding.
#[derive(Debug, PartialEq)]
struct Fault {
    file: String,
    line: usize,
    code: String,
    words: String,
}

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("data/bad")
}

fn faulty_models() -> Vec<PathBuf> {
    let mut files: Vec<PathBuf> = std::fs::read_dir(folder()).unwrap().map(|entry| entry.unwrap().path()).collect();
    files.retain(|path| path.extension().is_some_and(|extension| extension == "toml"));
    files.sort();
    files
}

fn promised(text: &str, name: &str) -> Vec<Fault> {
    let mut faults = Vec::new();
    for (i_line, line) in text.lines().enumerate() {
        let Some((_, mark)) = line.split_once("# FAULT") else { continue };
        let (place, rest) = mark.split_once(' ').unwrap();
        let (file, line, rest) = match place {
            "-AT" => {
                let (line, rest) = rest.split_once(' ').unwrap();
                (name, line.parse().unwrap(), rest)
            }
            "-IN" => {
                let (at, rest) = rest.split_once(' ').unwrap();
                let (file, line) = at.split_once(':').unwrap();
                (file, line.parse().unwrap(), rest)
            }
            _ => (name, i_line + 1, rest),
        };
        let (code, words) = rest.split_once(": ").unwrap();
        faults.push(Fault { file: file.into(), line, code: code.into(), words: words.into() });
    }
    faults
}

/// Errors as found; words are message and remedy together.
fn found(findings: &Findings) -> Vec<Fault> {
    let errors = findings.list.iter().filter(|one| one.diagnostic.severity == Severity::Error);
    errors
        .map(|one| {
            let place = one.place.as_ref();
            let source = place.and_then(|place| findings.sources.get(place.source));
            Fault {
                file: source.map_or_else(String::new, |source| source.name.rsplit('/').next().unwrap().to_owned()),
                line: place.and_then(|place| findings.position(place)).map_or(0, |at| at.line),
                code: one.diagnostic.code.into(),
                words: format!("{}; {}", one.diagnostic.message, one.diagnostic.hint.as_deref().unwrap_or_default()),
            }
        })
        .collect()
}

fn failure_of(path: &Path) -> Failure {
    let start = Instant::now();
    let failure = model_file::read(path).expect_err(&path.display().to_string());
    assert!(start.elapsed() < TOO_SLOW, "{} took {:?}", path.display(), start.elapsed());
    failure
}

#[test]
fn every_faulty_model_says_where_and_what() {
    let files = faulty_models();
    assert!(files.len() >= 40, "{}", files.len());
    let mut wrong = Vec::new();
    for path in files {
        let text = std::fs::read_to_string(&path).unwrap();
        let name = path.file_name().unwrap().to_str().unwrap();
        let failure = failure_of(&path);
        let exit: u8 = text.lines().next().and_then(|line| line.strip_prefix("# EXIT ")).unwrap().parse().unwrap();
        if failure.exit_code() != exit {
            wrong.push(format!("{name}: exit {} instead of {exit}", failure.exit_code()));
        }
        let promised = promised(&text, name);
        let found = found(&failure.findings);
        for fault in &promised {
            let hit = |one: &&Fault| {
                one.file == fault.file && one.line == fault.line && one.code == fault.code && one.words.contains(&fault.words)
            };
            if !found.iter().any(|one| hit(&one)) {
                wrong.push(format!("{name}: not found: {fault:?}"));
            }
        }
        for one in &found {
            let hit = |fault: &&Fault| one.file == fault.file && one.line == fault.line && one.code == fault.code;
            // What is not built yet answers besides, until it is built.
            if one.code != "key.not-available" && !promised.iter().any(|fault| hit(&fault)) {
                wrong.push(format!("{name}: found besides: {one:?}"));
            }
        }
        let without_remedy = failure.findings.list.iter().find(|one| one.diagnostic.hint.is_none() && one.diagnostic.code != "file.syntax");
        if let Some(one) = without_remedy {
            wrong.push(format!("{name}: no remedy: {:?}", one.diagnostic));
        }
    }
    assert!(wrong.is_empty(), "\n{}", wrong.join("\n"));
}

#[test]
fn every_form_prints_every_faulty_model() {
    for path in faulty_models() {
        let findings = failure_of(&path).findings;
        let human = render(&findings, DiagnosticsForm::Human, false);
        let short = render(&findings, DiagnosticsForm::Short, false);
        let json: serde_json::Value = serde_json::from_str(&render(&findings, DiagnosticsForm::Json, false)).unwrap();
        assert_eq!(json.as_array().unwrap().len(), findings.list.len());
        assert_eq!(short.lines().count(), findings.list.len());
        assert!(human.contains("nothing was written"), "{human}");
        for one in &findings.list {
            assert!(human.contains(one.diagnostic.code));
        }
        assert!(!human.contains('\u{1b}') && !short.contains('\u{1b}'));
    }
}

#[test]
fn the_short_form_is_one_line_with_file_line_and_column() {
    let path = folder().join("value-zero-weight.toml");
    let short = render(&failure_of(&path).findings, DiagnosticsForm::Short, false);
    let rest = short.strip_prefix(path.to_str().unwrap()).unwrap();
    assert!(rest.starts_with(":22:21: error: 0 kN/m3 is outside the limits: it must be over 0"), "{rest}");
}

fn write(name: &str, bytes: &[u8]) -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(format!("bad-{}", std::process::id()));
    std::fs::create_dir_all(&folder).unwrap();
    let path = folder.join(name);
    std::fs::write(&path, bytes).unwrap();
    path
}

/// What is no text, or no model at all, ends quickly and in words.
#[test]
fn files_that_are_no_models_are_refused_quickly() {
    let ten_mb = vec![b'x'; 10 << 20];
    let long_line = [b"title = \"".as_slice(), &vec![b'y'; 3 << 20], b"\"\nformat = 1\n"].concat();
    let long_broken_line = [b"format = 1\n".as_slice(), &vec![b'['; 3 << 20]].concat();
    let deep = [b"a = ".as_slice(), &vec![b'['; 100_000], &vec![b']'; 100_000]].concat();
    let deep_key = format!("{}x = 1\n", "a.".repeat(100_000));
    let many_keys = (0..200_000).map(|i| format!("k{i} = {i}")).collect::<Vec<_>>().join("\n");
    let many_errors = "= \n".repeat(100_000);
    let cases: [(&str, &[u8], u8, &str); 14] = [
        ("empty.toml", b"", 3, "file.empty"),
        ("blank.toml", b" \n\t\n", 3, "file.empty"),
        ("bom-only.toml", b"\xef\xbb\xbf", 3, "file.empty"),
        ("zero.toml", b"format = 1\n\0\0", 3, "file.not-text"),
        ("binary.toml", b"\x7fELF\x02\x01\x01\x00\xff\xfe\x80", 3, "file.not-text"),
        ("latin-1.toml", b"format = 1\ntitle = \"K\xfcste\"\n", 3, "file.not-text"),
        ("utf-16.toml", b"\xff\xfef\0o\0", 3, "file.not-text"),
        ("ten-mb.toml", &ten_mb, 3, "file.too-large"),
        ("long-line.toml", &long_line, 3, "key.missing"),
        ("long-broken-line.toml", &long_broken_line, 3, "file.syntax"),
        ("deep.toml", &deep, 3, "file.syntax"),
        ("deep-key.toml", deep_key.as_bytes(), 3, "file.syntax"),
        ("many-keys.toml", many_keys.as_bytes(), 3, "key.unknown"),
        ("many-errors.toml", many_errors.as_bytes(), 3, "file.syntax"),
    ];
    for (name, bytes, exit, code) in cases {
        let start = Instant::now();
        let failure = failure_of(&write(name, bytes));
        assert_eq!(failure.exit_code(), exit, "{name}");
        assert!(failure.findings.list.iter().any(|one| one.diagnostic.code == code), "{name}: {:?}", failure.findings.list.first());
        for form in [DiagnosticsForm::Human, DiagnosticsForm::Short, DiagnosticsForm::Json] {
            let text = render(&failure.findings, form, false);
            assert!(text.len() < 200_000, "{name}: {} bytes", text.len());
        }
        assert!(start.elapsed() < TOO_SLOW, "{name} took {:?}", start.elapsed());
    }
}

#[test]
fn a_file_that_cannot_be_read_is_exit_code_4() {
    for path in [folder().join("no-such-model.toml"), folder()] {
        let failure = failure_of(&path);
        assert_eq!(failure.exit_code(), 4);
        assert!(render(&failure.findings, DiagnosticsForm::Short, false).contains("cannot read"));
    }
}

#[cfg(unix)]
#[test]
fn a_link_out_of_the_folder_is_refused() {
    let model = std::fs::read_to_string(folder().join("csv-empty.toml")).unwrap();
    let path = write("linked.toml", model.replace("csv-empty.csv", "link.csv").as_bytes());
    let link = path.with_file_name("link.csv");
    let _ = std::fs::remove_file(&link);
    std::os::unix::fs::symlink(folder().join("good.csv"), &link).unwrap();
    let failure = failure_of(&path);
    assert_eq!((failure.exit_code(), failure.findings.list[0].diagnostic.code), (3, "file.outside"));
}

/// Control characters in titles, names and keys must not reach a terminal.
#[test]
fn text_of_the_file_cannot_write_to_the_terminal() {
    let text =
        "format = 1\ntitle = \"\\u001b[2J\\u202e\"\n\"\\u001b[31mkey\" = 1\n[rocks.\"a\\u0007\"]\n[[layers]]\nrock = \"\\u001b]0;x\"\n";
    let failure = model_file::from_text(text.to_owned(), "a\u{1b}b.toml", &folder()).unwrap_err();
    for form in [DiagnosticsForm::Human, DiagnosticsForm::Short, DiagnosticsForm::Json] {
        let shown = render(&failure.findings, form, false);
        assert!(!shown.chars().any(|c| (c.is_control() && c != '\n') || c == '\u{202e}'), "{shown:?}");
    }
}

/// Mangled models, the same ones in every run: whatever comes out, it is findings or a model, never a panic.
#[test]
fn mangled_models_never_panic() {
    let full = std::fs::read_to_string(folder().join("../full/full.toml")).unwrap();
    let pieces = [
        "[",
        "]",
        "{",
        "}",
        "\"",
        "=",
        "\n",
        ",",
        "-1",
        "1e308",
        "nan",
        "'''",
        "#",
        ".",
        "[[layers]]\n",
        "\u{feff}",
        "é",
        "{ mean = 1, cov = 9 }",
        "[]",
    ];
    let mut state = 42_u64;
    let mut random = |below: usize| {
        // Constants of a 64-bit linear congruential generator (Knuth, MMIX).
        state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (state >> 33) as usize % below.max(1)
    };
    for text in [full.as_str(), brinkline::commands::STARTER] {
        for _ in 0..300 {
            let mut mangled: Vec<char> = text.chars().collect();
            for _ in 0..=random(4) {
                let at = random(mangled.len());
                let n_cut = [1 + random(30), 0, 1][random(3)];
                let piece = if n_cut > 1 { "" } else { pieces[random(pieces.len())] };
                let end = (at + n_cut).min(mangled.len());
                mangled.splice(at..end, piece.chars()).for_each(drop);
            }
            let mangled: String = mangled.into_iter().collect();
            if let Err(failure) = model_file::from_text(mangled, "mangled.toml", &folder().join("../full")) {
                assert!(failure.findings.n_errors() > 0);
                assert!(!render(&failure.findings, DiagnosticsForm::Human, true).is_empty());
            }
        }
    }
}

/// A point cloud is no section.
#[test]
fn a_surface_of_too_many_points_is_refused() {
    let rows: Vec<String> = (0..60_000).map(|i| format!("{},{}", f64::from(i) * 0.001, f64::from(i) * 0.0005)).collect();
    write("cloud.csv", format!("x_m,z_m\n{}\n", rows.join("\n")).as_bytes());
    let model = std::fs::read_to_string(folder().join("csv-empty.toml")).unwrap();
    let failure = failure_of(&write("cloud.toml", model.replace("csv-empty.csv", "cloud.csv").as_bytes()));
    assert!(failure.findings.list.iter().any(|one| one.diagnostic.code == "surface.many-points"), "{:?}", failure.findings.list);
}

/// All demo models and the starter are read without an error.
#[test]
fn models_that_are_shipped_are_read() {
    let starter = write("starter.toml", brinkline::commands::STARTER.as_bytes());
    let demos = Path::new(env!("CARGO_MANIFEST_DIR")).join("../demo-models");
    let mut files = vec![starter];
    for folder in std::fs::read_dir(demos).unwrap().map(|entry| entry.unwrap().path()).filter(|path| path.is_dir()) {
        files.extend(std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()));
    }
    files.retain(|path| path.extension().is_some_and(|extension| extension == "toml"));
    assert!(files.len() >= 5);
    for path in files {
        if let Err(failure) = model_file::read(&path) {
            panic!("{}", render(&failure.findings, DiagnosticsForm::Human, false));
        }
    }
}

/// The page holds the key reference of the table of keys; `BRINKLINE_UPDATE_DOCS=1` rewrites it.
#[test]
fn the_page_about_the_model_file_follows_the_table_of_keys() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("../docs/model-file.md");
    let page = std::fs::read_to_string(&path).unwrap();
    let (start, end) = ("<!-- key reference -->\n", "<!-- end of key reference -->\n");
    let (head, rest) = page.split_once(start).unwrap();
    let (_, tail) = rest.split_once(end).unwrap();
    let fresh = format!("{head}{start}\n{}\n{end}{tail}", model_file::key_reference());
    if std::env::var_os("BRINKLINE_UPDATE_DOCS").is_some() {
        std::fs::write(&path, &fresh).unwrap();
    }
    assert!(fresh == std::fs::read_to_string(&path).unwrap(), "run the test once with BRINKLINE_UPDATE_DOCS=1");
}

/// Every code that the reader and the checks of the model use stands in the page, and no other.
#[test]
fn the_page_about_the_model_file_lists_every_code() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("..");
    let page = std::fs::read_to_string(root.join("docs/model-file.md")).unwrap();
    let listed: Vec<&str> = page
        .lines()
        .filter_map(|line| line.strip_prefix("| `")?.split_once("` |"))
        .map(|(code, _)| code)
        .filter(|code| code.contains('.'))
        .collect();
    let mut used = std::collections::BTreeSet::new();
    let mut open = vec![
        root.join("cli/src/model_file.rs"),
        root.join("cli/src/model_file"),
        root.join("cli/src/survey_csv.rs"),
        root.join("checker/src/model"),
        root.join("checker/src/section"),
    ];
    while let Some(path) = open.pop() {
        if path.is_dir() {
            open.extend(std::fs::read_dir(path).unwrap().map(|entry| entry.unwrap().path()));
        } else if !path.ends_with("tests.rs") {
            used.extend(codes(&std::fs::read_to_string(path).unwrap()));
        }
    }
    assert!(used.len() > 50, "{}", used.len());
    let missing: Vec<&String> = used.iter().filter(|code| !listed.contains(&code.as_str())).collect();
    assert!(missing.is_empty(), "not in docs/model-file.md: {missing:?}");
    let is_ours = |code: &&&str| used.iter().any(|used| used.split('.').next() == code.split('.').next());
    let stale: Vec<&&str> =
        listed.iter().filter(is_ours).filter(|code| !used.contains(**code)).filter(|code| !code.contains(['[', '*'])).collect();
    assert!(stale.is_empty(), "listed but not used: {stale:?}");
}

/// Texts in quotes of the form `word.words-with-dashes` that follow `error(`, `warning(` or `code:`.
fn codes(source: &str) -> Vec<String> {
    let mut codes = Vec::new();
    for mark in ["Diagnostic::error(", "Diagnostic::warning(", "code: ", "wrong(", "fault("] {
        for (i, _) in source.match_indices(mark) {
            let rest = source[i + mark.len()..].trim_start();
            if let Some((code, _)) = rest.strip_prefix('"').and_then(|rest| rest.split_once('"')) {
                let is_code = code.split_once('.').is_some_and(|(area, word)| !area.is_empty() && !word.is_empty());
                if is_code && code.bytes().all(|b| b.is_ascii_lowercase() || b == b'.' || b == b'-') {
                    codes.push(code.to_owned());
                }
            }
        }
    }
    codes
}
