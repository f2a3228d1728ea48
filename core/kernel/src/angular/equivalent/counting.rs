//! How often each L occurs for a spin and a seniority.

/// The L of the states of ℓ^v with spin S and seniority v.
pub(super) struct Content {
    pub seniority: u32,
    pub two_s: i32,
    /// How often L = 0, 1, 2 … occurs.
    pub by_l: Vec<u64>,
}

/// C(4ℓ+2, N), saturating.
pub(super) fn states(l: u8, electrons: u32) -> u64 {
    let places = 4 * u128::from(l) + 2;
    let mut count = 1_u128;
    for step in 1..=u128::from(electrons) {
        count = count * (places + 1 - step.min(places)) / step;
        if count > u128::from(u64::MAX) {
            return u64::MAX;
        }
    }
    u64::try_from(count).unwrap_or(u64::MAX)
}

/// The contents of all seniorities v = N, N−2, … rising, each with its spins falling; for N ≤ 2ℓ+1.
///
/// A seniority's terms are those that ℓ^v has beyond ℓ^(v−2).
pub(super) fn contents(l: u8, electrons: u32) -> Vec<Content> {
    let rows: Vec<Vec<u64>> = one_spin(l, electrons);
    let mut found = Vec::new();
    // What ℓ^(v−2) has, by falling spin.
    let mut smaller: Vec<Vec<u64>> = Vec::new();
    for seniority in (electrons % 2..=electrons).step_by(2) {
        let mut all = Vec::new();
        // States with M_S = S + 1, of which there are none above the largest spin.
        let mut above = Vec::new();
        for (place, two_s) in (0..=seniority).rev().step_by(2).enumerate() {
            let here = weights(&rows, seniority, two_s);
            let mut by_l = terms(&here, &above);
            above = here;
            all.push(by_l.clone());
            // The highest M of the larger shell lies higher, so L counts from the same end.
            if let Some(fewer) = place.checked_sub(1).and_then(|place| smaller.get(place)) {
                for (count, less) in by_l.iter_mut().zip(fewer) {
                    *count = count.saturating_sub(*less);
                }
            }
            found.push(Content {
                seniority,
                two_s: i32::try_from(two_s).unwrap_or(0),
                by_l,
            });
        }
        smaller = all;
    }
    found
}

/// rows[k][i]: how many ways k electrons of one spin in 2ℓ+1 orbitals have Σ(m+ℓ) = i.
fn one_spin(l: u8, most: u32) -> Vec<Vec<u64>> {
    let orbitals = 2 * usize::from(l);
    let most = (most as usize).min(orbitals + 1);
    let mut rows = vec![vec![0_u64; orbitals * most + 1]; most + 1];
    if let Some(start) = rows.first_mut().and_then(|row| row.first_mut()) {
        *start = 1;
    }
    for raised in 0..=orbitals {
        for k in (0..most).rev() {
            if let Some((fewer, more)) = rows.split_at_mut_checked(k + 1)
                && let (Some(fewer), Some(more)) = (fewer.last(), more.first_mut())
            {
                for (to, from) in more.iter_mut().skip(raised).zip(fewer) {
                    *to += from;
                }
            }
        }
    }
    for (k, row) in rows.iter_mut().enumerate() {
        row.truncate(orbitals * k + 1);
    }
    rows
}

/// How often each L occurs with spin S, from the states with M_S = S and with M_S = S + 1, both by
/// M_L from one end to the other.
fn terms(here: &[u64], above: &[u64]) -> Vec<u64> {
    let middle = here.len() / 2;
    let more = above.iter().copied().chain(std::iter::repeat(0));
    let exactly = |(count, more): (&u64, u64)| count.saturating_sub(more);
    let mut by_l: Vec<u64> = here.iter().zip(more).skip(middle).map(exactly).collect();
    // The same for M_L.
    let mut higher = 0;
    for count in by_l.iter_mut().rev() {
        let with = *count;
        *count = with.saturating_sub(higher);
        higher = with;
    }
    by_l
}

/// States of ℓ^N with M_S by rising M_L, from −Nℓ to Nℓ.
fn weights(rows: &[Vec<u64>], electrons: u32, two_m: u32) -> Vec<u64> {
    let orbitals = rows.get(1).map_or(0, |row| row.len() - 1);
    let mut by_m = vec![0_u64; orbitals * electrons as usize + 1];
    if two_m > electrons {
        return by_m;
    }
    let up = ((electrons + two_m) / 2) as usize;
    let down = electrons as usize - up;
    if let (Some(ups), Some(downs)) = (rows.get(up), rows.get(down)) {
        for (first, &left) in ups.iter().enumerate() {
            if left != 0 {
                for (count, right) in by_m.iter_mut().skip(first).zip(downs) {
                    *count += left * right;
                }
            }
        }
    }
    by_m
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn states_are_counted() {
        assert_eq!(states(3, 7), 3432);
        assert_eq!(states(0, 2), 1);
        assert_eq!(states(255, 511), u64::MAX);
    }

    #[test]
    fn seniorities_add_up_to_all_states() {
        for (l, electrons) in [(0, 1), (1, 3), (2, 5), (3, 7), (4, 4), (5, 3), (49, 2)] {
            let found: u64 = contents(l, electrons)
                .iter()
                .flat_map(|content| {
                    (0_u64..)
                        .zip(&content.by_l)
                        .map(move |(l, n)| (content.two_s, l, n))
                })
                .map(|(two_s, l, n)| (two_s as u64 + 1) * (2 * l + 1) * n)
                .sum();
            assert_eq!(found, states(l, electrons), "{l} {electrons}");
        }
    }
}
