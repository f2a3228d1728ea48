//! Symbols and English names, Z = 1…118.
//!
//! Names and symbols as approved by IUPAC (from memory); the tests compare the symbols with
//! mendeleev 1.3.0.

use crate::numerics::order::sort;

/// The largest atomic number that has a name.
pub const HEAVIEST: u8 = 118;

#[rustfmt::skip]
const ELEMENTS: [(&str, &str); 118] = [
    ("H", "hydrogen"), ("He", "helium"), ("Li", "lithium"), ("Be", "beryllium"), ("B", "boron"),
    ("C", "carbon"), ("N", "nitrogen"), ("O", "oxygen"), ("F", "fluorine"), ("Ne", "neon"),
    ("Na", "sodium"), ("Mg", "magnesium"), ("Al", "aluminium"), ("Si", "silicon"), ("P", "phosphorus"),
    ("S", "sulfur"), ("Cl", "chlorine"), ("Ar", "argon"), ("K", "potassium"), ("Ca", "calcium"),
    ("Sc", "scandium"), ("Ti", "titanium"), ("V", "vanadium"), ("Cr", "chromium"), ("Mn", "manganese"),
    ("Fe", "iron"), ("Co", "cobalt"), ("Ni", "nickel"), ("Cu", "copper"), ("Zn", "zinc"),
    ("Ga", "gallium"), ("Ge", "germanium"), ("As", "arsenic"), ("Se", "selenium"), ("Br", "bromine"),
    ("Kr", "krypton"), ("Rb", "rubidium"), ("Sr", "strontium"), ("Y", "yttrium"), ("Zr", "zirconium"),
    ("Nb", "niobium"), ("Mo", "molybdenum"), ("Tc", "technetium"), ("Ru", "ruthenium"), ("Rh", "rhodium"),
    ("Pd", "palladium"), ("Ag", "silver"), ("Cd", "cadmium"), ("In", "indium"), ("Sn", "tin"),
    ("Sb", "antimony"), ("Te", "tellurium"), ("I", "iodine"), ("Xe", "xenon"), ("Cs", "caesium"),
    ("Ba", "barium"), ("La", "lanthanum"), ("Ce", "cerium"), ("Pr", "praseodymium"), ("Nd", "neodymium"),
    ("Pm", "promethium"), ("Sm", "samarium"), ("Eu", "europium"), ("Gd", "gadolinium"), ("Tb", "terbium"),
    ("Dy", "dysprosium"), ("Ho", "holmium"), ("Er", "erbium"), ("Tm", "thulium"), ("Yb", "ytterbium"),
    ("Lu", "lutetium"), ("Hf", "hafnium"), ("Ta", "tantalum"), ("W", "tungsten"), ("Re", "rhenium"),
    ("Os", "osmium"), ("Ir", "iridium"), ("Pt", "platinum"), ("Au", "gold"), ("Hg", "mercury"),
    ("Tl", "thallium"), ("Pb", "lead"), ("Bi", "bismuth"), ("Po", "polonium"), ("At", "astatine"),
    ("Rn", "radon"), ("Fr", "francium"), ("Ra", "radium"), ("Ac", "actinium"), ("Th", "thorium"),
    ("Pa", "protactinium"), ("U", "uranium"), ("Np", "neptunium"), ("Pu", "plutonium"), ("Am", "americium"),
    ("Cm", "curium"), ("Bk", "berkelium"), ("Cf", "californium"), ("Es", "einsteinium"), ("Fm", "fermium"),
    ("Md", "mendelevium"), ("No", "nobelium"), ("Lr", "lawrencium"), ("Rf", "rutherfordium"), ("Db", "dubnium"),
    ("Sg", "seaborgium"), ("Bh", "bohrium"), ("Hs", "hassium"), ("Mt", "meitnerium"), ("Ds", "darmstadtium"),
    ("Rg", "roentgenium"), ("Cn", "copernicium"), ("Nh", "nihonium"), ("Fl", "flerovium"), ("Mc", "moscovium"),
    ("Lv", "livermorium"), ("Ts", "tennessine"), ("Og", "oganesson"),
];

/// Other names in use: American spellings and the names the symbols come from.
const OTHER_NAMES: [(&str, u8); 19] = [
    ("aluminum", 13),
    ("sulphur", 16),
    ("cesium", 55),
    ("wolfram", 74),
    ("natrium", 11),
    ("kalium", 19),
    ("ferrum", 26),
    ("cuprum", 29),
    ("argentum", 47),
    ("stannum", 50),
    ("stibium", 51),
    ("aurum", 79),
    ("hydrargyrum", 80),
    ("quicksilver", 80),
    ("plumbum", 82),
    ("columbium", 41),
    ("phosphorous", 15),
    ("silicium", 14),
    ("niton", 86),
];

/// The symbol of element Z.
pub fn symbol(z: u8) -> Option<&'static str> {
    entry(z).map(|(symbol, _)| symbol)
}

/// The English name of element Z, in lower case.
pub fn name(z: u8) -> Option<&'static str> {
    entry(z).map(|(_, name)| name)
}

/// Z of a symbol written exactly, capital first: `Fe`.
pub fn by_symbol(symbol: &str) -> Option<u8> {
    position(|(known, _)| *known == symbol)
}

/// Z of an English name or another name in use, in any case of letters.
pub fn by_name(name: &str) -> Option<u8> {
    position(|(_, known)| known.eq_ignore_ascii_case(name)).or_else(|| {
        OTHER_NAMES
            .iter()
            .find(|(other, _)| other.eq_ignore_ascii_case(name))
            .map(|&(_, z)| z)
    })
}

/// Up to `most` elements whose symbol or name is nearest to a text, nearest first.
///
/// Distance: insertions, deletions, replacements and exchanges of letters, in any case; names further than a
/// third of their length away are left out, symbols further than one letter.
pub fn nearest(text: &str, most: usize) -> Vec<u8> {
    let wanted: Vec<char> = text
        .chars()
        .take(24)
        .map(|c| c.to_ascii_lowercase())
        .collect();
    let mut found: Vec<(usize, u8)> = Vec::new();
    for z in 1..=HEAVIEST {
        let Some((symbol, name)) = entry(z) else {
            continue;
        };
        // Beside equal distances the same first letter is the likelier slip.
        let score = |known: &str| {
            2 * distance(&wanted, known) + usize::from(wanted.first().copied() != first(known))
        };
        let by_symbol = Some(score(symbol)).filter(|score| wanted.len() <= 3 && score / 2 <= 1);
        let by_name =
            Some(score(name)).filter(|score| wanted.len() > 2 && score / 2 <= name.len() / 3);
        if let Some(score) = by_symbol.into_iter().chain(by_name).min() {
            found.push((score, z));
        }
    }
    sort(&mut found);
    found.into_iter().take(most).map(|(_, z)| z).collect()
}

fn first(text: &str) -> Option<char> {
    text.chars().next().map(|c| c.to_ascii_lowercase())
}

fn entry(z: u8) -> Option<(&'static str, &'static str)> {
    usize::from(z)
        .checked_sub(1)
        .and_then(|i| ELEMENTS.get(i))
        .copied()
}

fn position(test: impl Fn(&(&str, &str)) -> bool) -> Option<u8> {
    ELEMENTS
        .iter()
        .position(test)
        .and_then(|i| u8::try_from(i + 1).ok())
}

/// Distance between letters in lower case and a name in any case: insertions, deletions, replacements and exchanges of
/// neighbours (Damerau 1964, each letter changed once).
pub(crate) fn distance(wanted: &[char], name: &str) -> usize {
    let name: Vec<char> = name.chars().map(|c| c.to_ascii_lowercase()).collect();
    let mut row: Vec<usize> = (0..=name.len()).collect();
    let mut two_above = row.clone();
    for (i, &a) in wanted.iter().enumerate() {
        let above = row.clone();
        let letter_before = i.checked_sub(1).and_then(|before| wanted.get(before));
        let mut left = i + 1;
        let mut new = vec![left];
        for (j, &b) in name.iter().enumerate() {
            let at = |row: &[usize], column: usize| row.get(column).copied().unwrap_or(usize::MAX);
            let replaced = at(&above, j) + usize::from(a != b);
            left = replaced.min(at(&above, j + 1) + 1).min(left + 1);
            let name_before = j.checked_sub(1).and_then(|before| name.get(before));
            if letter_before == Some(&b) && name_before == Some(&a) {
                left = left.min(at(&two_above, j - 1) + 1);
            }
            new.push(left);
        }
        two_above = above;
        row = new;
    }
    row.last().copied().unwrap_or(wanted.len())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn symbols_and_names_lead_to_the_same_element() {
        for z in 1..=HEAVIEST {
            assert_eq!(by_symbol(symbol(z).unwrap()), Some(z));
            assert_eq!(by_name(name(z).unwrap()), Some(z));
        }
        assert_eq!(symbol(0), None);
        assert_eq!(symbol(119), None);
        assert_eq!(by_name("Sulphur"), Some(16));
        assert_eq!(by_name("KALIUM"), Some(19));
        assert_eq!(by_symbol("fe"), None);
    }

    #[test]
    fn distance_counts_edits() {
        let letters = |text: &str| text.chars().collect::<Vec<_>>();
        assert_eq!(distance(&letters("kitten"), "sitting"), 3);
        assert_eq!(distance(&letters(""), "abc"), 3);
        assert_eq!(distance(&letters("abc"), "abc"), 0);
    }

    #[test]
    fn slips_find_their_element() {
        assert_eq!(nearest("irn", 1), [26]);
        assert_eq!(nearest("Iorn", 1), [26]);
        assert_eq!(nearest("tin", 1), [50]);
        assert_eq!(distance(&"iorn".chars().collect::<Vec<_>>(), "iron"), 1);
        assert_eq!(nearest("sodum", 1), [11]);
        assert!(nearest("Xx", 5).contains(&54));
        assert!(nearest("qqqqqqqq", 5).is_empty());
    }
}
