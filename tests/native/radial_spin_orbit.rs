//! ζ, fine-structure intervals and resonance lines, computed and observed.
//!
//! Observed: `tests/vectors/resonance_lines_fvalues.csv`, parsed from linetools 0.3.2 (BSD-3-Clause);
//! Morton, ApJS 149, 205 (2003) and 130, 403 (2000). Ca⁺ 4p, 222.89 cm⁻¹, is from memory.

use rungline_core::configuration::{Orbital, Subshell, l_of_letter};
use rungline_core::constants::HARTREE_WAVENUMBER;
use rungline_core::radial::hartree_fock::{Atom, Polarisation, Solution, polarisability, solve};
use rungline_core::radial::multipole::between;
use rungline_core::radial::nucleus::stable_mass_number;
use rungline_tests::{Row, report, vector};

fn subshells(text: &str) -> Vec<Subshell> {
    text.split(' ')
        .map(|word| {
            let letter = word.find(|c: char| c.is_ascii_alphabetic()).unwrap();
            let l = l_of_letter(word[letter..].chars().next().unwrap()).unwrap();
            let orbital = Orbital::new(word[..letter].parse().unwrap(), l).unwrap();
            Subshell::new(orbital, word[letter + 1..].parse().unwrap_or(1)).unwrap()
        })
        .collect()
}

const NEON: &str = "1s2 2s2 2p6";
const ARGON: &str = "1s2 2s2 2p6 3s2 3p6";
const KRYPTON: &str = "1s2 2s2 2p6 3s2 3p6 3d10 4s2 4p6";
const XENON: &str = "1s2 2s2 2p6 3s2 3p6 3d10 4s2 4p6 4d10 5s2 5p6";
const MERCURY: &str = "1s2 2s2 2p6 3s2 3p6 3d10 4s2 4p6 4d10 4f14 5s2 5p6 5d10 6s2";

/// One electron outside a core.
struct Case {
    name: &'static str,
    z: u8,
    core: &'static str,
    n: u8,
}

const CASES: [Case; 6] = [
    Case {
        name: "Na 3p",
        z: 11,
        core: NEON,
        n: 3,
    },
    Case {
        name: "K 4p",
        z: 19,
        core: ARGON,
        n: 4,
    },
    Case {
        name: "Rb 5p",
        z: 37,
        core: KRYPTON,
        n: 5,
    },
    Case {
        name: "Cs 6p",
        z: 55,
        core: XENON,
        n: 6,
    },
    Case {
        name: "Ca+ 4p",
        z: 20,
        core: ARGON,
        n: 4,
    },
    Case {
        name: "Tl 6p",
        z: 81,
        core: MERCURY,
        n: 6,
    },
];

/// α of the core.
fn alpha(case: &Case) -> Option<f64> {
    let electrons = subshells(case.core).iter().map(|s| s.electrons()).sum();
    polarisability(case.z, electrons)
}

fn run(case: &Case, l: u8, polarised: bool) -> Solution {
    let mut all = subshells(case.core);
    let core: Vec<Orbital> = all.iter().map(|s| s.orbital()).collect();
    all.push(Subshell::new(Orbital::new(case.n, l).unwrap(), 1).unwrap());
    let mut atom = Atom::relativistic(case.z, all, stable_mass_number(case.z));
    if polarised {
        // The cut-off is the mean radius of the core's outermost orbital.
        let alone = Atom::relativistic(case.z, subshells(case.core), stable_mass_number(case.z));
        let radius = solve(&alone, &mut |_| true).unwrap().core_radius(&core);
        let alpha = alpha(case).unwrap();
        atom.polarisation = Some(Polarisation {
            alpha,
            radius,
            core,
        });
    }
    solve(&atom, &mut |_| true)
        .unwrap_or_else(|failure| panic!("{}: {:?}", case.name, failure.problem))
}

/// A line: energies in cm⁻¹.
struct Line {
    lower: f64,
    upper: f64,
    upper_weight: f64,
    f: f64,
}

/// The lines of one element.
fn lines(element: &str, stage: &str) -> Vec<Line> {
    let text = vector("resonance_lines_fvalues.csv");
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(text.as_bytes());
    reader
        .records()
        .map(|row| row.unwrap())
        .filter(|row| &row[1] == element && &row[2] == stage)
        .map(|row| {
            let number = |i: usize| row[i].trim_end_matches('.').parse().unwrap();
            Line {
                lower: number(8),
                upper: number(9),
                upper_weight: number(11),
                f: number(13),
            }
        })
        .collect()
}

/// The observed np interval over 3/2.
fn observed_zeta(case: &Case) -> f64 {
    let interval = match case.z {
        20 => 222.89,
        81 => lines("Tl", "I")
            .iter()
            .map(|line| line.lower)
            .fold(0.0, f64::max),
        _ => {
            let two = resonance(case);
            two[1].upper - two[0].upper
        }
    };
    interval / 1.5
}

/// The two components of the first resonance line.
fn resonance(case: &Case) -> Vec<Line> {
    let element = case.name.split(' ').next().unwrap();
    lines(element, "I").into_iter().take(2).collect()
}

#[test]
fn zeta_beside_the_observed_intervals() {
    for case in &CASES {
        let observed = observed_zeta(case);
        for polarised in [false, true] {
            if polarised && alpha(case).is_none() {
                continue;
            }
            let found = run(case, 1, polarised);
            let orbital = found.orbital(Orbital::new(case.n, 1).unwrap()).unwrap();
            let unit = HARTREE_WAVENUMBER.value;
            let zeta = found.zeta(orbital).unwrap() * unit;
            let central = found.zeta_central(orbital).unwrap() * unit;
            let (mark, kind, tolerance) = match polarised {
                // What the core's polarisation adds is missing; it is largest in the alkali atoms.
                false => ("", "", 0.45),
                true => ("_polarised", ", core polarised", 0.32),
            };
            let file = case.name.to_lowercase().replace([' ', '+'], "");
            report(
                &format!("radial_zeta_{file}{mark}"),
                Row {
                    quantity: format!(
                        "ζ of {}{kind}: {zeta:.2} with two-electron screening, {central:.2} in the central field, observed interval / 1.5 = {observed:.2} cm⁻¹",
                        case.name
                    ),
                    cases: 1,
                    worst: (zeta / observed - 1.0).abs(),
                    tolerance,
                    measure: "relative".into(),
                    source: match case.z {
                        20 => "interval from memory".into(),
                        _ => "Morton (2000, 2003) by linetools 0.3.2 (BSD-3-Clause)".into(),
                    },
                },
            );
        }
    }
}

#[test]
fn resonance_lines_of_the_alkali_atoms() {
    for case in CASES.iter().take(4) {
        let lines = resonance(case);
        // f = (2/3) ΔE |⟨ns|r|np⟩|² for s → p, over both components.
        let weights: f64 = lines.iter().map(|l| l.upper_weight).sum();
        let energy = lines.iter().map(|l| l.upper_weight * l.upper).sum::<f64>() / weights;
        let strength: f64 = lines.iter().map(|l| l.f).sum();
        let observed = (1.5 * strength / (energy / HARTREE_WAVENUMBER.value)).sqrt();
        let file = case.name.to_lowercase().replace(' ', "");
        for polarised in [false, true] {
            let (s, p) = (run(case, 0, polarised), run(case, 1, polarised));
            let (from, to) = (
                Orbital::new(case.n, 0).unwrap(),
                Orbital::new(case.n, 1).unwrap(),
            );
            let jump = between(1, (&s, from), (&p, to)).unwrap();
            let wavenumber = (p.total_energy - s.total_energy) * HARTREE_WAVENUMBER.value;
            let (mark, kind, of_energy, of_integral) = match polarised {
                false => ("", "", 0.21, 0.17),
                true => ("_polarised", ", core polarised", 0.10, 0.06),
            };
            let source = "Morton (2000, 2003) by linetools 0.3.2 (BSD-3-Clause)";
            let row = |quantity: String, worst: f64, tolerance: f64| Row {
                quantity,
                cases: 1,
                worst,
                tolerance,
                measure: "relative".into(),
                source: source.into(),
            };
            report(
                &format!("radial_line_{file}{mark}"),
                row(
                    format!(
                        "{}s–{} wavenumber{kind}: {wavenumber:.0}, observed {energy:.0} cm⁻¹",
                        case.n, case.name
                    ),
                    (wavenumber / energy - 1.0).abs(),
                    of_energy,
                ),
            );
            report(
                &format!("radial_dipole_{file}{mark}"),
                row(
                    format!(
                        "{}s–{} dipole integral{kind}: {:.3}, from observed f {observed:.3} a₀",
                        case.n,
                        case.name,
                        jump.integral.abs()
                    ),
                    (jump.integral.abs() / observed - 1.0).abs(),
                    of_integral,
                ),
            );
        }
    }
}

#[test]
fn integrals_between_runs_know_the_other_orbitals() {
    let case = &CASES[0];
    let (s, p) = (run(case, 0, false), run(case, 1, false));
    let (from, to) = (Orbital::new(3, 0).unwrap(), Orbital::new(3, 1).unwrap());
    let there = between(1, (&s, from), (&p, to)).unwrap();
    let back = between(1, (&p, to), (&s, from)).unwrap();
    assert!((there.integral - back.integral).abs() < 1e-12);
    assert!((0.999..1.0).contains(&there.overlap) && there.largest_cross < 0.01);
    assert!((there.integral / there.bare - 1.0).abs() < 1e-3);
    let code = |result: Result<_, rungline_core::problem::Problem>| {
        result
            .map(|_: rungline_core::radial::multipole::Multipole| ())
            .unwrap_err()
            .code
    };
    assert_eq!(
        code(between(3, (&s, from), (&p, to))),
        "multipole-out-of-range"
    );
    assert_eq!(code(between(1, (&s, to), (&p, to))), "orbital-not-occupied");
    let other = Orbital::new(2, 1).unwrap();
    assert_eq!(code(between(1, (&s, other), (&p, to))), "not-a-jump");
}

#[test]
fn polarisation_faults_have_their_codes() {
    for (alpha, radius, expected) in [
        (0.0, 1.0, "polarisability-not-positive"),
        (-1.0, 1.0, "polarisability-not-positive"),
        (f64::NAN, 1.0, "polarisability-not-positive"),
        (1.0, 0.0, "polarisation-radius-not-positive"),
        (1.0, -2.0, "polarisation-radius-not-positive"),
        (1.0, f64::INFINITY, "polarisation-radius-not-positive"),
        (1.0, 0.1, "polarisation-too-strong"),
        (1e300, 1e-300, "polarisation-too-strong"),
    ] {
        let mut atom = Atom::new(11, subshells("1s2 2s2 2p6 3s1"));
        atom.polarisation = Some(Polarisation {
            alpha,
            radius,
            core: Vec::new(),
        });
        let failure = solve(&atom, &mut |_| true).unwrap_err();
        assert_eq!(failure.problem.code, expected);
    }
}
