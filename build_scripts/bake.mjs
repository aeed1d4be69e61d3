// Bakes the phone's Python: the core's wheel, installed by micropip in Pyodide, and just the standard library it
// needs, compiled to .pyc by that very Python into one stored zip.
//
//   node bake.mjs RUNTIME_FOLDER OUT.zip HEADWATER.whl WHEEL... < requests.json
//
// The requests are put to the core's door once; what they import is what the phone needs.
import { readFileSync, writeFileSync } from "node:fs";
import { basename } from "node:path";
import { pathToFileURL } from "node:url";

process.on("uncaughtException", (error) => {
  console.error(String(error.message ?? error)); // without Node's quote of a minified line
  process.exit(1);
});
const [runtime, out, wheel, ...tools] = process.argv.slice(2);
const requests = readFileSync(0, "utf8");
const { loadPyodide } = await import(pathToFileURL(`${runtime}/pyodide.mjs`).href);
const pyodide = await loadPyodide({ indexURL: `${runtime}/`, env: { PYTHONHASHSEED: "0" } });
for (const path of tools) pyodide.unpackArchive(new Uint8Array(readFileSync(path)), "wheel");
pyodide.FS.writeFile(`/tmp/${basename(wheel)}`, new Uint8Array(readFileSync(wheel)));
pyodide.globals.set("wheel", basename(wheel));
pyodide.globals.set("requests", requests);
pyodide.runPython("import sys; at_start = set(sys.modules)");
await pyodide.runPythonAsync("import micropip; await micropip.install('emfs:/tmp/' + wheel, deps=False)");
const zip = pyodide.runPython(`
import importlib.util, io, json, sys, zipfile
from importlib._bootstrap_external import _code_to_hash_pyc

def stdlib(name):
    spec = getattr(sys.modules.get(name), "__spec__", None)
    origin = getattr(spec, "origin", None) or ""
    return "python314.zip" in origin or "/lib/python3.14/" in origin and "site-packages" not in origin

tools = {"micropip", "packaging"}
for name in [n for n in sys.modules if n.partition(".")[0] in tools]:
    del sys.modules[name]
seen = set(sys.modules)
for name in sorted(seen - at_start):
    if stdlib(name):
        del sys.modules[name]
from headwater.answer import reply
for request in json.loads(requests):
    reply(json.dumps(request))
import traceback
try:
    1 / 0
except ZeroDivisionError:
    traceback.format_exc()
wanted = {n for n in set(sys.modules) if stdlib(n)} | {n for n in sys.modules if n.partition(".")[0] == "headwater"}
wanted |= {n for n in at_start if n.partition(".")[0] in ("_pyodide", "pyodide", "encodings")}
# Loaded at each start where they are found, and done without where they are not.
wanted = {n for n in wanted if n.partition(".")[0] not in {"ssl", "_ssl", "bz2", "lzma", "compression"}}
buffer = io.BytesIO()
with zipfile.ZipFile(buffer, "w", zipfile.ZIP_STORED) as archive:
    for name in sorted(wanted):
        try:
            spec = importlib.util.find_spec(name)
            source = spec.loader.get_source(name) if spec and hasattr(spec.loader, "get_source") else None
        except (ImportError, ValueError, AttributeError):
            source = None
        if source is None or "." in name and name.partition(".")[0] not in wanted:
            continue
        package = spec.submodule_search_locations is not None
        path = name.replace(".", "/") + ("/__init__" if package else "")
        code = compile(source, path + ".py", "exec", dont_inherit=True, optimize=2)
        pyc = _code_to_hash_pyc(code, importlib.util.source_hash(source.encode()), False)
        archive.writestr(zipfile.ZipInfo(path + ".pyc", (1980, 1, 1, 0, 0, 0)), bytes(pyc))
buffer.getvalue()
`);
writeFileSync(out, zip.toJs());
