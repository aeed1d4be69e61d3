// The service worker: keeps every file, by hash, and serves from there. The build puts the lists in.

/** @type {[string, string][]} path and SHA-256 */
const shellFiles = SHELL_FILES;
/** @type {[string, string][]} */
const runtimeFiles = RUNTIME_FILES;

const SHELL = `headwater-shell-${BUILD}`;
const RUNTIME_CACHE = `headwater-runtime-${RUNTIME}`;
const sw = /** @type {ServiceWorkerGlobalScope} */ (/** @type {unknown} */ (self));
const page = new URL("index.html", sw.registration.scope).href;

sw.addEventListener("install", (event) => event.waitUntil(install()));
sw.addEventListener("activate", (event) => event.waitUntil(activate()));
sw.addEventListener("fetch", (event) => {
  if (event.request.method === "GET" && event.request.url.startsWith(sw.registration.scope)) event.respondWith(serve(event.request));
});
sw.addEventListener("message", (event) => {
  const answer = /** @type {Record<string, () => Promise<unknown>>} */ ({ state, take, ran, repair })[event.data?.kind];
  if (answer) event.waitUntil(answer().then((value) => event.ports[0]?.postMessage(value), (error) => event.ports[0]?.postMessage({ fault: String(error) })));
});

/** All or nothing: one bad file and this version is not installed. */
async function install() {
  try {
    await fill(RUNTIME_CACHE, runtimeFiles);
    await fill(SHELL, shellFiles);
  } catch (error) {
    await caches.delete(SHELL);
    throw error;
  }
}

/** Fetch what a cache does not hold whole; each file must be just what was built. @param {string} name @param {[string, string][]} files */
async function fill(name, files) {
  const cache = await caches.open(name);
  for (const [path, hash] of files) {
    const url = new URL(path, sw.registration.scope).href;
    if (await holds(cache, url, hash)) continue;
    const response = await fetch(url, { cache: "no-store", credentials: "same-origin" });
    const body = response.ok ? await response.arrayBuffer() : new ArrayBuffer(0);
    if ((await sha256(body)) !== hash) throw new Error(`${path} did not arrive whole`);
    const type = response.headers.get("Content-Type") ?? "";
    await cache.put(url, new Response(body, { headers: { "Content-Type": type, "Content-Length": String(body.byteLength) } }));
  }
}

/** Whether a cache holds a file, byte for byte. @param {Cache} cache @param {string} url @param {string} hash */
async function holds(cache, url, hash) {
  const kept = await cache.match(url);
  return kept !== undefined && (await sha256(await kept.arrayBuffer())) === hash;
}

/** @param {ArrayBuffer} body */
async function sha256(body) {
  const digest = new Uint8Array(await crypto.subtle.digest("SHA-256", body));
  return Array.from(digest, (byte) => byte.toString(16).padStart(2, "0")).join("");
}

/** Take over at once on a first visit; of our own caches keep this build's and the one before it. */
async function activate() {
  const shells = (await caches.keys()).filter((name) => name.startsWith("headwater-shell-") && name !== SHELL);
  await Promise.all(shells.slice(0, -1).map((name) => caches.delete(name)));
  await sw.clients.claim();
}

/** The page for every navigation, each file by its own name; what is not ours is an error, never the page. @param {Request} request */
async function serve(request) {
  const url = request.mode === "navigate" ? page : request.url.split(/[?#]/)[0];
  for (const name of [SHELL, RUNTIME_CACHE]) {
    const kept = await (await caches.open(name)).match(url);
    if (kept) return kept;
  }
  return fetch(request);
}

/** Whether every file is here and whole. */
async function state() {
  const bad = [];
  for (const [name, files] of /** @type {const} */ ([[SHELL, shellFiles], [RUNTIME_CACHE, runtimeFiles]])) {
    const cache = await caches.open(name);
    for (const [path, hash] of files) if (!(await holds(cache, new URL(path, sw.registration.scope).href, hash))) bad.push(path);
  }
  return { ready: bad.length === 0, bad, build: BUILD };
}

/** The person wants this version now. */
async function take() {
  await sw.skipWaiting();
}

/** This build has run once: what came before may go. */
async function ran() {
  const ours = (await caches.keys()).filter((name) => name.startsWith("headwater-"));
  await Promise.all(ours.filter((name) => name !== SHELL && name !== RUNTIME_CACHE).map((name) => caches.delete(name)));
}

/** Fetch again whatever is missing or broken. */
async function repair() {
  await install();
  return state();
}
