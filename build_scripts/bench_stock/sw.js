const FILES = ["./", "page.js", "worker.js", "demo.json", "core.zip"];
const RUNTIME = ["pyodide.mjs", "pyodide.asm.mjs", "pyodide.asm.wasm", "pyodide-lock.json", "python_stdlib.zip"];
const kept = async () => (await caches.open("stock")).addAll([...FILES, ...RUNTIME.map((name) => `runtime/${name}`)]);

self.addEventListener("install", (event) => event.waitUntil(kept()));
self.addEventListener("activate", (event) => event.waitUntil(self.clients.claim()));
self.addEventListener("fetch", (event) =>
  event.respondWith(caches.match(event.request).then((found) => found ?? fetch(event.request))),
);
