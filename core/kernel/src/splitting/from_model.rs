//! Manifolds and operators of computed levels.

use super::manifold::{Diamagnetic, Manifold, Reduced, half};
use super::operator::Operator;
use crate::numerics::lanes::dot;
use crate::problem::Problem;
use crate::structure::model::{Kind, MultipoleKind, Parity, Spectrum};
use crate::structure::{Amplitude, Hamiltonian, Integral, Rows, Transfer};

impl Manifold {
    /// The levels of one parity, by their places in it; `energies` stand for the computed ones.
    ///
    /// # Errors
    /// `no-parity`; those of [`Manifold::of_levels`].
    pub fn of_parity(
        spectrum: &Spectrum,
        parity: usize,
        energies: &[f64],
    ) -> Result<Manifold, Problem> {
        let own = spectrum.parities.get(parity).ok_or_else(no_parity)?;
        Manifold::of_levels(own.basis(), &own.levels, energies)
    }
}

impl Diamagnetic {
    /// That of the levels of one parity: ⟨r²⟩ of every electron outside shells that are full everywhere,
    /// also between configurations.
    ///
    /// Full shells are left out: they shift all levels nearly alike.
    ///
    /// # Errors
    /// `no-parity`; `radius-not-known` where an ⟨r²⟩ is neither given nor computed; those of
    /// [`Spectrum::reduced`].
    pub fn of_parity(spectrum: &Spectrum, parity: usize) -> Result<Diamagnetic, Problem> {
        let own = spectrum.parities.get(parity).ok_or_else(no_parity)?;
        let values = scalar_values(spectrum, own)?;
        let mut scalar = Vec::new();
        for rows in &own.levels.rows {
            scalar_of_j(own, rows, &values, &mut scalar)?;
        }
        let quadrupole = spectrum.reduced(MultipoleKind::E2, (parity, parity))?;
        Ok(Diamagnetic {
            scalar,
            quadrupole: half(&quadrupole),
        })
    }
}

impl Operator {
    /// E1, M1 or E2 between the levels of two parities, or of one, by their places there.
    ///
    /// # Errors
    /// Those of [`Spectrum::reduced`].
    pub fn of_spectrum(
        spectrum: &Spectrum,
        kind: MultipoleKind,
        parities: (usize, usize),
    ) -> Result<Operator, Problem> {
        let rank = match kind {
            MultipoleKind::E1 | MultipoleKind::M1 => 1,
            MultipoleKind::E2 => 2,
        };
        // The model has each line from the even level.
        let (upper, lower) = parities;
        let turned = upper > lower;
        let known = spectrum.reduced(kind, (upper.min(lower), upper.max(lower)))?;
        let two_j = |parity: usize, level: usize| {
            let levels = spectrum.parities.get(parity).map(|own| &own.levels.levels);
            levels.and_then(|l| l.get(level)).map_or(0, |l| l.two_j)
        };
        let elements = known.into_iter().map(|line: Amplitude| {
            if !turned {
                return Reduced {
                    left: line.left,
                    right: line.right,
                    value: line.reduced,
                };
            }
            let apart = two_j(lower, line.left) - two_j(upper, line.right);
            let sign = if apart / 2 % 2 == 0 { 1.0 } else { -1.0 };
            Reduced {
                left: line.right,
                right: line.left,
                value: sign * line.reduced,
            }
        });
        Ok(Operator::between(rank, elements.collect()))
    }
}

/// Σ r² as values of the parameters of the energies: an average for each configuration, and ⟨a|r²|c⟩ for
/// ⟨a|h|c⟩.
fn scalar_values(spectrum: &Spectrum, own: &Parity) -> Result<Vec<f64>, Problem> {
    let basis = own.basis();
    let mut known = true;
    let mut square = |transfer: Transfer| {
        let found = spectrum.transfer(2, (own, own), &transfer);
        let found = found.filter(|value| value.kind != Kind::Zero);
        known &= found.is_some();
        found.map_or(0.0, |value| value.value)
    };
    let values = own.hamiltonian.values(|parameter| {
        let (first, second) = (parameter.first, parameter.second);
        match parameter.integral {
            Integral::Average => (0..basis.subshells().len())
                .map(|a| {
                    let electrons = basis.electrons(first, a);
                    let c = a;
                    match electrons {
                        0 => 0.0,
                        _ => {
                            f64::from(electrons)
                                * square(Transfer {
                                    first,
                                    second,
                                    a,
                                    c,
                                })
                        }
                    }
                })
                .sum(),
            Integral::OneElectron { a, c } => square(Transfer {
                first,
                second,
                a,
                c,
            }),
            _ => 0.0,
        }
    });
    if known {
        return Ok(values);
    }
    let message = "The diamagnetic term needs the mean square radius of every open subshell.";
    Err(Problem::new("radius-not-known", message, 0, 0))
}

/// ⟨a|Σ r²|b⟩ of the levels of one J, a ≤ b.
fn scalar_of_j(
    own: &Parity,
    rows: &Rows,
    values: &[f64],
    found: &mut Vec<Reduced>,
) -> Result<(), Problem> {
    let hamiltonian: &Hamiltonian = &own.hamiltonian;
    let matrix = hamiltonian.sparse(rows, values)?;
    let of_j: Vec<_> = (own.levels.levels.iter().enumerate())
        .filter(|(_, level)| level.two_j == rows.two_j)
        .collect();
    for &(right, ket) in &of_j {
        let column: Vec<[f64; 1]> = ket.vector.iter().map(|&c| [c]).collect();
        let image: Vec<f64> = matrix.times(&column).into_iter().map(|[v]| v).collect();
        let size = dot(&image, &image).sqrt();
        for &(left, bra) in of_j.iter().filter(|(left, _)| *left <= right) {
            let value = dot(&bra.vector, &image);
            // Different levels are orthogonal but for rounding.
            if value.abs() > 1e-13 * size {
                found.push(Reduced { left, right, value });
            }
        }
    }
    Ok(())
}

#[inline(never)]
fn no_parity() -> Problem {
    let message = "There are no configurations of this parity.";
    Problem::new("no-parity", message, 0, 0)
}
