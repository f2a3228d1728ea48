//! Computed radial functions, kept by what they depend on.
//!
//! Changing a field or an instrument never computes an orbital again. What is kept is a pure
//! function of its key, so an answer is the same with a cold and with a warm cache.

use std::cell::RefCell;
use std::rc::Rc;

use crate::radial::hartree_fock::Solution;

use super::orbitals_case::Case;

/// The most solutions that are kept, about 1 MB each for a heavy atom.
const MOST: usize = 24;

thread_local! {
    static KEPT: RefCell<Vec<(Case, Rc<Solution>)>> = const { RefCell::new(Vec::new()) };
}

/// The solution of a case, if it is kept; it then counts as the newest.
pub fn get(case: &Case) -> Option<Rc<Solution>> {
    KEPT.with_borrow_mut(|kept| {
        let place = kept.iter().position(|(key, _)| key == case)?;
        let entry = kept.remove(place);
        let solution = Rc::clone(&entry.1);
        kept.push(entry);
        Some(solution)
    })
}

/// Keeps a solution; the oldest goes when there are too many.
pub fn put(case: &Case, solution: &Rc<Solution>) {
    KEPT.with_borrow_mut(|kept| {
        if kept.len() >= MOST {
            kept.remove(0);
        }
        kept.push((case.clone(), Rc::clone(solution)));
    });
}

/// Whether a solution is kept.
pub fn has(case: &Case) -> bool {
    KEPT.with_borrow(|kept| kept.iter().any(|(key, _)| key == case))
}
