//! The lowest level of a configuration: by Hund's rules, beside the observed one.

use serde::Serialize;

use crate::configuration::Configuration;
use crate::elements::{ObservedGround, Status};
use crate::quantity::TwiceJ;
use crate::terms::{Term, hund, ls};

use super::document::Document;
use super::rich::{Piece, Rich, TermName};

/// The ground term and level, and how they are known.
#[derive(Clone, Debug, Serialize)]
pub struct Ground {
    configuration: String,
    #[serde(rename = "term")]
    term_text: String,
    #[serde(rename = "J")]
    j: Option<TwiceJ>,
    by: &'static str,
    differs_from_hund: bool,
    rich: Rich,
    hund: Hund,
    observed: Option<Observed>,
    /// The term of the lowest level.
    #[serde(skip)]
    pub term: Term,
    /// The table gives an LS term, or no table was asked.
    #[serde(skip)]
    named_by_table: bool,
    #[serde(skip)]
    status: Option<Status>,
    #[serde(skip)]
    several_open_shells: bool,
}

#[derive(Clone, Debug, Serialize)]
struct Hund {
    term: String,
    #[serde(rename = "J")]
    j: Option<TwiceJ>,
    rich: Rich,
    steps: Vec<Step>,
}

#[derive(Clone, Debug, Serialize)]
struct Step {
    rule: &'static str,
    kept: Rich,
}

#[derive(Clone, Debug, Serialize)]
struct Observed {
    configuration: String,
    term: Option<String>,
    #[serde(rename = "J")]
    j: Option<TwiceJ>,
    level_text: String,
    rich: Rich,
    status: String,
    source: String,
}

/// The filling of the whole atom or ion: rule, observation, and which of the two is used.
#[derive(Clone, Debug, Serialize)]
pub struct Filling {
    rule: Named,
    observed: Option<Named>,
    differs: bool,
    used: String,
    note: String,
}

#[derive(Clone, Debug, Serialize)]
struct Named {
    text: String,
    rich: Rich,
    status: Option<String>,
}

fn level_name(term: Term, j: Option<TwiceJ>, odd: bool) -> TermName {
    let name = TermName::new(term, odd);
    match j {
        Some(j) => name.level(j),
        None => name,
    }
}

impl Ground {
    /// The lowest level of one configuration of the document.
    pub fn of(
        document: &Document,
        configuration: &Configuration,
        label: &str,
        all: &ls::LsTerms,
    ) -> Ground {
        let odd = configuration.is_odd();
        let rules = hund::ground(configuration.subshells());
        let steps = hund::steps(&rules, all);
        let hund_name = level_name(rules.term, rules.j, odd);
        let observed = document
            .filled()
            .and_then(|filled| filled.observed)
            .filter(|o| o.configuration == *configuration)
            .map(|o| o.entry);
        let observed_term = observed
            .as_ref()
            .and_then(observed_term)
            .filter(|t| all.times(*t) > 0);
        // "measured" is the kind of a number from a table; its status says how the table got it. A
        // level that the table names by J alone keeps the term of the rules as its LS name.
        let (term, j, by) = match (&observed, observed_term) {
            (Some(o), Some(term)) => (term, o.level.j, "measured"),
            (Some(o), None) if o.level.j.is_some() => (rules.term, o.level.j, "measured"),
            _ => (rules.term, rules.j, "hund"),
        };
        let named_by_table = by == "hund" || observed_term.is_some();
        let rich = match &observed {
            Some(o) if !named_by_table => observed_rich(o),
            _ => Rich::new().with(Piece::Term(level_name(term, j, odd))),
        };
        let differs = by != "hund" && (term != rules.term || (rules.j.is_some() && j != rules.j));
        Ground {
            configuration: label.to_owned(),
            term_text: term.to_string(),
            j,
            by,
            differs_from_hund: differs,
            rich,
            named_by_table,
            hund: Hund {
                term: rules.term.to_string(),
                j: rules.j,
                rich: Rich::new().with(Piece::Term(hund_name)),
                steps: steps
                    .into_iter()
                    .map(|step| Step {
                        rule: step.rule,
                        kept: kept(&step, odd),
                    })
                    .collect(),
            },
            observed: observed.as_ref().map(observed_row),
            term,
            status: observed.filter(|_| by == "measured").map(|o| o.status),
            several_open_shells: rules.several_open_shells,
        }
    }

    /// Whether the table of ground levels has it from measurements.
    pub fn is_measured(&self) -> bool {
        self.status == Some(Status::Measured)
    }

    /// Term and J, where J is known.
    pub fn level(&self) -> Option<(Term, TwiceJ)> {
        self.j.map(|j| (self.term, j))
    }

    /// The end of the answer's sentence.
    pub fn finish_sentence(&self, say: Rich) -> Rich {
        let say = say.say("; the lowest is ").then(&self.rich);
        let how = match self.status {
            None => return say.say(", by Hund’s rules."),
            Some(Status::Measured) => ", as observed",
            Some(_) => ", as tabulated",
        };
        if !self.named_by_table {
            say.say(how)
                .say("; Hund’s rules name ")
                .then(&self.hund.rich)
                .say(".")
        } else if self.differs_from_hund {
            say.say(how)
                .say(", where Hund’s rules name ")
                .then(&self.hund.rich)
                .say(".")
        } else {
            let agreed = if self.hund.j.is_some() {
                "agree"
            } else {
                "agree on the term"
            };
            say.say(how).say(format!(", and Hund’s rules {agreed}."))
        }
    }

    /// What the statement rests on.
    pub fn limits(&self) -> Vec<String> {
        let mut limits = Vec::new();
        match self.status {
            None => limits.push(
                "The lowest level is the one that Hund’s rules name; it is not looked up. For ground configurations the rules name the tabulated level in all but 98 of the 5317 entries that give a term; for excited ones they fail more often."
                    .to_owned(),
            ),
            Some(Status::Measured) => {}
            Some(status) => limits.push(format!(
                "The table marks its entry for this ion as {status}: its ionisation energy was not measured, and the level need not have been observed either."
            )),
        }
        if self.several_open_shells {
            limits.push(
                "Hund’s rules were made for one open shell. Here several are open, and the rules are only a guess."
                    .to_owned(),
            );
        }
        limits
    }
}

fn kept(step: &hund::Step, odd: bool) -> Rich {
    let mut rich = Rich::new();
    const SHOWN: usize = 8;
    if step.levels.is_empty() {
        for (place, term) in step.terms.iter().take(SHOWN).enumerate() {
            if place > 0 {
                rich = rich.say(", ");
            }
            rich = rich.with(Piece::Term(TermName::new(term.term, odd)));
            if term.times > 1 {
                rich = rich.say(format!(" ({} times)", term.times));
            }
        }
        if step.terms.len() > SHOWN {
            rich = rich.say(format!(" and {} more", step.terms.len() - SHOWN));
        }
    } else if let Some(term) = step.terms.first() {
        for (place, j) in step.levels.iter().enumerate() {
            if place > 0 {
                rich = rich.say(", ");
            }
            rich = rich.with(Piece::Term(TermName::new(term.term, odd).level(*j)));
        }
    }
    rich
}

/// The tabulated term, where the table names the level in LS coupling.
pub fn observed_term(observed: &ObservedGround) -> Option<Term> {
    let symbol = observed.level.term?;
    Some(Term {
        two_s: symbol.multiplicity.checked_sub(1)?,
        l: symbol.total_l,
    })
}

/// The tabulated level, typeset as far as the table names it.
pub fn observed_rich(observed: &ObservedGround) -> Rich {
    let odd = observed.level.odd;
    match (
        observed_term(observed),
        &observed.level.jj,
        observed.level.j,
    ) {
        (Some(term), _, j) => Rich::new().with(Piece::Term(level_name(term, j, odd))),
        (None, Some(jj), Some(j)) => Rich::words(format!("({jj}) with J = {j}")),
        (None, _, Some(j)) => Rich::words(format!("a level with J = {j}")),
        (None, _, None) => Rich::new(),
    }
}

fn observed_row(observed: &ObservedGround) -> Observed {
    let rich = observed_rich(observed);
    Observed {
        configuration: observed.written.to_owned(),
        term: observed_term(observed).map(|t| t.to_string()),
        j: observed.level.j,
        level_text: rich.plain(),
        rich,
        status: observed.status_text(),
        source: observed.source(),
    }
}

/// How the atom or ion of the document fills its subshells.
pub fn filling(document: &Document) -> Option<Filling> {
    let filled = document.filled()?;
    let named = |configuration: &Configuration, status| Named {
        text: configuration.short_text(),
        rich: super::entry::Named::untyped(configuration.clone()).rich(),
        status,
    };
    let observed = filled.observed.as_ref();
    Some(Filling {
        rule: named(&filled.rule, None),
        observed: observed.map(|o| named(&o.configuration, Some(o.entry.status_text()))),
        differs: filled.differs,
        used: filled.used.to_string(),
        note: filled.note(),
    })
}
