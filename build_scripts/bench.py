"""Measures what the project promises and prints it beside its targets; timings want a quiet machine."""

from __future__ import annotations

import argparse
import contextlib
import json
import os
import shutil
import statistics
import subprocess
import sys
import tempfile
import time
import zipfile
from collections.abc import Callable, Iterator
from itertools import chain
from pathlib import Path
from typing import TYPE_CHECKING, Any, NamedTuple

sys.path.insert(0, str(Path(__file__).parent))
import machine
from machine import PWA, ROOT

if TYPE_CHECKING:
    from playwright.sync_api import BrowserContext

STOCK = Path(__file__).with_name("bench_stock")
CALLS = 200  # answers timed, each with one reading changed
LAUNCH_CALLS = 60
STEADY, LAUNCH, WHOLE = 0, 1, 2  # how deep an answer goes
IMPORTS = 11  # fresh processes that import the core
OPTIONS = ["--no-sandbox", "--disable-gpu", "--disable-background-networking", "--disable-component-update"]

# Told to a page before its own scripts run: when an answer first stands in the gauge, in ms from navigation.
WATCH_APP = """
new MutationObserver((_, watcher) => {
  if (!["go", "caution", "no-go"].includes(document.getElementById("answer")?.dataset.state)) return;
  window.answeredAt = performance.now();
  watcher.disconnect();
}).observe(document, { subtree: true, attributes: true, attributeFilter: ["data-state"] });
"""
READY = """async () => {
  const worker = (await navigator.serviceWorker.ready).active;
  if (!navigator.serviceWorker.controller || !window.answeredAt) return false;
  return worker.state === "activated";
}"""
TIMES = """() => window.answeredAt && [
  window.answeredAt, performance.getEntriesByName("first-contentful-paint")[0].startTime
]"""
ASK_WORKER = """async ({ worker, runtime, core, cases, depth }) => {
  const python = new Worker(worker, { type: "module" });
  const heard = (kind) => new Promise((done, failed) => {
    python.onmessage = ({ data }) => {
      if (data.kind === kind) done();
      else if (data.kind !== "progress") failed(new Error(data.message));
    };
  });
  const ready = heard("ready");
  python.postMessage({ kind: "start", runtime, core });
  await ready;
  const times = [];
  for (const [id, item] of cases.entries()) {
    const text = JSON.stringify({ ask: "check", case: item, units: null, depth });
    const answer = heard("answer");
    const started = performance.now();
    python.postMessage({ kind: "ask", id, text });
    await answer;
    times.push(performance.now() - started);
  }
  python.terminate();
  return times;
}"""


class Row(NamedTuple):
    """One figure of the table."""

    name: str
    target: float
    measured: float
    unit: str


def warmer(case: dict, count: int) -> list[dict]:
    """A case with the water a little warmer each time, so that nothing can be remembered."""
    readings = [f"{50 + 20 * index / count:.3f} F" for index in range(count)]
    return [{**case, "place": {**case["place"], "water_temperature": reading}} for reading in readings]


def steady_cases() -> list[dict]:
    """The demo standing, with its two notes of the pump."""
    demo = json.loads((ROOT / "static" / "demo.json").read_text())["case"]
    return warmer({**demo, "plan": {"rpm": demo["plan"]["rpm"]}, "notes": demo["notes"][:2]}, CALLS)


def launch_cases() -> list[dict]:
    """The demo loaded and up high, in a current, its rpm and feed-in to be advised, both ways answered."""
    demo = json.loads((ROOT / "static" / "demo.json").read_text())["case"]
    plan = {key: value for key, value in demo["plan"].items() if key != "rpm"}
    place = {**demo["place"], "altitude": "2500 m", "current": "2 mph"}
    return warmer({**demo, "plan": plan, "place": place}, LAUNCH_CALLS)


def native() -> Iterator[Row]:
    """The answer under this Python, and how long the core takes to import."""
    from headwater.answer import answer, reply

    def timed(question: Callable[[dict], object], cases: list[dict]) -> list[float]:
        times = []
        for case in cases:
            started = time.perf_counter()
            question(case)
            times.append(1000 * (time.perf_counter() - started))
        return times

    def launched(case: dict) -> str:
        return reply(json.dumps({"ask": "check", "case": case, "depth": LAUNCH}))

    yield Row("answer, native, median", 4, statistics.median(timed(answer, steady_cases())), "ms")
    yield Row("launch, native, median", 35, statistics.median(timed(launched, launch_cases())), "ms")
    yield Row("import of the core, median", 40, 1000 * statistics.median(import_times()), "ms")


def import_times() -> list[float]:
    """Seconds to import the whole core in fresh processes, with its compiled files in place."""
    code = "import time; t = time.perf_counter(); import headwater.answer; print(time.perf_counter() - t)"
    environment = {key: value for key, value in os.environ.items() if key != "PYTHONDONTWRITEBYTECODE"}
    with tempfile.TemporaryDirectory() as folder:
        environment["PYTHONPYCACHEPREFIX"] = folder

        def once() -> float:
            command = [sys.executable, "-c", code]
            done = subprocess.run(command, env=environment, capture_output=True, text=True, check=True)
            return float(done.stdout)

        once()  # compiles
        return [once() for _ in range(IMPORTS)]


def sizes(dist: Path) -> Iterator[Row]:
    """What a first visit brings, the shell without Python, and the wheel."""
    import bake
    import pack

    weights = pack.weights(dist)
    yield Row("first visit, brotli", 4200, weights["first visit"] / 1000, "kB")
    yield Row("shell without Python, brotli", 90, weights["shell"] / 1000, "kB")
    with tempfile.TemporaryDirectory() as folder:
        yield Row("wheel", 110, bake.wheel(Path(folder)).stat().st_size / 1000, "kB")


def stock_site(dist: Path, out: Path) -> None:
    """The plainest app around the same core: stock Pyodide, the core unpacked from a zip of .py files."""
    shutil.copytree(STOCK, out)
    shutil.copytree(PWA / "node_modules" / "pyodide", out / "runtime")
    shutil.copy(ROOT / "static" / "demo.json", out)
    shutil.copy(dist / "policy.txt", out)
    with zipfile.ZipFile(out / "core.zip", "w", zipfile.ZIP_DEFLATED) as archive:
        for file in sorted((ROOT / "py" / "headwater").rglob("*.py")):
            archive.write(file, file.relative_to(ROOT / "py"))


@contextlib.contextmanager
def served(folder: Path) -> Iterator[str]:
    """A folder under a server process of its own, which is dead when this is left."""
    command = [sys.executable, str(Path(__file__).with_name("server.py")), str(folder)]
    server = subprocess.Popen(command, stdout=subprocess.PIPE, text=True)
    assert server.stdout is not None
    try:
        yield f"http://localhost:{server.stdout.readline().strip()}/"
    finally:
        server.kill()
        server.wait()


class Chromium:
    """A fresh browser process on a kept profile, each time it is opened."""

    def __init__(self, playwright: Any, profile: Path) -> None:
        self._launch, self._profile = playwright.chromium.launch_persistent_context, profile
        self._path = machine.browsers()["chromium"]

    @contextlib.contextmanager
    def open(self) -> Iterator[BrowserContext]:
        phone = {"width": 390, "height": 844}
        context = self._launch(self._profile, executable_path=self._path, args=OPTIONS, viewport=phone)
        context.add_init_script(WATCH_APP)
        try:
            yield context
        finally:
            context.close()

    def keep(self, url: str) -> None:
        """First visit, until an answer stands and everything is kept."""
        with self.open() as context:
            page = context.pages[0]
            page.goto(url)
            while not page.evaluate(READY):
                page.wait_for_timeout(100)
            page.wait_for_timeout(1000)  # what is typed is written down shortly after

    def start(self, url: str) -> tuple[float, float]:
        """One start: ms from navigation to the answer, and to the first paint."""
        with self.open() as context:
            page = context.pages[0]
            page.goto(url)
            while not (times := page.evaluate(TIMES)):
                page.wait_for_timeout(20)
            return times


def in_browser(dist: Path, starts: int) -> Iterator[Row]:
    """The answer in the worker, and cold offline starts of the app and of a stock one, by turns."""
    from playwright.sync_api import sync_playwright

    with tempfile.TemporaryDirectory() as folder, sync_playwright() as playwright:
        work = Path(folder)
        stock_site(dist, work / "stock")
        app, stock = (Chromium(playwright, work / f"profile-{name}") for name in ("app", "stock"))
        with served(dist) as app_url:
            steady = in_worker(app, app_url, dist, steady_cases(), WHOLE)
            yield Row("check in the worker, median", 10, statistics.median(steady), "ms")
            first = in_worker(app, app_url, dist, launch_cases(), STEADY)
            yield Row("launch in the worker, steady part", 15, statistics.median(first), "ms")
            launched = in_worker(app, app_url, dist, launch_cases(), LAUNCH)
            yield Row("launch in the worker, median", 80, statistics.median(launched), "ms")
            yield Row("launch in the worker, p95", 150, statistics.quantiles(launched, n=20)[-1], "ms")
            whole = in_worker(app, app_url, dist, launch_cases(), WHOLE)
            yield Row("remedies in the worker, p95", 500, statistics.quantiles(whole, n=20)[-1], "ms")
            app.keep(f"{app_url}#demo")
        with served(work / "stock") as stock_url:
            stock.keep(stock_url)
        app_times, stock_times = [], []  # both servers are dead by now
        for _ in range(starts):
            app_times.append(app.start(app_url))
            stock_times.append(stock.start(stock_url))
    answered, painted = (statistics.median(column) for column in zip(*app_times, strict=True))
    whole = statistics.median(row[0] for row in stock_times)
    print(f"  (offline start: app {answered:.0f} ms, painted {painted:.0f} ms; stock {whole:.0f} ms)")
    yield Row("offline start / stock start", 0.5, answered / whole, "")
    yield Row("page painted / stock start", 0.15, painted / whole, "")


def in_worker(browser: Chromium, url: str, dist: Path, cases: list[dict], depth: int) -> list[float]:
    """Ms from a question to the app's own worker until its reply: answer, sentences, JSON, messages."""
    (worker,), (core,), (runtime,) = (
        dist.glob(p) for p in ("app/worker-*.js", "app/core-*.zip", "runtime/*")
    )
    with browser.open() as context:
        page = context.pages[0]
        page.goto(f"{url}licences/index.txt")  # a page of the same origin that starts nothing by itself
        places = {
            "worker": f"{url}app/{worker.name}",
            "core": f"{url}app/{core.name}",
            "runtime": f"{url}runtime/{runtime.name}/",
        }
        return page.evaluate(ASK_WORKER, {**places, "cases": cases, "depth": depth})


def wrong_gos(cases: int, launches: int) -> Iterator[Row]:
    """A go that would fail too often, hunted in far more random cases than the tests try."""
    sys.path.insert(0, str(ROOT / "tests" / "reference"))
    from wrong_go import hunt, hunt_launches

    for name, hunted, count in (("standing", hunt, cases), ("launch", hunt_launches, launches)):
        found = hunted(count, seed=2, climbs=100)
        print(f"  ({found.tried} cases {name}, {found.go} go; the worst fails in {found.worst:.1%} of draws)")
        yield Row(f"wrong gos, {name}", 0, len(found.wrong), "")


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--cases", type=int, default=5000, help="random cases in the hunt for wrong gos")
    parser.add_argument("--launches", type=int, default=500, help="random launches in it")
    parser.add_argument("--starts", type=int, default=9, help="cold offline starts of each app")
    options = parser.parse_args()
    machine.prepare("build,dev")
    machine.in_venv(__file__)
    import build

    dist = build.build()
    print(f"\n{'':<36}{'target':>10}{'measured':>12}")
    parts = (
        native(),
        sizes(dist),
        in_browser(dist, options.starts),
        wrong_gos(options.cases, options.launches),
    )
    for name, target, measured, unit in chain.from_iterable(parts):
        verdict = "" if measured <= target else "  over"
        print(f"{name:<36}{target:>10g}{measured:>12.3g} {unit}{verdict}".rstrip(), flush=True)


if __name__ == "__main__":
    main()
