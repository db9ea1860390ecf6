//! The `lissom` command.

fn main() {}
