// Runs a folder of tests with pytest inside Pyodide, pytest and the core installed by micropip from local wheels.
//
//   node pytest_in_pyodide.mjs RUNTIME_FOLDER TESTS_FOLDER HEADWATER.whl MICROPIP.whl PACKAGING.whl WHEEL...
//
// Exits with pytest's code.
import { readdirSync, readFileSync } from "node:fs";
import { basename, join } from "node:path";
import { pathToFileURL } from "node:url";

const [runtime, folder, core, micropip, packaging, ...wheels] = process.argv.slice(2);
const { loadPyodide } = await import(pathToFileURL(join(runtime, "pyodide.mjs")).href);
const pyodide = await loadPyodide({ indexURL: `${runtime}/` });
const put = (path, target) => pyodide.FS.writeFile(join(target, basename(path)), new Uint8Array(readFileSync(path)));

for (const path of [micropip, packaging]) pyodide.unpackArchive(new Uint8Array(readFileSync(path)), "wheel");
const local = [core, packaging, ...wheels];
for (const path of local) put(path, "/tmp");
pyodide.FS.mkdir("/tests");
for (const name of readdirSync(folder).filter((name) => name.endsWith(".py"))) put(join(folder, name), "/tests");

pyodide.globals.set("wheels", local.map((path) => `emfs:/tmp/${basename(path)}`));
process.exitCode = await pyodide.runPythonAsync(`
import micropip
await micropip.install(list(wheels), deps=False)
import pytest
int(pytest.main(["-q", "-p", "no:cacheprovider", "--import-mode=importlib", "--rootdir=/tests", "/tests"]))
`);
