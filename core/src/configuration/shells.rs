//! Shells and what they hold; the bare shell n.

use super::occupation::Configuration;
use super::{MAX_N, Orbital, Subshell, orbital_letter};
use crate::quantity::TwiceJ;

/// The letter of shell n: K L M N O P Q for 1…7 (common practice, no source), nothing beyond.
pub fn shell_letter(n: u8) -> Option<char> {
    usize::from(n)
        .checked_sub(1)
        .and_then(|i| "KLMNOPQ".chars().nth(i))
}

/// 2n², the number of states of shell n.
pub fn shell_capacity(n: u8) -> u32 {
    2 * u32::from(n) * u32::from(n)
}

/// A shell that holds electrons.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Shell {
    /// Principal quantum number.
    pub n: u8,
    /// K, L, M …, nothing beyond Q.
    pub letter: Option<char>,
    /// Electrons in it.
    pub electrons: u32,
    /// 2n².
    pub capacity: u32,
    /// Its occupied subshells, by ℓ.
    pub subshells: Vec<Subshell>,
}

/// The occupied shells of a configuration, by n.
pub fn shells(configuration: &Configuration) -> Vec<Shell> {
    let mut all: Vec<Shell> = Vec::new();
    for &subshell in configuration.subshells() {
        let n = subshell.orbital().n();
        match all.last_mut().filter(|shell| shell.n == n) {
            Some(shell) => {
                shell.electrons = shell.electrons.saturating_add(subshell.electrons());
                shell.subshells.push(subshell);
            }
            None => all.push(Shell {
                n,
                letter: shell_letter(n),
                electrons: subshell.electrons(),
                capacity: shell_capacity(n),
                subshells: vec![subshell],
            }),
        }
    }
    all
}

/// m_ℓ = −ℓ…ℓ.
pub fn m_l_range(l: u8) -> Vec<i32> {
    (-i32::from(l)..=i32::from(l)).collect()
}

/// m_s = −1/2 and 1/2.
pub const M_S: [TwiceJ; 2] = [TwiceJ::from_doubled(-1), TwiceJ::from_doubled(1)];

/// One ℓ of a bare shell.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct BareSubshell {
    /// Orbital quantum number.
    pub l: u8,
    /// Its letter, `[21]` and so on beyond z.
    pub letter: String,
    /// m_ℓ = −ℓ…ℓ; as many pairs (ℓ, m_ℓ).
    pub m_l: Vec<i32>,
    /// 2(2ℓ + 1) states.
    pub states: u32,
}

/// All that shell n can hold: n values of ℓ, n² pairs (ℓ, m_ℓ), 2n² states.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct BareShell {
    /// Principal quantum number.
    pub n: u8,
    /// K, L, M …, nothing beyond Q.
    pub letter: Option<char>,
    /// ℓ = 0…n − 1.
    pub subshells: Vec<BareSubshell>,
    /// n².
    pub pairs: u32,
    /// 2n².
    pub states: u32,
}

/// The bare shell n = 1…50, or nothing beyond.
pub fn bare_shell(n: u8) -> Option<BareShell> {
    (1..=MAX_N).contains(&n).then(|| {
        let subshells: Vec<BareSubshell> = (0..n)
            .filter_map(|l| Orbital::new(n, l))
            .map(|orbital| BareSubshell {
                l: orbital.l(),
                letter: orbital_letter(orbital.l().into()),
                m_l: m_l_range(orbital.l()),
                states: orbital.capacity(),
            })
            .collect();
        let states = subshells.iter().map(|s| s.states).sum();
        BareShell {
            n,
            letter: shell_letter(n),
            pairs: states / 2,
            states,
            subshells,
        }
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::configuration::filling::ground;

    #[test]
    fn iron_has_its_shells() {
        let shells = shells(ground(26, 0).unwrap().configuration());
        let counts: Vec<_> = shells
            .iter()
            .map(|s| (s.letter.unwrap(), s.electrons, s.capacity))
            .collect();
        assert_eq!(
            counts,
            [('K', 2, 2), ('L', 8, 8), ('M', 14, 18), ('N', 2, 32)]
        );
    }

    #[test]
    fn bare_shells_are_counted_out() {
        // n = 5: 5 values of ℓ, 9 of m_ℓ, 25 pairs, 50 states; K 2, L 8, M 18, N 32: common practice.
        let fifth = bare_shell(5).unwrap();
        assert_eq!(
            (fifth.subshells.len(), fifth.pairs, fifth.states),
            (5, 25, 50)
        );
        assert_eq!(fifth.subshells.last().unwrap().m_l.len(), 9);
        for (n, letter, states) in [
            (1, 'K', 2),
            (2, 'L', 8),
            (3, 'M', 18),
            (4, 'N', 32),
            (5, 'O', 50),
        ] {
            let shell = bare_shell(n).unwrap();
            assert_eq!(
                (shell.letter, shell.states, shell_capacity(n)),
                (Some(letter), states, states)
            );
        }
        let last = bare_shell(50).unwrap();
        assert_eq!((last.pairs, last.states, last.letter), (2500, 5000, None));
        assert_eq!(last.subshells.last().unwrap().letter, "[49]");
        assert_eq!(bare_shell(0), None);
        assert_eq!(bare_shell(51), None);
    }
}
