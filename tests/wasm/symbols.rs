// The same values natively and in WebAssembly: included by the build script and by the test.

/// 3j, 6j and 9j symbols with small and large arguments, zeros among them.
fn symbols() -> Vec<f64> {
    let mut values = Vec::new();
    for j in [0, 1, 2, 3, 5, 8, 15, 24, 40, 60, 120] {
        for k in [0, 2, 4, 7, 12, 30] {
            let m = (j % 5) - j.min(4);
            values.push(wigner_3j(j, k, j, m, 0, -m));
            values.push(wigner_6j(j, k, j, k, j, k));
            values.push(wigner_6j(j, j + 2, k, j + 1, j + 1, k + 1));
            values.push(wigner_9j(j, k, j, k, j, k, j, k, j));
        }
    }
    values
}
