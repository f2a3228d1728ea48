//! The sentence, the working and the limits of the answer to *Which states?*

use crate::configuration::Subshell;
use crate::constants;
use crate::quantity::TwiceJ;
use crate::terms::{self, Term, lande};

use super::answer::Working;
use super::document::Document;
use super::entry::Entry;
use super::formula::{fraction, name, number, operator, root, row, sub};
use super::rich::{Count, Kind, Rich};
use super::states::Allowed;

/// The size of the electron's g factor; its sign belongs to the moment.
const ELECTRON_G: f64 = constants::ELECTRON_G.value;

pub fn sentence(first: &Allowed, others: &[Allowed]) -> Rich {
    if let Some(shell) = &first.bare_shell {
        return shell.sentence();
    }
    let mut say = Rich::new().then(&first.species);
    if let Some(configuration) = &first.configuration {
        say = if first.species.0.is_empty() {
            say.then(&configuration.rich)
        } else {
            say.say(" in ").then(&configuration.rich)
        };
    }
    say = counted(say.say(" has "), first);
    say = match &first.ground {
        Some(ground) => ground.finish_sentence(say),
        None => say.say("."),
    };
    match others {
        [] => say,
        [second] if second.configuration.is_some() => {
            let name = second.configuration.as_ref().map(|c| &c.rich);
            let say = name.iter().fold(say.say(" "), |say, rich| say.then(rich));
            counted(say.say(" has "), second).say(".")
        }
        others => say
            .say(" ")
            .count(
                others.len(),
                "more configuration is",
                "more configurations are",
            )
            .say(" below."),
    }
}

fn counted(say: Rich, of: &Allowed) -> Rich {
    say.count(of.states.unwrap_or(Count(0)), "state", "states")
        .say(" in ")
        .count(of.n_terms.unwrap_or(Count(0)), "term", "terms")
        .say(" and ")
        .count(of.n_levels.unwrap_or(Count(0)), "level", "levels")
}

pub fn working(first: &Allowed, document: &Document) -> Vec<Working> {
    let mut steps = Vec::new();
    if let Some(shell) = &first.bare_shell {
        steps.push(shell.working());
        return steps;
    }
    let open: Vec<Subshell> = document
        .entries
        .first()
        .and_then(Entry::configuration)
        .map(|c| terms::open_shells(c.subshells()))
        .unwrap_or_default();
    if let Some(states) = first.states
        && !open.is_empty()
    {
        let mut parts = Vec::new();
        for shell in &open {
            if !parts.is_empty() {
                parts.push(operator("×"));
            }
            parts.extend([
                name("C"),
                operator("("),
                number(shell.orbital().capacity()),
                operator(","),
                number(shell.electrons()),
                operator(")"),
            ]);
        }
        steps.push(
            Working::new(
                "Number of states",
                row([operator("∏"), name("C"), operator("("), number(4), name("ℓ"), operator("+"), number(2), operator(","), name("N"), operator(")")]),
                "counting of antisymmetric states; Condon & Shortley, The Theory of Atomic Spectra (1935), ch. VII",
            )
            .numbers(row(parts), Rich::new().count(states, "state", "states")),
        );
    }
    if let Some(ground) = &first.ground
        && let Some((term, j)) = ground.level()
        && let Some(g) = lande::ls(term, j)
    {
        steps.extend(ground_factor(term, j, g));
    }
    steps
}

fn ground_factor(term: Term, j: TwiceJ, g: f64) -> [Working; 3] {
    let jj1 = |x: &str| {
        row([
            name(x),
            operator("("),
            name(x),
            operator("+"),
            number(1),
            operator(")"),
        ])
    };
    let twice = |x: TwiceJ| 4.0_f64.recip() * (x.doubled() as f64) * (f64::from(x.doubled()) + 2.0);
    let (s, l) = (
        term.spin(),
        TwiceJ::from_doubled(i32::try_from(term.l).unwrap_or(0).saturating_mul(2)),
    );
    let formula = row([
        sub(name("g"), name("J")),
        operator("="),
        number(1),
        operator("+"),
        operator("("),
        sub(name("g"), name("s")),
        operator("−"),
        number(1),
        operator(")"),
        fraction(
            row([jj1("J"), operator("+"), jj1("S"), operator("−"), jj1("L")]),
            row([number(2), jj1("J")]),
        ),
    ]);
    let numbers = row([
        number(1),
        operator("+"),
        number(ELECTRON_G - 1.0),
        fraction(
            row([
                number(twice(j)),
                operator("+"),
                number(twice(s)),
                operator("−"),
                number(twice(l)),
            ]),
            number(2.0 * twice(j)),
        ),
    ]);
    let moment = lande::effective_moment(g, j);
    let effective = row([
        sub(name("μ"), name("eff")),
        operator("="),
        sub(name("g"), name("J")),
        root(jj1("J")),
        sub(name("μ"), name("B")),
    ]);
    let effective_numbers = row([number(g), root(number(twice(j)))]);
    let spin_only = lande::spin_only_moment(s);
    [
        Working::new(
            "Landé factor of the lowest level",
            formula,
            "A. Landé, Z. Phys. 15, 189 (1923); Condon & Shortley (1935), ch. XVI; the electron’s g factor from CODATA 2022",
        )
        .numbers(numbers, Rich::new().number(g, None, Kind::Computed)),
        Working::new("Effective moment of the lowest level", effective, "J. H. Van Vleck, The Theory of Electric and Magnetic Susceptibilities (1932), ch. IX")
            .numbers(effective_numbers, Rich::new().number(moment, Some("μ_B"), Kind::Computed)),
        Working::new(
            "Spin-only moment",
            row([sub(name("μ"), name("S")), operator("="), sub(name("g"), name("s")), root(jj1("S")), sub(name("μ"), name("B"))]),
            "Common practice, no source",
        )
        .numbers(row([number(ELECTRON_G), root(number(twice(s)))]), Rich::new().number(spin_only, Some("μ_B"), Kind::Computed)),
    ]
}

pub fn limits(first: &Allowed, document: &Document) -> Vec<String> {
    let mut limits = Vec::new();
    if first.bare_shell.is_some() {
        limits.push(
            "A bare shell: no nucleus, no interaction between electrons, nothing about energies."
                .to_owned(),
        );
        limits.extend(document.unused());
        return limits;
    }
    limits.push(
        "Terms, levels and counts follow from symmetry alone. Nothing here says how far apart the levels lie: that is computed under Which lines."
            .to_owned(),
    );
    limits.push(
        "The g factors are those of pure LS coupling. Mixing between terms changes it, by a few parts in a thousand in light atoms and by tens of per cent in heavy ones (common practice, no source)."
            .to_owned(),
    );
    if let Some(ground) = &first.ground {
        limits.extend(ground.limits());
    }
    if document.is_anion() {
        limits.push("Whether this negative ion is bound at all is not computed.".to_owned());
    }
    if let (Some(Count(total)), listed) = (first.n_levels, first.levels_listed)
        && total > listed as u128
    {
        limits.push(format!(
            "The list of levels holds the first {listed} of {total}; the counts are of all."
        ));
    }
    limits.extend(document.unused());
    limits
}
