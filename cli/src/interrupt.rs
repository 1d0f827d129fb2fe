//! Ctrl-C: the run ends with 130, and the folder that was being written beside the results disappears with it.
use std::path::{Path, PathBuf};
use std::sync::{Arc, Mutex, MutexGuard, PoisonError};

use crate::exit::Exit;

/// What must vanish when the run is interrupted. Clones share one state.
///
/// Whoever writes into the half-written folder holds the lock, so that the interruption falls between two files and never
/// between the renames that make the results appear.
#[derive(Debug, Clone, Default)]
pub struct Interrupt {
    unfinished: Arc<Mutex<Unfinished>>,
}

/// Paths that only exist while a run is writing.
#[derive(Debug, Default)]
pub struct Unfinished {
    /// Half-written folder.
    pub staging: Option<PathBuf>,
    /// File that tells other runs to keep away.
    pub lock_file: Option<PathBuf>,
}

impl Interrupt {
    /// Catches ctrl-C and termination for the rest of the process.
    ///
    /// # Errors
    /// When a handler is already installed or the system refuses one.
    pub fn install(&self) -> Result<(), ctrlc::Error> {
        let shared = self.clone();
        ctrlc::set_handler(move || {
            let unfinished = shared.lock();
            unfinished.remove();
            crate::progress::say("interrupted; nothing half-written is left behind");
            std::process::exit(i32::from(Exit::Interrupted.code()));
        })
    }

    /// Waits for the right to write.
    pub fn lock(&self) -> MutexGuard<'_, Unfinished> {
        self.unfinished.lock().unwrap_or_else(PoisonError::into_inner)
    }
}

impl Unfinished {
    /// Removes what is there; what cannot be removed stays and is cleared by the next run.
    pub fn remove(&self) {
        if let Some(folder) = &self.staging {
            remove_folder(folder);
        }
        if let Some(file) = &self.lock_file {
            let _ = std::fs::remove_file(file);
        }
    }
}

fn remove_folder(folder: &Path) {
    let _ = std::fs::remove_dir_all(folder);
}
