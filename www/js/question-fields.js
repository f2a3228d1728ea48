// The fields that belong to one question, shown in its rung.

import { lineFields } from "./line-fields.js";
import { splittingFields } from "./splitting-fields.js";

/** The node with the fields of a question, or null where the head has them all. */
export function questionFields(name, fields, questions, put, shared) {
  if (name === "lines") return lineFields(fields, questions, { ...shared, setField: put });
  return name === "splitting" ? splittingFields(fields, questions, put, shared) : null;
}
