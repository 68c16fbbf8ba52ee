//! A colleague's figures against the member: which agree, which differ, and which mistakes would reproduce the latter.

pub mod ask;
pub mod mistake;
pub mod search;
