//! Coefficients of fractional parentage: sum rules, antisymmetry, and published values.

use std::collections::HashMap;

use rungline_core::angular::equivalent::EquivalentTerm;
use rungline_core::angular::parentage::{Parentage, parents};
use rungline_core::angular::unit_tensors::unit_tensor;
use rungline_core::angular::wigner_6j;
use rungline_tests::{Row, report};

fn all_shells() -> impl Iterator<Item = (u8, u32)> {
    (0..4_u8).flat_map(|l| (1..=4 * u32::from(l) + 2).map(move |electrons| (l, electrons)))
}

fn degeneracy(term: &EquivalentTerm) -> f64 {
    f64::from((term.two_s + 1) * (2 * term.l_total as i32 + 1))
}

fn square(table: &Parentage, child: usize, parent: usize) -> f64 {
    let coefficient = table.coefficient(child, parent);
    coefficient * coefficient
}

#[test]
fn rows_of_equal_s_and_l_are_orthonormal() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (l, electrons) in all_shells() {
        let table = parents(l, electrons).expect("within bounds");
        for (row, one) in table.children().iter().enumerate() {
            for (other, two) in table.children().iter().enumerate() {
                if (one.two_s, one.l_total) != (two.two_s, two.l_total) {
                    continue;
                }
                let dot: f64 = table
                    .row(row)
                    .iter()
                    .zip(table.row(other))
                    .map(|(a, b)| a * b)
                    .sum();
                worst = worst.max((dot - f64::from(u8::from(row == other))).abs());
                cases += 1;
            }
            let total: f64 = table.weights(row).map(|(_, weight)| weight).sum();
            assert!((total - 1.0).abs() < 1e-13);
        }
    }
    report(
        "parentage_orthonormal",
        Row {
            quantity: "orthonormality of fractional parentage, s to f, all N".into(),
            cases,
            worst,
            tolerance: 1e-13,
            measure: "absolute".into(),
            source: "Racah, Phys. Rev. 63, 367 (1943)".into(),
        },
    );
}

/// Σ over children of (2S+1)(2L+1) c² = (2S′+1)(2L′+1)(4ℓ+3−N)/N: what one more electron can do.
#[test]
fn columns_share_what_is_left_of_the_subshell() {
    for (l, electrons) in all_shells() {
        let table = parents(l, electrons).expect("within bounds");
        for (column, parent) in table.parents().iter().enumerate() {
            let sum: f64 = (table.children().iter().enumerate())
                .map(|(row, child)| degeneracy(child) * square(&table, row, column))
                .sum();
            let expected = degeneracy(parent) * f64::from(4 * u32::from(l) + 3 - electrons)
                / f64::from(electrons);
            assert!(
                (sum / expected - 1.0).abs() < 1e-12,
                "{l} {electrons} {parent:?}: {sum} {expected}"
            );
        }
    }
}

/// 6j symbols by their arguments: the same few return again and again.
#[derive(Default)]
struct Symbols(HashMap<[i32; 6], f64>);

impl Symbols {
    fn get(&mut self, two_j: [i32; 6]) -> f64 {
        let [a, b, c, d, e, f] = two_j;
        *self
            .0
            .entry(two_j)
            .or_insert_with(|| wigner_6j(a, b, c, d, e, f))
    }
}

/// ⟨(p₁ ℓ)SL|P|(p₂ ℓ)SL⟩ for the exchange of the last two electrons, from the table below.
fn exchange(
    symbols: &mut Symbols,
    below: &Parentage,
    one: usize,
    two: usize,
    child: &EquivalentTerm,
) -> f64 {
    let two_l = 2 * i32::from(below.l());
    let (first, second) = (&below.children()[one], &below.children()[two]);
    let doubled = |term: &EquivalentTerm| 2 * term.l_total as i32;
    let rows = below.row(one).iter().zip(below.row(two));
    let mut sum = 0.0;
    for (grandparent, (c1, c2)) in below.parents().iter().zip(rows) {
        if c1 * c2 != 0.0 {
            sum += c1
                * c2
                * symbols.get([
                    1,
                    grandparent.two_s,
                    first.two_s,
                    1,
                    child.two_s,
                    second.two_s,
                ])
                * symbols.get([
                    two_l,
                    doubled(grandparent),
                    doubled(first),
                    two_l,
                    doubled(child),
                    doubled(second),
                ]);
        }
    }
    let exponent = (first.two_s + second.two_s) / 2 + 1 + (doubled(first) + doubled(second)) / 2;
    let sign = if exponent % 2 == 0 { 1.0 } else { -1.0 };
    sign * sum * (degeneracy(first) * degeneracy(second)).sqrt()
}

/// The last two electrons exchanged: every state changes its sign. Past the half this holds only
/// if the relation to the holes has all its signs.
#[test]
fn states_are_antisymmetric_in_the_last_two_electrons() {
    let mut symbols = Symbols::default();
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (l, electrons) in all_shells().filter(|&(_, electrons)| electrons >= 2) {
        let table = parents(l, electrons).expect("within bounds");
        let below = parents(l, electrons - 1).expect("within bounds");
        let mut row = 0;
        let same = |one: &EquivalentTerm, other: &EquivalentTerm| {
            (one.two_s, one.l_total) == (other.two_s, other.l_total)
        };
        for children in table.children().chunk_by(same) {
            let child = &children[0];
            let couples = |parent: &EquivalentTerm| {
                (parent.two_s - child.two_s).abs() == 1
                    && parent.l_total.abs_diff(child.l_total) <= u32::from(l)
                    && parent.l_total + child.l_total >= u32::from(l)
            };
            let places: Vec<usize> = (0..table.parents().len())
                .filter(|&p| couples(&table.parents()[p]))
                .collect();
            let swap = |(one, two): (usize, usize)| {
                exchange(&mut symbols, &below, places[one], places[two], child)
            };
            let pairs = (0..places.len()).flat_map(|one| (0..=one).map(move |two| (one, two)));
            let lower: Vec<f64> = pairs.map(swap).collect();
            let element = |one: usize, two: usize| {
                lower[one.max(two) * (one.max(two) + 1) / 2 + one.min(two)]
            };
            for row in row..row + children.len() {
                let coefficients = table.row(row);
                let outside = (0..coefficients.len()).filter(|place| !places.contains(place));
                assert!(
                    outside
                        .map(|place| coefficients[place])
                        .all(|value| value == 0.0)
                );
                for (one, &place) in places.iter().enumerate() {
                    let image: f64 = places
                        .iter()
                        .enumerate()
                        .map(|(two, &other)| coefficients[other] * element(one, two))
                        .sum();
                    worst = worst.max((image + coefficients[place]).abs());
                    cases += 1;
                }
            }
            row += children.len();
        }
    }
    report(
        "parentage_antisymmetry",
        Row {
            quantity: "antisymmetry of states built from parents, s to f, all N".into(),
            cases,
            worst,
            tolerance: 1e-12,
            measure: "absolute".into(),
            source: "Pauli's principle; recoupling by Edmonds (1957) eq. 6.1.5".into(),
        },
    );
}

/// c²(N) and c²(4ℓ+3−N) with parent and child exchanged, Racah (1943).
#[test]
fn squares_of_electrons_and_holes_are_related() {
    for (l, electrons) in all_shells() {
        let (table, holes) = (
            parents(l, electrons).expect("table"),
            parents(l, 4 * u32::from(l) + 3 - electrons).expect("table"),
        );
        for (row, child) in table.children().iter().enumerate() {
            for (column, parent) in table.parents().iter().enumerate() {
                let left = square(&table, row, column) * degeneracy(child) * f64::from(electrons);
                let right = square(&holes, column, row)
                    * degeneracy(parent)
                    * f64::from(4 * u32::from(l) + 3 - electrons);
                assert!(
                    (left - right).abs() < 1e-11 * (1.0 + right),
                    "{l} {electrons}"
                );
            }
        }
    }
}

struct Published {
    l: u8,
    electrons: u32,
    child: (i32, u32, u32),
    /// Multiplicity, L, square.
    parents: &'static [(i32, u32, f64)],
}

/// Squared coefficients, from memory of Racah (1943) and of Nielson & Koster (1963).
#[test]
fn squares_of_p3_d3_and_f3_from_memory_of_racah_and_of_nielson_and_koster() {
    let cases = [
        Published {
            l: 1,
            electrons: 3,
            child: (4, 0, 1),
            parents: &[(3, 1, 1.0)],
        },
        Published {
            l: 1,
            electrons: 3,
            child: (2, 2, 1),
            parents: &[(3, 1, 0.5), (1, 2, 0.5)],
        },
        Published {
            l: 1,
            electrons: 3,
            child: (2, 1, 1),
            parents: &[(1, 0, 2.0 / 9.0), (3, 1, 0.5), (1, 2, 5.0 / 18.0)],
        },
        Published {
            l: 2,
            electrons: 3,
            child: (4, 3, 1),
            parents: &[(3, 1, 0.2), (3, 3, 0.8)],
        },
        Published {
            l: 2,
            electrons: 3,
            child: (4, 1, 1),
            parents: &[(3, 1, 8.0 / 15.0), (3, 3, 7.0 / 15.0)],
        },
        Published {
            l: 2,
            electrons: 3,
            child: (2, 2, 1),
            parents: &[
                (1, 0, 4.0 / 15.0),
                (3, 1, 3.0 / 20.0),
                (1, 2, 1.0 / 12.0),
                (3, 3, 7.0 / 20.0),
                (1, 4, 3.0 / 20.0),
            ],
        },
        Published {
            l: 3,
            electrons: 3,
            child: (4, 0, 1),
            parents: &[(3, 3, 1.0)],
        },
        Published {
            l: 3,
            electrons: 3,
            child: (4, 6, 1),
            parents: &[(3, 3, 2.0 / 9.0), (3, 5, 7.0 / 9.0)],
        },
    ];
    for case in cases {
        let table = parents(case.l, case.electrons).expect("within bounds");
        let row = (table.children().iter())
            .position(|term| (term.two_s + 1, term.l_total, term.index) == case.child)
            .expect("the child occurs");
        let found: Vec<(i32, u32, f64)> = table
            .weights(row)
            .map(|(parent, weight)| (parent.two_s + 1, parent.l_total, weight))
            .collect();
        for &(multiplicity, l_total, square) in case.parents {
            let weight = found
                .iter()
                .find(|found| (found.0, found.1) == (multiplicity, l_total))
                .map(|found| found.2);
            assert!(
                weight.is_some_and(|weight| (weight - square).abs() < 1e-13),
                "{:?} {found:?}",
                case.child
            );
        }
        assert_eq!(
            found.len(),
            case.parents.len(),
            "{:?} {found:?}",
            case.child
        );
    }
}

/// ¹S of ℓ² leads to the doublet of seniority 1 alone, so the share left of the subshell is all its
/// own: ⟨ℓ² ¹S, ℓ|}ℓ³ v=1 ²ℓ⟩² = 2ℓ/[3(2ℓ+1)].
#[test]
fn a_closed_pair_leads_to_seniority_one_alone() {
    for l in 1..4_u8 {
        let table = parents(l, 3).expect("within bounds");
        let row = (table.children().iter())
            .position(|term| (term.two_s, term.l_total, term.seniority) == (1, u32::from(l), 1))
            .expect("v = 1 occurs");
        let from_closed = table
            .weights(row)
            .find(|(parent, _)| parent.seniority == 0)
            .map(|(_, weight)| weight);
        let expected = 2.0 * f64::from(l) / (3.0 * f64::from(2 * l + 1));
        assert!(
            from_closed.is_some_and(|weight| (weight - expected).abs() < 1e-14),
            "{from_closed:?} {expected}"
        );
    }
}

/// The total spin and orbital angular momentum are multiples of unit tensors:
/// S = √(3/2) √(2ℓ+1) W^(10) and L = √[2 ℓ(ℓ+1)(2ℓ+1)] W^(01), diagonal with
/// √[S(S+1)(2S+1)(2L+1)] and √[L(L+1)(2L+1)(2S+1)].
#[test]
fn unit_tensors_of_rank_one_are_the_total_angular_momenta() {
    for (l, electrons) in [
        (1_u8, 2),
        (1, 4),
        (2, 3),
        (2, 5),
        (2, 7),
        (3, 3),
        (3, 5),
        (3, 8),
        (3, 12),
    ] {
        let two_l = f64::from(2 * l);
        let spin = unit_tensor(l, electrons, 1, 0).expect("within bounds");
        let orbital = unit_tensor(l, electrons, 0, 1).expect("within bounds");
        let for_spin = (1.5 * (two_l + 1.0)).sqrt();
        let for_orbital = (two_l * (two_l + 2.0) / 2.0 * (two_l + 1.0)).sqrt();
        for (row, term) in spin.terms().iter().enumerate() {
            let (s, total) = (f64::from(term.two_s) / 2.0, f64::from(term.l_total));
            for column in 0..spin.terms().len() {
                let diagonal = f64::from(u8::from(row == column));
                let expected =
                    (s * (s + 1.0) * (2.0 * s + 1.0) * (2.0 * total + 1.0)).sqrt() * diagonal;
                assert!(
                    (for_spin * spin.element(row, column) - expected).abs() < 1e-12,
                    "{l} {electrons} {term:?}"
                );
                let expected = (total * (total + 1.0) * (2.0 * total + 1.0) * (2.0 * s + 1.0))
                    .sqrt()
                    * diagonal;
                assert!(
                    (for_orbital * orbital.element(row, column) - expected).abs() < 1e-12,
                    "{l} {electrons}"
                );
            }
        }
    }
}

/// G(R) = Σ_k odd (2k+1) U^k·U^k/(2ℓ−1) and G(G₂) = [3 U¹·U¹ + 11 U⁵·U⁵]/4 (Racah 1949) between
/// states built from parents: diagonal, with the eigenvalues of the labels.
#[test]
fn casimir_operators_of_unit_tensors_are_diagonal_in_the_terms() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (l, electrons) in [(2_u8, 3), (2, 5), (2, 7), (3, 3), (3, 5), (3, 8)] {
        let odd: Vec<(u8, _)> = (1..2 * l)
            .step_by(2)
            .map(|k| (k, unit_tensor(l, electrons, 0, k).expect("within bounds")))
            .collect();
        let terms = odd[0].1.terms();
        for (row, one) in terms.iter().enumerate() {
            for (column, two) in terms.iter().enumerate() {
                if (one.two_s, one.l_total) != (two.two_s, two.l_total) {
                    continue;
                }
                // ⟨U^k·U^k⟩ = Σ |⟨‖U^k‖⟩|²/(2L+1) and U^k = √[2/(2S+1)] W^(0k).
                let square = |k: u8| -> f64 {
                    let tensor = &odd.iter().find(|found| found.0 == k).expect("odd").1;
                    let sum: f64 = (0..terms.len())
                        .map(|between| {
                            let sign = if (one.l_total + terms[between].l_total) % 2 == 0 {
                                1.0
                            } else {
                                -1.0
                            };
                            sign * tensor.element(row, between) * tensor.element(between, column)
                        })
                        .sum();
                    2.0 * sum / degeneracy(one)
                };
                let diagonal = f64::from(u8::from(row == column));
                let rotation: f64 = odd
                    .iter()
                    .map(|&(k, _)| f64::from(2 * k + 1) * square(k) / f64::from(2 * l - 1))
                    .sum();
                worst = worst.max((rotation - diagonal * one.rotation_casimir.expect("R")).abs());
                if l == 3 {
                    let exceptional = (3.0 * square(1) + 11.0 * square(5)) / 4.0;
                    worst = worst.max((exceptional - diagonal * one.g2_casimir.expect("G2")).abs());
                }
                cases += 1;
            }
        }
    }
    report(
        "parentage_casimirs",
        Row {
            quantity: "Casimir operators between states built from parents, d and f".into(),
            cases,
            worst,
            tolerance: 1e-12,
            measure: "absolute".into(),
            source: "Racah, Phys. Rev. 76, 1352 (1949)".into(),
        },
    );
}
