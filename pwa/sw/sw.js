// The service worker: keeps every file, by hash, and serves from there. The build puts the lists in.
//
// Messages to it, each answered through its port: "state" (is every file here and whole?), "repair" (fetch what is
// not), "ran" (this build works, older ones may go), "take" (use the waiting version now).
// Messages from it: { fault: "quota" | "install" }, when a version could not be kept.

/** @type {[string, string][]} path and SHA-256 */
const shellFiles = SHELL_FILES;
/** @type {[string, string][]} */
const runtimeFiles = RUNTIME_FILES;

const sw = /** @type {ServiceWorkerGlobalScope} */ (/** @type {unknown} */ (self));
const scope = sw.registration.scope;
// Another copy of the app may live elsewhere on this host: the folder is part of the name.
const OURS = `headwater ${new URL(scope).pathname} `;
const SHELLS = `${OURS}shell `;
const SHELL = SHELLS + BUILD;
const RUNTIME_CACHE = `${OURS}runtime ${RUNTIME}`;

sw.addEventListener("install", (event) => event.waitUntil(install()));
sw.addEventListener("activate", (event) => event.waitUntil(activate()));
sw.addEventListener("fetch", (event) => {
  const { method, url } = event.request;
  if (method === "GET" && url.startsWith(scope)) event.respondWith(serve(event.request));
});
sw.addEventListener("message", (event) => {
  const answers = /** @type {Record<string, () => Promise<unknown>>} */ ({ state, take, ran, repair });
  const answer = answers[event.data?.kind];
  if (answer) event.waitUntil(answer().then((value) => event.ports[0]?.postMessage(value)));
});

/** All or nothing: one bad file and this version is not installed. The runtime's good files stay for the next try. */
async function install() {
  try {
    await fill();
  } catch (error) {
    await caches.delete(SHELL);
    const pages = await sw.clients.matchAll({ includeUncontrolled: true });
    for (const client of pages) client.postMessage({ fault: faultOf(error) });
    throw error;
  }
}

/** A first visit is served from here at once; of our shells this build's and the one before it stay. */
async function activate() {
  const shells = (await others()).filter((name) => name.startsWith(SHELLS));
  await Promise.all(shells.slice(1).map((name) => caches.delete(name)));
  await sw.clients.claim();
}

/** The page for its own address alone, each file by its name; what is not ours is an error, never the page. @param {Request} request */
async function serve(request) {
  const path = request.url.slice(scope.length).split(/[?#]/)[0];
  const kept = await find(scope + (path || "index.html"));
  return kept ?? fetch(request);
}

/** A file from this build's caches, else from the build before it, whose page may still be open. @param {string} url */
async function find(url) {
  for (const name of [SHELL, RUNTIME_CACHE]) {
    const kept = await (await caches.open(name)).match(url);
    if (kept) return kept;
  }
  for (const name of await others()) {
    const kept = await (await caches.open(name)).match(url);
    if (kept) return kept;
  }
}

/** Caches of other builds of this copy, the newest first. */
async function others() {
  const names = await caches.keys();
  return names.filter((name) => name.startsWith(OURS) && name !== SHELL && name !== RUNTIME_CACHE).reverse();
}

/** Whether every file is here and whole. */
async function state() {
  const bad = [];
  for (const { path, url, hash, name } of files()) {
    const kept = await (await caches.open(name)).match(url);
    if (!(await isWhole(kept, hash))) bad.push(path);
  }
  return { ready: bad.length === 0, bad, build: BUILD };
}

/** Fetch again whatever is missing or broken; what is well stays untouched. */
async function repair() {
  try {
    await fill();
  } catch (error) {
    return { ...(await state()), fault: faultOf(error) };
  }
  return state();
}

/** This build has run once: what came before may go. */
async function ran() {
  await Promise.all((await others()).map((name) => caches.delete(name)));
}

/** The person wants this version now. */
async function take() {
  await sw.skipWaiting();
}

function* files() {
  for (const [path, hash] of runtimeFiles) yield { path, hash, url: scope + path, name: RUNTIME_CACHE };
  for (const [path, hash] of shellFiles) yield { path, hash, url: scope + path, name: SHELL };
}

/** Put in what the caches do not hold whole. */
async function fill() {
  await Promise.all(
    Array.from(files(), async ({ path, url, hash, name }) => {
      const cache = await caches.open(name);
      if (await isWhole(await cache.match(url), hash)) return;
      await cache.put(url, await bring(path, url, hash));
    }),
  );
}

/** One file, byte for byte as it was built: an older build's, else the browser's own copy, else a new one. @param {string} path @param {string} url @param {string} hash */
async function bring(path, url, hash) {
  const sources = [() => find(url), () => fetch(url), () => fetch(url, { cache: "reload" })];
  for (const source of sources) {
    const response = await source();
    if (response && (await isWhole(response.clone(), hash))) {
      // Where a host redirects index.html to its folder: no browser takes that for a page.
      return response.redirected ? new Response(response.body, { headers: response.headers }) : response;
    }
  }
  throw new Error(`${path} did not arrive whole`);
}

/** @param {Response | undefined} response @param {string} hash */
async function isWhole(response, hash) {
  if (!response?.ok) return false;
  const digest = new Uint8Array(await crypto.subtle.digest("SHA-256", await response.arrayBuffer()));
  return Array.from(digest, (byte) => byte.toString(16).padStart(2, "0")).join("") === hash;
}

/** @param {unknown} error */
const faultOf = (error) => (error instanceof Error && error.name === "QuotaExceededError" ? "quota" : "install");
