//! The working of the answer on splitting by diagonalisation: formulas with this case's numbers.

use crate::constants::BOHR_MAGNETON_WAVENUMBER;
use crate::splitting::in_field::Split;

use super::answer::Working;
use super::formula::{Formula, fraction, name, number, operator, row, sub, sup};
use super::rich::{Kind, Rich};
use super::splitting_rows::ComponentRow;
use super::splitting_words::Told;

fn matrix_element(bra: &str, operator_name: Formula, ket: &str) -> Formula {
    row([
        operator("⟨"),
        name(bra),
        operator("|"),
        operator_name,
        operator("|"),
        name(ket),
        operator("⟩"),
    ])
}

/// The formulas with this case's numbers.
pub fn working(told: &Told) -> Vec<Working> {
    let mut steps = vec![hamiltonian(told)];
    if told.has_spin() {
        steps.push(hyperfine());
    }
    if told.components.is_empty() {
        return steps;
    }
    let largest = told.components.iter().max_by(|a, b| {
        a.offset
            .total_cmp(&b.offset)
            .then(b.strength.total_cmp(&a.strength))
    });
    if let Some(case) = largest {
        steps.extend(component(told, case));
    }
    steps.extend(effective(told));
    steps
}

fn hamiltonian(told: &Told) -> Working {
    let mut formula = vec![
        name("H"),
        operator("="),
        sub(name("E"), name("J")),
        operator("+"),
        sub(name("μ"), name("B")),
        name("B"),
        operator("("),
        sub(name("L"), name("z")),
        operator("+"),
        sub(name("g"), name("s")),
        sub(name("S"), name("z")),
        operator(")"),
    ];
    if told.has_spin() {
        formula.extend([
            operator("+"),
            sub(name("H"), name("hfs")),
            operator("−"),
            sub(name("μ"), name("N")),
            sub(name("g"), name("I")),
            name("B"),
            sub(name("I"), name("z")),
        ]);
    }
    if told.diamagnetic.is_some_and(|d| d.included) {
        formula.extend([
            operator("+"),
            fraction(
                row([sup(name("e"), number(2)), sup(name("B"), number(2))]),
                row([number(8), sub(name("m"), name("e"))]),
            ),
            operator("Σ"),
            sup(name("r"), number(2)),
            sup(name("sin"), number(2)),
            name("θ"),
        ]);
    }
    let passes = told.ready.passes.iter();
    let sizes = passes.flat_map(|pass| {
        let sets = told.ready.sets.iter().zip(&pass.nuclei);
        sets.map(|(set, nucleus)| Split::size(&set.manifold, nucleus.as_ref()))
    });
    let (states, largest) = sizes.fold((0, 0), |(states, largest), size| {
        (states + size.states, largest.max(size.largest))
    });
    Working::new(
        "States in the field, one matrix for each M",
        row(formula),
        "Condon & Shortley, The Theory of Atomic Spectra (1935), ch. XVI; Cowan, The Theory of Atomic Structure and Spectra (1981), ch. 17; constants CODATA 2022",
    )
    .numbers(
        row([
            fraction(sub(name("μ"), name("B")), row([name("h"), name("c")])),
            name("B"),
            operator("="),
            number(BOHR_MAGNETON_WAVENUMBER.value),
            operator("×"),
            number(told.tesla()),
        ]),
        Rich::new()
            .number(
                BOHR_MAGNETON_WAVENUMBER.value * told.tesla(),
                Some("cm-1"),
                Kind::Computed,
            )
            .say(format!("; {states} states, at most {largest} of one M")),
    )
}

fn hyperfine() -> Working {
    let product = |a: &str| {
        row([
            name(a),
            operator("("),
            name(a),
            operator("+"),
            number(1),
            operator(")"),
        ])
    };
    Working::new(
        "Each level with its nucleus without field",
        row([
            name("E"),
            operator("="),
            fraction(name("A"), number(2)),
            name("K"),
            operator("+"),
            name("B"),
            fraction(
                row([
                    fraction(number(3), number(4)),
                    product("K"),
                    operator("−"),
                    product("I"),
                    product("J"),
                ]),
                row([
                    number(2),
                    name("I"),
                    operator("("),
                    number(2),
                    name("I"),
                    operator("−"),
                    number(1),
                    operator(")"),
                    name("J"),
                    operator("("),
                    number(2),
                    name("J"),
                    operator("−"),
                    number(1),
                    operator(")"),
                ]),
            ),
            operator(","),
            name("K"),
            operator("="),
            product("F"),
            operator("−"),
            product("I"),
            operator("−"),
            product("J"),
        ]),
        "Casimir, On the Interaction between Atomic Nuclei and Electrons (1936); Kopfermann, Nuclear Moments (1958), § 5",
    )
}

fn component(told: &Told, case: &ComponentRow) -> Vec<Working> {
    let state = |wanted: &str| told.states.iter().find(|state| state.name == wanted);
    let (Some(up), Some(low)) = (state(&case.upper.0), state(&case.lower.0)) else {
        return Vec::new();
    };
    let of_case = format!(" for {} to {}", case.upper.0, case.lower.0).replace('-', "−");
    let (Some(above), Some(below)) = (up.energy, low.energy) else {
        return Vec::new();
    };
    let mut formula = vec![
        operator("Δ"),
        name("σ"),
        operator("="),
        sub(name("E"), name("upper")),
        operator("−"),
        sub(name("E"), name("lower")),
    ];
    let mut numbers = vec![number(above), operator("−"), bracketed(below)];
    let centre = told.line.and_then(|line| line.centre);
    if let Some(centre) = centre {
        formula.extend([operator("−"), sub(name("σ"), number(0))]);
        numbers.extend([operator("−"), bracketed(centre)]);
    }
    if case.moved != 0.0 {
        formula.extend([operator("+"), sub(name("δ"), name("isotope"))]);
        numbers.extend([operator("+"), bracketed(case.moved)]);
    }
    let mut steps = Vec::new();
    let offset = Working::new(
        "Offset of a component from the line's centre without field",
        row(formula),
        "Ritz's combination of two states; the centre of several lines is weighted with their strengths",
    );
    steps.push(match centre {
        Some(_) => offset.numbers(
            row(numbers),
            Rich::new()
                .number(case.offset, Some("cm-1"), Kind::Computed)
                .say(of_case.clone()),
        ),
        None => offset,
    });
    let squared = sup(
        matrix_element("u", sup(name("T"), name("k")), "l"),
        number(2),
    );
    steps.push(
        Working::new(
            "Strength of a component from both eigenvectors",
            row([
                name("s"),
                operator("="),
                fraction(squared.clone(), row([operator("Σ"), squared])),
            ]),
            "Wigner–Eckart theorem; Condon & Shortley (1935), ch. XVI",
        )
        .numbers(
            number(case.strength),
            Rich::new()
                .number(case.strength, None, Kind::Computed)
                .say(of_case),
        ),
    );
    steps.push(Working::new(
        "What is seen at the angle θ, the mean over all directions being 1",
        row([
            sub(name("w"), name("π")),
            operator("="),
            fraction(number(3), number(2)),
            sup(name("sin"), number(2)),
            name("θ"),
            operator(","),
            sub(name("w"), name("σ")),
            operator("="),
            fraction(number(3), number(4)),
            operator("("),
            number(1),
            operator("+"),
            sup(name("cos"), number(2)),
            name("θ"),
            operator(")"),
        ]),
        "Jackson, Classical Electrodynamics, § 9.7 and, for left and right, § 7.2; for dipole lines without polariser",
    ));
    steps
}

/// The centre of gravity of a line between two levels.
fn effective(told: &Told) -> Option<Working> {
    let line = told.line?;
    let (g, g1, g2) = (
        line.g_effective?,
        line.g_upper.unwrap_or(0.0),
        line.g_lower.unwrap_or(0.0),
    );
    let j = |side: &str| Some(told.states.iter().find(|s| s.side == Some(side))?.j.value());
    let (j1, j2) = (j("upper")?, j("lower")?);
    let (mut sum, mut weights) = (0.0, 0.0);
    for component in told
        .components
        .iter()
        .filter(|c| c.polarisation == "sigma+")
    {
        sum += component.strength * component.lorentz?;
        weights += component.strength;
    }
    let said = match weights > 0.0 {
        true => Rich::new()
            .number(g, None, Kind::Computed)
            .say("; the σ+ components of this field have their centre at ")
            .number(sum / weights, Some("mu_B B"), Kind::Computed),
        false => Rich::new().number(g, None, Kind::Computed),
    };
    let square = |which: &str| {
        row([
            sub(name("J"), name(which)),
            operator("("),
            sub(name("J"), name(which)),
            operator("+"),
            number(1),
            operator(")"),
        ])
    };
    let parts = |g1: Formula, g2: Formula, inner: Formula| {
        row([
            fraction(number(1), number(2)),
            operator("("),
            g1.clone(),
            operator("+"),
            g2.clone(),
            operator(")"),
            operator("+"),
            fraction(number(1), number(4)),
            operator("("),
            g1,
            operator("−"),
            g2,
            operator(")"),
            operator("["),
            inner,
            operator("]"),
        ])
    };
    Some(
        Working::new(
            "Effective g of the line's centre of gravity",
            row([
                sub(name("g"), name("eff")),
                operator("="),
                parts(
                    sub(name("g"), name("1")),
                    sub(name("g"), name("2")),
                    row([square("1"), operator("−"), square("2")]),
                ),
            ]),
            "Shenstone & Blair, Phil. Mag. 8, 765 (1929)",
        )
        .numbers(
            parts(
                number(g1),
                bracketed(g2),
                row([
                    number(j1 * (j1 + 1.0)),
                    operator("−"),
                    number(j2 * (j2 + 1.0)),
                ]),
            ),
            said,
        ),
    )
}

/// (value), so that a difference with a negative number can be read.
fn bracketed(value: f64) -> Formula {
    row([operator("("), number(value), operator(")")])
}
