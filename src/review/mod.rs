//! A colleague's figures against the member: which agree, which differ, and which mistakes would reproduce the latter.

pub mod ask;
mod claim;
mod compare;
mod json;
pub mod mistake;
mod read;
pub mod search;
mod slip;
mod starter;
mod theirs;
mod write;

pub use claim::{Claim, Claims, Reviewed, Reviewer};
pub use compare::{Compared, Status, compare, evidence};
pub use json::json;
pub use read::{MOST, deck_of, faults, read};
pub use starter::starter;
pub use theirs::from_results;
pub use write::toml;
