//! Isotopes: masses, natural abundances, and the moments of their nuclei.
//!
//! Source: mendeleev 1.3.0 (MIT), table of isotopes: masses by IUPAC/CIAAW; spins and abundances by
//! Kondev et al. 2021 (NUBASE2020); g by Stone 2014, updated 2019; Q by Stone 2013, updated 2021. Five quadrupole
//! moments that are ten times too large there and one g of wrong sign are those of a second table (IAEA
//! INDC(NDS)-0658, 2014); values that nothing decides are left out. `core/data/generate_isotopes.py` has
//! the list and the format; licences in `core/data/NOTICE`.

use crate::quantity::TwiceJ;

const DATA: &str = include_str!("../../data/isotopes.txt");

/// One isotope.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Isotope {
    /// Atomic number.
    pub z: u8,
    /// Mass number.
    pub mass_number: u16,
    /// Mass of the neutral atom in u, to a millionth.
    pub mass: f64,
    /// Share of the element in nature, percent; nothing where it is not found there.
    pub abundance: Option<f64>,
    /// Spin of the nucleus; nothing where the table has none.
    pub spin: Option<TwiceJ>,
    /// g_I = μ/(I μ_N).
    pub g: Option<f64>,
    /// Quadrupole moment in barn.
    pub quadrupole: Option<f64>,
    /// Whether one of the values is from the second table.
    pub second_table: bool,
}

/// The isotopes of an element that occur in nature or are in use, by mass number.
pub fn isotopes(z: u8) -> Vec<Isotope> {
    let line = DATA.lines().find_map(|line| {
        let (number, rest) = line.split_once(' ')?;
        (number.parse() == Ok(z)).then_some(rest)
    });
    line.into_iter()
        .flat_map(|line| line.split(' '))
        .filter_map(|text| read(z, text))
        .collect()
}

/// One isotope of an element.
pub fn isotope(z: u8, mass_number: u16) -> Option<Isotope> {
    isotopes(z)
        .into_iter()
        .find(|isotope| isotope.mass_number == mass_number)
}

/// The mass number of an element's most abundant isotope; nothing where none occurs in nature.
pub fn most_abundant(z: u8) -> Option<u16> {
    let mut best: Option<(f64, u16)> = None;
    for isotope in isotopes(z) {
        if let Some(share) = isotope.abundance
            && best.is_none_or(|(most, _)| share > most)
        {
            best = Some((share, isotope.mass_number));
        }
    }
    best.map(|(_, mass_number)| mass_number)
}

/// The mean mass of an element's atoms in nature in u; nothing where none occurs there.
pub fn mean_mass(z: u8) -> Option<f64> {
    let (mut sum, mut shares) = (0.0, 0.0);
    for isotope in isotopes(z) {
        let share = isotope.abundance.unwrap_or(0.0);
        sum += share * isotope.mass;
        shares += share;
    }
    (shares > 0.0).then(|| sum / shares)
}

/// `87:-90819:27.83:3/2:1.834213:0.1335`
fn read(z: u8, text: &str) -> Option<Isotope> {
    let mut fields = text.split(':');
    let mass_number: u16 = fields.next()?.parse().ok()?;
    let beyond: f64 = fields.next()?.parse().ok()?;
    let mut second_table = false;
    let mut value = |field: Option<&str>| -> Option<f64> {
        let field = field?;
        second_table |= field.ends_with('*');
        field.trim_end_matches('*').parse().ok()
    };
    let abundance = value(fields.next());
    let spin = fields.next().and_then(spin);
    let (g, quadrupole) = (value(fields.next()), value(fields.next()));
    Some(Isotope {
        z,
        mass_number,
        mass: (f64::from(mass_number) * 1e6 + beyond) / 1e6,
        abundance,
        spin,
        g,
        quadrupole,
        second_table,
    })
}

fn spin(text: &str) -> Option<TwiceJ> {
    let two_j = match text.strip_suffix("/2") {
        Some(doubled) => doubled.parse().ok()?,
        None => text.parse::<i32>().ok()?.checked_mul(2)?,
    };
    Some(TwiceJ::from_doubled(two_j))
}
