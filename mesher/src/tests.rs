//! Tests of the whole path.
mod plain;
