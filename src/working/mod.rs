//! The derivation: typed steps in the order in which the sheet shows them.
//!
//! Sheet, results and review print these steps and nothing else.

mod draft;
mod exact;
mod finish;
mod gather;
mod name;
mod narrate;
mod notation;
mod replay;
mod step;
mod trace;
mod units;

pub use finish::letter as column_letter;
pub use narrate::{Demand, narrate, place_names};
pub use replay::Mismatch;
pub use step::{Block, Body, Chapter, Chapters, Figure, Grid, Input, Origin, Step, Working};
