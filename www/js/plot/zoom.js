// Pointers on a picture: a tap chooses, a mouse drag marks the part to enlarge, two fingers pinch.
// One finger goes on scrolling the page: the style sheet leaves it the pan gestures.

// A pointer that moved less than this was a tap.
const TAP = 6;

/**
 * `act`: {tap(x, y), hover(x, y), zoom(centre, factor, shift), band(from, to), width(), height(), vertical(), enabled()};
 * parts run 0 to 1 along the axis that zooms: to the right, or upwards.
 */
export function watchPointers(stage, act) {
  const held = new Map();
  let start = null;
  let pinch = null;
  const place = (event) => {
    const box = stage.getBoundingClientRect();
    return [event.clientX - box.left + stage.scrollLeft, event.clientY - box.top];
  };
  const part = ([x, y]) => Math.min(Math.max(act.vertical() ? 1 - y / (act.height() || 1) : x / (act.width() || 1), 0), 1);
  const band = document.createElement("div");
  band.className = "zoom-band";

  stage.addEventListener("pointerdown", (event) => {
    if (event.button !== 0) return;
    held.set(event.pointerId, place(event));
    if (held.size === 1) start = { at: place(event), mouse: event.pointerType === "mouse", moved: false };
    if (held.size === 2) {
      pinch = spread(held);
      start = null;
    }
  });
  stage.addEventListener("pointermove", (event) => {
    const [x, y] = place(event);
    if (!held.has(event.pointerId)) {
      if (event.pointerType === "mouse") act.hover(x, y);
      return;
    }
    held.set(event.pointerId, [x, y]);
    if (held.size === 2 && pinch !== null && act.enabled()) {
      const now = spread(held);
      act.zoom(part(now.centre), now.distance / pinch.distance, part(now.centre) - part(pinch.centre));
      pinch = now;
    } else if (start !== null) {
      start.moved ||= Math.hypot(x - start.at[0], y - start.at[1]) > TAP;
      if (start.moved && start.mouse && act.enabled()) {
        stage.setPointerCapture(event.pointerId);
        const [from, to] = act.vertical() ? [y, start.at[1]] : [x, start.at[0]];
        band.classList.toggle("upright", act.vertical());
        band.style[act.vertical() ? "top" : "left"] = `${Math.min(from, to)}px`;
        band.style[act.vertical() ? "height" : "width"] = `${Math.abs(from - to)}px`;
        if (!band.isConnected) stage.append(band);
      }
    }
  });
  const end = (event, finished) => {
    if (!held.delete(event.pointerId)) return;
    const [x, y] = place(event);
    band.remove();
    if (finished && start !== null) {
      const drawn = act.vertical() ? y - start.at[1] : x - start.at[0];
      if (!start.moved) act.tap(x, y);
      else if (start.mouse && act.enabled() && Math.abs(drawn) > 2 * TAP) act.band(part(start.at), part([x, y]));
    }
    if (held.size < 2) pinch = null;
    if (held.size === 0) start = null;
  };
  stage.addEventListener("pointerup", (event) => end(event, true));
  stage.addEventListener("pointercancel", (event) => end(event, false));
  // Two fingers belong to the picture; a listener that may refuse is the only way to say so late.
  stage.addEventListener("touchmove", (event) => {
    if (event.touches.length > 1 && act.enabled()) event.preventDefault();
  }, { passive: false });
}

function spread(held) {
  const [[ax, ay], [bx, by]] = [...held.values()];
  return { centre: [(ax + bx) / 2, (ay + by) / 2], distance: Math.max(Math.hypot(ax - bx, ay - by), 1) };
}
