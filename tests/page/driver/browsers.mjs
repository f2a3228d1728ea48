// Starts the real browsers, once for each set of start-up settings, and ends them with the tests.

import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { after } from "node:test";
import puppeteer from "puppeteer-core";

const PROGRAMS = { chromium: process.env.RUNGLINE_CHROMIUM, firefox: process.env.RUNGLINE_FIREFOX };

/** The browsers of this run; `RUNGLINE_ONLY_BROWSER` narrows them for a developer. */
export const BROWSERS = Object.keys(PROGRAMS).filter(
  (name) => (process.env.RUNGLINE_ONLY_BROWSER ?? name) === name,
);

const CHROMIUM_FLAGS = [
  "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking",
  "--disable-component-update", "--disable-sync", "--hide-scrollbars", "--force-color-profile=srgb",
];
const FIREFOX_PREFERENCES = {
  "app.update.enabled": false,
  "browser.startup.page": 0,
  "datareporting.policy.dataSubmissionEnabled": false,
  "network.captive-portal-service.enabled": false,
  "network.connectivity-service.enabled": false,
  "toolkit.telemetry.enabled": false,
};

const running = new Map();
const profiles = [];

/**
 * A running browser. `flags` are Chromium's, `preferences` Firefox's; browsers with the same ones
 * are shared within one file of tests.
 */
export async function browserOf(name, { flags = [], preferences = {} } = {}) {
  const key = JSON.stringify([name, name === "chromium" ? flags : preferences]);
  if (!running.has(key)) running.set(key, launch(name, { flags, preferences }));
  return running.get(key);
}

/** A new browser with a new profile of its own; the caller closes it. */
export async function launch(name, { flags = [], preferences = {} } = {}) {
  const executablePath = PROGRAMS[name];
  if (!executablePath) {
    throw new Error(`No ${name}: run these tests by "cargo site test page", or set RUNGLINE_${name.toUpperCase()}.`);
  }
  const profile = mkdtempSync(join(tmpdir(), `rungline-${name}-`));
  profiles.push(profile);
  return name === "chromium"
    ? puppeteer.launch({
        browser: "chrome", executablePath, headless: true, userDataDir: profile,
        args: [...CHROMIUM_FLAGS, ...flags],
      })
    : puppeteer.launch({
        browser: "firefox", executablePath, headless: true, userDataDir: profile,
        extraPrefsFirefox: { ...FIREFOX_PREFERENCES, ...preferences },
      });
}

after(async () => {
  for (const browser of running.values()) await (await browser).close();
  for (const profile of profiles) rmSync(profile, { recursive: true, force: true, maxRetries: 10, retryDelay: 100 });
});
