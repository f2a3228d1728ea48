// In which unit the place of a line is told. The factors come with the answer.

/** key → {unit, title, digits (before the point, usually), value(line, medium)}; wavelengths are those of the medium where it has one. */
export function placeUnits({ conversions = null }) {
  const wave = (line, medium) => line[MEDIA[medium].key] ?? line.vacuum_nm;
  const units = {
    nm: { unit: "nm", digits: 3, title: "Wavelength", wave: true, value: wave },
    "cm-1": { unit: "cm-1", digits: 5, title: "Wavenumber", value: (line) => line.wavenumber },
  };
  if (conversions === null) return units;
  const { angstrom_per_nm: angstrom, ev_per_wavenumber: ev, thz_per_wavenumber: thz } = conversions;
  const times = (factor, value) => (value === null || value === undefined ? null : value * factor);
  if (angstrom) units["Å"] = { unit: "Å", digits: 4, title: "Wavelength", wave: true, value: (line, medium) => times(angstrom, wave(line, medium)) };
  if (ev) units.eV = { unit: "eV", digits: 1, title: "Photon energy", value: (line) => times(ev, line.wavenumber) };
  if (thz) units.THz = { unit: "THz", digits: 3, title: "Frequency", value: (line) => times(thz, line.wavenumber) };
  return units;
}

/** Where wavelengths are told: key of the line, and words. */
export const MEDIA = {
  vacuum: { key: "vacuum_nm", words: "in vacuum" },
  air: { key: "air_nm", words: "in air" },
  index: { key: "medium_nm", words: "in the medium" },
};

/** The medium in which a reader of the spectrum measures. */
export function mediumOf({ sheet }) {
  return sheet.refractive_index ? "index" : sheet.medium === "air" ? "air" : "vacuum";
}

/** How the wavelength of a line is told: in the medium, or in vacuum where that has none. */
export function mediumWords(line, medium) {
  return MEDIA[typeof line[MEDIA[medium].key] === "number" ? medium : "vacuum"].words;
}
