//! Characters that stand for the same sign in typed text.

/// Hyphen-minus, minus sign, en dash and the hyphens that editors put in their place.
pub fn is_minus(c: char) -> bool {
    matches!(
        c,
        '-' | '\u{2212}' | '\u{2013}' | '\u{2010}' | '\u{2011}' | '\u{FE63}' | '\u{FF0D}'
    )
}

/// The digit that a superscript digit stands for.
pub fn superscript_digit(c: char) -> Option<char> {
    Some(match c {
        '⁰' => '0',
        '¹' => '1',
        '²' => '2',
        '³' => '3',
        '⁴' => '4',
        '⁵' => '5',
        '⁶' => '6',
        '⁷' => '7',
        '⁸' => '8',
        '⁹' => '9',
        _ => return None,
    })
}

/// The sign that a superscript sign stands for.
pub fn superscript_sign(c: char) -> Option<char> {
    match c {
        '⁺' => Some('+'),
        '⁻' => Some('-'),
        _ => None,
    }
}

/// Whether a character leaves no mark of its own or turns the direction of what follows.
fn is_invisible(c: char) -> bool {
    c.is_control()
        || matches!(c, '\u{200B}'..='\u{200F}' | '\u{202A}'..='\u{202E}' | '\u{2060}'..='\u{206F}')
        || matches!(c, '\u{FEFF}' | '\u{FE00}'..='\u{FE0F}' | '\u{00AD}')
}

/// A character in words for a message: itself where it can be seen, else its number.
pub fn shown(c: char) -> String {
    if is_invisible(c) {
        format!("U+{:04X}, an invisible character", u32::from(c))
    } else {
        format!("“{c}”")
    }
}

/// The characters of a run in words: all of them up to eight different ones, else how many.
pub fn shown_all(run: &str) -> String {
    let mut different: Vec<char> = Vec::new();
    for c in run.chars() {
        if different.len() <= 8 && !different.contains(&c) {
            different.push(c);
        }
    }
    if different.len() > 8 {
        return format!("“{}” ({} characters)", clipped(run), run.chars().count());
    }
    different
        .into_iter()
        .map(shown)
        .collect::<Vec<_>>()
        .join(", ")
}

/// A number as it is set in a sentence: `−360`, `10⁻⁶`, `2.5 × 10⁹`.
pub fn typeset(value: f64) -> String {
    let size = value.abs();
    let sign = if value < 0.0 { "\u{2212}" } else { "" };
    if size == 0.0 || (1e-4..1e6).contains(&size) {
        return format!("{sign}{size}");
    }
    let scientific = format!("{size:e}");
    let Some((mantissa, exponent)) = scientific.split_once('e') else {
        return format!("{sign}{scientific}");
    };
    let raised: String = exponent.chars().map(raised).collect();
    match mantissa {
        "1" => format!("{sign}10{raised}"),
        _ => format!("{sign}{mantissa} × 10{raised}"),
    }
}

/// The superscript of a digit or sign.
fn raised(c: char) -> char {
    match c {
        '1' => '¹',
        '2' => '²',
        '3' => '³',
        '0' | '4'..='9' => char::from_u32(0x2070 + c.to_digit(10).unwrap_or(0)).unwrap_or(c),
        '-' => '⁻',
        _ => c,
    }
}

/// A typed text for a message: at most 40 characters, invisible ones as �.
pub fn clipped(text: &str) -> String {
    let visible = |c: char| if is_invisible(c) { '\u{FFFD}' } else { c };
    if text.chars().count() <= 40 {
        text.chars().map(visible).collect()
    } else {
        text.chars().take(36).map(visible).chain(['…']).collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_are_set_as_in_a_sentence() {
        for (value, text) in [
            (-1.0, "−1"),
            (0.0, "0"),
            (1e9, "10⁹"),
            (-2.5e10, "−2.5 × 10¹⁰"),
            (1e-6, "10⁻⁶"),
            (500.0, "500"),
        ] {
            assert_eq!(typeset(value), text);
        }
    }

    #[test]
    fn every_character_of_a_run_is_told() {
        assert_eq!(shown_all("שלום"), "“ש”, “ל”, “ו”, “ם”");
        assert_eq!(shown_all("aaa"), "“a”");
        assert_eq!(shown_all("абвгдежзик"), "“абвгдежзик” (10 characters)");
    }
}
