//! Planted mistakes.
