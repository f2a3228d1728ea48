// Names, ids and places of states and components, the same in tables, map and pattern.

/** How the core ends the rich text of a state: ", F = 2, M = −1". */
const MOMENTA = /,? ?(?:F|M|M_J|M_I) = \S+(?:, (?:M|M_I) = \S+)?$/;

/** The id of a state in the shared choice. */
export function stateId(state) {
  return `state:${state.name}`;
}

/** What else marks a state: its level. */
export function idsOfState(state) {
  return [stateId(state), `level:${state.level}`];
}

/** M_J and M_I as signs. */
export const PROJECTIONS = {
  M_J: { runs: [{ text: "M" }, { down: "J" }], plain: "M_J", latex: "$M_J$", speech: "M J" },
  M_I: { runs: [{ text: "M" }, { down: "I" }], plain: "M_I", latex: "$M_I$", speech: "M I" },
};

/** Rich text of a state: its isotope among several, its level, F and M. */
export function stateRich(state) {
  const rich = state.rich.flatMap((part) => (typeof part !== "string" ? [part] : part.split(/(M_[JI])/).filter((text) => text !== "")
    .map((text) => (PROJECTIONS[text] ? { sign: PROJECTIONS[text] } : text))));
  return [...(state.isotope ? [`${state.isotope} `] : []), ...rich];
}

/** Rich text of a state's level. */
export function levelRich({ rich }) {
  const last = rich.at(-1);
  return [...rich.slice(0, -1), ...(typeof last === "string" ? [last.replace(MOMENTA, "")] : [last])].filter((part) => part !== "");
}

/** The id of a component in the shared choice. */
export function componentId(row) {
  return `component:${row.polarisation}/${row.lower}/${row.upper}`;
}

/** What else marks a component: its line, whatever its multipole, and both its levels and states. */
export function idsOfComponent(row, multipole) {
  return [
    componentId(row), `line:${row.level_lower}/${row.level_upper}/${multipole}`, `level:${row.level_upper}`, `level:${row.level_lower}`, `state:${row.upper}`, `state:${row.lower}`,
  ];
}

/** Whether what is chosen concerns a component. */
export function componentConcerned(row, chosen) {
  return chosen.startsWith(`line:${row.level_lower}/${row.level_upper}/`) || idsOfComponent(row, "").includes(chosen);
}
