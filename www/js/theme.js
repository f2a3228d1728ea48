// Light or dark as it was chosen, before anything else of the page runs.

/** Where the browser's storage keeps the settings. */
export const SETTINGS_KEY = "rungline.settings";

/** Paints the chosen theme; without one, or without a storage, the page stays as the system says. */
export function paintKeptTheme() {
  try {
    const theme = JSON.parse(localStorage.getItem(SETTINGS_KEY))?.theme;
    if (theme === "light" || theme === "dark") document.documentElement.dataset.theme = theme;
  } catch {
    // A storage that is refused or holds something else is told by the page itself.
  }
}
