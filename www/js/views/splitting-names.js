// Names, ids and places of states and components, the same in tables, map and pattern.

import { trueMinus } from "../digits.js";

/** The id of a state in the shared choice. */
export function stateId(state) {
  return `state:${[state.isotope, state.level, state.F, state.M, state.side].map((part) => part ?? "").join("/")}`;
}

/** What else marks a state: its level. */
export function idsOfState(state) {
  return [stateId(state), `level:${state.level}`];
}

/** Rich text of a state: its level, F where there is a nucleus, M. */
export function stateRich(state) {
  const isotope = state.isotope ? [`${state.isotope} `] : [];
  const f = state.F === null || state.F === undefined ? "" : ` F ${state.F},`;
  return [...isotope, ...(state.rich?.length ? state.rich : [state.level ?? ""]), `${f} M ${trueMinus(state.M)}`];
}

/** The id of a component in the shared choice. */
export function componentId(row) {
  return `component:${[row.isotope, row.polarisation, row.level_lower, row.F_lower, row.M_lower, row.level_upper, row.F_upper, row.M_upper].map((part) => part ?? "").join("/")}`;
}

/** What else marks a component: its line, whatever its multipole, and both its levels and states. */
export function idsOfComponent(row, multipole) {
  const end = (side) => ({ isotope: row.isotope, level: row[`level_${side}`], F: row[`F_${side}`], M: row[`M_${side}`], side });
  return [componentId(row), `line:${row.level_lower}/${row.level_upper}/${multipole}`, `level:${row.level_upper}`, `level:${row.level_lower}`, stateId(end("upper")), stateId(end("lower"))];
}

/** Whether what is chosen concerns a component. */
export function componentConcerned(row, chosen) {
  return chosen.startsWith(`line:${row.level_lower}/${row.level_upper}/`) || idsOfComponent(row, "").includes(chosen);
}
