//! Rules of the house that a machine can hold: arrows between crates, sizes and heads of files, words, licenses, docs that must agree.
use std::collections::{BTreeMap, BTreeSet};
use std::path::{Path, PathBuf};
use std::process::Command;

use serde_json::Value;

/// The only arrows between the crates of the workspace, by package; tests and benches of a crate may use any.
const ALLOWED: [(&str, &[&str]); 5] = [
    ("fem-core", &[]),
    ("mesher", &["fem-core"]),
    ("checker", &["fem-core", "mesher"]),
    ("brinkline", &["checker"]),
    ("workspace-tests", &["brinkline", "checker", "fem-core", "mesher"]),
];
/// Longest source file that is not a file of tests, lines.
const LONGEST_FILE: usize = 500;
/// Longest DEVELOPERS.md, lines.
const LONGEST_DEVELOPERS: usize = 200;
/// Licenses of which every dependency must offer one in each of its parts.
const LICENSES: [&str; 10] =
    ["MIT", "Apache-2.0", "BSD-2-Clause", "BSD-3-Clause", "ISC", "Zlib", "Unlicense", "Unicode-3.0", "0BSD", "CC0-1.0"];
/// Folders that hold nothing written by hand.
const NOT_OURS: [&str; 4] = [".git", "target", "node_modules", "results"];
/// Endings of the files that are read for words.
const TEXT: [&str; 10] = ["rs", "md", "toml", "csv", "py", "sh", "mjs", "json", "html", "txt"];

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).parent().unwrap().to_owned()
}

/// All files written by hand with their path from the root, `/` between parts.
fn files() -> Vec<(String, PathBuf)> {
    let (root, mut open, mut all) = (root(), vec![root()], Vec::new());
    while let Some(folder) = open.pop() {
        for entry in std::fs::read_dir(&folder).unwrap() {
            let path = entry.unwrap().path();
            let name = path.file_name().unwrap().to_string_lossy().into_owned();
            if path.is_dir() {
                let skipped = NOT_OURS.iter().any(|no| name == *no || name.ends_with(&format!("-{no}")));
                // an environment of another language, or a target folder of another name
                let foreign = path.join("pyvenv.cfg").is_file() || path.join("CACHEDIR.TAG").is_file();
                if !skipped && !foreign {
                    open.push(path);
                }
            } else {
                let parts: Vec<String> = path.strip_prefix(&root).unwrap().iter().map(|p| p.to_string_lossy().into_owned()).collect();
                all.push((parts.join("/"), path));
            }
        }
    }
    all.sort();
    all
}

fn sources() -> Vec<(String, String)> {
    let rust = files().into_iter().filter(|(name, _)| Path::new(name).extension().is_some_and(|e| e == "rs"));
    rust.map(|(name, path)| (name, std::fs::read_to_string(path).unwrap())).collect()
}

fn is_tests(name: &str) -> bool {
    name.ends_with("/tests.rs") || name.contains("/tests/")
}

fn text_of(name: &str) -> String {
    std::fs::read_to_string(root().join(name)).unwrap_or_else(|error| panic!("{name}: {error}"))
}

#[track_caller]
fn none(found: &[String], what: &str) {
    assert!(found.is_empty(), "{what}:\n  {}", found.join("\n  "));
}

/// Packages as cargo sees them for this machine.
fn metadata() -> Value {
    let rustc = Command::new("rustc").arg("-vV").output().unwrap();
    let about = String::from_utf8(rustc.stdout).unwrap();
    let host = about.lines().find_map(|line| line.strip_prefix("host: ")).unwrap().to_owned();
    let cargo = std::env::var("CARGO").unwrap_or_else(|_| "cargo".into());
    let output = Command::new(cargo)
        .args(["metadata", "--format-version", "1", "--locked", "--filter-platform", &host])
        .current_dir(root())
        .output()
        .unwrap();
    assert!(output.status.success(), "{}", String::from_utf8_lossy(&output.stderr));
    serde_json::from_slice(&output.stdout).unwrap()
}

fn packages(metadata: &Value) -> &Vec<Value> {
    metadata["packages"].as_array().unwrap()
}

#[test]
fn arrows_between_crates_are_the_allowed_ones() {
    let metadata = metadata();
    let members: BTreeSet<&str> = metadata["workspace_members"].as_array().unwrap().iter().map(|id| id.as_str().unwrap()).collect();
    let ours: Vec<&Value> = packages(&metadata).iter().filter(|package| members.contains(package["id"].as_str().unwrap())).collect();
    let names: BTreeSet<&str> = ours.iter().map(|package| package["name"].as_str().unwrap()).collect();
    let allowed: BTreeMap<&str, &[&str]> = ALLOWED.into_iter().collect();
    assert_eq!(names, allowed.keys().copied().collect(), "the table names every crate");
    let mut wrong = Vec::new();
    for package in ours {
        let from = package["name"].as_str().unwrap();
        for dependency in package["dependencies"].as_array().unwrap() {
            let to = dependency["name"].as_str().unwrap();
            let for_tests = dependency["kind"].as_str() == Some("dev");
            if names.contains(to) && !for_tests && !allowed[from].contains(&to) {
                wrong.push(format!("{from} -> {to}"));
            }
        }
    }
    none(&wrong, "arrows that are not allowed");
}

/// Whether one of the alternatives is allowed in every part of a license expression.
fn is_allowed(expression: &str) -> bool {
    let expression = expression.replace(" / ", " OR ").replace('/', " OR ");
    expression.split(" AND ").all(|part| {
        let part = part.trim_matches(|c| c == '(' || c == ')');
        part.split(" OR ").any(|one| LICENSES.contains(&one.trim_matches(|c| c == '(' || c == ')')))
    })
}

#[test]
fn every_dependency_has_an_allowed_license() {
    assert!(is_allowed("(MIT OR Apache-2.0) AND Unicode-3.0") && is_allowed("MIT/Apache-2.0") && !is_allowed("GPL-3.0"));
    assert!(!is_allowed("MIT AND GPL-3.0"));
    let metadata = metadata();
    let mut wrong = Vec::new();
    for package in packages(&metadata) {
        let license = package["license"].as_str().unwrap_or("none stated");
        if !is_allowed(license) {
            wrong.push(format!("{}: {license}", package["name"]));
        }
    }
    none(&wrong, "licenses");
}

#[test]
fn every_source_file_says_what_it_is_for_and_stays_short() {
    let sources = sources();
    assert!(sources.len() > 100, "{} sources found", sources.len());
    let mut wrong = Vec::new();
    for (name, text) in &sources {
        // `thing/tests.rs` says by its name what it is for; a file that others include cannot begin with such a line
        let named = name.ends_with("/tests.rs") || name.contains("/benches/shared/");
        if !named && !text.starts_with("//! ") {
            wrong.push(format!("{name} does not begin with `//!`"));
        }
        let lines = text.lines().count();
        if LONGEST_FILE < lines && !is_tests(name) {
            wrong.push(format!("{name} has {lines} lines"));
        }
    }
    none(&wrong, "heads and lengths");
}

/// Words that are put together here, so that this file does not hold them.
fn unfinished() -> Vec<String> {
    [["TO", "DO"], ["FIX", "ME"], ["db", "g!("], ["to", "do!("], ["unimple", "mented!("], ["#[ign", "ore"]].map(|w| w.concat()).to_vec()
}

#[test]
fn nothing_unfinished_is_left() {
    let mut wrong = Vec::new();
    for (name, text) in sources() {
        for (i_line, line) in text.lines().enumerate() {
            wrong.extend(unfinished().iter().filter(|word| line.contains(*word)).map(|word| format!("{name}:{}: {word}", i_line + 1)));
        }
    }
    none(&wrong, "unfinished");
}

#[test]
fn no_text_says_what_must_not_be_said() {
    let never: Vec<String> = [
        // about how this text came about, and where
        ["lec", "ture"],
        ["/wo", "rk/"],
        ["/tm", "p/"],
        ["/ho", "me/"],
        ["/ro", "ot/"],
        // about a cliff
        ["is sa", "fe"],
        ["are sa", "fe"],
        ["low ri", "sk"],
        ["cliff is sta", "ble"],
        ["overhang is sta", "ble"],
        ["will not fa", "ll"],
    ]
    .map(|w| w.concat())
    .to_vec();
    // the list of the words that no output may hold, and those who look for them
    let lists = ["cli/src/output/words.rs", "tests/browser/report.mjs"];
    let mut wrong = Vec::new();
    for (name, path) in files() {
        let ending = name.rsplit('.').next().unwrap_or_default();
        if !TEXT.contains(&ending) || lists.contains(&name.as_str()) {
            continue;
        }
        let text = String::from_utf8_lossy(&std::fs::read(path).unwrap()).to_lowercase();
        for (i_line, line) in text.lines().enumerate() {
            wrong.extend(never.iter().filter(|word| line.contains(*word)).map(|word| format!("{name}:{}: {word}", i_line + 1)));
        }
    }
    none(&wrong, "words");
}

#[test]
fn the_guide_for_developers_is_short_and_names_what_exists() {
    let text = text_of("DEVELOPERS.md");
    let lines = text.lines().count();
    assert!(lines <= LONGEST_DEVELOPERS, "{lines} lines");
    let mut missing = Vec::new();
    for name in text.split('`').skip(1).step_by(2) {
        let looks_like_path = name.contains('/') && !name.contains(' ') && !name.contains('*') && !name.starts_with("src/");
        let optional = name == "tests/fuzz";
        let inside_checker = root().join("checker/src").join(name);
        if looks_like_path && !optional && !root().join(name).exists() && !inside_checker.exists() {
            missing.push(name.to_owned());
        }
    }
    none(&missing, "paths that do not exist");
}

#[test]
fn every_file_that_a_page_links_to_exists() {
    let mut wrong = Vec::new();
    for (name, path) in files().into_iter().filter(|(name, _)| Path::new(name).extension().is_some_and(|e| e == "md")) {
        let text = std::fs::read_to_string(&path).unwrap();
        for link in text.split("](").skip(1).filter_map(|rest| rest.split(')').next()) {
            let file = link.split('#').next().unwrap_or_default();
            let inside = !link.contains("://") && !file.is_empty() && !file.contains(' ');
            if inside && !path.parent().unwrap().join(file).exists() {
                wrong.push(format!("{name}: {link}"));
            }
        }
    }
    none(&wrong, "links to nothing");
}

#[test]
fn the_test_command_of_the_readme_is_the_one_that_the_checks_run() {
    let readme = text_of("README.md");
    let command = readme.lines().find(|line| line.starts_with("cargo test ")).expect("README.md names the test command");
    assert_eq!(command, "cargo test --release --workspace --locked");
    let run = text_of(".ci/run");
    assert!(run.contains("test_command=$(sed -n 's/^\\(cargo test .*\\)$/\\1/p' README.md | head -n 1)"), "{run}");
    assert!(run.trim_end().ends_with("$test_command"), "the last count printed is that of the tests");
}

/// Equations that code cites stand in the theory.
#[test]
fn every_equation_that_code_cites_exists() {
    let theory = text_of("docs/theory.md");
    let mut wrong = Vec::new();
    for (name, text) in sources() {
        for cited in text.split(concat!("docs/theory.md", " eq. (")).skip(1).filter_map(|rest| rest.split(')').next()) {
            if !theory.contains(&format!("({cited})")) {
                wrong.push(format!("{name}: ({cited})"));
            }
        }
    }
    none(&wrong, "equations");
}

/// Every demo has a page, is listed, and its model file is found.
#[test]
fn every_demo_has_its_page() {
    let list = text_of("demo-models/README.md");
    let mut n_demos = 0;
    for entry in std::fs::read_dir(root().join("demo-models")).unwrap() {
        let path = entry.unwrap().path();
        if !path.is_dir() {
            continue;
        }
        let name = path.file_name().unwrap().to_string_lossy().into_owned();
        assert!(path.join(format!("{name}.toml")).is_file(), "{name} has no model of its name");
        assert!(path.join("README.md").is_file(), "{name} has no README.md");
        assert!(list.contains(&format!("({name}/README.md)")), "{name} is not in the list");
        n_demos += 1;
    }
    assert!(n_demos >= 4, "{n_demos} demos");
}

/// Tests that the page of verifications names exist.
#[test]
fn every_test_that_the_verification_names_exists() {
    let page = text_of("docs/verification.md");
    let sources: String =
        sources().into_iter().filter(|(name, _)| is_tests(name) || name.starts_with("tests/")).map(|(_, text)| text).collect();
    let mut wrong = Vec::new();
    for row in page.lines().filter(|line| line.starts_with('|')) {
        let named = row.split('`').skip(1).step_by(2).filter(|name| name.contains('_') && !name.contains('/'));
        let missing = named.filter(|name| !sources.contains(&format!("fn {name}(")) && !sources.contains(&format!(" {name},")));
        wrong.extend(missing.map(str::to_owned));
    }
    none(&wrong, "tests that do not exist");
}
