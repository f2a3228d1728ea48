//! The sentence, the working and the limits of the answer to *Which lines?*

use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::Multipole;
use crate::terms::Term;

use super::answer::Working;
use super::document::Document;
use super::entry::{Entry, Named};
use super::formula::{Formula, fraction, name, number, operator, row, sup};
use super::line_rows::{LineRow, MultipletRow, RefusedRow};
use super::rich::{Kind, Rich};

pub fn sentence(document: &Document, lines: &[LineRow], refused: &[RefusedRow]) -> Rich {
    let real: Vec<Rich> = document
        .entries
        .iter()
        .filter_map(Entry::named)
        .map(Named::short_rich)
        .collect();
    let say = match real.as_slice() {
        [one] => Rich::words("Inside ").then(one).say(", "),
        [one, two] => Rich::words("Between and inside ")
            .then(one)
            .say(" and ")
            .then(two)
            .say(", "),
        many => Rich::words(format!(
            "Between and inside the {} configurations, ",
            many.len()
        )),
    };
    let count = |multipole| lines.iter().filter(|l| l.multipole == multipole).count();
    let some = |say: Rich, number: usize, singular: &str, plural: &str| match number {
        0 => say.say(format!("no {singular}")),
        _ => say.count(number, singular, plural),
    };
    let say = some(
        say,
        count(Multipole::E1),
        "electric dipole line",
        "electric dipole lines",
    );
    let say = some(
        say.say(", "),
        count(Multipole::M1),
        "magnetic dipole line",
        "magnetic dipole lines",
    );
    let say = some(
        say.say(" and "),
        count(Multipole::E2),
        "electric quadrupole line",
        "electric quadrupole lines",
    );
    let say = say.say(" are allowed; ");
    match refused.len() {
        0 => say.say("no pair of levels is refused."),
        1 => say.say("one pair of levels is refused."),
        many => say.count(many, "", "pairs of levels are refused."),
    }
}

pub fn working(lines: &[LineRow], multiplets: &[MultipletRow]) -> Vec<Working> {
    let mut steps = Vec::new();
    let six_j = |cells: [[String; 3]; 2]| sup(Formula::SixJ(cells), number(2));
    let words = |cells: [[&str; 3]; 2]| cells.map(|r| r.map(str::to_owned));
    let weights = row([
        operator("("),
        number(2),
        name("J"),
        operator("+"),
        number(1),
        operator(")"),
        operator("("),
        number(2),
        name("J′"),
        operator("+"),
        number(1),
        operator(")"),
    ]);
    let formula = row([
        fraction(
            weights,
            row([number(2), name("S"), operator("+"), number(1)]),
        ),
        six_j(words([["L", "J", "S"], ["J′", "L′", "k"]])),
    ]);
    let step = Working::new(
        "Relative strength within a multiplet",
        formula,
        "Condon & Shortley, The Theory of Atomic Spectra (1935), ch. IX; R. D. Cowan, The Theory of Atomic Structure and Spectra (1981), ch. 14",
    );
    let case = lines
        .iter()
        .filter(|l| l.multipole == Multipole::E1)
        .filter_map(|line| Some((line, line.relative?)))
        .max_by(|a, b| a.1.total_cmp(&b.1))
        .and_then(|(line, relative)| {
            Some((
                line,
                relative,
                term_of(&line.upper.0)?,
                term_of(&line.lower.0)?,
            ))
        });
    steps.push(match case {
        Some((line, relative, upper, lower)) => {
            let text = |j: TwiceJ| j.to_string();
            let cells = [
                [upper.l.to_string(), text(line.upper_j), text(upper.spin())],
                [text(line.lower_j), lower.l.to_string(), "1".to_owned()],
            ];
            let numbers = row([
                fraction(
                    row([
                        number(line.upper_j.degeneracy()),
                        operator("×"),
                        number(line.lower_j.degeneracy()),
                    ]),
                    number(upper.multiplicity()),
                ),
                six_j(cells),
            ]);
            let result = Rich::new()
                .number(relative, None, Kind::Computed)
                .say(format!(
                    " of its multiplet, for {} to {}",
                    line.lower.0, line.upper.0
                ));
            step.numbers(numbers, result)
        }
        None => step,
    });
    if multiplets.iter().any(|m| !m.upper_sums.is_empty()) {
        steps.push(Working::new(
            "Sum rule of each level",
            row([
                operator("∑"),
                name("S"),
                operator("="),
                fraction(
                    row([number(2), name("J"), operator("+"), number(1)]),
                    row([operator("("), number(2), name("S"), operator("+"), number(1), operator(")"), operator("("), number(2), name("L"), operator("+"), number(1), operator(")")]),
                ),
            ]),
            "L. S. Ornstein, H. C. Burger, Z. Phys. 24, 41 (1924); H. B. Dorgelo, Z. Phys. 22, 170 (1924)",
        ));
    }
    if lines.iter().any(|l| l.multipole == Multipole::M1) {
        steps.push(Working::new(
            "Magnetic dipole within a term",
            row([
                name("S"),
                operator("∝"),
                fraction(
                    row([
                        operator("("),
                        name("J"),
                        operator("+"),
                        name("L"),
                        operator("+"),
                        name("S"),
                        operator("+"),
                        number(1),
                        operator(")"),
                        operator("("),
                        name("J"),
                        operator("+"),
                        name("L"),
                        operator("−"),
                        name("S"),
                        operator(")"),
                        operator("("),
                        name("J"),
                        operator("+"),
                        name("S"),
                        operator("−"),
                        name("L"),
                        operator(")"),
                        operator("("),
                        name("L"),
                        operator("+"),
                        name("S"),
                        operator("+"),
                        number(1),
                        operator("−"),
                        name("J"),
                        operator(")"),
                    ]),
                    row([number(4), name("J")]),
                ),
            ]),
            "Condon & Shortley (1935), ch. XI",
        ));
    }
    steps
}

fn term_of(label: &str) -> Option<Term> {
    crate::terms::label::parse(label).ok().map(|l| l.level.term)
}

pub fn limits(document: &Document, because: Option<&Problem>) -> Vec<String> {
    let mut limits: Vec<String> = because
        .map(|problem| format!("Energies could not be computed: {}", problem.message))
        .into_iter()
        .collect();
    limits.extend([
        "Energies are not computed here, so lines have no wavelength of their own and their strengths are relative within one multiplet: S, gf and A stay empty. Pinning measured energies gives wavelengths."
            .to_owned(),
        "Pure LS coupling of single configurations. Rigorous rules (parity, J) always hold; the approximate ones weaken with spin–orbit mixing, so refused intercombination lines do appear, strongly so in heavy atoms (common practice, no source)."
            .to_owned(),
        "Strengths across multiplets cannot be compared: each multiplet adds up to one.".to_owned(),
    ]);
    limits.extend(document.unused());
    limits
}
