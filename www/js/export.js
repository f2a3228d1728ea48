// Takes tables and pictures out of the page: to the clipboard or into a file, always with all rows,
// all digits, units and kinds of number.

import { element } from "./dom.js";
import { latexText } from "./rich.js";
import { fullDigits } from "./digits.js";
import { unitOf } from "./spoken.js";

/** The forms in which a table is copied. */
export const FORMATS = [
  { name: "text", label: "Copy as text" },
  { name: "spreadsheet", label: "Copy for a spreadsheet" },
  { name: "csv", label: "Copy as CSV" },
  { name: "latex", label: "Copy as LaTeX" },
];

/**
 * A table as text. `sheet` is {caption, columns: [{name, unit, kind, type}], rows: [[cell]]}; a cell
 * is {text, latex?, value?} with `value` a number where the column is one.
 */
export function tableText(sheet, format, decimalMark = ".") {
  switch (format) {
    case "text": return alignedText(sheet);
    case "spreadsheet": return tabbed(sheet, decimalMark);
    case "csv": return commaSeparated(sheet);
    case "latex": return latexTable(sheet);
    default: throw new RangeError(`A table has no form "${format}".`);
  }
}

/** "g_J (μ_B) [computed]": a column's name with its unit and the kind of its numbers. */
export function headText({ name, unit = null, kind = null }) {
  return `${name}${unit ? ` (${unit})` : ""}${kind ? ` [${kind}]` : ""}`;
}

function alignedText({ caption, columns, rows }) {
  const lines = [columns.map(headText), ...rows.map((row) => row.map((cell) => cell.text))];
  const widths = columns.map((_, i) => Math.max(...lines.map((line) => [...line[i]].length)));
  const pad = (text, i) => {
    const space = " ".repeat(Math.max(0, widths[i] - [...text].length));
    return columns[i].type === "number" || columns[i].type === "half" ? space + text : text + space;
  };
  return `${caption}\n${lines.map((line) => line.map(pad).join("  ").trimEnd()).join("\n")}\n`;
}

// A spreadsheet would read 3/2 as a day in February, so half-integers go in as 1.5, in any column.
function tabbed({ columns, rows }, decimalMark) {
  const cellText = (cell) => {
    const half = /^(-?\d+)\/2$/.exec(cell.text);
    if (half) return String(Number(half[1]) / 2).replace(".", decimalMark);
    const text = typeof cell.value === "number" ? fullDigits(cell.value).replace(".", decimalMark) : cell.text;
    return text.replace(/[\t\r\n]+/g, " ");
  };
  return [columns.map(headText), ...rows.map((row) => row.map(cellText))]
    .map((line) => line.join("\t")).join("\n") + "\n";
}

function commaSeparated({ columns, rows }) {
  const quoted = (text) => (/[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);
  return [columns.map(headText), ...rows.map((row) => row.map((cell) => cell.text))]
    .map((line) => line.map(quoted).join(",")).join("\r\n") + "\r\n";
}

function latexTable({ caption, columns, rows }) {
  const head = columns.map(({ name, latex, unit, kind }) => {
    const unitPart = unit ? ` (${unitOf(unit).latex ?? latexText(unit)})` : "";
    return `${latex ?? latexText(name)}${unitPart}${kind ? ` [${kind}]` : ""}`;
  });
  const body = rows.map((row) => row.map((cell) => cell.latex ?? (typeof cell.value === "number" ? `$${latexNumber(cell.text)}$` : latexCell(cell.text))));
  const align = columns.map(({ type }) => (type === "number" || type === "half" ? "r" : "l")).join("");
  const line = (cells) => `${cells.join(" & ")} \\\\`;
  return [`% ${caption}`, `\\begin{tabular}{${align}}`, "\\hline", line(head), "\\hline", ...body.map(line), "\\hline", "\\end{tabular}", ""].join("\n");
}

// A hyphen before a whole number is a minus.
function latexCell(text) {
  return /^-\d+$/.test(text) ? `$${text}$` : latexText(text);
}

function latexNumber(text) {
  return text.replace(/e([+-]?\d+)$/, (_, exponent) => `\\times 10^{${Number(exponent)}}`);
}

/** Puts text on the clipboard; true when it is there. Works at a file's address as well. */
export async function copyText(text) {
  try {
    await navigator.clipboard.writeText(text);
    return true;
  } catch {
    return copyBySelection(text);
  }
}

// Browsers that refuse the clipboard still copy what is selected.
function copyBySelection(text) {
  const focused = document.activeElement;
  const box = element("textarea", { class: "copy-box", readonly: true, "aria-hidden": "true", tabindex: "-1" });
  box.value = text;
  document.body.append(box);
  box.select();
  let copied = false;
  try {
    copied = document.execCommand("copy");
  } catch {
    copied = false;
  }
  box.remove();
  focused?.focus?.();
  return copied;
}

/** Hands a file to the person: the share sheet where downloads fail, a download otherwise. */
export async function saveAs(name, content, type) {
  const blob = content instanceof Blob ? content : new Blob([content], { type });
  const file = new File([blob], name, { type });
  const touchOnly = /iPad|iPhone/.test(navigator.userAgent) || navigator.platform === "MacIntel" && navigator.maxTouchPoints > 1;
  if (touchOnly && navigator.canShare?.({ files: [file] })) {
    try {
      await navigator.share({ files: [file] });
      return;
    } catch (error) {
      if (error.name === "AbortError") return;
    }
  }
  const address = URL.createObjectURL(blob);
  const link = element("a", { href: address, download: name, hidden: true });
  document.body.append(link);
  link.click();
  link.remove();
  // The download has to have begun before its address ends.
  setTimeout(() => URL.revokeObjectURL(address), 60_000);
}

/** A file name made of a title. */
export function fileName(title, extension) {
  const stem = title.normalize("NFKD").replace(/[^\w.+-]+/g, "-").replace(/^-+|-+$/g, "").slice(0, 80);
  return `${stem || "rungline"}.${extension}`;
}

/** An SVG element as the text of a file that stands by itself. */
export function svgFile(svg) {
  return `<?xml version="1.0" encoding="UTF-8"?>\n${new XMLSerializer().serializeToString(svg)}\n`;
}

/** The text of an SVG file as a PNG of `scale` pixels to each of its own. */
export async function pngOf(svgText, width, height, scale = 2) {
  const image = new Image();
  const address = URL.createObjectURL(new Blob([svgText], { type: "image/svg+xml" }));
  try {
    image.src = address;
    await image.decode();
    const canvas = element("canvas", { width: Math.round(width * scale), height: Math.round(height * scale) });
    canvas.getContext("2d").drawImage(image, 0, 0, canvas.width, canvas.height);
    return await new Promise((give, fail) => {
      canvas.toBlob((blob) => (blob ? give(blob) : fail(new Error("The browser could not make the PNG."))), "image/png");
    });
  } finally {
    URL.revokeObjectURL(address);
  }
}
