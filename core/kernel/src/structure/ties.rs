//! Eigenvectors whose energies are equal, chosen by a rule and not by rounding.

/// Energies that differ by less than this share of the largest are equal.
pub const SAME: f64 = 1e-12;

/// How clearly one component must exceed another to be called larger.
const LEAD: f64 = 1e-9;

/// Below this a part of a component is rounding.
const ZERO: f64 = 1e-13;

/// Turns the vectors of equal energies so that each is as pure as can be, and gives each its sign:
/// the largest component is positive, the first of those that are equal.
///
/// Among equal energies the component that reaches farthest into their span gets the vector next to
/// it, then the next of what is left; the vectors then stand in the order of those components.
pub fn untie(energies: &[f64], vectors: &mut [Vec<f64>]) {
    let scale = energies
        .iter()
        .fold(0.0_f64, |most, energy| most.max(energy.abs()));
    let mut from = 0;
    while from < energies.len() {
        let run = energies
            .windows(2)
            .skip(from)
            .take_while(|pair| matches!(pair, [a, b] if b - a <= SAME * scale))
            .count()
            + 1;
        if run > 1
            && let Some(tied) = vectors.get_mut(from..from + run)
        {
            purify(tied);
        }
        from += run;
    }
    for vector in vectors {
        let place = largest(vector);
        if vector.get(place).is_some_and(|&component| component < 0.0) {
            for component in vector.iter_mut() {
                *component = -*component;
            }
        }
    }
}

/// The place of the largest component, the first of those that are equal.
pub fn largest(vector: &[f64]) -> usize {
    let mut best = (0, 0.0);
    for (place, component) in vector.iter().enumerate() {
        if component.abs() > best.1 + LEAD {
            best = (place, component.abs());
        }
    }
    best.0
}

fn purify(tied: &mut [Vec<f64>]) {
    let size = tied.first().map_or(0, Vec::len);
    let mut chosen: Vec<(usize, Vec<f64>)> = Vec::with_capacity(tied.len());
    for _ in 0..tied.len() {
        // How much of each component the span holds beyond what is chosen.
        let left: Vec<f64> = (0..size)
            .map(|place| {
                let square = |vector: &Vec<f64>| vector.get(place).map_or(0.0, |c| c * c);
                let whole: f64 = tied.iter().map(square).sum();
                whole - chosen.iter().map(|(_, vector)| square(vector)).sum::<f64>()
            })
            .collect();
        let pivot = largest(&left);
        let mut vector = vec![0.0; size];
        for old in tied.iter() {
            let share = old.get(pivot).copied().unwrap_or(0.0);
            for (sum, component) in vector.iter_mut().zip(old) {
                *sum += share * component;
            }
        }
        for _ in 0..2 {
            for (_, earlier) in &chosen {
                let overlap: f64 = earlier.iter().zip(&vector).map(|(a, b)| a * b).sum();
                for (component, other) in vector.iter_mut().zip(earlier) {
                    *component -= overlap * other;
                }
            }
        }
        let length = vector.iter().map(|c| c * c).sum::<f64>().sqrt();
        if length < LEAD {
            return;
        }
        for component in &mut vector {
            *component /= length;
            if component.abs() < ZERO {
                *component = 0.0;
            }
        }
        chosen.push((pivot, vector));
    }
    crate::numerics::order::sort_by_key(&mut chosen, |&(pivot, _)| pivot);
    for (old, (_, new)) in tied.iter_mut().zip(chosen) {
        *old = new;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn equal_energies_give_pure_vectors() {
        let root = 0.5_f64.sqrt();
        let mut vectors = vec![
            vec![root, -root, 0.0],
            vec![-root, -root, 0.0],
            vec![0.0, 0.0, -1.0],
        ];
        untie(&[1.0, 1.0, 2.0], &mut vectors);
        let expected = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];
        for (vector, expected) in vectors.iter().zip(expected) {
            for (component, value) in vector.iter().zip(expected) {
                assert!((component - value).abs() < 1e-15);
            }
        }
    }

    #[test]
    fn different_energies_keep_their_vectors() {
        let mut vectors = vec![vec![-0.6, 0.8], vec![-0.8, -0.6]];
        untie(&[1.0, 2.0], &mut vectors);
        assert_eq!(vectors, [vec![-0.6, 0.8], vec![0.8, 0.6]]);
        untie(&[], &mut []);
    }
}
