"""The repository: its top level, and what its lock file may say."""

import json
import subprocess
from pathlib import Path

import pytest

import machine

ROOT = Path(__file__).resolve().parents[2]
TOP = {"README.md", "DEVELOPERS.md", "pyproject.toml", "pwa", "py", "tests", "build_scripts", "static"}


def test_top_level_holds_what_it_may_and_dot_files() -> None:
    done = subprocess.run(["git", "ls-files"], cwd=ROOT, capture_output=True, text=True, check=True)
    top = {line.partition("/")[0] for line in done.stdout.splitlines()}
    assert {name for name in top if not name.startswith(".")} - TOP == set()


def test_lock_file_pins_by_hash_and_names_no_address() -> None:
    packages = json.loads((ROOT / "pwa" / "package-lock.json").read_text())["packages"]
    installed = {name: row for name, row in packages.items() if name}
    assert installed
    assert [name for name, row in installed.items() if "resolved" in row] == []
    assert [name for name, row in installed.items() if "integrity" not in row] == []


@pytest.mark.parametrize("version", ["v18.19.0", ""])
def test_a_machine_that_lacks_something_is_told_what(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, version: str
) -> None:
    if version:
        node = tmp_path / "node"
        node.write_text(f"#!/bin/sh\necho {version}\n")
        node.chmod(0o755)
    monkeypatch.setenv("PATH", str(tmp_path))
    with pytest.raises(SystemExit) as stopped:
        machine.check_prerequisites()
    told = f"Node 20 or newer (this is {version})" if version else "Node 20 or newer (no node found)"
    assert str(stopped.value) == f"Headwater needs:\n  - {told}\n  - npm (no npm found)"
