//! The statistical atom, from which iterations start.

/// Z_eff(r) = (Z − z) φ(x) + z, x = r Z^{1/3}/0.88534, z being the charge that an outer electron sees.
///
/// φ is Latter's rational fit to the Thomas–Fermi function, good to a few parts in a thousand;
/// it only starts iterations and spaces meshes. Source: Latter, Phys. Rev. 99, 510 (1955).
pub fn effective_charge(z: f64, tail: f64, r: f64) -> f64 {
    let x = r * libm::cbrt(z) / 0.88534;
    let root = x.sqrt();
    let denominator = 1.0 + 0.02747 * root + 1.243 * x - 0.1486 * x * root
        + 0.2302 * x * x
        + 0.007298 * x * x * root
        + 0.006944 * x * x * x;
    (z - tail).max(0.0) / denominator + tail
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_charge_falls_from_the_nucleus_to_the_tail() {
        let charges: Vec<f64> = [0.0, 0.01, 0.1, 1.0, 10.0, 1000.0]
            .iter()
            .map(|&r| effective_charge(80.0, 1.0, r))
            .collect();
        assert_eq!(charges[0], 80.0);
        assert!(charges.windows(2).all(|pair| pair[0] > pair[1]));
        assert!((charges[5] - 1.0).abs() < 1e-3);
        assert_eq!(effective_charge(1.0, 1.0, 3.0), 1.0);
    }
}
