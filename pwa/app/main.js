// Ties the page together: what is typed is kept and asked, what is answered is painted.

import { register } from "../sw/register.js";
import { connect } from "../worker/client.js";
import { at, data, screen } from "./data.js";
import { bindForm } from "./form.js";
import { caseOf, empty, isEmpty, modelOf } from "./model.js";
import { paintLast, paintSheet } from "./paint.js";
import { bindSlip } from "./slip.js";
import { keep, keepsNothing, recall } from "./store.js";

/** @typedef {"own" | "demo" | "sent"} Mode */
/** @type {any} */ (window).headwaterStarted = true;

let own = empty();
let demo = modelOf(data.demo);
let sent = empty();
/** @type {Mode} */
let mode = "own";
let answered = false;
let turns = 0; // of questions: an answer goes deeper only while no newer one was asked
/** @type {ReturnType<typeof setTimeout> | undefined} */
let saving;

const model = () => ({ own, demo, sent })[mode];
// First of all: Python takes longest to start.
const core = connect(data.links, {
  onProgress() {},
  onReady: () => at("fault").toggleAttribute("hidden", true),
  onFatal: (message, again) => fault(again ? screen.fatal : `${screen.fatal_end} (${message})`, !again),
});
const form = bindForm({ model, changed, convert });
const slip = bindSlip({ model, ask: (request) => core.ask(request), save: () => mode !== "sent" && keep(mode, model()) });
const offline = register({ onState: paintOffline, onWaiting: offerUpdate });

/** The core turns a typed figure into another unit. @param {string} field @param {string} text @param {string} unit */
async function convert(field, text, unit) {
  const reply = await core.ask({ ask: "shown", field, text, unit }).catch(() => null);
  return reply?.error ? null : (reply?.other ?? null);
}

function changed() {
  clearTimeout(saving);
  saving = setTimeout(save, 200);
  check();
}

async function save() {
  clearTimeout(saving);
  if (mode !== "sent") await keep(mode, model());
  if (keepsNothing()) fault(screen.not_saved, false);
}

async function check() {
  const asked = mode;
  const blank = isEmpty(model());
  at("welcome").hidden = !blank;
  if (blank) {
    at("answer").dataset.state = "none";
    at("headline").textContent = screen.welcome;
    at("wrong").replaceChildren();
    at("lead").textContent = "";
    at("lines").replaceChildren();
    at("gauge").toggleAttribute("hidden", true);
    at("below").hidden = true;
    form.showErrors([]);
    return;
  }
  const question = { ask: "check", case: caseOf(model()), units: model().units };
  const turn = (turns += 1);
  at("answer").dataset.settled = "false";
  let reply;
  for (const depth of answered ? [0, 1, 2] : [1, 2]) { // the first answer of all comes whole at once
    reply = await core.ask({ ...question, depth }).catch(() => null);
    if (!reply || asked !== mode || turn !== turns) return;
    paintSheet(reply.sheet, goTo);
    form.showErrors(reply.sheet.errors);
    form.showOthers(reply.sheet.others);
    paintLast(undefined);
    if (!answered) offline.ran();
    answered = true;
    if (!reply.sheet.waits && !(reply.sheet.launch && !reply.sheet.launch.done)) break;
  }
  at("answer").dataset.settled = "true";
  if (mode === "sent") at("sent-state").textContent = screen.sent_checked;
  if (mode === "own" && reply.sheet.state) {
    const place = own.readings["place.label"]?.text ?? "";
    const { headline, lead } = reply.sheet;
    keep("last", { when: new Date().toISOString(), headline, lead, place });
  }
}

/** Show the place of a reading and go to it. @param {string} field */
function goTo(field) {
  const box = form.boxOf(field) ?? (field.startsWith("notes") ? at("notes") : null);
  show(field.startsWith("boat") || field.startsWith("notes") ? "boat" : "putin");
  const more = box?.closest("details.more");
  if (more) /** @type {HTMLDetailsElement} */ (more).open = true;
  box?.querySelector("[data-input]")?.focus();
}

/** @param {"putin" | "boat"} place */
function show(place) {
  for (const name of ["putin", "boat"]) {
    at(name).hidden = name !== place;
    if (name === place) at(`to-${name}`).setAttribute("aria-current", "page");
    else at(`to-${name}`).removeAttribute("aria-current");
  }
}

/** @param {"putin" | "boat"} place */
function visit(place) {
  show(place);
  history.pushState({ place }, "");
  scrollTo(0, 0);
}

/** @param {Mode} next */
function enter(next) {
  mode = next;
  at("demo").hidden = mode !== "demo";
  at("demo-foot").hidden = mode === "demo";
  at("sent").hidden = mode !== "sent";
  form.fill();
  slip.fill();
  form.lock(mode === "sent");
  if (mode !== "sent") keep("mode", mode);
  paintLast(undefined);
  check();
}

function openDemo() {
  demo = modelOf(data.demo);
  keep("demo", demo);
  enter("demo");
  show("putin");
}

function backToOwn() {
  if (location.hash) history.replaceState(history.state, "", location.pathname + location.search);
  enter("own");
}

/** What a link says is read-only until it is made mine. @param {string} fragment */
async function openLink(fragment) {
  at("sent").hidden = false;
  at("sent-state").textContent = screen.sent;
  const reply = await core.ask({ ask: "open", fragment }).catch(() => null);
  if (!reply) return;
  if (reply.error) {
    at("sent").hidden = true;
    fault(reply.error.text, false);
    backToOwn();
    return;
  }
  sent = modelOf(reply.case);
  const place = reply.case.place?.label;
  at("sent-what").textContent = [reply.case.boat?.label, place].filter(Boolean).join(" · ");
  enter("sent");
}

async function share() {
  const reply = await core.ask({ ask: "link", case: caseOf(model()) }).catch(() => null);
  const state = at("share-state");
  if (!reply || reply.error) {
    state.textContent = reply?.error?.text ?? screen.share_failed;
    return;
  }
  const url = `${location.origin}${location.pathname}#${reply.fragment}`;
  const words = `${screen.shared_text} ${at("headline").textContent} ${at("lead").textContent}`;
  try {
    const sheet = "share" in navigator; // the phone's own
    if (sheet) await navigator.share({ title: screen.title, text: words, url });
    else await navigator.clipboard.writeText(`${words} ${url}`);
    state.textContent = sheet ? "" : screen.shared;
  } catch (error) {
    if (error instanceof Error && error.name === "AbortError") return;
    history.replaceState(history.state, "", `#${reply.fragment}`);
    state.textContent = screen.share_failed;
  }
}

/** @param {string} text @param {boolean} again */
function fault(text, again) {
  const box = at("fault");
  box.firstElementChild.textContent = text;
  box.querySelector("button").hidden = !again;
  box.hidden = false;
}

/** @param {import("../sw/register.js").State} state */
function paintOffline(state) {
  const version = `${screen.version} ${data.version}`;
  const faults = { none: screen.offline_none, quota: screen.offline_quota, install: screen.offline_install };
  const broken = state.fault ? faults[state.fault] : screen.offline_broken;
  const words = state.ready ? `${screen.offline_ready} · ${version}` : broken;
  at("offline").textContent = words;
  at("offline").dataset.ready = String(Boolean(state.ready));
  at("repair").hidden = Boolean(state.ready) || state.fault === "none" || !navigator.onLine;
}

/** @param {() => void} take */
function offerUpdate(take) {
  at("update").hidden = false;
  at("update-take").onclick = async () => {
    await save();
    take();
  };
  at("update-later").onclick = () => {
    at("update").hidden = true;
  };
}

/** @param {string | undefined} theme "day", "night" or automatic */
function setTheme(theme) {
  document.documentElement.dataset.theme = theme ?? "auto";
  const dark = theme ? theme === "night" : matchMedia("(prefers-color-scheme: dark)").matches;
  at("theme").textContent = dark ? screen.day : screen.night;
}

function bindButtons() {
  at("to-putin").addEventListener("click", () => visit("putin"));
  at("to-boat").addEventListener("click", () => visit("boat"));
  at("welcome-boat").addEventListener("click", () => visit("boat"));
  for (const id of ["demo-open", "demo-foot"]) at(id).addEventListener("click", openDemo);
  at("demo-close").addEventListener("click", backToOwn);
  at("sent-close").addEventListener("click", backToOwn);
  at("sent-mine").addEventListener("click", () => {
    if (!isEmpty(own) && !confirm(screen.make_mine_warns)) return;
    own = sent;
    keep("own", own);
    backToOwn();
  });
  at("share").addEventListener("click", share);
  at("repair").addEventListener("click", () => offline.repair());
  at("fault").querySelector("button").addEventListener("click", () => {
    core.again();
    check();
  });
  at("theme").addEventListener("click", () => {
    const night = at("theme").textContent === screen.night;
    setTheme(night ? "night" : "day");
    keep("theme", night ? "night" : "day");
  });
  for (const button of document.querySelectorAll("[data-system]")) {
    button.addEventListener("click", async () => {
      const system = data.systems[/** @type {HTMLElement} */ (button).dataset.system ?? "us"];
      for (const select of document.querySelectorAll("select[data-unit]")) {
        const unit = /** @type {HTMLSelectElement} */ (select);
        const kind = data.fields[unit.dataset.unit ?? ""]?.kind;
        if (!kind || unit.value === system[kind]) continue;
        unit.value = system[kind];
        unit.dispatchEvent(new Event("change", { bubbles: true }));
      }
      model().units = { ...system };
    });
  }
  addEventListener("popstate", () => show(history.state?.place ?? "putin"));
  addEventListener("hashchange", route);
  addEventListener("pagehide", save);
  document.addEventListener("visibilitychange", () => document.visibilityState === "hidden" && save());
}

/** What the address asks for: the demo, or a link that was sent. */
function route() {
  const fragment = location.hash.slice(1);
  if (fragment === "demo") openDemo();
  else if (/^[0-9]/.test(fragment)) openLink(fragment);
}

async function start() {
  bindButtons();
  setTheme(await recall("theme"));
  own = (await recall("own")) ?? own;
  demo = (await recall("demo")) ?? demo;
  const [kept, last] = [await recall("mode"), await recall("last")];
  enter(kept === "demo" ? "demo" : "own");
  if (mode === "own" && !isEmpty(own)) paintLast(last);
  if (keepsNothing()) fault(screen.not_saved, false);
  route();
}

start();
