//! Calculation sheets for beams that a checker follows by hand.
//!
//! The modules stand in the order of the flow; each may use what stands to its left and nothing to its right.

pub mod number;
pub mod quantity;
pub mod diagnostic;
pub mod deck;
pub mod member;
pub mod analysis;
pub mod crosscheck;
pub mod verdict;
pub mod working;
pub mod results;
pub mod calculation;
pub mod review;
pub mod figure;
pub mod sheet;
pub mod issue;
pub mod archive;
pub mod cli;
