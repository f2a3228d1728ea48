//! What a matrix connects.

use super::order::sort;

/// Rows that are linked, each part rising, in the order of their first rows; `linked` is symmetric.
pub fn connected(size: usize, linked: impl Fn(usize, usize) -> bool) -> Vec<Vec<usize>> {
    let mut seen = vec![false; size];
    let mut found = Vec::new();
    for start in 0..size {
        match seen.get_mut(start) {
            Some(mark) if !*mark => *mark = true,
            _ => continue,
        }
        let mut part = Vec::new();
        let mut open = vec![start];
        while let Some(row) = open.pop() {
            part.push(row);
            for (other, mark) in seen.iter_mut().enumerate() {
                if !*mark && linked(row, other) {
                    *mark = true;
                    open.push(other);
                }
            }
        }
        sort(&mut part);
        found.push(part);
    }
    found
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_row_is_in_one_part() {
        let links = [(0, 3), (3, 5), (1, 4)];
        let linked = |a: usize, b: usize| links.contains(&(a, b)) || links.contains(&(b, a));
        let expected = [vec![0, 3, 5], vec![1, 4], vec![2]];
        assert_eq!(connected(6, linked), expected);
        assert_eq!(connected(0, linked), Vec::<Vec<usize>>::new());
    }
}
