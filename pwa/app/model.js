// What the person typed, as text and unit, and the contract's case made of it. No number is read here.

import { data, fields } from "./data.js";

/**
 * @typedef {{text: string, unit?: string}} Typed
 * @typedef {{[key: string]: Typed}} Part
 * @typedef {{version: 1, units: {[quantity: string]: string}, readings: Part, notes: Part[], slip?: {[place: string]: string}}} Model
 */

/** @returns {Model} */
export function empty() {
  return { version: 1, units: { ...data.systems.us }, readings: {}, notes: [] };
}

/** Whether nothing at all was typed. @param {Model} model */
export function isEmpty(model) {
  return model.notes.length === 0 && Object.values(model.readings).every(({ text }) => !text);
}

/** The case as the core takes it: empty readings are left out. @param {Model} model @returns {import("./data.js").Case} */
export function caseOf(model) {
  /** @type {import("./data.js").Case} */
  const made = { boat: {}, place: {}, plan: {}, notes: model.notes.map((note) => partOf(note)) };
  for (const [key, typed] of Object.entries(model.readings)) {
    const [part, name] = key === "plan.hard" ? hardKey(typed).split(".") : key.split(".");
    const value = valueOf(key === "plan.hard" ? hardKey(typed) : key, typed);
    if (value !== undefined) made[part][name] = value;
  }
  return made;
}

/** @param {Part} note */
function partOf(note) {
  /** @type {{[name: string]: unknown}} */
  const made = {};
  for (const [key, typed] of Object.entries(note)) {
    const value = valueOf(key, typed);
    if (value !== undefined) made[key.split(".")[1]] = value;
  }
  return made;
}

/** Which of the plan's three readings a unit means. @param {Typed} typed */
export function hardKey(typed) {
  return { rpm: "plan.rpm", "%": "plan.throttle" }[typed.unit ?? "rpm"] ?? "plan.power";
}

/** @param {string} key @param {Typed} typed @returns {unknown} */
function valueOf(key, typed) {
  const text = typed.text.trim();
  const field = fields[key];
  if (!text || !field) return undefined;
  if (field.kind === "flag") return text === "yes" ? true : undefined;
  if (field.units.length === 0) return text;
  return withUnit(text, typed.unit ?? field.units[0]);
}

/** A figure with its unit; a typed unit wins. @param {string} text @param {string} unit */
export function withUnit(text, unit) {
  return /[a-z°%"'″′]/i.test(text) ? text : `${text} ${unit}`;
}

/** The model of a case that came by link or as the demo. @param {import("./data.js").Case} given @returns {Model} */
export function modelOf(given) {
  const model = empty();
  for (const part of ["boat", "place", "plan"]) {
    for (const [name, value] of Object.entries(given[part] ?? {})) put(model.readings, `${part}.${name}`, value, model);
  }
  for (const note of given.notes ?? []) {
    /** @type {Part} */
    const made = {};
    for (const [name, value] of Object.entries(note)) put(made, `notes.${name}`, value, model);
    model.notes.push(made);
  }
  return model;
}

/** @param {Part} part @param {string} key @param {unknown} value @param {Model} model */
function put(part, key, value, model) {
  const field = fields[key];
  if (!field) return;
  if (field.kind === "flag") {
    if (value === true) part[key] = { text: "yes" };
    return;
  }
  const text = String(value);
  const split = text.match(/^(.*\S)\s+(\S+)$/);
  const unit = split && field.units.includes(split[2]) ? split[2] : undefined;
  const typed = unit && split ? { text: split[1], unit } : { text, unit: field.units[0] };
  if (unit) model.units[field.kind] = unit;
  const hard = ["plan.rpm", "plan.power", "plan.throttle"].includes(key);
  part[hard ? "plan.hard" : key] = field.units.length ? typed : { text };
}
