//! `cargo site`.

fn main() {}
