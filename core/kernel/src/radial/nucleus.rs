//! The nucleus: a point, or a charge spread over a sphere or a Fermi distribution.

use crate::constants::BOHR_RADIUS;
use core::f64::consts::PI;

/// How the nuclear charge is spread.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Nucleus {
    /// A point.
    Point,
    /// A sphere of constant density with the radius of [`rms_radius`].
    Uniform {
        /// Nucleons.
        mass_number: u16,
    },
    /// ρ ∝ 1/{1 + exp[(r − c)/a]} with a skin of 2.3 fm and the radius of [`rms_radius`]; the sphere
    /// for nuclei too light for such a skin, c < 3a.
    Fermi {
        /// Nucleons.
        mass_number: u16,
    },
}

/// Where the density of a Fermi nucleus falls from 90 % to 10 %: t = 4 ln 3 · a = 2.3 fm, common
/// practice. Parpia and Mohanty, Phys. Rev. A 46, 3735 (1992).
const SKIN_FM: f64 = 2.3;

/// √⟨r²⟩ = 0.836 A^{1/3} + 0.570 fm, in a₀.
///
/// Fitted to measured radii for A > 9, where it is good to about 0.05 fm. Lighter nuclei differ by up
/// to 0.5 fm; their whole size moves energies by less than 1e-8 of themselves. Source: Johnson and Soff, At. Data Nucl. Data Tables 33, 405 (1985).
pub fn rms_radius(mass_number: u16) -> f64 {
    (0.836 * libm::cbrt(f64::from(mass_number.max(1))) + 0.570) * fermi()
}

/// One femtometre in a₀.
fn fermi() -> f64 {
    1e-15 / BOHR_RADIUS.value
}

/// The mass number on the valley of stability: Z = A/(1.98 + 0.0155 A^{2/3}), to the nearest A.
///
/// For where no isotope is known or named; it differs from the commonest isotope's by a few units.
/// Source: the semi-empirical mass formula, e.g. Krane, *Introductory Nuclear Physics* (1988), eq. 3.30.
pub fn stable_mass_number(z: u8) -> u16 {
    let charge = |a: u16| {
        let root = libm::cbrt(f64::from(a));
        f64::from(a) / (1.98 + 0.0155 * root * root)
    };
    let z = f64::from(z);
    (1..400)
        .find(|&a| charge(a) + charge(a + 1) >= 2.0 * z)
        .unwrap_or(400)
}

impl Nucleus {
    /// The sphere in place of a Fermi distribution that would be all skin.
    fn shape(self) -> Nucleus {
        match self {
            Nucleus::Fermi { mass_number }
                if fermi_half_radius(rms_radius(mass_number), skin()) < 3.0 * skin() =>
            {
                Nucleus::Uniform { mass_number }
            }
            other => other,
        }
    }

    /// Radii where the mesh has to have break points, a₀; none for a point.
    pub fn break_points(self) -> Vec<f64> {
        match self.shape() {
            Nucleus::Point => Vec::new(),
            Nucleus::Uniform { mass_number } => vec![sphere(mass_number)],
            Nucleus::Fermi { mass_number } => {
                let radius = sphere(mass_number);
                [0.4, 0.65, 0.85, 1.0, 1.15, 1.35, 1.6, 2.0, 2.6]
                    .iter()
                    .map(|part| part * radius)
                    .collect()
            }
        }
    }

    /// Those of the break points where the potential has a kink in a derivative.
    pub fn kinks(self) -> Vec<f64> {
        match self.shape() {
            Nucleus::Uniform { mass_number } => vec![sphere(mass_number)],
            _ => Vec::new(),
        }
    }

    /// The potential energy of an electron at each of the rising radii, −Z/r for a point, hartree.
    ///
    /// Sphere of radius R = √(5/3) √⟨r²⟩: −(Z/2R)(3 − r²/R²) inside. Fermi: by the series of its
    /// radial integrals, see [`fermi_part`].
    pub fn potential(self, z: f64, radii: &[f64]) -> Vec<f64> {
        match self.shape() {
            Nucleus::Point => radii.iter().map(|r| -z / r).collect(),
            Nucleus::Uniform { mass_number } => {
                let edge = sphere(mass_number);
                let inside = |r: f64| -0.5 * z / edge * (3.0 - r * r / (edge * edge));
                radii
                    .iter()
                    .map(|&r| if r < edge { inside(r) } else { -z / r })
                    .collect()
            }
            Nucleus::Fermi { mass_number } => {
                let half = fermi_half_radius(rms_radius(mass_number), skin());
                let part = |r: f64| fermi_part(r, half, skin());
                radii.iter().map(|&r| -z / r * part(r)).collect()
            }
        }
    }
}

/// a of the Fermi distribution.
fn skin() -> f64 {
    SKIN_FM * fermi() / (4.0 * libm::log(3.0))
}

/// √(5/3) √⟨r²⟩.
fn sphere(mass_number: u16) -> f64 {
    (5.0_f64 / 3.0).sqrt() * rms_radius(mass_number)
}

/// c from ⟨r²⟩ = (3/5) c² + (7/5) π² a², valid where exp(−c/a) is negligible, and at least a.
fn fermi_half_radius(rms: f64, skin: f64) -> f64 {
    let square = (5.0 * rms * rms - 7.0 * PI * PI * skin * skin) / 3.0;
    square.max(skin * skin).sqrt()
}

/// The share of Z that −Z/r holds at r: (1/N)[∫₀^r s² f ds + r ∫_r^∞ s f ds]·, f = 1/{1 + exp[(s − c)/a]}.
///
/// With S_k(x) = Σ_{n≥1} (−1)ⁿ e^{−n x}/n^k, Parpia and Mohanty, Phys. Rev. A 46, 3735 (1992), eqs. 11, 12:
/// N = 1 + π²a²/c² + … ; both branches are continuous at r = c.
fn fermi_part(r: f64, c: f64, a: f64) -> f64 {
    let s = |k: i32, x: f64| {
        let mut sum = 0.0;
        let mut factor = 1.0;
        let decay = -libm::exp(-x);
        for n in 1..200 {
            factor *= decay;
            let n = f64::from(n);
            let power = if k == 2 { n * n } else { n * n * n };
            let term = factor / power;
            sum += term;
            if term.abs() < 1e-18 {
                break;
            }
        }
        sum
    };
    let ratio = a / c;
    let cube = ratio * ratio * ratio;
    let norm = 1.0 + PI * PI * ratio * ratio - 6.0 * cube * s(3, c / a);
    let x = r / c;
    let part = if r < c {
        let y = (c - r) / a;
        1.5 * x - 0.5 * x * x * x + 0.5 * PI * PI * ratio * ratio * x
            - 3.0 * ratio * ratio * x * s(2, y)
            + 6.0 * cube * (s(3, y) - s(3, c / a))
    } else {
        let y = (r - c) / a;
        norm + 3.0 * ratio * ratio * x * s(2, y) + 6.0 * cube * s(3, y)
    };
    part / norm
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::numerics::gauss_legendre::gauss_legendre;

    #[test]
    fn mass_numbers_lie_near_the_commonest_isotopes() {
        // Commonest isotopes: ⁴⁰Ca, ⁵⁶Fe, ¹²⁰Sn, ¹³²Xe, ²⁰²Hg, ²³⁸U.
        for (z, a) in [
            (20, 40),
            (26, 56),
            (50, 120),
            (54, 132),
            (80, 202),
            (92, 238),
        ] {
            let found = stable_mass_number(z);
            assert!(found.abs_diff(a) <= 5, "Z = {z}: {found}");
        }
        assert!((1..=103u8).all(|z| stable_mass_number(z) >= u16::from(z)));
    }

    #[test]
    fn outside_a_spread_charge_is_a_point() {
        for nucleus in [
            Nucleus::Uniform { mass_number: 238 },
            Nucleus::Fermi { mass_number: 238 },
        ] {
            let far = 8.0 * rms_radius(238);
            for (found, r) in nucleus.potential(92.0, &[far, 1.0]).iter().zip([far, 1.0]) {
                assert!((found * r / 92.0 + 1.0).abs() < 1e-12);
            }
        }
    }

    #[test]
    fn the_fermi_potential_is_that_of_its_charge() {
        // Direct quadrature of the charge, by Gauss–Legendre in short steps.
        let (c, a) = (1.3, 0.11);
        let density = |s: f64| 1.0 / (1.0 + libm::exp((s - c) / a));
        let rule = gauss_legendre(12);
        let integral = |from: f64, to: f64, f: &dyn Fn(f64) -> f64| {
            let half = (to - from) / 80.0;
            (0..40)
                .flat_map(|i| rule.iter().map(move |&(x, w)| (i, x, w)))
                .map(|(i, x, w)| half * w * f(from + half * (2.0 * f64::from(i) + 1.0 + x)))
                .sum::<f64>()
        };
        let norm = integral(0.0, 8.0, &|s| s * s * density(s));
        for r in [0.05, 0.4, 1.0, 1.29, 1.31, 1.7, 3.0] {
            let inside = integral(0.0, r, &|s| s * s * density(s));
            let outside = integral(r, 8.0, &|s| s * density(s));
            let expected = (inside + r * outside) / norm;
            let found = fermi_part(r, c, a);
            assert!((found - expected).abs() < 1e-12, "{r}: {found} {expected}");
        }
    }

    #[test]
    fn light_nuclei_are_spheres() {
        let radii = [1e-6, 2e-5, 1e-4, 1.0];
        for mass_number in [0, 1, 4] {
            let fermi = Nucleus::Fermi { mass_number };
            let sphere = Nucleus::Uniform { mass_number };
            assert_eq!(fermi.potential(2.0, &radii), sphere.potential(2.0, &radii));
            assert_eq!(fermi.break_points(), sphere.break_points());
        }
        let heaviest = Nucleus::Fermi {
            mass_number: u16::MAX,
        };
        assert!(
            heaviest
                .potential(92.0, &radii)
                .iter()
                .all(|v| v.is_finite())
        );
    }

    #[test]
    fn the_spheres_have_their_mean_square_radius() {
        let half = fermi_half_radius(5.0, 0.5);
        assert!((0.6 * half * half + 1.4 * PI * PI * 0.25 - 25.0).abs() < 1e-12);
        assert!((sphere(208) / rms_radius(208) - (5.0_f64 / 3.0).sqrt()).abs() < 1e-15);
    }
}
