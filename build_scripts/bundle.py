"""Scripts and style, bundled by esbuild."""

import json
import subprocess
from pathlib import Path

from machine import PWA

_ESBUILD = PWA / "node_modules" / ".bin" / "esbuild"
_SAFARI = "safari16.4"  # the oldest Safari with module workers and what Pyodide needs


def _run(*options: str) -> None:
    command = [str(_ESBUILD), "--bundle", "--minify", "--log-level=warning", "--charset=utf8", *options]
    subprocess.run(command, check=True, cwd=PWA)


def script(entry: Path, work: Path) -> Path:
    """One ES module with all it imports."""
    out = work / entry.name
    _run(str(entry), "--format=esm", f"--target=es2022,{_SAFARI}", f"--outfile={out}")
    return out


def style(entry: Path, work: Path) -> Path:
    """One style sheet with all it imports."""
    out = work / "style.css"
    _run(str(entry), f"--target={_SAFARI}", f"--outfile={out}")
    return out


def service_worker(entry: Path, out: Path, lists: dict) -> None:
    """The service worker with the list of what it keeps; its name never changes."""
    defines = [f"--define:{name}={json.dumps(value)}" for name, value in lists.items()]
    _run(str(entry), "--format=iife", f"--target=es2022,{_SAFARI}", f"--outfile={out / 'sw.js'}", *defines)
