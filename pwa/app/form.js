// The inputs: what is typed goes into the model, what the core says of it goes beneath.

import { at, fields } from "./data.js";

/** @import { Model, Part, Typed } from "./model.js" */

/**
 * @typedef {{model: () => Model, changed: () => void, convert: (key: string, text: string, unit: string) => Promise<string | null>}} Hooks
 */

/** @param {Hooks} hooks */
export function bindForm(hooks) {
  const forms = [at("putin-form"), at("boat-form")];
  const list = at("note-list");

  /** Which part of the model an input writes to. @param {Element} element @returns {Part} */
  function partFor(element) {
    const note = element.closest(".note");
    return note ? hooks.model().notes[[...list.children].indexOf(note)] : hooks.model().readings;
  }

  /** @param {Element} box @returns {{input: any, unit: any}} */
  function controls(box) {
    return { input: box.querySelector("[data-input]"), unit: box.querySelector("[data-unit]") };
  }

  /** @param {Element} box @returns {Typed} */
  function typedIn(box) {
    const { input, unit } = controls(box);
    const text = input.type === "checkbox" ? (input.checked ? "yes" : "") : input.value;
    return unit ? { text, unit: unit.value } : { text };
  }

  for (const form of forms) {
    form.addEventListener("submit", (/** @type {Event} */ event) => event.preventDefault());
    form.addEventListener("input", (/** @type {Event} */ event) => {
      const target = /** @type {HTMLElement} */ (event.target);
      const box = target.closest(".reading");
      if (!box || target.dataset.unit) return;
      partFor(box)[/** @type {HTMLElement} */ (box).dataset.key ?? ""] = typedIn(box);
      hooks.changed();
    });
    form.addEventListener("change", async (/** @type {Event} */ event) => {
      const select = /** @type {HTMLSelectElement} */ (event.target);
      if (!select.dataset.unit) return;
      const box = /** @type {HTMLElement} */ (select.closest(".reading"));
      await switchUnit(box, select.value);
      hooks.changed();
    });
  }

  /** A new unit re-labels what was typed: the core turns the figure over. @param {HTMLElement} box @param {string} unit */
  async function switchUnit(box, unit) {
    const key = box.dataset.key ?? "";
    const part = partFor(box);
    const before = part[key];
    const { input } = controls(box);
    if (key === "plan.hard") {
      input.value = ""; // another reading, not another unit of the same
    } else {
      hooks.model().units[fields[key].kind] = unit;
      if (before?.text) {
        const shown = await hooks.convert(key, /[a-z°%"'″′]/i.test(before.text) ? before.text : `${before.text} ${before.unit}`, unit);
        if (shown && input.value === before.text) input.value = shown.slice(0, shown.lastIndexOf(" "));
      }
    }
    part[key] = typedIn(box);
  }

  /** Fill every input from the model. */
  function fill() {
    const model = hooks.model();
    while (list.children.length > model.notes.length) list.lastElementChild.remove();
    while (list.children.length < model.notes.length) list.append(newNote());
    for (const box of document.querySelectorAll(".reading")) {
      const key = /** @type {HTMLElement} */ (box).dataset.key ?? "";
      const typed = partFor(box)?.[key];
      const { input, unit } = controls(box);
      const kind = fields[key]?.kind;
      if (unit) unit.value = typed?.unit ?? (key === "plan.hard" ? "rpm" : model.units[kind] ?? unit.value);
      if (input.type === "checkbox") input.checked = typed?.text === "yes";
      else if (input.tagName === "SELECT") input.value = typed?.text || [...input.options].find((option) => option.defaultSelected)?.value || input.options[0].value;
      else input.value = typed?.text ?? "";
    }
  }

  let made = 0;
  function newNote() {
    made += 1;
    const note = at("note-template").content.firstElementChild.cloneNode(true);
    for (const element of note.querySelectorAll("[id],[for],[aria-describedby]")) {
      for (const name of ["id", "for", "aria-describedby"]) {
        const value = element.getAttribute(name);
        if (value) element.setAttribute(name, value.replace(/-n(?=-|\b)/g, `-n${made}`));
      }
    }
    return note;
  }

  at("add-note").addEventListener("click", () => {
    const { model } = hooks;
    model().notes.push({ "notes.outcome": { text: "held" } });
    fill();
    list.lastElementChild.querySelector("[data-input]").focus();
    hooks.changed();
  });
  list.addEventListener("click", (/** @type {Event} */ event) => {
    const button = /** @type {HTMLElement} */ (event.target).closest(".remove");
    if (!button) return;
    hooks.model().notes.splice([...list.children].indexOf(/** @type {Element} */ (button.closest(".note"))), 1);
    fill();
    at("add-note").focus();
    hooks.changed();
  });

  /** The box of a reading that the core names, "place.altitude" or "notes[1].rpm". @param {string} field @returns {HTMLElement | null} */
  function boxOf(field) {
    const note = field.match(/^notes\[(\d+)\]\.?(.*)$/);
    if (note) return list.children[Number(note[1])]?.querySelector(`[data-key="notes.${note[2]}"]`) ?? null;
    const key = ["plan.rpm", "plan.power", "plan.throttle"].includes(field) ? "plan.hard" : field;
    return document.querySelector(`[data-key="${CSS.escape(key)}"]`);
  }

  return {
    fill,
    boxOf,
    /** Bad readings beside their inputs, all at once. @param {{field: string, text: string}[]} errors */
    showErrors(errors) {
      for (const box of document.querySelectorAll(".reading")) {
        const { input } = controls(box);
        input.removeAttribute("aria-invalid");
        /** @type {any} */ (box.querySelector(".error")).textContent = "";
      }
      for (const { field, text } of errors) {
        const box = boxOf(field);
        if (!box) continue;
        const { input } = controls(box);
        const typed = input.type === "checkbox" || input.value.trim() !== "";
        if (!typed) continue; // an empty one is asked for in the answer, not marked as a mistake
        input.setAttribute("aria-invalid", "true");
        /** @type {any} */ (box.querySelector(".error")).textContent = text;
      }
    },
    /** What was understood, in the other common unit. @param {{[field: string]: string}} others */
    showOthers(others) {
      for (const [field, text] of Object.entries(others)) {
        const line = boxOf(field)?.querySelector(".other");
        if (line) line.textContent = text;
      }
    },
    /** @param {boolean} locked */
    lock(locked) {
      for (const control of document.querySelectorAll("#putin-form :is(input, select), #boat-form :is(input, select, button)")) {
        /** @type {HTMLInputElement} */ (control).disabled = locked;
      }
    },
  };
}
