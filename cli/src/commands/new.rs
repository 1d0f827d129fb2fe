//! `new`: writes a commented starter model that runs as it is.
use crate::exit::Exit;
use crate::progress::say;
use std::fs::OpenOptions;
use std::io::{ErrorKind, Write};
use std::path::Path;

/// The starter model: an invented site without further files.
pub const STARTER: &str = include_str!("new/starter.toml");

/// Writes the starter model; an existing file is never replaced.
pub(crate) fn run(path: &Path) -> Exit {
    let shown = crate::diagnostics::clip(&path.to_string_lossy(), 200);
    let created = OpenOptions::new().write(true).create_new(true).open(path);
    let written = created.and_then(|mut file| {
        file.write_all(STARTER.as_bytes()).inspect_err(|_| {
            // Whole or not at all: what was begun is taken away; that it may fail too changes nothing about the message.
            let _ = std::fs::remove_file(path);
        })
    });
    match written {
        Ok(()) => {
            say(&format!("wrote {shown}; next: brinkline assess {shown}"));
            Exit::Done
        }
        Err(error) if error.kind() == ErrorKind::AlreadyExists => {
            say(&format!("error: {shown} exists already; give another name"));
            Exit::File
        }
        Err(error) => {
            say(&format!("error: cannot write {shown}: {error}"));
            Exit::File
        }
    }
}
