// The same search natively and in WebAssembly: included by the build script and by the test.

/// Energies and components of the lowest levels of large J by iteration: two configurations that mix, and
/// one with f electrons.
fn lowest_levels() -> Vec<f64> {
    let cases = [
        ([2, 0, 1], vec![vec![5, 1, 1], vec![6, 0, 1]], 5),
        ([3, 2, 0], vec![vec![4, 1, 1]], 8),
    ];
    let mut found = Vec::new();
    for (shells, configurations, two_j) in cases {
        let basis = Basis::new(&shells, &configurations).expect("a basis");
        let own = Hamiltonian::new(basis).expect("coefficients");
        let values = own.values(round_figures);
        let rows = own.rows(two_j);
        let levels = lowest_of_j(&own, &rows, &values, 12, &mut |_| true).expect("levels");
        for level in levels {
            found.push(level.energy);
            found.extend(level.vector);
        }
    }
    found
}
