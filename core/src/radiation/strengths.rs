//! Relative strengths of the lines of a multiplet in pure LS coupling.
//!
//! An operator of rank k that acts on the orbits alone gives between ²ˢ⁺¹L_J and ²ˢ⁺¹L′_J′
//! S(J, J′) ∝ (2J+1)(2J′+1) {L J S; J′ L′ k}² (Condon & Shortley 1935, ch. IX; Cowan 1981,
//! eq. 14.50 ff.). Divided by 2S + 1 the strengths of a multiplet add up to 1, and all lines of one
//! level have (2J+1)/[(2S+1)(2L+1)] of it: the sum rules of Ornstein, Burger and Dorgelo (1924).
//!
//! Within one term M1 lines follow from the operator L + g_s S, which is (g_s − 1) S but for a
//! part that links nothing: S(J, J−1) = (g_s−1)² (J+L+S+1)(J+L−S)(J+S−L)(L+S+1−J) / 4J in μ_B²
//! (Condon & Shortley 1935, ch. XI).

use super::Multipole;
use crate::angular::wigner_6j;
use crate::constants::ELECTRON_G;
use crate::quantity::TwiceJ;
use crate::terms::Term;

/// One line of a multiplet.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Line {
    /// J of the upper level.
    pub upper: TwiceJ,
    /// J of the lower level.
    pub lower: TwiceJ,
    /// Strength relative to the multiplet, the lines of which add up to 1.
    pub relative: f64,
}

/// All lines of one level.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LevelSum {
    /// J of the level.
    pub j: TwiceJ,
    /// The sum of its lines.
    pub sum: f64,
    /// (2J+1)/[(2S+1)(2L+1)], what the sum rule says.
    pub expected: f64,
}

/// A multiplet.
#[derive(Clone, Debug, PartialEq)]
pub struct Multiplet {
    /// The radiation.
    pub multipole: Multipole,
    /// Lines with strength, J of both levels rising; within one term the level of larger J is
    /// called the upper one.
    pub lines: Vec<Line>,
    /// Sums over the lines of each upper level; empty within one term, where a level's part that
    /// is no line is missing from them.
    pub upper_sums: Vec<LevelSum>,
    /// Sums over the lines of each lower level; likewise.
    pub lower_sums: Vec<LevelSum>,
}

/// (2J+1)(2J′+1) {L J S; J′ L′ k}² / (2S+1): the strength relative to all pairs of levels of two
/// terms of one S. Zero where the rules forbid the line or the spins differ.
pub fn orbital_share(rank: u32, upper: Term, upper_j: TwiceJ, lower: Term, lower_j: TwiceJ) -> f64 {
    if upper.two_s != lower.two_s || !upper.has(upper_j) || !lower.has(lower_j) {
        return 0.0;
    }
    let doubled = |n: u32| i32::try_from(n.saturating_mul(2)).unwrap_or(i32::MAX);
    let six_j = wigner_6j(
        doubled(upper.l),
        upper_j.doubled(),
        upper.spin().doubled(),
        lower_j.doubled(),
        doubled(lower.l),
        doubled(rank),
    );
    let weight = upper_j.degeneracy() as f64 * lower_j.degeneracy() as f64;
    weight * six_j * six_j / f64::from(upper.multiplicity())
}

/// The M1 strength between two levels of one term, in μ_B²; zero unless their J differ by one.
///
/// The formula of the module's head, with g_s of CODATA: it needs no radial function, so it is
/// absolute.
pub fn magnetic_dipole(term: Term, j: TwiceJ, other: TwiceJ) -> f64 {
    let larger = j.max(other);
    if !term.has(j) || !term.has(other) || j.doubled().abs_diff(other.doubled()) != 2 {
        return 0.0;
    }
    let two_j = f64::from(larger.doubled());
    let two_l = 2.0 * f64::from(term.l);
    let two_s = f64::from(term.two_s);
    let product = (two_j + two_l + two_s + 2.0)
        * (two_j + two_l - two_s)
        * (two_j + two_s - two_l)
        * (two_l + two_s + 2.0 - two_j);
    let excess = ELECTRON_G.value - 1.0;
    excess * excess * product / (32.0 * two_j)
}

/// The multiplet of two different terms by E1 or E2; no lines where L or S forbid it, and for M1,
/// which stays within a term.
pub fn between(multipole: Multipole, upper: Term, lower: Term) -> Multiplet {
    let mut lines = Vec::new();
    if multipole != Multipole::M1 {
        for upper_j in upper.levels() {
            for lower_j in lower.levels() {
                lines.push(Line {
                    upper: upper_j,
                    lower: lower_j,
                    relative: orbital_share(multipole.rank(), upper, upper_j, lower, lower_j),
                });
            }
        }
    }
    lines.retain(|line| line.relative > 0.0);
    let (upper_sums, lower_sums) = if lines.is_empty() {
        (Vec::new(), Vec::new())
    } else {
        (
            sums(upper, &lines, |line| line.upper),
            sums(lower, &lines, |line| line.lower),
        )
    };
    Multiplet {
        multipole,
        lines,
        upper_sums,
        lower_sums,
    }
}

/// The lines between the levels of one and the same term by M1 or E2; none for E1.
pub fn within(multipole: Multipole, term: Term) -> Multiplet {
    let mut lines = Vec::new();
    for upper in term.levels() {
        for lower in term.levels().take_while(|&j| j < upper) {
            let relative = match multipole {
                Multipole::E1 => 0.0,
                Multipole::M1 => magnetic_dipole(term, upper, lower),
                Multipole::E2 => orbital_share(2, term, upper, term, lower),
            };
            lines.push(Line {
                upper,
                lower,
                relative,
            });
        }
    }
    lines.retain(|line| line.relative > 0.0);
    let total: f64 = lines.iter().map(|line| line.relative).sum();
    for line in &mut lines {
        line.relative /= total;
    }
    Multiplet {
        multipole,
        lines,
        upper_sums: Vec::new(),
        lower_sums: Vec::new(),
    }
}

fn sums(term: Term, lines: &[Line], end: impl Fn(&Line) -> TwiceJ) -> Vec<LevelSum> {
    let states = term.states() as f64;
    term.levels()
        .map(|j| LevelSum {
            j,
            sum: lines
                .iter()
                .filter(|line| end(line) == j)
                .map(|line| line.relative)
                .sum(),
            expected: j.degeneracy() as f64 / states,
        })
        .collect()
}
