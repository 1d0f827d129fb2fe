//! Rules of the results folder: untouched unless asked, whole or not at all, one run at a time.
use std::fs;
use std::path::{Path, PathBuf};

use super::{CHECKED_MARK, FolderError, Staging};
use crate::interrupt::Interrupt;

/// A fresh folder for one test.
fn scratch(name: &str) -> PathBuf {
    let folder = std::env::temp_dir().join(format!("brinkline-folder-{name}-{}", std::process::id()));
    let _ = fs::remove_dir_all(&folder);
    fs::create_dir_all(&folder).unwrap();
    folder
}

#[expect(clippy::disallowed_methods, reason = "tests of the boundary")]
fn read(path: &Path) -> String {
    fs::read_to_string(path).unwrap()
}

#[expect(clippy::disallowed_methods, reason = "tests of the boundary")]
fn put(path: &Path, text: &str) {
    fs::write(path, text).unwrap();
}

fn run(target: &Path, overwrite: bool, text: &str) -> Result<Vec<String>, FolderError> {
    let mut staging = Staging::open(target, overwrite, &Interrupt::default())?;
    staging.write("summary.json", text.as_bytes())?;
    staging.write("fields/depth-0.00.vtu", text.as_bytes())?;
    staging.commit()
}

fn names(folder: &Path) -> Vec<String> {
    let mut names: Vec<String> = fs::read_dir(folder).unwrap().map(|e| e.unwrap().file_name().to_string_lossy().into_owned()).collect();
    names.sort();
    names
}

#[test]
fn files_appear_together_and_nothing_else_stays() {
    let scratch = scratch("together");
    let target = scratch.join("results");
    let mut staging = Staging::open(&target, false, &Interrupt::default()).unwrap();
    staging.write("summary.json", b"{}").unwrap();
    assert!(!target.exists());
    staging.commit().unwrap();
    assert_eq!(names(&scratch), ["results"]);
    assert_eq!(names(&target), ["summary.json"]);
}

#[test]
fn an_existing_folder_is_refused_and_not_touched() {
    let scratch = scratch("exists");
    let target = scratch.join("results");
    fs::create_dir(&target).unwrap();
    put(&target.join("notes.txt"), "mine");
    let error = run(&target, false, "{}").unwrap_err();
    assert!(error.to_string().ends_with("exists already and was not touched; choose another folder with --out, or add --overwrite"));
    assert_eq!((names(&scratch), names(&target)), (vec!["results".into()], vec!["notes.txt".into()]));
}

#[test]
fn overwriting_replaces_results_and_keeps_other_files() {
    let scratch = scratch("overwrite");
    let target = scratch.join("results");
    run(&target, false, "{\"old\": 1}").unwrap();
    put(&target.join("notes.txt"), "mine");
    put(&target.join("fields/depth-9.00.vtu"), "stale");
    run(&target, true, "{\"new\": 1}").unwrap();
    assert_eq!(names(&target), ["fields", "notes.txt", "summary.json"]);
    assert_eq!(names(&target.join("fields")), ["depth-0.00.vtu"]);
    assert_eq!(read(&target.join("summary.json")), "{\"new\": 1}");
}

#[test]
fn a_checked_report_is_never_overwritten() {
    let scratch = scratch("checked");
    let by_summary = scratch.join("a");
    run(&by_summary, false, r#"{"report": {"checked_by": {"name": "B. Reader"}}}"#).unwrap();
    assert!(matches!(run(&by_summary, true, "{}"), Err(FolderError::Checked(_))));
    let by_report = scratch.join("b");
    fs::create_dir(&by_report).unwrap();
    put(&by_report.join("report.html"), &format!("<html>{CHECKED_MARK}</html>"));
    assert!(matches!(run(&by_report, true, "{}"), Err(FolderError::Checked(_))));
    assert_eq!(names(&by_report), ["report.html"]);
}

#[test]
fn a_second_run_in_the_same_folder_is_refused() {
    let scratch = scratch("two-runs");
    let target = scratch.join("results");
    let first = Staging::open(&target, false, &Interrupt::default()).unwrap();
    assert!(matches!(Staging::open(&target, false, &Interrupt::default()), Err(FolderError::InUse(_))));
    first.commit().unwrap();
    assert_eq!(names(&scratch), ["results"]);
}

#[test]
fn what_a_killed_run_left_is_cleared() {
    let scratch = scratch("killed");
    let target = scratch.join("results");
    fs::create_dir(scratch.join(".results.writing")).unwrap();
    put(&scratch.join(".results.writing/half"), "half");
    put(&scratch.join(".results.lock"), "");
    run(&target, false, "{}").unwrap();
    assert_eq!(names(&scratch), ["results"]);
    assert_eq!(names(&target), ["fields", "summary.json"]);
}

#[test]
fn a_dropped_run_leaves_nothing() {
    let scratch = scratch("dropped");
    let mut staging = Staging::open(&scratch.join("results"), false, &Interrupt::default()).unwrap();
    staging.write("summary.json", b"{}").unwrap();
    drop(staging);
    assert_eq!(names(&scratch), Vec::<String>::new());
}

#[test]
fn a_missing_parent_and_a_file_in_the_way_are_named() {
    let scratch = scratch("parent");
    assert!(matches!(run(&scratch.join("no/such"), false, "{}"), Err(FolderError::NoParent(_))));
    put(&scratch.join("file"), "x");
    assert!(matches!(run(&scratch.join("file"), true, "{}"), Err(FolderError::NotAFolder(_))));
    assert_eq!(names(&scratch), ["file"]);
}
