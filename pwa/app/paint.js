// Paints a sheet of sentences. Every word comes from the core; here is only where it stands.

import { at, screen } from "./data.js";
import { drawGauge } from "./gauge.js";

/** @param {string} name @param {string} [text] @param {string} [className] */
function make(name, text, className) {
  const element = document.createElement(name);
  if (text !== undefined) element.textContent = text;
  if (className) element.className = className;
  return element;
}

/** @param {string} id @param {string[]} texts */
function list(id, texts) {
  const items = texts.map((text) => make("li", text));
  at(id).replaceChildren(...items);
  const section = at(id).closest("section");
  if (section && section.querySelector("ul.always") === null) section.hidden = texts.length === 0;
}

/** @param {string} id @param {string} text */
function say(id, text) {
  if (at(id).textContent !== text) at(id).textContent = text; // an unchanged live line is not read out again
}

/** @param {any} sheet @param {(field: string) => void} goTo */
export function paintSheet(sheet, goTo) {
  const answer = at("answer");
  const wrong = sheet.errors.length > 0;
  answer.dataset.state = wrong ? "none" : (sheet.state ?? "none");
  say("headline", sheet.headline);
  say("lead", sheet.lead ?? "");
  at("below").hidden = wrong;
  at("gauge").toggleAttribute("hidden", wrong);
  at("wrong").replaceChildren(
    ...sheet.errors.map((/** @type {{field: string, label: string, text: string}} */ error) => {
      const item = make("li");
      const button = make("button", error.label);
      button.setAttribute("type", "button");
      button.title = screen.go_to_reading;
      button.addEventListener("click", () => goTo(error.field));
      item.append(button, ` ${error.text}`);
      return item;
    }),
  );
  if (wrong) {
    at("lines").replaceChildren();
    return;
  }
  const first = [...sheet.lines, ...(sheet.launch?.lines ?? [])].filter((/** @type {Line} */ row) => row.first);
  const rest = sheet.lines.filter((/** @type {Line} */ row) => !row.first);
  at("lines").replaceChildren(...first.map(line));
  paintLaunch(sheet.launch);
  at("more-lines").replaceChildren(...rest.map(line));
  drawGauge(at("gauge"), sheet.gauge);
  say("not-checked", sheet.not_checked);
  say("ground", sheet.ground);
  list("reasons", sheet.reasons.map((/** @type {{text: string}} */ row) => row.text));
  say("teach", sheet.teach ?? "");
  list("cautions", sheet.cautions.map((/** @type {{text: string}} */ row) => row.text));
  list("equivalents", sheet.equivalents.map((/** @type {{text: string}} */ row) => row.text));
  list("movers", sheet.movers.map((/** @type {{text: string}} */ row) => row.text));
  at("ledger").replaceChildren(...sheet.ledger.map(ledgerRow));
  at("working").replaceChildren(...sheet.working.flatMap(workingRow));
  table("curve", sheet.curve.head, sheet.curve.rows);
}

/** @param {any} launch */
function paintLaunch(launch) {
  at("launch").hidden = !launch;
  if (!launch) return;
  at("launch-way").textContent = launch.way ? `: ${launch.way}` : "";
  at("abort").textContent = launch.abort;
  at("heaviest").textContent = launch.heaviest;
  table("schedule", launch.schedule.head, launch.schedule.rows);
  table("ways", [], launch.ways);
  at("remedies-wait").hidden = launch.done;
  at("help").hidden = launch.done && launch.remedies.length === 0;
  at("remedies").replaceChildren(...launch.remedies.map((/** @type {string} */ text) => make("li", text)));
  const rest = launch.lines.filter((/** @type {Line} */ row) => !row.first);
  at("launch-lines").replaceChildren(...rest.map(line));
}

/** @typedef {{key: string, first: boolean, label: string, value: string, span: string, aside: string}} Line */

/** @param {Line} row */
function line(row) {
  const box = make("div", undefined, `line line-${row.key}`);
  const value = make("dd");
  value.append(make("b", row.value));
  const more = [row.span, row.aside].filter(Boolean).join(" · ");
  if (more) value.append(make("span", more, "span"));
  box.append(make("dt", row.label), value);
  return box;
}

/** @param {{key: string, term: string, value: string, sign: string}} row */
function ledgerRow(row) {
  const made = make("tr", undefined, row.sign === "=" ? "sum" : "");
  const head = make("th", row.term);
  head.setAttribute("scope", "row");
  made.append(make("td", row.sign === "-" ? "−" : row.sign, "sign"), make("td", row.value, "figure"), head);
  return made;
}

/** @param {{title: string, symbol: string, formula: string, numbers: string, result: string, span: string, source: string, mark: string}} row */
function workingRow(row) {
  const value = make("dd");
  value.append(make("b", row.result));
  if (row.span) value.append(make("span", `${screen.between} ${row.span}`, "span"));
  value.append(make("code", `${row.symbol ? `${row.symbol} = ` : ""}${row.formula}`));
  if (row.numbers) value.append(make("code", `= ${row.numbers}`));
  value.append(make("span", `${screen.working_source}: ${row.source} · ${screen.working_mark} ${row.mark}`, "source"));
  return [make("dt", row.title), value];
}

/** @param {string} id @param {string[]} titles @param {string[][]} lines */
function table(id, titles, lines) {
  const head = make("tr");
  head.append(
    ...titles.map((text) => {
      const cell = make("th", text);
      cell.setAttribute("scope", "col");
      return cell;
    }),
  );
  const rows = lines.map(([title, ...cells]) => {
    const row = make("tr");
    const first = make("th", title);
    first.setAttribute("scope", "row");
    row.append(first, ...cells.map((text) => make("td", text)));
    return row;
  });
  const thead = make("thead");
  thead.append(head);
  const tbody = make("tbody");
  tbody.append(...rows);
  at(id).replaceChildren(...(titles.length ? [thead] : []), tbody);
}

/** The last answer comes back small and dated, never as a fresh one. @param {import("./store.js").Last | undefined} last */
export function paintLast(last) {
  at("last").hidden = !last;
  if (!last) return;
  const when = new Date(last.when).toLocaleString(undefined, { dateStyle: "medium", timeStyle: "short" });
  const where = last.place ? `, ${last.place}` : "";
  at("last").textContent = `${screen.last}, ${when}${where}: ${last.headline} ${screen.last_stale}`;
}
