//! The species: an element with its charge and mass number, or any atom.

use std::fmt;

use super::species_text::Reader;
use crate::elements::symbol;
use crate::problem::Problem;

/// An atom or ion, or any atom (`element` is absent) with entered properties.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Species {
    /// Z, or nothing for `*`.
    pub element: Option<u8>,
    /// Charge: 0 neutral, −1 an anion, up to Z − 1.
    pub charge: i32,
    /// A, where an isotope was named.
    pub mass_number: Option<u16>,
}

impl Species {
    /// Any atom.
    pub const ANY: Species = Species {
        element: None,
        charge: 0,
        mass_number: None,
    };

    /// Z − charge, or nothing for any atom.
    pub fn electrons(&self) -> Option<u32> {
        u32::try_from(i32::from(self.element?).checked_sub(self.charge)?).ok()
    }

    /// `Fe`, or `*` for any atom.
    pub fn symbol(&self) -> &'static str {
        self.element.and_then(symbol).unwrap_or("*")
    }

    /// The spectrum's number, `II` for a single positive charge; nothing for anions and any atom.
    pub fn stage(&self) -> Option<String> {
        self.element?;
        roman(u32::try_from(self.charge.checked_add(1)?).ok()?)
    }
}

impl Species {
    /// The charge as it is raised behind the symbol: `−`, `2−`, `+`, `3+`; empty for the neutral
    /// atom and for any atom.
    pub fn charge_text(&self) -> String {
        let sign = match self.charge.signum() {
            _ if self.element.is_none() => return String::new(),
            0 => return String::new(),
            1 => '+',
            _ => '\u{2212}',
        };
        match self.charge.unsigned_abs() {
            1 => sign.to_string(),
            size => format!("{size}{sign}"),
        }
    }
}

/// ASCII: `Fe I`, `57Fe II`, `H-`, `*`; reading it gives the same species.
impl fmt::Display for Species {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if let Some(mass) = self.mass_number {
            write!(f, "{mass}")?;
        }
        f.write_str(self.symbol())?;
        match self.stage() {
            Some(stage) => write!(f, " {stage}"),
            None if self.charge < 0 => f.write_str("-"),
            None => Ok(()),
        }
    }
}

/// Reads a species: `Fe`, `fe`, `Fe II`, `Fe+`, `Fe 2+`, `Fe³⁺`, `57Fe II`, `Fe-57`, `133Cs`, `iron`,
/// `iron II`, `H-`, `D`, `T`, `*`.
///
/// All faults, in the order of the text; places are bytes of `text`. Bounds: 80 characters, charge
/// −1…Z − 1, mass number Z…3Z + 4.
pub fn parse(text: &str) -> Result<Species, Vec<Problem>> {
    Reader::new(text).read()
}

/// The Roman numeral of 1…399, or nothing.
pub fn roman(mut value: u32) -> Option<String> {
    const PARTS: [(u32, &str); 9] = [
        (100, "C"),
        (90, "XC"),
        (50, "L"),
        (40, "XL"),
        (10, "X"),
        (9, "IX"),
        (5, "V"),
        (4, "IV"),
        (1, "I"),
    ];
    if !(1..400).contains(&value) {
        return None;
    }
    let mut text = String::new();
    for (part, letters) in PARTS {
        while value >= part {
            text.push_str(letters);
            value -= part;
        }
    }
    Some(text)
}

/// The value of a Roman numeral in either case, whether or not it is written in the usual way.
pub fn roman_value(text: &str) -> Option<u32> {
    let value_of = |c: char| match c.to_ascii_uppercase() {
        'I' => Some(1u32),
        'V' => Some(5),
        'X' => Some(10),
        'L' => Some(50),
        'C' => Some(100),
        _ => None,
    };
    if text.is_empty() || text.len() > 12 {
        return None;
    }
    let values = text.chars().map(value_of).collect::<Option<Vec<u32>>>()?;
    let mut total = 0i64;
    for (i, &value) in values.iter().enumerate() {
        let smaller = values.get(i + 1).is_some_and(|&next| next > value);
        total += if smaller {
            -i64::from(value)
        } else {
            i64::from(value)
        };
    }
    u32::try_from(total).ok().filter(|&value| value > 0)
}
