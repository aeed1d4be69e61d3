// The page's side of the worker.
//
//   const core = connect({ worker, runtime, core }, { onProgress, onReady, onFatal });
//   const reply = await core.ask({ ask: "check", case: … });   // null: a newer question of this kind came in
//
// One question runs at a time. Of each kind (and field) one may wait, and a newer one takes its place; an answer that
// a newer question has overtaken is dropped. A start or a question that never settles is given up and the worker
// replaced; after a few starts in vain every question fails, until again() is called.

/** @import { ToPage } from "./protocol.js" */

/**
 * @typedef {{ask: string, [key: string]: unknown}} Request
 * @typedef {{request: Request, settle: (reply: any) => void, fail: (error: Error) => void}} Question
 * @typedef {{worker: string, runtime: string, core: string}} Places
 * @typedef {{onProgress: (step: string) => void, onReady: () => void, onFatal: (message: string, again: boolean) => void}} Hooks
 */

const START_MS = 60_000; // the slowest phone that still starts
const FIRST_START_MS = 300_000; // nothing kept yet: Python comes over a weak signal
const ANSWER_MS = 20_000;
const MOST_STARTS = 3; // in a row without an answer between

/** What a newer question supersedes. @param {Request} request */
const kindOf = ({ ask, field }) => `${ask} ${field ?? ""}`;

/** @param {Places} places @param {Hooks} hooks */
export function connect(places, hooks) {
  /** @type {Worker} */
  let worker;
  /** @type {Question | null} */
  let running = null;
  /** @type {Map<string, Question>} */
  const waiting = new Map();
  let ready = false;
  let stopped = false;
  let starts = 0;
  let id = 0;
  /** @type {ReturnType<typeof setTimeout> | undefined} */
  let watchdog;

  /** @param {number} ms @param {string} message */
  function watch(ms, message) {
    clearTimeout(watchdog);
    watchdog = setTimeout(() => fatal(message), ms);
  }

  function start() {
    starts += 1;
    stopped = false;
    const url = new URL(places.worker, document.baseURI);
    worker = new Worker(url, { type: "module" });
    worker.onmessage = ({ data }) => hear(data);
    worker.onerror = (event) => fatal(event.message || "the worker did not load");
    const [runtime, core] = [places.runtime, places.core].map((path) => new URL(path, document.baseURI).href);
    worker.postMessage({ kind: "start", runtime: `${runtime}/`, core });
    watchStart();
  }

  function watchStart() {
    watch(navigator.serviceWorker?.controller ? START_MS : FIRST_START_MS, "the start took too long");
  }

  /** @param {string} message */
  function fatal(message) {
    clearTimeout(watchdog);
    worker.onmessage = worker.onerror = null;
    worker.terminate();
    ready = false;
    if (running) {
      const kind = kindOf(running.request);
      if (waiting.has(kind)) running.settle(null);
      else waiting.set(kind, running); // asked again of the next worker
      running = null;
    }
    stopped = starts >= MOST_STARTS;
    hooks.onFatal(message, !stopped);
    if (!stopped) return start();
    for (const question of waiting.values()) question.fail(new Error(message));
    waiting.clear();
  }

  /** @param {ToPage} data */
  function hear(data) {
    if (data.kind === "progress") {
      watchStart();
      hooks.onProgress(data.step);
    } else if (data.kind === "ready") {
      clearTimeout(watchdog);
      ready = true;
      hooks.onReady();
      next();
    } else if (data.kind === "fatal") {
      fatal(data.message);
    } else if (running && data.id === id) {
      clearTimeout(watchdog);
      const { request, settle, fail } = running;
      running = null;
      if (data.kind === "error") fail(new Error(data.message));
      else {
        starts = 0;
        settle(waiting.has(kindOf(request)) ? null : JSON.parse(data.text));
      }
      next();
    }
  }

  function next() {
    if (!ready || running) return;
    const first = waiting.entries().next();
    if (first.done) return;
    const [kind, question] = first.value;
    waiting.delete(kind);
    running = question;
    id += 1;
    worker.postMessage({ kind: "ask", id, text: JSON.stringify(question.request) });
    watch(ANSWER_MS, "the answer took too long");
  }

  start();
  return {
    /** @param {Request} request @returns {Promise<any>} */
    ask(request) {
      if (stopped) return Promise.reject(new Error("Python is not running"));
      const kind = kindOf(request);
      waiting.get(kind)?.settle(null);
      return new Promise((settle, fail) => {
        waiting.set(kind, { request, settle, fail });
        next();
      });
    },
    /** Start once more after the last start was given up. */
    again() {
      starts = 0;
      start();
    },
  };
}
