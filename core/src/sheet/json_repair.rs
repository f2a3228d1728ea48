//! Corrected texts for common slips in a JSON file; each is read before it is offered.

use super::json::{Json, MAX_REPAIRED_BYTES};

/// What a way out says and the whole corrected text, where one small change makes the text JSON.
pub(super) fn repaired(text: &str, error: &serde_json::Error) -> Option<(&'static str, String)> {
    if text.len() > MAX_REPAIRED_BYTES {
        return None;
    }
    let words = error.to_string();
    let line_start: usize = text
        .split_inclusive('\n')
        .take(error.line().saturating_sub(1))
        .map(str::len)
        .sum();
    // serde_json counts columns in bytes from 1; the last byte read is the first one wrong.
    let at = (line_start + error.column()).saturating_sub(1);
    let before = text.get(..at).unwrap_or("");
    let after = text.get(at..).unwrap_or("");
    let (label, whole) = if error.is_eof() {
        ("Close what is open", closed(text))
    } else if words.starts_with("trailing comma") {
        let kept = before.trim_end();
        let kept = kept.strip_suffix(',').unwrap_or(kept);
        ("Leave the comma out", format!("{kept}{after}"))
    } else if words.starts_with("trailing characters") {
        ("Keep what stands before it", before.trim_end().to_owned())
    } else if words.starts_with("expected `,`") {
        let kept = before.trim_end();
        let gap = before.get(kept.len()..).unwrap_or("");
        ("Put a comma there", format!("{kept},{gap}{after}"))
    } else {
        return None;
    };
    serde_json::from_str::<Json>(&whole)
        .is_ok()
        .then_some((label, whole))
}

/// The text with the quotation mark, brackets and braces that are still open closed.
fn closed(text: &str) -> String {
    let mut open = Vec::new();
    let mut in_text = false;
    let mut escaped = false;
    for c in text.chars() {
        match c {
            _ if escaped => escaped = false,
            '\\' if in_text => escaped = true,
            '"' => in_text = !in_text,
            _ if in_text => {}
            '{' => open.push('}'),
            '[' => open.push(']'),
            '}' | ']' => {
                open.pop();
            }
            _ => {}
        }
    }
    let mut whole = text.to_owned();
    if in_text {
        whole.push('"');
    } else {
        let kept = whole.trim_end();
        whole = kept.strip_suffix(',').unwrap_or(kept).to_owned();
    }
    whole.extend(open.into_iter().rev());
    whole
}
