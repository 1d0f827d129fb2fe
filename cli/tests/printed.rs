//! What pages quote from the program is what the program prints.
//!
//! A page quotes by a line `<!-- printed by: brinkline ARGS | from: WORDS | lines: N -->` before a block: the block holds the lines of
//! the output from the first that begins with WORDS up to the next empty one, at most N. These are this program's own numbers: regression pins, no
//! verification. With `BRINKLINE_UPDATE_DOCS=1` the blocks are written anew; a number that moved then belongs into CHANGELOG.md under Results.
#![expect(clippy::unwrap_used, clippy::disallowed_methods, reason = "tests read files and fail by panicking")]
use std::collections::BTreeMap;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

const MARK: &str = "<!-- printed by: brinkline ";

/// One quotation on a page.
struct Quote {
    args: String,
    from: String,
    most: usize,
    /// Lines of the page that hold the quoted text.
    lines: std::ops::Range<usize>,
}

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("..")
}

fn quotes(page: &[&str]) -> Vec<Quote> {
    let mut all = Vec::new();
    for (i, line) in page.iter().enumerate() {
        let Some(rest) = line.strip_prefix(MARK) else { continue };
        let (args, rest) = rest.strip_suffix(" -->").unwrap().split_once(" | from: ").unwrap();
        let (from, most) = rest.split_once(" | lines: ").map_or((rest, usize::MAX), |(from, n)| (from, n.parse().unwrap()));
        let start = (i..page.len()).find(|&k| page[k].starts_with("```")).unwrap() + 1;
        let end = (start..page.len()).find(|&k| page[k].starts_with("```")).unwrap();
        all.push(Quote { args: args.to_owned(), from: from.to_owned(), most, lines: start..end });
    }
    all
}

/// What the program prints; results go to a folder that is removed again.
fn printed(folder: &Path, args: &str) -> String {
    let results = std::env::temp_dir().join(format!("brinkline-printed-{}", std::process::id()));
    let mut command = Command::new(env!("CARGO_BIN_EXE_brinkline"));
    command.args(args.split(' ')).current_dir(folder).stdin(Stdio::null());
    if args.starts_with("assess ") {
        command.arg("--out").arg(&results);
    }
    let output = command.output().unwrap();
    let _ = std::fs::remove_dir_all(&results);
    assert_eq!(output.status.code(), Some(0), "{args}: {}", String::from_utf8_lossy(&output.stderr));
    String::from_utf8(output.stdout).unwrap()
}

fn section<'a>(text: &'a str, quote: &Quote) -> Vec<&'a str> {
    let lines = text.lines().skip_while(|line| !line.starts_with(&quote.from));
    let found: Vec<&str> = lines.take_while(|line| !line.is_empty()).take(quote.most).map(str::trim_end).collect();
    assert!(!found.is_empty(), "nothing printed begins with `{}`", quote.from);
    found
}

/// Whether two printed words are the same, numbers to one unit in the last place printed: what is left to another processor.
fn same_word(a: &str, b: &str) -> bool {
    let plain = |word: &str| word.trim_matches(|c: char| !c.is_ascii_digit() && c != '-').to_owned();
    let places = |word: &str| word.split_once('.').map_or(0, |(_, behind)| behind.len());
    let (x, y) = (plain(a), plain(b));
    match (x.parse::<f64>(), y.parse::<f64>()) {
        (Ok(u), Ok(v)) => (u - v).abs() <= 1.001 * 0.1_f64.powi(i32::try_from(places(&x).min(places(&y))).unwrap_or(0)),
        _ => a == b,
    }
}

fn same_line(a: &str, b: &str) -> bool {
    // rules under a table's head are as wide as its widest entry; an error may be printed as "< 0.001"
    let words = |line: &str| {
        line.split_whitespace()
            .filter(|w| *w != "<" && (!w.trim_matches('-').is_empty() || *w == "-"))
            .map(str::to_owned)
            .collect::<Vec<_>>()
    };
    let (a, b) = (words(a), words(b));
    a.len() == b.len() && a.iter().zip(&b).all(|(a, b)| same_word(a, b))
}

#[track_caller]
fn check(page: &str) {
    let path = root().join(page);
    let text = std::fs::read_to_string(&path).unwrap();
    let mut lines: Vec<&str> = text.lines().collect();
    let quotes = quotes(&lines);
    assert!(!quotes.is_empty(), "{page} quotes nothing");
    let mut outputs: BTreeMap<String, String> = BTreeMap::new();
    for quote in &quotes {
        outputs.entry(quote.args.clone()).or_insert_with(|| printed(path.parent().unwrap(), &quote.args));
    }
    if std::env::var_os("BRINKLINE_UPDATE_DOCS").is_some() {
        for quote in quotes.iter().rev() {
            lines.splice(quote.lines.clone(), section(&outputs[&quote.args], quote));
        }
        std::fs::write(&path, format!("{}\n", lines.join("\n"))).unwrap();
        return;
    }
    for quote in &quotes {
        let now = section(&outputs[&quote.args], quote);
        let quoted = &lines[quote.lines.clone()];
        let same = now.len() == quoted.len() && now.iter().zip(quoted).all(|(a, b)| same_line(a, b));
        assert!(
            same,
            "{page} quotes\n{}\nbut `{}` prints\n{}\n(BRINKLINE_UPDATE_DOCS=1 writes it anew)",
            quoted.join("\n"),
            quote.args,
            now.join("\n")
        );
    }
}

#[test]
fn numbers_may_differ_in_the_last_place_only() {
    assert!(same_line("a  0.63  170 kPa", "a 0.64 171 kPa") && same_line("-----  ---", "--  ----"));
    assert!(!same_line("a 0.63", "a 0.65") && !same_line("under", "over") && !same_line("a 1", "a 1 2"));
}

#[test]
fn slow_the_readme_shows_what_the_demo_prints() {
    check("README.md");
}

#[test]
fn ostrel_head_prints_what_its_page_quotes() {
    check("demo-models/ostrel-head/README.md");
}

#[test]
fn vinterhame_slab_prints_what_its_page_quotes() {
    check("demo-models/vinterhame-slab/README.md");
}

#[test]
fn dunmarrow_sands_prints_what_its_page_quotes() {
    check("demo-models/dunmarrow-sands/README.md");
}

#[test]
fn kessarine_bench_prints_what_its_page_quotes() {
    check("demo-models/kessarine-bench/README.md");
}
