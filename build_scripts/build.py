"""Builds dist/, plain static files for any host; serve.py and test.py call it."""

import hashlib
import json
import shutil
import subprocess
import sys
import tempfile
import time
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
import machine

if __name__ == "__main__":  # before what only the venv has is imported
    machine.prepare("build")
    machine.in_venv(__file__)

import bake
import bundle
import icons
import pack
import page
from machine import CACHE, PWA, ROOT

DIST = ROOT / "dist"


def build(out: Path = DIST) -> Path:
    """Build the app into a folder; what was there stays until the new one stands. Returns the folder."""
    started = time.monotonic()
    CACHE.mkdir(exist_ok=True)
    with tempfile.TemporaryDirectory(dir=CACHE) as work:
        made = _make(Path(work))
        shutil.rmtree(out, ignore_errors=True)
        shutil.move(made, out)
    machine.say(f"built {out.name}/ in {time.monotonic() - started:.1f} s")
    return out


def _make(work: Path) -> Path:
    """Each step in its order; the service worker's list and the compressed twins come last."""
    out = work / "dist"
    out.mkdir()
    demo = json.loads((ROOT / "static" / "demo.json").read_text())
    runtime = bake.copy_runtime(PWA / "node_modules" / "pyodide", out)
    core = named_by_content(bake.bake(work, demo["case"]), out / "app")
    icons.draw(ROOT / "static" / "icon.svg", out / "icons")
    links = {
        "style": named_by_content(bundle.style(PWA / "css" / "main.css", work), out / "app"),
        "main": named_by_content(bundle.script(PWA / "app" / "main.js", work), out / "app"),
        "worker": named_by_content(bundle.script(PWA / "worker" / "worker.js", work), out / "app"),
        "core": core,
        "runtime": runtime,
    }
    policy = page.render(out, {key: path.relative_to(out).as_posix() for key, path in links.items()}, demo)
    for name in ("licences", "screenshots"):
        shutil.copytree(ROOT / "static" / name, out / name)
    bundle.service_worker(PWA / "sw" / "sw.js", out, pack.precache(out))
    (out / "policy.txt").write_text(policy + "\n")
    pack.compress(out)
    return out


def named_by_content(file: Path, folder: Path) -> Path:
    """Move a file into a folder under a name that carries its content's hash."""
    folder.mkdir(exist_ok=True)
    digest = hashlib.sha256(file.read_bytes()).hexdigest()[:10]
    return Path(shutil.move(file, folder / f"{file.stem}-{digest}{file.suffix}"))


if __name__ == "__main__":
    try:
        build()
    except subprocess.CalledProcessError as error:
        sys.exit(f"build failed: {' '.join(map(str, error.cmd))}")
