//! A and B estimated from radial functions: closed forms, and published constants.

use rungline_core::constants::{BOHR_RADIUS, ELECTRON_G, FINE_STRUCTURE, HARTREE_WAVENUMBER};
use rungline_core::elements::isotope;
use rungline_core::quantity::TwiceJ;
use rungline_core::radial::hartree_fock::{Atom, Polarisation, polarisability};
use rungline_core::radial::hydrogenic::Hydrogenic;
use rungline_core::sheet::splitting_estimated::{OFF, POLARISED};
use rungline_core::splitting::hyperfine::{Unit, of_parity, one_electron};
use rungline_core::splitting::hyperfine_radial::{Functions, elements};
use rungline_core::splitting::in_field::MHZ_PER_WAVENUMBER;
use rungline_core::structure::model::{Case, Scale, Spectrum};
use rungline_tests::model::{case, field, orbital, spectrum};
use rungline_tests::sheets::{answer, number, rows};
use rungline_tests::{Listing, Row, list, median_and_largest, report};
use serde_json::{Value, json};

/// m_p/m_e, CODATA 2022.
const PROTON: f64 = 1_836.152_673_426;
/// g of the proton, CODATA 2022.
const PROTON_G: f64 = 5.585_694_689_3;

/// The lowest level of this 2J among those of a configuration.
fn of_level(spectrum: &Spectrum, two_j: i32) -> Unit {
    for place in &spectrum.levels {
        let (parity, level) = spectrum.level(*place).expect("a level");
        if level.two_j == two_j {
            let all = of_parity(spectrum, parity).expect("radial functions");
            return all[place.level];
        }
    }
    panic!("no level of 2J = {two_j}")
}

fn plain(case: Case) -> Case {
    Case {
        relativity: false,
        ..case
    }
}

#[test]
fn hydrogen_has_its_measured_constants() {
    let half = TwiceJ::from_doubled(1);
    // Hyperfine intervals with I = J = 1/2 are A. 1s: Hellwig et al. (1970); 2s: Kolachevsky et al. (2009); 2p from
    // theory, Brodsky and Parsons (1968): all from memory.
    let measured = [("1s", 1_420.405_752), ("2s", 177.556_83), ("2p", 59.169_6)];
    let mut worst = 0.0_f64;
    for (name, expected) in measured {
        let unit = one_electron(1, PROTON, orbital(name), half).expect("in closed form");
        worst = worst.max((unit.a * PROTON_G / expected - 1.0).abs());
    }
    report(
        "splitting_estimates_hydrogen",
        Row {
            quantity: "A of hydrogen 1s, 2s, 2p₁⸝₂ in closed form".into(),
            cases: measured.len(),
            worst,
            tolerance: 2e-4,
            measure: "relative".into(),
            source: "measured and, for 2p, theory; from memory".into(),
        },
    );
}

#[test]
fn a_lone_electron_meets_the_closed_forms() {
    // Without relativity everything is exact: Fermi's contact term and ⟨r⁻³⟩.
    let (mut plain_worst, mut cases) = (0.0_f64, 0);
    let alpha = FINE_STRUCTURE.value;
    let hartree = HARTREE_WAVENUMBER.value * MHZ_PER_WAVENUMBER;
    let magnetic = alpha * alpha / (2.0 * PROTON) * hartree;
    let electric = hartree * 1e-28 / (BOHR_RADIUS.value * BOHR_RADIUS.value);
    let g = ELECTRON_G.value;
    for (name, n, l) in [
        ("1s", 1, 0),
        ("3s", 3, 0),
        ("2p", 2, 1),
        ("3d", 3, 2),
        ("4f", 4, 3),
    ] {
        let levels = spectrum(&plain(case(7, 15, 0, &[name])));
        let (n, l) = (f64::from(n), f64::from(l));
        let cube = (7.0 / n) * (7.0 / n) * (7.0 / n);
        for two_j in [(2.0 * l - 1.0) as i32, (2.0 * l + 1.0) as i32] {
            if two_j < 1 {
                continue;
            }
            let j = f64::from(two_j) / 2.0;
            let square = j * (j + 1.0);
            let (a, b) = if l == 0.0 {
                (magnetic * 8.0 / 3.0 * cube * g / 2.0, 0.0)
            } else {
                let inverse = cube / (l * (l + 0.5) * (l + 1.0));
                // ℓ·j, and what is left of ℓ(ℓ+1) for the spin.
                let orbit = (square + l * (l + 1.0) - 0.75) / 2.0;
                let spin = l * (l + 1.0) - orbit;
                let b = electric * inverse * (2.0 * j - 1.0) / (2.0 * j + 2.0);
                (magnetic * inverse * (orbit + g / 2.0 * spin) / square, b)
            };
            let found = of_level(&levels, two_j);
            plain_worst = plain_worst.max((found.a / a - 1.0).abs());
            if b > 0.0 {
                plain_worst = plain_worst.max((found.b / b - 1.0).abs());
            } else {
                assert!(found.b.abs() < 1e-9 * a, "{name} {two_j}: B = {}", found.b);
            }
            cases += 1;
        }
    }
    report(
        "splitting_estimates_closed_forms",
        Row {
            quantity: "A and B of one electron without relativity, s to f".into(),
            cases,
            worst: plain_worst,
            tolerance: 1e-8,
            measure: "relative".into(),
            source:
                "Fermi's contact term; ℓ(ℓ+1)/[j(j+1)] ⟨r⁻³⟩, (2j−1)/(2j+2) ⟨r⁻³⟩ (Armstrong 1971)"
                    .into(),
        },
    );
}

#[test]
fn a_lone_electron_has_dirac_constants() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    for z in [10, 30, 55, 80] {
        for (name, l) in [("1s", 0), ("2s", 0), ("2p", 1), ("3p", 1), ("3d", 2)] {
            let levels = spectrum(&case(z, 2, 0, &[name]));
            for two_j in [2 * l - 1, 2 * l + 1] {
                if two_j < 1 {
                    continue;
                }
                let found = of_level(&levels, two_j);
                let j = TwiceJ::from_doubled(two_j);
                let exact = one_electron(z, 1e12, orbital(name), j).expect("a closed form");
                let off = (found.a / exact.a - 1.0).abs();
                worst = worst.max(off);
                cases += 1;
            }
        }
    }
    report(
        "splitting_estimates_dirac",
        Row {
            quantity:
                "A of one electron with relativity, Z = 10 to 80; the nucleus is spread in ours"
                    .into(),
            cases,
            worst,
            tolerance: 0.05,
            measure: "relative".into(),
            source:
                "closed form of Dirac's functions, Shabaev, J. Phys. B 27, 5825 (1994), from memory"
                    .into(),
        },
    );
}

/// A published constant: isotope, core, configuration, 2J, A and B in MHz, whether it is nothing but core
/// polarisation.
type Known = (u8, u16, u8, &'static str, i32, f64, Option<f64>);

/// All from memory. Alkalis: Arimondo, Inguscio and Violino, Rev. Mod. Phys. 49, 31 (1977). Others: Lindgren and Rosén,
/// Case Stud. At. Phys. 4, 93 (1974) and the atomic-beam work that it names; ions: traps.
const KNOWN: &[Known] = &[
    (3, 7, 0, "1s2 2s", 1, 401.752, None),
    (3, 7, 0, "1s2 2p", 1, 45.914, None),
    (11, 23, 10, "3s", 1, 885.813, None),
    (11, 23, 10, "3p", 1, 94.4, None),
    (11, 23, 10, "3p", 3, 18.5, Some(2.7)),
    (19, 39, 18, "4s", 1, 230.860, None),
    (19, 39, 18, "4p", 1, 28.9, None),
    (19, 39, 18, "4p", 3, 6.09, Some(2.8)),
    (37, 87, 36, "5s", 1, 3417.341, None),
    (37, 87, 36, "5p", 1, 408.3, None),
    (37, 87, 36, "5p", 3, 84.7, Some(12.5)),
    (55, 133, 54, "6s", 1, 2298.158, None),
    (55, 133, 54, "6p", 1, 291.9, None),
    (55, 133, 54, "6p", 3, 50.3, None),
    (4, 9, 0, "1s2 2s", 1, -625.009, None),
    (12, 25, 10, "3s", 1, -596.254, None),
    (20, 43, 18, "4s", 1, -806.402, None),
    (56, 137, 54, "6s", 1, 4018.871, None),
    (80, 199, 54, "4fE 5dA 6s", 1, 40_507.35, None),
    (29, 63, 18, "3dA 4s", 1, 5866.91, None),
    (79, 197, 54, "4fE 5dA 6s", 1, 3049.66, None),
    (5, 11, 0, "1s2 2s2 2p", 1, 366.08, None),
    (5, 11, 0, "1s2 2s2 2p", 3, 73.35, Some(2.70)),
    (9, 19, 0, "1s2 2s2 2p5", 3, 2009.99, None),
    (8, 17, 0, "1s2 2s2 2p4", 4, -218.57, Some(-10.44)),
    (13, 27, 10, "3s2 3p", 1, 502.03, None),
    (13, 27, 10, "3s2 3p", 3, 94.28, Some(18.92)),
    (17, 35, 10, "3s2 3p5", 3, 205.05, Some(54.87)),
    (31, 69, 18, "3dA 4s2 4p", 1, 1338.8, None),
    (31, 69, 18, "3dA 4s2 4p", 3, 190.79, Some(62.52)),
    (49, 115, 36, "4dA 5s2 5p", 1, 2281.95, None),
    (49, 115, 36, "4dA 5s2 5p", 3, 242.17, Some(449.55)),
    (81, 205, 54, "4fE 5dA 6s2 6p", 1, 21_310.8, None),
    (21, 45, 18, "3d 4s2", 3, 269.56, Some(-26.35)),
    (21, 45, 18, "3d 4s2", 5, 109.03, Some(-37.31)),
    (23, 51, 18, "3d3 4s2", 3, 560.06, None),
    (27, 59, 18, "3d7 4s2", 9, 450.28, None),
    (39, 89, 36, "4d 5s2", 3, -57.217, None),
    (57, 139, 54, "5d 6s2", 3, 141.196, Some(44.78)),
];

/// Constants that are nothing but core polarisation, where the estimate has next to nothing.
const LIMIT: &[Known] = &[
    (7, 14, 0, "1s2 2s2 2p3", 3, 10.451, None),
    (25, 55, 18, "3d5 4s2", 5, -72.42, None),
];

/// `3dA` is 3d¹⁰, `4fE` 4f¹⁴: one figure each in the lists above.
fn written(text: &str) -> String {
    text.replace('A', "10").replace('E', "14")
}

/// A and B with the nucleus of the table; with `polarised` the full shells below a lone outer electron are polarised
/// by its polarisability, cut off at their largest ⟨r⟩.
fn found(&(z, mass, core, text, two_j, ..): &Known, polarised: bool) -> Option<(f64, f64)> {
    let mut known = case(z, mass, core, &[&written(text)]);
    if polarised {
        let (outer, inner) = known.configurations[0].split_last().expect("a subshell");
        let is_lone = outer.electrons() == 1 && inner.iter().all(|s| !s.is_open());
        let is_next = inner.iter().all(|s| s.orbital().n() < outer.orbital().n());
        let electrons = inner.iter().map(|s| s.electrons()).sum();
        let alpha = polarisability(z, electrons).filter(|_| is_lone && is_next)?;
        let bare = field(&Atom::relativistic(z, inner.to_vec(), mass)).expect("the core");
        let core: Vec<_> = inner.iter().map(|s| s.orbital()).collect();
        let radius = bare.core_radius(&core);
        known.polarisation = Some(Polarisation {
            alpha,
            radius,
            core,
        });
    }
    let unit = of_level(&spectrum(&known), two_j);
    let nucleus = isotope(z, mass).expect("an isotope of the table");
    let g = nucleus.g.expect("a moment");
    Some((unit.a * g, unit.b * nucleus.quadrupole.unwrap_or(0.0)))
}

#[test]
fn published_constants_are_met_within_what_the_answer_says() {
    let mut table = Listing::new(
        "Estimated hyperfine constants",
        "MHz, one configuration, relativistic radial functions, nothing fitted; last with the core polarised, where a lone electron is outside it. Published values from memory: Arimondo, Inguscio and Violino (1977) for alkalis; Lindgren and Rosén (1974) and the atomic-beam and trap work they name for others. The last two are core polarisation alone and counted nowhere.",
        &[
            "isotope and level",
            "A estimated",
            "A published",
            "off, %",
            "B estimated",
            "B published",
            "off, %",
            "A, core polarised",
            "off, %",
        ],
    );
    let (mut of_a, mut of_b) = (Vec::new(), Vec::new());
    // Where the core can be polarised: without and with.
    let (mut bare, mut polarised) = (Vec::new(), Vec::new());
    let all = KNOWN.iter().map(|known| (known, true));
    for (known, counted) in all.chain(LIMIT.iter().map(|known| (known, false))) {
        let (z, mass, _, text, two_j, a, b) = *known;
        let (a_found, b_found) = found(known, false).expect("always");
        let off = |found: f64, known: f64| 100.0 * (found / known - 1.0);
        let off_b = b.map(|b| off(b_found, b));
        let better = found(known, true).map(|(a, _)| a);
        let symbol = rungline_core::elements::symbol(z).expect("an element");
        let shown = |value: Option<f64>, digits: usize| {
            value.map_or("–".into(), |v| format!("{v:.digits$}"))
        };
        table.rows.push(vec![
            format!(
                "{mass}{symbol} {} J = {}",
                written(text),
                TwiceJ::from_doubled(two_j)
            ),
            format!("{a_found:.2}"),
            format!("{a:.2}"),
            format!("{:.0}", off(a_found, a)),
            shown(b.map(|_| b_found), 2),
            shown(b, 2),
            shown(off_b, 0),
            shown(better, 2),
            shown(better.map(|found| off(found, a)), 0),
        ]);
        if counted {
            of_a.push(off(a_found, a));
            of_b.extend(off_b);
            if let Some(better) = better {
                bare.push(off(a_found, a));
                polarised.push(off(better, a));
            }
        } else {
            // The limit that the answer names: next to nothing of it is there.
            assert!(a_found.abs() < 0.1 * a.abs(), "{text}: {a_found}");
        }
    }
    list("splitting_estimates", &table);
    let ((middle_a, worst_a), (middle_b, worst_b)) =
        (median_and_largest(&of_a), median_and_largest(&of_b));
    let (without, with) = (median_and_largest(&bare), median_and_largest(&polarised));
    // The answer says these numbers.
    let round = |value: f64| value.round();
    let (a, b) = (of_a.len(), of_b.len());
    assert_eq!(
        OFF,
        format!(
            "Estimates of A were off by {} % in the median of {a} published values, by {} % at most; those of B by {} % of {b}, {} % at most.",
            round(middle_a),
            round(worst_a),
            round(middle_b),
            round(worst_b)
        )
    );
    let says = format!(
        "from {} % too small to {} %",
        round(without.0),
        round(with.0)
    );
    assert!(POLARISED.contains(&says), "{says}");
    // Too small they all are.
    assert!(bare.iter().all(|off| *off < 0.0) && polarised.iter().all(|off| *off < 0.0));
    for (name, quantity, cases, value, tolerance) in [
        (
            "splitting_estimates_a",
            "A estimated, one configuration: median departure",
            of_a.len(),
            middle_a,
            25.0,
        ),
        (
            "splitting_estimates_a_worst",
            "A estimated, one configuration: largest departure",
            of_a.len(),
            worst_a,
            100.0,
        ),
        (
            "splitting_estimates_b",
            "B estimated, one configuration: median departure",
            of_b.len(),
            middle_b,
            25.0,
        ),
        (
            "splitting_estimates_b_worst",
            "B estimated, one configuration: largest departure",
            of_b.len(),
            worst_b,
            60.0,
        ),
        (
            "splitting_estimates_polarised",
            "A estimated with a polarised core: median departure",
            polarised.len(),
            with.0,
            25.0,
        ),
    ] {
        report(
            name,
            Row {
                quantity: quantity.into(),
                cases,
                worst: value,
                tolerance,
                measure: "percent".into(),
                source: "from memory: Arimondo, Inguscio and Violino, Rev. Mod. Phys. 49, 31 (1977); Lindgren and Rosén (1974) and the work they name".into(),
            },
        );
    }
}

/// Levels whose states with M = J are one determinant: A J and B are sums over its electrons.
#[test]
fn open_shells_add_up_where_one_determinant_is_all() {
    let alpha = FINE_STRUCTURE.value;
    let hartree = HARTREE_WAVENUMBER.value * MHZ_PER_WAVENUMBER;
    let magnetic = alpha * alpha / (2.0 * PROTON) * hartree;
    let electric = hartree * 1e-28 / (BOHR_RADIUS.value * BOHR_RADIUS.value);
    let half_g = ELECTRON_G.value / 2.0;
    // Electrons with spin up by ℓ and m; the level's 2J.
    type Stretched = (u8, &'static str, &'static [(&'static str, i32)], i32);
    const CASES: [Stretched; 5] = [
        (20, "3d 4s", &[("3d", 2), ("4s", 0)], 6),
        (22, "3d2 4s", &[("3d", 2), ("3d", 1), ("4s", 0)], 9),
        (21, "3d 4s 4p", &[("3d", 2), ("4s", 0), ("4p", 1)], 9),
        (
            24,
            "3d2 4s 4p",
            &[("3d", 2), ("3d", 1), ("4s", 0), ("4p", 1)],
            12,
        ),
        (22, "3d 4f", &[("3d", 2), ("4f", 3)], 12),
    ];
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (z, text, electrons, two_j) in CASES {
        let own = Case {
            scale: Scale {
                zeta: 0.0,
                ..Scale::default()
            },
            ..plain(case(z, 2 * u16::from(z), 18, &[text]))
        };
        let spectrum = spectrum(&own);
        let run = spectrum.run(0).expect("radial functions");
        let (mut a, mut b) = (0.0, 0.0);
        for &(name, m) in electrons {
            let function = run.orbital(orbital(name)).expect("occupied");
            let (l, m) = (f64::from(orbital(name).l()), f64::from(m));
            match run.expectation(function, -3) {
                // N_z = m + 2 m_s ⟨C²₀⟩, ⟨C²₀⟩ = [ℓ(ℓ+1) − 3m²]/[(2ℓ−1)(2ℓ+3)].
                Some(inverse) => {
                    let mean = (l * (l + 1.0) - 3.0 * m * m) / ((2.0 * l - 1.0) * (2.0 * l + 3.0));
                    a += inverse * (m + half_g * mean);
                    b -= 2.0 * inverse * mean;
                }
                None => {
                    let slope = run.p_at(function, 1e-9) / 1e-9;
                    a += half_g * slope * slope / 3.0;
                }
            }
        }
        // The lowest level of this J has the largest spin; the two f and d spins are all up.
        let found = of_level(&spectrum, two_j);
        let j = f64::from(two_j) / 2.0;
        worst = worst.max((found.a / (magnetic * a / j) - 1.0).abs());
        worst = worst.max((found.b / (electric * b) - 1.0).abs());
        cases += 2;
    }
    report(
        "splitting_estimates_determinants",
        Row {
            quantity: "A and B of levels that are one determinant, two to four open subshells"
                .into(),
            cases,
            worst,
            tolerance: 1e-6,
            measure: "relative".into(),
            source: "own sums over the determinant's electrons".into(),
        },
    );
}

#[test]
fn a_sheet_estimates_what_is_not_entered() {
    let sheet = |nucleus: Value| {
        json!({"rungline": 1, "species": "87Rb", "configurations": ["5s", "5p"], "nucleus": nucleus,
               "line": {"upper": "5p 2P3/2", "lower": "5s 2S1/2"}})
    };
    let off = answer(&sheet(json!({})), "splitting");
    assert_eq!(off["estimate"]["included"], false);
    assert_eq!(off["estimate"]["way"]["path"], "/nucleus/estimate");
    let on = answer(&sheet(json!({"estimate": true})), "splitting");
    assert_eq!(on["estimate"]["included"], true);
    let levels = rows(&on["nucleus"], "levels");
    let of = |label: &str| {
        levels
            .iter()
            .find(|l| l["label"] == label)
            .expect("the level")
    };
    let upper = of("5p 2P3/2");
    assert_eq!(upper["estimated"], "A, B");
    assert_eq!(upper["kind"], "computed");
    // As from the kernel: 43.19 and 5.93 MHz for one configuration; A published 84.7185.
    assert!((30.0..60.0).contains(&number(upper, "A_MHz")));
    assert!((4.0..9.0).contains(&number(upper, "B_MHz")));
    assert_eq!(of("5s 2S1/2")["B_MHz"], Value::Null);
    assert!(
        on["say_plain"]
            .as_str()
            .expect("a sentence")
            .contains("A and B estimated")
    );
    let says = |answer: &Value, words: &str| {
        rows(answer, "limits")
            .iter()
            .any(|l| l.as_str().is_some_and(|l| l.contains(words)))
    };
    assert!(says(&on, OFF));
    assert!(!rows(&on, "resonances").is_empty());
    // What is entered wins; the rest stays estimated.
    let both = answer(
        &sheet(json!({"estimate": true, "magnetic_dipole": {"5p 2P3/2": "84.7185 MHz"}})),
        "splitting",
    );
    let levels = rows(&both["nucleus"], "levels");
    let upper = levels
        .iter()
        .find(|l| l["label"] == "5p 2P3/2")
        .expect("the level");
    assert_eq!(
        (&upper["A_MHz"], &upper["kind"]),
        (&json!(84.7185), &json!("entered"))
    );
    assert_eq!(upper["estimated"], "B");
    // Another spin is another nucleus: its g is typed, its Q not known.
    let typed = answer(
        &sheet(json!({"estimate": true, "spin": "5/2", "g_I": "0.5"})),
        "splitting",
    );
    assert!(says(&typed, "No estimate of B: the quadrupole moment"));
    let levels = rows(&typed["nucleus"], "levels");
    assert!(levels.iter().all(|l| l["estimated"] == "A"));
    // Every isotope of a mixture, each with its own moment.
    let mixture = json!({"rungline": 1, "species": "Rb", "configurations": ["5s"], "nucleus": {"estimate": true, "spin": "3/2"},
        "isotopes": [{"isotope": "85Rb"}, {"isotope": "87Rb"}]});
    let mixed = answer(&mixture, "splitting");
    let of = |place: usize| number(&mixed["isotopes"][place]["levels"][0], "A_MHz");
    let ratio = isotope(37, 87).and_then(|i| i.g).expect("g")
        / isotope(37, 85).and_then(|i| i.g).expect("g");
    assert!((of(1) / of(0) / ratio - 1.0).abs() < 1e-12);
}

#[test]
fn hydrogen_in_a_sheet_has_its_hyperfine_structure() {
    let sheet = json!({"rungline": 1, "species": "1H", "configurations": ["1s"], "nucleus": {"estimate": true}});
    let found = answer(&sheet, "splitting");
    let a = number(&found["nucleus"]["levels"][0], "A_MHz");
    assert!((a - 1420.4).abs() < 0.2, "{a}");
}

#[test]
fn elements_between_configurations_are_those_of_hydrogen() {
    let all = case(7, 15, 0, &["1s", "3s", "3d"]);
    let spectrum = spectrum(&plain(all));
    let run = |place| spectrum.run(place).expect("radial functions");
    let left = Functions::of(run(0), orbital("1s")).expect("occupied");
    // √(3/2) (2/3) R R at the nucleus, R = 2 (Z/n)^(3/2) for s.
    let with = Functions::beside((run(0), orbital("1s")), (run(1), orbital("3s"))).expect("a jump");
    let found = elements(&run(0).mesh, &left, &with, 1);
    let square: f64 = 7.0 * 7.0 / 3.0;
    let exact = f64::sqrt(1.5) * 2.0 / 3.0 * 4.0 * square * square.sqrt();
    let mut worst = (found[0].value / exact - 1.0).abs();
    // ∫ R R r² r⁻³ dr of 1s and 3d, by the trapezium rule.
    let one = Hydrogenic::new(orbital("1s"), 7.0).expect("1s");
    let other = Hydrogenic::new(orbital("3d"), 7.0).expect("3d");
    let step = 1e-4;
    let integral: f64 = (1..100_000)
        .map(|i| f64::from(i) * step)
        .map(|r| step * one.radial(r) * other.radial(r) / r)
        .sum();
    let with = Functions::beside((run(0), orbital("1s")), (run(2), orbital("3d"))).expect("a jump");
    // |⟨½‖C²‖j⟩|² over both j is 2 |⟨0‖C²‖2⟩|² = 2; each j has its share (2j+1)/10.
    for element in elements(&run(0).mesh, &left, &with, 2) {
        let share = f64::from(element.two_jp + 1) / 10.0 * 2.0;
        let off = element.value * element.value / (share * integral * integral) - 1.0;
        worst = worst.max(off.abs());
    }
    report(
        "splitting_estimates_between",
        Row {
            quantity: "contact and quadrupole elements between 1s and 3s, 3d of one electron"
                .into(),
            cases: 3,
            worst,
            tolerance: 1e-6,
            measure: "relative".into(),
            source: "closed forms of hydrogenic functions".into(),
        },
    );
}

#[test]
fn without_radial_functions_there_is_a_way_out() {
    let asked = |sheet: Value| -> Value {
        let json = serde_json::from_value(sheet).expect("a sheet");
        let text = rungline_core::sheet::answer_message(&json, "splitting");
        serde_json::from_str(&text).expect("JSON")
    };
    for sheet in [
        json!({"rungline": 1, "species": "*", "configurations": ["3p"],
            "structure": {"given": {"zeta(3p)": "11.5 cm-1"}},
            "nucleus": {"spin": "3/2", "g_I": "1.5", "estimate": true}}),
        json!({"rungline": 1, "species": "23Na", "configurations": ["3p"], "structure": {"energies": "given"},
            "nucleus": {"estimate": true}}),
        json!({"rungline": 1, "level": {"J": "1/2", "g": "2", "I": "3/2"}, "nucleus": {"estimate": true},
            "field": {"flux_density": "1 mT"}}),
    ] {
        let found = asked(sheet);
        let fault = &found["faults"][0];
        assert_eq!(fault["code"], "no-radial-functions", "{found}");
        assert_eq!(fault["path"], "/nucleus/estimate");
        assert_eq!(fault["ways"][0]["replacement"], "false");
    }
}
