//! Coupling coefficients of a chain of angular momenta, each computed once.
//!
//! Matrix elements between many states ask for the same few thousand coefficients millions of
//! times. They are kept in a table of open addresses: what is found never depends on its order.

use crate::angular::{wigner_6j, wigner_9j};

/// What is computed of a key.
#[derive(Clone, Copy)]
enum Kind {
    Six,
    Step,
}

/// A key that no symbol has: 126 bits of angular momenta and one of the kind leave one unset.
const EMPTY: u128 = u128::MAX;

/// Doubled angular momenta of a key are below this; others are computed each time.
const KEY_LIMIT: i32 = 1 << 14;

/// 6j symbols and coupling steps that were asked for before.
pub struct Symbols {
    slots: Vec<(u128, f64)>,
    used: usize,
}

impl Default for Symbols {
    fn default() -> Self {
        Symbols {
            slots: vec![(EMPTY, 0.0); 1 << 12],
            used: 0,
        }
    }
}

impl Symbols {
    /// The 6j symbol {a b c; d e f} of doubled angular momenta.
    pub fn six(&mut self, [a, b, c, d, e, f]: [i32; 6]) -> f64 {
        self.kept(Kind::Six, [a, b, c, d, e, f, 0, 0, 0])
    }

    /// What a tensor product takes on when two systems are coupled:
    ///
    /// ⟨j₁j₂J‖[T^(k₁)U^(k₂)]^(k)‖j₁′j₂′J′⟩ = step · ⟨j₁‖T‖j₁′⟩⟨j₂‖U‖j₂′⟩ with
    /// step = √[(2J+1)(2k+1)(2J′+1)] {j₁ j₁′ k₁; j₂ j₂′ k₂; J J′ k}.
    ///
    /// The argument is [j₁ j₁′ k₁ j₂ j₂′ k₂ J J′ k], all doubled.
    ///
    /// Source: Edmonds, *Angular Momentum in Quantum Mechanics* (1957), eq. 7.1.5.
    pub fn step(&mut self, nine: [i32; 9]) -> f64 {
        self.kept(Kind::Step, nine)
    }

    #[inline]
    fn kept(&mut self, kind: Kind, two_j: [i32; 9]) -> f64 {
        let mut key = match kind {
            Kind::Six => 1_u128,
            Kind::Step => 0,
        };
        for value in two_j {
            if !(0..KEY_LIMIT).contains(&value) {
                return compute(kind, two_j);
            }
            key = (key << 14) | u128::from(value.unsigned_abs());
        }
        let mask = self.slots.len() - 1;
        let mut place = scatter(key, mask);
        while let Some(&(found, value)) = self.slots.get(place) {
            if found == key {
                return value;
            }
            if found == EMPTY {
                break;
            }
            place = (place + 1) & mask;
        }
        let value = compute(kind, two_j);
        self.keep(key, value);
        value
    }

    fn keep(&mut self, key: u128, value: f64) {
        if self.used * 2 >= self.slots.len() {
            let larger = vec![(EMPTY, 0.0); self.slots.len() * 2];
            let old = std::mem::replace(&mut self.slots, larger);
            for (key, value) in old.into_iter().filter(|slot| slot.0 != EMPTY) {
                self.insert(key, value);
            }
        }
        self.insert(key, value);
        self.used += 1;
    }

    fn insert(&mut self, key: u128, value: f64) {
        let mask = self.slots.len() - 1;
        let mut place = scatter(key, mask);
        while self.slots.get(place).is_some_and(|slot| slot.0 != EMPTY) {
            place = (place + 1) & mask;
        }
        if let Some(slot) = self.slots.get_mut(place) {
            *slot = (key, value);
        }
    }
}

/// Multiplication by 2⁶⁴ over the golden ratio spreads neighbouring keys; the high bits are best.
fn scatter(key: u128, mask: usize) -> usize {
    const GOLDEN: u64 = 0x9E37_79B9_7F4A_7C15;
    let (high, low) = ((key >> 64) as u64, key as u64);
    let mixed = (high.wrapping_mul(GOLDEN) ^ (high >> 29) ^ low).wrapping_mul(GOLDEN);
    usize::try_from(mixed >> 32).unwrap_or(0) & mask
}

fn compute(kind: Kind, nine: [i32; 9]) -> f64 {
    let [a, b, c, d, e, f, g, h, i] = nine;
    match kind {
        Kind::Six => wigner_6j(a, b, c, d, e, f),
        Kind::Step => step(nine, (c, f, i), (a, b, d, e, g, h)),
    }
}

/// The 9j symbol where no rank is zero, a 6j symbol where one is (Edmonds, eq. 6.4.14).
fn step(nine: [i32; 9], ranks: (i32, i32, i32), js: (i32, i32, i32, i32, i32, i32)) -> f64 {
    let (j1, p1, j2, p2, total, primed) = js;
    let width = |two_j: i32| f64::from(two_j + 1);
    let root = (width(total) * width(primed)).sqrt();
    match ranks {
        (0, k, whole) => {
            if j1 != p1 || k != whole {
                return 0.0;
            }
            let value = root / width(j1).sqrt() * wigner_6j(j2, total, j1, primed, p2, k);
            signed((j1 + p2 + total + k) / 2, value)
        }
        (k, 0, whole) => {
            if j2 != p2 || k != whole {
                return 0.0;
            }
            let value = root / width(j2).sqrt() * wigner_6j(j1, total, j2, primed, p1, k);
            signed((j1 + j2 + primed + k) / 2, value)
        }
        (k, other, 0) => {
            if total != primed || k != other {
                return 0.0;
            }
            let value = (width(total) / width(k)).sqrt() * wigner_6j(j1, p1, k, p2, j2, total);
            signed((p1 + j2 + k + total) / 2, value)
        }
        (_, _, whole) => {
            let [a, b, c, d, e, f, g, h, i] = nine;
            root * width(whole).sqrt() * wigner_9j(a, b, c, d, e, f, g, h, i)
        }
    }
}

/// (−1)^exponent · value.
#[inline]
pub(super) fn signed(exponent: i32, value: f64) -> f64 {
    if exponent & 1 == 0 { value } else { -value }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Where a rank is zero the 9j symbol itself must give the same.
    #[test]
    fn steps_with_a_zero_rank_are_those_of_the_9j_symbol() {
        let mut symbols = Symbols::default();
        let mut compared = 0;
        for two_j in 0..5_i32.pow(6) {
            let digit = |place: u32| two_j / 5_i32.pow(place) % 5;
            let [j1, p1, j2, p2, total, primed] = [0, 1, 2, 3, 4, 5].map(digit);
            for k in 0..4 {
                for (k1, k2, whole) in [(0, k, k), (k, 0, k), (k, k, 0)] {
                    let nine = [j1, p1, k1, j2, p2, k2, total, primed, whole];
                    let root = f64::from((total + 1) * (primed + 1) * (whole + 1)).sqrt();
                    let symbol = wigner_9j(j1, p1, k1, j2, p2, k2, total, primed, whole);
                    if symbol != 0.0 {
                        let expected = root * symbol;
                        let twice = [symbols.step(nine), symbols.step(nine)];
                        assert!(twice.iter().all(|v| (v - expected).abs() < 1e-13));
                        compared += 1;
                    }
                }
            }
        }
        assert!(compared > 1000, "{compared}");
    }

    #[test]
    fn large_angular_momenta_are_computed_too() {
        let mut symbols = Symbols::default();
        let value = symbols.six([200, 200, 0, 200, 200, 200]);
        assert!((value.abs() - 1.0 / 201.0).abs() < 1e-15);
    }
}
