//! What was typed, and reading it with places: every fault of a deck in one run.

mod amount;
mod broken;
mod names;
mod reader;
mod words;

pub use amount::Amount;
pub use broken::broken;
pub use names::{Named, Names};
pub use reader::{Reader, Row, Value};
pub use words::{clip, nearest, suggest};

/// The starter deck that `new` writes.
pub fn starter() -> &'static str {
    include_str!("../../templates/starter.toml")
}

/// The longest deck that is read, in bytes: room for a hundred cases with a load on each of a thousand spans.
pub const LONGEST: usize = 16_000_000;
