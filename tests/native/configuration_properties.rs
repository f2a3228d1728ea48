//! Properties of reading: what is shown reads back, and no text whatever brings the program down.

use proptest::collection::{btree_map, vec};
use proptest::prelude::*;
use rungline_core::configuration::filling::{filling_order, ground};
use rungline_core::configuration::{
    Configuration, Orbital, Species, Subshell, complete, parse, species,
};
use rungline_core::problem::Problem;
use rungline_core::quantity::{Dimension, half_integer, number, quantity};

fn any_configuration() -> impl Strategy<Value = Configuration> {
    let orbital = (1u8..=30).prop_flat_map(|n| (Just(n), 0..n));
    btree_map(orbital, 1u32..=120, 1..8).prop_map(|map| {
        let subshells = map
            .into_iter()
            .map(|((n, l), electrons)| {
                let orbital = Orbital::new(n, l).unwrap();
                Subshell::new(orbital, (electrons - 1) % orbital.capacity() + 1).unwrap()
            })
            .collect();
        Configuration::new(subshells).unwrap()
    })
}

/// Texts made of what configurations, species and quantities are made of, and of what they are not.
fn odd_text() -> impl Strategy<Value = String> {
    let part = prop_oneof![
        Just("3d"),
        Just("4s2"),
        Just("[Ar]"),
        Just("["),
        Just("]"),
        Just("[21]"),
        Just("22"),
        Just("99999999999"),
        Just("0"),
        Just("⁶"),
        Just("⁻"),
        Just("^"),
        Just("{"),
        Just("}"),
        Just("("),
        Just(")"),
        Just("-"),
        Just("−"),
        Just("."),
        Just(","),
        Just(" "),
        Just("\u{A0}"),
        Just("n="),
        Just("n"),
        Just("="),
        Just("Fe"),
        Just("II"),
        Just("+"),
        Just("*"),
        Just("e"),
        Just("×10"),
        Just("T"),
        Just("cm-1"),
        Just("/2"),
        Just("🙂"),
        Just("👩\u{200D}🚀"),
        Just("א"),
        Just("\u{202E}"),
        Just("\u{301}"),
        Just("ſ"),
        Just("K"),
        Just("İ"),
        Just("ß"),
        Just("\0"),
        Just("j"),
        Just("1/"),
        Just("°C"),
        Just("Å"),
    ];
    vec(part, 0..20).prop_map(|parts| parts.concat())
}

fn well_placed(text: &str, problems: &[Problem]) {
    for problem in problems {
        assert!(
            text.get(problem.start..problem.end).is_some(),
            "{text:?}: {problem:?}"
        );
        assert!(
            !problem.message.is_empty() && problem.message.chars().count() < 400,
            "{text:?}: {problem:?}"
        );
        assert!(!problem.ways.is_empty(), "a way out: {text:?}: {problem:?}");
        let in_utf16 = problem.clone().in_utf16(text);
        assert!(in_utf16.end <= text.encode_utf16().count());
    }
    assert!(
        problems
            .windows(2)
            .all(|pair| pair[0].start <= pair[1].start),
        "{text:?}: {problems:?}"
    );
}

fn read_everything(text: &str) {
    let atoms = ["Fe", "H", "*", "Og", "Hg 5+", "H-"].map(|name| species::parse(name).unwrap());
    match parse(text) {
        Ok(written) => {
            for atom in &atoms {
                match complete(&written, atom) {
                    Ok(reading) => {
                        if let Some(electrons) = atom.electrons() {
                            assert_eq!(reading.configuration.electrons(), electrons);
                        }
                    }
                    Err(problems) => {
                        for problem in &problems {
                            assert!(text.get(problem.start..problem.end).is_some());
                        }
                    }
                }
            }
        }
        Err(problems) => well_placed(text, &problems),
    }
    match species::parse(text) {
        Ok(species) => assert_eq!(species::parse(&species.to_string()), Ok(species)),
        Err(problems) => well_placed(text, &problems),
    }
    for dimension in Dimension::ALL {
        match quantity(text, dimension) {
            Ok(quantity) => {
                let (lowest, highest) = dimension.bounds();
                assert!((lowest..=highest).contains(&quantity.value) && quantity.typed.is_finite());
            }
            Err(problem) => well_placed(text, &[problem]),
        }
    }
    if let Err(problem) = number(text) {
        assert!(text.get(problem.start..problem.end).is_some());
    }
    if let Err(problem) = half_integer(text) {
        well_placed(text, &[problem]);
    }
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn what_is_shown_reads_back(configuration in any_configuration()) {
        for text in [configuration.to_string(), configuration.short_text()] {
            let written = parse(&text).unwrap();
            let reading = complete(&written, &Species::ANY).unwrap();
            prop_assert_eq!(&reading.configuration, &configuration, "{}", text);
        }
    }

    #[test]
    fn any_text_is_read_or_refused(text in "\\PC{0,60}") {
        read_everything(&text);
    }

    #[test]
    fn odd_texts_are_read_or_refused(text in odd_text()) {
        read_everything(&text);
    }

    #[test]
    fn every_ion_reads_back_from_its_ground_configuration(z in 1u8..=118, lost in 0i32..=118) {
        let charge = lost % i32::from(z);
        let species = Species { element: Some(z), charge, mass_number: None };
        let ground = ground(z, charge).unwrap();
        let written = parse(&ground.configuration().to_string()).unwrap();
        prop_assert_eq!(&complete(&written, &species).unwrap().configuration, ground.configuration());
        prop_assert_eq!(species::parse(&species.to_string()), Ok(species));
    }

    #[test]
    fn numbers_read_back(value in -1e12f64..1e12) {
        prop_assert_eq!(number(&value.to_string()), Ok(value));
        prop_assert_eq!(number(&format!("{value:e}")), Ok(value));
        prop_assert_eq!(number(&value.to_string().replace('.', ",")), Ok(value));
    }
}

#[test]
fn filling_order_holds_each_orbital_once() {
    let mut all: Vec<Orbital> = filling_order().collect();
    let count = all.len();
    all.sort_unstable();
    all.dedup();
    assert_eq!(all.len(), count);
}
