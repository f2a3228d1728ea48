//! Which lines? Every pair of levels, allowed or refused, and relative strengths in each multiplet.

use std::collections::BTreeMap;

use serde::Serialize;

use crate::configuration::Configuration;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::selection::{Between, TermOf, pair_count};
use crate::radiation::strengths::{self, LevelSum, Multiplet};
use crate::radiation::{Multipole, Rule};
use crate::terms::chains::{self, Chain};
use crate::terms::{Level, Term, ls};

use super::answer::{Around, Working};
use super::document::{Document, Entry, LevelOf};
use super::formula::{Formula, fraction, name, number, operator, row, sup};
use super::rich::{Kind, Piece, Rich, TermName};

/// The most pairs of levels that are judged in one answer.
pub const MAX_PAIRS: u128 = 60_000;

/// The answer.
#[derive(Debug, Serialize)]
pub struct Lines {
    #[serde(flatten)]
    around: Around,
    lines: Vec<LineRow>,
    refused: Vec<RefusedRow>,
    multiplets: Vec<MultipletRow>,
    levels: Vec<LevelEntry>,
    pairs: usize,
    order: &'static str,
}

#[derive(Debug, Serialize)]
struct LevelEntry {
    label: String,
    rich: Rich,
    #[serde(rename = "J")]
    j: TwiceJ,
    configuration: String,
    term: String,
}

#[derive(Debug, Serialize)]
struct LineRow {
    upper: String,
    lower: String,
    #[serde(rename = "upper_J")]
    upper_j: TwiceJ,
    #[serde(rename = "lower_J")]
    lower_j: TwiceJ,
    multipole: Multipole,
    relative: f64,
    multiplet: String,
    wavenumber: Option<f64>,
    vacuum_nm: Option<f64>,
    air_nm: Option<f64>,
    #[serde(rename = "S")]
    s: Option<f64>,
    gf: Option<f64>,
    #[serde(rename = "A")]
    a: Option<f64>,
}

#[derive(Debug, Serialize)]
struct RefusedRow {
    upper: String,
    lower: String,
    #[serde(rename = "upper_J")]
    upper_j: TwiceJ,
    #[serde(rename = "lower_J")]
    lower_j: TwiceJ,
    multipole: Multipole,
    rule: String,
    code: &'static str,
    rigorous: bool,
    /// The rule against each other multipole, by its code.
    others: BTreeMap<String, &'static str>,
}

#[derive(Debug, Serialize)]
struct MultipletRow {
    name: String,
    upper_rich: Rich,
    lower_rich: Rich,
    multipole: Multipole,
    lines: usize,
    sum: f64,
    upper_sums: Vec<SumRow>,
    lower_sums: Vec<SumRow>,
}

#[derive(Debug, Serialize)]
struct SumRow {
    #[serde(rename = "J")]
    j: TwiceJ,
    sum: f64,
    expected: f64,
}

impl From<&LevelSum> for SumRow {
    fn from(sum: &LevelSum) -> Self {
        SumRow {
            j: sum.j,
            sum: sum.sum,
            expected: sum.expected,
        }
    }
}

/// One kind of term of one entry, with its coupling chain.
struct Kinds {
    entry: usize,
    term: Term,
    index: Option<u128>,
    chain: Option<Chain>,
    levels: Vec<TwiceJ>,
}

impl Kinds {
    fn as_term(&self) -> TermOf<'_> {
        TermOf {
            term: self.term,
            index: self.index,
            chain: self.chain.as_ref(),
        }
    }

    fn level(&self, j: TwiceJ) -> LevelOf {
        LevelOf {
            entry: self.entry,
            level: Level {
                term: self.term,
                index: self.index,
                j,
            },
        }
    }
}

/// Pairs of different levels of all configurations together.
pub fn pairs(document: &Document) -> u128 {
    pair_count(level_count(document), None)
}

/// Levels of all configurations together.
fn level_count(document: &Document) -> u128 {
    document
        .entries
        .iter()
        .filter_map(Entry::configuration)
        .filter_map(levels_of)
        .fold(0, u128::saturating_add)
}

fn levels_of(configuration: &Configuration) -> Option<u128> {
    ls::terms(configuration.subshells())
        .ok()
        .map(|terms| terms.n_levels())
}

/// About how many rows the answer has, for the estimate.
pub fn rows(document: &Document) -> f64 {
    pairs(document).min(MAX_PAIRS) as f64
}

fn kinds(document: &Document, entry: usize) -> Result<Vec<Kinds>, Problem> {
    let Some(configuration) = document.entries.get(entry).and_then(Entry::configuration) else {
        return Ok(Vec::new());
    };
    let subshells = configuration.subshells();
    let all = ls::terms(subshells)?;
    let limit = usize::try_from(all.n_terms()).unwrap_or(usize::MAX);
    let mut chains = chains::chains(subshells, limit)?.listed.into_iter();
    let mut kinds = Vec::new();
    for term in &all.terms {
        for k in 1..=term.times {
            kinds.push(Kinds {
                entry,
                term: term.term,
                index: (term.times > 1).then_some(k),
                chain: chains.next(),
                levels: term.term.levels().collect(),
            });
        }
    }
    Ok(kinds)
}

/// Pairs of entries: inside each, and between each and those after it, the later one above.
fn pairs_of_entries(document: &Document) -> Vec<(usize, usize)> {
    let real: Vec<usize> = (0..document.entries.len())
        .filter(|i| {
            document
                .entries
                .get(*i)
                .and_then(Entry::configuration)
                .is_some()
        })
        .collect();
    let mut pairs = Vec::new();
    for (place, lower) in real.iter().enumerate() {
        pairs.extend(real.iter().skip(place).map(|upper| (*lower, *upper)));
    }
    pairs
}

fn between(document: &Document, lower: usize, upper: usize) -> Option<Result<Between, Problem>> {
    let configuration = |i: usize| document.entries.get(i).and_then(Entry::configuration);
    Some(Between::new(
        configuration(upper)?.subshells(),
        configuration(lower)?.subshells(),
    ))
}

/// The first allowed line, E1 before M1; what the question on splitting proposes.
pub fn first_allowed(document: &Document) -> Option<(LevelOf, LevelOf)> {
    if pairs(document) > MAX_PAIRS {
        return None;
    }
    for multipole in [Multipole::E1, Multipole::M1] {
        for (lower_entry, upper_entry) in pairs_of_entries(document) {
            let Some(Ok(between)) = between(document, lower_entry, upper_entry) else {
                continue;
            };
            let lowers = kinds(document, lower_entry).ok()?;
            let uppers = if upper_entry == lower_entry {
                None
            } else {
                kinds(document, upper_entry).ok()
            };
            for upper in uppers.as_ref().unwrap_or(&lowers) {
                for lower in &lowers {
                    if between
                        .term_rule(multipole, &upper.as_term(), &lower.as_term())
                        .is_some()
                    {
                        continue;
                    }
                    for (upper_j, lower_j) in upper
                        .levels
                        .iter()
                        .flat_map(|u| lower.levels.iter().map(move |l| (*u, *l)))
                    {
                        let (upper, lower) = (upper.level(upper_j), lower.level(lower_j));
                        if upper != lower
                            && between.level_rule(multipole, upper_j, lower_j).is_none()
                        {
                            return Some((upper, lower));
                        }
                    }
                }
            }
        }
    }
    None
}

/// By which multipole a line between two levels is allowed, and the rules against the others.
pub fn judge(
    document: &Document,
    upper: &LevelOf,
    lower: &LevelOf,
) -> Result<Vec<(Multipole, Option<Rule>)>, Problem> {
    let find = |of: &LevelOf| -> Result<Option<Kinds>, Problem> {
        Ok(kinds(document, of.entry)?
            .into_iter()
            .find(|k| k.term == of.level.term && k.index == of.level.index))
    };
    let (Some(a), Some(b)) = (find(upper)?, find(lower)?) else {
        return Ok(Vec::new());
    };
    let Some(between) = between(document, lower.entry, upper.entry) else {
        return Ok(Vec::new());
    };
    let verdicts = between?.verdicts(&a.as_term(), upper.level.j, &b.as_term(), lower.level.j);
    Ok(verdicts
        .into_iter()
        .map(|v| (v.multipole, v.refused_by))
        .collect())
}

/// The answer to *Which lines?*
pub fn answer(document: &Document) -> Result<Lines, Problem> {
    if let Some(lack) = document.lacks(super::Question::Lines) {
        return Err(lack.problem());
    }
    let total = pairs(document);
    let mut judged = Judged {
        document,
        lines: Vec::new(),
        refused: Vec::new(),
        multiplets: Vec::new(),
    };
    for (lower_entry, upper_entry) in pairs_of_entries(document) {
        let Some(between) = between(document, lower_entry, upper_entry) else {
            continue;
        };
        let between = between.map_err(|problem| problem.at("/configurations"))?;
        let lowers = kinds(document, lower_entry)?;
        if lower_entry == upper_entry {
            judged.inside(&between, &lowers);
        } else {
            let uppers = kinds(document, upper_entry)?;
            for lower in &lowers {
                for upper in &uppers {
                    judged.terms(&between, upper, lower);
                }
            }
        }
    }
    let Judged {
        lines,
        refused,
        multiplets,
        ..
    } = judged;
    let mut levels = Vec::new();
    for (entry, named) in document
        .entries
        .iter()
        .enumerate()
        .filter(|(_, e)| e.configuration().is_some())
    {
        for level in document.levels(entry, usize::MAX) {
            let of = LevelOf { entry, level };
            levels.push(LevelEntry {
                label: document.level_label(&of),
                rich: document.level_rich(&of),
                j: level.j,
                configuration: named.label.clone(),
                term: level.term.to_string(),
            });
        }
    }
    let mut around = Around::saying(sentence(document, &lines, &refused));
    around.working = working(&lines, &multiplets);
    around.limits = limits(document);
    around.kinds = [
        ("lines.relative", Kind::Computed),
        ("lines.multipole", Kind::Exact),
        ("lines.wavenumber", Kind::Entered),
        ("lines.vacuum_nm", Kind::Entered),
        ("refused.rule", Kind::Exact),
        ("multiplets.sum", Kind::Computed),
        ("multiplets.expected", Kind::Exact),
    ]
    .into_iter()
    .collect();
    Ok(Lines {
        around,
        pairs: usize::try_from(total).unwrap_or(usize::MAX),
        lines,
        refused,
        multiplets,
        levels,
        order: "Of two levels the one of the later configuration, or the later one in the list, is called the upper one, unless measured energies say otherwise.",
    })
}

struct Judged<'a> {
    document: &'a Document,
    lines: Vec<LineRow>,
    refused: Vec<RefusedRow>,
    multiplets: Vec<MultipletRow>,
}

impl Judged<'_> {
    /// Pairs inside one configuration: each pair of terms once, and within each term.
    fn inside(&mut self, between: &Between, kinds: &[Kinds]) {
        for (place, lower) in kinds.iter().enumerate() {
            for upper in kinds.iter().skip(place) {
                self.terms(between, upper, lower);
            }
        }
    }

    /// All pairs of levels of two terms, or of one term with itself.
    fn terms(&mut self, between: &Between, upper: &Kinds, lower: &Kinds) {
        let same = std::ptr::eq(upper, lower);
        let rules =
            Multipole::ALL.map(|m| (m, between.term_rule(m, &upper.as_term(), &lower.as_term())));
        let multiplets = rules.map(|(multipole, rule)| match rule {
            Some(_) => None,
            None if same => Some(strengths::within(multipole, upper.term)),
            None => Some(strengths::between(multipole, upper.term, lower.term)),
        });
        for multiplet in multiplets.iter().flatten().filter(|m| !m.lines.is_empty()) {
            if between
                .level_rule(
                    multiplet.multipole,
                    TwiceJ::from_doubled(4),
                    TwiceJ::from_doubled(4),
                )
                .is_none()
            {
                self.multiplet(multiplet, upper, lower);
            }
        }
        for (upper_place, upper_j) in upper.levels.iter().enumerate() {
            for (lower_place, lower_j) in lower.levels.iter().enumerate() {
                if same && lower_place >= upper_place {
                    continue;
                }
                let mut refusals = Vec::new();
                let mut allowed = 0;
                for ((multipole, rule), multiplet) in rules.iter().zip(&multiplets) {
                    let refusal = between.level_rule(*multipole, *upper_j, *lower_j).or(*rule);
                    let share = multiplet
                        .as_ref()
                        .and_then(|m| share(m, *upper_j, *lower_j));
                    match (refusal, share) {
                        (Some(rule), _) => refusals.push((*multipole, rule)),
                        (None, Some(relative)) => {
                            allowed += 1;
                            self.line(
                                *multipole,
                                relative,
                                &upper.level(*upper_j),
                                &lower.level(*lower_j),
                            );
                        }
                        // Allowed by every rule, and the 6j symbol is zero by accident.
                        (None, None) => {}
                    }
                }
                if allowed == 0 {
                    self.refuse(&refusals, &upper.level(*upper_j), &lower.level(*lower_j));
                }
            }
        }
    }

    fn term_rich(&self, kinds: &Kinds) -> Rich {
        let Some(level) = kinds.levels.first() else {
            return Rich::new();
        };
        let mut rich = self.document.level_rich(&kinds.level(*level));
        if let Some(Piece::Term(name)) = rich.0.last_mut() {
            *name = TermName {
                j: None,
                ..name.clone()
            };
        }
        rich
    }

    fn multiplet_name(upper: &str, lower: &str) -> String {
        format!("{lower} - {upper}")
    }

    fn term_label(&self, of: &LevelOf) -> String {
        let configuration = self
            .document
            .entries
            .get(of.entry)
            .map(|e| e.label.as_str())
            .unwrap_or_default();
        let index = of.level.index.map(|k| format!(" #{k}")).unwrap_or_default();
        format!("{configuration} {}{index}", of.level.term)
    }

    fn multiplet(&mut self, multiplet: &Multiplet, upper: &Kinds, lower: &Kinds) {
        let first = |kinds: &Kinds| kinds.level(kinds.levels.first().copied().unwrap_or_default());
        let name = Self::multiplet_name(
            &self.term_label(&first(upper)),
            &self.term_label(&first(lower)),
        );
        self.multiplets.push(MultipletRow {
            name,
            upper_rich: self.term_rich(upper),
            lower_rich: self.term_rich(lower),
            multipole: multiplet.multipole,
            lines: multiplet.lines.len(),
            sum: multiplet.lines.iter().map(|l| l.relative).sum(),
            upper_sums: multiplet.upper_sums.iter().map(SumRow::from).collect(),
            lower_sums: multiplet.lower_sums.iter().map(SumRow::from).collect(),
        });
    }

    fn pinned(&self, of: &LevelOf) -> Option<f64> {
        self.document
            .measured
            .iter()
            .find(|(level, _)| level == of)
            .map(|(_, energy)| *energy)
    }

    fn line(&mut self, multipole: Multipole, relative: f64, upper: &LevelOf, lower: &LevelOf) {
        let (up, low) = (self.pinned(upper), self.pinned(lower));
        let swap = matches!((up, low), (Some(up), Some(low)) if up < low);
        let wavenumber = up
            .zip(low)
            .map(|(up, low)| (up - low).abs())
            .filter(|w| *w > 0.0);
        let multiplet = Self::multiplet_name(&self.term_label(upper), &self.term_label(lower));
        let (upper, lower) = if swap { (lower, upper) } else { (upper, lower) };
        self.lines.push(LineRow {
            upper: self.document.level_label(upper),
            lower: self.document.level_label(lower),
            upper_j: upper.level.j,
            lower_j: lower.level.j,
            multipole,
            relative,
            multiplet,
            wavenumber,
            vacuum_nm: wavenumber.map(|w| 1e7 / w),
            air_nm: None,
            s: None,
            gf: None,
            a: None,
        });
    }

    /// The rule that comes nearest to allowing the pair decides: approximate before rigorous ones.
    fn refuse(&mut self, refusals: &[(Multipole, Rule)], upper: &LevelOf, lower: &LevelOf) {
        let deciding = refusals
            .iter()
            .find(|(_, rule)| !rule.is_rigorous())
            .or(refusals.first());
        let Some((multipole, rule)) = deciding else {
            return;
        };
        self.refused.push(RefusedRow {
            upper: self.document.level_label(upper),
            lower: self.document.level_label(lower),
            upper_j: upper.level.j,
            lower_j: lower.level.j,
            multipole: *multipole,
            rule: rule.to_string(),
            code: rule.code(),
            rigorous: rule.is_rigorous(),
            others: refusals
                .iter()
                .filter(|(other, _)| other != multipole)
                .map(|(multipole, rule)| (multipole.to_string(), rule.code()))
                .collect(),
        });
    }
}

fn share(multiplet: &Multiplet, upper: TwiceJ, lower: TwiceJ) -> Option<f64> {
    multiplet
        .lines
        .iter()
        .find(|l| l.upper == upper && l.lower == lower)
        .map(|l| l.relative)
}

fn sentence(document: &Document, lines: &[LineRow], refused: &[RefusedRow]) -> Rich {
    let mut say = Rich::new();
    let real: Vec<&Entry> = document
        .entries
        .iter()
        .filter(|e| e.configuration().is_some())
        .collect();
    say = match real.as_slice() {
        [one] => say.say("Inside ").say(one.label.clone()).say(", "),
        [one, two] => say
            .say("Between and inside ")
            .say(one.label.clone())
            .say(" and ")
            .say(two.label.clone())
            .say(", "),
        many => say.say(format!(
            "Between and inside the {} configurations, ",
            many.len()
        )),
    };
    let count = |multipole| lines.iter().filter(|l| l.multipole == multipole).count();
    let (e1, m1, e2) = (
        count(Multipole::E1),
        count(Multipole::M1),
        count(Multipole::E2),
    );
    say.count(e1, "electric dipole line, ", "electric dipole lines, ")
        .count(
            m1,
            "magnetic dipole line and ",
            "magnetic dipole lines and ",
        )
        .count(
            e2,
            "electric quadrupole line are allowed; ",
            "electric quadrupole lines are allowed; ",
        )
        .count(
            refused.len(),
            "pair of levels is refused.",
            "pairs of levels are refused.",
        )
}

fn working(lines: &[LineRow], multiplets: &[MultipletRow]) -> Vec<Working> {
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
        .max_by(|a, b| a.relative.total_cmp(&b.relative))
        .and_then(|line| Some((line, term_of(&line.upper)?, term_of(&line.lower)?)));
    steps.push(match case {
        Some((line, upper, lower)) => {
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
                .number(line.relative, None, Kind::Computed)
                .say(format!(
                    " of its multiplet, for {} to {}",
                    line.lower, line.upper
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

fn limits(document: &Document) -> Vec<String> {
    let mut limits = vec![
        "Energies are not computed, so lines have no wavelength of their own and their strengths are relative within one multiplet: S, gf and A stay empty. Pinning measured energies gives wavelengths."
            .to_owned(),
        "Pure LS coupling of single configurations. Rigorous rules (parity, J) always hold; the approximate ones weaken with spin–orbit mixing, so refused intercombination lines do appear, strongly so in heavy atoms (common practice, no source)."
            .to_owned(),
        "Strengths across multiplets cannot be compared: each multiplet adds up to one.".to_owned(),
    ];
    limits.extend(document.unused());
    limits
}
