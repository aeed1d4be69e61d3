"""The core behaves in the phone's Python as on the desk."""

import re
import subprocess
from importlib.metadata import version
from pathlib import Path

import bake

ROOT = Path(__file__).resolve().parents[2]
PYTEST = tuple(f"{name}=={version(name)}" for name in ("pytest", "pluggy", "iniconfig", "pygments"))


def test_core_tests_pass_inside_pyodide(tmp_path: Path) -> None:
    script = Path(__file__).with_name("pytest_in_pyodide.mjs")
    runtime = ROOT / "pwa" / "node_modules" / "pyodide"
    wheels = [bake.wheel(tmp_path), *bake.tools((*bake.TOOLS, *PYTEST))]
    command = ["node", str(script), str(runtime), str(ROOT / "tests" / "core"), *map(str, wheels)]
    done = subprocess.run(command, capture_output=True, text=True)
    assert done.returncode == 0, done.stdout + done.stderr
    passed = re.search(r"(\d+) passed", done.stdout)
    assert passed and int(passed[1]) > 0
