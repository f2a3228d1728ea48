//! How many states have given projections: the generating functions behind all counting.

use crate::configuration::Subshell;
use crate::problem::Problem;

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

/// Antisymmetric states of 0 … `most` particles in `size` orbitals with equally spaced projections,
/// counted by total projection: Gaussian binomial coefficients [size, a]_q, the coefficient of qⁱ
/// belonging to M = i − a(size − a)/2.
///
/// By the q-Pascal rule [m, a] = [m−1, a] + q^{m−a} [m−1, a−1] (Andrews, *The Theory of
/// Partitions*, 1976, eq. 3.3.4 in the form for the larger subset element).
pub fn gaussian_binomials(size: u32, most: u32) -> Vec<Vec<u128>> {
    let most = most.min(size);
    let mut rows: Vec<Vec<u128>> = vec![vec![1]];
    for m in 1..=size {
        let previous = std::mem::take(&mut rows);
        for a in 0..=m.min(most) {
            let degree = usize::try_from(a.saturating_mul(m - a)).unwrap_or(usize::MAX);
            let mut row = vec![0_u128; degree.saturating_add(1)];
            if let Some(kept) = usize::try_from(a).ok().and_then(|a| previous.get(a)) {
                add_shifted(&mut row, kept, 0);
            }
            if let Some(joined) = a
                .checked_sub(1)
                .and_then(|b| previous.get(usize::try_from(b).ok()?))
            {
                add_shifted(
                    &mut row,
                    joined,
                    usize::try_from(m - a).unwrap_or(usize::MAX),
                );
            }
            rows.push(row);
        }
    }
    rows
}

fn add_shifted(into: &mut [u128], from: &[u128], shift: usize) {
    for (target, value) in into.iter_mut().skip(shift).zip(from) {
        *target = target.saturating_add(*value);
    }
}

/// The product of two counts by projection: the projections add.
pub fn convolve(a: &[u128], b: &[u128]) -> Vec<u128> {
    let mut out = vec![0_u128; (a.len() + b.len()).saturating_sub(1)];
    for (i, &x) in a.iter().enumerate() {
        if x == 0 {
            continue;
        }
        for (target, &y) in out.iter_mut().skip(i).zip(b) {
            *target = target.saturating_add(x.saturating_mul(y));
        }
    }
    out
}

/// Numbers of states by M_L and M_S: row r belongs to M_S = r − S_max, column c to M_L = c − L_max.
#[derive(Clone, Debug)]
pub struct Weights {
    rows: Vec<Vec<u128>>,
}

impl Weights {
    /// Nothing but closed shells: one state with M_L = M_S = 0.
    pub fn closed() -> Self {
        Weights {
            rows: vec![vec![1]],
        }
    }

    /// One subshell. Antisymmetric states of spin up and of spin down are chosen independently;
    /// a shell more than half full is counted by its holes, which have the same projections.
    pub fn of_subshell(shell: Subshell) -> Self {
        let capacity = shell.orbital().capacity();
        let particles = shell
            .electrons()
            .min(capacity.saturating_sub(shell.electrons()));
        let orbitals = capacity / 2;
        let one_spin = gaussian_binomials(orbitals, particles);
        let rows: Vec<Vec<u128>> = one_spin
            .iter()
            .rev()
            .zip(one_spin.iter())
            .map(|(down, up)| convolve(down, up))
            .collect();
        let width = rows.iter().map(Vec::len).max().unwrap_or(1);
        Weights {
            rows: rows.into_iter().map(|row| centred(row, width)).collect(),
        }
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
                .saturating_add(total.cells().saturating_mul(cells_of(shell)));
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
        let width = (self.width() + other.width()).saturating_sub(1);
        let height = (self.rows.len() + other.rows.len()).saturating_sub(1);
        let mut rows = vec![vec![0_u128; width]; height];
        for (i, a) in self.rows.iter().enumerate() {
            for (row, b) in rows.iter_mut().skip(i).zip(&other.rows) {
                for (k, &x) in a.iter().enumerate() {
                    if x == 0 {
                        continue;
                    }
                    for (target, &y) in row.iter_mut().skip(k).zip(b) {
                        *target = target.saturating_add(x.saturating_mul(y));
                    }
                }
            }
        }
        Weights { rows }
    }

    /// 2 S_max.
    pub fn two_s_max(&self) -> u32 {
        u32::try_from(self.rows.len().saturating_sub(1)).unwrap_or(u32::MAX)
    }

    /// L_max.
    pub fn l_max(&self) -> u32 {
        u32::try_from(self.width().saturating_sub(1) / 2).unwrap_or(u32::MAX)
    }

    /// Number of states with M_S = two_s/2 and M_L = l, both not negative.
    pub fn count(&self, two_s: u32, l: u32) -> u128 {
        // Row r has 2M_S = 2r − (rows − 1).
        let row = (self.two_s_max().saturating_add(two_s)) / 2;
        let column = self.l_max().saturating_add(l);
        usize::try_from(row)
            .ok()
            .and_then(|r| self.rows.get(r))
            .and_then(|r| r.get(usize::try_from(column).ok()?))
            .copied()
            .unwrap_or(0)
    }

    /// The rows by rising M_S, each by rising M_L.
    pub fn rows(&self) -> &[Vec<u128>] {
        &self.rows
    }

    fn width(&self) -> usize {
        self.rows.first().map_or(1, Vec::len)
    }

    fn cells(&self) -> u128 {
        (self.rows.len() as u128).saturating_mul(self.width() as u128)
    }
}

/// A symmetric row in the middle of a wider one.
fn centred(row: Vec<u128>, width: usize) -> Vec<u128> {
    let margin = width.saturating_sub(row.len()) / 2;
    let mut out = vec![0; margin];
    out.extend(row);
    out.resize(width, 0);
    out
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
    fn gaussian_binomials_add_up_to_binomials() {
        for size in 1..=40 {
            for (a, row) in gaussian_binomials(size, size).iter().enumerate() {
                let total: u128 = row.iter().sum();
                assert_eq!(Some(total), binomial(size, u32::try_from(a).unwrap()));
                assert!(row.iter().eq(row.iter().rev()), "symmetric in M");
            }
        }
    }

    #[test]
    fn every_row_of_a_shell_has_as_many_columns() {
        for l in 0..=7 {
            for n in 1..4 * u32::from(l) + 2 {
                let shell = Subshell::new(Orbital::new(9, l).unwrap(), n).unwrap();
                let weights = Weights::of_subshell(shell);
                assert!(weights.rows.iter().all(|r| r.len() == weights.width()));
                assert_eq!(weights.cells(), cells_of(shell), "{shell}");
                let total: u128 = weights.rows.iter().flatten().sum();
                assert_eq!(total, states(&[shell]).unwrap());
            }
        }
    }
}
