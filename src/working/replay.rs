//! Steps replayed in `f64` against the analysis while they are drafted.

use std::collections::BTreeMap;

use super::draft::{Builder, Class};
use super::units::What;

/// A fault of the program: a step whose replay differs from the analysis.
#[derive(Clone, Debug, PartialEq)]
pub struct Mismatch {
    /// Title of the step.
    pub title: String,
    /// The analysis's value.
    pub expected: f64,
    /// The replay's.
    pub found: f64,
}

/// A replay in `f64`, kept until every figure of its class is known.
#[derive(Debug)]
pub(super) struct Replay {
    pub title: String,
    /// Whether it belongs to a state, case or combination: its figures are then measured by the greatest of their unit.
    pub tagged: bool,
    pub class: Class,
    pub expected: f64,
    pub found: f64,
    pub scale: f64,
}

impl Builder {
    /// Replays that differ from the analysis by more than 1e-12 of their scale: the greatest of their terms and of the
    /// figures of their quantity. Each is a fault of the program.
    pub fn mismatches(&self) -> Vec<Mismatch> {
        let mut greatest: BTreeMap<&Class, f64> = BTreeMap::new();
        let measured = |replay: &&Replay| replay.class.0 != What::Other || replay.tagged;
        for replay in self.replays.iter().filter(measured) {
            let size = greatest.entry(&replay.class).or_default();
            *size = size.max(replay.expected.abs());
        }
        let differs = |replay: &&Replay| {
            let known = if measured(replay) { greatest.get(&replay.class).copied().unwrap_or_default() } else { 0.0 };
            let scale = replay.scale.max(known).max(replay.expected.abs());
            let close = (replay.found - replay.expected).abs() <= 1e-12 * scale;
            !close
        };
        let mismatch =
            |replay: &Replay| Mismatch { title: replay.title.clone(), expected: replay.expected, found: replay.found };
        self.replays.iter().filter(differs).map(mismatch).collect()
    }
}
