//! Filling against tables of ground configurations.

use rungline_core::configuration::filling::{Used, ground, rule};
use rungline_core::configuration::{Species, complete, parse};
use rungline_tests::{Row, report, vector_rows};

#[test]
fn neutral_atoms_have_the_tabulated_configuration() {
    // mendeleev 1.3.0 (MIT), written out by its own expansion of the cores.
    let rows = vector_rows("ground_configurations.csv");
    let mut differing = Vec::new();
    for row in &rows {
        let z: u8 = row["Z"].parse().unwrap();
        let species = Species {
            element: Some(z),
            charge: 0,
            mass_number: None,
        };
        let tabulated = complete(&parse(&row["config_full"]).unwrap(), &species).unwrap();
        assert_eq!(tabulated.completed_core, None);
        if *ground(z, 0).unwrap().configuration() != tabulated.configuration {
            differing.push(z);
        }
    }
    // The two extrapolations that a second table contradicts; the rule is used for them.
    assert_eq!(differing, [110, 111]);
    report(
        "configuration_neutral",
        Row {
            quantity: "ground configurations of neutral atoms".into(),
            cases: rows.len(),
            worst: (differing.len() - 2) as f64,
            tolerance: 0.0,
            measure: "cases that differ, beside Ds and Rg, which the table extrapolates".into(),
            source: "mendeleev 1.3.0 (MIT)".into(),
        },
    );
}

#[test]
fn the_rule_fails_for_the_known_exceptions() {
    // Neutral atoms whose ground configuration is not that of the order n + ℓ, then n: standard list,
    // from memory.
    let known = [
        24, 29, 41, 42, 44, 45, 46, 47, 57, 58, 64, 78, 79, 89, 90, 91, 92, 93, 96, 103,
    ];
    let found: Vec<u8> = (1..=118u8)
        .filter(|&z| {
            let ground = ground(z, 0).unwrap();
            ground.differs && ground.used == Used::Observed
        })
        .collect();
    assert_eq!(found, known);
}

#[test]
fn cations_lose_the_highest_n_first() {
    // First and second ions of mendeleev 1.3.0 (MIT): in how many does the rule give the table's
    // configuration. A rule of thumb is not right everywhere; the transition metals must be.
    let rows = vector_rows("ground_levels_all_ions.csv");
    for row in rows.iter().filter(|row| row["charge"] == "2") {
        let z: u8 = row["Z"].parse().unwrap();
        if (21..=30).contains(&z) || (39..=48).contains(&z) || (72..=80).contains(&z) {
            let text = rule(z, 2).unwrap().valence_text();
            let tabulated = ground(z, 2).unwrap();
            let agrees = !tabulated.differs;
            assert!(
                agrees,
                "{}: rule {text}, table {}",
                row["symbol"], row["shells"]
            );
        }
    }
}

#[test]
fn the_tabulated_text_is_a_configuration_of_the_trade() {
    // Each `shells` text, points between subshells, reads as the configuration of its ion.
    for row in vector_rows("ground_levels_all_ions.csv") {
        let z: u8 = row["Z"].parse().unwrap();
        let charge: i32 = row["charge"].parse().unwrap();
        let species = Species {
            element: Some(z),
            charge,
            mass_number: None,
        };
        let reading = complete(&parse(&row["shells"]).unwrap(), &species)
            .unwrap_or_else(|problems| panic!("{row:?} {problems:?}"));
        assert_eq!(
            &reading.configuration,
            ground(z, charge).unwrap().configuration(),
            "{row:?}"
        );
        assert_eq!(reading.completed_core, None);
        // And so do the subshells outside the noble gas, with the core left to be completed where
        // its electrons fill in order.
        let short = parse(&reading.configuration.short_text()).unwrap();
        assert_eq!(
            complete(&short, &species).unwrap().configuration,
            reading.configuration
        );
    }
}
