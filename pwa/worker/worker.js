// The module worker: starts Python out of the baked zip and puts each question to the core's one door.

/** @import { ToWorker, ToPage } from "./protocol.js" */

/** What Pyodide wants to know of packages: there are none beside the baked zip. */
const NO_PACKAGES = {
  info: { abi_version: "2026_0", arch: "wasm32", platform: "emscripten_5_0_3", python: "3.14.2", version: "314.0.7" },
  packages: {},
};

/** @type {((text: string) => string) | undefined} */
let door;

/** @param {ToPage} message */
const tell = (message) => self.postMessage(message);

/** @param {string} runtime @param {string} core */
async function start(runtime, core) {
  tell({ kind: "progress", step: "runtime" });
  const { loadPyodide } = await import(`${runtime}pyodide.mjs`);
  const pyodide = await loadPyodide({
    indexURL: runtime,
    packageBaseUrl: runtime,
    stdLibURL: core,
    lockFileContents: NO_PACKAGES,
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
