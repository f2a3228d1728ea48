//! A configuration of the sheet, and how it is named.

use crate::configuration::{
    self, CompletedCore, Configuration, Reading, Species, Subshell, Written, filling, join,
};
use crate::elements;
use crate::numerics::order::sort;
use crate::problem::{Problem, WayOut};

use super::rich::{Piece, Rich, SubshellName};

/// A configuration as the sheet names it.
#[derive(Clone, Debug)]
pub struct Named {
    /// All subshells.
    pub configuration: Configuration,
    /// The noble gas or typed core that stands in brackets.
    pub core: Option<String>,
    /// The subshells outside the brackets.
    pub outside: Vec<Subshell>,
    /// The subshells that name its levels: those that were typed, or all outside the brackets.
    pub beyond: Vec<Subshell>,
    /// What was added to the typed text.
    pub completed: Option<Completed>,
}

/// The inner electrons that were added to a typed configuration.
#[derive(Clone, Debug)]
pub struct Completed {
    /// As answers carry it: `[Ar]`, `[Kr] 4d10`.
    pub text: String,
    /// The same, typeset.
    pub rich: Rich,
}

impl Completed {
    fn new(core: &CompletedCore) -> Completed {
        let inner = &core.configuration;
        let (symbol, rest) = match core.noble_gas {
            Some(symbol) => (Some(symbol), Vec::new()),
            None => (
                inner.noble_core().and_then(elements::symbol),
                inner.valence(),
            ),
        };
        let rich = piece(symbol.map(str::to_owned), &rest);
        Completed {
            text: rich.plain(),
            rich,
        }
    }
}

impl Named {
    /// A configuration that nobody typed: the largest noble-gas core in brackets.
    pub fn untyped(configuration: Configuration) -> Named {
        Named {
            core: configuration
                .noble_core()
                .and_then(elements::symbol)
                .map(str::to_owned),
            outside: configuration.valence(),
            beyond: configuration.valence(),
            configuration,
            completed: None,
        }
    }

    /// A typed configuration made whole: the typed subshells name its levels.
    fn typed(written: &Written, reading: Reading) -> Named {
        if written.core.is_none() && reading.completed_core.is_none() {
            return Named::untyped(reading.configuration);
        }
        let mut beyond: Vec<Subshell> = written.subshells.iter().map(|s| s.subshell).collect();
        sort(&mut beyond);
        if beyond.is_empty() {
            return Named::untyped(reading.configuration);
        }
        let completed = reading.completed_core.as_ref().map(Completed::new);
        let configuration = reading.configuration;
        // A typed core stands as it was typed; otherwise the largest noble gas that fits.
        let (core, outside) = match written.core {
            Some(core) => (Some(core.symbol), beyond.clone()),
            None => (
                configuration.noble_core().and_then(elements::symbol),
                configuration.valence(),
            ),
        };
        Named {
            core: core.map(str::to_owned),
            outside,
            beyond,
            completed,
            configuration,
        }
    }

    /// How its levels are named: `3d6 4s2`.
    pub fn label(&self) -> String {
        join(&self.beyond)
    }

    /// With the core in brackets.
    pub fn rich(&self) -> Rich {
        piece(self.core.clone(), &self.outside)
    }

    /// Only what names its levels.
    pub fn short_rich(&self) -> Rich {
        piece(None, &self.beyond)
    }
}

/// What stands in one configuration field.
#[derive(Clone, Debug)]
pub enum Content {
    /// Electrons in subshells.
    Configuration(Named),
    /// `n=5`: a shell without electrons.
    BareShell(u8),
}

/// One configuration of the sheet.
#[derive(Clone, Debug)]
pub struct Entry {
    /// Its place in the sheet; empty for the ground configuration that an empty list stands for.
    pub path: String,
    /// How its levels are named.
    pub label: String,
    /// Typed, observed or by the filling rule.
    pub source: &'static str,
    /// What was read.
    pub content: Content,
}

impl Entry {
    /// The configuration with its name, unless it is a bare shell.
    pub fn named(&self) -> Option<&Named> {
        match &self.content {
            Content::Configuration(named) => Some(named),
            Content::BareShell(_) => None,
        }
    }

    /// The configuration, unless it is a bare shell.
    pub fn configuration(&self) -> Option<&Configuration> {
        self.named().map(|named| &named.configuration)
    }
}

/// What a configuration field with this text holds, complete.
pub fn content_of(text: &str, species: &Species) -> Result<Content, Vec<Problem>> {
    let written = configuration::parse(text)?;
    if let Some(n) = written.bare_shell {
        return Ok(Content::BareShell(n));
    }
    configuration::complete(&written, species)
        .map(|reading| Content::Configuration(Named::typed(&written, reading)))
}

/// Takes back the ways out of a field's only fault that lead to another one: electrons that do not fit the species, a
/// configuration that stands in another field. The ground configuration is left where nothing else would be.
pub fn keep_fitting_ways(problem: &mut Problem, species: &Species, others: &[&str]) {
    let whole = |text: &str| match content_of(text, species) {
        Ok(Content::Configuration(named)) => Some(named.configuration),
        _ => None,
    };
    let others: Vec<Configuration> = others.iter().filter_map(|other| whole(other)).collect();
    let fits = |text: &str| match content_of(text, species) {
        Ok(Content::Configuration(named)) => !others.contains(&named.configuration),
        Ok(Content::BareShell(_)) => true,
        Err(_) => text.trim().is_empty(),
    };
    problem.ways.retain(|way| fits(&way.replacement));
    if !problem.ways.is_empty() {
        return;
    }
    let ground = species
        .element
        .and_then(|z| filling::ground(z, species.charge))
        .map(|ground| ground.configuration().valence_text());
    if let Some(text) = ground.filter(|text| fits(text)) {
        problem.ways.push(WayOut {
            label: format!("Use {text}"),
            replacement: text,
        });
    }
}

fn piece(core: Option<String>, subshells: &[Subshell]) -> Rich {
    let subshells: Vec<SubshellName> = subshells.iter().copied().map(SubshellName::from).collect();
    Rich::new().with(Piece::Configuration { core, subshells })
}
