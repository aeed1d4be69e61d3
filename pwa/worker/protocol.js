// The whole protocol between page and worker. Every message is one of these.

/**
 * Page to worker.
 * @typedef {{kind: "start", runtime: string, core: string}} Start  where Pyodide and the baked zip lie
 * @typedef {{kind: "ask", id: number, text: string}} Ask           a request for the core's door, as JSON text
 *
 * Worker to page.
 * @typedef {{kind: "progress", step: "runtime" | "core"}} Progress
 * @typedef {{kind: "ready"}} Ready
 * @typedef {{kind: "answer", id: number, text: string}} Answer     the door's reply, as JSON text
 * @typedef {{kind: "error", id: number, message: string}} Failure  this question failed, the next may be asked
 * @typedef {{kind: "fatal", message: string}} Fatal                Python is gone, start anew
 *
 * @typedef {Start | Ask} ToWorker
 * @typedef {Progress | Ready | Answer | Failure | Fatal} ToPage
 */

export {};
