//! Coupling chains: the terms of the open shells coupled from left to right, each chain giving
//! one term: `3d6(5D) 4s 6D`.
//!
//! They tell repeated terms of several open shells apart: the k-th chain of a term, in the order
//! in which they are listed, is the term with running index k.

use super::ls::{self, LsTerm};
use super::open_shells;
use super::term::Term;
use crate::configuration::Subshell;
use crate::problem::Problem;
use rungline_kernel::weights::text_of;
use std::fmt;

/// The most couplings of two terms that are tried for one listing, about a tenth of a second.
pub const MAX_COUPLINGS: u64 = 30_000_000;

/// One open shell with its own term, and the term of everything up to it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Link {
    /// The shell.
    pub shell: Subshell,
    /// Its own term.
    pub own: Term,
    /// Which one, where that term occurs more than once in the shell.
    pub own_index: Option<u128>,
    /// The term of this shell and all before it.
    pub coupled: Term,
}

/// A way in which shell terms couple to one term of the configuration.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Chain {
    /// The open shells in the order n, ℓ; none for closed shells.
    pub links: Vec<Link>,
    /// The term that comes out.
    pub term: Term,
    /// The running index of that term in the configuration, from 1.
    pub index: u128,
}

/// Chains listed, and how many there are.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Chains {
    /// As many as the configuration has terms.
    pub total: u128,
    /// The first of them.
    pub listed: Vec<Chain>,
}

/// `3d6(5D) 4s 6D`, with more shells `3d5(6S) 4s (7S) 4p 8P`: a shell's own term follows it in brackets
/// unless it holds one electron, the term coupled so far stands in brackets before the next shell. A
/// single shell has its index at the end, `3d3 2D #2`.
impl fmt::Display for Chain {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (i, link) in self.links.iter().enumerate() {
            if i > 0 {
                f.write_str(" ")?;
            }
            write!(f, "{}", link.shell)?;
            if link.shell.electrons() > 1 && self.links.len() > 1 {
                match link.own_index {
                    Some(k) => write!(f, "({} #{k})", link.own)?,
                    None => write!(f, "({})", link.own)?,
                }
            }
            if i > 0 && i + 1 < self.links.len() {
                write!(f, " ({})", link.coupled)?;
            }
        }
        let gap = if self.links.is_empty() { "" } else { " " };
        write!(f, "{gap}{}", self.term)?;
        match self.links.as_slice() {
            [
                Link {
                    own_index: Some(k), ..
                },
            ] => write!(f, " #{k}"),
            _ => Ok(()),
        }
    }
}

/// The chains of a configuration, at most `limit` of them: by term (see [`Term`]'s order), then by index.
/// Their number is that of the terms.
///
/// Errors: as [`ls::terms`]; `coupling-too-long` past [`MAX_COUPLINGS`].
pub fn chains(subshells: &[Subshell], limit: usize) -> Result<Chains, Problem> {
    let all = ls::terms(subshells)?;
    let mut search = Search::new(subshells)?;
    let mut listed = Vec::new();
    for t in &all.terms {
        let left = limit.saturating_sub(listed.len());
        if left == 0 {
            break;
        }
        listed.extend(search.ending_in(t.term, left)?);
    }
    Ok(Chains {
        total: all.n_terms(),
        listed,
    })
}

/// The chains that give one term, at most `limit` of them, by index. Their number is how often the
/// configuration has the term.
///
/// Errors: as [`chains`].
pub fn chains_of(subshells: &[Subshell], term: Term, limit: usize) -> Result<Chains, Problem> {
    let total = ls::terms(subshells)?.times(term);
    let listed = match total {
        0 => Vec::new(),
        _ => Search::new(subshells)?.ending_in(term, limit)?,
    };
    Ok(Chains { total, listed })
}

/// The chain of one term with its index (none means the first), or nothing where there is none or
/// its index is past `limit`.
///
/// Errors: as [`chains`].
pub fn chain(
    subshells: &[Subshell],
    term: Term,
    index: Option<u128>,
    limit: usize,
) -> Result<Option<Chain>, Problem> {
    let wanted = usize::try_from(index.unwrap_or(1))
        .ok()
        .filter(|k| (1..=limit).contains(k));
    let Some(wanted) = wanted else {
        return Ok(None);
    };
    let listed = chains_of(subshells, term, wanted)?.listed;
    Ok(listed.into_iter().nth(wanted - 1))
}

/// A set of terms up to the largest S and L of a configuration.
struct TermSet {
    l_count: usize,
    members: Vec<bool>,
}

impl TermSet {
    fn new(largest: Term) -> Self {
        let count = |n: u32| usize::try_from(n).unwrap_or(usize::MAX).saturating_add(1);
        let l_count = count(largest.l);
        TermSet {
            l_count,
            members: vec![false; l_count.saturating_mul(count(largest.two_s))],
        }
    }

    fn place(&self, term: Term) -> Option<usize> {
        let l = usize::try_from(term.l).ok().filter(|&l| l < self.l_count)?;
        usize::try_from(term.two_s)
            .ok()?
            .checked_mul(self.l_count)?
            .checked_add(l)
    }

    fn insert(&mut self, term: Term) {
        if let Some(member) = self.place(term).and_then(|i| self.members.get_mut(i)) {
            *member = true;
        }
    }

    fn contains(&self, term: Term) -> bool {
        self.place(term)
            .and_then(|i| self.members.get(i))
            .copied()
            .unwrap_or(false)
    }

    fn iter(&self) -> impl Iterator<Item = Term> {
        let members = self.members.iter().enumerate().filter(|&(_, &is_in)| is_in);
        members.filter_map(|(i, _)| {
            Some(Term {
                two_s: u32::try_from(i / self.l_count).ok()?,
                l: u32::try_from(i % self.l_count).ok()?,
            })
        })
    }
}

/// The open shells with their own terms, and the work done so far.
struct Search {
    own: Vec<(Subshell, Vec<LsTerm>)>,
    couplings: u64,
}

impl Search {
    fn new(subshells: &[Subshell]) -> Result<Self, Problem> {
        let own = open_shells(subshells)
            .into_iter()
            .map(|shell| Ok((shell, ls::terms(&[shell])?.terms)))
            .collect::<Result<_, Problem>>()?;
        Ok(Search { own, couplings: 0 })
    }

    fn largest(&self) -> Term {
        let mut largest = Term::SINGLET_S;
        for (_, terms) in &self.own {
            largest.two_s = largest
                .two_s
                .saturating_add(terms.iter().map(|t| t.term.two_s).max().unwrap_or(0));
            largest.l = largest
                .l
                .saturating_add(terms.iter().map(|t| t.term.l).max().unwrap_or(0));
        }
        largest
    }

    /// For each number of shells taken, the terms from which the wanted one can still be reached.
    /// Triangles are symmetric, so they are found backwards from it.
    fn reaching(&mut self, wanted: Term) -> Result<Vec<TermSet>, Problem> {
        let largest = self.largest();
        let mut last = TermSet::new(largest);
        last.insert(wanted);
        let mut sets = vec![last];
        for (place, (_, terms)) in self.own.iter().enumerate().rev() {
            let mut earlier = TermSet::new(largest);
            let Some(later) = sets.last() else { break };
            if place == 0 {
                // Nothing comes before the first shell: its own term has to be the coupled one.
                if terms.iter().any(|own| later.contains(own.term)) {
                    earlier.insert(Term::SINGLET_S);
                }
                sets.push(earlier);
                break;
            }
            for later in later.iter() {
                for own in terms {
                    for term in later.coupled_to(own.term) {
                        self.couplings = self.couplings.saturating_add(1);
                        earlier.insert(term);
                    }
                }
                if self.couplings > MAX_COUPLINGS {
                    return Err(self.too_long());
                }
            }
            sets.push(earlier);
        }
        sets.reverse();
        Ok(sets)
    }

    fn too_long(&self) -> Problem {
        let shells: Vec<Subshell> = self.own.iter().map(|(shell, _)| *shell).collect();
        Problem::new(
            "coupling-too-long",
            format!(
                "listing how the shells of {} couple takes more than {MAX_COUPLINGS} steps.",
                text_of(&shells)
            ),
            0,
            0,
        )
        .bound(format!("at most {MAX_COUPLINGS} couplings of two terms"))
    }

    fn ending_in(&mut self, wanted: Term, limit: usize) -> Result<Vec<Chain>, Problem> {
        let reaching = self.reaching(wanted)?;
        let mut found = Vec::new();
        let mut links = Vec::new();
        let starts_well = reaching
            .first()
            .is_some_and(|set| set.contains(Term::SINGLET_S));
        if starts_well {
            self.extend(Term::SINGLET_S, &reaching, &mut links, &mut found, limit);
        }
        Ok(found)
    }

    /// Depth first; every step taken can be completed, so the time is that of what is listed.
    fn extend(
        &self,
        coupled: Term,
        reaching: &[TermSet],
        links: &mut Vec<Link>,
        found: &mut Vec<Chain>,
        limit: usize,
    ) {
        if found.len() >= limit {
            return;
        }
        let Some((shell, terms)) = self.own.get(links.len()) else {
            found.push(Chain {
                links: links.clone(),
                term: coupled,
                index: found.len() as u128 + 1,
            });
            return;
        };
        let Some(allowed) = reaching.get(links.len() + 1) else {
            return;
        };
        for own in terms {
            let next: Vec<Term> = coupled
                .coupled_to(own.term)
                .filter(|t| allowed.contains(*t))
                .collect();
            if next.is_empty() {
                continue;
            }
            for k in 1..=own.times {
                for &t in &next {
                    links.push(Link {
                        shell: *shell,
                        own: own.term,
                        own_index: (own.times > 1).then_some(k),
                        coupled: t,
                    });
                    self.extend(t, reaching, links, found, limit);
                    links.pop();
                    if found.len() >= limit {
                        return;
                    }
                }
            }
        }
    }
}
