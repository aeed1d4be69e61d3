"""Sets a fresh machine up: prerequisites, venv, npm packages, browsers. Standard library only."""

from __future__ import annotations  # so that an older Python gets as far as being told

import hashlib
import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
CACHE = ROOT / ".cache"
VENV = ROOT / ".venv"
PWA = ROOT / "pwa"
PYTHON = VENV / ("Scripts/python.exe" if os.name == "nt" else "bin/python")
_DEBIAN = {
    "chromium": ["chromium"],
    "firefox": ["firefox-esr"],
    "webkit": ["webkit2gtk-driver", "xvfb", "xauth"],
}


def say(text: str) -> None:
    """One line about what is going on."""
    print(f"== {text}", flush=True)


def check_prerequisites() -> None:
    """Stop with a clear message where Python, Node or npm is missing or too old."""
    missing = []
    if sys.version_info < (3, 11):  # noqa: UP036, whoever starts this may have an older one
        missing.append(f"Python 3.11 or newer (this is {sys.version.split()[0]})")
    node = shutil.which("node")
    if node is None:
        missing.append("Node 20 or newer (no node found)")
    else:
        version = subprocess.run([node, "--version"], capture_output=True, text=True).stdout.strip()
        if not version.startswith("v") or int(version[1:].split(".")[0]) < 20:
            missing.append(f"Node 20 or newer (this is {version or 'unknown'})")
    if shutil.which("npm") is None:
        missing.append("npm (no npm found)")
    if missing:
        sys.exit("Headwater needs:\n" + "\n".join(f"  - {line}" for line in missing))


def _stamped(name: str, *files: Path) -> tuple[Path, str, bool]:
    """Where the stamp of a step lies, what it should say, and whether it does."""
    digest = hashlib.sha256(sys.version.encode())
    for file in files:
        digest.update(file.read_bytes())
    stamp, wanted = CACHE / f"{name}.stamp", digest.hexdigest()
    return stamp, wanted, stamp.exists() and stamp.read_text() == wanted


def prepare(extras: str) -> None:
    """Python and npm packages as pinned; quick where they stand already.

    :param extras: extras of pyproject.toml, comma separated
    """
    check_prerequisites()
    CACHE.mkdir(exist_ok=True)
    pins = Path(__file__).with_name("constraints.txt")
    stamp, wanted, done = _stamped(f"python-{extras.replace(',', '-')}", ROOT / "pyproject.toml", pins)
    if not (done and PYTHON.exists()):
        say("Python packages into .venv")
        if not PYTHON.exists():
            subprocess.run([sys.executable, "-m", "venv", str(VENV)], check=True)
        pip = [str(PYTHON), "-m", "pip", "install", "--quiet", "--disable-pip-version-check"]
        subprocess.run([*pip, "-c", str(pins), "-e", f"{ROOT}[{extras}]"], check=True)
        stamp.write_text(wanted)
    stamp, wanted, done = _stamped("npm", PWA / "package-lock.json", PWA / "package.json")
    if not (done and (PWA / "node_modules" / ".package-lock.json").exists()):
        say("npm packages into pwa/node_modules")
        subprocess.run([shutil.which("npm") or "npm", "ci", "--no-fund", "--no-audit"], cwd=PWA, check=True)
        stamp.write_text(wanted)


def in_venv(script: str) -> None:
    """Start a script again under the venv's Python, unless that is what runs it."""
    if Path(sys.prefix).resolve() != VENV.resolve():
        code = subprocess.run([str(PYTHON), script, *sys.argv[1:]]).returncode
        sys.exit(code)


def browsers() -> dict[str, str]:
    """Where the three engines are, brought here if need be; says which were taken.

    Chromium: what Playwright installs, else the system's, else Debian's package. Firefox and WebKit: the
    system's, else Debian's packages, for Playwright's own builds of the two are not what people run.
    """
    kept = CACHE / "browsers.json"
    if kept.exists():
        found = json.loads(kept.read_text())
        if all(Path(path).exists() for path in found.values()):
            return dict(found)
    found = {"chromium": _playwright_chromium() or _system("chromium")}
    found["firefox"], found["webkit"] = _system("firefox"), _system("webkit")
    wanted = [name for name, path in found.items() if path is None]
    if wanted:
        _debian([package for name in wanted for package in _DEBIAN[name]])
        for name in wanted:
            found[name] = _system(name)
    lost = [name for name, path in found.items() if path is None]
    if lost:
        sys.exit(f"No {', '.join(lost)} to be had: install {' '.join(p for n in lost for p in _DEBIAN[n])}.")
    for name, path in found.items():
        say(f"{name}: {path}")
    kept.write_text(json.dumps(found))
    return {name: str(path) for name, path in found.items()}


def _playwright_chromium() -> str | None:
    try:
        done = subprocess.run(
            [str(PYTHON), "-m", "playwright", "install", "chromium"],
            capture_output=True,
            text=True,
            timeout=300,
        )
    except subprocess.TimeoutExpired:
        return None
    if done.returncode:
        say("Playwright cannot fetch its Chromium here; looking for the system's")
        return None
    code = (
        "from playwright.sync_api import sync_playwright\n"
        "with sync_playwright() as playwright: print(playwright.chromium.executable_path)"
    )
    path = subprocess.run([str(PYTHON), "-c", code], capture_output=True, text=True).stdout.strip()
    return path if path and Path(path).exists() else None


def _system(name: str) -> str | None:
    if name == "webkit":
        ready = shutil.which("WebKitWebDriver") and shutil.which("Xvfb")
        browsers = sorted(Path("/usr/lib").glob("*/webkit2gtk-4.1/MiniBrowser")) if ready else []
        return str(browsers[0]) if browsers else None
    names = {
        "chromium": ("chromium", "chromium-browser", "google-chrome"),
        "firefox": ("firefox-esr", "firefox"),
    }[name]
    return next((path for path in map(shutil.which, names) if path), None)


def _debian(packages: list[str]) -> None:
    apt = shutil.which("apt-get")
    if apt is None:
        return
    say(f"Debian packages: {' '.join(packages)}")
    root = [] if os.geteuid() == 0 else ["sudo"]
    quiet = {**os.environ, "DEBIAN_FRONTEND": "noninteractive"}
    wait = ["-o", "DPkg::Lock::Timeout=300"]
    subprocess.run([*root, apt, "update", "-qq", *wait], env=quiet)
    subprocess.run(
        [*root, apt, "install", "-y", "-qq", "--no-install-recommends", *wait, *packages], env=quiet
    )
