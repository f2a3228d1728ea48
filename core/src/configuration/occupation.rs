//! A complete configuration: which subshells hold how many electrons.

use crate::numerics::order::sort;
use std::fmt;
use std::sync::LazyLock;

use super::{Orbital, Subshell};
use crate::elements::{HEAVIEST, ObservedGround, observed_ground, symbol};

/// Atomic numbers of the noble gases, whose symbols abbreviate a core.
pub const NOBLE_GASES: [u8; 7] = [2, 10, 18, 36, 54, 86, 118];

/// A configuration: each orbital once, by n, then ℓ.
#[derive(Clone, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Configuration {
    subshells: Vec<Subshell>,
}

impl Configuration {
    /// The configuration of these subshells in any order, or nothing where an orbital occurs twice.
    pub fn new(mut subshells: Vec<Subshell>) -> Option<Self> {
        sort(&mut subshells);
        let repeated = subshells.windows(2).any(|pair| match pair {
            [a, b] => a.orbital() == b.orbital(),
            _ => false,
        });
        (!repeated).then_some(Configuration { subshells })
    }

    /// Every occupied subshell, by n, then ℓ.
    pub fn subshells(&self) -> &[Subshell] {
        &self.subshells
    }

    /// The subshells that are neither empty nor full.
    pub fn open(&self) -> Vec<Subshell> {
        self.subshells
            .iter()
            .copied()
            .filter(|s| s.is_open())
            .collect()
    }

    /// Number of electrons.
    pub fn electrons(&self) -> u32 {
        self.subshells
            .iter()
            .fold(0, |sum, s| sum.saturating_add(s.electrons()))
    }

    /// Electrons in one orbital.
    pub fn electrons_in(&self, orbital: Orbital) -> u32 {
        self.subshells
            .iter()
            .find(|s| s.orbital() == orbital)
            .map_or(0, |s| s.electrons())
    }

    /// Whether Π(−1)^ℓ over all electrons is −1.
    pub fn is_odd(&self) -> bool {
        self.subshells.iter().fold(false, |odd, s| {
            odd ^ (u32::from(s.orbital().l()) & s.electrons() & 1 == 1)
        })
    }

    /// Number of states Π C(4ℓ + 2, N), or nothing where it passes 2¹²⁸.
    pub fn states(&self) -> Option<u128> {
        self.subshells.iter().try_fold(1u128, |product, s| {
            product.checked_mul(binomial(s.orbital().capacity(), s.electrons())?)
        })
    }

    /// The largest noble gas all of whose subshells are full here, leaving at least one subshell
    /// outside it.
    pub fn noble_core(&self) -> Option<u8> {
        NOBLE_GASES.iter().rev().copied().find(|&z| {
            closed_core(z).is_some_and(|core| {
                core.subshells.len() < self.subshells.len()
                    && core.subshells.iter().all(|s| self.subshells.contains(s))
            })
        })
    }

    /// The subshells outside the noble-gas core: `3d6 4s2` for iron.
    pub fn valence(&self) -> Vec<Subshell> {
        match self.noble_core().and_then(closed_core) {
            Some(core) => self.without(core),
            None => self.subshells.clone(),
        }
    }

    /// The subshells that another configuration does not hold equally.
    pub fn without(&self, core: &Configuration) -> Vec<Subshell> {
        self.subshells
            .iter()
            .copied()
            .filter(|s| !core.subshells.contains(s))
            .collect()
    }

    /// The subshells outside the noble-gas core as text: `3d6 4s2`.
    pub fn valence_text(&self) -> String {
        join(&self.valence())
    }

    /// With the noble-gas core abbreviated: `[Ar] 3d6 4s2`.
    pub fn short_text(&self) -> String {
        match self.noble_core().and_then(symbol) {
            Some(core) => format!("[{core}] {}", self.valence_text()),
            None => self.to_string(),
        }
    }
}

/// ASCII, complete: `1s2 2s2 2p6 3s`.
impl fmt::Display for Configuration {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&join(&self.subshells))
    }
}

/// Subshells as text with spaces between: `3d6 4s2`.
pub fn join(subshells: &[Subshell]) -> String {
    subshells
        .iter()
        .map(Subshell::to_string)
        .collect::<Vec<_>>()
        .join(" ")
}

/// The configuration of a table's entry.
pub(super) fn configuration_of(ground: &ObservedGround) -> Option<Configuration> {
    let subshells = ground
        .subshells
        .iter()
        .map(|&(n, l, electrons)| Subshell::new(Orbital::new(n, l)?, electrons))
        .collect::<Option<Vec<_>>>()?;
    Configuration::new(subshells)
}

/// The ground configuration of a neutral atom without open subshells, which `[symbol]` may stand for.
pub fn closed_core(z: u8) -> Option<&'static Configuration> {
    // Asked for several times at every keystroke: decoded once.
    static CORES: LazyLock<Vec<Option<Configuration>>> = LazyLock::new(|| {
        let closed =
            |z| configuration_of(&observed_ground(z, 0)?).filter(|core| core.open().is_empty());
        (0..=HEAVIEST).map(closed).collect()
    });
    CORES.get(usize::from(z))?.as_ref()
}

/// C(n, k), or nothing past 2¹²⁸.
fn binomial(n: u32, k: u32) -> Option<u128> {
    let k = k.min(n.checked_sub(k)?);
    // Each partial product is itself a binomial coefficient, so the division is exact.
    (0..k).try_fold(1u128, |value, i| {
        Some(value.checked_mul(u128::from(n - i))? / u128::from(i + 1))
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn subshell(n: u8, l: u8, electrons: u32) -> Subshell {
        Subshell::new(Orbital::new(n, l).unwrap(), electrons).unwrap()
    }

    #[test]
    fn iron_reads_as_usual() {
        let iron = configuration_of(&observed_ground(26, 0).unwrap()).unwrap();
        assert_eq!(iron.to_string(), "1s2 2s2 2p6 3s2 3p6 3d6 4s2");
        assert_eq!(iron.short_text(), "[Ar] 3d6 4s2");
        assert_eq!(iron.valence_text(), "3d6 4s2");
        assert_eq!(iron.electrons(), 26);
        assert_eq!(iron.states(), Some(210));
        assert!(!iron.is_odd());
        assert_eq!(iron.open(), [subshell(3, 2, 6)]);
    }

    #[test]
    fn a_noble_gas_keeps_its_own_shell() {
        assert_eq!(closed_core(10).unwrap().short_text(), "[He] 2s2 2p6");
        assert_eq!(closed_core(2).unwrap().short_text(), "1s2");
        assert_eq!(closed_core(26), None);
    }

    #[test]
    fn an_orbital_occurs_once() {
        assert_eq!(
            Configuration::new(vec![subshell(3, 2, 6), subshell(3, 2, 2)]),
            None
        );
    }

    #[test]
    fn states_are_exact_or_absent() {
        // C(14, 7) = 3432: any table of binomial coefficients.
        assert_eq!(
            Configuration::new(vec![subshell(4, 3, 7)])
                .unwrap()
                .states(),
            Some(3432)
        );
        assert_eq!(binomial(198, 99), None);
        assert_eq!(binomial(5, 6), None);
        let many = (20..30).map(|l| subshell(50, l, 41)).collect();
        assert_eq!(Configuration::new(many).unwrap().states(), None);
    }
}
