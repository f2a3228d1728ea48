//! jj levels: every nℓ^N divided between j = ℓ − ½ and j = ℓ + ½, each j^n antisymmetrised, all
//! coupled to J (Condon & Shortley 1935, ch. X; Cowan 1981, §4-15).

use crate::configuration::{Orbital, Subshell};
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use rungline_kernel::projections::{convolve, gaussian_binomials};
use rungline_kernel::weights::{MAX_STEPS, states, text_of};
use std::fmt;

/// The largest j whose equivalent electrons are counted, that of ℓ = 49.
pub const MAX_TWO_J: i32 = 99;

/// Electrons of one nℓ with one j.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct JSubshell {
    /// nℓ.
    pub orbital: Orbital,
    /// j = ℓ ± ½.
    pub j: TwiceJ,
    /// 1 … 2j + 1.
    pub electrons: u32,
}

/// One way to divide the open shells between the two j, with its levels.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct JjConfiguration {
    /// Those that hold electrons, in the order n, ℓ, j.
    pub subshells: Vec<JSubshell>,
    /// Number of levels of each J, J rising.
    pub levels: Vec<(TwiceJ, u128)>,
}

/// The jj configurations of a configuration.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct JjConfigurations {
    /// How many there are.
    pub total: u128,
    /// The first of them: most electrons with j = ℓ − ½ first.
    pub listed: Vec<JjConfiguration>,
}

impl JjConfiguration {
    /// Number of its levels.
    pub fn n_levels(&self) -> u128 {
        self.levels
            .iter()
            .map(|&(_, n)| n)
            .fold(0, u128::saturating_add)
    }
}

/// `3d3/2^4 3d5/2^2`; a single electron without its exponent.
impl fmt::Display for JjConfiguration {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (i, s) in self.subshells.iter().enumerate() {
            let gap = if i > 0 { " " } else { "" };
            write!(f, "{gap}{}{}", s.orbital, s.j)?;
            if s.electrons > 1 {
                write!(f, "^{}", s.electrons)?;
            }
        }
        Ok(())
    }
}

/// Levels of n equivalent electrons of one j: number of levels of each J, J rising.
///
/// times(J) = c(J) − c(J + 1) with c(M) the number of antisymmetric states of projection M.
/// Errors: `j-not-half-integer` unless 2j is odd and in 1 … 99; `j-over-capacity` for n above 2j + 1.
pub fn levels_of_equivalent(j: TwiceJ, electrons: u32) -> Result<Vec<(TwiceJ, u128)>, Problem> {
    if j.is_integer() || !(1..=MAX_TWO_J).contains(&j.doubled()) {
        return Err(Problem::new(
            "j-not-half-integer",
            format!("an electron cannot have j = {j}."),
            0,
            0,
        )
        .bound("j = 1/2, 3/2, … 99/2"));
    }
    let size = u32::try_from(j.doubled()).unwrap_or(0).saturating_add(1);
    if electrons > size {
        return Err(Problem::new(
            "j-over-capacity",
            format!("{electrons} electrons do not fit into j = {j}."),
            0,
            0,
        )
        .bound(format!("at most {size} electrons with j = {j}")));
    }
    Ok(levels_from(&one_j(size, electrons)))
}

/// Number of levels of each J of the whole configuration, counted through jj coupling.
///
/// Errors: `too-many-states`, `counting-too-long`.
pub fn levels_by_j(subshells: &[Subshell]) -> Result<Vec<(TwiceJ, u128)>, Problem> {
    states(subshells)?;
    let mut weights = vec![1_u128];
    let mut steps: u128 = 0;
    for &shell in subshells.iter().filter(|s| s.is_open()) {
        let mut whole: Vec<u128> = Vec::new();
        for (lower, upper) in divisions(shell) {
            let (below, above) = (one_j(sizes(shell).0, lower), one_j(sizes(shell).1, upper));
            steps = steps.saturating_add((below.len() as u128).saturating_mul(above.len() as u128));
            if steps > MAX_STEPS {
                return Err(too_long(subshells));
            }
            let part = convolve(&below, &above);
            whole = added(whole, part);
        }
        steps = steps.saturating_add((weights.len() as u128).saturating_mul(whole.len() as u128));
        if steps > MAX_STEPS {
            return Err(too_long(subshells));
        }
        weights = convolve(&weights, &whole);
    }
    Ok(levels_from(&weights))
}

/// How many jj configurations there are.
pub fn count(subshells: &[Subshell]) -> u128 {
    subshells
        .iter()
        .filter(|s| s.is_open())
        .map(|&s| divisions(s).count() as u128)
        .fold(1, u128::saturating_mul)
}

/// The jj configurations with their levels, at most `limit` of them, and not more than 10⁸ steps
/// find.
///
/// Errors: `too-many-states`; `counting-too-long` when one alone takes more steps.
pub fn configurations(subshells: &[Subshell], limit: usize) -> Result<JjConfigurations, Problem> {
    states(subshells)?;
    let open = super::open_shells(subshells);
    let choices: Vec<Vec<(Vec<JSubshell>, Vec<u128>)>> = open.iter().map(|&s| divided(s)).collect();
    let total = count(&open);
    let mut listed = Vec::new();
    let mut steps: u128 = 0;
    // An odometer over the divisions of each shell, the last shell turning fastest.
    let mut turn = vec![0_usize; choices.len()];
    while listed.len() < limit && steps <= MAX_STEPS {
        let mut parts = Vec::new();
        let mut weights = vec![1_u128];
        for (choice, &at) in choices.iter().zip(&turn) {
            let Some((held, own)) = choice.get(at) else {
                continue;
            };
            steps = steps.saturating_add((weights.len() as u128).saturating_mul(own.len() as u128));
            if steps > MAX_STEPS && listed.is_empty() {
                return Err(too_long(subshells));
            }
            parts.extend(held.iter().copied());
            weights = convolve(&weights, own);
        }
        listed.push(JjConfiguration {
            subshells: parts,
            levels: levels_from(&weights),
        });
        let mut carried = true;
        for (at, choice) in turn.iter_mut().zip(&choices).rev() {
            *at += 1;
            if *at < choice.len() {
                carried = false;
                break;
            }
            *at = 0;
        }
        if carried {
            break;
        }
    }
    Ok(JjConfigurations { total, listed })
}

fn too_long(subshells: &[Subshell]) -> Problem {
    Problem::new(
        "counting-too-long",
        format!(
            "counting the jj levels of {} takes more than {MAX_STEPS} steps.",
            text_of(subshells)
        ),
        0,
        0,
    )
    .bound(format!("a count of at most {MAX_STEPS} multiplications"))
}

/// 2j + 1 of j = ℓ − ½ (none for s) and of j = ℓ + ½.
fn sizes(shell: Subshell) -> (u32, u32) {
    let two_l = 2 * u32::from(shell.orbital().l());
    (two_l, two_l + 2)
}

/// (electrons with ℓ − ½, electrons with ℓ + ½), most of the first kind first.
fn divisions(shell: Subshell) -> impl Iterator<Item = (u32, u32)> {
    let (lower, upper) = sizes(shell);
    let electrons = shell.electrons();
    (electrons.saturating_sub(upper)..=electrons.min(lower))
        .rev()
        .map(move |n| (n, electrons - n))
}

fn divided(shell: Subshell) -> Vec<(Vec<JSubshell>, Vec<u128>)> {
    let orbital = shell.orbital();
    let two_l = 2 * i32::from(orbital.l());
    let (lower_size, upper_size) = sizes(shell);
    divisions(shell)
        .map(|(lower, upper)| {
            let held = [(two_l - 1, lower), (two_l + 1, upper)]
                .into_iter()
                .filter(|&(_, electrons)| electrons > 0)
                .map(|(two_j, electrons)| JSubshell {
                    orbital,
                    j: TwiceJ::from_doubled(two_j),
                    electrons,
                })
                .collect();
            (
                held,
                convolve(&one_j(lower_size, lower), &one_j(upper_size, upper)),
            )
        })
        .collect()
}

/// Antisymmetric states of n electrons in 2j + 1 = `size` orbitals by projection.
fn one_j(size: u32, electrons: u32) -> Vec<u128> {
    let particles = electrons.min(size.saturating_sub(electrons));
    gaussian_binomials(size, particles)
        .pop()
        .unwrap_or_default()
}

/// Sum of two symmetric counts whose middles coincide.
fn added(a: Vec<u128>, b: Vec<u128>) -> Vec<u128> {
    let (mut long, short) = if a.len() >= b.len() { (a, b) } else { (b, a) };
    let margin = (long.len() - short.len()) / 2;
    for (target, value) in long.iter_mut().skip(margin).zip(short) {
        *target = target.saturating_add(value);
    }
    long
}

/// Levels of a symmetric count by projection.
fn levels_from(weights: &[u128]) -> Vec<(TwiceJ, u128)> {
    let highest = i32::try_from(weights.len().saturating_sub(1)).unwrap_or(i32::MAX);
    let mut levels: Vec<(TwiceJ, u128)> = Vec::new();
    let mut above = 0;
    // Falling M from the highest; index i of the count has 2M = 2i − (length − 1).
    for (i, &count) in weights.iter().rev().enumerate() {
        let two_j = highest - 2 * i32::try_from(i).unwrap_or(i32::MAX / 2);
        if two_j < 0 {
            break;
        }
        if count > above {
            levels.push((TwiceJ::from_doubled(two_j), count - above));
        }
        above = count;
    }
    levels.reverse();
    levels
}
