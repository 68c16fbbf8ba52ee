//! Drawings as placed primitives in millimetres; pure, measured in the embedded font, tested for collisions.

mod canvas;
mod collide;
mod hatch;
mod measure;
pub mod primitive;

pub use collide::{Collision, CollisionKind};
pub use hatch::hatch_lines;
pub use primitive::{Anchor, Dash, Drawing, Fill, Item, Point, Run, Stroke};
