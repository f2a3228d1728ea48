//! The sentence, the working, the kinds and the limits of the answer on orbitals.

use crate::numerics::sorted_map::SortedMap;

use crate::constants::{FINE_STRUCTURE, HARTREE_ELECTRON_VOLT, HARTREE_WAVENUMBER};

use super::answer::Working;
use super::document::Document;
use super::entry::{Content, Entry};
use super::formula::{Formula, fraction, name, number, operator, root, row, sub, sup};
use super::orbitals_case::asked;
use super::orbitals_rows::{Block, OrbitalRow};
use super::rich::{Kind, Rich, six_digits};

/// The most subshells that the sentence names.
const MOST_NAMED: usize = 3;

pub fn sentence(document: &Document, first: &Block, others: &[Block]) -> Rich {
    let mut say = document.species_rich();
    if let Some(configuration) = &first.configuration {
        say = say.say(" in ").then(&configuration.rich);
    }
    let kind = kind(first);
    say = match (&first.dirac, &first.configuration) {
        (Some(_), None) => say.say(": every orbital of the shell in closed form"),
        (Some(_), Some(_)) => say
            .say(": the electron's energy is ")
            .number(first.total_energy, Some("hartree"), kind)
            .say(if first.relativity {
                " by Dirac's equation"
            } else {
                " without relativity"
            }),
        (None, _) => say
            .say(": the average energy is ")
            .number(first.total_energy, Some("hartree"), kind)
            .say(if first.relativity {
                ", with relativity"
            } else {
                ", without relativity"
            }),
    };
    for (place, orbital) in outermost(first).iter().enumerate() {
        say = say
            .say(if place == 0 { "; " } else { ", " })
            .say(orbital.label.clone())
            .say(if place == 0 {
                " is most likely found at "
            } else {
                " at "
            })
            .number(six_digits(orbital.r_most_probable), Some("a0"), kind);
    }
    let say = say.say(".");
    match others.len() {
        0 => say,
        more => say.say(" ").count(
            more,
            "more configuration is below.",
            "more configurations are below.",
        ),
    }
}

/// The subshells that matter in a spectrum: the open ones, or the last one.
fn outermost(block: &Block) -> Vec<&OrbitalRow> {
    let open: Vec<&OrbitalRow> = block.orbitals.iter().filter(|o| o.open).collect();
    let mut named = if open.is_empty() {
        block.orbitals.last().into_iter().collect()
    } else {
        open
    };
    named.truncate(MOST_NAMED);
    named
}

/// Without relativity an electron alone has closed formulas without any measured number in them;
/// Dirac's energies need α, and the radii beside them are those without relativity.
fn kind(block: &Block) -> Kind {
    if block.dirac.is_some() && !block.relativity {
        Kind::Exact
    } else {
        Kind::Computed
    }
}

pub fn kinds(first: &Block) -> SortedMap<&'static str, Kind> {
    let own = kind(first);
    let mut kinds: SortedMap<&'static str, Kind> = [
        ("total_energy", own),
        ("virial_ratio", Kind::Computed),
        ("residual", Kind::Computed),
        ("history.residual", Kind::Computed),
        ("iterations", Kind::Exact),
        ("history.iteration", Kind::Exact),
        ("mesh", Kind::Exact),
        ("mesh.end", Kind::Computed),
        ("orbitals.n", Kind::Exact),
        ("orbitals.l", Kind::Exact),
        ("orbitals.electrons", Kind::Exact),
        ("orbitals.energy", own),
        ("orbitals.r", own),
        ("orbitals.r2", own),
        ("orbitals.r_inv", own),
        ("orbitals.r_inv2", own),
        ("orbitals.r_inv3", own),
        ("orbitals.r_most_probable", own),
        ("orbitals.zeta", Kind::Computed),
        ("orbitals.zeta_central", Kind::Computed),
        ("integrals.value", Kind::Computed),
        ("between.value", own),
        ("between.bare", own),
        ("between.overlap", own),
        ("between.largest_cross", own),
        ("nucleus.charge", Kind::Exact),
        ("nucleus.mass_number", Kind::Exact),
        ("nucleus.rms_radius", Kind::Computed),
    ]
    .into_iter()
    .collect();
    if first.polarisation.is_some() {
        kinds.insert("polarisation.alpha", Kind::Entered);
        kinds.insert("polarisation.radius", Kind::Entered);
        kinds.insert("polarisation.without", Kind::Computed);
        kinds.insert("polarisation.change", Kind::Computed);
    }
    if first.dirac.is_some() {
        kinds.insert("dirac.levels", Kind::Computed);
        kinds.insert("dirac.average", Kind::Computed);
        kinds.insert("dirac.nuclear_mass", Kind::Measured);
    }
    kinds
}

pub fn working(first: &Block) -> Vec<Working> {
    match &first.dirac {
        Some(_) => closed(first),
        None => field(first),
    }
}

fn closed(first: &Block) -> Vec<Working> {
    let mut steps = Vec::new();
    let level = first.dirac.as_ref().and_then(|dirac| dirac.levels.first());
    let orbital = first.orbitals.first();
    let (Some(level), Some(orbital)) = (level, orbital) else {
        return steps;
    };
    let charge = || name("Z");
    let square = |of: Formula| sup(of, number(2));
    let defect = |kappa: Formula| row([name("n"), operator("−"), kappa]);
    let shape = |strength: Formula, below: Formula| {
        row([
            square(name("c")),
            operator("{"),
            sup(
                row([
                    operator("["),
                    number(1),
                    operator("+"),
                    square(row([
                        operator("("),
                        fraction(strength, below),
                        operator(")"),
                    ])),
                    operator("]"),
                ]),
                row([operator("−"), fraction(number(1), number(2))]),
            ),
            operator("−"),
            number(1),
            operator("}"),
        ])
    };
    let formula = row([
        name("E"),
        operator("="),
        shape(row([charge(), name("α")]), defect(name("δ"))),
        operator(","),
        name("δ"),
        operator("="),
        name("j"),
        operator("+"),
        fraction(number(1), number(2)),
        operator("−"),
        root(row([
            square(row([
                operator("("),
                name("j"),
                operator("+"),
                fraction(number(1), number(2)),
                operator(")"),
            ])),
            operator("−"),
            square(row([operator("("), charge(), name("α"), operator(")")])),
        ])),
    ]);
    let size = level.j.value() + 0.5;
    let strength = f64::from(first.nucleus.charge) * FINE_STRUCTURE.value;
    let delta = size - (size * size - strength * strength).sqrt();
    let numbers = shape(
        number(strength),
        row([number(orbital.n), operator("−"), number(delta)]),
    );
    steps.push(
        Working::new(
            "Dirac's level",
            formula,
            "A. Sommerfeld, Ann. Phys. 356, 1 (1916); W. Gordon, Z. Phys. 48, 11 (1928); recoil in energy_finite_mass: Barker & Glover, Phys. Rev. 99, 317 (1955)",
        )
        .numbers(
            numbers,
            Rich::new()
                .number(level.energy, Some("hartree"), Kind::Computed)
                .say(format!(" for {}", level.label)),
        ),
    );
    steps.push(
        Working::new(
            "Mean radius",
            row([
                operator("⟨"),
                name("r"),
                operator("⟩"),
                operator("="),
                fraction(
                    row([
                        number(3),
                        square(name("n")),
                        operator("−"),
                        name("ℓ"),
                        operator("("),
                        name("ℓ"),
                        operator("+"),
                        number(1),
                        operator(")"),
                    ]),
                    row([number(2), charge()]),
                ),
            ]),
            "Bethe & Salpeter, Quantum Mechanics of One- and Two-Electron Atoms (1957), sect. 3; the functions are those without relativity",
        )
        .numbers(
            fraction(
                row([
                    number(3),
                    operator("×"),
                    square(number(orbital.n)),
                    operator("−"),
                    number(u32::from(orbital.l) * (u32::from(orbital.l) + 1)),
                ]),
                row([number(2), operator("×"), number(first.nucleus.charge)]),
            ),
            Rich::new()
                .number(orbital.r, Some("a0"), kind(first))
                .say(format!(" for {}", orbital.label)),
        ),
    );
    steps
}

fn field(first: &Block) -> Vec<Working> {
    let q = |a: &str| sub(name("q"), name(a));
    let slater = |letter: &str, k: Formula, of: &str| {
        row([sup(name(letter), k), operator("("), name(of), operator(")")])
    };
    let average = row([
        sub(name("E"), name("av")),
        operator("="),
        sub(operator("∑"), name("a")),
        q("a"),
        sub(name("I"), name("a")),
        operator("+"),
        sub(operator("∑"), name("a")),
        fraction(
            row([
                q("a"),
                operator("("),
                q("a"),
                operator("−"),
                number(1),
                operator(")"),
            ]),
            number(2),
        ),
        operator("["),
        slater("F", number(0), "aa"),
        operator("−"),
        sub(operator("∑"), name("k")),
        sub(name("c"), name("k")),
        slater("F", name("k"), "aa"),
        operator("]"),
        operator("+"),
        sub(operator("∑"), name("a<b")),
        q("a"),
        q("b"),
        operator("["),
        slater("F", number(0), "ab"),
        operator("−"),
        sub(operator("∑"), name("k")),
        sub(name("g"), name("k")),
        slater("G", name("k"), "ab"),
        operator("]"),
    ]);
    let mut steps = vec![Working::new(
        "Average energy of the configuration, made stationary",
        average,
        "J. C. Slater, Quantum Theory of Atomic Structure (1960), vol. 1, ch. 14; C. Froese Fischer, The Hartree–Fock Method for Atoms (1977); with relativity: Cowan & Griffin, J. Opt. Soc. Am. 66, 1010 (1976)",
    )];
    if let Some(outer) = first
        .orbitals
        .iter()
        .max_by(|a, b| a.energy.total_cmp(&b.energy))
    {
        steps.push(
            Working::new(
                "Energy to remove the outermost electron, the others held fixed",
                row([
                    sub(name("E"), name("removal")),
                    operator("≈"),
                    operator("−"),
                    name("ε"),
                ]),
                "T. Koopmans, Physica 1, 104 (1934), for the average of the configuration",
            )
            .numbers(
                row([
                    number(-outer.energy),
                    operator("×"),
                    number(HARTREE_ELECTRON_VOLT.value),
                ]),
                Rich::new()
                    .number(
                        -outer.energy * HARTREE_ELECTRON_VOLT.value,
                        Some("eV"),
                        Kind::Computed,
                    )
                    .say(format!(" for {}", outer.label)),
            ),
        );
    }
    let split = outermost(first)
        .into_iter()
        .find_map(|orbital| Some((orbital, orbital.zeta?, orbital.zeta_central?)));
    if let Some((orbital, zeta, central)) = split {
        let alpha = || sup(name("α"), number(2));
        let formula = row([
            name("ζ"),
            operator("="),
            fraction(alpha(), number(2)),
            operator("⟨"),
            fraction(number(1), name("r")),
            fraction(
                row([name("d"), sub(name("V"), name("nucleus"))]),
                row([name("d"), name("r")]),
            ),
            operator("⟩"),
            operator("−"),
            sub(operator("∑"), name("b")),
            sub(name("screening"), name("b")),
        ]);
        let bare = first.nucleus.charge;
        let plain = orbital
            .r_inv3
            .map(|cube| 0.5 * FINE_STRUCTURE.value * FINE_STRUCTURE.value * f64::from(bare) * cube);
        let mut step = Working::new(
            "Spin–orbit parameter with the screening of the other electrons",
            formula,
            "Blume & Watson, Proc. R. Soc. Lond. A 270, 127 (1962) and 271, 565 (1963)",
        );
        if let Some(plain) = plain {
            let plain = plain * HARTREE_WAVENUMBER.value;
            step = step.numbers(
                row([number(plain), operator("−"), number(plain - zeta)]),
                Rich::new()
                    .number(zeta, Some("cm-1"), Kind::Computed)
                    .say(format!(
                        " for {}; from the slope of the central field ",
                        orbital.label
                    ))
                    .number(central, Some("cm-1"), Kind::Computed),
            );
        }
        steps.push(step);
    }
    steps
}

pub fn limits(document: &Document, first: &Block, others: &[Block]) -> Vec<String> {
    let all = || std::iter::once(first).chain(others);
    let mut limits = Vec::new();
    let alone = all().any(|block| block.dirac.is_some());
    let many = all().any(|block| block.dirac.is_none());
    if alone {
        limits.push(
            "One electron: Dirac's equation for a point nucleus. Self-energy and vacuum polarisation (the Lamb shift), size and spin of the nucleus are left out; radii, their means and ζ are those of the functions without relativity, whose relative error grows like (Zα)²."
                .to_owned(),
        );
        if all().any(|block| {
            block
                .dirac
                .as_ref()
                .is_some_and(|dirac| dirac.nuclear_mass_by == "mass number")
        }) {
            limits.push(
                "The nuclear mass is the mass number in atomic mass units less the electrons; binding is left out, which moves a level by less than two parts in a million of itself."
                    .to_owned(),
            );
        }
    }
    if many {
        limits.push(
            "One set of radial functions for all levels of a configuration, made for its average energy. Where the levels lie follows from F, G and ζ."
                .to_owned(),
        );
        limits.push(
            "What electrons do beyond each other's average field (correlation) is left out. Resonance energies of the alkalis come out about 6 % (Na) to 20 % (Cs) low (from memory, of published Hartree–Fock values); a core polarisation mends most of it."
                .to_owned(),
        );
        limits.push(if first.relativity {
            "Relativity: mass–velocity and Darwin terms in the radial equation, j averaged, a nucleus of finite size and infinite mass. Left out: the Breit interaction in energies, quantum electrodynamics."
                .to_owned()
        } else {
            "Without relativity: a point nucleus of infinite mass. Inner electrons of heavy atoms are far off then."
                .to_owned()
        });
        limits.push(
            "ζ of a full subshell is that of a hole in it, with the same radial functions; between two open shells only the spherical average of the screening is counted."
                .to_owned(),
        );
        let hidden = all().any(|block| block.orbitals.iter().any(|orbital| orbital.energy >= 0.0));
        if hidden {
            limits.push("An orbital energy is not negative: with the others held fixed this electron would not be bound.".to_owned());
        }
    }
    if let Some(polarisation) = &first.polarisation {
        limits.push(format!(
            "The core polarisation is as entered, {} a0³ and {} a0; it acts on the electrons outside the core ({}) and is no computed property of this atom.",
            polarisation.alpha, polarisation.radius, polarisation.core
        ));
    }
    for entry in passed_over(document) {
        limits.push(format!(
            "{} has no electrons and is passed over here.",
            entry.label
        ));
    }
    limits
}

/// Bare shells of atoms that have more than one electron.
fn passed_over(document: &Document) -> impl Iterator<Item = &Entry> {
    document.entries.iter().filter(|entry| {
        matches!(entry.content, Content::BareShell(_)) && asked(document, entry).is_none()
    })
}
