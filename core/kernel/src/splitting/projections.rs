//! How elements depend on projections: the Wigner–Eckart theorem by tables.

use crate::angular::wigner_3j;
use crate::numerics::sorted_map::SortedMap;

/// (−1)^(J−M) (J k J′; −M q M′) for the M of the left level.
///
/// Source: Edmonds, *Angular Momentum in Quantum Mechanics* (1957), eq. 5.4.1.
fn factor(two_j: i32, two_k: i32, two_jp: i32, two_m: i32, two_q: i32) -> f64 {
    let symbol = wigner_3j(two_j, two_k, two_jp, -two_m, two_q, two_m - two_q);
    if (two_j - two_m) / 2 % 2 == 0 {
        symbol
    } else {
        -symbol
    }
}

/// ⟨j₁m₁ j₂m₂|J M⟩ = (−1)^(j₁−j₂+M) √(2J+1) (j₁ j₂ J; m₁ m₂ −M) (Edmonds, eq. 3.7.3).
pub fn clebsch_gordan(two_j1: i32, two_m1: i32, two_j2: i32, two_m2: i32, two_j: i32) -> f64 {
    let two_m = two_m1 + two_m2;
    let symbol = wigner_3j(two_j1, two_j2, two_j, two_m1, two_m2, -two_m);
    let value = f64::from(two_j + 1).sqrt() * symbol;
    if (two_j1 - two_j2 + two_m) / 2 % 2 == 0 {
        value
    } else {
        -value
    }
}

/// The factors of one rank and q, by J, J′ and M, each found once.
pub struct Factors {
    two_k: i32,
    tables: SortedMap<(i32, i32, i32), Vec<f64>>,
}

impl Factors {
    /// Of rank k, doubled.
    pub fn new(two_k: i32) -> Factors {
        Factors {
            two_k,
            tables: SortedMap::default(),
        }
    }

    /// 2k.
    pub fn two_k(&self) -> i32 {
        self.two_k
    }

    /// The factors of ⟨J M|T^k_q|J′ M−q⟩, M rising from −J.
    pub fn of(&mut self, two_j: i32, two_jp: i32, two_q: i32) -> &[f64] {
        let key = (two_j, two_jp, two_q);
        if self.tables.get(&key).is_none() {
            let projections = (-two_j..=two_j).step_by(2);
            let table = projections
                .map(|two_m| factor(two_j, self.two_k, two_jp, two_m, two_q))
                .collect();
            self.tables.insert(key, table);
        }
        self.tables.get(&key).map_or(&[], Vec::as_slice)
    }
}

/// The place of M in a list rising from −J.
pub fn place(two_j: i32, two_m: i32) -> Option<usize> {
    (two_m.abs() <= two_j)
        .then(|| usize::try_from((two_j + two_m) / 2).ok())
        .flatten()
}
