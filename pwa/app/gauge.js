// The answer as heights on a gauge board. The core gives shares of the height; here they are only drawn.

const NS = "http://www.w3.org/2000/svg";
const TOP = 14;
const BOTTOM = 250;
const LEFT = 42; // of the board
const WIDE = 36;

/**
 * @typedef {{key: string, at: number, low: number | null, high: number | null, text: string}} Mark
 * @typedef {{unit: string, ticks: {at: number, text: string, major: boolean}[], marks: Mark[], text: string}} Gauge
 */

/** @param {SVGElement} svg @param {string} name @param {{[key: string]: string | number}} attributes @param {string} [text] */
function add(svg, name, attributes, text) {
  const element = document.createElementNS(NS, name);
  for (const [key, value] of Object.entries(attributes)) element.setAttribute(key, String(value));
  if (text !== undefined) element.textContent = text;
  svg.append(element);
}

/** @param {number} share */
const y = (share) => BOTTOM - share * (BOTTOM - TOP);

/** @param {SVGElement} svg @param {Gauge} gauge */
export function drawGauge(svg, gauge) {
  svg.replaceChildren();
  svg.setAttribute("aria-label", gauge.text);
  const pattern = '<pattern id="hatch" width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)"><rect class="hatch-line" width="3" height="6"/></pattern>';
  const defs = document.createElementNS(NS, "defs");
  defs.innerHTML = pattern;
  svg.append(defs);
  const mark = Object.fromEntries(gauge.marks.map((one) => [one.key, one]));
  const holds = mark.holds?.at ?? 0;
  add(svg, "rect", { class: "board", x: LEFT, y: TOP, width: WIDE, height: BOTTOM - TOP });
  if (holds) add(svg, "rect", { class: "water", x: LEFT, y: y(holds), width: WIDE, height: BOTTOM - y(holds) });
  const gone = mark.lets_go;
  if (gone) add(svg, "rect", { class: "doubt", x: LEFT, y: y(Math.max(gone.at, holds)), width: WIDE, height: Math.max(y(holds) - y(Math.max(gone.at, holds)), 0), fill: "url(#hatch)" });
  gauge.ticks.forEach(({ at, text }, i) => {
    add(svg, "line", { class: "tick", x1: LEFT - 7, x2: LEFT, y1: y(at), y2: y(at) });
    add(svg, "text", { class: "tick-text", x: LEFT - 9, y: y(at) + 4, "text-anchor": "end" }, text);
    const next = gauge.ticks[i + 1];
    if (next && i % 2 === 0) add(svg, "rect", { class: "block", x: LEFT + WIDE - 10, y: y(next.at), width: 10, height: y(at) - y(next.at) });
  });
  if (holds) add(svg, "line", { class: "waterline", x1: LEFT - 4, x2: LEFT + WIDE + 4, y1: y(holds), y2: y(holds) });
  if (gone) add(svg, "line", { class: "gone", x1: LEFT - 4, x2: LEFT + WIDE + 4, y1: y(gone.at), y2: y(gone.at) });
  const plan = mark.plan;
  if (plan) {
    add(svg, "path", { class: "pointer", d: `M${LEFT + WIDE + 3} ${y(plan.at)} l11 -7 v14 z` });
    add(svg, "text", { class: "plan-text", x: LEFT + WIDE + 16, y: y(plan.at) + 4 }, plan.text);
  }
  add(svg, "rect", { class: "frame", x: LEFT, y: TOP, width: WIDE, height: BOTTOM - TOP });
}
