// Says which part of the browser is missing when the page cannot start.

/** Why the page cannot start; `reason` names the text in index.html that says what to do. */
export class CannotStart extends Error {
  constructor(reason, detail = "") {
    super(detail || reason);
    this.reason = reason;
    this.detail = detail;
  }
}

/** Shows the text for what is missing. */
export function showCannotStart(error) {
  const box = document.getElementById("cannot-start");
  const { reason = "broken", detail = String(error) } = error ?? {};
  for (const part of box.querySelectorAll("[data-reason]")) part.hidden = part.dataset.reason !== reason;
  const words = document.getElementById("cannot-start-detail");
  words.textContent = detail;
  words.hidden = detail === "";
  document.getElementById("cannot-start-sheet").hidden = false;
  box.classList.add("certain");
  box.hidden = false;
}
