//! Every fault the program can state: a stable code, plain words, the place in the input, the
//! bound that was passed and ways out.
//!
//! Parsers work on byte offsets and return a [`Problem`] whose `start` and `end` are bytes of the
//! text they were given; [`Problem::in_utf16`] converts once, where the sheet attaches the path.

use serde::Serialize;

/// A way out of a fault: what the button says, and the text that replaces the whole field.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct WayOut {
    /// What is done, as an imperative: "Use 2p6".
    pub label: String,
    /// The whole new text of the field.
    pub replacement: String,
}

/// One fault of an input.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Problem {
    /// Stable, lower case with hyphens: `subshell-over-capacity`.
    pub code: &'static str,
    /// One plain sentence, with the offending value.
    pub message: String,
    /// JSON pointer into the sheet; empty for a file that is not a sheet at all.
    pub path: String,
    /// First unit of the place in that text.
    pub start: usize,
    /// One past the last unit of the place.
    pub end: usize,
    /// The bound that was passed, in words: "a p subshell holds at most 6 electrons".
    pub bound: Option<String>,
    /// Ways out, best first.
    pub ways: Vec<WayOut>,
}

impl Problem {
    /// A fault at the bytes `start..end` of the text being read.
    #[inline(never)]
    pub fn new(code: &'static str, message: impl Into<String>, start: usize, end: usize) -> Self {
        Problem {
            code,
            message: message.into(),
            path: String::new(),
            start,
            end: end.max(start),
            bound: None,
            ways: Vec::new(),
        }
    }

    /// The same fault with the bound it passed.
    #[must_use]
    #[inline(never)]
    pub fn bound(mut self, bound: impl Into<String>) -> Self {
        self.bound = Some(bound.into());
        self
    }

    /// The same fault with one more way out.
    #[must_use]
    #[inline(never)]
    pub fn way(mut self, label: impl Into<String>, replacement: impl Into<String>) -> Self {
        self.ways.push(WayOut {
            label: label.into(),
            replacement: replacement.into(),
        });
        self
    }

    /// The same fault at a JSON pointer.
    #[must_use]
    #[inline(never)]
    pub fn at(mut self, path: impl Into<String>) -> Self {
        self.path = path.into();
        self
    }

    /// The same fault with its place counted in UTF-16 units of `text`, as browsers count.
    #[must_use]
    #[inline(never)]
    pub fn in_utf16(mut self, text: &str) -> Self {
        self.start = utf16_offset(text, self.start);
        self.end = utf16_offset(text, self.end);
        self
    }
}

/// UTF-16 units of `text` before byte `byte`; a byte inside a character counts that character's start.
pub fn utf16_offset(text: &str, byte: usize) -> usize {
    text.char_indices()
        .take_while(|(i, c)| i + c.len_utf8() <= byte)
        .map(|(_, c)| c.len_utf16())
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn places_are_counted_in_utf16_units() {
        let text = "🙂d⁶אx";
        assert_eq!(utf16_offset(text, 0), 0);
        assert_eq!(utf16_offset(text, 4), 2);
        assert_eq!(utf16_offset(text, 2), 0);
        assert_eq!(utf16_offset(text, 8), 4);
        assert_eq!(utf16_offset(text, 1000), 6);
    }
}
