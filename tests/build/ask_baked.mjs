// Puts requests to the core's door inside the baked zip, as the phone does; prints the replies.
//
//   node ask_baked.mjs RUNTIME_FOLDER CORE.zip < requests.json > replies.json
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { pathToFileURL } from "node:url";

const [runtime, core] = process.argv.slice(2);
const { info } = JSON.parse(readFileSync(join(runtime, "pyodide-lock.json"), "utf8"));
const { loadPyodide } = await import(pathToFileURL(join(runtime, "pyodide.mjs")).href);
const pyodide = await loadPyodide({
  indexURL: `${runtime}/`,
  stdLibURL: core,
  lockFileContents: { info, packages: {} },
  env: { PYTHONHASHSEED: "0" },
});
const door = pyodide.runPython("from headwater.answer import reply; reply");
const replies = JSON.parse(readFileSync(0, "utf8")).map((request) => JSON.parse(door(JSON.stringify(request))));
process.stdout.write(JSON.stringify(replies));
