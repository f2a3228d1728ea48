//! Computed radial functions, kept by what they depend on.
//!
//! Changing a field or an instrument never computes an orbital again. What is kept is a pure
//! function of its key, so an answer is the same with a cold and with a warm cache.

use std::cell::RefCell;
use std::rc::Rc;

use crate::radial::hartree_fock::{Atom, Solution};

/// The most solutions that are kept, more than a sheet can ask for at once; each has 0.1 to 0.7 MB.
const MOST: usize = 96;

thread_local! {
    static KEPT: RefCell<Vec<Rc<Solution>>> = const { RefCell::new(Vec::new()) };
}

/// The solution of an atom, if it is kept; it then counts as the newest.
pub fn get(atom: &Atom) -> Option<Rc<Solution>> {
    KEPT.with_borrow_mut(|kept| {
        let place = kept.iter().position(|solution| solution.atom == *atom)?;
        let solution = kept.remove(place);
        kept.push(Rc::clone(&solution));
        Some(solution)
    })
}

/// Keeps a solution; the oldest goes when there are too many.
pub fn put(solution: &Rc<Solution>) {
    KEPT.with_borrow_mut(|kept| {
        if kept.len() >= MOST {
            kept.remove(0);
        }
        kept.push(Rc::clone(solution));
    });
}

/// Whether a solution is kept.
pub fn has(atom: &Atom) -> bool {
    KEPT.with_borrow(|kept| kept.iter().any(|solution| solution.atom == *atom))
}
