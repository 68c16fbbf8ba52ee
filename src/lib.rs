//! Calculation sheets for beams that a checker follows by hand.
//!
//! The modules stand in the order of the flow; each may use what stands to its left and nothing to its right.

pub mod analysis;
pub mod calculation;
pub mod deck;
pub mod diagnostic;
pub mod figure;
pub mod member;
pub mod number;
pub mod quantity;
pub mod results;
pub mod verdict;
pub mod working;
