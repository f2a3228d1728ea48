// The frame of every picture: one tab stop, a cursor that walks over the marks, a reading line that
// shows and speaks it, zoom, the table beside it, export.

import { element, freshId } from "../dom.js";
import { svgElement } from "../markup.js";
import { fileName, pngOf, saveAs, svgFile } from "../export.js";
import { richNode, richPlain, richSpeech } from "../rich.js";
import { CanvasPen, SvgPen } from "./pen.js";
import { paperColour, screenColour } from "./palette.js";
import { watchPointers } from "./zoom.js";

/** Above this many marks the page draws on a canvas; files are SVG either way. */
export const CANVAS_FROM = 4000;
const ZOOM_STEP = 1.6;
const MOST_ZOOM = 200;

/**
 * A picture.
 *
 * `layout(width, view, file)` → {height, marks, draw(pen), width?}; `file` is true for a file, without what lies over the stage; `view` is the part of the horizontal extent (of the
 *   vertical one, counted upwards, when `vertical` is true) that is shown, [0, 1] unzoomed, or ignored when `zoomable` is false.
 *   A mark: {x, y, w, h (its box, for ring and touch), reading: rich text, id: shared choice or null,
 *   ids: those of what else it belongs to, whose choice rings it too; chooses: what Enter chooses on
 *   a mark that is not ringed for it}.
 * `rest`: rich text of the reading line while nobody is on a mark.
 * `walk(index, key, marks)` → next index, for pictures that are walked in two directions.
 * `steer(key, far)` → whether an arrow did something else than walk; `overlay`: a node that lies over the stage.
 * A layout may have `find(x, y)` → index of the mark there, or −1 (where boxes do not tell), and `placed()`, called once it is on the page.
 * `table`: node shown by "Show as table", or null when the table stands beside the picture already;
 * then `tableNear` is a function that brings it into view.
 */
export function picture(options) {
  return new Picture(options);
}

class Picture {
  #options;
  #context;
  #view = [0, 1];
  #at = -1;
  #marks = [];
  #shown = null;
  #reading;
  #stage;
  #surface = null;
  #ring = null;
  #width = 0;

  constructor(options) {
    this.#options = options;
    this.#context = options.context;
    const readingId = freshId("reading");
    this.#reading = element("p", { class: "reading", id: readingId, "aria-live": "polite" });
    this.#stage = element("div", {
      class: "stage", tabindex: "0", role: "application", "aria-roledescription": "picture",
      "aria-label": `${richSpeech(options.name)}. Arrow keys move from mark to mark.`, "aria-describedby": readingId,
    });
    this.node = element("figure", { class: "picture" }, this.#stage, this.#reading, this.#tools());
    this.#stage.addEventListener("keydown", (event) => this.#key(event));
    this.#stage.addEventListener("blur", () => this.#ringAt());
    this.#stage.addEventListener("focus", () => {
      if (this.#at < 0 && this.#marks.length > 0) this.#to(this.#chosenIndex() ?? 0);
      else this.#ringAt();
    });
    watchPointers(this.#stage, {
      tap: (x, y) => this.#tap(x, y),
      hover: (x, y) => this.#hover(x, y),
      zoom: (centre, factor, shift) => this.#zoomBy(factor, centre, shift),
      band: (from, to) => this.#band(from, to),
      width: () => this.#width,
      height: () => this.#shown?.height,
      vertical: () => this.#options.vertical === true,
      enabled: () => this.#options.zoomable !== false,
    });
    new ResizeObserver(([entry]) => {
      const width = Math.floor(entry.contentRect.width);
      if (width > 0 && width !== this.#width) {
        this.#width = width;
        this.redraw();
      }
    }).observe(this.#stage);
    this.#context.choice?.subscribe(() => this.#ringAt());
    this.#rest();
  }

  /** Draws anew, after what it shows has changed. */
  redraw(changes = {}) {
    this.#options = { ...this.#options, ...changes };
    if (changes.name) this.#stage.setAttribute("aria-label", `${richSpeech(changes.name)}. Arrow keys move from mark to mark.`);
    if (this.#width === 0) return;
    const shown = this.#options.layout(this.#width, this.#view);
    this.#shown = shown;
    this.#marks = shown.marks;
    if (this.#at >= this.#marks.length) this.#at = -1;
    this.#surface = this.#marks.length > CANVAS_FROM ? this.#onCanvas(shown) : this.#onSvg(shown);
    this.#ring = svgElement("g", { class: "rings", "aria-hidden": "true" });
    const over = svgElement("svg", { class: "over", ...sizeOf(this.#shownWidth(), shown.height), "aria-hidden": "true" }, this.#ring);
    const { overlay = null } = this.#options;
    // What lies over the stage may hold the pointer: it stays where it is.
    for (const old of [...this.#stage.children]) if (old !== overlay) old.remove();
    this.#stage.prepend(this.#surface, over);
    if (overlay !== null && !overlay.isConnected) this.#stage.append(overlay);
    shown.placed?.();
    this.#ringAt();
    if (this.#at < 0) this.#rest();
  }

  /** The marks have moved, while what is drawn stays. */
  moveMarks(marks) {
    this.#marks = marks;
    if (this.#shown !== null) this.#shown.marks = marks;
    this.#ringAt();
    if (this.#at >= marks.length) this.#at = -1;
    if (this.#at >= 0) this.#read(this.#at);
  }

  /** What the reading line says while nobody is on a mark. */
  say(rest) {
    this.#options.rest = rest;
    if (this.#at < 0) this.#rest();
  }

  #onSvg(shown) {
    const group = svgElement("g");
    shown.draw(new SvgPen(group));
    return svgElement("svg", {
      role: "img", "aria-label": richSpeech(this.#options.name), ...sizeOf(this.#shownWidth(), shown.height),
    }, group);
  }

  // A picture that needs more room than the page has scrolls in its stage.
  #shownWidth() {
    return this.#shown.width ?? this.#width;
  }

  #onCanvas(shown) {
    const dense = window.devicePixelRatio || 1;
    const canvas = element("canvas", { role: "img", "aria-label": richSpeech(this.#options.name), width: Math.round(this.#shownWidth() * dense), height: Math.round(shown.height * dense) });
    canvas.style.width = `${this.#shownWidth()}px`;
    canvas.style.height = `${shown.height}px`;
    const brush = canvas.getContext("2d");
    brush.scale(dense, dense);
    shown.draw(new CanvasPen(brush, screenColour(this.#stage)));
    return canvas;
  }

  #key(event) {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const { key } = event;
    const far = event.shiftKey ? 10 : 1;
    const last = this.#marks.length - 1;
    if (key === "Escape") {
      this.#at = -1;
      this.#rest();
      this.#ringAt();
      this.#stage.blur();
      event.stopPropagation();
    } else if (key === "Home" || key === "End") this.#to(key === "Home" ? 0 : last);
    else if (/^Arrow/.test(key) && this.#options.steer?.(key, far)) {
      // Done.
    } else if (/^Arrow/.test(key)) {
      if (this.#options.walk && this.#at >= 0) {
        let at = this.#at;
        for (let step = 0; step < far; step += 1) at = this.#options.walk(at, key, this.#marks);
        this.#to(at);
      } else this.#to(this.#at + (key === "ArrowRight" || key === "ArrowUp" ? far : -far));
    } else if (key === "Enter" || key === " ") this.#choose(this.#at);
    else if (this.#options.zoomable !== false && (key === "+" || key === "=")) this.#zoomBy(ZOOM_STEP, this.#cursorPart(), 0);
    else if (this.#options.zoomable !== false && (key === "-" || key === "\u2212")) this.#zoomBy(1 / ZOOM_STEP, this.#cursorPart(), 0);
    else if (this.#options.zoomable !== false && key === "0") this.#setView([0, 1]);
    else return;
    event.preventDefault();
  }

  #to(index) {
    if (this.#marks.length === 0) return;
    this.#at = Math.min(Math.max(index, 0), this.#marks.length - 1);
    this.#intoView();
    this.#read(this.#at);
    this.#ringAt();
  }

  #read(index) {
    const { reading } = this.#marks[index];
    this.#reading.replaceChildren(richNode(reading, this.#context.settings));
  }

  // What the line says while nobody is on a mark.
  #rest() {
    this.#reading.replaceChildren(element("span", { class: "note" }, richNode(this.#options.rest ?? [], this.#context.settings)));
  }

  #choose(index) {
    const id = this.#marks[index]?.id ?? this.#marks[index]?.chooses ?? null;
    if (id === null) return;
    this.#context.choice.set(id === this.#context.choice.get() ? null : id);
  }

  #chosenIndex() {
    const id = this.#context.choice?.get() ?? null;
    const index = id === null ? -1 : this.#marks.findIndex((mark) => mark.id === id);
    return index < 0 ? null : index;
  }

  #ringAt() {
    if (this.#ring === null) return;
    const chosen = this.#context.choice?.get() ?? null;
    const ring = (mark, kind) => svgElement("rect", { class: kind, x: mark.x - 3, y: mark.y - 3, width: mark.w + 6, height: mark.h + 6 });
    const rings = chosen === null ? [] : this.#marks.filter((mark) => (mark.id === chosen || mark.ids?.includes(chosen)) && this.#seen(mark)).map((mark) => ring(mark, "ring-chosen"));
    if (this.#at >= 0 && document.activeElement === this.#stage && this.#seen(this.#marks[this.#at])) rings.push(ring(this.#marks[this.#at], "ring-cursor"));
    this.#ring.replaceChildren(...rings);
  }

  // Is the mark in the part of the picture that is shown?
  #seen({ part }) {
    return part === undefined || (part >= this.#view[0] && part <= this.#view[1]);
  }

  #nearest(x, y) {
    if (this.#shown?.find) return this.#shown.find(x, y);
    let best = -1;
    let least = 24;
    this.#marks.forEach((mark, i) => {
      if (!this.#seen(mark)) return;
      const dx = Math.max(mark.x - x, 0, x - mark.x - mark.w);
      const dy = Math.max(mark.y - y, 0, y - mark.y - mark.h);
      // Among marks that all hold the point, the one whose middle is nearest.
      const off = Math.hypot(dx, dy) + 0.01 * Math.hypot(mark.x + mark.w / 2 - x, mark.y + mark.h / 2 - y);
      if (off < least) [best, least] = [i, off];
    });
    return best;
  }

  #tap(x, y) {
    const index = this.#nearest(x, y);
    if (index < 0) return;
    this.#stage.focus({ preventScroll: true });
    this.#to(index);
    this.#choose(index);
  }

  #hover(x, y) {
    if (document.activeElement === this.#stage) return;
    const index = this.#nearest(x, y);
    if (index < 0) this.#rest();
    else this.#reading.replaceChildren(richNode(this.#marks[index].reading, this.#context.settings));
  }

  #cursorPart() {
    const mark = this.#marks[this.#at];
    if (!mark) return 0.5;
    return this.#options.vertical ? 1 - (mark.y + mark.h / 2) / this.#shown.height : (mark.x + mark.w / 2) / this.#width;
  }

  #band(from, to) {
    const [a, b] = this.#view;
    const [low, high] = [Math.min(from, to), Math.max(from, to)];
    this.#setView([a + low * (b - a), a + high * (b - a)]);
  }

  #zoomBy(factor, centre, shift) {
    const [a, b] = this.#view;
    const span = Math.min(Math.max((b - a) / factor, 1 / MOST_ZOOM), 1);
    const fixed = a + centre * (b - a);
    const from = Math.min(Math.max(fixed - centre * span - shift * span, 0), 1 - span);
    this.#setView([from, from + span]);
  }

  #setView([from, to]) {
    if (to - from < 1 / MOST_ZOOM) return;
    this.#view = [Math.max(0, from), Math.min(1, to)];
    this.redraw();
    this.#whole.hidden = this.#view[0] === 0 && this.#view[1] === 1;
  }

  // The cursor never walks out of a zoomed picture unseen.
  #intoView() {
    const mark = this.#marks[this.#at];
    if (this.#options.zoomable === false || mark.part === undefined) return;
    const [a, b] = this.#view;
    if (mark.part >= a && mark.part <= b) return;
    const span = b - a;
    const from = Math.min(Math.max(mark.part - span / 2, 0), 1 - span);
    this.#setView([from, from + span]);
  }

  #whole = element("button", { type: "button", class: "word", text: "Whole picture", hidden: true, on: { click: () => this.#setView([0, 1]) } });

  #tools() {
    const save = (kind) => this.#save(kind);
    const tools = element("figcaption", { class: "picture-tools" }, this.#whole);
    const { table, tableNear } = this.#options;
    if (table) {
      const body = element("div", { class: "picture-table", hidden: true });
      const button = element("button", { type: "button", class: "word", text: "Show as table", "aria-expanded": "false" });
      button.addEventListener("click", () => {
        if (body.hidden && body.childNodes.length === 0) body.append(table());
        body.hidden = !body.hidden;
        button.setAttribute("aria-expanded", String(!body.hidden));
        button.textContent = body.hidden ? "Show as table" : "Hide the table";
      });
      tools.append(button);
      this.#after = body;
    } else if (tableNear) {
      tools.append(element("button", { type: "button", class: "word", text: "Show as table", on: { click: tableNear } }));
    }
    tools.append(
      element("button", { type: "button", class: "word", text: "Save SVG", on: { click: () => save("svg") } }),
      element("button", { type: "button", class: "word", text: "Save PNG", on: { click: () => save("png") } }));
    if (this.#after) tools.append(this.#after);
    return tools;
  }

  #after = null;

  /** The picture as the text of an SVG file, in ink on white. */
  svgText() {
    const shown = this.#options.layout(Math.max(this.#width, 320), this.#view, true);
    const width = shown.width ?? Math.max(this.#width, 320);
    const title = richPlain(this.#options.name);
    const group = svgElement("g");
    shown.draw(new SvgPen(group, paperColour));
    const svg = svgElement("svg", { role: "img", ...sizeOf(width, shown.height) },
      svgElement("title", {}, title),
      svgElement("rect", { width, height: shown.height, fill: paperColour("sheet") }), group);
    return { text: svgFile(svg), width, height: shown.height, title };
  }

  async #save(kind) {
    const { text, width, height, title } = this.svgText();
    try {
      if (kind === "svg") await saveAs(fileName(title, "svg"), text, "image/svg+xml");
      else await saveAs(fileName(title, "png"), await pngOf(text, width, height), "image/png");
      this.#context.announce?.(`Saved the picture as ${kind.toUpperCase()}.`);
    } catch {
      this.#context.announce?.("The browser refuses to save this picture.");
    }
  }
}

function sizeOf(width, height) {
  return { width, height, viewBox: `0 0 ${width} ${height}` };
}
