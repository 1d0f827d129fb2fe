//! The boundary: command line, files, formats. The only crate with I/O.
