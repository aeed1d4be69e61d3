// What is kept on this phone: the person's own boat, the demo while it is on, the last answer.

import { createStore, get, set } from "idb-keyval";

/**
 * @typedef {{when: string, headline: string, lead: string, place: string}} Last
 * @typedef {"own" | "demo" | "last" | "mode" | "theme"} Key
 */

/** @type {ReturnType<typeof createStore> | undefined} */
let store;
let refused = false;

/** @param {Key} key @returns {Promise<any>} what was kept, undefined where nothing is or may be */
export async function recall(key) {
  try {
    store ??= createStore("headwater", "kept");
    return await get(key, store);
  } catch {
    refused = true;
    return undefined;
  }
}

/** @param {Key} key @param {unknown} value @returns {Promise<boolean>} whether it is kept */
export async function keep(key, value) {
  try {
    store ??= createStore("headwater", "kept");
    await set(key, value, store);
    return true;
  } catch {
    refused = true;
    return false;
  }
}

/** Whether the browser has refused to keep anything. */
export function keepsNothing() {
  return refused;
}
