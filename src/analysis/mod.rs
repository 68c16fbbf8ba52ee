//! The force method: release, cut, tabulated cases, chain, compatibility, superposition.
//!
//! The member is linear: Euler-Bernoulli bending and small deflections, shear deformation where a section asks for it. Every
//! intermediate is returned as a typed value; nothing is printed or logged. Units are SI base units, signs as in the deck.

pub mod action;
pub mod band;
pub mod cantilever;
pub mod equilibrium;
pub mod extreme;
pub mod field;
pub mod gauss;
pub mod model;
pub mod own;
pub mod poly;
pub mod solve;
pub mod stability;
pub mod state;
pub mod stiffness;

pub use extreme::{Extreme, Extremes, Side, Spot};
pub use field::{Field, Values};
pub use model::Model;
pub use own::{Cut, Sway};
pub use solve::{Analysis, CaseSolution, PieceEnds, Solution, solve};
pub use state::{Reaction, State};
