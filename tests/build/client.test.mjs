// The page's side of the worker, with a worker of our own making.
import assert from "node:assert/strict";
import { beforeEach, mock, test } from "node:test";

import { connect } from "../../pwa/worker/client.js";

/** Every worker started, the newest last. */
let workers;

class FakeWorker {
  constructor(url, options) {
    Object.assign(this, { url: String(url), options, heard: [], terminated: false });
    workers.push(this);
  }
  postMessage(message) {
    this.heard.push(message);
  }
  terminate() {
    this.terminated = true;
  }
  say(data) {
    this.onmessage?.({ data });
  }
  /** Questions put to it, as requests. */
  get asked() {
    return this.heard.filter(({ kind }) => kind === "ask").map(({ text }) => JSON.parse(text));
  }
  answer(reply) {
    const { id } = this.heard.findLast(({ kind }) => kind === "ask");
    this.say({ kind: "answer", id, text: JSON.stringify(reply) });
  }
}

const check = (name) => ({ ask: "check", case: { name } });
const newest = () => workers.at(-1);

function open() {
  const seen = { ready: 0, fatal: [] };
  const core = connect(
    { worker: "app/worker.js", runtime: "runtime/1", core: "app/core.zip" },
    { onProgress() {}, onReady: () => (seen.ready += 1), onFatal: (message, again) => seen.fatal.push([message, again]) },
  );
  return { core, seen };
}

beforeEach(() => {
  workers = [];
  globalThis.Worker = FakeWorker;
  Object.defineProperty(globalThis, "navigator", { value: {}, configurable: true });
  globalThis.document = { baseURI: "https://example.org/sub/" };
  mock.timers.reset();
  mock.timers.enable({ apis: ["setTimeout"] });
});

test("the worker is a module and is told where Python lies, under the page's own folder", () => {
  open();
  assert.equal(newest().url, "https://example.org/sub/app/worker.js");
  assert.deepEqual(newest().options, { type: "module" });
  assert.deepEqual(newest().heard, [
    { kind: "start", runtime: "https://example.org/sub/runtime/1/", core: "https://example.org/sub/app/core.zip" },
  ]);
});

test("a question asked before the start is over waits for it", async () => {
  const { core, seen } = open();
  const reply = core.ask(check("early"));
  assert.deepEqual(newest().asked, []);
  newest().say({ kind: "ready" });
  assert.deepEqual(newest().asked, [check("early")]);
  newest().answer({ fine: true });
  assert.deepEqual(await reply, { fine: true });
  assert.equal(seen.ready, 1);
});

test("one check runs and one waits; a newer one takes its place and the overtaken answers are dropped", async () => {
  const { core } = open();
  newest().say({ kind: "ready" });
  const [first, second, third] = [core.ask(check("1")), core.ask(check("2")), core.ask(check("3"))];
  assert.deepEqual(newest().asked, [check("1")]);
  newest().answer({ of: 1 });
  assert.deepEqual(newest().asked, [check("1"), check("3")]);
  newest().answer({ of: 3 });
  assert.deepEqual(await Promise.all([first, second, third]), [null, null, { of: 3 }]);
});

test("questions of other kinds, or about other fields, do not supersede one another", async () => {
  const { core } = open();
  newest().say({ kind: "ready" });
  const shown = (field) => ({ ask: "shown", field, text: "1 m" });
  const requests = [check("1"), { ask: "link", case: {} }, shown("place.altitude"), shown("boat.nozzle_diameter")];
  const replies = requests.map((request) => core.ask(request));
  for (const [at] of requests.entries()) newest().answer({ at });
  assert.deepEqual(await Promise.all(replies), [{ at: 0 }, { at: 1 }, { at: 2 }, { at: 3 }]);
  assert.deepEqual(newest().asked, requests);
});

test("a question that fails leaves the worker as it is", async () => {
  const { core, seen } = open();
  newest().say({ kind: "ready" });
  const reply = core.ask(check("bad"));
  newest().say({ kind: "error", id: newest().heard.at(-1).id, message: "no" });
  await assert.rejects(reply, /no/);
  assert.equal(workers.length, 1);
  assert.deepEqual(seen.fatal, []);
});

test("after a fatal error a new worker is started and asked the same again", async () => {
  const { core, seen } = open();
  newest().say({ kind: "ready" });
  const reply = core.ask(check("same"));
  newest().say({ kind: "fatal", message: "gone" });
  assert.deepEqual(seen.fatal, [["gone", true]]);
  assert.equal(workers.length, 2);
  assert.equal(workers[0].terminated, true);
  newest().say({ kind: "ready" });
  assert.deepEqual(newest().asked, [check("same")]);
  newest().answer({ fine: true });
  assert.deepEqual(await reply, { fine: true });
});

test("a worker that was given up is no longer listened to", async () => {
  const { core } = open();
  const [old] = workers;
  old.say({ kind: "fatal", message: "gone" });
  const reply = core.ask(check("now"));
  old.say({ kind: "ready" });
  assert.deepEqual(newest().asked, []);
  newest().say({ kind: "ready" });
  newest().answer({ by: "new" });
  assert.deepEqual(await reply, { by: "new" });
});

test("a start that never settles is given up in words, and questions fail until it is asked for again", async () => {
  const { core, seen } = open();
  const reply = core.ask(check("never"));
  const rejected = assert.rejects(reply, /the start took too long/);
  for (let starts = 0; starts < 3; starts += 1) mock.timers.tick(300_000);
  await rejected;
  assert.deepEqual(seen.fatal.map(([, again]) => again), [true, true, false]);
  await assert.rejects(core.ask(check("later")), /not running/);
  core.again();
  assert.equal(workers.length, 4);
  newest().say({ kind: "ready" });
  const later = core.ask(check("later"));
  newest().answer({ fine: true });
  assert.deepEqual(await later, { fine: true });
});

test("an answer that never comes is given up and asked again of a new worker", () => {
  const { core, seen } = open();
  newest().say({ kind: "ready" });
  core.ask(check("stuck"));
  mock.timers.tick(20_000);
  assert.deepEqual(seen.fatal, [["the answer took too long", true]]);
  newest().say({ kind: "ready" });
  assert.deepEqual(newest().asked, [check("stuck")]);
});
