// The same work natively and in WebAssembly: included by both benches.

use std::hint::black_box;
use std::rc::Rc;

use rungline_core::angular::{equivalent, wigner_6j};
use rungline_core::configuration::{Orbital, Subshell, filling};
use rungline_core::radial::hartree_fock::{Atom, solve};
use rungline_core::radial::nucleus::stable_mass_number;
use rungline_core::sheet;
use rungline_core::splitting::in_field::{
    Components, MHZ_PER_WAVENUMBER, Manifold, Nucleus, OneElectron, Operator, Reduced, Split, map,
};
use rungline_core::structure::model::{self, Case, MultipoleKind};
use rungline_core::structure::{Basis, Hamiltonian, Integral, Levels};
use rungline_core::terms::ls;

/// A named piece of work and how often it is repeated within one timing.
pub const WORKLOADS: &[(&str, u32)] = &[
    ("6j symbols with j up to 15, 4096 of them", 20),
    ("f7 terms with seniority", 2000),
    ("f7 d5 p3 terms", 2000),
    (
        "the states of neutral iron, as the page asks for them",
        1000,
    ),
    ("the self-consistent field of neutral iron", 5),
    (
        "the self-consistent field of neutral uranium, relativistic",
        1,
    ),
    ("levels of d5, radial functions included", 5),
    ("all 327 levels of f7, radial functions included", 1),
    (
        "neutral iron, d6 s2 + d7 s + d6 s p + d7 p: levels and E1 lines from nothing",
        1,
    ),
    ("sodium 3s and 3p with all components at 500 fields", 5),
    ("the 252 states of d5 at one field", 20),
    (
        "133Cs 6s and 6p with nucleus and all D2 components at 200 fields",
        1,
    ),
];

/// Does a piece of work once. The number only keeps the compiler from leaving the work out.
pub fn work(index: usize) -> f64 {
    match index {
        0 => {
            let mut sum = 0.0;
            for step in 0..4096 {
                let j = |salt: i32| (step * salt) % 31;
                let (a, b) = (j(7), j(11));
                let c = (a - b).abs() + 2 * (step % (a.min(b) + 1));
                sum += wigner_6j(black_box(a), b, c, a, b, c);
            }
            sum
        }
        1 => equivalent::classify(black_box(3), 7).map_or(0.0, |terms| terms.len() as f64),
        2 => {
            let shells: Vec<Subshell> = [(4, 3, 7), (5, 2, 5), (6, 1, 3)]
                .into_iter()
                .filter_map(|(n, l, electrons)| Subshell::new(Orbital::new(n, l)?, electrons))
                .collect();
            ls::terms(black_box(&shells)).map_or(0.0, |found| found.terms.len() as f64)
        }
        3 => {
            let text = r#"{"rungline":1,"species":"Fe I","configurations":["3d6 4s2"]}"#;
            sheet::answer_text(black_box(text), Some(sheet::Question::States))
                .map_or(0.0, |answer| answer.len() as f64)
        }
        4 => field(26, false),
        5 => field(92, true),
        6 => levels((25, 55), &[&[(3, 2, 5)]], false),
        7 => levels((64, 158), &[&[(4, 3, 7)]], false),
        8 => levels(
            (26, 56),
            &[
                &[(3, 2, 6), (4, 0, 2)],
                &[(3, 2, 7), (4, 0, 1)],
                &[(3, 2, 6), (4, 0, 1), (4, 1, 1)],
                &[(3, 2, 7), (4, 1, 1)],
            ],
            true,
        ),
        9 => ALKALIS.with(|both| both.as_ref().map_or(0.0, |(sodium, _)| sodium.map((0.0, 20.0), 500))),
        10 => D5.with(|split| {
            let at = split.as_ref().map(|split| split.at(black_box(3.0)));
            at.and_then(Result::ok).map_or(0.0, |at| at.energies.iter().sum())
        }),
        _ => ALKALIS.with(|both| both.as_ref().map_or(0.0, |(_, caesium)| caesium.map((0.0, 1.0), 200))),
    }
}

/// Both ends of a doublet's lines, prepared for fields.
struct Doublet {
    upper: Split,
    lower: Split,
    components: Components,
}

impl Doublet {
    /// np above ns; A of ns, np1/2, np3/2 and B of np3/2 in cm⁻¹ with a nucleus. `lines`: which np are seen.
    fn new(
        n: u8,
        energies: [f64; 2],
        nucleus: Option<(i32, [f64; 4])>,
        lines: [bool; 2],
    ) -> Option<Doublet> {
        let level = |l: u8, two_j: i32, energy: f64| OneElectron {
            n,
            l,
            two_j,
            energy,
        };
        let p = [level(1, 1, energies[0]), level(1, 3, energies[1])];
        let p = Manifold::one_electron(&p).ok()?;
        let s = Manifold::one_electron(&[level(0, 1, 0.0)]).ok()?;
        let of = |a: &[f64], b: &[f64]| {
            nucleus.map(|(two_i, _)| Nucleus {
                two_i,
                g_i: 0.74,
                magnetic_dipole: a.to_vec(),
                electric_quadrupole: b.to_vec(),
            })
        };
        let [a, a1, a3, b3] = nucleus.map_or([0.0; 4], |(_, constants)| constants);
        let upper = Split::new(&p, of(&[a1, a3], &[0.0, b3]).as_ref()).ok()?;
        let lower = Split::new(&s, of(&[a], &[]).as_ref()).ok()?;
        let element = |left: usize, value: f64| Reduced {
            left,
            right: 0,
            value,
        };
        // ⟨j‖C¹‖½⟩ in units of ⟨1‖C¹‖0⟩.
        let elements = vec![
            element(0, (2.0_f64 / 3.0).sqrt()),
            element(1, -(4.0_f64 / 3.0).sqrt()),
        ];
        let operator = Operator::between(1, elements);
        let components = Components::new(&upper, &lower, &operator, (&lines, &[true]), 10_000);
        Some(Doublet {
            components: components.ok()?,
            upper,
            lower,
        })
    }

    fn map(&self, range: (f64, f64), fields: usize) -> f64 {
        let components = Some(&self.components);
        let found = map(&self.upper, Some(&self.lower), components, black_box(range), fields);
        found.map_or(0.0, |found| {
            found.strengths.iter().flatten().sum::<f64>() + found.offsets.len() as f64
        })
    }
}

thread_local! {
    /// Sodium without a nucleus and caesium with one.
    static ALKALIS: Option<(Doublet, Doublet)> = alkalis();
    /// Levels of d⁵ of invented integrals.
    static D5: Option<Split> = d5();
}

fn alkalis() -> Option<(Doublet, Doublet)> {
    let sodium = Doublet::new(3, [16_956.17, 16_973.37], None, [true, true])?;
    let mhz = |value: f64| value / MHZ_PER_WAVENUMBER;
    let constants = [2298.158, 291.9, 50.29, -0.49].map(mhz);
    let caesium = Doublet::new(6, [11_178.27, 11_732.31], Some((7, constants)), [false, true]);
    Some((sodium, caesium?))
}

fn d5() -> Option<Split> {
    let own = Hamiltonian::new(Basis::new(&[2], &[vec![5]]).ok()?).ok()?;
    let values = own.values(|parameter| match parameter.integral {
        Integral::Direct { k, .. } => 120_000.0 / f64::from(k),
        Integral::SpinOrbit { .. } => 350.0,
        _ => 0.0,
    });
    let levels = Levels::solve(&own, &values).ok()?;
    let energies: Vec<f64> = levels.levels.iter().map(|level| level.energy).collect();
    Split::new(&Manifold::of_levels(own.basis(), &levels, &energies).ok()?, None).ok()
}

/// Levels of configurations n ℓ N outside a noble gas, relativistic and mixing, and their E1 lines;
/// nothing is kept from one call to the next.
fn levels((z, mass_number): (u8, u16), outside: &[&[(u8, u8, u32)]], with_lines: bool) -> f64 {
    let noble = if z > 54 { 54 } else { 18 };
    let Some(core) = filling::ground(black_box(noble), 0) else {
        return 0.0;
    };
    let configurations = outside.iter().map(|shells| {
        let mut all = core.configuration().subshells().to_vec();
        let open = shells.iter();
        all.extend(
            open.filter_map(|&(n, l, electrons)| Subshell::new(Orbital::new(n, l)?, electrons)),
        );
        all
    });
    let case = Case::new(z, mass_number, configurations.collect());
    let mut field = |atom: &Atom| {
        solve(atom, &mut |_| true)
            .map(Rc::new)
            .map_err(|f| f.problem)
    };
    let Ok(spectrum) = model::solve(&case, &mut field, &mut |_| true) else {
        return 0.0;
    };
    let lines = match with_lines {
        true => spectrum
            .lines(&[MultipoleKind::E1], &mut |_| true)
            .map_or(0, |found| found.lines.len()),
        false => 0,
    };
    (spectrum.levels.len() + lines) as f64
}

/// The average energy of a neutral atom's ground configuration.
fn field(z: u8, relativity: bool) -> f64 {
    let Some(ground) = filling::ground(black_box(z), 0) else {
        return 0.0;
    };
    let subshells = ground.configuration().subshells().to_vec();
    let atom = match relativity {
        true => Atom::relativistic(z, subshells, stable_mass_number(z)),
        false => Atom::new(z, subshells),
    };
    solve(&atom, &mut |_| true).map_or(0.0, |solution| solution.total_energy)
}
