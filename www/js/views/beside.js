// A table beside its picture, or under it where it would not fit beside.

import { element } from "../dom.js";

/** Both in one frame; `table` may be a box whose table changes. */
export function tableAndPicture(table, picture, extra = "") {
  const node = element("div", { class: `table-and-picture ${extra}`.trim() }, table, picture);
  if (picture === null) return node;
  let width = 0;
  const place = (anew) => {
    const now = node.clientWidth;
    if (now === 0 || (!anew && now === width)) return;
    width = now;
    node.classList.remove("below");
    const region = table.querySelector(".table-region");
    node.classList.toggle("below", region !== null && region.scrollWidth > region.clientWidth + 2);
  };
  new ResizeObserver(() => place(false)).observe(node);
  // Another table in the same box may fit where the last one did not.
  new MutationObserver(() => place(true)).observe(table, { childList: true });
  return node;
}
