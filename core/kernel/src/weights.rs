//! How many states have given projections M_L and M_S, and the terms that follow from it.

use crate::configuration::Subshell;
use crate::problem::Problem;
use crate::projections::{convolve_rows, gaussian_binomials};

/// The most states a configuration may have for its terms to be counted: 2¹²⁰, so that no sum of
/// counts overflows 128 bits.
pub const MAX_STATES: u128 = 1 << 120;

/// The most multiplications one count may take, about a second of work in a browser.
pub const MAX_STEPS: u128 = 100_000_000;

/// Binomial coefficient, or nothing above 2¹²⁰.
fn binomial(n: u32, k: u32) -> Option<u128> {
    let k = k.min(n.checked_sub(k)?);
    let mut value: u128 = 1;
    for i in 0..k {
        value = value.checked_mul(u128::from(n - i))? / u128::from(i + 1);
        if value > MAX_STATES {
            return None;
        }
    }
    Some(value)
}

/// The number of states Π C(4ℓ + 2, N).
///
/// Errors: `too-many-states` above 2¹²⁰.
pub fn states(subshells: &[Subshell]) -> Result<u128, Problem> {
    subshells
        .iter()
        .try_fold(1_u128, |product, s| {
            product
                .checked_mul(binomial(s.orbital().capacity(), s.electrons())?)
                .filter(|&p| p <= MAX_STATES)
        })
        .ok_or_else(|| {
            Problem::new(
                "too-many-states",
                format!(
                    "{} has more than 2^120 states, too many to count its terms.",
                    text_of(subshells)
                ),
                0,
                0,
            )
            .bound("a configuration of at most 2^120 states (about 1.3e36)")
        })
}

/// The subshells as text, for messages.
pub fn text_of(subshells: &[Subshell]) -> String {
    let names: Vec<String> = subshells.iter().take(12).map(ToString::to_string).collect();
    let rest = if subshells.len() > 12 { " …" } else { "" };
    format!("{}{rest}", names.join(" "))
}

/// Numbers of states by M_L and M_S: row r belongs to M_S = r − S_max, column c to M_L = c − L_max.
#[derive(Clone, Debug)]
pub struct Weights {
    /// One row after another.
    cells: Vec<u128>,
    /// Columns, odd in number.
    width: usize,
}

impl Weights {
    /// Nothing but closed shells: one state with M_L = M_S = 0.
    pub fn closed() -> Self {
        Weights {
            cells: vec![1],
            width: 1,
        }
    }

    /// One subshell. Antisymmetric states of spin up and of spin down are chosen independently;
    /// a shell more than half full is counted by its holes, which have the same projections.
    pub fn of_subshell(shell: Subshell) -> Self {
        let (particles, columns) = particles_and_columns(shell);
        let one_spin = gaussian_binomials(
            shell.orbital().capacity() / 2,
            u32::try_from(particles).unwrap_or(u32::MAX),
        );
        let width = usize::try_from(columns).unwrap_or(1);
        let mut cells = vec![0; width.saturating_mul(one_spin.len())];
        for ((row, up), down) in cells
            .chunks_exact_mut(width)
            .zip(&one_spin)
            .zip(one_spin.iter().rev())
        {
            // A row of less spin is longer; all are centred on M_L = 0.
            let length = (up.len() + down.len()).saturating_sub(1);
            let margin = width.saturating_sub(length) / 2;
            if let Some(row) = row.get_mut(margin..margin + length) {
                convolve_rows(row, (up, up.len()), (down, down.len()));
            }
        }
        Weights { cells, width }
    }

    /// All open shells together.
    ///
    /// Errors: `too-many-states`; `counting-too-long` past [`MAX_STEPS`] multiplications.
    pub fn of(subshells: &[Subshell]) -> Result<Self, Problem> {
        states(subshells)?;
        let mut total = Weights::closed();
        let mut steps: u128 = 0;
        for &shell in subshells.iter().filter(|s| s.is_open()) {
            steps = steps
                .saturating_add(own_steps(shell))
                .saturating_add((total.cells.len() as u128).saturating_mul(cells_of(shell)));
            if steps > MAX_STEPS {
                return Err(Problem::new(
                    "counting-too-long",
                    format!(
                        "counting the terms of {} takes more than {MAX_STEPS} steps.",
                        text_of(subshells)
                    ),
                    0,
                    0,
                )
                .bound(format!("a count of at most {MAX_STEPS} multiplications")));
            }
            total = total.times(&Weights::of_subshell(shell));
        }
        Ok(total)
    }

    /// Both sets of electrons together: projections add, numbers of states multiply.
    pub fn times(&self, other: &Weights) -> Weights {
        let width = (self.width + other.width).saturating_sub(1);
        let height = (self.height() + other.height()).saturating_sub(1);
        let mut cells = vec![0_u128; width.saturating_mul(height)];
        convolve_rows(
            &mut cells,
            (&self.cells, self.width),
            (&other.cells, other.width),
        );
        Weights { cells, width }
    }

    /// 2 S_max.
    pub fn two_s_max(&self) -> u32 {
        u32::try_from(self.height().saturating_sub(1)).unwrap_or(u32::MAX)
    }

    /// L_max.
    pub fn l_max(&self) -> u32 {
        u32::try_from(self.width.saturating_sub(1) / 2).unwrap_or(u32::MAX)
    }

    /// The rows by rising M_S, each by rising M_L.
    pub fn rows(&self) -> impl DoubleEndedIterator<Item = &[u128]> {
        self.cells.chunks_exact(self.width.max(1))
    }

    /// The terms that these projections belong to, as 2S, L and how often: S falling, then L.
    ///
    /// times(S, L) = c(S, L) − c(S + 1, L) − c(S, L + 1) + c(S + 1, L + 1).
    pub fn terms(&self) -> Vec<(u32, u32, u128)> {
        let middle = self.width / 2;
        let none = vec![0_u128; self.width];
        let mut above: &[u128] = &none;
        let mut found = Vec::with_capacity(self.cells.len() / 4 + 1);
        let mut two_s = self.two_s_max();
        for row in self.rows().rev().take(self.height().div_ceil(2)) {
            // Counts of spin S exactly, with M_L and with M_L + 1.
            let mut higher = 0_u128;
            let columns = row.iter().zip(above).skip(middle).rev();
            for (l, (count, more)) in (0..=self.l_max()).rev().zip(columns) {
                let here = count.saturating_sub(*more);
                let times = here.saturating_sub(higher);
                higher = here;
                if times > 0 {
                    found.push((two_s, l, times));
                }
            }
            above = row;
            two_s = two_s.saturating_sub(2);
        }
        found
    }

    fn height(&self) -> usize {
        self.cells.len() / self.width.max(1)
    }
}

/// Particles or holes of a shell, and the M_L columns they reach.
fn particles_and_columns(shell: Subshell) -> (u128, u128) {
    let capacity = shell.orbital().capacity();
    let particles = shell
        .electrons()
        .min(capacity.saturating_sub(shell.electrons()));
    let orbitals = u128::from(capacity / 2);
    let up = u128::from(particles.div_ceil(2));
    let down = u128::from(particles / 2);
    let columns = up * orbitals.saturating_sub(up) + down * orbitals.saturating_sub(down) + 1;
    (u128::from(particles), columns)
}

/// Cells of the table of one shell.
fn cells_of(shell: Subshell) -> u128 {
    let (particles, columns) = particles_and_columns(shell);
    (particles + 1).saturating_mul(columns)
}

/// Multiplications to make the table of one shell: each row is a product of two counts that
/// together are as long as the row.
fn own_steps(shell: Subshell) -> u128 {
    let (particles, columns) = particles_and_columns(shell);
    (particles + 1).saturating_mul(columns.saturating_mul(columns) / 4)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::configuration::Orbital;

    #[test]
    fn a_shell_has_all_its_cells_and_states() {
        for l in 0..=7 {
            for n in 1..4 * u32::from(l) + 2 {
                let shell = Subshell::new(Orbital::new(9, l).unwrap(), n).unwrap();
                let weights = Weights::of_subshell(shell);
                assert_eq!(weights.cells.len() as u128, cells_of(shell), "{shell}");
                let total: u128 = weights.cells.iter().sum();
                assert_eq!(total, states(&[shell]).unwrap());
            }
        }
    }
}
