//! The M_L × M_S grid of a configuration, off which its terms are read.

use crate::configuration::Subshell;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use rungline_kernel::weights::Weights;

/// Numbers of states by M_L and M_S.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Grid {
    /// M_L of each row, falling.
    pub m_l: Vec<i32>,
    /// M_S of each column, falling.
    pub m_s: Vec<TwiceJ>,
    /// Rows by M_L, columns by M_S.
    pub counts: Vec<Vec<u128>>,
}

/// The grid of the open shells together.
///
/// Errors: as [`super::ls::terms`].
pub fn grid(subshells: &[Subshell]) -> Result<Grid, Problem> {
    let weights = Weights::of(subshells)?;
    let l_max = i32::try_from(weights.l_max()).unwrap_or(i32::MAX);
    let two_s_max = i32::try_from(weights.two_s_max()).unwrap_or(i32::MAX);
    let by_falling_m_s: Vec<&[u128]> = weights.rows().rev().collect();
    let counts = (0..by_falling_m_s.first().map_or(0, |row| row.len()))
        .rev()
        .map(|c| {
            by_falling_m_s
                .iter()
                .map(|row| row.get(c).copied().unwrap_or(0))
                .collect()
        })
        .collect();
    Ok(Grid {
        m_l: (-l_max..=l_max).rev().collect(),
        m_s: (-two_s_max..=two_s_max)
            .rev()
            .step_by(2)
            .map(TwiceJ::from_doubled)
            .collect(),
        counts,
    })
}
