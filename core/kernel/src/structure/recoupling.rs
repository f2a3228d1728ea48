//! From the two electrons of an interaction to operators in the order of the subshells.
//!
//! An interaction of rank k between densities, :[[a†c̃]^(0k) [b†d̃]^(0k)]^(00):, is brought to
//! Σ c [[p₁p₂]^X [p₃p₄]^X]^(00), with p₁ … p₄ the same operators sorted by subshell, creation before
//! annihilation. Between the colons operators anticommute; what is left is recoupling of four
//! angular momenta to zero, for spins and orbits alike (Edmonds 1957, §6.1 and eq. 6.4.14).

use super::shell_operators::Ranks;
use super::symbols::{Symbols, signed};

/// One creation or annihilation operator.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Electron {
    /// Place of its subshell.
    pub subshell: usize,
    /// ℓ of it.
    pub l: u8,
    /// a† or ã.
    pub creates: bool,
}

/// How four sorted operators are distributed over subshells; those of one subshell are coupled first.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Layout {
    /// One in each of four subshells.
    OneOneOneOne,
    /// The first two in one.
    TwoOneOne,
    /// The middle two in one: [[p₁ [p₂p₃]^X] p₄]^(00).
    OneTwoOne,
    /// The last two in one.
    OneOneTwo,
    /// Two and two.
    TwoTwo,
    /// The first three in one: [[[p₁p₂]^X p₃] p₄]^(00).
    ThreeOne,
    /// The last three in one: [p₁ [p₂ [p₃p₄]^X]]^(00).
    OneThree,
}

/// Sorted operators and the coefficient of each rank X.
#[derive(Clone, Debug)]
pub struct Sorted {
    /// p₁ … p₄.
    pub operators: [Electron; 4],
    /// Their distribution.
    pub layout: Layout,
    /// X with its coefficient.
    pub terms: Vec<(Ranks, f64)>,
}

/// :[[x₁x₂]^(0k) [x₃x₄]^(0k)]^(00): in sorted operators; nothing when all are of one subshell.
pub fn sorted(symbols: &mut Symbols, x: [Electron; 4], k: i32) -> Option<Sorted> {
    let mut order: Vec<usize> = (0..4).collect();
    crate::numerics::order::sort_by_key(&mut order, |&place| {
        x.get(place).map(|o| (o.subshell, !o.creates))
    });
    let &[a, b, c, d] = order.as_slice() else {
        return None;
    };
    let at = |place: usize| x.get(place).copied();
    let operators = [at(a)?, at(b)?, at(c)?, at(d)?];
    let [p1, p2, p3, p4] = operators;
    let same = [
        p1.subshell == p2.subshell,
        p2.subshell == p3.subshell,
        p3.subshell == p4.subshell,
    ];
    let layout = match same {
        [true, true, true] => return None,
        [true, true, false] => Layout::ThreeOne,
        [false, true, true] => Layout::OneThree,
        [true, false, true] => Layout::TwoTwo,
        [true, false, false] => Layout::TwoOneOne,
        [false, true, false] => Layout::OneTwoOne,
        [false, false, true] => Layout::OneOneTwo,
        [false, false, false] => Layout::OneOneOneOne,
    };
    let target = match layout {
        Layout::OneTwoOne => [b, c, a, d],
        _ => [a, b, c, d],
    };
    let fermions = if is_odd(&order) { -1.0 } else { 1.0 };
    let spins = [1; 4];
    let orbits = x.map(|electron| 2 * i32::from(electron.l));
    let mut terms = Vec::new();
    for kappa in 0..=1 {
        let mut spin = recouple(symbols, spins, 0, target, 2 * kappa);
        if layout == Layout::OneTwoOne {
            spin = signed(kappa, spin);
        }
        if spin == 0.0 {
            continue;
        }
        let [first, second, ..] = target.map(|place| orbits.get(place).copied().unwrap_or(0));
        for two_rank in ((first - second).abs()..=first + second).step_by(2) {
            let mut orbital = recouple(symbols, orbits, 2 * k, target, two_rank);
            if layout == Layout::OneTwoOne {
                // [[Q p₁] p₄] = (−1)^(X + j₁ − j₄) [[p₁ Q] p₄].
                let (l1, l4) = (i32::from(p1.l), i32::from(p4.l));
                orbital = signed(two_rank / 2 + l1 - l4, orbital);
            }
            if orbital != 0.0 {
                let ranks = Ranks {
                    spin: 2 * kappa,
                    orbital: two_rank,
                };
                terms.push((ranks, fermions * spin * orbital));
            }
        }
    }
    Some(Sorted {
        operators,
        layout,
        terms,
    })
}

/// Whether a permutation is odd.
fn is_odd(order: &[usize]) -> bool {
    let inversions = order
        .iter()
        .enumerate()
        .flat_map(|(place, &left)| order.iter().skip(place + 1).map(move |&right| left > right))
        .filter(|&inverted| inverted);
    inversions.count() % 2 == 1
}

/// ⟨[[t₁t₂]^X [t₃t₄]^X]^0|[[j₁j₂]^Y [j₃j₄]^Y]^0⟩ for commuting tensors, all doubled; `t` are places.
///
/// [[12]^Y[34]^Y]^0 = Σ_X √[(2Y+1)(2X+1)] (−1)^(j₂+Y+j₃+X) {j₁ j₂ Y; j₄ j₃ X} [[13]^X[24]^X]^0.
fn recouple(symbols: &mut Symbols, two_j: [i32; 4], y: i32, t: [usize; 4], x: i32) -> f64 {
    let of = |place: usize| two_j.get(place).copied().unwrap_or(0);
    let exchange = |a: usize, b: usize, rank: i32| (of(a) + of(b) - rank) / 2;
    let [t1, t2, t3, t4] = t;
    let partner = |place: usize| place ^ 1;
    if partner(t1) == t2 {
        let mut exponent = 0;
        if t1 > t2 {
            exponent += exchange(t1, t2, y);
        }
        if t3 > t4 {
            exponent += exchange(t3, t4, y);
        }
        return if x == y { signed(exponent, 1.0) } else { 0.0 };
    }
    let (u, w) = (partner(t1), partner(t2));
    let mut exponent = (of(u) + y + of(t2) + x) / 2;
    if t1 > u {
        exponent += exchange(t1, u, y);
    }
    if t2 > w {
        exponent += exchange(t2, w, y);
    }
    if u == t4 {
        exponent += exchange(u, w, x);
    }
    let root = (f64::from(y + 1) * f64::from(x + 1)).sqrt();
    signed(
        exponent,
        root * symbols.six([of(t1), of(u), y, of(w), of(t2), x]),
    )
}
