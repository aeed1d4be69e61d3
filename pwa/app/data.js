// What the build compiled into the page: links, sentences, fields, unit systems, the demo.

/**
 * @typedef {{kind: string, units: string[], choices: string[]}} Field
 * @typedef {{[part: string]: any}} Case
 * @typedef {{
 *   links: {main: string, worker: string, core: string, runtime: string, style: string},
 *   version: string,
 *   screen: {[key: string]: string},
 *   systems: {[name: string]: {[quantity: string]: string}},
 *   fields: {[key: string]: Field},
 *   demo: Case,
 * }} Data
 */

/** @type {Data} */
export const data = JSON.parse(/** @type {HTMLElement} */ (document.getElementById("data")).textContent ?? "");
export const { screen, fields } = data;

/** @param {string} id @returns {any} the element, which the page has */
export function at(id) {
  return document.getElementById(id);
}
