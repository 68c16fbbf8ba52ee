//! From a view model to the bytes of a PDF.
//!
//! [`model`] holds everything a sheet shows as text; templates put the parts together; the compiler, in a closed world of
//! bundled fonts and templates, sets them and writes PDF/A-3a with the tags of PDF/UA-1.

mod drawing;
mod equation;
mod fault;
mod fonts;
pub mod model;
mod page;
mod print;
mod prose;
mod template;
pub mod typeset;
mod world;

pub use equation::{Equation, NotMathematics};
pub use fault::Fault;
pub use fonts::{Face, missing_glyph, text_width};
pub use model::Model;
pub use page::Paper;
pub use print::{Attachments, Options, Printed, print, render};
pub use template::{Labels, Templates};
