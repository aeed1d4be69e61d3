"""Measures what the project promises and prints it beside its targets. Timings want a quiet machine."""

from __future__ import annotations

import argparse
import contextlib
import io
import json
import os
import shutil
import statistics
import subprocess
import sys
import tempfile
import time
import zipfile
from collections.abc import Iterator
from pathlib import Path
from typing import TYPE_CHECKING, Any, NamedTuple

sys.path.insert(0, str(Path(__file__).parent))
import machine
from machine import PWA, ROOT

if TYPE_CHECKING:
    from playwright.sync_api import BrowserContext, Playwright

STOCK = Path(__file__).with_name("bench_stock")
OPTIONS = ["--no-sandbox", "--disable-gpu", "--disable-background-networking", "--disable-component-update"]
CALLS = 200  # answers timed, each with one reading changed
STARTS = 7  # cold offline starts of each app
PHONE = {"width": 390, "height": 844}

# Told to a page before its own scripts run: when the gauge first stands, in ms from navigation.
WATCH_APP = """
new MutationObserver((_, watcher) => {
  const state = document.getElementById("answer")?.dataset.state;
  if (!["go", "caution", "no-go"].includes(state)) return;
  window.answeredAt = performance.now();
  watcher.disconnect();
}).observe(document, { subtree: true, attributes: true, attributeFilter: ["data-state"] });
"""
PAINTED = "performance.getEntriesByName('first-contentful-paint')[0]?.startTime ?? null"
IN_WORKER = """async ({ worker, runtime, core, cases }) => {
  const python = new Worker(worker, { type: "module" });
  const heard = (kind) => new Promise((done, failed) => {
    python.onmessage = ({ data }) => {
      if (data.kind === kind) done(data.text);
      else if (data.kind !== "progress") failed(new Error(data.message));
    };
  });
  const ready = heard("ready");
  python.postMessage({ kind: "start", runtime, core });
  await ready;
  const times = [];
  for (const [id, item] of cases.entries()) {
    const text = JSON.stringify({ ask: "check", case: item, units: null });
    const started = performance.now();
    const answer = heard("answer");
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


def demo_cases(count: int = CALLS) -> list[dict]:
    """The demo with its two notes, the water a little warmer in each, so that nothing can be remembered."""
    demo = json.loads((ROOT / "static" / "demo.json").read_text())["case"]
    step = 20 / count
    return [
        {**demo, "place": {**demo["place"], "water_temperature": f"{50 + step * index:.3f} F"}}
        for index in range(count)
    ]


def native() -> list[Row]:
    """The answer under this Python, and how long the core takes to import."""
    from headwater.answer import answer

    times = []
    for case in demo_cases():
        started = time.perf_counter()
        assert answer(case)["verdict"]
        times.append(time.perf_counter() - started)
    return [
        Row("answer, native, median", 4, 1000 * statistics.median(times), "ms"),
        Row("import headwater.answer", 40, 1000 * statistics.median(import_times()), "ms"),
    ]


def import_times(count: int = 11) -> list[float]:
    """Seconds to import the core in fresh processes, its compiled files in place."""
    code = (
        "import time; started = time.perf_counter(); import headwater.answer; print(time.perf_counter() - started)"
    )
    environment = {key: value for key, value in os.environ.items() if key != "PYTHONDONTWRITEBYTECODE"}
    with tempfile.TemporaryDirectory() as folder:
        environment["PYTHONPYCACHEPREFIX"] = folder
        command = [sys.executable, "-c", code]
        runs = [subprocess.run(command, env=environment, capture_output=True, text=True, check=True)] * 0
        for _ in range(count + 1):
            runs.append(subprocess.run(command, env=environment, capture_output=True, text=True, check=True))
    return [float(run.stdout) for run in runs[1:]]  # the first one compiles


def sizes(dist: Path) -> list[Row]:
    """What a first visit brings, the shell without Python, and the wheel."""
    import bake

    kept = [dist / name for name, _ in json.loads((machine.CACHE / "kept.json").read_text())]
    return []


@contextlib.contextmanager
def served(folder: Path) -> Iterator[tuple[str, subprocess.Popen[str]]]:
    """A folder under a server of its own, dead at the latest when this is left."""
    command = [sys.executable, str(Path(__file__).with_name("server.py")), str(folder)]
    server = subprocess.Popen(command, stdout=subprocess.PIPE, text=True)
    assert server.stdout is not None
    try:
        yield f"http://localhost:{server.stdout.readline().strip()}/", server
    finally:
        server.kill()
        server.wait()
