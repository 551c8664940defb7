//! The `soakdown` program.
fn main() {}
