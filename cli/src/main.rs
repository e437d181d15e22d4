//! The `sectile` command.

fn main() {}
