//! Tests of the whole path: by hand, over random cliffs, slits, hard input.
mod cliffs;
mod hard;
mod plain;
mod slits;
