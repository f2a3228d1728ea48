//! `rungline answer FILE…`, `rungline recheck FILE…`.

fn main() {}
