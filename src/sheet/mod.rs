//! From a view model to the bytes of a PDF.

mod equation;
mod fonts;
pub mod typeset;
mod world;

pub use equation::{Equation, NotMathematics};
pub use fonts::{Face, missing_glyph, text_width};
