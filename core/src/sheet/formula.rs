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
            Formula::Row(parts) => plain_row(parts),
            Formula::Name(text) | Formula::Number(text) => text.clone(),
            Formula::Operator(text)
                if matches!(
                    text.as_str(),
                    "(" | ")" | "[" | "]" | "{" | "}" | "⟨" | "⟩" | "!"
                ) =>
            {
                text.clone()
            }
            Formula::Operator(text) if text == "," => ", ".to_owned(),
            Formula::Operator(text) => format!(" {text} "),
            Formula::Sub(base, below) => format!("{}_{}", base.plain().trim(), below.grouped()),
            Formula::Super(base, above) => format!("{}^{}", base.raised(), above.grouped()),
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

    /// In brackets where it is more than one thing.
    fn grouped(&self) -> String {
        let text = self.plain();
        let several = match self {
            Formula::Row(parts) => parts.len() > 1 && !is_bracketed(parts),
            Formula::Fraction(..) => true,
            _ => text.contains(' ') && !matches!(self, Formula::SixJ(_) | Formula::ThreeJ(_)),
        };
        if several { format!("({text})") } else { text }
    }

    /// What a power is of, in brackets where the power would be taken of its last part or leave a sign out.
    fn raised(&self) -> String {
        let text = self.plain();
        match self {
            Formula::Super(..) => format!("({text})"),
            Formula::Number(_) if text.starts_with('−') => format!("({text})"),
            _ => self.grouped(),
        }
    }
}

/// Whether one pair of brackets holds all of a row.
fn is_bracketed(parts: &[Formula]) -> bool {
    let mut depth = 0_i32;
    for (place, part) in parts.iter().enumerate() {
        if let Formula::Operator(text) = part {
            match text.as_str() {
                "(" | "[" | "{" | "⟨" => depth = depth.saturating_add(1),
                ")" | "]" | "}" | "⟩" => depth = depth.saturating_sub(1),
                _ => {}
            }
        }
        if depth == 0 && place + 1 < parts.len() {
            return false;
        }
    }
    depth == 0
}

/// Parts side by side: a fraction that is a factor in brackets, and a space behind an index.
fn plain_row(parts: &[Formula]) -> String {
    let is_factor = |part: Option<&Formula>, opening: &[&str]| match part {
        None => false,
        Some(Formula::Operator(text)) => opening.contains(&text.as_str()),
        Some(_) => true,
    };
    let mut text = String::new();
    for (place, part) in parts.iter().enumerate() {
        let before = place.checked_sub(1).and_then(|before| parts.get(before));
        let after = parts.get(place + 1);
        // Where an index or a power ends, or a letter that an index does not belong to.
        let apart = match (before, part) {
            (_, Formula::Operator(_) | Formula::Root(_)) => false,
            (_, Formula::Row(inner)) if matches!(inner.first(), Some(Formula::Operator(_))) => {
                false
            }
            (Some(Formula::Sub(..) | Formula::Super(..)), _) => true,
            (Some(Formula::Name(_)), Formula::Sub(..)) => true,
            _ => false,
        };
        if apart {
            text.push(' ');
        }
        let factor = is_factor(before, &[")", "]", "}", "⟩"])
            || is_factor(after, &["(", "[", "{", "⟨", "Σ", "∑"]);
        let own = part.plain();
        match part {
            Formula::Fraction(..) if factor => text.push_str(&format!("({own})")),
            _ if text.ends_with(' ') => text.push_str(own.trim_start()),
            _ => text.push_str(&own),
        }
    }
    text
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
        let plain = tree.plain().trim().to_owned();
        Typeset { tree, plain }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn one_line_keeps_the_meaning() {
        let product = row([name("h"), name("c")]);
        let ratio = fraction(sub(name("μ"), name("B")), product.clone());
        assert_eq!(row([ratio, name("B")]).plain(), "(μ_B/(hc))B");
        let half = fraction(number(1), number(2));
        let sum = row([name("a"), operator("+"), name("b")]);
        assert_eq!(row([half.clone(), name("K")]).plain(), "(1/2)K");
        assert_eq!(
            row([name("x"), operator("="), half.clone()]).plain(),
            "x = 1/2"
        );
        assert_eq!(sup(sum.clone(), number(2)).plain(), "(a + b)^2");
        assert_eq!(sup(half, number(2)).plain(), "(1/2)^2");
        assert_eq!(sup(product, number(2)).plain(), "(hc)^2");
        assert_eq!(sup(number(-3), number(2)).plain(), "(−3)^2");
        assert_eq!(sup(sup(name("e"), name("x")), number(2)).plain(), "(e^x)^2");
        let bracketed = row([operator("("), sum, operator(")")]);
        assert_eq!(sup(bracketed.clone(), number(2)).plain(), "(a + b)^2");
        let both = row([bracketed.clone(), bracketed]);
        assert_eq!(fraction(number(1), both).plain(), "1/((a + b)(a + b))");
        let moment = row([sub(name("μ"), name("B")), name("B")]);
        assert_eq!(moment.plain(), "μ_B B");
        let integral = row([sup(name("F"), name("k")), sub(name("f"), name("k"))]);
        let sum = row([operator("="), operator("∑"), integral]);
        assert_eq!(sum.plain().trim(), "= ∑ F^k f_k");
    }
}
