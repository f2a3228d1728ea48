// Opens one form of the page in one browser with nothing kept from before, and reads and works it
// as a person would.

import { mkdirSync, readFileSync } from "node:fs";
import { createRequire } from "node:module";
import { dirname, join } from "node:path";
import { after, test } from "node:test";
import { fileURLToPath, pathToFileURL } from "node:url";
import { BROWSERS, browserOf } from "./browsers.mjs";
import { serve } from "./server.mjs";

export const ROOT = join(dirname(fileURLToPath(import.meta.url)), "../../..");
/** Where the build put the site, with the one file in it. */
export const SITE = join(ROOT, "target", "site");
const SCREENSHOTS = join(ROOT, "target", "screenshots");
const AXE = readFileSync(createRequire(import.meta.url).resolve("axe-core/axe.min.js"), "utf8");

/** "file": the one file from the disk. "site": the static site over HTTP. */
export const DOORS = ["file", "site"].filter((door) => (process.env.RUNGLINE_ONLY_DOOR ?? door) === door);

/** A quick run: one browser and one door for each test, Chromium and the one file where it allows them. */
const QUICK = process.env.RUNGLINE_QUICK === "1";

/** How long anything on the page may take before a test gives up. */
const PATIENCE_MS = 20_000;

let sharedServer = null;
after(async () => (await sharedServer)?.close());

/** The address of one form of the page. */
export async function addressOf(door) {
  if (door === "file") return pathToFileURL(join(SITE, "rungline.html")).href;
  sharedServer ??= serve(SITE);
  return (await sharedServer).url;
}

/** Those of `there` that a test allows; of a quick run one, the `usual` one if it can be. */
function wanted(there, allowed, usual) {
  const all = there.filter((each) => allowed.includes(each));
  if (!QUICK) return all;
  return all.includes(usual) ? [usual] : all.slice(0, 1);
}

/**
 * Registers one test for each browser and door. `body(door, t)` gets a page that has started;
 * `options` are those of `openDoor`. `browsers` and `doors` narrow where it runs, with the reason
 * in the test's name.
 */
export function everyDoor(name, body, { browsers = BROWSERS, doors = DOORS, ...options } = {}) {
  for (const browser of wanted(BROWSERS, browsers, "chromium")) {
    for (const door of wanted(DOORS, doors, "file")) {
      test(`${name} [${browser}, ${door}]`, async (t) => {
        const opened = await openDoor(browser, door, options);
        try {
          await body(opened, t);
        } finally {
          await opened.close();
        }
      });
    }
  }
}

/**
 * Opens a page with fresh storage.
 * - `width`, `height`, `zoom` (2 is 200 %): the window; 1400 × 900 by default
 * - `dark`, `reducedMotion`, `forcedColors`: what the system asks for
 * - `fragment`: the part of the address after #
 * - `before`: a function run in the page before any script of it
 * - `address`: another address than the usual one of that door
 * - `start: false`: do not wait until the page has started
 * - `flags`, `preferences`: extra settings of Chromium and of Firefox
 */
export async function openDoor(browser, door, options = {}) {
  const { flags = [], preferences = {} } = options;
  const instance = await browserOf(browser, {
    flags,
    preferences: { ...preferences, ...(browser === "firefox" ? systemPreferences(options) : {}) },
  });
  const context = await instance.createBrowserContext();
  const opened = new Door(browser, door, context, options);
  await opened.openTab();
  return opened;
}

function systemPreferences({ dark = false, reducedMotion = false, forcedColors = false }) {
  return {
    "ui.systemUsesDarkTheme": dark ? 1 : 0,
    "ui.prefersReducedMotion": reducedMotion ? 1 : 0,
    ...(forcedColors ? { "browser.display.document_color_use": 2, "ui.useAccessibilityTheme": 1 } : {}),
  };
}

// The place comes along: an error that is logged as a thing has no words everywhere.
function wordsOf(message) {
  const { url = "", lineNumber = 0 } = message.location() ?? {};
  return `${message.text()} (${url.slice(0, 80)}:${lineNumber})`;
}

/** One fresh profile with one page of Rungline open in it. */
export class Door {
  constructor(browser, door, context, options) {
    this.browser = browser;
    this.door = door;
    this.context = context;
    this.options = options;
    /** Errors of the page and of the console, refused policies among them. */
    this.troubles = [];
  }

  /** Opens the page in a new tab of the same profile and turns to it; resolves to its tab. */
  async openTab(options = this.options) {
    const { width = 1400, height = 900, zoom = 1, fragment = "", before, start = true } = options;
    const tab = await this.context.newPage();
    this.page = tab;
    tab.on("pageerror", (error) => this.troubles.push(String(error)));
    tab.on("console", (message) => {
      if (message.type() === "error") this.troubles.push(wordsOf(message));
    });
    await tab.setViewport({ width: Math.round(width / zoom), height: Math.round(height / zoom), deviceScaleFactor: zoom });
    if (this.browser === "chromium") {
      // By the protocol itself: puppeteer's own call refuses forced-colors.
      const protocol = await tab.createCDPSession();
      await protocol.send("Emulation.setEmulatedMedia", { features: [
        { name: "prefers-color-scheme", value: options.dark ? "dark" : "light" },
        { name: "prefers-reduced-motion", value: options.reducedMotion ? "reduce" : "no-preference" },
        { name: "forced-colors", value: options.forcedColors ? "active" : "none" },
      ] });
    }
    if (before) await tab.evaluateOnNewDocument(before);
    this.address = options.address ?? (await addressOf(this.door));
    await tab.goto(this.address + (fragment ? `#${fragment.replace(/^#/, "")}` : ""), { waitUntil: "domcontentloaded" });
    if (start) await this.started();
    return tab;
  }

  /** Resolves once the core has answered for the first time. */
  async started() {
    await this.until(() => !document.getElementById("cannot-start") && document.querySelector('.rung[data-state="answered"]'));
  }

  /** Runs a function in the page. */
  evaluate(work, ...parameters) {
    return this.page.evaluate(work, ...parameters);
  }

  /** Resolves to what the function gives in the page once that is truthy. */
  async until(work, ...parameters) {
    // A tab that loads has a document of no element for a moment: there is nothing to look at in it yet.
    const whenThere = `document.body && document.readyState !== "loading" && (${work})(...${JSON.stringify(parameters)})`;
    const begun = performance.now();
    for (;;) {
      // A node does not travel from every browser: that it is there is what counts.
      const value = await this.page.evaluateHandle(whenThere)
        .then((handle) => handle.evaluate((found) => (found instanceof Node ? true : found)))
        .catch((error) => {
          // While the page loads again there is nowhere to run it: the next turn finds the new page.
          if (!/context|navigat|frame|realm/i.test(error.message)) throw error;
          return null;
        });
      if (value) return value;
      if (performance.now() - begun > PATIENCE_MS) {
        const seen = await this.page.evaluate(() => document.body.innerText.slice(0, 1500));
        throw new Error(`Waited ${PATIENCE_MS} ms for ${work}\non a page that reads\n${seen}\n${this.troubles.join("\n")}`);
      }
      await new Promise((resolve) => setTimeout(resolve, 15));
    }
  }

  /** The input with this label. */
  async field(label) {
    const handle = await this.page.evaluateHandle((wanted) => {
      const found = [...document.querySelectorAll("label")].find((each) => each.textContent.trim() === wanted);
      return found?.control ?? null;
    }, label);
    const element = handle.asElement();
    if (!element) throw new Error(`There is no field “${label}”.`);
    return element;
  }

  /** Empties the field with this label and types the text into it, key by key. */
  async type(label, text) {
    const input = await this.field(label);
    // On a phone the atom's fields are folded in until somebody opens them.
    await input.evaluate((node) => {
      if (node.closest("#editor[hidden]")) document.getElementById("atom").click();
    });
    await input.focus();
    await input.evaluate((node) => node.select());
    if (text === "") await this.page.keyboard.press("Backspace");
    else await this.page.keyboard.type(text);
  }

  /** Presses keys one after another: "Tab", "Enter", "Control+z", "Shift+ArrowLeft". */
  async press(...keys) {
    for (const combination of keys) {
      const parts = combination.split("+");
      const key = parts.pop();
      for (const held of parts) await this.page.keyboard.down(held);
      await this.page.keyboard.press(key);
      for (const held of parts.reverse()) await this.page.keyboard.up(held);
    }
  }

  /**
   * Waits until an element stays where it is: an answer that arrives above it moves it away from the
   * pointer. A run that is meant to last is not waited for longer than two seconds.
   */
  async settled(element) {
    await element.evaluate(async (node) => {
      const rest = () => new Promise((resolve) => setTimeout(resolve, 40));
      const moving = () => document.querySelector('.rung[data-settling="true"]') !== null;
      for (let tries = 0; tries < 50 && moving(); tries += 1) await rest();
      const place = () => { const { x, y } = node.getBoundingClientRect(); return `${x} ${y}`; };
      for (let before = null, tries = 0; tries < 50 && before !== place(); tries += 1) {
        before = place();
        await rest();
      }
    });
  }

  /** Clicks the visible button, link or summary with this text or accessible label. */
  async click(text) {
    const handle = await this.page.evaluateHandle((wanted) => [...document.querySelectorAll("button, a, summary, [role=button], label, option")].find(
      (each) => each.checkVisibility() && (each.getAttribute("aria-label") ?? each.textContent).trim() === wanted,
    ) ?? null, text);
    const element = handle.asElement();
    if (!element) throw new Error(`There is nothing to click called “${text}”.`);
    await this.settled(element);
    await element.click();
  }

  /** The text of the first element that fits. */
  text(selector) {
    return this.page.evaluate((wanted) => document.querySelector(wanted)?.textContent ?? null, selector);
  }

  /** State of a rung: "ready", "lacks", "running", "answered", "stale" or "fault". */
  state(question) {
    return this.page.evaluate((name) => document.getElementById(name)?.dataset.state ?? null, question);
  }

  /** The answer sentence of a question ("states", "lines", "splitting") once it is up to date. */
  sentence(question) {
    return this.until((name) => {
      const rung = document.getElementById(name);
      return rung?.dataset.state === "answered" && rung.dataset.settling === "false" && rung.querySelector(".say").textContent;
    }, question);
  }

  /** Unfolds a rung and waits until its evidence is drawn. */
  async unfold(question) {
    await this.page.evaluate((name) => {
      const button = document.querySelector(`#${name} .rung-button`);
      if (button.getAttribute("aria-expanded") !== "true") button.click();
    }, question);
    await this.until((name) => document.querySelector(`#${name} .evidence-body`)?.childElementCount > 0, question);
  }

  /** Unfolds the part of a rung's evidence whose title begins so, and waits until both are drawn. */
  unfoldPart(question, beginning) {
    return this.until((name, words) => {
      const title = [...document.querySelectorAll(`#${name} .part > summary`)].find((each) => each.textContent.startsWith(words));
      if (!title) return false;
      if (!title.parentElement.open) title.click();
      return title.parentElement.querySelector(".fold-body")?.childElementCount > 0;
    }, question, beginning);
  }

  /** What axe finds: an array of "rule: selector: why". */
  async axe({ exclude = [] } = {}) {
    if (!(await this.page.evaluate(() => typeof globalThis.axe === "object"))) await this.page.evaluate(AXE);
    return this.page.evaluate(async (left) => {
      const { violations } = await globalThis.axe.run(
        { include: [["html"]], exclude: left.map((selector) => [selector]) },
        { resultTypes: ["violations"], runOnly: ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "best-practice"] },
      );
      return violations.flatMap(({ id, nodes }) => nodes.map(({ target, failureSummary }) => `${id}: ${target.join(" ")}: ${failureSummary}`));
    }, exclude);
  }

  /** Writes target/screenshots/NAME.png; options as puppeteer's (fullPage, clip). */
  async screenshot(name, options = {}) {
    const path = join(SCREENSHOTS, `${name}.png`);
    mkdirSync(dirname(path), { recursive: true });
    await this.page.screenshot({ path, ...options });
    return path;
  }

  /** The page as it prints, as the bytes of a PDF. */
  pdf(options = {}) {
    return this.page.pdf({ format: "a4", printBackground: false, ...options });
  }

  /** Does the page scroll sideways? It must not, at any width. */
  async scrollsSideways() {
    return this.page.evaluate(() => document.documentElement.scrollWidth > document.documentElement.clientWidth);
  }

  async close() {
    await this.context.close();
  }
}
