//! The one integration test binary.
#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic, clippy::indexing_slicing, clippy::disallowed_methods)]

mod archive;
mod cli;
mod crosscheck;
mod deck;
mod faults;
mod figure;
mod flow;
mod mistakes;
mod oracle;
mod published;
mod random;
mod reference;
mod review;
mod sheet;
mod support;
mod working;
