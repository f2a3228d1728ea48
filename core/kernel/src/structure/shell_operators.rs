//! Reduced matrix elements of products of creation and annihilation operators within one subshell.
//!
//! a†_{mσ} is a tensor of rank ½ in spin and ℓ in orbital space, and so is
//! ã_{mσ} = (−1)^{½−σ+ℓ−m} a_{−m−σ}. Their elements are coefficients of fractional parentage,
//!
//! ⟨ℓ^N αSL‖a†‖ℓ^(N−1) α′S′L′⟩ = √[N(2S+1)(2L+1)] ⟨ℓ^(N−1) α′S′L′, ℓ|}ℓ^N αSL⟩,
//! ⟨ℓ^(N−1) α′S′L′‖ã‖ℓ^N αSL⟩ = (−1)^{½+S−S′+ℓ+L−L′} ⟨ℓ^N αSL‖a†‖ℓ^(N−1) α′S′L′⟩;
//!
//! one sign common to all a† and ã is left out, for they occur in even number. Products are coupled
//! by sums over the states between (Edmonds 1957, eq. 7.1.1).
//!
//! Source: Judd, *Second Quantization and Atomic Spectroscopy* (1967).

use super::basis::Coupled;
use super::matrix::Table;
use super::symbols::{Symbols, signed};
use crate::angular::equivalent::classify;
use crate::angular::parentage::parents;
use crate::angular::wigner_3j;
use crate::numerics::sorted_map::SortedMap;
use crate::problem::Problem;
use crate::radial::average::within;
use std::rc::Rc;

/// Below this a reduced matrix element is zero: products that vanish leave rounding behind.
const ZERO: f64 = 1e-12;

/// Ranks in spin and orbital space, both doubled.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord)]
pub struct Ranks {
    /// 2κ.
    pub spin: i32,
    /// 2k.
    pub orbital: i32,
}

impl Ranks {
    /// Of a†and ã: ½ and ℓ.
    pub fn of_electron(l: u8) -> Self {
        Ranks {
            spin: 1,
            orbital: 2 * i32::from(l),
        }
    }
}

/// A coupled product of a† (`true`) and ã (`false`).
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Product {
    /// One operator.
    One(bool),
    /// [x y]^X.
    Two(bool, bool, Ranks),
    /// [[x y]^X z]^K, with X and K.
    FirstTwo(bool, bool, bool, Ranks, Ranks),
    /// [x [y z]^X]^K, with X and K.
    LastTwo(bool, bool, bool, Ranks, Ranks),
}

impl Product {
    /// How many electrons it adds.
    fn gain(self) -> i64 {
        let of = |creates: bool| if creates { 1 } else { -1 };
        match self {
            Product::One(x) => of(x),
            Product::Two(x, y, _) => of(x) + of(y),
            Product::FirstTwo(x, y, z, ..) | Product::LastTwo(x, y, z, ..) => of(x) + of(y) + of(z),
        }
    }

    /// Whether it is a product of an odd number of operators.
    pub fn is_odd(self) -> bool {
        !matches!(self, Product::Two(..))
    }

    /// Its ranks for an electron of ℓ.
    pub fn ranks(self, l: u8) -> Ranks {
        match self {
            Product::One(_) => Ranks::of_electron(l),
            Product::Two(_, _, ranks) => ranks,
            Product::FirstTwo(.., whole) | Product::LastTwo(.., whole) => whole,
        }
    }
}

/// Products computed before, by ℓ, the electrons on the right and the product.
#[derive(Default)]
pub struct ShellOperators {
    products: SortedMap<(u8, u32, Product), Rc<Table>>,
    repulsions: SortedMap<(u8, u32), Rc<Vec<Table>>>,
    terms: SortedMap<(u8, u32), Rc<Vec<Coupled>>>,
}

impl ShellOperators {
    /// ⟨ℓ^N′‖product‖ℓ^N⟩ with `electrons` = N; rows and columns in the order of [`classify`].
    ///
    /// # Errors
    /// Those of [`parents`].
    pub fn product(
        &mut self,
        symbols: &mut Symbols,
        l: u8,
        electrons: u32,
        product: Product,
    ) -> Result<Rc<Table>, Problem> {
        let key = (l, electrons, product);
        if let Some(found) = self.products.get(&key) {
            return Ok(Rc::clone(found));
        }
        let table = Rc::new(self.compute(symbols, l, electrons, product)?);
        self.products.insert(key, Rc::clone(&table));
        Ok(table)
    }

    fn compute(
        &mut self,
        symbols: &mut Symbols,
        l: u8,
        electrons: u32,
        product: Product,
    ) -> Result<Table, Problem> {
        let whole = product.ranks(l);
        let one = Ranks::of_electron(l);
        let (left, left_ranks, right, right_ranks) = match product {
            Product::One(creates) => return self.single(l, electrons, creates),
            Product::Two(x, y, _) => (Product::One(x), one, Product::One(y), one),
            Product::FirstTwo(x, y, z, pair, _) => {
                (Product::Two(x, y, pair), pair, Product::One(z), one)
            }
            Product::LastTwo(x, y, z, pair, _) => {
                (Product::One(x), one, Product::Two(y, z, pair), pair)
            }
        };
        let (Some(between), Some(after)) = (
            changed(l, electrons, right.gain()),
            changed(l, electrons, product.gain()),
        ) else {
            return Ok(Table::default());
        };
        let first = self.product(symbols, l, between, left)?;
        let second = self.product(symbols, l, electrons, right)?;
        let rows = self.terms(l, after)?;
        let middle = self.terms(l, between)?;
        let columns = self.terms(l, electrons)?;
        let width = f64::from(whole.spin + 1) * f64::from(whole.orbital + 1);
        let root = width.sqrt();
        let allows = |a: Coupled, ranks: Ranks, b: Coupled| {
            triangle(a.two_s, ranks.spin, b.two_s) && triangle(2 * a.l, ranks.orbital, 2 * b.l)
        };
        Ok(Table::from_fn(rows.len(), columns.len(), |row, column| {
            let (Some(&bra), Some(&ket)) = (rows.get(row), columns.get(column)) else {
                return 0.0;
            };
            if !allows(bra, whole, ket) {
                return 0.0;
            }
            let mut sum = 0.0;
            for (place, (&mid, &value)) in middle.iter().zip(first.row(row)).enumerate() {
                if value == 0.0 {
                    continue;
                }
                let other = second.at(place, column);
                if other != 0.0 {
                    let spin = [left_ranks.spin, right_ranks.spin, whole.spin];
                    let orbital = [left_ranks.orbital, right_ranks.orbital, whole.orbital];
                    let [k1, k2, k] = spin;
                    let spin = symbols.six([k1, k2, k, ket.two_s, bra.two_s, mid.two_s]);
                    let [k1, k2, k] = orbital;
                    let orbital = symbols.six([k1, k2, k, 2 * ket.l, 2 * bra.l, 2 * mid.l]);
                    sum += value * other * spin * orbital;
                }
            }
            let exponent =
                (bra.two_s + ket.two_s + whole.spin) / 2 + bra.l + ket.l + whole.orbital / 2;
            let value = signed(exponent, root * sum);
            if value.abs() > ZERO { value } else { 0.0 }
        }))
    }

    fn single(&mut self, l: u8, electrons: u32, creates: bool) -> Result<Table, Problem> {
        let more = if creates { electrons + 1 } else { electrons };
        if more == 0 || more > 4 * u32::from(l) + 2 {
            return Ok(Table::default());
        }
        let table = parents(l, more)?;
        let children = self.terms(l, more)?;
        let fewer = self.terms(l, more - 1)?;
        let element = |child: usize, parent: usize| {
            let Some(&whole) = children.get(child) else {
                return 0.0;
            };
            (f64::from(more) * whole.degeneracy()).sqrt() * table.coefficient(child, parent)
        };
        if creates {
            return Ok(Table::from_fn(children.len(), fewer.len(), element));
        }
        Ok(Table::from_fn(
            fewer.len(),
            children.len(),
            |parent, child| {
                let (Some(part), Some(whole)) = (fewer.get(parent), children.get(child)) else {
                    return 0.0;
                };
                let spin = (1 + whole.two_s - part.two_s) / 2;
                signed(
                    spin + i32::from(l) + whole.l - part.l,
                    element(child, parent),
                )
            },
        ))
    }

    fn terms(&mut self, l: u8, electrons: u32) -> Result<Rc<Vec<Coupled>>, Problem> {
        if let Some(found) = self.terms.get(&(l, electrons)) {
            return Ok(Rc::clone(found));
        }
        let terms: Vec<Coupled> = classify(l, electrons)?.iter().map(Coupled::of).collect();
        let terms = Rc::new(terms);
        self.terms.insert((l, electrons), Rc::clone(&terms));
        Ok(terms)
    }

    /// For k = 2, 4, …, 2ℓ the matrix of f_k in ℓ^N, E = Σ F^k f_k, less its average.
    ///
    /// Two electrons have f_k = ⟨ℓ‖C^k‖ℓ⟩² (−1)^L {ℓ ℓ L; ℓ ℓ k}; a sum over pairs in ℓ^N is N/(N−2)
    /// times the one over pairs among the first N−1 electrons.
    ///
    /// Source: Slater, Phys. Rev. 34, 1293 (1929); Racah, Phys. Rev. 63, 367 (1943), eq. 15.
    ///
    /// # Errors
    /// Those of [`parents`].
    pub fn repulsion(
        &mut self,
        symbols: &mut Symbols,
        l: u8,
        electrons: u32,
    ) -> Result<Vec<Table>, Problem> {
        let terms = self.terms(l, electrons)?;
        if terms.len() == 1 {
            return Ok(within(l)
                .iter()
                .map(|_| Table::from_fn(1, 1, |_, _| 0.0))
                .collect());
        }
        let pairs = f64::from(electrons) * (f64::from(electrons) - 1.0) / 2.0;
        let whole = self.whole_repulsion(symbols, l, electrons)?;
        Ok(within(l)
            .iter()
            .zip(whole.iter())
            .map(|(rank, table)| {
                Table::from_fn(terms.len(), terms.len(), |row, column| {
                    let average = if row == column {
                        -pairs * rank.coefficient
                    } else {
                        0.0
                    };
                    let value = table.at(row, column) - average;
                    if value.abs() > ZERO { value } else { 0.0 }
                })
            })
            .collect())
    }

    fn whole_repulsion(
        &mut self,
        symbols: &mut Symbols,
        l: u8,
        electrons: u32,
    ) -> Result<Rc<Vec<Table>>, Problem> {
        if let Some(found) = self.repulsions.get(&(l, electrons)) {
            return Ok(Rc::clone(found));
        }
        let terms = self.terms(l, electrons)?;
        let mut tables = Vec::new();
        if electrons <= 2 {
            let two_l = 2 * i32::from(l);
            for k in (2..=two_l).step_by(2) {
                let reduced = multipole(l, k, l);
                tables.push(Table::from_fn(
                    terms.len(),
                    terms.len(),
                    |row, column| match terms.get(row) {
                        Some(term) if row == column => {
                            let six = symbols.six([two_l, two_l, 2 * term.l, two_l, two_l, 2 * k]);
                            signed(term.l, reduced * reduced * six)
                        }
                        _ => 0.0,
                    },
                ));
            }
        } else {
            let before = self.whole_repulsion(symbols, l, electrons - 1)?;
            let table = parents(l, electrons)?;
            let parts = self.terms(l, electrons - 1)?;
            let scale = f64::from(electrons) / (f64::from(electrons) - 2.0);
            // Parents of equal S L stand next to each other.
            let mut runs = Vec::new();
            let mut start = 0;
            for run in parts.chunk_by(|a, b| a == b) {
                runs.push(start..start + run.len());
                start += run.len();
            }
            for fewer in before.iter() {
                tables.push(Table::from_fn(terms.len(), terms.len(), |row, column| {
                    if column < row || terms.get(row) != terms.get(column) {
                        return 0.0;
                    }
                    let mut sum = 0.0;
                    for run in &runs {
                        for one in run.clone() {
                            let left = table.coefficient(row, one);
                            if left != 0.0 {
                                for two in run.clone() {
                                    // The upper triangle is what was computed.
                                    let pair = fewer.at(one.min(two), one.max(two));
                                    sum += left * table.coefficient(column, two) * pair;
                                }
                            }
                        }
                    }
                    scale * sum
                }));
            }
        }
        let tables: Rc<Vec<Table>> = Rc::new(tables);
        self.repulsions.insert((l, electrons), Rc::clone(&tables));
        Ok(tables)
    }
}

/// ⟨ℓ‖C^k‖ℓ′⟩ = (−1)^ℓ √[(2ℓ+1)(2ℓ′+1)] (ℓ k ℓ′; 0 0 0).
pub fn multipole(l: u8, k: i32, other: u8) -> f64 {
    let (a, b) = (2 * i32::from(l), 2 * i32::from(other));
    let root = (f64::from(a + 1) * f64::from(b + 1)).sqrt();
    signed(i32::from(l), root * wigner_3j(a, 2 * k, b, 0, 0, 0))
}

fn triangle(two_a: i32, two_b: i32, two_c: i32) -> bool {
    two_c >= (two_a - two_b).abs() && two_c <= two_a + two_b
}

fn changed(l: u8, electrons: u32, gain: i64) -> Option<u32> {
    let after = u32::try_from(i64::from(electrons) + gain).ok()?;
    (after <= 4 * u32::from(l) + 2).then_some(after)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::angular::unit_tensors::unit_tensor;

    /// −[a†ã]^(κk) √2 is √… times the unit tensor, which sums over parents in its own way.
    #[test]
    fn pairs_of_one_shell_are_the_unit_tensors() {
        let mut operators = ShellOperators::default();
        let mut symbols = Symbols::default();
        for (l, electrons) in [(1, 2), (1, 4), (2, 3), (2, 6), (3, 3), (3, 13)] {
            for (kappa, k) in [(0, 1), (0, 2), (1, 1), (1, 0)] {
                let ranks = Ranks {
                    spin: 2 * kappa,
                    orbital: 2 * k,
                };
                let product = Product::Two(true, false, ranks);
                let table = operators
                    .product(&mut symbols, l, electrons, product)
                    .expect("within bounds");
                let unit = unit_tensor(l, electrons, kappa as u8, k as u8).expect("within bounds");
                let root = f64::from((2 * kappa + 1) * (2 * k + 1)).sqrt();
                let terms = unit.terms().len();
                for row in 0..terms {
                    for column in 0..terms {
                        let difference = table.at(row, column) + root * unit.element(row, column);
                        assert!(difference.abs() < 1e-12, "{l} {electrons} {kappa} {k}");
                    }
                }
            }
        }
    }
}
