//! How far off computed distances between configurations are, by the validation report. A test holds the words to it.

use crate::configuration::Subshell;
use crate::structure::model::Case;

const MORE_D: &str = "with one more d electron up to 16100 cm⁻¹ too high (median 8500, by 3d); ";
const MORE_F: &str = "with one more f electron up to 30100 cm⁻¹ too high (median 11400, by 4f); ";
const FROM_S_TO_P: &str = "with an electron moved from s to p up to 9600 cm⁻¹ too low (median 6600, by 4s and 4p of Ca to Zn); ";

/// The limit; nothing where configurations differ in none of these ways.
pub fn between_configurations(case: &Case) -> Option<String> {
    let (mut more_d, mut more_f, mut moved) = (false, false, false);
    for one in &case.configurations {
        for other in &case.configurations {
            let ([_, p, d, f], [_, other_p, other_d, other_f]) = (by_l(one), by_l(other));
            more_d |= d != other_d && (has_inner(one, 2) || has_inner(other, 2));
            more_f |= f != other_f && (has_inner(one, 3) || has_inner(other, 3));
            let is_open = d % 10 != 0 || f % 14 != 0;
            moved |= is_open && p != other_p && (d, f) == (other_d, other_f);
        }
    }
    if !(more_d || more_f || moved) {
        return None;
    }
    let mut say = "Distances between configurations are farther off: ".to_owned();
    for (is, words) in [(more_d, MORE_D), (more_f, MORE_F), (moved, FROM_S_TO_P)] {
        if is {
            say.push_str(words);
        }
    }
    say.push_str("a pinned level of each takes the rest of its configuration along.");
    Some(say)
}

/// Whether an open subshell of this ℓ lies in the same shell as the core: the subshell n (ℓ − 1) below it is full, as
/// 3p below the 3d of iron and not below that of helium.
fn has_inner(configuration: &[Subshell], l: u8) -> bool {
    let is_full = |n: u8| {
        let mut all = configuration.iter().map(|s| (s.orbital(), s));
        all.any(|(of, s)| (of.n(), of.l().saturating_add(1)) == (n, l) && !s.is_open())
    };
    let mut all = configuration.iter().map(|s| s.orbital());
    all.any(|of| of.l() == l && is_full(of.n()))
}

/// Electrons by ℓ = 0 to 3.
fn by_l(configuration: &[Subshell]) -> [u32; 4] {
    let mut counts = [0_u32; 4];
    for subshell in configuration {
        if let Some(count) = counts.get_mut(usize::from(subshell.orbital().l())) {
            *count = count.saturating_add(subshell.electrons());
        }
    }
    counts
}
