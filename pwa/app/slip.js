// The slip sheet: rpm seen, asked of the core, its sentences painted.

import { at } from "./data.js";
import { caseOf, withUnit } from "./model.js";

/** @typedef {{model: () => import("./model.js").Model, ask: (request: any) => Promise<any>, save: () => void}} Hooks */

const UNITS = { rpm: "rotation", share: "share", boat_speed: "speed" };

/** @param {Hooks} hooks */
export function bindSlip(hooks) {
  /** @type {NodeListOf<HTMLInputElement>} */
  const inputs = document.querySelectorAll("[data-slip]");

  async function look() {
    const model = hooks.model();
    const typed = model.slip ?? {};
    /** @type {{[name: string]: string}[]} */
    const seen = [{}, {}];
    for (const [place, text] of Object.entries(typed)) {
      const [row, name] = place.split(".");
      if (text.trim()) seen[Number(row)][name] = withUnit(text.trim(), model.units[UNITS[/** @type {keyof typeof UNITS} */ (name)]]);
    }
    const asked = seen.filter((row) => row.rpm);
    if (asked.length === 0) return at("slip-said").replaceChildren();
    const reply = await hooks.ask({ ask: "slip", case: caseOf(model), seen: asked, units: model.units }).catch(() => null);
    if (!reply) return;
    const lines = reply.errors.length ? reply.errors.map((/** @type {{text: string}} */ error) => error.text) : reply.text;
    at("slip-said").replaceChildren(
      ...lines.map((/** @type {string} */ text) => {
        const item = document.createElement("li");
        item.textContent = text;
        return item;
      }),
    );
  }

  for (const input of inputs) {
    input.addEventListener("input", () => {
      const model = hooks.model();
      model.slip = { ...model.slip, [input.dataset.slip ?? ""]: input.value };
      hooks.save();
      look();
    });
  }
  return {
    fill() {
      for (const input of inputs) input.value = hooks.model().slip?.[input.dataset.slip ?? ""] ?? "";
      look();
    },
  };
}
