// The module worker: starts Python out of the baked zip and puts each question to the core's one door.

/** @import { ToWorker, ToPage } from "./protocol.js" */

import { info } from "pyodide/pyodide-lock.json";

const SMALLEST = Uint8Array.of(0, 0x61, 0x73, 0x6d, 1, 0, 0, 0); // a module with nothing in it

/** @type {((text: string) => string) | undefined} */
let door;

/** @param {ToPage} message */
const tell = (message) => self.postMessage(message);

/** @param {string} runtime @param {string} core */
async function start(runtime, core) {
  new WebAssembly.Module(SMALLEST); // where WebAssembly is refused this throws, while Pyodide would wait for ever
  tell({ kind: "progress", step: "runtime" });
  const { loadPyodide } = await import(`${runtime}pyodide.mjs`);
  const pyodide = await loadPyodide({
    indexURL: runtime,
    packageBaseUrl: runtime,
    stdLibURL: core,
    lockFileContents: { info, packages: {} }, // there are none beside the baked zip
    env: { PYTHONHASHSEED: "0" },
  });
  tell({ kind: "progress", step: "core" });
  door = pyodide.runPython("from headwater.answer import reply; reply");
  tell({ kind: "ready" });
}

self.onmessage = async (/** @type {MessageEvent<ToWorker>} */ { data }) => {
  if (data.kind === "start") {
    try {
      await start(data.runtime, data.core);
    } catch (error) {
      tell({ kind: "fatal", message: String(error) });
    }
    return;
  }
  try {
    if (!door) throw new Error("asked before the start");
    tell({ kind: "answer", id: data.id, text: door(data.text) });
  } catch (error) {
    // A Python exception leaves Python whole; anything else means that the runtime is gone.
    const whole = error instanceof Error && error.name === "PythonError";
    if (whole) tell({ kind: "error", id: data.id, message: error.message });
    else tell({ kind: "fatal", message: String(error) });
  }
};
