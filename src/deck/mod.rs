//! What was typed, and reading it with places: every fault of a deck in one run.

mod reader;

pub use reader::{Reader, Row, Value, clip, nearest};

/// The starter deck that `new` writes.
pub fn starter() -> &'static str {
    include_str!("../../templates/starter.toml")
}

/// The longest deck that is read, in bytes: a sheet's size is capped with it.
pub const LONGEST: usize = 2_000_000;
