// The page's side of the service worker.
//
//   const offline = register({ onState, onWaiting });
//   onState({ ready, build, bad, fault })   every file is kept and whole, or which are not, or what went wrong
//   onWaiting(take)                         a newer version is there; take() uses it now and reloads once
//   offline.ran()                           this build has painted an answer: what came before it may go
//   offline.repair()                        fetch again what is missing

/**
 * No service workers here; no room on the phone; the download did not arrive whole.
 * @typedef {"none" | "quota" | "install"} Fault
 * @typedef {{ready?: boolean, build?: string, bad?: string[], fault?: Fault}} State
 * @typedef {{onState: (state: State) => void, onWaiting: (take: () => void) => void}} Hooks
 */

const LATER_MS = 5000; // for a start that asks nothing

/** @param {Hooks} hooks */
export function register(hooks) {
  const container = navigator.serviceWorker;
  if (!container) {
    hooks.onState({ fault: "none" });
    return { ran() {}, async repair() {} };
  }
  const known = container.controller !== null; // else this is the first install, and nothing is reloaded
  let taking = false;
  /** @type {ReturnType<typeof setTimeout> | undefined} */
  let later;
  container.addEventListener("controllerchange", () => {
    if (known && taking) location.reload();
    else report();
  });
  container.addEventListener("message", ({ data }) => {
    if (data?.fault && !container.controller) hooks.onState({ fault: data.fault });
  });

  async function begin() {
    try {
      const registration = await container.register("sw.js", { updateViaCache: "none" });
      registration.addEventListener("updatefound", () => follow(registration.installing));
      follow(registration.installing);
      offer(registration.waiting);
      const look = () => document.visibilityState === "visible" && registration.update().catch(() => {}); // no network: later
      document.addEventListener("visibilitychange", look);
      addEventListener("pageshow", look);
    } catch {
      if (!container.controller) hooks.onState({ fault: "install" });
    }
    // To read every file takes time that the first answer needs: it comes before, or after a while without one.
    later = setTimeout(report, known ? LATER_MS : 0);
  }

  /** @param {ServiceWorker | null} worker */
  function follow(worker) {
    worker?.addEventListener("statechange", () => {
      if (worker.state === "installed" && container.controller) offer(worker);
    });
  }

  /** @param {ServiceWorker | null} worker */
  function offer(worker) {
    if (!worker || !container.controller) return;
    hooks.onWaiting(() => {
      taking = true;
      worker.postMessage({ kind: "take" });
    });
  }

  /** @param {string} kind @returns {Promise<State | null>} */
  function ask(kind) {
    const controller = container.controller;
    if (!controller) return Promise.resolve(null);
    return new Promise((resolve) => {
      const channel = new MessageChannel();
      channel.port1.onmessage = ({ data }) => resolve(data);
      controller.postMessage({ kind }, [channel.port2]);
    });
  }

  /** Say what is kept; what an idle phone has thrown out is fetched again without being asked. */
  async function report() {
    clearTimeout(later);
    let state = await ask("state");
    if (state?.bad?.length && navigator.onLine) state = await ask("repair");
    if (state) hooks.onState(state);
  }

  if (document.readyState === "complete") begin();
  else addEventListener("load", begin, { once: true });
  return {
    /** This build has painted an answer. */
    ran() {
      ask("ran").then(report);
    },
    /** Fetch again what is missing. */
    async repair() {
      const state = await ask("repair");
      if (state) hooks.onState(state);
    },
  };
}
