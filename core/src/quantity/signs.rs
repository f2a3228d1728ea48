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

/// A typed text for a message: at most 40 characters, invisible ones as �.
pub fn clipped(text: &str) -> String {
    let visible = |c: char| if is_invisible(c) { '\u{FFFD}' } else { c };
    if text.chars().count() <= 40 {
        text.chars().map(visible).collect()
    } else {
        text.chars().take(36).map(visible).chain(['…']).collect()
    }
}
