//! Levels with a nucleus, with and without a field: reference cases and published splittings.
//!
//! Vectors: `hyperfine_checks.json`, made by a separate program (own computation, no outside data, free to
//! use; its A, B and g_J are round inputs).

use rungline_core::elements::isotope;
use rungline_core::splitting::in_field::{MHZ_PER_WAVENUMBER, Manifold, Nucleus, Split, casimir};
use rungline_tests::sheets::answer;
use rungline_tests::{Row, report, vector_json};
use serde_json::json;

const SOURCE: &str = "separate program, hyperfine_checks.json";

/// A level alone with its nucleus, A and B in MHz.
fn alone(two_j: i32, g_j: f64, two_i: i32, g_i: f64, (a, b): (f64, f64)) -> Split {
    let manifold = Manifold::alone(two_j, 0.0, g_j).expect("a level");
    let nucleus = Nucleus {
        two_i,
        g_i,
        magnetic_dipole: vec![a / MHZ_PER_WAVENUMBER],
        electric_quadrupole: vec![b / MHZ_PER_WAVENUMBER],
    };
    Split::new(&manifold, Some(&nucleus)).expect("a split")
}

#[test]
fn energies_of_the_reference_cases() {
    let vectors = vector_json("hyperfine_checks.json");
    let cases = vectors["cases"].as_array().expect("cases");
    let (mut worst, mut seen) = (0.0_f64, 0);
    for case in cases {
        let number = |key: &str| case[key].as_f64().expect("a number");
        let doubled = |key: &str| (2.0 * number(key)).round() as i32;
        let (two_j, two_i) = (doubled("J"), doubled("I"));
        let (a, b) = (number("A_MHz"), number("B_MHz"));
        let split = alone(two_j, number("gJ"), two_i, number("gI"), (a, b));
        let zero = case["zero_field"].as_array().expect("levels");
        let energies: Vec<f64> = zero
            .iter()
            .map(|f| f["E_MHz"].as_f64().expect("E"))
            .collect();
        let spread = |all: &[f64]| {
            let high = all.iter().copied().fold(f64::NEG_INFINITY, f64::max);
            high - all.iter().copied().fold(f64::INFINITY, f64::min)
        };
        for (f, theirs) in zero.iter().zip(&energies) {
            let two_f = f["twoF"].as_i64().expect("2F") as i32;
            let ours = casimir(two_i, two_j, two_f, a, b);
            worst = worst.max((ours - theirs).abs() / spread(&energies));
            seen += 1;
        }
        for field in case["field"].as_array().expect("fields") {
            let at = split
                .at(field["B_T"].as_f64().expect("B"))
                .expect("energies");
            let states = field["states"].as_array().expect("states");
            assert_eq!(states.len(), split.states().len());
            let all: Vec<f64> = states.iter().map(|s| s["E"].as_f64().expect("E")).collect();
            let highest = two_i + two_j;
            for two_m in (-highest..=highest).step_by(2) {
                let own = split.states().iter().zip(&at.shifts);
                let mut ours: Vec<f64> = own
                    .filter(|(state, _)| state.two_m == two_m)
                    .map(|(_, shift)| shift * MHZ_PER_WAVENUMBER)
                    .collect();
                ours.sort_by(f64::total_cmp);
                let theirs = states.iter().zip(&all).filter(|(s, _)| s["twoMF"] == two_m);
                let theirs: Vec<f64> = theirs.map(|(_, &energy)| energy).collect();
                assert_eq!(ours.len(), theirs.len());
                for (ours, theirs) in ours.iter().zip(&theirs) {
                    worst = worst.max((ours - theirs).abs() / spread(&all));
                    seen += 1;
                }
            }
        }
    }
    assert_eq!(cases.len(), 6);
    report(
        "splitting-hyperfine",
        Row {
            quantity: "hyperfine energies without a field and in 0.001 to 2 T".to_owned(),
            cases: seen,
            worst,
            tolerance: 1e-9,
            measure: "relative to the spread".to_owned(),
            source: SOURCE.to_owned(),
        },
    );
}

/// g_I′ of atoms against g of bare nuclei: what electrons shield by σ, computed from ⟨1/r⟩, and what an answer says of it.
///
/// −g_I′ of atoms: Arimondo, Inguscio & Violino, Rev. Mod. Phys. 49, 31 (1977), from memory; bare ones are the table's.
/// Without relativity in σ beyond the radial functions' own, heavy atoms shield more than is computed.
#[test]
fn moments_in_atoms_are_shielded_as_the_answer_says() {
    /// m_p/m_e, CODATA 2022.
    const PROTON_PER_ELECTRON: f64 = 1_836.152_673_426;
    let atoms = [
        ("7Li I", "2s", 3, 7, 1.182_213_0e-3),
        ("23Na I", "3s", 11, 23, 8.046_108_0e-4),
        ("39K I", "4s", 19, 39, 1.419_348_9e-4),
        ("87Rb I", "5s", 37, 87, 9.951_414_0e-4),
        ("133Cs I", "6s", 55, 133, 3.988_539_5e-4),
    ];
    let mut worst = 0.0_f64;
    for (species, configuration, z, mass_number, in_atom) in atoms {
        let bare = isotope(z, mass_number).and_then(|i| i.g).expect("g");
        let measured = 1.0 - in_atom * PROTON_PER_ELECTRON / bare;
        let asked = |g_i: Option<&str>| {
            let mut sheet = json!({
                "rungline": 1, "species": species, "configurations": [configuration], "field": {"flux_density": "1 T"},
                "nucleus": {"magnetic_dipole": {format!("{configuration} 2S1/2"): "1000 MHz"}}
            });
            if let Some(g_i) = g_i {
                sheet["nucleus"]["g_I"] = json!(g_i);
            }
            answer(&sheet, "splitting")["limits"].to_string()
        };
        let said = asked(None);
        let of = |before: &str, after: &str| -> f64 {
            let (_, rest) = said.split_once(before).unwrap_or_else(|| panic!("{said}"));
            let (number, _) = rest.split_once(after).expect("an end");
            number.parse().expect("a number")
        };
        let percent = of("shield it by about ", " %");
        let shielded = of("The value ", " entered");
        assert!((shielded - bare * (1.0 - percent / 100.0)).abs() < 1e-4 * bare);
        assert!(!asked(Some(&shielded.to_string())).contains("bare nucleus"));
        // What is said has two decimals of a percent.
        let off = (percent / 100.0 - measured) / measured.max(5e-4);
        println!(
            "{species}: {percent} % said, {:.3} % measured",
            100.0 * measured
        );
        worst = worst.max(off.abs());
    }
    report(
        "splitting_shielding",
        Row {
            quantity: "how far electrons shield the moment of the nucleus: alkali atoms, computed against measured".into(),
            cases: atoms.len(),
            worst,
            tolerance: 0.1,
            measure: "relative".into(),
            source: "Arimondo, Inguscio & Violino, Rev. Mod. Phys. 49, 31 (1977), from memory".into(),
        },
    );
}
