//! Where each element stands in the chart of the elements.

use std::fmt;

use super::Orbital;
use super::filling::filling_order;
use crate::elements::HEAVIEST;

/// The block: the ℓ of the subshell that fills.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Block {
    /// ℓ = 0.
    S,
    /// ℓ = 1.
    P,
    /// ℓ = 2.
    D,
    /// ℓ = 3.
    F,
}

/// `s`, `p`, `d`, `f`.
impl fmt::Display for Block {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Block::S => "s",
            Block::P => "p",
            Block::D => "d",
            Block::F => "f",
        })
    }
}

/// The place of an element.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Place {
    /// 1…7; 8 and 9 for the f block, 4f and 5f.
    pub row: u8,
    /// 1…18; the f block stands in 3…16.
    pub column: u8,
    /// The block.
    pub block: Block,
    /// The subshell of the filling ladder that its last electron enters by the rule n + ℓ, then n.
    pub ladder: Orbital,
    /// Which electron of that subshell it is, 1…2(2ℓ + 1).
    pub step: u32,
}

/// The place of element Z = 1…118 by the filling rule, whatever its observed configuration: La is
/// the first of 4f, Lu the first of 5d, He stands in column 18.
pub fn place(z: u8) -> Option<Place> {
    let mut left = u32::from(z);
    if !(1..=HEAVIEST).contains(&z) {
        return None;
    }
    for ladder in filling_order() {
        if left <= ladder.capacity() {
            let step = u8::try_from(left).ok()?;
            let (row, column, block) = match ladder.l() {
                0 => (ladder.n(), step, Block::S),
                1 => (ladder.n(), 12 + step, Block::P),
                2 => (ladder.n() + 1, 2 + step, Block::D),
                _ => (ladder.n() + 4, 2 + step, Block::F),
            };
            let column = if z == 2 { 18 } else { column };
            return Some(Place {
                row,
                column,
                block,
                ladder,
                step: left,
            });
        }
        left -= ladder.capacity();
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn known_elements_stand_where_charts_have_them() {
        // Columns and rows of the 18-column form, IUPAC (from memory).
        for (z, row, column, block, ladder) in [
            (1, 1, 1, Block::S, "1s"),
            (2, 1, 18, Block::S, "1s"),
            (5, 2, 13, Block::P, "2p"),
            (26, 4, 8, Block::D, "3d"),
            (36, 4, 18, Block::P, "4p"),
            (57, 8, 3, Block::F, "4f"),
            (70, 8, 16, Block::F, "4f"),
            (71, 6, 3, Block::D, "5d"),
            (80, 6, 12, Block::D, "5d"),
            (92, 9, 6, Block::F, "5f"),
            (118, 7, 18, Block::P, "7p"),
        ] {
            let place = place(z).unwrap();
            assert_eq!(
                (place.row, place.column, place.block),
                (row, column, block),
                "Z = {z}"
            );
            assert_eq!(place.ladder.to_string(), ladder, "Z = {z}");
        }
        assert_eq!(place(0), None);
        assert_eq!(place(119), None);
    }

    #[test]
    fn no_two_elements_share_a_place() {
        let mut places: Vec<_> = (1..=HEAVIEST)
            .filter_map(place)
            .map(|p| (p.row, p.column))
            .collect();
        places.sort_unstable();
        places.dedup();
        assert_eq!(places.len(), usize::from(HEAVIEST));
    }
}
