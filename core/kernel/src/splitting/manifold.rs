//! Levels without field and nucleus, and how a field connects them.

use crate::angular::wigner_6j;
use crate::constants::{BOHR_MAGNETON_WAVENUMBER, ELECTRON_G, HARTREE_WAVENUMBER};
use crate::numerics::order::sort_by_key;
use crate::problem::Problem;
use crate::structure::{Amplitude, Basis, Levels, amplitudes, magnetic_elements};

/// The largest |g| of a level that is given.
const MOST_G: f64 = 1000.0;

/// The largest 2J.
pub(super) const MOST_TWO_J: i32 = 2000;

/// A level.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Level {
    /// 2J.
    pub two_j: i32,
    /// Without field and nucleus, cm⁻¹, on any scale that all levels share.
    pub energy: f64,
}

/// A reduced matrix element ⟨left‖T‖right⟩ between two levels, real and signed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Reduced {
    /// Place of the left level.
    pub left: usize,
    /// Place of the right level.
    pub right: usize,
    /// Its value.
    pub value: f64,
}

/// A level nℓj of one electron outside closed shells.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OneElectron {
    /// n.
    pub n: u8,
    /// ℓ.
    pub l: u8,
    /// 2j.
    pub two_j: i32,
    /// cm⁻¹.
    pub energy: f64,
}

/// Σ (r/a₀)² sin²θ = (2/3) Σ (r/a₀)² (1 − C²₀) over the electrons of open subshells.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Diamagnetic {
    /// ⟨a|Σ (r/a₀)²|b⟩ between levels of one J, a ≤ b: the matrix element itself.
    pub scalar: Vec<Reduced>,
    /// ⟨a‖Σ (r/a₀)² C²‖b⟩, a ≤ b.
    pub quadrupole: Vec<Reduced>,
}

/// Levels of one parity with all that a field does to them.
#[derive(Clone, Debug, PartialEq)]
pub struct Manifold {
    pub(super) levels: Vec<Level>,
    /// ⟨a‖L + g_s S‖b⟩, a ≤ b.
    pub(super) magnetic: Vec<Reduced>,
    pub(super) diamagnetic: Option<Diamagnetic>,
}

impl Manifold {
    /// A level alone: ⟨J‖L + g_s S‖J⟩ = g √[J(J+1)(2J+1)].
    ///
    /// # Errors
    /// `level-out-of-range` for J below 0 or above 1000; `g-out-of-range` above 1000 and for NaN, J = 0 aside;
    /// `energy-not-finite`.
    pub fn alone(two_j: i32, energy: f64, g: f64) -> Result<Manifold, Problem> {
        let level = Level { two_j, energy };
        check(&[level])?;
        if two_j > 0 && !(-MOST_G..=MOST_G).contains(&g) {
            let message = format!("g = {g} is out of range.");
            return Err(Problem::new("g-out-of-range", message, 0, 0)
                .bound(format!("|g| at most {MOST_G}")));
        }
        let magnetic = (two_j > 0).then(|| Reduced {
            left: 0,
            right: 0,
            value: g * momentum(two_j),
        });
        Ok(Manifold {
            levels: vec![level],
            magnetic: magnetic.into_iter().collect(),
            diamagnetic: None,
        })
    }

    /// Levels nℓj of one electron: L + g_s S connects those of one nℓ.
    ///
    /// ⟨½ℓj‖S‖½ℓj′⟩ = (−1)^(½+ℓ+j′+1) √[(2j+1)(2j′+1)] {½ j ℓ; j′ ½ 1} √(3/2) (Edmonds, eq. 7.1.7), and
    /// L + g_s S = J + (g_s − 1) S.
    ///
    /// # Errors
    /// `level-out-of-range` where j is not ℓ ± ½; `energy-not-finite`.
    pub fn one_electron(levels: &[OneElectron]) -> Result<Manifold, Problem> {
        let own: Vec<Level> = (levels.iter())
            .map(|level| Level {
                two_j: level.two_j,
                energy: level.energy,
            })
            .collect();
        check(&own)?;
        let mut magnetic = Vec::new();
        for (left, a) in levels.iter().enumerate() {
            let two_l = 2 * i32::from(a.l);
            if (a.two_j - two_l).abs() != 1 {
                return Err(out_of_range(a.two_j));
            }
            for (right, b) in levels.iter().enumerate().skip(left) {
                if (a.n, a.l) != (b.n, b.l) || (left != right && a.two_j == b.two_j) {
                    continue;
                }
                let value = doublet(two_l, a.two_j, b.two_j);
                magnetic.push(Reduced { left, right, value });
            }
        }
        Ok(Manifold {
            levels: own,
            magnetic,
            diamagnetic: None,
        })
    }

    /// Levels with their eigenvectors; `energies` stand for the computed ones, by level.
    ///
    /// # Errors
    /// `energies-differ` where there is not one for each level; `energy-not-finite`.
    pub fn of_levels(
        basis: &Basis,
        levels: &Levels,
        energies: &[f64],
    ) -> Result<Manifold, Problem> {
        if energies.len() != levels.levels.len() {
            let message = format!(
                "{} energies stand for {} levels.",
                energies.len(),
                levels.levels.len()
            );
            return Err(Problem::new("energies-differ", message, 0, 0));
        }
        let own: Vec<Level> = (levels.levels.iter().zip(energies))
            .map(|(level, &energy)| Level {
                two_j: level.two_j,
                energy,
            })
            .collect();
        check(&own)?;
        let electron = ELECTRON_G.value;
        let found = amplitudes(levels, levels, 1, false, |rows, columns| {
            magnetic_elements(basis, electron, rows, columns)
        });
        Ok(Manifold {
            levels: own,
            magnetic: half(&found),
            diamagnetic: None,
        })
    }

    /// The same with a diamagnetic operator.
    #[must_use]
    pub fn with(mut self, diamagnetic: Diamagnetic) -> Manifold {
        self.diamagnetic = Some(diamagnetic);
        self
    }

    /// Only these levels, in this order; places that are none, or stand a second time, are left out.
    #[must_use]
    pub fn select(&self, places: &[usize]) -> Manifold {
        let chosen = Chosen::of(places, self.levels.len());
        let levels = chosen.places.iter().filter_map(|&p| self.levels.get(p));
        let diamagnetic = self.diamagnetic.as_ref().map(|known| Diamagnetic {
            scalar: chosen.within(&known.scalar, &self.levels, 0),
            quadrupole: chosen.within(&known.quadrupole, &self.levels, 4),
        });
        Manifold {
            levels: levels.copied().collect(),
            magnetic: chosen.within(&self.magnetic, &self.levels, 2),
            diamagnetic,
        }
    }

    /// The levels.
    pub fn levels(&self) -> &[Level] {
        &self.levels
    }

    /// ⟨a‖L + g_s S‖b⟩ with a ≤ b, those that do not vanish.
    pub fn magnetic(&self) -> &[Reduced] {
        &self.magnetic
    }

    /// g_J = ⟨J‖L + g_s S‖J⟩ / √[J(J+1)(2J+1)]; nothing for J = 0.
    pub fn g(&self, level: usize) -> Option<f64> {
        let two_j = self.levels.get(level)?.two_j;
        let mut own = self.magnetic.iter();
        let found = own.find(|e| e.left == level && e.right == level);
        (two_j > 0).then(|| found.map_or(0.0, |e| e.value) / momentum(two_j))
    }

    /// The largest mean shift of a level by the diamagnetic term, cm⁻¹: μ_B²B²/(2E_h) · (2/3)⟨Σ (r/a₀)²⟩.
    /// Nothing without its operator.
    pub fn diamagnetic_shift(&self, tesla: f64) -> Option<f64> {
        let own = self.diamagnetic.as_ref()?;
        let means = own.scalar.iter().filter(|e| e.left == e.right);
        let largest = means.fold(0.0_f64, |most, e| most.max(e.value.abs()));
        Some(mean_diamagnetic_shift(largest, tesla))
    }
}

/// The mean shift of the states of a level by the diamagnetic term, cm⁻¹, from ⟨Σ (r/a₀)²⟩: two thirds of what a
/// state with its electrons across the field has, the most that is possible.
#[must_use]
fn mean_diamagnetic_shift(square: f64, tesla: f64) -> f64 {
    DIAMAGNETIC * tesla * tesla * square * 2.0 / 3.0
}

/// μ_B²/(2E_h) = e²a₀²/8m in cm⁻¹/T².
pub(super) const DIAMAGNETIC: f64 = BOHR_MAGNETON_WAVENUMBER.value * BOHR_MAGNETON_WAVENUMBER.value
    / (2.0 * HARTREE_WAVENUMBER.value);

/// √[J(J+1)(2J+1)] = ⟨J‖J‖J⟩.
pub(super) fn momentum(two_j: i32) -> f64 {
    let j = f64::from(two_j);
    (j * (j + 2.0) * (j + 1.0) / 4.0).sqrt()
}

/// ⟨½ℓj‖L + g_s S‖½ℓj′⟩.
fn doublet(two_l: i32, two_j: i32, two_jp: i32) -> f64 {
    let root = (f64::from(two_j + 1) * f64::from(two_jp + 1) * 1.5).sqrt();
    let six = wigner_6j(1, two_j, two_l, two_jp, 1, 2);
    let odd = ((1 + two_l + two_jp) / 2 + 1) % 2 != 0;
    let spin = if odd { -root * six } else { root * six };
    let whole = if two_j == two_jp {
        momentum(two_j)
    } else {
        0.0
    };
    whole + (ELECTRON_G.value - 1.0) * spin
}

/// Amplitudes inside one set of levels, those with left ≤ right.
pub(super) fn half(amplitudes: &[Amplitude]) -> Vec<Reduced> {
    let upper = amplitudes.iter().filter(|a| a.left <= a.right);
    upper
        .map(|a| Reduced {
            left: a.left,
            right: a.right,
            value: a.reduced,
        })
        .collect()
}

/// Levels that are chosen, and their new places.
pub(super) struct Chosen {
    /// Old places by the new ones.
    pub places: Vec<usize>,
    new: Vec<Option<usize>>,
}

impl Chosen {
    pub fn of(places: &[usize], count: usize) -> Chosen {
        let mut chosen = Chosen {
            places: Vec::with_capacity(places.len()),
            new: vec![None; count],
        };
        for &place in places {
            if let Some(new @ None) = chosen.new.get_mut(place) {
                *new = Some(chosen.places.len());
                chosen.places.push(place);
            }
        }
        chosen
    }

    pub fn place(&self, old: usize) -> Option<usize> {
        self.new.get(old).copied().flatten()
    }

    /// Elements of an operator of rank k inside the levels, again with left ≤ right; a turned one takes
    /// ⟨b‖T‖a⟩ = (−1)^(J_b−J_a) ⟨a‖T‖b⟩, a scalar's element itself none.
    fn within(&self, elements: &[Reduced], levels: &[Level], two_k: i32) -> Vec<Reduced> {
        let mut found = Vec::new();
        for element in elements {
            let ends = (self.place(element.left), self.place(element.right));
            let (Some(left), Some(right)) = ends else {
                continue;
            };
            let turned = left > right;
            let sign = if turned && two_k > 0 {
                turn(levels, element)
            } else {
                1.0
            };
            found.push(Reduced {
                left: left.min(right),
                right: left.max(right),
                value: sign * element.value,
            });
        }
        sort_by_key(&mut found, |e| (e.left, e.right));
        found
    }
}

/// (−1)^(J_b−J_a).
pub(super) fn turn(levels: &[Level], element: &Reduced) -> f64 {
    let two_j = |place: usize| levels.get(place).map_or(0, |level| level.two_j);
    let apart = two_j(element.left) - two_j(element.right);
    if apart / 2 % 2 == 0 { 1.0 } else { -1.0 }
}

fn check(levels: &[Level]) -> Result<(), Problem> {
    for level in levels {
        if !(0..=MOST_TWO_J).contains(&level.two_j) {
            return Err(out_of_range(level.two_j));
        }
        if !level.energy.is_finite() {
            let message = "The energy of a level has no finite value.";
            return Err(Problem::new("energy-not-finite", message, 0, 0));
        }
    }
    Ok(())
}

#[inline(never)]
fn out_of_range(two_j: i32) -> Problem {
    let j = crate::quantity::TwiceJ::from_doubled(two_j);
    let message = format!("There is no level of J = {j} here.");
    Problem::new("level-out-of-range", message, 0, 0).bound(format!(
        "J from 0 to {}, and ℓ ± 1/2 for one electron",
        MOST_TWO_J / 2
    ))
}
