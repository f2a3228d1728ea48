//! The browser's door: translates and nothing else.
