"""What the README shows is what the program says."""

import json
from pathlib import Path

import pytest

from headwater.__main__ import main
from headwater.answer import answer

ROOT = Path(__file__).resolve().parents[2]
README = (ROOT / "README.md").read_text()


def test_readme_holds_the_table_of_readings_as_the_command_prints_it(
    capsys: pytest.CaptureFixture[str],
) -> None:
    assert main(["fields", "--markdown"]) == 0
    assert capsys.readouterr().out.strip() in README


def test_readme_s_example_is_the_demo_boat_at_2500_m() -> None:
    case = json.loads((ROOT / "static" / "demo.json").read_text())["case"]
    case["place"]["altitude"] = "2500 m"
    lead = answer(case)["reasons"][0]["text"].rstrip(".")
    assert lead[0].lower() + lead[1:] in " ".join(README.split())
