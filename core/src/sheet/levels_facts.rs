//! What stands out among the levels: the lowest one, the intervals of each term, series.

use crate::configuration::{Configuration, Orbital};
use crate::numerics::order::sort_by;
use crate::numerics::sorted_map::SortedMap;
use crate::radiation::isotope;
use crate::radiation::series::{self, Core, Member};
use crate::terms::{Term, hund};

use super::document::Document;
use super::energy_case::EnergyCase;
use super::ground::observed_term;
use super::levels_rows::{Agreement, GroundRow, IntervalRow, MemberRow, SeriesRow, Shared};
use super::placed::Placed;
use super::rich::{Kind, Piece, Rich, SubshellName, TermName};
use super::solved::{Solved, SolvedLevel};

/// The most intervals that are listed.
const MAX_INTERVALS: usize = 2000;

/// How many members a series is continued by.
const CONTINUED: u32 = 5;

/// The lowest level beside Hund's rules and the table.
pub fn ground(document: &Document, solved: &Solved, placed: &Placed) -> Option<GroundRow> {
    let level = solved.levels.get(*placed.order.first()?)?;
    // One electron has no other to keep a rule with.
    solved.spectrum.as_ref()?;
    let term = level.level.term;
    let configuration = configuration(document, level);
    let rules = configuration.map(|c| hund::ground(c.subshells()));
    let hund = Agreement {
        agrees: rules.is_some_and(|r| r.term == term && r.j.is_none_or(|j| j == level.level.j)),
        term: rules.map(|r| r.term.to_string()),
        j: rules.and_then(|r| r.j),
        status: None,
        source: None,
    };
    let observed = document
        .filled()
        .and_then(|filled| filled.observed)
        .filter(|observed| Some(&observed.configuration) == configuration)
        .map(|observed| {
            let entry = &observed.entry;
            let named = observed_term(entry);
            Agreement {
                agrees: named.is_none_or(|named| named == term)
                    && entry.level.j.is_none_or(|j| j == level.level.j),
                term: named.map(|term| term.to_string()),
                j: entry.level.j,
                status: Some(entry.status_text()),
                source: Some(entry.source()),
            }
        });
    Some(GroundRow {
        label: Shared(level.label.clone()),
        rich: level.rich(document),
        j: level.level.j,
        hund,
        observed,
    })
}

fn configuration<'a>(document: &'a Document, level: &SolvedLevel) -> Option<&'a Configuration> {
    document.entries.get(level.entry)?.configuration()
}

/// Every interval of every term, by configuration and term; Landé's rule makes it proportional to
/// the larger J.
pub fn intervals(document: &Document, solved: &Solved, placed: &Placed) -> Vec<IntervalRow> {
    type Key = (usize, Option<Orbital>, Term, Option<u128>);
    let mut terms: SortedMap<Key, Vec<usize>> = SortedMap::default();
    let mut keys: Vec<Key> = Vec::new();
    for (place, level) in solved.levels.iter().enumerate() {
        let key = (
            level.entry,
            level.orbital,
            level.level.term,
            level.level.index,
        );
        let mut places = terms.get(&key).cloned().unwrap_or_default();
        if places.is_empty() {
            keys.push(key);
        }
        places.push(place);
        terms.insert(key, places);
    }
    crate::numerics::order::sort(&mut keys);
    let mut rows: Vec<IntervalRow> = Vec::new();
    for key in keys {
        let mut of_term: Vec<(&SolvedLevel, f64)> = terms
            .get(&key)
            .into_iter()
            .flatten()
            .filter_map(|place| Some((solved.levels.get(*place)?, placed.of(*place))))
            .collect();
        sort_by(&mut of_term, |a, b| b.0.level.j.cmp(&a.0.level.j));
        let mut first: Option<(f64, f64)> = None;
        for ((upper, above), (lower, below)) in of_term.iter().zip(of_term.iter().skip(1)) {
            let interval = above - below;
            let j = f64::from(upper.level.j.doubled()) / 2.0;
            let (first_j, first_interval) = *first.get_or_insert((j, interval));
            if rows.len() >= MAX_INTERVALS {
                return rows;
            }
            rows.push(IntervalRow {
                configuration: Shared(upper.configuration.clone()),
                term: upper.level.term.to_string(),
                rich: term_rich(document, upper),
                upper_j: upper.level.j,
                lower_j: lower.level.j,
                interval,
                expected_ratio: j / first_j,
                ratio: (first_interval != 0.0).then(|| interval / first_interval),
            });
        }
    }
    rows
}

/// Configuration and term of a level, typeset.
pub fn term_rich(document: &Document, level: &SolvedLevel) -> Rich {
    let mut rich = level.rich(document);
    if let Some(Piece::Term(name)) = rich.0.last_mut() {
        *name = TermName {
            j: None,
            ..name.clone()
        };
    }
    rich
}

/// The subshells below an outer electron: n, ℓ and electrons of each.
type Inner = Vec<(u8, u8, u32)>;

/// A configuration as a member of a series: the core, ℓ of the one outer electron, and its n.
fn member(configuration: &Configuration) -> Option<(Inner, u8, u8)> {
    let mut all: Inner = configuration
        .subshells()
        .iter()
        .map(|s| (s.orbital().n(), s.orbital().l(), s.electrons()))
        .collect();
    crate::numerics::order::sort(&mut all);
    let (n, l, electrons) = all.pop()?;
    // The outer electron is alone in the highest n.
    let alone = electrons == 1 && all.iter().all(|(inner, ..)| *inner < n);
    alone.then_some((all, l, n))
}

/// Series of configurations that differ in n of one outer electron, with their limit.
pub fn series(document: &Document, solved: &Solved, placed: &Placed) -> Vec<SeriesRow> {
    let EnergyCase::Model { case, .. } = solved.case() else {
        return Vec::new();
    };
    let (Some((_, mass_number)), Some(species)) = (case.nucleus, document.species) else {
        return Vec::new();
    };
    let charge = u32::try_from(species.charge.saturating_add(1)).unwrap_or(0);
    let Ok(rydberg) = isotope::rydberg(Some(f64::from(mass_number))) else {
        return Vec::new();
    };
    let core = Core { charge, rydberg };
    type Key = (Inner, u8);
    let mut found: Vec<(Key, Vec<(u8, usize)>)> = Vec::new();
    for (entry, of) in document.entries.iter().enumerate() {
        let Some((inner, l, n)) = of.configuration().and_then(member) else {
            continue;
        };
        let key = (inner, l);
        match found.iter_mut().find(|(known, _)| *known == key) {
            Some((_, members)) => members.push((n, entry)),
            None => found.push((key, vec![(n, entry)])),
        }
    }
    let mut rows = Vec::new();
    for ((_, l), mut members) in found {
        crate::numerics::order::sort(&mut members);
        rows.extend(one_series(document, solved, placed, core, l, &members));
    }
    rows
}

fn one_series(
    document: &Document,
    solved: &Solved,
    placed: &Placed,
    core: Core,
    l: u8,
    members: &[(u8, usize)],
) -> Option<SeriesRow> {
    if members.len() < 2 {
        return None;
    }
    let mean = |entry: usize| {
        let (mut sum, mut weights, mut measured) = (0.0, 0.0, true);
        for (place, level) in solved.levels.iter().enumerate() {
            if level.entry == entry {
                sum += level.weight() * placed.of(place);
                weights += level.weight();
                measured &= placed.kind_of(place) == Kind::Measured;
            }
        }
        (weights > 0.0).then(|| (sum / weights, measured))
    };
    let known: Vec<(u8, usize, f64, bool)> = members
        .iter()
        .filter_map(|(n, entry)| {
            let (energy, measured) = mean(*entry)?;
            Some((*n, *entry, energy, measured))
        })
        .collect();
    let points: Vec<Member> = known
        .iter()
        .map(|(n, _, energy, _)| Member {
            n: u32::from(*n),
            energy: *energy,
        })
        .collect();
    let coefficients = if points.len() > 3 { 2 } else { 1 };
    let fitted = series::fit(&points, None, core, coefficients).ok()?;
    let letter = crate::configuration::orbital_letter(l.into());
    let measured = known.iter().all(|(.., measured)| *measured);
    let mut rows: Vec<MemberRow> = Vec::new();
    for (point, (_, entry, energy, measured)) in points.iter().zip(&known) {
        let own = series::defect(*point, fitted.limit(), core).ok()?;
        rows.push(MemberRow {
            n: point.n,
            label: document.entries.get(*entry).map(|e| e.label.clone()),
            energy: *energy,
            n_effective: own.effective,
            defect: own.defect,
            kind: if *measured { "measured" } else { "computed" },
        });
    }
    let last = points.last()?.n;
    for n in last.saturating_add(1)..=last.saturating_add(CONTINUED) {
        if let (Some(energy), Some(defect)) = (fitted.energy(n), fitted.defect(n)) {
            rows.push(MemberRow {
                n,
                label: None,
                energy,
                n_effective: f64::from(n) - defect,
                defect,
                kind: "extrapolated",
            });
        }
    }
    let (first, ..) = known.first()?;
    let entry = known
        .first()
        .and_then(|(_, entry, ..)| document.entries.get(*entry));
    let mut core_shells: Vec<SubshellName> = Vec::new();
    if let Some(named) = entry.and_then(|e| e.named()) {
        let outer =
            |s: &&crate::configuration::Subshell| s.orbital().n() == *first && s.orbital().l() == l;
        let beyond = named.beyond.iter();
        core_shells.extend(
            beyond
                .filter(|s| !outer(s))
                .copied()
                .map(SubshellName::from),
        );
    }
    let name = format!("n{letter}");
    let rich = match core_shells.is_empty() {
        true => Rich::words(name.clone()),
        false => Rich::new()
            .with(Piece::Configuration {
                core: None,
                subshells: core_shells,
            })
            .say(format!(" {name}")),
    };
    Some(SeriesRow {
        name: rich.plain(),
        rich,
        limit: fitted.limit(),
        limit_kind: if measured {
            Kind::Measured
        } else {
            Kind::Computed
        },
        limit_uncertainty: fitted.limit_uncertainty(),
        coefficients: fitted.coefficients().to_vec(),
        members: rows,
    })
}
