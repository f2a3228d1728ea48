//! The window of a spectrum: two ends, one of which may be open.

use crate::problem::Problem;
use crate::quantity::{self, Dimension};

use super::json::Json;

/// An end that is typed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct End {
    /// Wavelength, nm; in the medium where a wavelength was typed.
    pub nm: f64,
    /// Whether an energy was typed, which is the same in every medium; `nm` is then that in vacuum.
    pub by_energy: bool,
}

/// Two different ends as typed, of which one may be open.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Window {
    /// From and to.
    pub ends: [Option<End>; 2],
}

/// Reads one end; nothing where it is left open.
///
/// # Errors
/// Those of [`quantity::quantity`] for a wavelength, in bytes of the text; `quantity-out-of-range` for an
/// energy that no line has.
pub fn end(text: &str) -> Result<Option<End>, Problem> {
    if text.trim().is_empty() {
        return Ok(None);
    }
    let problem = match quantity::quantity(text, Dimension::Wavelength) {
        Ok(found) => {
            return Ok(Some(End {
                nm: found.value,
                by_energy: false,
            }));
        }
        Err(problem) => problem,
    };
    let Ok(energy) = quantity::quantity(text, Dimension::Wavenumber) else {
        return Err(problem);
    };
    let (shortest, longest) = Dimension::Wavelength.bounds();
    let nm = 1e7 / energy.value;
    if (shortest..=longest).contains(&nm) {
        return Ok(Some(End {
            nm,
            by_energy: true,
        }));
    }
    let usual = Dimension::Wavelength.usual();
    Err(Problem::new(
        "quantity-out-of-range",
        format!("{} is no energy of a line.", text.trim()),
        0,
        text.len(),
    )
    .bound(format!(
        "An energy above zero, with a wavelength from {shortest} to {longest} nm in vacuum."
    ))
    .way(format!("Use {usual}"), usual))
}

impl Window {
    /// Of a checked sheet; two equal ends are added to the faults.
    pub fn read(json: &Json, faults: &mut Vec<Problem>) -> Option<Window> {
        let Some(Json::List(typed)) = json.get("window") else {
            return None;
        };
        let text = |place: usize| typed.get(place).and_then(Json::as_text).unwrap_or_default();
        let (from, to) = (end(text(0)).ok()?, end(text(1)).ok()?);
        match (from, to) {
            (None, None) => None,
            (Some(from), Some(to)) if from == to => {
                faults.push(empty(text(1), to.nm));
                None
            }
            _ => Some(Window { ends: [from, to] }),
        }
    }

    /// The ends at the shortest and the longest wavelength, each with that in vacuum; nothing where it
    /// is open. `vacuum` turns a wavelength in the medium into that in vacuum.
    ///
    /// Two ends may stand in any order. One end alone reaches upwards from "from" and downwards from
    /// "to", in wavelength or in energy, as it was typed.
    pub fn sorted(&self, vacuum: impl Fn(f64) -> f64) -> [Option<(f64, End)>; 2] {
        let in_vacuum = |end: End| match end.by_energy {
            true => (end.nm, end),
            false => (vacuum(end.nm), end),
        };
        let [from, to] = self.ends.map(|end| end.map(in_vacuum));
        let turned = match (from, to) {
            (Some((from, _)), Some((to, _))) => to < from,
            (Some((_, end)), None) | (None, Some((_, end))) => end.by_energy,
            (None, None) => false,
        };
        if turned { [to, from] } else { [from, to] }
    }
}

fn empty(text: &str, nm: f64) -> Problem {
    let wider = format!("{} nm", nm + 1.0);
    Problem::new(
        "window-empty",
        format!("The window begins and ends at {}.", text.trim()),
        0,
        text.len(),
    )
    .bound("Its two ends differ; an empty one is open.")
    .way(format!("Use {wider}"), wider)
    .in_utf16(text)
    .at("/window/1")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::sheet::json::read;

    type Ends = (Option<f64>, Option<f64>);

    /// Ends in vacuum in a medium of index 1.5, and faults.
    fn found(text: &str) -> (Option<Ends>, Vec<&'static str>) {
        let mut faults = Vec::new();
        let window = Window::read(&read(text).unwrap(), &mut faults);
        let sorted = window.map(|window| {
            let [shortest, longest] = window.sorted(|nm| 1.5 * nm);
            (shortest.map(|end| end.0), longest.map(|end| end.0))
        });
        (sorted, faults.into_iter().map(|fault| fault.code).collect())
    }

    #[test]
    fn ends_are_sorted_and_may_be_open() {
        let ends = |text: &str| found(text).0.unwrap();
        assert_eq!(
            ends(r#"{"window":["590 nm","5880 Å"]}"#),
            (Some(882.0), Some(885.0))
        );
        assert_eq!(
            ends(r#"{"window":["20000 cm-1","25000 cm-1"]}"#),
            (Some(400.0), Some(500.0))
        );
        assert_eq!(ends(r#"{"window":["400 nm"]}"#), (Some(600.0), None));
        assert_eq!(ends(r#"{"window":["400 nm",""]}"#), (Some(600.0), None));
        assert_eq!(ends(r#"{"window":["","400 nm"]}"#), (None, Some(600.0)));
        assert_eq!(
            ends(r#"{"window":["20000 cm-1"," "]}"#),
            (None, Some(500.0))
        );
        assert_eq!(ends(r#"{"window":["","20000 cm-1"]}"#), (Some(500.0), None));
        assert_eq!(found(r#"{"window":["",""]}"#), (None, vec![]));
        assert_eq!(
            found(r#"{"window":["590 nm","590 nm"]}"#),
            (None, vec!["window-empty"])
        );
    }

    #[test]
    fn ends_are_energies_too() {
        let nm = |text: &str| end(text).unwrap().unwrap().nm;
        assert_eq!(nm("25000 cm-1"), 400.0);
        // hc/e = 1239.841984 eV nm and c = 299 792.458 nm THz, CODATA 2022.
        assert!((nm("2 eV") - 1_239.841_984 / 2.0).abs() < 1e-6);
        assert!((nm("500 THz") - 299_792.458 / 500.0).abs() < 1e-9);
        let code = |text: &str| end(text).unwrap_err().code;
        assert_eq!(code("-5 cm-1"), "quantity-out-of-range");
        assert_eq!(code("0 eV"), "quantity-out-of-range");
        assert_eq!(code("580"), "unit-missing");
        assert_eq!(code("1 kg"), "unit-of-another-quantity");
    }
}
