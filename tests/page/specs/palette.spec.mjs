// The colours of saved pictures are the light ones of the style sheet.

import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { test } from "node:test";
import { PAPER, paperColour } from "../../../www/js/plot/palette.js";

const sheet = readFileSync(new URL("../../../www/style/tokens.css", import.meta.url), "utf8");
const light = sheet.slice(0, sheet.indexOf("}"));

test("every colour of a saved picture is the token's light one", () => {
  for (const [token, colour] of Object.entries(PAPER)) {
    assert.equal(new RegExp(`--${token}:\\s*(#[0-9A-Fa-f]{6})`).exec(light)?.[1], colour, token);
  }
  assert.equal(paperColour("no such token"), PAPER.ink);
});
