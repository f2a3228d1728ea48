//! Bytes as printable characters, closer packed than base64: 13 bits in two characters of 91.
//!
//! The characters are those of ASCII from ! to ~ without <, > and &, so that the text can stand in any
//! element of a page and survives every tool that keeps text. A number v < 2¹³ ≤ 91² is written as
//! v mod 91, then ⌊v/91⌋; bits are taken from the lowest up; up to six that are left at the end take one
//! character, so that the fill is never as long as a byte. The text is 23 % longer than the bytes where
//! base64 is 33 %. `www/js/printable.js` reads it.

const BITS: u32 = 13;
const BASE: u32 = 91;
/// Bits that a single character holds.
const LAST: u32 = 6;

/// The text of these bytes.
pub fn printable(bytes: &[u8]) -> String {
    let digits: Vec<char> = ('!'..='~').filter(|c| !"<>&".contains(*c)).collect();
    let digit = |value: u32| usize::try_from(value).ok().and_then(|v| digits.get(v));
    let mut text = String::with_capacity(bytes.len() * 5 / 4 + 2);
    let (mut held, mut count) = (0_u32, 0);
    for &byte in bytes {
        held |= u32::from(byte) << count;
        count += 8;
        if count >= BITS {
            let value = held % (1 << BITS);
            text.extend([value % BASE, value / BASE].into_iter().filter_map(digit));
            held >>= BITS;
            count -= BITS;
        }
    }
    let last = match count {
        0 => vec![],
        1..=LAST => vec![held],
        _ => vec![held % BASE, held / BASE],
    };
    text.extend(last.into_iter().filter_map(digit));
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    /// What `www/js/printable.js` does.
    fn read(text: &str) -> Vec<u8> {
        let digits: String = ('!'..='~').filter(|c| !"<>&".contains(*c)).collect();
        let value = |c: char| u32::try_from(digits.find(c).expect("a digit")).expect("small");
        let (mut bytes, mut held, mut count) = (Vec::new(), 0_u32, 0);
        let characters: Vec<char> = text.chars().collect();
        for pair in characters.chunks(2) {
            let high = pair.get(1).map_or(0, |c| BASE * value(*c));
            held |= (value(pair[0]) + high) << count;
            count += if pair.len() == 2 { BITS } else { LAST };
            while count >= 8 {
                bytes.push((held % 256) as u8);
                held >>= 8;
                count -= 8;
            }
        }
        bytes
    }

    #[test]
    fn bytes_come_back() {
        for length in 0..200_usize {
            let bytes: Vec<u8> = (0..length)
                .map(|i| (i * i * 37 + 11 * length) as u8)
                .collect();
            let text = printable(&bytes);
            assert!(
                text.chars()
                    .all(|c| c.is_ascii_graphic() && !"<>&".contains(c))
            );
            assert_eq!(read(&text), bytes);
        }
        let many = printable(&[0xff; 1300]);
        assert_eq!(many.len(), 1600);
    }
}
