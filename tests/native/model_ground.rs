//! The ground level by energy: of the observed ground configuration, with nothing fitted, is the lowest
//! computed level of the observed J?

use rungline_core::configuration::{Orbital, Subshell};
use rungline_core::elements::{Status, observed_ground};
use rungline_core::radial::nucleus::stable_mass_number;
use rungline_core::structure::model::{Case, solve};
use rungline_tests::model::field;
use rungline_tests::{Row, report};

/// Computes all, names those that differ and holds them against the known ones.
fn check(correlation: bool, name: &str, what: &str, exceptions: &[&str]) {
    let (mut cases, mut differing) = (0_usize, Vec::new());
    for z in 1..=92_u8 {
        for charge in 0..=10.min(i32::from(z) - 1) {
            let Some(ground) = observed_ground(z, charge) else {
                continue;
            };
            let Some(j) = ground.level.j else { continue };
            if ground.status != Status::Measured {
                continue;
            }
            let subshells = (ground.subshells.iter())
                .filter_map(|&(n, l, electrons)| Subshell::new(Orbital::new(n, l)?, electrons));
            let mut case = Case::new(z, stable_mass_number(z), vec![subshells.collect()]);
            case.correlation = correlation;
            let spectrum = solve(&case, &mut field, &mut |_| true).expect("levels");
            let lowest = spectrum.levels.first().expect("a level");
            let (parity, level) = spectrum.level(*lowest).expect("a level");
            cases += 1;
            let name = format!("{z} charge {charge}: {}", ground.written);
            if level.two_j != j.doubled() || parity.odd != ground.level.odd {
                let observed = spectrum.levels.iter().find_map(|&place| {
                    let (_, other) = spectrum.level(place)?;
                    (other.two_j == j.doubled()).then_some(other.energy - level.energy)
                });
                let text = format!(
                    "{name}: 2J = {}, observed {}, which lies {observed:?} higher",
                    level.two_j,
                    j.doubled()
                );
                println!("{text}");
                differing.push(name);
            }
        }
    }
    assert_eq!(differing, exceptions);
    let named = match differing.as_slice() {
        [] => "none".to_owned(),
        some => some.join(", "),
    };
    report(
        name,
        Row {
            quantity: format!(
                "ground J by energy in the observed ground configuration, measured ions to charge 10 and Z = 92, nothing fitted, {what}; other than observed: {named}"
            ),
            cases,
            worst: differing.len() as f64 / cases as f64,
            tolerance: 0.02,
            measure: "share that differs".into(),
            source: "mendeleev 1.3.0 (MIT)".into(),
        },
    );
}

#[test]
fn the_lowest_level_has_the_observed_j() {
    check(false, "structure_model_ground", "average functions", &[]);
}

#[test]
fn the_lowest_level_has_the_observed_j_with_correlation() {
    check(
        true,
        "structure_model_ground_correlation",
        "correlation in second order",
        &[],
    );
}
