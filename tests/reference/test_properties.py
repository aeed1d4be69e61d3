"""What must hold for any boat, place and plan. Boats and notes are made up by hypothesis."""

import copy
import json
import math

import pytest
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st

from headwater import fields, units
from headwater.answer import answer, answer_json, reply
from headwater.share import decode, encode

quick = settings(max_examples=30, deadline=None, suppress_health_check=list(HealthCheck))
thorough = settings(max_examples=120, deadline=None, suppress_health_check=list(HealthCheck))

boats = st.fixed_dictionaries(
    {
        "nozzle_diameter": st.floats(120, 140).map(lambda mm: f"{mm:.2f} mm"),
        "impeller_diameter": st.floats(208, 225).map(lambda mm: f"{mm:.2f} mm"),
        "shaft_depth": st.floats(0, 0.25).map(lambda m: f"{m:.3f} m"),
        "wide_open_rpm": st.floats(4000, 4600),
        "engine_power": st.floats(180, 220).map(lambda kw: f"{kw:.2f} kW"),
    },
    optional={
        "intake_loss": st.floats(0.02, 0.6),
        "ram_loss": st.floats(0.05, 0.6),
        "wake_fraction": st.floats(0.0, 0.2),
        "nozzle_loss": st.floats(0.0, 0.1),
        "pump_efficiency": st.floats(0.6, 0.92),
        "rpm_from": st.sampled_from(["seen", "papers"]),
    },
)
altitudes = st.floats(0, 3500)
waters = st.floats(1, 30)
speeds = st.one_of(st.just(0.0), st.floats(0.5, 16))


def place(altitude, celsius=12.0):
    return {"altitude": f"{altitude:.1f} m", "water_temperature": f"{celsius:.2f} C"}


def note(outcome, rpm, altitude=366.0, celsius=12.0, speed=0.0):
    return {"outcome": outcome, "rpm": rpm, "boat_speed": f"{speed:.3f} m/s", **place(altitude, celsius)}


def check(boat, where, plan, notes):
    found = answer({"boat": boat, "place": where, "plan": plan, "notes": notes})
    assert found["errors"] == []
    return found


def plan(rpm, speed=0.0):
    return {"rpm": rpm, "boat_speed": f"{speed:.3f} m/s"}


def margin(boat, where, planned):
    """With S fixed the margin needs no note."""
    return check(boat | {"suction_specific_speed": 420}, where, planned, [])["values"]["margin"]["value"]


@quick
@given(boats, altitudes, waters, speeds, st.floats(1500, 3600))
def test_margin_falls_with_rpm_altitude_and_warm_water_and_rises_with_speed_and_depth(
    boat, altitude, celsius, speed, rpm
):
    base = margin(boat, place(altitude, celsius), plan(rpm, speed))
    assert margin(boat, place(altitude, celsius), plan(rpm * 1.02, speed)) < base
    assert margin(boat, place(altitude + 200, celsius), plan(rpm, speed)) < base
    assert margin(boat, place(altitude, celsius + 5), plan(rpm, speed)) < base
    deeper = boat | {"shaft_depth": f"{float(boat['shaft_depth'].split()[0]) + 0.1:.3f} m"}
    assert margin(deeper, place(altitude, celsius), plan(rpm, speed)) > base


@quick
@given(boats, altitudes, st.floats(0, 12), st.floats(2500, 3600))
def test_margin_rises_with_boat_speed(boat, altitude, speed, rpm):
    slow, fast = (margin(boat, place(altitude), plan(rpm, v)) for v in (speed, speed + 2))
    assert fast > slow


@quick
@given(boats, altitudes, altitudes, st.floats(0.0, 1.5))
def test_at_rest_the_rpm_that_holds_goes_as_the_root_of_the_head_whatever_the_intake_loss(
    boat, home, away, loss
):
    made = boat | {"intake_loss": loss, "shaft_depth": "0.1 m"}
    held = note("held", 3000, home)
    at_home, there = (
        check(made, place(z), plan(2000), [held])["values"]["holding_rpm"]["value"] for z in (home, away)
    )
    shares = [
        check(made, place(z), plan(2000), [])["values"]["holding_rpm_share"]["value"] for z in (home, away)
    ]  # roots of the heads over sea level's
    assert there / at_home == pytest.approx(shares[1] / shares[0], rel=1e-6)


@thorough
@given(boats, altitudes, waters, speeds, st.floats(1800, 4300), st.one_of(st.none(), st.floats(1.085, 1.5)))
def test_what_was_held_is_go_at_its_own_place_and_speed_whatever_the_coefficients(
    boat, altitude, celsius, speed, rpm, let_go
):
    notes = [note("held", rpm, altitude, celsius, speed)]
    if let_go:
        notes.append(note("let_go", rpm * let_go, altitude, celsius, speed))
    found = check(boat, place(altitude, celsius), plan(rpm, speed), notes)
    assert ("go", "done_before") == (found["verdict"], found["ground"])


@thorough
@given(
    boats,
    altitudes,
    waters,
    speeds,
    st.floats(1000, 5000),
    st.lists(st.floats(1000, 5000), max_size=3),
    st.floats(1, 1.3),
)
def test_at_or_past_a_let_go_is_never_go(boat, altitude, celsius, speed, gone, held, over):
    notes = [note("let_go", gone, altitude, celsius, speed)]
    notes += [note("held", rpm, altitude, celsius) for rpm in held]
    found = check(boat, place(altitude, celsius), plan(gone * over, speed), notes)
    assert found["verdict"] != "go"


@quick
@given(boats, altitudes, waters, speeds, st.floats(700, 5000), st.booleans())
def test_without_a_valid_note_nothing_is_go(boat, altitude, celsius, speed, rpm, nameless):
    held = note("held", 4800, altitude, celsius, speed)
    del held["boat_speed"]
    for planned in (plan(rpm, speed), {}):
        found = check(boat, place(altitude, celsius), planned, [held] if nameless else [])
        assert found["verdict"] != "go"


@quick
@given(boats, altitudes, altitudes, st.floats(2500, 3800), st.floats(1.1, 1.3), st.integers(1, 3))
def test_notes_that_agree_made_at_rest_never_widen_the_band(boat, home, away, rpm, over, more):
    pair = [note("held", rpm, home), note("let_go", rpm * over, home)]
    before = check(boat, place(away), plan(rpm * 0.8), pair)["values"]
    after = check(boat, place(away), plan(rpm * 0.8), [*pair, *[note("held", rpm, home)] * more])["values"]
    for name in ("ratio", "let_go_rpm", "holding_rpm"):
        wide = [math.log(values[name]["high"] / values[name]["low"]) for values in (before, after)]
        assert wide[1] <= wide[0] * 1.01  # to what the grid resolves


@quick
@given(boats, altitudes, waters, st.floats(2000, 4200))
def test_the_band_on_what_she_holds_at_the_note_s_own_place_is_the_note_s_reading(
    boat, altitude, celsius, rpm
):
    held = note("held", rpm, altitude, celsius)
    band = check(boat, place(altitude, celsius), plan(rpm * 0.9), [held])["values"]["holding_rpm"]
    assert band["value"] == pytest.approx(rpm, rel=1e-6)
    assert 0.0095 < 1 - band["low"] / rpm < 0.0125
    assert 0.0095 < band["high"] / rpm - 1 < 0.0125


@quick
@given(boats, altitudes, speeds, st.floats(2200, 3800), st.one_of(st.none(), st.floats(1.04, 1.3)))
def test_the_rpm_she_holds_is_a_go_and_half_a_per_cent_more_is_none(boat, altitude, speed, rpm, let_go):
    notes = [note("held", rpm)] + ([note("let_go", rpm * let_go)] if let_go else [])
    holds = check(boat, place(altitude), plan(2000, speed), notes)["values"]["holding_rpm"]["value"]
    assume(200 < holds < 11000)
    assert check(boat, place(altitude), plan(holds * (1 - 1e-5), speed), notes)["verdict"] == "go"
    assert check(boat, place(altitude), plan(holds * 1.005, speed), notes)["verdict"] != "go"


@thorough
@given(
    st.sampled_from([field for field in fields.FIELDS if field.kind in units.QUANTITIES]),
    st.floats(0, 1),
    st.data(),
)
def test_units_round_trip(field, share, data):
    value = field.low + share * (field.high - field.low)
    symbol = data.draw(st.sampled_from(field.units))
    text = f"{units.from_si(value, field.kind, symbol):.9f} {symbol}"
    try:
        found = units.parse(text, field.kind).value
    except units.BadReading:
        assume(False)  # three decimals that could be a thousand are asked for again
    assert found == pytest.approx(value, rel=1e-6, abs=1e-6)


@quick
@given(
    boats,
    altitudes,
    waters,
    st.lists(st.tuples(st.sampled_from(["held", "flared", "let_go"]), st.floats(1000, 5000)), max_size=4),
)
def test_links_round_trip(boat, altitude, celsius, seen):
    case = {"boat": boat, "place": place(altitude, celsius), "plan": {"rpm": "3,000 rpm"}}
    case["notes"] = [note(outcome, rpm) for outcome, rpm in seen]
    assert decode(encode(case)) == case


anything = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats() | st.text(max_size=12),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(max_size=10), inner, max_size=4),
    max_leaves=12,
)
CASE = {
    "boat": {
        "nozzle_diameter": "130 mm",
        "impeller_diameter": "215 mm",
        "wide_open_rpm": 4200,
        "engine_power": "280 hp",
    },
    "place": place(1200),
    "plan": {"rpm": 3000},
    "notes": [note("held", 3700), note("let_go", 4050)],
}


def is_an_answer(found):
    json.dumps(found, allow_nan=False)
    assert (found["verdict"] is None) == bool(found["errors"])
    assert all(
        set(error) == {"field", "given", "allowed", "action"} and error["field"] for error in found["errors"]
    )


@thorough
@given(anything)
def test_any_json_gives_an_answer_or_named_errors(value):
    is_an_answer(answer(value))
    json.loads(answer_json(json.dumps(value)))
    json.loads(reply(json.dumps({"ask": "check", "case": value})))


@thorough
@given(
    st.sampled_from(["boat", "place", "plan", "notes"]),
    st.sampled_from([f.key.split(".")[1] for f in fields.FIELDS]),
    anything,
)
def test_a_case_with_anything_in_one_reading_gives_an_answer_or_named_errors(part, name, value):
    case = copy.deepcopy(CASE)
    (case["notes"][0] if part == "notes" else case[part])[name] = value
    is_an_answer(answer(case))


# The launch

HULL = {"chine_beam": "1.95 m", "dry_mass": "1,400 kg"}
loads = st.floats(100, 800)


def start(boat, altitude, load, celsius=12.0, plan=None, place_more=None):
    """A launch at a fixed rpm, its pump fixed: the way against the current, and with it."""
    case = {
        "boat": boat | HULL | {"suction_specific_speed": 420},
        "place": place(altitude, celsius) | (place_more or {}),
        "plan": {"rpm": 3300, "gear": f"{load:.1f} kg"} | (plan or {}),
    }
    found = answer(case)
    assert found["errors"] == []
    return found["launch"]


def shortest(*args, **more):
    feed = start(*args, **more)["up"]["shortest_feed_in"]
    return 99.0 if feed is None else feed


@quick
@given(boats, st.floats(0, 2500), loads, waters)
def test_the_feed_in_never_shortens_with_altitude_load_blockage_air_or_warm_water(
    boat, altitude, load, celsius
):
    base = shortest(boat, altitude, load, celsius)
    assert shortest(boat, altitude + 400, load, celsius) >= base
    assert shortest(boat, altitude, load + 150, celsius) >= base
    assert shortest(boat, altitude, load, celsius + 4) >= base
    assert shortest(boat, altitude, load, celsius, plan={"grate": "weed"}) >= base


@quick
@given(boats, st.floats(0, 2500), loads, st.floats(1, 8))
def test_room_never_shrinks_with_load_or_blockage(boat, altitude, load, feed):
    def room(load, **plan):
        made = start(boat, altitude, load, plan={"feed_in": f"{feed:.1f} s"} | plan)
        value = made["up"]["distance_to_plane"]["value"]
        return math.inf if value is None else value

    base = room(load)
    assert room(load + 150) >= base
    assert room(load, grate="stick") >= base


@quick
@given(boats, st.floats(0, 2500), loads, st.floats(0.5, 8))
def test_a_longer_feed_in_never_lowers_the_smallest_ratio(boat, altitude, load, feed):
    def least(feed):
        made = start(boat, altitude, load, plan={"feed_in": f"{feed:.1f} s"})["up"]
        return min(value for value in made["ratio"] if value is not None)

    assert least(feed + 1) >= least(feed) * (1 - 2e-3)  # to the step of the run


@quick
@given(boats, st.floats(0, 3500), loads, st.floats(0, 3))
def test_the_schedule_keeps_to_engine_and_pump_and_follows_the_current(boat, altitude, load, current):
    made = start(boat, altitude, load, place_more={"current": f"{current:.2f} m/s"})
    for up, down in zip(made["up"]["schedule"], made["down"]["schedule"], strict=True):
        assert up["ground_speed"] <= down["ground_speed"]
    for row in made["up"]["schedule"]:
        assert row["rpm"] <= max(3300, made["up"]["planned_rpm"], float(boat["wide_open_rpm"])) * (1 + 1e-9)


@quick
@given(boats, st.floats(1500, 3500), st.floats(2500, 6000))
def test_a_boat_that_cannot_plane_says_so(boat, altitude, load):
    made = start(boat, altitude, load)["up"]
    if made["hump_surplus"]["value"] <= 0:
        assert made["time_to_plane"]["value"] is None
        assert made["distance_to_plane"]["value"] is None
