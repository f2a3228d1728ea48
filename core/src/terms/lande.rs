//! Landé factors and effective moments in pure coupling schemes.
//!
//! All follow from one formula, the projection theorem for J = J₁ + J₂:
//! g = g₁ [J(J+1) + J₁(J₁+1) − J₂(J₂+1)] / 2J(J+1) + g₂ [J(J+1) + J₂(J₂+1) − J₁(J₁+1)] / 2J(J+1)
//! (Landé 1923; Condon & Shortley 1935, ch. XVI; Cowan 1981, §17-3). g of an orbital momentum is 1;
//! g of a spin is g_s, which is not quite 2.

use super::term::Term;
use crate::constants::ELECTRON_G;
use crate::quantity::TwiceJ;

/// g_s, the g factor of the electron's spin, counted positive (CODATA 2022).
pub const G_S: f64 = ELECTRON_G.value;

/// 4 j(j + 1), exact.
fn four_square(j: TwiceJ) -> f64 {
    let two_j = i64::from(j.doubled());
    // |2j| < 2³¹, so the product is below 2⁶³.
    (two_j.saturating_mul(two_j.saturating_add(2))) as f64
}

/// g of J = J₁ + J₂ from the factors of both; nothing for J = 0 or where the three do not couple.
pub fn coupled(g1: f64, j1: TwiceJ, g2: f64, j2: TwiceJ, j: TwiceJ) -> Option<f64> {
    let (a, b, c) = (
        i64::from(j1.doubled()),
        i64::from(j2.doubled()),
        i64::from(j.doubled()),
    );
    if a < 0 || b < 0 || c <= 0 || c < (a - b).abs() || c > a + b || (a + b + c) % 2 != 0 {
        return None;
    }
    let (x1, x2, x) = (four_square(j1), four_square(j2), four_square(j));
    Some((g1 * (x + x1 - x2) + g2 * (x + x2 - x1)) / (2.0 * x))
}

/// g_J of a level in LS coupling; nothing for J = 0 or a J that the term does not have.
pub fn ls(term: Term, j: TwiceJ) -> Option<f64> {
    let two_l = i32::try_from(term.l.saturating_mul(2)).ok()?;
    coupled(1.0, TwiceJ::from_doubled(two_l), G_S, term.spin(), j)
}

/// g of one electron ℓ_j, the same for every level of equivalent electrons j^n.
pub fn electron(l: u32, j: TwiceJ) -> Option<f64> {
    ls(Term { two_s: 1, l }, j)
}

/// g_J of a level in jK coupling, from the parent's g and J, the outer electron's ℓ, K and J. A
/// parent with J = 0 has no g and none is needed: pass `None`.
pub fn pair(g_parent: Option<f64>, j_parent: TwiceJ, l: u32, k: TwiceJ, j: TwiceJ) -> Option<f64> {
    let two_l = i32::try_from(l.saturating_mul(2)).ok()?;
    let g_parent = match g_parent {
        Some(g) => g,
        None if j_parent.doubled() == 0 => 0.0,
        None => return None,
    };
    // K = 0 has no moment of its own, whatever stands for its g.
    let g_k = match k.doubled() {
        0 => 0.0,
        _ => coupled(g_parent, j_parent, 1.0, TwiceJ::from_doubled(two_l), k)?,
    };
    coupled(g_k, k, G_S, TwiceJ::from_doubled(1), j)
}

/// The effective moment μ_eff = |g| √(J(J + 1)), in μ_B.
pub fn effective_moment(g: f64, j: TwiceJ) -> f64 {
    g.abs() * four_square(j).max(0.0).sqrt() / 2.0
}

/// The spin-only moment g_s √(S(S + 1)), in μ_B; with n unpaired electrons and g_s taken as 2 this is
/// the √(n(n + 2)) of the usual tables (common practice in magnetochemistry).
pub fn spin_only_moment(spin: TwiceJ) -> f64 {
    effective_moment(G_S, spin)
}
