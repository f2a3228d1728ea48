// Files in and out: opening by button or drop, saving by download, by the share sheet, by copying.

import { element } from "./dom.js";
import { faultNode, wayButton } from "./fields.js";

/** The largest sheet or record, in bytes; the core has the same bound. */
export const MAX_FILE = 40_000_000;

/** The text of a file, or {fault} before anything has been read. */
export async function textOf(file) {
  if (file.size > MAX_FILE) {
    return { fault: {
      message: `"${file.name}" has ${megabytes(file.size)}.`,
      bound: "A sheet has at most 5 MB, a record at most 40 MB. Nothing of the file was read; your sheet is as it was.",
    } };
  }
  try {
    return { text: await file.text() };
  } catch {
    return { fault: {
      message: `"${file.name}" could not be read.`,
      bound: "It may be a folder, or it changed or went away since it was chosen. Your sheet is as it was.",
    } };
  }
}

/** Lets files be dropped anywhere on the page. */
export function acceptDrops(open, refuse) {
  const carriesFiles = (event) => event.dataTransfer !== null && [...event.dataTransfer.types].includes("Files");
  window.addEventListener("dragover", (event) => {
    if (carriesFiles(event)) event.preventDefault();
  });
  window.addEventListener("drop", (event) => {
    if (!carriesFiles(event)) return;
    event.preventDefault();
    const files = [...event.dataTransfer.files];
    if (files.length === 1) open(files[0]);
    else if (files.length > 1) {
      refuse({
        message: `${files.length} files were dropped.`,
        bound: "The page holds one sheet: drop one file at a time.",
      });
    }
  });
}

/** What the notes show of a file that cannot be used. */
export function fileFaults(name, faults, text, openText) {
  return element("div", { class: "file-faults" },
    element("p", { class: "sentence", text: `"${name}" was not opened; your sheet is as it was.` }),
    ...faults.slice(0, 20).map((fault) => {
      const node = faultNode(fault, fault.path === "" && fault.end > 0 ? text : "");
      const place = fault.path ? `At ${fault.path}.` : fault.end > 0 && text !== "" ? `${lineOf(text, fault.start)}.` : null;
      if (place) node.append(element("p", { class: "bound", text: place }));
      // Without a path a way out is the whole text of the file, put right.
      if (fault.path === "") node.append(...fault.ways.map((way) => wayButton(way, () => openText(way.replacement))));
      return node;
    }),
    faults.length > 20 ? element("p", { text: `… and ${faults.length - 20} more.` }) : null);
}

/** Saves a text as a file and tells what to do if the browser did not. */
export function saveFile(name, text, notes) {
  const file = new File([text], name, { type: "application/json" });
  const share = canShare(file) ? () => shareFile(file, notes) : null;
  if (!("download" in HTMLAnchorElement.prototype) && share) {
    share();
    return;
  }
  const url = URL.createObjectURL(file);
  const link = element("a", { href: url, download: name, hidden: true });
  document.body.append(link);
  link.click();
  link.remove();
  // Some browsers fetch the blob only after a question to the person.
  setTimeout(() => URL.revokeObjectURL(url), 60_000);
  notes.put("saved", {
    text: `"${name}" goes to your downloads. If nothing arrived there:`,
    buttons: [
      ...(share ? [["Share it", share]] : []),
      ["Copy its text", () => copyText(text, notes)],
    ],
  });
}

/** A file's name from the sheet's title or atom. */
export function fileName(sheet, ending) {
  const words = [sheet.title, sheet.species].find((text) => typeof text === "string" && text.trim() !== "") ?? "sheet";
  const safe = words.normalize("NFKC").replace(/[^\p{L}\p{N} +.,-]/gu, "").replace(/^[ .]+|[ .]+$/g, "").slice(0, 60);
  return `${safe || "sheet"}${ending}`;
}

function canShare(file) {
  try {
    return navigator.canShare?.({ files: [file] }) ?? false;
  } catch {
    return false;
  }
}

async function shareFile(file, notes) {
  try {
    await navigator.share({ files: [file], title: file.name });
  } catch (error) {
    // Closing the share sheet is a choice, not a fault.
    if (error?.name !== "AbortError") notes.put("share", { kind: "fault", text: "The browser refuses to share the file. Copy its text instead." });
  }
}

async function copyText(text, notes) {
  try {
    await navigator.clipboard.writeText(text);
    notes.put("saved", { text: "The file's text is copied." });
  } catch {
    const box = element("textarea", { class: "key", rows: "8", readonly: true, "aria-label": "The file's text" });
    box.value = text;
    notes.put("saved", { text: "The browser refuses to copy. Here is the file's text:", more: box });
    box.select();
  }
}

function megabytes(bytes) {
  return `${(bytes / 1e6).toFixed(bytes < 1e7 ? 1 : 0)}\u00a0MB`;
}

function lineOf(text, offset) {
  const before = text.slice(0, offset).split("\n");
  return `Line ${before.length}, character ${before.at(-1).length + 1}`;
}
