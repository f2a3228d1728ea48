//! Counts of states by one projection: generating functions and their products.

/// Antisymmetric states of 0 … `most` particles in `size` orbitals with equally spaced projections,
/// counted by total projection: Gaussian binomial coefficients [size, a]_q, the coefficient of qⁱ
/// belonging to M = i − a(size − a)/2.
///
/// By the q-Pascal rule [m, a] = [m−1, a] + q^{m−a} [m−1, a−1] (Andrews, *The Theory of
/// Partitions*, 1976, eq. 3.3.4 in the form for the larger subset element), one orbital after
/// another in place.
pub fn gaussian_binomials(size: u32, most: u32) -> Vec<Vec<u128>> {
    let most = most.min(size);
    // [m, a] is never longer than its last version.
    let length = |a: u32| usize::try_from(u64::from(a) * u64::from(size - a)).unwrap_or(0) + 1;
    let mut rows: Vec<Vec<u128>> = (0..=most).map(|a| vec![0; length(a)]).collect();
    if let Some(one) = rows.first_mut().and_then(|row| row.first_mut()) {
        *one = 1;
    }
    for m in 1..=size {
        for a in (1..=m.min(most)).rev() {
            let (before, from) = rows.split_at_mut(a as usize);
            if let (Some(fewer), Some(row)) = (before.last(), from.first_mut()) {
                for (target, value) in row.iter_mut().skip((m - a) as usize).zip(fewer) {
                    *target = target.saturating_add(*value);
                }
            }
        }
    }
    rows
}

/// The product of two counts by projection: the projections add.
pub fn convolve(a: &[u128], b: &[u128]) -> Vec<u128> {
    let mut out = vec![0_u128; (a.len() + b.len()).saturating_sub(1)];
    convolve_rows(&mut out, (a, a.len()), (b, b.len()));
    out
}

/// The product of two tables of counts, each with the length of its rows, added to a table of zeros
/// as wide as the product's rows: both projections add.
pub(crate) fn convolve_rows(out: &mut [u128], a: (&[u128], usize), b: (&[u128], usize)) {
    let (a, b) = if a.0.len() > b.0.len() {
        (b, a)
    } else {
        (a, b)
    };
    let width = (a.1 + b.1).saturating_sub(1).max(1);
    let (a_states, b_states) = (total(a.0), total(b.0));
    // No count of a product passes the product of the sums; narrow numbers are faster, in a browser
    // above all.
    if a_states.saturating_mul(b_states) <= u128::from(u32::MAX) {
        let mut sums = vec![0_u32; out.len()];
        let (left, right) = (narrow(a.0), narrow(b.0));
        add_rows(&mut sums, width, (&left, a.1), (&right, b.1), |x, y| x * y);
        widen(out, &sums);
    } else if a_states.max(b_states) <= u128::from(u32::MAX) {
        let mut sums = vec![0_u64; out.len()];
        let (left, right) = (narrow(a.0), narrow(b.0));
        add_rows(&mut sums, width, (&left, a.1), (&right, b.1), |x, y| {
            u64::from(x) * u64::from(y)
        });
        widen(out, &sums);
    } else {
        add_rows(out, width, a, b, |x: u128, y: u128| x.saturating_mul(y));
    }
}

fn total(counts: &[u128]) -> u128 {
    let add = |sum: u128, &count: &u128| sum.saturating_add(count);
    counts.iter().fold(0, add)
}

fn narrow(counts: &[u128]) -> Vec<u32> {
    counts.iter().map(|&count| count as u32).collect()
}

fn widen<T: Copy + Into<u128>>(out: &mut [u128], sums: &[T]) {
    for (target, &sum) in out.iter_mut().zip(sums) {
        *target = sum.into();
    }
}

/// Adds the products. The rows of b are spread to those of the product, so that one count of a
/// meets all of b in a single long run.
fn add_rows<F: Copy + Default + PartialEq, T: Copy + std::ops::Add<Output = T>>(
    out: &mut [T],
    width: usize,
    (a, a_width): (&[F], usize),
    (b, b_width): (&[F], usize),
    product: impl Fn(F, F) -> T,
) {
    let mut spread = Vec::with_capacity(out.len());
    for row in b.chunks_exact(b_width.max(1)) {
        spread.resize(spread.len().next_multiple_of(width), F::default());
        spread.extend_from_slice(row);
    }
    for (i, row) in a.chunks_exact(a_width.max(1)).enumerate() {
        for (k, &x) in row.iter().enumerate().filter(|&(_, x)| *x != F::default()) {
            let targets = out.get_mut(i * width + k..).unwrap_or_default();
            for (target, &y) in targets.iter_mut().zip(&spread) {
                *target = *target + product(x, y);
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn binomial(n: u32, k: u32) -> u128 {
        (0..k).fold(1, |value, i| value * u128::from(n - i) / u128::from(i + 1))
    }

    #[test]
    fn gaussian_binomials_add_up_to_binomials() {
        for size in 1..=40 {
            for (a, row) in (0..).zip(&gaussian_binomials(size, size)) {
                assert_eq!(row.iter().sum::<u128>(), binomial(size, a));
                assert!(row.iter().eq(row.iter().rev()), "symmetric in M");
            }
        }
    }

    #[test]
    fn wide_and_narrow_products_agree() {
        let table: Vec<u128> = (0..35).map(|i| (i * i * 7 + 3) % 101).collect();
        for scale in [1_u128 << 16, 1 << 40] {
            let wide: Vec<u128> = table.iter().map(|count| count * scale).collect();
            for (a_width, b_width) in [(7, 5), (5, 7), (35, 1), (1, 35), (35, 35)] {
                let length = (35 / a_width + 35 / b_width - 1) * (a_width + b_width - 1);
                let (mut narrow, mut full) = (vec![0; length], vec![0; length]);
                convolve_rows(&mut narrow, (&table, a_width), (&table, b_width));
                convolve_rows(&mut full, (&wide, a_width), (&table, b_width));
                assert!(narrow.iter().map(|count| count * scale).eq(full));
                assert_eq!(
                    narrow.iter().sum::<u128>(),
                    table.iter().sum::<u128>() * table.iter().sum::<u128>()
                );
            }
        }
    }
}
