//! Reading of files: sizes, encodings, and paths that stay in the model's folder.
use checker::diagnostic::Diagnostic;
use std::io::Read;
use std::path::{Component, Path, PathBuf};

/// Largest model file, bytes.
pub(crate) const LARGEST_MODEL_BYTES: u64 = 4 << 20;

/// Largest file that a model file refers to, bytes.
pub(crate) const LARGEST_EXTRA_BYTES: u64 = 32 << 20;

/// Why a file gave no text.
#[derive(Debug)]
pub(crate) enum FileFault {
    /// It cannot be read (exit code 4).
    Unreadable(String),
    /// It was read, or must not be read, and is wrong (exit code 3); with the byte where it is.
    Wrong {
        /// Stable code.
        code: &'static str,
        /// What is wrong.
        message: String,
        /// What to do.
        hint: String,
    },
}

impl FileFault {
    /// The fault as a finding at a key path.
    pub(crate) fn diagnostic(&self, at: &str) -> Diagnostic {
        match self {
            Self::Unreadable(message) => {
                Diagnostic::error("file.unreadable", at, message).hint("check the name; paths count from the folder of the model file")
            }
            Self::Wrong { code, message, hint } => Diagnostic::error(code, at, message).hint(hint),
        }
    }
}

/// The bytes of a file, at most so many.
///
/// # Errors
/// The file cannot be read, is no plain file, or is larger than `n_largest`.
pub(crate) fn bytes(path: &Path, n_largest: u64) -> Result<Vec<u8>, FileFault> {
    let name = shown(path);
    let unreadable = |error: std::io::Error| FileFault::Unreadable(format!("cannot read {name}: {}", reason(&error)));
    let metadata = std::fs::metadata(path).map_err(unreadable)?;
    if metadata.is_dir() {
        return Err(FileFault::Unreadable(format!("cannot read {name}: it is a folder")));
    }
    #[expect(clippy::disallowed_methods, reason = "the boundary reads files")]
    let file = std::fs::File::open(path).map_err(unreadable)?;
    let mut bytes = Vec::new();
    file.take(n_largest + 1).read_to_end(&mut bytes).map_err(unreadable)?;
    if bytes.len() as u64 > n_largest {
        return Err(FileFault::Wrong {
            code: "file.too-large",
            message: format!("{name} is larger than the limit of {} MB", n_largest >> 20),
            hint: "check that it is the right file; put a long profile into a CSV file of its own, thinned to what the section needs"
                .into(),
        });
    }
    Ok(bytes)
}

/// The bytes as text, without byte order mark.
///
/// # Errors
/// The bytes are no UTF-8 text.
pub(crate) fn text(bytes: &[u8], name: &str) -> Result<String, FileFault> {
    let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
    let wrong = |message: String, hint: &str| FileFault::Wrong { code: "file.not-text", message, hint: hint.into() };
    if bytes.starts_with(&[0xff, 0xfe]) || bytes.starts_with(&[0xfe, 0xff]) {
        return Err(wrong(format!("{name} is written in UTF-16"), "save it as UTF-8"));
    }
    if let Some(i) = bytes.iter().position(|b| *b == 0) {
        return Err(wrong(format!("{name} is not a text file: byte {} is zero", i + 1), "check that it is the right file"));
    }
    match std::str::from_utf8(bytes) {
        Ok(text) => Ok(text.to_owned()),
        Err(error) => {
            let n_good = error.valid_up_to();
            let line = bytes[..n_good].split(|b| *b == b'\n').count();
            let column = n_good - bytes[..n_good].iter().rposition(|b| *b == b'\n').map_or(0, |i| i + 1) + 1;
            Err(wrong(
                format!("{name} is not UTF-8 text: line {line}, byte {column} of the line, is 0x{:02x}", bytes[n_good]),
                "save it as UTF-8, or check that it is a text file",
            ))
        }
    }
}

/// The path of a file that the model names, inside the model's folder.
///
/// # Errors
/// The path is absolute, climbs out of the folder, or leads out of it by a link; or the file is not there.
pub(crate) fn inside(folder: &Path, name: &str) -> Result<PathBuf, FileFault> {
    let leaves = |why: &str| FileFault::Wrong {
        code: "file.outside",
        message: format!("the path {:?} {why}", crate::diagnostics::clip(name, 120)),
        hint: "put the file beside the model file, or in a folder below it, and write its path from there with forward slashes".into(),
    };
    let has_drive = name.as_bytes().get(1) == Some(&b':');
    if Path::new(name).is_absolute() || name.starts_with(['/', '\\', '~']) || has_drive {
        return Err(leaves("is absolute"));
    }
    if name.contains('\\') {
        return Err(leaves("is written with backslashes"));
    }
    if name.contains('\0') {
        return Err(leaves("contains a zero byte"));
    }
    let mut depth = 0_i32;
    for part in Path::new(name).components() {
        depth += match part {
            Component::ParentDir => -1,
            Component::Normal(_) => 1,
            Component::Prefix(_) | Component::RootDir | Component::CurDir => 0,
        };
        if depth < 0 {
            return Err(leaves("leaves the folder of the model file"));
        }
    }
    let path = folder.join(name);
    let unreadable =
        |error: std::io::Error| FileFault::Unreadable(format!("cannot read {:?}: {}", crate::diagnostics::clip(name, 120), reason(&error)));
    let real = path.canonicalize().map_err(unreadable)?;
    let real_folder = folder.canonicalize().map_err(unreadable)?;
    if !real.starts_with(&real_folder) {
        return Err(leaves("leaves the folder of the model file by a link"));
    }
    if !std::fs::metadata(&real).map_err(unreadable)?.is_file() {
        return Err(FileFault::Unreadable(format!("cannot read {:?}: it is not a file", crate::diagnostics::clip(name, 120))));
    }
    Ok(real)
}

/// A path as printed.
pub(crate) fn shown(path: &Path) -> String {
    crate::diagnostics::clip(&path.to_string_lossy(), 200)
}

/// The reason of a failed read in words that do not depend on the system.
fn reason(error: &std::io::Error) -> String {
    use std::io::ErrorKind;
    match error.kind() {
        ErrorKind::NotFound => "there is no such file".into(),
        ErrorKind::PermissionDenied => "permission denied".into(),
        ErrorKind::IsADirectory => "it is a folder".into(),
        ErrorKind::NotADirectory => "a part of the path is not a folder".into(),
        _ => error.to_string(),
    }
}
