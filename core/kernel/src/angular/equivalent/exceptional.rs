//! G₂ between R(7) and R(3): the labels U of f electrons.
//!
//! The weights of an f electron on G₂'s two-dimensional torus are 0 and the six short roots, with
//! m = 2x + y for the weight (x, y): m = 3, 2, 1 are (1,1), (1,0), (0,1). The representation
//! U = (u₁ u₂) has the highest weight u₁(1,1) + u₂(1,0).
//!
//! Source: Racah, Phys. Rev. 76, 1352 (1949); Weyl's character formula.

use crate::numerics::order::sort_by_key;
use std::sync::LazyLock;

/// No weight of up to seven f electrons passes this in either direction.
const REACH: i32 = 4;
const WIDTH: i32 = 2 * REACH + 1;

/// Half the sum of the positive roots (1,1) (1,0) (0,1) (2,1) (1,2) (1,−1).
const HALF_SUM: (i32, i32) = (3, 2);

/// m of the positive roots: what the division by Weyl's denominator takes out, one after another.
const ROOT_HEIGHTS: [usize; 6] = [1, 1, 2, 3, 4, 5];

/// (x, y) and how often it occurs.
type Weight = (i32, i32, i64);

/// How often each weight occurs.
#[derive(Clone)]
struct Character {
    counts: Vec<i64>,
}

impl Character {
    fn zero() -> Self {
        Character {
            counts: vec![0; (WIDTH * WIDTH) as usize],
        }
    }

    fn place(x: i32, y: i32) -> Option<usize> {
        let inside = x.abs() <= REACH && y.abs() <= REACH;
        if inside {
            usize::try_from((x + REACH) * WIDTH + y + REACH).ok()
        } else {
            None
        }
    }

    fn at(&self, x: i32, y: i32) -> i64 {
        Self::place(x, y)
            .and_then(|place| self.counts.get(place))
            .copied()
            .unwrap_or(0)
    }

    fn add(&mut self, x: i32, y: i32, count: i64) {
        if let Some(entry) = Self::place(x, y).and_then(|place| self.counts.get_mut(place)) {
            *entry += count;
        }
    }

    /// The weights that occur.
    fn weights(&self) -> impl Iterator<Item = Weight> + '_ {
        (-REACH..=REACH)
            .flat_map(|x| (-REACH..=REACH).map(move |y| (x, y)))
            .zip(&self.counts)
            .filter(|&(_, &count)| count != 0)
            .map(|((x, y), &count)| (x, y, count))
    }

    fn add_product(&mut self, left: &[Weight], right: &[Weight], sign: i64) {
        for &(x1, y1, first) in left {
            for &(x2, y2, second) in right {
                self.add(x1 + x2, y1 + y2, sign * first * second);
            }
        }
    }
}

/// A representation U and how often L = 0, 1, 2 … occurs in it, as often as it occurs in a W.
pub(super) type Part = ([i32; 2], Vec<u64>);

/// The representations U in W of seniority v and spin S of f electrons, in the order of their
/// Casimir eigenvalues.
pub(super) fn branching(seniority: u32, two_s: i32) -> &'static [Part] {
    BRANCHING
        .iter()
        .find(|(label, _)| *label == (seniority, two_s))
        .map_or(&[], |(_, parts)| parts)
}

/// v and 2S of a W with its parts.
type Branching = ((u32, i32), Vec<Part>);

/// The branching of every seniority and spin.
static BRANCHING: LazyLock<Vec<Branching>> = LazyLock::new(|| {
    (0..=7_u32)
        .flat_map(|seniority| {
            let spins = (0..=seniority).rev().step_by(2);
            spins.map(move |two_s| (seniority, i32::try_from(two_s).unwrap_or(0)))
        })
        .map(|(seniority, two_s)| ((seniority, two_s), parts(seniority, two_s)))
        .collect()
});

fn parts(seniority: u32, two_s: i32) -> Vec<Part> {
    let character = rotation_character(seniority, two_s);
    let reflections = weyl_group(HALF_SUM);
    let mut found = Vec::new();
    for (u, contents) in REPRESENTATIONS.iter() {
        let [u1, u2] = *u;
        // Weyl: the coefficient at λ + ρ of the character times the alternating sum over wρ.
        let times: i64 = reflections
            .iter()
            .map(|&(sign, (x, y))| {
                sign * character.at(u1 + u2 + HALF_SUM.0 - x, u1 + HALF_SUM.1 - y)
            })
            .sum();
        if times > 0 {
            let by_l = contents.iter().map(|count| count * times.unsigned_abs());
            found.push((*u, by_l.collect()));
        }
    }
    found
}

/// Every U that f electrons can have, in the order of the Casimir eigenvalues, with its L.
static REPRESENTATIONS: LazyLock<Vec<Part>> = LazyLock::new(|| {
    let mut labels: Vec<[i32; 2]> = (0..=REACH)
        .flat_map(|u1| (0..=u1).map(move |u2| [u1, u2]))
        .filter(|[u1, u2]| u1 + u2 <= REACH)
        .collect();
    sort_by_key(&mut labels, |&u| twelve_casimirs(u));
    labels.into_iter().map(|u| (u, contents(u))).collect()
});

/// (u₁² + u₁u₂ + u₂² + 5u₁ + 4u₂)/12.
pub(super) fn casimir(u: [i32; 2]) -> f64 {
    f64::from(twelve_casimirs(u)) / 12.0
}

fn twelve_casimirs([u1, u2]: [i32; 2]) -> i32 {
    u1 * u1 + u1 * u2 + u2 * u2 + 5 * u1 + 4 * u2
}

/// The character of W: orbital states of f^v with spin S that f^(v−2) does not have.
///
/// Those of f^N with spin S have the Young diagram of columns a = N/2 + S and b = N/2 − S, whose
/// character is e_a e_b − e_(a+1) e_(b−1) in elementary symmetric functions (Jacobi–Trudi).
fn rotation_character(seniority: u32, two_s: i32) -> Character {
    let elementary = &*ELEMENTARY;
    let at = |k: i32| usize::try_from(k).ok().and_then(|k| elementary.get(k));
    let mut character = Character::zero();
    let mut add = |a: i32, b: i32, sign: i64| {
        if let (Some(left), Some(right)) = (at(a), at(b)) {
            character.add_product(left, right, sign);
        }
    };
    let seniority = i32::try_from(seniority).unwrap_or(0);
    let (a, b) = ((seniority + two_s) / 2, (seniority - two_s) / 2);
    add(a, b, 1);
    add(a + 1, b - 1, -1);
    add(a - 1, b - 1, -1);
    add(a, b - 2, 1);
    character
}

/// e₀ … e₇: k electrons of one spin in the seven f orbitals.
static ELEMENTARY: LazyLock<Vec<Vec<Weight>>> = LazyLock::new(elementary_characters);

fn elementary_characters() -> Vec<Vec<Weight>> {
    let mut found = vec![Character::zero(); 8];
    if let Some(empty) = found.first_mut() {
        empty.add(0, 0, 1);
    }
    for (x, y) in [(0, 0), (1, 1), (1, 0), (0, 1), (-1, -1), (-1, 0), (0, -1)] {
        for k in (0..7).rev() {
            if let Some((fewer, more)) = found.split_at_mut_checked(k + 1)
                && let (Some(fewer), Some(more)) = (fewer.last(), more.first_mut())
            {
                for (x0, y0, count) in fewer.weights() {
                    more.add(x0 + x, y0 + y, count);
                }
            }
        }
    }
    found
        .iter()
        .map(|character| character.weights().collect())
        .collect()
}

/// The images of a weight under the Weyl group of G₂, each with its sign.
///
/// The reflections in the simple roots (0,1) and (1,−1) are (x, y) → (x, x−y) and (y, x); their
/// alternating products are the twelve elements.
fn weyl_group(weight: (i32, i32)) -> [(i64, (i32, i32)); 12] {
    let short = |(x, y): (i32, i32)| (x, x - y);
    let long = |(x, y): (i32, i32)| (y, x);
    let (mut sign, mut left, mut right) = (1, weight, weight);
    let mut images = [(1, weight); 12];
    // Two walks from the weight, one reflection after the other in turn, meet in the longest element.
    for (step, pair) in images.split_at_mut(1).1.chunks_mut(2).enumerate() {
        sign = -sign;
        (left, right) = if step % 2 == 0 {
            (short(left), long(right))
        } else {
            (long(left), short(right))
        };
        for (image, walk) in pair.iter_mut().zip([left, right]) {
            *image = (sign, walk);
        }
    }
    images
}

/// How often L = 0, 1, 2 … occurs in U: Weyl's formula along m = 2x + y, then differences.
fn contents(u: [i32; 2]) -> Vec<u64> {
    let [u1, u2] = u;
    let height = |(x, y): (i32, i32)| 2 * x + y;
    let top = (u1 + u2 + HALF_SUM.0, u1 + HALF_SUM.1);
    let largest = usize::try_from(height(top) - height(HALF_SUM)).unwrap_or(0);
    // by_depth[i] belongs to m = largest − i.
    let mut by_depth = vec![0_i64; largest + 1];
    for (sign, image) in weyl_group(top) {
        let depth = usize::try_from(height(top) - height(image)).ok();
        if let Some(entry) = depth.and_then(|depth| by_depth.get_mut(depth)) {
            *entry += sign;
        }
    }
    for root in ROOT_HEIGHTS {
        // Division by 1 − q^root.
        for place in root..by_depth.len() {
            let earlier = by_depth.get(place - root).copied().unwrap_or(0);
            if let Some(entry) = by_depth.get_mut(place) {
                *entry += earlier;
            }
        }
    }
    let above = std::iter::once(0).chain(by_depth.iter().copied());
    let mut by_l: Vec<u64> = by_depth
        .iter()
        .zip(above)
        .map(|(&here, above)| u64::try_from(here - above).unwrap_or(0))
        .collect();
    by_l.reverse();
    by_l
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Racah (1949), table I, from memory: (20) is D G I, (21) is D F G H K L, (11) is P H.
    #[test]
    fn small_representations_hold_the_published_l() {
        let letters = |u: [i32; 2]| -> Vec<usize> {
            contents(u)
                .iter()
                .enumerate()
                .flat_map(|(l, &count)| vec![l; count as usize])
                .collect()
        };
        assert_eq!(letters([0, 0]), [0]);
        assert_eq!(letters([1, 0]), [3]);
        assert_eq!(letters([1, 1]), [1, 5]);
        assert_eq!(letters([2, 0]), [2, 4, 6]);
        assert_eq!(letters([2, 1]), [2, 3, 4, 5, 7, 8]);
    }

    /// Dimensions of G₂ representations: 1, 7, 14, 27, 64, 77, 77, 189, 182 (from memory, standard).
    #[test]
    fn dimensions_are_those_of_g2() {
        let dimension = |u: [i32; 2]| -> u64 {
            (0..)
                .zip(contents(u))
                .map(|(l, count)| (2 * l + 1) * count)
                .sum()
        };
        let labels = [
            [0, 0],
            [1, 0],
            [1, 1],
            [2, 0],
            [2, 1],
            [3, 0],
            [2, 2],
            [3, 1],
            [4, 0],
        ];
        assert_eq!(labels.map(dimension), [1, 7, 14, 27, 64, 77, 77, 189, 182]);
    }

    #[test]
    fn the_weyl_group_has_twelve_different_elements() {
        let mut images = weyl_group(HALF_SUM).to_vec();
        images.sort_unstable();
        images.dedup_by_key(|image| image.1);
        assert_eq!(images.len(), 12);
        assert_eq!(images.iter().map(|image| image.0).sum::<i64>(), 0);
    }

    /// Racah (1949), table II, from memory: (210) of f³ is (11) (20) (21), (222) holds (40).
    #[test]
    fn rotation_labels_branch_as_published() {
        let labels = |seniority, two_s| -> Vec<[i32; 2]> {
            branching(seniority, two_s)
                .iter()
                .map(|(u, _)| *u)
                .collect()
        };
        assert_eq!(labels(3, 1), [[1, 1], [2, 0], [2, 1]]);
        assert_eq!(labels(3, 3), [[0, 0], [1, 0], [2, 0]]);
        assert_eq!(labels(4, 0), [[2, 0], [2, 1], [2, 2]]);
        assert_eq!(labels(7, 1), [[0, 0], [1, 0], [2, 0], [3, 0], [4, 0]]);
    }
}
