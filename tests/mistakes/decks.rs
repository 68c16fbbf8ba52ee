//! Members with room for mistakes: the examples, and small ones of every kind. All figures are invented.
