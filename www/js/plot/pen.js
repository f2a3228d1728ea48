// Pens: one set of strokes for SVG on the page, for a canvas with many marks, and for a file.
//
// A style is {stroke, fill, width, dash}; colours are names of the style sheet's tokens.

import { svgElement } from "../markup.js";

/** The size of labels, in pixels. */
export const LABEL = 13;
const FACE = 'system-ui, "Segoe UI", Roboto, "Noto Sans", "DejaVu Sans", sans-serif';
// Raised and lowered parts of a label.
const SMALL = 0.72;
const RISE = 0.38;
const DROP = 0.22;
// Further apart where one stands above the other.
const STACK_RISE = 0.48;
const STACK_DROP = 0.3;

const HALO = 4;

/** Draws into an SVG group. `colour` turns a token into a paint. */
export class SvgPen {
  #group;
  #colour;

  constructor(group, colour = (token) => `var(--${token})`) {
    this.#group = group;
    this.#colour = colour;
  }

  line(x1, y1, x2, y2, style = {}) {
    this.#add("line", { x1: tidy(x1), y1: tidy(y1), x2: tidy(x2), y2: tidy(y2) }, { stroke: "ink", fill: null, ...style });
  }

  rect(x, y, width, height, style = {}) {
    this.#add("rect", { x: tidy(x), y: tidy(y), width: tidy(Math.max(width, 0)), height: tidy(Math.max(height, 0)) }, style);
  }

  polygon(points, style = {}) {
    this.#add("polygon", { points: listed(points) }, style);
  }

  polyline(points, style = {}) {
    this.#add("polyline", { points: listed(points) }, { stroke: "ink", ...style, fill: null });
  }

  circle(x, y, radius, style = {}) {
    this.#add("circle", { cx: tidy(x), cy: tidy(y), r: tidy(radius) }, style);
  }

  /** A label of runs (see rich.js) or of plain text; `halo` keeps what lies under it away from the letters. */
  text(x, y, label, { anchor = "start", size = LABEL, fill = "ink", weight = 400, halo = null } = {}) {
    const node = svgElement("text", {
      ...(halo ? { stroke: this.#colour(halo), "stroke-width": HALO, "stroke-linejoin": "round", "paint-order": "stroke" } : {}),
      x: tidy(x), y: tidy(y), "text-anchor": anchor, "font-size": size, "font-family": FACE, "font-weight": weight, fill: this.#colour(fill),
    });
    // A span shifts what follows it too, so each one undoes the shift before it.
    let shift = 0;
    for (const part of parts(label)) {
      const wanted = part.shift * size;
      const dy = wanted - shift;
      shift = wanted;
      node.append(svgElement("tspan", { dy: dy === 0 ? null : tidy(dy), dx: part.back === undefined ? null : tidy(-part.back * size), "font-size": part.small ? tidy(size * SMALL) : null }, part.text));
    }
    this.#group.append(node);
  }

  #add(name, attributes, { stroke = null, fill = null, width = 1, dash = null }) {
    this.#group.append(svgElement(name, {
      ...attributes,
      stroke: stroke === null ? "none" : this.#colour(stroke), "stroke-width": stroke === null ? null : width,
      "stroke-dasharray": dash, fill: fill === null ? "none" : this.#colour(fill),
    }));
  }
}

/** Draws on a canvas, with the same strokes. */
export class CanvasPen {
  #canvas;
  #colour;

  /** `colour` turns a token into a colour that the canvas understands. */
  constructor(canvas, colour) {
    this.#canvas = canvas;
    this.#colour = colour;
  }

  line(x1, y1, x2, y2, style = {}) {
    this.#trace([[x1, y1], [x2, y2]], false, { stroke: "ink", ...style, fill: null });
  }

  rect(x, y, width, height, style = {}) {
    this.#trace([[x, y], [x + width, y], [x + width, y + height], [x, y + height]], true, style);
  }

  polygon(points, style = {}) {
    this.#trace(points, true, style);
  }

  polyline(points, style = {}) {
    this.#trace(points, false, { stroke: "ink", ...style, fill: null });
  }

  circle(x, y, radius, style = {}) {
    this.#canvas.beginPath();
    this.#canvas.arc(x, y, radius, 0, 2 * Math.PI);
    this.#paint(style);
  }

  text(x, y, label, { anchor = "start", size = LABEL, fill = "ink", weight = 400, halo = null } = {}) {
    const canvas = this.#canvas;
    const font = (small) => `${weight} ${small ? size * SMALL : size}px ${FACE}`;
    const measured = parts(label).map((part) => {
      canvas.font = font(part.small);
      return { ...part, width: canvas.measureText(part.text).width };
    });
    const total = measured.reduce((sum, part) => sum + part.width - (part.back ?? 0) * size, 0);
    let at = anchor === "middle" ? x - total / 2 : anchor === "end" ? x - total : x;
    canvas.fillStyle = this.#colour(fill);
    for (const part of measured) {
      canvas.font = font(part.small);
      at -= (part.back ?? 0) * size;
      if (halo) {
        Object.assign(canvas, { strokeStyle: this.#colour(halo), lineWidth: HALO, lineJoin: "round" });
        canvas.setLineDash([]);
        canvas.strokeText(part.text, at, y + part.shift * size);
      }
      canvas.fillText(part.text, at, y + part.shift * size);
      at += part.width;
    }
  }

  #trace(points, closed, style) {
    this.#canvas.beginPath();
    points.forEach(([x, y], i) => (i === 0 ? this.#canvas.moveTo(x, y) : this.#canvas.lineTo(x, y)));
    if (closed) this.#canvas.closePath();
    this.#paint(style);
  }

  #paint({ stroke = null, fill = null, width = 1, dash = null }) {
    const canvas = this.#canvas;
    if (fill !== null) {
      canvas.fillStyle = this.#colour(fill);
      canvas.fill();
    }
    if (stroke === null) return;
    canvas.strokeStyle = this.#colour(stroke);
    canvas.lineWidth = width;
    canvas.setLineDash(dash === null ? [] : dash.split(" ").map(Number));
    canvas.stroke();
  }
}

// A label's pieces: {text, shift (in sizes, downwards), small, back (how far to step back)}.
function parts(label) {
  const runs = typeof label === "string" ? [{ text: label }] : label;
  return runs.flatMap((run) => {
    if (run.text !== undefined) return [{ text: run.text, shift: 0, small: false }];
    const stacked = run.up !== undefined && run.down !== undefined;
    const up = run.up === undefined ? [] : [{ text: run.up, shift: stacked ? -STACK_RISE : -RISE, small: true }];
    const down = run.down === undefined ? [] : [{ text: run.down, shift: stacked ? STACK_DROP : DROP, small: true }];
    // Stacked: the lower part starts under the upper one, so the pen steps back by its width.
    if (stacked) down[0].back = [...run.up].length * 0.58 * SMALL;
    return [...up, ...down];
  });
}

function listed(points) {
  return points.map(([x, y]) => `${tidy(x)},${tidy(y)}`).join(" ");
}

// Half a hundredth of a pixel is never seen, and short numbers keep files small.
function tidy(number) {
  return Math.round(number * 100) / 100;
}
