//! Typeset text as typed pieces: one object, several renderers (screen, speech, plain text).

use std::fmt;

use serde::{Serialize, Serializer, ser::SerializeMap};

use crate::configuration::{Subshell, orbital_letter, total_letter};
use crate::quantity::TwiceJ;
use crate::terms::{Level, Term};

/// What kind a number is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Kind {
    /// Exact by symmetry or counting.
    Exact,
    /// Computed by a method named beside it.
    Computed,
    /// Typed by the user.
    Entered,
    /// From a table of measurements, its source beside it.
    Measured,
}

/// A count: a JSON number up to 2⁵³, text above, where a double would round it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Count(pub u128);

impl fmt::Display for Count {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        self.0.fmt(f)
    }
}

impl Serialize for Count {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        match u64::try_from(self.0) {
            Ok(small) if small <= 1 << 53 => serializer.serialize_u64(small),
            _ => serializer.collect_str(&self.0),
        }
    }
}

/// Six digits, as a number is read aloud.
pub fn six_digits(value: f64) -> f64 {
    format!("{value:.5e}").parse().unwrap_or(value)
}

/// An LS term or level as it is typeset.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct TermName {
    /// 2S + 1.
    pub multiplicity: u32,
    /// S, P, D …
    pub letter: String,
    /// Odd parity.
    pub odd: bool,
    /// J, for a level.
    #[serde(rename = "J")]
    pub j: Option<TwiceJ>,
    /// Running index of a repeated term.
    pub index: Option<Count>,
}

impl TermName {
    /// The name of a term of a configuration of that parity.
    #[inline(never)]
    pub fn new(term: Term, odd: bool) -> Self {
        TermName {
            multiplicity: term.multiplicity(),
            letter: total_letter(term.l),
            odd,
            j: None,
            index: None,
        }
    }

    /// The name of a level.
    #[inline(never)]
    pub fn of_level(level: &Level, odd: bool) -> Self {
        let mut name = TermName::new(level.term, odd).level(level.j);
        name.index = level.index.map(Count);
        name
    }

    /// The level J of this term.
    #[must_use]
    #[inline(never)]
    pub fn level(mut self, j: TwiceJ) -> Self {
        self.j = Some(j);
        self
    }

    /// The k-th of several equal terms.
    #[must_use]
    #[inline(never)]
    pub fn number(mut self, index: Option<u128>) -> Self {
        self.index = index.map(Count);
        self
    }

    /// Bare ASCII as in the answers' keys: `5D`, `5D4`, `2D5/2 #2`.
    #[inline(never)]
    pub fn plain(&self) -> String {
        let mut text = format!("{}{}", self.multiplicity, self.letter);
        if let Some(j) = self.j {
            text.push_str(&j.to_string());
        }
        if let Some(index) = self.index {
            text.push_str(&format!(" #{index}"));
        }
        text
    }
}

/// One subshell as it is typeset.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct SubshellName {
    /// `3d`
    pub label: String,
    /// Principal quantum number.
    pub n: u8,
    /// Letter of ℓ.
    pub l: String,
    /// Electrons in it.
    pub electrons: u32,
}

impl From<Subshell> for SubshellName {
    fn from(subshell: Subshell) -> Self {
        let orbital = subshell.orbital();
        SubshellName {
            label: orbital.to_string(),
            n: orbital.n(),
            l: orbital_letter(orbital.l().into()),
            electrons: subshell.electrons(),
        }
    }
}

/// One piece of typeset text.
#[derive(Clone, Debug, PartialEq)]
pub enum Piece {
    /// Words.
    Words(String),
    /// A configuration, its core by name if it has one.
    Configuration {
        core: Option<String>,
        subshells: Vec<SubshellName>,
    },
    /// A term or level.
    Term(TermName),
    /// A jj coupled name: (label, j, electrons) of each j subshell, then J.
    Jj {
        subshells: Vec<(String, TwiceJ, u32)>,
        j: Option<TwiceJ>,
    },
    /// A jK coupled name.
    Pair {
        parent: Rich,
        multiplicity: i64,
        k: TwiceJ,
        odd: bool,
        j: Option<TwiceJ>,
    },
    /// An atom or ion.
    Species {
        symbol: String,
        charge: i32,
        stage: String,
        mass_number: Option<u16>,
    },
    /// A number with its unit and kind.
    Number {
        text: String,
        unit: Option<&'static str>,
        kind: Option<Kind>,
    },
}

/// Typeset text.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Rich(pub Vec<Piece>);

impl Rich {
    /// Nothing yet.
    #[inline(never)]
    pub fn new() -> Self {
        Rich(Vec::new())
    }

    /// Only words.
    #[inline(never)]
    pub fn words(text: impl Into<String>) -> Self {
        Rich::new().say(text)
    }

    /// With words added.
    #[must_use]
    #[inline(never)]
    pub fn say(mut self, text: impl Into<String>) -> Self {
        self.0.push(Piece::Words(text.into()));
        self
    }

    /// With one more piece.
    #[must_use]
    #[inline(never)]
    pub fn with(mut self, piece: Piece) -> Self {
        self.0.push(piece);
        self
    }

    /// With another text behind it.
    #[must_use]
    #[inline(never)]
    pub fn then(mut self, other: &Rich) -> Self {
        self.0.extend(other.0.iter().cloned());
        self
    }

    /// With a number, its unit and its kind.
    #[must_use]
    #[inline(never)]
    pub fn number(self, value: f64, unit: Option<&'static str>, kind: Kind) -> Self {
        self.with(Piece::Number {
            text: value.to_string(),
            unit,
            kind: Some(kind),
        })
    }

    /// With an exact whole number and what it counts.
    #[must_use]
    #[inline(never)]
    pub fn count(self, number: impl ToString, singular: &str, plural: &str) -> Self {
        let text = number.to_string();
        let noun = if text == "1" { singular } else { plural };
        self.with(Piece::Number {
            text,
            unit: None,
            kind: None,
        })
        .say(format!(" {noun}"))
    }

    /// ASCII-leaning plain text, as answers and the command print it.
    #[inline(never)]
    pub fn plain(&self) -> String {
        self.0.iter().map(Piece::plain).collect()
    }
}

impl Piece {
    fn plain(&self) -> String {
        match self {
            Piece::Words(text) => text.clone(),
            Piece::Configuration { core, subshells } => {
                let mut parts: Vec<String> = core.iter().map(|c| format!("[{c}]")).collect();
                parts.extend(subshells.iter().map(|s| match s.electrons {
                    1 => s.label.clone(),
                    n => format!("{}{n}", s.label),
                }));
                parts.join(" ")
            }
            Piece::Term(term) => term.plain(),
            Piece::Jj { subshells, j } => {
                let parts: Vec<String> = subshells
                    .iter()
                    .map(|(label, j, electrons)| match electrons {
                        1 => format!("{label}({j})"),
                        n => format!("{label}({j}){n}"),
                    })
                    .collect();
                match j {
                    Some(j) => format!("{} J={j}", parts.join(" ")),
                    None => parts.join(" "),
                }
            }
            Piece::Pair {
                parent,
                multiplicity,
                k,
                j,
                ..
            } => {
                let tail = j.map(|j| j.to_string()).unwrap_or_default();
                let before = match parent.0.as_slice() {
                    [] => String::new(),
                    _ => format!("({}) ", parent.plain()),
                };
                format!("{before}{multiplicity}[{k}]{tail}")
            }
            Piece::Species {
                symbol,
                charge,
                stage,
                mass_number,
            } => {
                let mass = mass_number.map(|a| a.to_string()).unwrap_or_default();
                match (stage.as_str(), charge) {
                    ("", -1) => format!("{mass}{symbol}-"),
                    ("", 0..) => format!("{mass}{symbol}"),
                    ("", _) => format!("{mass}{symbol} {}-", charge.unsigned_abs()),
                    (stage, _) => format!("{mass}{symbol} {stage}"),
                }
            }
            Piece::Number { text, unit, .. } => match unit {
                Some(unit) => format!("{text} {unit}"),
                None => text.clone(),
            },
        }
    }
}

impl Serialize for Rich {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_seq(&self.0)
    }
}

fn tagged<S: Serializer, T: Serialize>(
    serializer: S,
    tag: &str,
    value: &T,
) -> Result<S::Ok, S::Error> {
    let mut map = serializer.serialize_map(Some(1))?;
    map.serialize_entry(tag, value)?;
    map.end()
}

impl Serialize for Piece {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        #[derive(Serialize)]
        struct ConfigurationShape<'a> {
            core: &'a Option<String>,
            subshells: &'a [SubshellName],
        }
        #[derive(Serialize)]
        struct JjSubshell<'a> {
            label: &'a str,
            j: TwiceJ,
            electrons: u32,
        }
        #[derive(Serialize)]
        struct JjShape<'a> {
            subshells: Vec<JjSubshell<'a>>,
            #[serde(rename = "J")]
            j: Option<TwiceJ>,
        }
        #[derive(Serialize)]
        struct PairShape<'a> {
            parent: &'a Rich,
            multiplicity: i64,
            #[serde(rename = "K")]
            k: TwiceJ,
            odd: bool,
            #[serde(rename = "J")]
            j: Option<TwiceJ>,
        }
        #[derive(Serialize)]
        struct SpeciesShape<'a> {
            symbol: &'a str,
            charge: i32,
            stage: &'a str,
            mass_number: Option<u16>,
        }
        #[derive(Serialize)]
        struct NumberShape<'a> {
            text: &'a str,
            unit: Option<&'static str>,
            kind: Option<Kind>,
        }
        match self {
            Piece::Words(text) => serializer.serialize_str(text),
            Piece::Configuration { core, subshells } => tagged(
                serializer,
                "configuration",
                &ConfigurationShape { core, subshells },
            ),
            Piece::Term(term) => tagged(serializer, "term", term),
            Piece::Jj { subshells, j } => {
                let subshells = subshells
                    .iter()
                    .map(|(label, j, electrons)| JjSubshell {
                        label,
                        j: *j,
                        electrons: *electrons,
                    })
                    .collect();
                tagged(serializer, "jj", &JjShape { subshells, j: *j })
            }
            Piece::Pair {
                parent,
                multiplicity,
                k,
                odd,
                j,
            } => tagged(
                serializer,
                "pair",
                &PairShape {
                    parent,
                    multiplicity: *multiplicity,
                    k: *k,
                    odd: *odd,
                    j: *j,
                },
            ),
            Piece::Species {
                symbol,
                charge,
                stage,
                mass_number,
            } => tagged(
                serializer,
                "species",
                &SpeciesShape {
                    symbol,
                    charge: *charge,
                    stage,
                    mass_number: *mass_number,
                },
            ),
            Piece::Number { text, unit, kind } => tagged(
                serializer,
                "number",
                &NumberShape {
                    text,
                    unit: *unit,
                    kind: *kind,
                },
            ),
        }
    }
}
