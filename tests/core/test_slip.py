"""Slip: rpm seen against rpm expected, by her engine and by her own log."""

import json

import pytest

from headwater.__main__ import main
from headwater.answer import reply, slipping

BOAT = {
    "nozzle_diameter": "130 mm",
    "impeller_diameter": "215 mm",
    "wide_open_rpm": 4200,
    "engine_power": "280 hp",
}
PLACE = {"altitude": "0 m", "water_temperature": "12 C"}
CASE = {"boat": BOAT, "place": PLACE}


def codes(*rows, case=CASE):
    found = slipping(case, list(rows))
    assert found["errors"] == []
    return [row["code"] for row in found["rows"]], found["cause"]


@pytest.mark.parametrize(
    ("rpm", "code"),
    [
        (4200, "within_reading"),
        (4240, "within_reading"),
        (4290, "suspect"),
        (4420, "slipping"),
        (3900, "suspect"),
    ],
)
def test_rpm_seen_wide_open_at_sea_level(rpm, code):
    assert codes({"rpm": rpm}) == ([code], "unknown")


def test_a_share_of_the_power_turns_its_cube_root():
    """Half the power turns 4200 x 0.5^(1/3) = 3334."""
    found = slipping(CASE, [{"rpm": 3334, "share": "50 %"}])["rows"][0]
    assert found["expected"]["value"] == pytest.approx(4200 * 0.5 ** (1 / 3))
    assert found["code"] == "within_reading"


def test_up_high_wide_open_turns_slower():
    """Torque 0.718 at 2500 m geopotential, rpm 4200 x 0.718^(1.25/3) = 3658."""
    high = {"boat": BOAT, "place": PLACE | {"altitude": "2501 m"}}
    found = slipping(high, [{"rpm": 3660}])["rows"][0]
    assert found["expected"]["value"] == pytest.approx(3658, abs=2)
    assert slipping(high, [{"rpm": 4200}])["rows"][0]["code"] == "slipping"


def test_her_own_log_comes_before_the_engine():
    notes = [
        {"outcome": "held", "rpm": rpm, "boat_speed": speed, **PLACE}
        for rpm, speed in ((3000, "10 m/s"), (3600, "14 m/s"))
    ]
    found = slipping(CASE | {"notes": notes}, [{"rpm": 3300, "boat_speed": "12 m/s"}])["rows"][0]
    assert (found["by"], found["expected"]["value"]) == ("pairs", 3300)
    far = slipping(CASE | {"notes": notes}, [{"rpm": 3300, "boat_speed": "4 m/s"}])["rows"][0]
    assert far["by"] == "engine"


def test_the_same_everywhere_is_wear_and_what_changes_is_air():
    worn = [{"rpm": 4420, "boat_speed": "0 m/s"}, {"rpm": 4430, "boat_speed": "9 m/s"}]
    assert codes(*worn)[1] == "wear"
    air = [{"rpm": 4210, "boat_speed": "0 m/s"}, {"rpm": 4500, "boat_speed": "9 m/s"}]
    assert codes(*air)[1] == "air"


def test_bad_readings_are_named_all_at_once():
    found = slipping(CASE, [{"rpm": "fast"}, {"rpm": 4200, "share": "150 %"}])
    assert [error["field"] for error in found["errors"]] == ["seen[0].rpm", "seen[1].share"]
    assert slipping(CASE, [])["errors"][0]["field"] == "seen"
    assert slipping({}, [{"rpm": 4200}])["errors"] != []
    assert json.loads(reply(json.dumps({"ask": "slip", "case": None, "seen": 7})))["errors"] != []


def test_command_line_says_it(tmp_path, capsys):
    file = tmp_path / "case.json"
    file.write_text(json.dumps(CASE))
    assert main(["slip", str(file), "--rpm", "4420"]) == 0
    assert "she slips" in " ".join(capsys.readouterr().out.split())
    assert main(["slip", str(file), "--rpm", "fast"]) == 2
