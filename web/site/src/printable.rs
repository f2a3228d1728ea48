//! Bytes as printable characters, closer packed than base64: 13 or 14 bits in two characters of 96.
//!
//! The characters are those of ASCII from space to ~ without <, the tab and the end of a line, so that the
//! text can stand in a script element of a page and survives every tool that keeps text as it is. A number
//! v < 96² is written as v mod 96, then ⌊v/96⌋. 96² is 2¹³ and [`SPARE`] more: bits are taken from the
//! lowest up, 13 of them, and one more where these make a number below the spare ones. At the end, what is
//! left takes two characters, or one if it is six bits or fewer, so that the fill is never as long as a
//! byte. The text is 22 % longer than the bytes where base64 is 33 %. `www/js/printable.js` reads it.

const BITS: u32 = 13;
const BASE: u32 = 96;
/// How many of two characters' numbers 13 bits do not use.
const SPARE: u32 = BASE * BASE - (1 << BITS);
/// Bits that a single character holds.
const LAST: u32 = 6;

/// The characters in the order of their values.
fn digits() -> Vec<char> {
    let printed = (' '..='~').filter(|c| *c != '<');
    printed.chain(['\t', '\n']).collect()
}

/// How many bits the pair carries that these bits begin with.
fn carried(value: u32) -> u32 {
    BITS + u32::from(value % (1 << BITS) < SPARE)
}

/// The text of these bytes.
pub fn printable(bytes: &[u8]) -> String {
    let digits = digits();
    let digit = |value: u32| usize::try_from(value).ok().and_then(|v| digits.get(v));
    let mut text = String::with_capacity(bytes.len() * 5 / 4 + 2);
    let (mut held, mut count) = (0_u32, 0);
    for &byte in bytes {
        held |= u32::from(byte) << count;
        count += 8;
        if count > BITS {
            let taken = carried(held);
            let value = held % (1 << taken);
            text.extend([value % BASE, value / BASE].into_iter().filter_map(digit));
            held >>= taken;
            count -= taken;
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
        let digits: String = digits().into_iter().collect();
        let value = |c: char| u32::try_from(digits.find(c).expect("a digit")).expect("small");
        let (mut bytes, mut held, mut count) = (Vec::new(), 0_u32, 0);
        let characters: Vec<char> = text.chars().collect();
        for pair in characters.chunks(2) {
            let high = pair.get(1).map_or(0, |c| BASE * value(*c));
            let low = value(pair[0]) + high;
            held |= low << count;
            count += if pair.len() == 2 { carried(low) } else { LAST };
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
            assert!(text.chars().all(|c| digits().contains(&c)));
            assert!(!text.contains(['<', '\r']));
            assert_eq!(read(&text), bytes);
        }
        let many = printable(&[0xff; 1300]);
        assert_eq!(many.len(), 1600);
        // Zeros are below the spare ones: 14 bits in each pair.
        assert_eq!(printable(&[0; 1400]).len(), 1600);
        // Bytes without a pattern, 22 % longer.
        let mixed: Vec<u8> = (0_u32..100_000)
            .map(|i| (i.wrapping_mul(2_654_435_761) >> 11) as u8)
            .collect();
        let text = printable(&mixed);
        assert!(text.len() < 122_200, "{}", text.len());
        assert_eq!(read(&text), mixed);
    }
}
