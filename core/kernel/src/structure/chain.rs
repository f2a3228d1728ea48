//! Reduced matrix elements of operators that act on several subshells, coupled one after another.
//!
//! An operator [[[T₁ T₂]^(K₂) T₃]^(K₃) …] has one factor for each subshell it touches. Between
//! coupled states each subshell adds a step of a spin and an orbital 9j symbol (6j symbols where a
//! rank is zero) and its own reduced element. Operators anticommute with electrons of subshells
//! that stand before: a factor of an odd number of operators takes (−1)^N for each of them.
//!
//! Source: Fano, Phys. Rev. 140, A67 (1965), for operators and states in one order; Edmonds,
//! *Angular Momentum in Quantum Mechanics* (1957), eq. 7.1.5.

use super::basis::{Basis, Coupled, State};
use super::matrix::Table;
use super::recoupling::{Electron, Layout, Sorted};
use super::shell_operators::{Product, Ranks, ShellOperators};
use super::symbols::{Symbols, signed};
use crate::problem::Problem;
use std::rc::Rc;

/// What acts on one subshell.
struct Link {
    subshell: usize,
    table: Rc<Table>,
    /// Ranks of this factor.
    local: Ranks,
    /// Ranks of all factors up to this one.
    after: Ranks,
}

/// One operator from the states of one configuration to those of another.
pub struct Chain {
    links: Vec<Link>,
    sign: f64,
}

/// What chains are made with.
#[derive(Default)]
pub struct Workshop {
    /// Coupling coefficients.
    pub symbols: Symbols,
    /// Operators within subshells.
    pub operators: ShellOperators,
}

impl Workshop {
    /// [[p₁p₂]^X [p₃p₄]^X]^(00) on the states of configuration `ket`; nothing where it vanishes.
    ///
    /// # Errors
    /// Those of [`ShellOperators::product`].
    pub fn interaction(
        &mut self,
        basis: &Basis,
        ket: usize,
        sorted: &Sorted,
        x: Ranks,
    ) -> Result<Option<Chain>, Problem> {
        let p = sorted.operators;
        let [first, second, third, fourth] = p.map(|electron| electron.creates);
        let [a, b, c, d] = p.map(|electron| electron.subshell);
        let [one, _, _, four] = p.map(|electron| Ranks::of_electron(electron.l));
        let scalar = Ranks::default();
        let factors = match sorted.layout {
            Layout::OneOneOneOne => vec![
                (a, Product::One(first), one),
                (b, Product::One(second), x),
                (c, Product::One(third), four),
                (d, Product::One(fourth), scalar),
            ],
            Layout::TwoOneOne => vec![
                (a, Product::Two(first, second, x), x),
                (c, Product::One(third), four),
                (d, Product::One(fourth), scalar),
            ],
            Layout::OneTwoOne => vec![
                (a, Product::One(first), one),
                (b, Product::Two(second, third, x), four),
                (d, Product::One(fourth), scalar),
            ],
            Layout::OneOneTwo => vec![
                (a, Product::One(first), one),
                (b, Product::One(second), x),
                (c, Product::Two(third, fourth, x), scalar),
            ],
            Layout::TwoTwo => vec![
                (a, Product::Two(first, second, x), x),
                (c, Product::Two(third, fourth, x), scalar),
            ],
            Layout::ThreeOne => vec![
                (a, Product::FirstTwo(first, second, third, x, four), four),
                (d, Product::One(fourth), scalar),
            ],
            Layout::OneThree => vec![
                (a, Product::One(first), one),
                (b, Product::LastTwo(second, third, fourth, x, one), scalar),
            ],
        };
        self.chain(basis, ket, &factors)
    }

    /// [a†c̃]^(κk) on the states of configuration `ket`; nothing where it vanishes.
    ///
    /// # Errors
    /// Those of [`ShellOperators::product`].
    pub fn one_electron(
        &mut self,
        basis: &Basis,
        ket: usize,
        created: Electron,
        annihilated: Electron,
        ranks: Ranks,
    ) -> Result<Option<Chain>, Problem> {
        let (a, c) = (created.subshell, annihilated.subshell);
        if a == c {
            return self.chain(basis, ket, &[(a, Product::Two(true, false, ranks), ranks)]);
        }
        let mut factors = [
            (a, Product::One(true), Ranks::of_electron(created.l)),
            (c, Product::One(false), ranks),
        ];
        let mut sign = 1.0;
        if a > c {
            factors = [
                (c, Product::One(false), Ranks::of_electron(annihilated.l)),
                (a, Product::One(true), ranks),
            ];
            // Anticommutation, and the order of coupling.
            let l = i32::from(created.l) + i32::from(annihilated.l);
            sign = signed(l + (ranks.spin + ranks.orbital) / 2, 1.0);
        }
        let chain = self.chain(basis, ket, &factors)?;
        Ok(chain.map(|mut chain| {
            chain.sign *= sign;
            chain
        }))
    }

    fn chain(
        &mut self,
        basis: &Basis,
        ket: usize,
        factors: &[(usize, Product, Ranks)],
    ) -> Result<Option<Chain>, Problem> {
        let mut links = Vec::with_capacity(factors.len());
        let mut passed = 0_u32;
        for &(subshell, product, after) in factors {
            let Some(&l) = basis.subshells().get(subshell) else {
                return Ok(None);
            };
            let electrons = basis.electrons(ket, subshell);
            let table = self
                .operators
                .product(&mut self.symbols, l, electrons, product)?;
            if table.is_zero() {
                return Ok(None);
            }
            if product.is_odd() {
                let before = (0..subshell).map(|place| basis.electrons(ket, place));
                passed += before.sum::<u32>();
            }
            links.push(Link {
                subshell,
                table,
                local: product.ranks(l),
                after,
            });
        }
        let sign = if passed.is_multiple_of(2) { 1.0 } else { -1.0 };
        Ok(Some(Chain { links, sign }))
    }
}

impl Chain {
    /// The first and the last subshell it touches.
    pub fn span(&self) -> (usize, usize) {
        let place = |link: Option<&Link>| link.map_or(0, |link| link.subshell);
        (place(self.links.first()), place(self.links.last()))
    }

    /// ⟨bra‖operator‖ket⟩, divided by √[(2S+1)(2L+1)] where the whole operator is a scalar, so that
    /// it then is the matrix element itself.
    pub fn value(&self, symbols: &mut Symbols, bra: &State, ket: &State) -> f64 {
        let mut value = self.sign;
        let mut links = self.links.iter();
        let mut next = links.next();
        let mut ranks = Ranks::default();
        let mut begun = false;
        let mut before = (Coupled::default(), Coupled::default());
        let terms = bra.terms.iter().zip(&ket.terms);
        let parts = bra.parts.iter().zip(&ket.parts);
        let running = bra.running.iter().zip(&ket.running);
        for (subshell, (((left, right), (part, other)), (&above, &below))) in
            terms.zip(parts).zip(running).enumerate()
        {
            match next {
                Some(link) if link.subshell == subshell => {
                    let local = link.table.at(*left, *right);
                    if local == 0.0 {
                        return 0.0;
                    }
                    let pairs = [before, (*part, *other), (above, below)];
                    let step = couple(symbols, pairs, [ranks, link.local, link.after]);
                    value *= local * step;
                    if !begun {
                        // What stands before is untouched: its 1 has a reduced element too.
                        value *= before.0.degeneracy().sqrt();
                    }
                    begun = true;
                    ranks = link.after;
                    next = links.next();
                    if next.is_none() && ranks == Ranks::default() {
                        value /= above.degeneracy().sqrt();
                    }
                }
                _ => {
                    if left != right {
                        return 0.0;
                    }
                    let is_scalar = !begun || (next.is_none() && ranks == Ranks::default());
                    if is_scalar {
                        if above != below {
                            return 0.0;
                        }
                    } else if *part != Coupled::default() {
                        let pairs = [before, (*part, *part), (above, below)];
                        value *= couple(symbols, pairs, [ranks, Ranks::default(), ranks])
                            * part.degeneracy().sqrt();
                    }
                }
            }
            if value == 0.0 {
                return 0.0;
            }
            before = (above, below);
        }
        value
    }
}

fn couple(symbols: &mut Symbols, pairs: [(Coupled, Coupled); 3], ranks: [Ranks; 3]) -> f64 {
    let [(j1, p1), (j2, p2), (total, primed)] = pairs;
    let [k1, k2, k] = ranks;
    let spin = symbols.step([
        j1.two_s,
        p1.two_s,
        k1.spin,
        j2.two_s,
        p2.two_s,
        k2.spin,
        total.two_s,
        primed.two_s,
        k.spin,
    ]);
    if spin == 0.0 {
        return 0.0;
    }
    let orbital = symbols.step([
        2 * j1.l,
        2 * p1.l,
        k1.orbital,
        2 * j2.l,
        2 * p2.l,
        k2.orbital,
        2 * total.l,
        2 * primed.l,
        k.orbital,
    ]);
    spin * orbital
}
