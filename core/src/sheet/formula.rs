//! Formulas as a small tree that the page turns into MathML, with a plain-text twin.

use serde::{Serialize, Serializer, ser::SerializeSeq};

/// A formula or a part of one.
#[derive(Clone, Debug, PartialEq)]
pub enum Formula {
    /// Parts side by side.
    Row(Vec<Formula>),
    /// An identifier.
    Name(String),
    /// A number.
    Number(String),
    /// An operator or a bracket.
    Operator(String),
    /// Below.
    Sub(Box<Formula>, Box<Formula>),
    /// Above.
    Super(Box<Formula>, Box<Formula>),
    /// A fraction.
    Fraction(Box<Formula>, Box<Formula>),
    /// A square root.
    Root(Box<Formula>),
    /// A 6j symbol by its two rows.
    SixJ([[String; 3]; 2]),
    /// A 3j symbol by its two rows.
    ThreeJ([[String; 3]; 2]),
}

/// Parts side by side.
#[inline(never)]
pub fn row(parts: impl IntoIterator<Item = Formula>) -> Formula {
    Formula::Row(parts.into_iter().collect())
}

/// An identifier.
#[inline(never)]
pub fn name(text: &str) -> Formula {
    Formula::Name(text.to_owned())
}

/// A number.
#[inline(never)]
pub fn number(value: impl ToString) -> Formula {
    Formula::Number(value.to_string().replace('-', "−"))
}

/// An operator or a bracket.
#[inline(never)]
pub fn operator(text: &str) -> Formula {
    Formula::Operator(text.to_owned())
}

/// a below b.
#[inline(never)]
pub fn sub(base: Formula, below: Formula) -> Formula {
    Formula::Sub(Box::new(base), Box::new(below))
}

/// b above a.
#[inline(never)]
pub fn sup(base: Formula, above: Formula) -> Formula {
    Formula::Super(Box::new(base), Box::new(above))
}

/// a over b.
#[inline(never)]
pub fn fraction(over: Formula, under: Formula) -> Formula {
    Formula::Fraction(Box::new(over), Box::new(under))
}

/// √a.
#[inline(never)]
pub fn root(inside: Formula) -> Formula {
    Formula::Root(Box::new(inside))
}

impl Formula {
    /// The same formula on one line of text.
    pub fn plain(&self) -> String {
        match self {
            Formula::Row(parts) => parts.iter().map(Formula::plain).collect(),
            Formula::Name(text) | Formula::Number(text) => text.clone(),
            Formula::Operator(text)
                if matches!(
                    text.as_str(),
                    "(" | ")" | "[" | "]" | "{" | "}" | "⟨" | "⟩" | "!" | ","
                ) =>
            {
                text.clone()
            }
            Formula::Operator(text) => format!(" {text} "),
            Formula::Sub(base, below) => format!("{}_{}", base.plain(), below.grouped()),
            Formula::Super(base, above) => format!("{}^{}", base.grouped(), above.grouped()),
            Formula::Fraction(over, under) => format!("{}/{}", over.grouped(), under.grouped()),
            Formula::Root(inside) => format!("√({})", inside.plain()),
            Formula::SixJ([above, below]) => {
                format!("{{{}; {}}}", above.join(" "), below.join(" "))
            }
            Formula::ThreeJ([above, below]) => {
                format!("({}; {})", above.join(" "), below.join(" "))
            }
        }
    }

    fn grouped(&self) -> String {
        let text = self.plain();
        if text.contains(' ') {
            format!("({text})")
        } else {
            text
        }
    }
}

impl Serialize for Formula {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut list = serializer.serialize_seq(None)?;
        match self {
            Formula::Row(parts) => {
                list.serialize_element("row")?;
                for part in parts {
                    list.serialize_element(part)?;
                }
            }
            Formula::Name(text) => {
                list.serialize_element("i")?;
                list.serialize_element(text)?;
            }
            Formula::Number(text) => {
                list.serialize_element("n")?;
                list.serialize_element(text)?;
            }
            Formula::Operator(text) => {
                list.serialize_element("o")?;
                list.serialize_element(text)?;
            }
            Formula::Sub(base, below) => {
                list.serialize_element("sub")?;
                list.serialize_element(base)?;
                list.serialize_element(below)?;
            }
            Formula::Super(base, above) => {
                list.serialize_element("sup")?;
                list.serialize_element(base)?;
                list.serialize_element(above)?;
            }
            Formula::Fraction(over, under) => {
                list.serialize_element("frac")?;
                list.serialize_element(over)?;
                list.serialize_element(under)?;
            }
            Formula::Root(inside) => {
                list.serialize_element("sqrt")?;
                list.serialize_element(inside)?;
            }
            Formula::SixJ(rows) | Formula::ThreeJ(rows) => {
                list.serialize_element("table")?;
                list.serialize_element(if matches!(self, Formula::SixJ(_)) {
                    "curly"
                } else {
                    "round"
                })?;
                let cells: Vec<Vec<Formula>> = rows
                    .iter()
                    .map(|r| r.iter().map(number).collect())
                    .collect();
                list.serialize_element(&cells)?;
            }
        }
        list.end()
    }
}

/// A formula with its plain twin, as answers carry it.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Typeset {
    tree: Formula,
    plain: String,
}

impl From<Formula> for Typeset {
    fn from(tree: Formula) -> Self {
        let plain = tree.plain();
        Typeset { tree, plain }
    }
}
