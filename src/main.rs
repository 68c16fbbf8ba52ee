//! Hands over to the command line and turns the outcome into an exit status.

fn main() {}
