"""The phone's Python: the runtime as npm ships it, and the core with its standard library, baked."""

import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

from machine import CACHE, ROOT

RUNTIME_FILES = ("pyodide.mjs", "pyodide.asm.mjs", "pyodide.asm.wasm")
TOOLS = ("micropip==0.11.1", "packaging==26.3")  # pure wheels, used at build and in tests alone


def copy_runtime(package: Path, out: Path) -> Path:
    """The runtime under a folder named by its version, byte for byte; returns that folder."""
    version = json.loads((package / "package.json").read_text())["version"]
    folder = out / "runtime" / version
    folder.mkdir(parents=True)
    for name in RUNTIME_FILES:
        shutil.copy(package / name, folder / name)
    return folder


def wheel(folder: Path) -> Path:
    """The core's wheel, the same bytes each time."""
    environment = {**os.environ, "SOURCE_DATE_EPOCH": "315532800"}
    pip = [sys.executable, "-m", "pip", "wheel", "--quiet", "--no-deps", "--no-build-isolation"]
    subprocess.run([*pip, "--wheel-dir", str(folder), str(ROOT)], check=True, env=environment)
    return next(folder.glob("headwater-*.whl"))


def tools(names: tuple[str, ...] = TOOLS) -> list[Path]:
    """Local pure wheels for Pyodide, fetched once."""
    found = []
    for name in names:
        folder = CACHE / "wheels" / name.replace("==", "-")
        if not folder.is_dir() or not list(folder.glob("*.whl")):
            pip = [
                sys.executable,
                "-m",
                "pip",
                "download",
                "--quiet",
                "--no-deps",
                "--only-binary",
                ":all:",
                "--python-version",
                "3.14",
            ]
            subprocess.run([*pip, "--dest", str(folder), name], check=True)
        found.append(next(folder.glob("*.whl")))
    return found


def requests(case: dict) -> list[dict]:
    """One of each thing the phone asks, so that all it imports is seen."""
    from headwater.share import encode

    return [
        {"ask": "check", "case": case, "units": None},
        {"ask": "check", "case": {}, "units": "us"},
        {"ask": "link", "case": case},
        {"ask": "link", "case": 1},
        {"ask": "open", "fragment": encode(case)},
        {"ask": "open", "fragment": "1.cut"},
        {"ask": "shown", "field": "place.altitude", "text": "1,200 ft"},
        {"ask": "nothing"},
    ]


def bake(work: Path, case: dict) -> Path:
    """The one zip that Pyodide starts from."""
    out = work / "core.zip"
    package = ROOT / "pwa" / "node_modules" / "pyodide"
    script = Path(__file__).with_name("bake.mjs")
    parts = [str(path) for path in (script, package, out, wheel(work), *tools())]
    subprocess.run(["node", *parts], check=True, input=json.dumps(requests(case)), text=True)
    return out
