//! The ground level by energy: of the observed ground configuration, with nothing fitted, is the lowest
//! computed level of the observed J?

use rungline_core::configuration::{Orbital, Subshell};
use rungline_core::elements::{Status, observed_ground};
use rungline_core::radial::nucleus::stable_mass_number;
use rungline_core::structure::model::{Case, solve};
use rungline_tests::model::field;
use rungline_tests::{Row, report};

/// Ions whose ground level is computed to be another, each with its reason.
const EXCEPTIONS: &[(&str, &str)] = &[];

#[test]
fn the_lowest_level_has_the_observed_j() {
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
            let case = Case::new(z, stable_mass_number(z), vec![subshells.collect()]);
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
    for name in &differing {
        assert!(
            EXCEPTIONS.iter().any(|(known, _)| known == name),
            "{name} is new"
        );
    }
    assert_eq!(
        differing.len(),
        EXCEPTIONS.len(),
        "an exception is none any more"
    );
    report(
        "structure_model_ground",
        Row {
            quantity: format!(
                "ground J by energy in the observed ground configuration, measured ions to charge 10 and Z = 92, nothing fitted; other than observed: {}",
                if EXCEPTIONS.is_empty() {
                    "none".to_owned()
                } else {
                    differing.join(", ")
                }
            ),
            cases,
            worst: differing.len() as f64 / cases as f64,
            tolerance: 0.02,
            measure: "share that differs".into(),
            source: "mendeleev 1.3.0 (MIT)".into(),
        },
    );
}
