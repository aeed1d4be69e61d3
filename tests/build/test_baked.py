"""The phone's Python, baked, says what the desk's says, for every kind of question and of mistake."""

import copy
import json
import subprocess
from pathlib import Path
from typing import Any

import pytest

from headwater.answer import reply
from headwater.share import decode

ROOT = Path(__file__).resolve().parents[2]
DEMO = json.loads((ROOT / "static" / "demo.json").read_text())["case"]


def changed(**readings: Any) -> dict:
    """The demo case with readings changed, named part__key; None takes one out."""
    case = copy.deepcopy(DEMO)
    for name, value in readings.items():
        part, _, key = name.partition("__")
        if value is None:
            case[part].pop(key, None)
        else:
            case[part][key] = value
    return case


CASES = {
    "as it stands": DEMO,
    "high": changed(place__altitude="2500 m"),
    "by barometer": changed(place__altitude=None, place__station_pressure="25.1 inHg"),
    "by altimeter": changed(place__altimeter_setting="29.80 inHg"),
    "warm": changed(place__water_temperature="86 F"),
    "in power": changed(plan__rpm=None, plan__power="180 hp"),
    "in share, moving": changed(plan__rpm=None, plan__throttle="80 %", plan__boat_speed="20 mph"),
    "no plan": {key: part for key, part in DEMO.items() if key != "plan"},
    "no notes": {key: part for key, part in DEMO.items() if key != "notes"},
    "fixed pump": changed(boat__suction_specific_speed=200.0),
    "from papers": changed(boat__rpm_from="papers", plan__rpm=None, plan__power="180 hp"),
    "full-width and Arabic digits": changed(place__altitude="１２００ ft", place__water_temperature="٥٤ F"),
    "bad readings": changed(place__altitude="high up", boat__jets=9, plan__power="1 hp", boat__colour="red"),
    "nothing": {},
    "not a case": [1, "two", None],
}
REQUESTS: list[Any] = [
    *(
        {"ask": "check", "case": case, "units": units}
        for case in CASES.values()
        for units in (None, "us", "metric")
    ),
    *({"ask": "link", "case": case} for case in CASES.values()),
    *({"ask": "open", "fragment": cut} for cut in ("", "1", "9.abc", "é", None, "1." + "A" * 500)),
    {"ask": "shown", "field": "place.altitude", "text": "1,200 ft", "unit": None},
    {"ask": "shown", "field": "place.altitude", "text": "deep", "unit": "m"},
    {"ask": "else"},
    None,
    7,
]


@pytest.fixture(scope="module")
def replies(dist: Path) -> list[Any]:
    """What the phone replies to each request."""
    (core,) = dist.glob("app/core-*.zip")
    links = [json.loads(reply(json.dumps({"ask": "link", "case": case}))) for case in CASES.values()]
    opened = [{"ask": "open", "fragment": link["fragment"]} for link in links if "fragment" in link]
    assert opened
    REQUESTS.extend(opened)
    script = Path(__file__).with_name("ask_baked.mjs")
    command = ["node", str(script), str(ROOT / "pwa" / "node_modules" / "pyodide"), str(core)]
    done = subprocess.run(command, input=json.dumps(REQUESTS), capture_output=True, text=True)
    assert done.returncode == 0, done.stderr
    return json.loads(done.stdout)


def same(phone: Any, desk: Any, where: str = "reply") -> None:
    """Equal in every word; figures but for the last digits, where two math libraries may differ.

    Links carry the same case; their bytes depend on the zlib at hand.
    """
    if where.endswith(".fragment"):
        assert decode(phone) == decode(desk), where
    elif isinstance(desk, dict) and isinstance(phone, dict):
        assert phone.keys() == desk.keys(), where
        for key in desk:
            same(phone[key], desk[key], f"{where}.{key}")
    elif isinstance(desk, list) and isinstance(phone, list):
        assert len(phone) == len(desk), where
        for index, (left, right) in enumerate(zip(phone, desk, strict=True)):
            same(left, right, f"{where}[{index}]")
    elif isinstance(desk, float) and isinstance(phone, int | float):
        assert phone == pytest.approx(desk, rel=1e-9, abs=1e-9), where
    else:
        assert phone == desk, where


def test_phone_replies_as_the_desk_does(replies: list[Any]) -> None:
    assert len(replies) == len(REQUESTS)
    for request, phone in zip(REQUESTS, replies, strict=True):
        same(phone, json.loads(reply(json.dumps(request))), json.dumps(request)[:80])


def test_the_cases_reach_every_verdict_and_errors_too(replies: list[Any]) -> None:
    verdicts = {row["answer"]["verdict"] for row in replies if "answer" in row}
    assert verdicts == {"go", "caution", "no-go", None}
