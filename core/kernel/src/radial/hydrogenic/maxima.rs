//! Maxima of the radial density P² of a hydrogenic orbital.

use super::Hydrogenic;

/// A maximum of P².
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Maximum {
    /// Where, a₀.
    pub radius: f64,
    /// P² there, 1/a₀.
    pub density: f64,
}

/// Halvings of an interval: more than a double has bits.
const HALVINGS: usize = 64;

impl Hydrogenic {
    /// All n − ℓ maxima of P², from the inside outwards.
    ///
    /// They are the zeros of x dP/dx / P · L_k = (n − x/2) L_k − (n+ℓ) L_{k−1}, k = n−ℓ−1, one on
    /// either side of each zero of P. In √x they lie at least about π/(2√n) apart (the local
    /// wavelength); a search in steps of a sixth of that, halved until all are found, brackets
    /// them, and bisection narrows each to one unit of the last place of x, so that the radius has
    /// the error of the polynomials' sign, below 1e-12 relative to n = 50.
    #[must_use]
    pub fn maxima(&self) -> Vec<Maximum> {
        let expected = usize::try_from(self.n - self.l).unwrap_or(0);
        let n = f64::from(self.n);
        let mut step = std::f64::consts::PI / (12.0 * n.sqrt());
        let mut roots = Vec::new();
        for _ in 0..4 {
            roots = self.search(step);
            if roots.len() == expected {
                break;
            }
            step *= 0.5;
        }
        let scale = n / (2.0 * self.z);
        let maximum = |x: &f64| {
            let radius = x * scale;
            let reduced = self.reduced(radius);
            Maximum {
                radius,
                density: reduced * reduced,
            }
        };
        roots.iter().map(maximum).collect()
    }

    /// The highest maximum of P²: the most probable radius, a₀. 1s: 1/Z.
    #[must_use]
    pub fn most_probable(&self) -> Maximum {
        let nowhere = Maximum {
            radius: 0.0,
            density: 0.0,
        };
        self.maxima().into_iter().fold(nowhere, |best, each| {
            if each.density > best.density {
                each
            } else {
                best
            }
        })
    }

    /// Zeros of the slope met in steps of √x.
    fn search(&self, step: f64) -> Vec<f64> {
        // Beyond the outer turning point, x < 4n, P only falls.
        let end = f64::from(4 * self.n) + 4.0;
        let mut roots = Vec::new();
        let mut left = 0.0;
        let mut slope = 1.0;
        let mut root = step;
        while left < end {
            let right = root * root;
            let next = self.slope(right);
            if next == 0.0 || (next > 0.0) != (slope > 0.0) {
                roots.push(self.bisect(left, right, slope));
                // A zero met exactly: what follows has the other sign.
                slope = -slope;
            }
            left = right;
            root += step;
        }
        roots
    }

    fn bisect(&self, mut left: f64, mut right: f64, sign: f64) -> f64 {
        for _ in 0..HALVINGS {
            let middle = 0.5 * (left + right);
            if self.slope(middle) * sign > 0.0 {
                left = middle;
            } else {
                right = middle;
            }
        }
        0.5 * (left + right)
    }

    /// Of the sign of x dP/dx times that of P near the origin, for x > 0.
    fn slope(&self, x: f64) -> f64 {
        let (value, before) = self.laguerre(x);
        // (n+ℓ) L_{k−1} in normalised polynomials is √{k(n+ℓ)} h_{k−1}.
        let lowered = f64::from(self.degree() * (self.n + self.l)).sqrt();
        (f64::from(self.n) - 0.5 * x) * value - lowered * before
    }
}
