// What a map says at a field between those it was computed for.

import { cubicAt, cubicSlopeAt, straightAt } from "../plot/hermite.js";

/** Factors that turn an offset in cm⁻¹ into the other units, from the answer or, failing that, its largest component. */
export function offsetFactors(answer) {
  const { conversions = {} } = answer;
  const largest = answer.components.reduce((best, row) => (Math.abs(row.offset) > Math.abs(best?.offset ?? 0) ? row : best), null);
  const ratio = (key) => (typeof largest?.[key] === "number" ? largest[key] / largest.offset : null);
  return {
    offset: 1,
    ghz: conversions.ghz_per_wavenumber ?? ratio("ghz"),
    pm: conversions.pm_per_wavenumber ?? ratio("pm"),
    lorentz: lorentzFactor(answer),
  };
}

// 1/μ_B in T/cm⁻¹: the states tell their shifts both ways, in no field their slopes.
function lorentzFactor({ states, field }) {
  const { tesla } = field;
  const key = tesla > 0 ? "shift" : "slope";
  const known = states.filter((state) => typeof state.lorentz === "number");
  const largest = known.reduce((best, state) => (Math.abs(state[key]) > Math.abs(best?.[key] ?? 0) ? state : best), null);
  return largest === null ? null : (largest.lorentz / largest[key]) * (tesla > 0 ? tesla : 1);
}

/** How much of a component's strength each view has, by polarisation: the field does not change that. */
export function viewFactors(components) {
  const found = {};
  for (const row of components) {
    if (found[row.polarisation] || !(row.strength > 0)) continue;
    found[row.polarisation] = { along: row.along / row.strength, across: row.across / row.strength };
  }
  return found;
}

/** The components of a map at a place in its fields, like rows of the answer but without kinds. */
export function componentsAt(map, place, tesla, factors, views) {
  const { states } = map;
  return map.components.map((component) => {
    const [upper, lower] = [states[component.upper], states[component.lower]];
    const offset = cubicAt(component.offsets, component.slopes, place);
    const strength = Math.max(straightAt(component.strengths, place), 0);
    const view = views[component.polarisation] ?? {};
    return {
      polarisation: component.polarisation, isotope: upper.isotope ?? null, upper: upper.name, lower: lower.name,
      level_upper: upper.level, level_lower: lower.level, M_upper: upper.M, M_lower: lower.M, F_upper: upper.F ?? null, F_lower: lower.F ?? null,
      offset, ghz: scaled(offset, factors.ghz), pm: scaled(offset, factors.pm), // In units of μ_B B counts what the field does, not how far apart several lines lie.
      lorentz: tesla > 0 ? scaled((offset - component.offsets[0]) / tesla, factors.lorentz) : null,
      strength, seen: Math.max(straightAt(component.seen, place), 0), along: strength * (view.along ?? 0), across: strength * (view.across ?? 0),
    };
  });
}

/** Energy and slope of a state of the map. */
export function stateAt(state, place) {
  return { energy: cubicAt(state.energies, state.slopes, place), slope: cubicSlopeAt(state.energies, state.slopes, place) };
}

function scaled(value, factor) {
  return factor === null ? null : value * factor;
}
