//! Drawings as placed primitives in millimetres; pure, measured in the embedded font, tested for collisions.

mod band;
mod bodies;
mod canvas;
mod chain;
mod collide;
mod elevation;
mod hatch;
mod label;
mod load_words;
mod loads;
mod measure;
mod method;
mod panel;
mod place;
mod plot;
pub mod primitive;
mod released;
mod rows;
mod strips;
mod support;
mod words;

pub use bodies::free_bodies;
pub use collide::{Collision, CollisionKind};
pub use elevation::elevation;
pub use hatch::hatch_lines;
pub use load_words::describe;
pub use loads::loads;
pub use method::{chained, signs};
pub use plot::{Chord, Curve, Mark, Panel, Plot, Style, diagrams};
pub use primitive::{Anchor, Dash, Drawing, Fill, Item, Point, Run, Stroke};
pub use released::released;
pub use words::{Cut, Words};

/// Width of the text column, mm.
pub const COLUMN: f64 = 120.0;
/// Width of the text column and the side notes together, mm.
pub const WIDE: f64 = 155.0;
