//! The lowest levels of a large J against all of them.

use rungline_core::structure::{
    Basis, Hamiltonian, Levels, MOST_ROWS, estimate, lowest_of_j, solve_j,
};
use rungline_tests::figures::round_figures;
use rungline_tests::{Row, report};

fn hamiltonian(shells: &[u8], configurations: &[Vec<u32>]) -> Hamiltonian {
    let basis = Basis::new(shells, configurations).expect("a basis");
    Hamiltonian::new(basis).expect("coefficients")
}

#[test]
fn the_lowest_levels_are_those_of_the_whole_matrix() {
    // f⁶ d s: 748 rows of J = 4, of which 600 states are diagonalised beforehand; two configurations
    // that mix; two that do not.
    type Case = (&'static [u8], Vec<Vec<u32>>, i32);
    let cases: [Case; 3] = [
        (&[3, 2, 0], vec![vec![6, 1, 1]], 8),
        (&[2, 0, 1], vec![vec![5, 1, 1], vec![6, 0, 1]], 5),
        (&[3, 2, 0, 1], vec![vec![5, 1, 1, 0], vec![6, 0, 0, 1]], 15),
    ];
    let (mut energies, mut vectors, mut count) = (0.0_f64, 0.0_f64, 0);
    for (shells, configurations, two_j) in cases {
        let own = hamiltonian(shells, &configurations);
        let values = own.values(round_figures);
        let rows = own.rows(two_j);
        let all = solve_j(&own, &rows, &values).expect("levels");
        let found = lowest_of_j(&own, &rows, &values, 30, &mut |_| true).expect("levels");
        assert_eq!(found.len(), 30);
        for (one, other) in found.iter().zip(&all) {
            energies = energies.max((one.energy - other.energy).abs());
            let parts = one.vector.iter().zip(&other.vector);
            vectors = vectors.max(parts.map(|(a, b)| (a - b).abs()).fold(0.0, f64::max));
            assert_eq!(one.two_j, two_j);
            count += 1;
        }
    }
    for (name, worst, tolerance) in [("energies", energies, 1e-7), ("components", vectors, 1e-8)] {
        report(
            &format!("structure-lowest-{name}"),
            Row {
                quantity: format!("lowest levels of large J, {name}"),
                cases: count,
                worst,
                tolerance,
                measure: "absolute, cm⁻¹ or share".into(),
                source: "own diagonalisation of the whole matrix".into(),
            },
        );
    }
}

#[test]
fn the_sparse_matrix_is_the_dense_one() {
    let own = hamiltonian(&[2, 0], &[vec![4, 1], vec![5, 0]]);
    let values = own.values(round_figures);
    for two_j in own.basis().two_js() {
        let rows = own.rows(two_j);
        let dense = own.matrix(&rows, &values).expect("a matrix");
        let sparse = own.sparse(&rows, &values).expect("a matrix");
        assert_eq!(sparse.size(), rows.states.len());
        for row in 0..sparse.size() {
            assert_eq!(sparse.diagonal()[row], dense[(row, row)]);
            let (columns, elements) = sparse.row(row);
            for column in 0..row {
                let place = columns.iter().position(|&c| c as usize == column);
                let element = place.map_or(0.0, |place| elements[place]);
                assert_eq!(element, dense[(row, column)], "{two_j} {row} {column}");
            }
        }
    }
}

#[test]
fn a_search_can_be_stopped() {
    let own = hamiltonian(&[3, 2, 0], &[vec![6, 1, 1]]);
    let values = own.values(round_figures);
    let rows = own.rows(8);
    let problem = lowest_of_j(&own, &rows, &values, 30, &mut |_| false).expect_err("stopped");
    assert_eq!(problem.code, "stopped");
    let nothing = vec![f64::NAN; values.len()];
    let problem = lowest_of_j(&own, &rows, &nothing, 30, &mut |_| true).expect_err("refused");
    assert_eq!(problem.code, "parameter-not-finite");
    let none = own.rows(9);
    let found = lowest_of_j(&own, &none, &values, 30, &mut |_| true);
    assert_eq!(found, Ok(Vec::new()));
    // A matrix of zeros: every level is 0.
    let zeros = vec![0.0; values.len()];
    let found = lowest_of_j(&own, &rows, &zeros, 5, &mut |_| true).expect("levels");
    assert!(found.iter().all(|level| level.energy == 0.0));
}

#[test]
fn what_is_beyond_the_whole_way_is_estimated_as_the_other_one() {
    let large = estimate(&[3, 2, 0], &[vec![6, 2, 1]]).expect("sizes");
    assert!(large.largest > MOST_ROWS);
    let whole_way = |rows: u64| 9.0 * rows as f64 * rows as f64 * rows as f64;
    let cube = whole_way(large.largest);
    let whole: f64 = (large.rows_by_two_j.iter())
        .map(|&(_, rows)| whole_way(rows))
        .sum();
    assert!(large.multiplications < whole - 0.5 * cube);
    assert!(large.bytes < 1 << 30);
    let small = Levels::solve(&hamiltonian(&[1], &[vec![2]]), &[0.0; 3]).expect("levels");
    assert!(small.is_complete(0) && small.is_complete(4));
}
