//! Drawings as placed primitives in millimetres; pure, measured in the embedded font, tested for collisions.

mod hatch;
pub mod primitive;

pub use hatch::hatch_lines;
pub use primitive::{Anchor, Dash, Drawing, Fill, Item, Point, Run, Stroke};
