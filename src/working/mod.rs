//! The derivation: typed steps in the order in which the sheet shows them.
//!
//! Sheet, results and review print these steps and nothing else.

mod step;

pub use step::{Block, Body, Chapter, Chapters, Figure, Input, Origin, Step, Working};
