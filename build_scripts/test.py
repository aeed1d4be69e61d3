"""Sets the machine up, builds, lints and runs every test; further arguments go to pytest."""

from __future__ import annotations  # so that an older Python gets as far as being told

import subprocess
import sys
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
import machine
from machine import PWA, PYTHON, ROOT

_TOOL = (str(PYTHON), "-m")
_NODE_TOOL = PWA / "node_modules" / ".bin"
LINTS: dict[str, tuple[Path, tuple[str, ...]]] = {
    "ruff check": (ROOT, (*_TOOL, "ruff", "check", ".")),
    "ruff format": (ROOT, (*_TOOL, "ruff", "format", "--check", ".")),
    "mypy": (ROOT, (*_TOOL, "mypy")),
    "tsc, page": (PWA, (str(_NODE_TOOL / "tsc"), "-p", "tsconfig.json")),
    "tsc, workers": (PWA, (str(_NODE_TOOL / "tsc"), "-p", "tsconfig.worker.json")),
    "html-validate": (
        PWA,
        (str(_NODE_TOOL / "html-validate"), "-c", ".htmlvalidate.json", "../dist/index.html"),
    ),
    "stylelint": (PWA, (str(_NODE_TOOL / "stylelint"), "css/**/*.css")),
}
_NO_TESTS = 5  # pytest's exit code where nothing was collected


@contextmanager
def step(name: str) -> Iterator[None]:
    """Says what runs and how long it took."""
    machine.say(f"{name} …")
    started = time.monotonic()
    try:
        yield
    finally:
        machine.say(f"{name}: {time.monotonic() - started:.1f} s")


def lint() -> list[str]:
    """Every lint, also after one has failed; returns those that did."""
    failed = []
    for name, (folder, command) in LINTS.items():
        with step(name):
            if subprocess.run(command, cwd=folder).returncode:
                failed.append(name)
    return failed


def main() -> None:
    with step("set up"):
        machine.prepare("build,dev")
    machine.in_venv(__file__)
    import build

    with step("browsers"):
        machine.browsers()
    with step("build"):
        build.build()
    failed = lint()
    with step("pytest"):
        code = subprocess.run((*_TOOL, "pytest", *sys.argv[1:]), cwd=ROOT).returncode
    if code:
        failed.append("pytest: no test ran" if code == _NO_TESTS else "pytest")
    if failed:
        sys.exit(f"failed: {', '.join(failed)}")


if __name__ == "__main__":
    main()
