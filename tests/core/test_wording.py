"""The working shown to the person: its figures give its results."""

import math
import re

import pytest

from headwater.answer import shown

BOAT = {
    "nozzle_diameter": "130 mm",
    "impeller_diameter": "215 mm",
    "shaft_depth": "4 in",
    "wide_open_rpm": 4200,
    "engine_power": "280 hp",
    "gear_ratio": 1.2,
}
PLACE = {"altitude": "1,200 ft", "water_temperature": "54 F"}
NOTES = [
    {"outcome": outcome, "rpm": rpm, "boat_speed": "0 mph", **PLACE}
    for outcome, rpm in (("held", 3700), ("let_go", 4050))
]
NAMES = {
    "Head available": "npsh_available",
    "Suction specific speed asked": "suction_specific_speed_asked",
    "Head required": "npsh_required",
    "Margin": "margin",
    "Ratio": "ratio",
    "Static pressure ahead of the impeller": "inlet_static_pressure",
}


def work_out(text):
    text = re.sub(r" (m|Pa)$", "", text).replace("^", "**").replace(" x ", " * ")
    text = re.sub(r"(?<=\d) (?=[a-z(])", " * ", text).replace("sqrt", "math.sqrt")
    return eval(text, {"math": math})


@pytest.mark.parametrize("speed", ["0 mph", "14 mph"])
def test_figures_of_the_working_give_its_results(speed):
    found = shown({"boat": BOAT, "place": PLACE, "plan": {"rpm": 3600, "boat_speed": speed}, "notes": NOTES})
    rows = {row["title"]: row for row in found["sheet"]["working"]}
    for title, name in NAMES.items():
        value = found["answer"]["values"][name]["value"]
        assert work_out(rows[title]["numbers"]) == pytest.approx(value, rel=2e-3), title


def test_while_nothing_bounds_the_pump_the_working_leaves_out_what_it_cannot_know():
    found = shown({"boat": BOAT, "place": PLACE, "plan": {"rpm": 3600}, "notes": NOTES[:1]})
    rows = {row["title"]: row for row in found["sheet"]["working"]}
    assert rows["Margin"]["numbers"] == ""
    assert rows["Margin"]["result"].startswith("at least ")
    assert rows["Head available"]["numbers"] != ""
