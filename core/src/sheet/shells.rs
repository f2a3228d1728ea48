//! Shells, subshells and the single-electron states in them.

use serde::Serialize;

use crate::configuration::{Configuration, Orbital, Subshell, shells};
use crate::quantity::TwiceJ;

use super::answer::Working;
use super::formula::{name, number, operator, row, sup};
use super::rich::{Kind, Rich};

/// One shell n with what the configuration puts into it.
#[derive(Clone, Debug, Serialize)]
pub struct ShellRow {
    n: u8,
    letter: String,
    electrons: u32,
    capacity: u32,
    subshells: Vec<SubshellRow>,
}

#[derive(Clone, Debug, Serialize)]
struct SubshellRow {
    label: String,
    l: u8,
    electrons: u32,
    capacity: u32,
    /// Every state holds an electron, or the states share fewer electrons.
    filled: &'static str,
    m_l: Vec<i32>,
    m_s: [TwiceJ; 2],
    states: u32,
}

/// The shells that hold electrons, n rising.
pub fn rows(configuration: &Configuration) -> Vec<ShellRow> {
    shells::shells(configuration)
        .iter()
        .map(|shell| ShellRow {
            n: shell.n,
            letter: letter(shell.letter),
            electrons: shell.electrons,
            capacity: shell.capacity,
            subshells: shell.subshells.iter().map(subshell_row).collect(),
        })
        .collect()
}

/// The shell's letter; larger n than 7 have none in use.
fn letter(letter: Option<char>) -> String {
    letter.map(String::from).unwrap_or_default()
}

fn subshell_row(subshell: &Subshell) -> SubshellRow {
    let orbital: Orbital = subshell.orbital();
    SubshellRow {
        label: orbital.to_string(),
        l: orbital.l(),
        electrons: subshell.electrons(),
        capacity: orbital.capacity(),
        filled: if subshell.is_open() { "open" } else { "full" },
        m_l: shells::m_l_range(orbital.l()),
        m_s: shells::M_S,
        states: orbital.capacity(),
    }
}

/// A bare shell n: ranges of ℓ and m_ℓ, n² pairs, 2n² states.
#[derive(Clone, Debug, Serialize)]
pub struct BareShell {
    n: u8,
    letter: String,
    l: Vec<BareSubshell>,
    m_l_values: u32,
    pairs: u32,
    states: u32,
}

#[derive(Clone, Debug, Serialize)]
struct BareSubshell {
    l: u8,
    letter: String,
    m_l: Vec<i32>,
    pairs: u32,
    states: u32,
}

impl BareShell {
    /// The shell n, up to n = 50.
    pub fn new(n: u8) -> Option<BareShell> {
        let shell = shells::bare_shell(n)?;
        let l: Vec<BareSubshell> = shell
            .subshells
            .into_iter()
            .map(|s| BareSubshell {
                l: s.l,
                letter: s.letter,
                pairs: s.states / 2,
                states: s.states,
                m_l: s.m_l,
            })
            .collect();
        let m_l_values = l.last().map_or(0, |s| s.pairs);
        Some(BareShell {
            n,
            letter: letter(shell.letter),
            l,
            m_l_values,
            pairs: shell.pairs,
            states: shell.states,
        })
    }

    /// The answer's sentence.
    pub fn sentence(&self) -> Rich {
        let name = if self.letter.is_empty() {
            String::new()
        } else {
            format!(", the {} shell,", self.letter)
        };
        Rich::words(format!("The shell n = {}{name} has ", self.n))
            .count(self.n, "value of ℓ, ", "values of ℓ, ")
            .count(
                self.m_l_values,
                "value of the magnetic quantum number, ",
                "values of the magnetic quantum number, ",
            )
            .count(self.pairs, "pair of the two and ", "pairs of the two and ")
            .count(self.states, "state.", "states.")
    }

    /// Where 2n² comes from.
    pub fn working(&self) -> Working {
        let n = u32::from(self.n);
        Working::new(
            "States of a shell",
            row([
                number(2),
                operator("∑"),
                operator("("),
                number(2),
                name("ℓ"),
                operator("+"),
                number(1),
                operator(")"),
                operator("="),
                number(2),
                sup(name("n"), number(2)),
            ]),
            "sum over ℓ = 0 … n − 1 and both spins",
        )
        .numbers(
            row([number(2), operator("×"), sup(number(n), number(2))]),
            Rich::new().number(f64::from(self.states), None, Kind::Exact),
        )
    }
}
