//! The folder of results: every file appears whole or not at all, and nothing of an earlier run is lost unasked.
//!
//! All files are written into a hidden folder beside the target and renamed at the end. A lock file beside it keeps two runs
//! apart; the system drops the lock when a run dies, so that what a killed run left is cleared by the next one.
use std::fs;
use std::fs::{File, TryLockError};
use std::io;
use std::path::{Path, PathBuf};

use crate::interrupt::Interrupt;

/// Why the results cannot be written. Exit code 4.
#[derive(Debug, thiserror::Error)]
#[non_exhaustive]
pub enum FolderError {
    /// The target exists.
    #[error("`{}` exists already and was not touched; choose another folder with --out, or add --overwrite", .0.display())]
    Exists(PathBuf),
    /// The target is something else than a folder.
    #[error("`{}` is not a folder and was not touched; choose another folder with --out", .0.display())]
    NotAFolder(PathBuf),
    /// The folder holds a checked report.
    #[error("`{}` holds a report with a checker's name and is never overwritten; choose another folder with --out", .0.display())]
    Checked(PathBuf),
    /// Another run is writing there.
    #[error("another run is writing to `{}`; wait for it, or choose another folder with --out", .0.display())]
    InUse(PathBuf),
    /// The folder around the target is missing.
    #[error("the folder `{}` does not exist; make it first, or choose another one with --out", .0.display())]
    NoParent(PathBuf),
    /// The system said no.
    #[error("cannot write `{}`: {source}", path.display())]
    Io {
        /// File or folder.
        path: PathBuf,
        /// What the system said.
        source: io::Error,
    },
}

/// Name of the file that is removed first and written last when results are replaced.
const LAST: &str = "summary.json";
/// Text in a report that has a checker's name.
pub const CHECKED_MARK: &str = r#"<meta name="report-checked" content="yes">"#;

/// Results on their way: files beside the target until [`Staging::commit`].
#[derive(Debug)]
pub struct Staging {
    target: PathBuf,
    hidden: PathBuf,
    files: Vec<String>,
    replaces: bool,
    interrupt: Interrupt,
    /// Held until the end; the system drops it with the process.
    _lock: Lock,
    committed: bool,
}

#[derive(Debug)]
struct Lock {
    path: PathBuf,
    _file: File,
}

impl Staging {
    /// Looks whether the target may be written and opens the hidden folder beside it.
    ///
    /// # Errors
    /// Every [`FolderError`]; nothing was touched then.
    pub fn open(target: &Path, overwrite: bool, interrupt: &Interrupt) -> Result<Self, FolderError> {
        let replaces = may_write(target, overwrite)?;
        let (parent, name) = parent_and_name(target)?;
        let staging = parent.join(format!(".{name}.writing"));
        let mut unfinished = interrupt.lock();
        let lock = lock(&parent.join(format!(".{name}.lock")), target)?;
        if staging.exists() {
            // We hold the lock, so whoever made this folder is dead.
            fs::remove_dir_all(&staging).map_err(|source| FolderError::Io { path: staging.clone(), source })?;
        }
        if let Err(source) = fs::create_dir(&staging) {
            let _ = fs::remove_file(&lock.path);
            return Err(FolderError::Io { path: staging, source });
        }
        unfinished.staging = Some(staging.clone());
        unfinished.lock_file = Some(lock.path.clone());
        drop(unfinished);
        let target = target.to_path_buf();
        Ok(Self { target, hidden: staging, files: Vec::new(), replaces, interrupt: interrupt.clone(), _lock: lock, committed: false })
    }

    /// The folder as it will be called.
    pub fn target(&self) -> &Path {
        &self.target
    }

    /// Writes one file; `name` is relative to the folder, with `/` between parts.
    ///
    /// # Errors
    /// [`FolderError::Io`] if the disk is full or the folder cannot be written.
    #[expect(clippy::disallowed_methods, reason = "the boundary writes files")]
    pub fn write(&mut self, name: &str, bytes: &[u8]) -> Result<(), FolderError> {
        let _guard = self.interrupt.lock();
        let path = self.hidden.join(name);
        let shown = self.target.join(name);
        let fail = |source| FolderError::Io { path: shown.clone(), source };
        if let Some(folder) = path.parent() {
            fs::create_dir_all(folder).map_err(fail)?;
        }
        fs::write(&path, bytes).map_err(fail)?;
        self.files.push(name.to_owned());
        Ok(())
    }

    /// Makes everything appear under its name. Returns the files written.
    ///
    /// # Errors
    /// [`FolderError::Io`] or [`FolderError::Exists`] when the target appeared meanwhile.
    pub fn commit(mut self) -> Result<Vec<String>, FolderError> {
        let interrupt = self.interrupt.clone();
        let mut unfinished = interrupt.lock();
        if self.replaces {
            self.replace()?;
        } else if self.target.exists() {
            return Err(FolderError::Exists(self.target.clone()));
        } else {
            fs::rename(&self.hidden, &self.target).map_err(|source| FolderError::Io { path: self.target.clone(), source })?;
        }
        self.committed = true;
        unfinished.remove();
        *unfinished = crate::interrupt::Unfinished::default();
        Ok(std::mem::take(&mut self.files))
    }

    /// Puts the new files in the place of those of the earlier run; other files in the folder stay.
    fn replace(&self) -> Result<(), FolderError> {
        let fail = |path: &Path| {
            let path = path.to_path_buf();
            move |source| FolderError::Io { path, source }
        };
        // Step 1: without its summary the folder counts as incomplete until the end.
        for name in earlier_files(&self.target) {
            let path = self.target.join(&name);
            fs::remove_file(&path).map_err(fail(&path))?;
        }
        // Step 2: the new files, the summary last.
        let mut names: Vec<&String> = self.files.iter().filter(|name| *name != LAST).collect();
        names.extend(self.files.iter().filter(|name| *name == LAST));
        for name in names {
            let path = self.target.join(name);
            if let Some(folder) = path.parent() {
                fs::create_dir_all(folder).map_err(fail(folder))?;
            }
            fs::rename(self.hidden.join(name), &path).map_err(fail(&path))?;
        }
        Ok(())
    }
}

impl Drop for Staging {
    fn drop(&mut self) {
        if !self.committed {
            // `commit` may have failed while holding the lock; it is free again by now.
            let mut unfinished = self.interrupt.lock();
            unfinished.remove();
            *unfinished = crate::interrupt::Unfinished::default();
        }
    }
}

/// Looks whether the target may be written, without touching anything.
///
/// # Errors
/// As [`Staging::open`], but for what only shows when writing.
pub fn examine(target: &Path, overwrite: bool) -> Result<(), FolderError> {
    may_write(target, overwrite)?;
    parent_and_name(target).map(|_| ())
}

/// `Ok(true)` where the results of an earlier run are to be replaced.
fn may_write(target: &Path, overwrite: bool) -> Result<bool, FolderError> {
    // A dangling link is something too: `symlink_metadata` sees it.
    if fs::symlink_metadata(target).is_err() {
        return Ok(false);
    }
    if !target.is_dir() {
        return Err(FolderError::NotAFolder(target.to_path_buf()));
    }
    if holds_checked_report(target) {
        return Err(FolderError::Checked(target.to_path_buf()));
    }
    if overwrite { Ok(true) } else { Err(FolderError::Exists(target.to_path_buf())) }
}

/// Whether the summary or the report in the folder names a checker.
#[expect(clippy::disallowed_methods, reason = "the boundary reads files")]
fn holds_checked_report(folder: &Path) -> bool {
    let in_summary = fs::read_to_string(folder.join(LAST))
        .ok()
        .and_then(|text| serde_json::from_str::<serde_json::Value>(&text).ok())
        .is_some_and(|summary| !summary["report"]["checked_by"].is_null());
    let in_report = fs::read_to_string(folder.join("report.html")).is_ok_and(|text| text.contains(CHECKED_MARK));
    in_summary || in_report
}

/// The folder around the target, which must exist, and the target's own name.
fn parent_and_name(target: &Path) -> Result<(PathBuf, String), FolderError> {
    let full = if target.exists() { target.canonicalize() } else { std::path::absolute(target) };
    let full = full.map_err(|source| FolderError::Io { path: target.to_path_buf(), source })?;
    let name = full.file_name().map_or_else(|| "results".to_owned(), |name| name.to_string_lossy().into_owned());
    let parent = full.parent().unwrap_or(&full).to_path_buf();
    if parent.is_dir() { Ok((parent, name)) } else { Err(FolderError::NoParent(parent)) }
}

/// Takes the lock file; a file that its owner removed meanwhile does not count.
fn lock(path: &Path, target: &Path) -> Result<Lock, FolderError> {
    let fail = |source| FolderError::Io { path: path.to_path_buf(), source };
    loop {
        let file = fs::OpenOptions::new().create(true).truncate(false).write(true).open(path).map_err(fail)?;
        match file.try_lock() {
            Ok(()) if is_still(&file, path) => return Ok(Lock { path: path.to_path_buf(), _file: file }),
            Ok(()) => {}
            Err(TryLockError::WouldBlock) => return Err(FolderError::InUse(target.to_path_buf())),
            // A file system without locks: the hidden folder itself still keeps two runs apart.
            Err(TryLockError::Error(_)) => return Ok(Lock { path: path.to_path_buf(), _file: file }),
        }
    }
}

#[cfg(unix)]
fn is_still(file: &File, path: &Path) -> bool {
    use std::os::unix::fs::MetadataExt;
    match (file.metadata(), fs::metadata(path)) {
        (Ok(open), Ok(named)) => (open.dev(), open.ino()) == (named.dev(), named.ino()),
        _ => false,
    }
}

#[cfg(not(unix))]
fn is_still(_file: &File, path: &Path) -> bool {
    path.exists()
}

/// Files of an earlier run, summary first: exactly the names that this program writes.
fn earlier_files(folder: &Path) -> Vec<String> {
    let mut names = Vec::new();
    for inner in ["", "fields"] {
        let Ok(entries) = fs::read_dir(folder.join(inner)) else { continue };
        for entry in entries.flatten() {
            let name = entry.file_name().to_string_lossy().into_owned();
            let name = if inner.is_empty() { name } else { format!("{inner}/{name}") };
            if entry.path().is_file() && super::is_output_name(&name) {
                names.push(name);
            }
        }
    }
    names.sort_by_key(|name| (name != LAST, name.clone()));
    names
}

#[cfg(test)]
mod tests;
