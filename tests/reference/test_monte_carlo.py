"""The bands against Monte Carlo: each end within 15 % of the draws' own, seen from the central value."""

import math

import numpy as np
import pytest
from monte_carlo import draw, normal_share

from headwater.answer import answer

DRAWS = 100_000
WITHIN = 0.15
BOAT = {
    "nozzle_diameter": "130 mm",
    "impeller_diameter": "215 mm",
    "hub_diameter": "70 mm",
    "shaft_depth": "0.1 m",
    "wide_open_rpm": 4200,
    "engine_power": "280 hp",
}
HOME = {"altitude": "366 m", "water_temperature": "12 C"}


def note(outcome, rpm, **more):
    return {"outcome": outcome, "rpm": rpm, "boat_speed": "0 m/s", **HOME, **more}


PAIR = [note("held", 3700), note("let_go", 4050)]
CASES = {
    "home": (BOAT, HOME, {"rpm": 3600}, PAIR),
    "high": (BOAT, HOME | {"altitude": "2500 m", "water_temperature": "8 C"}, {"rpm": 3240}, PAIR),
    "running, by throttle": (
        BOAT,
        HOME | {"altitude": "1500 m"},
        {"throttle": "80 %", "boat_speed": "6 m/s"},
        PAIR,
    ),
    "fixed S": (BOAT | {"suction_specific_speed": 430}, HOME, {"rpm": 3300}, []),
    "held only": (BOAT, HOME | {"altitude": "2000 m"}, {"rpm": 3300}, [note("held", 3700)]),
    "flared, power, hub unmeasured": (
        {key: value for key, value in BOAT.items() if key != "hub_diameter"},
        HOME | {"altitude": "1500 m"},
        {"power": "130 hp"},
        [note("held", 3300), note("flared", 3700), note("let_go", 4050)],
    ),
}


def test_the_draws_normal_distribution_is_that_of_the_standard_library():
    z = np.linspace(-7, 7, 400)
    expected = np.array([0.5 * math.erfc(-value / math.sqrt(2)) for value in z])
    assert np.max(np.abs(expected - normal_share(z))) < 2e-7


@pytest.fixture(scope="module", params=CASES)
def both(request):
    boat, place, plan, notes = CASES[request.param]
    case = {"boat": boat, "place": place, "plan": plan, "notes": notes}
    return answer(case), draw(case, DRAWS)


def compare(name, band, sample):
    low, middle, high = np.percentile(sample, [2.5, 50, 97.5])
    centre = band["value"] if band["value"] is not None else middle
    for side, end in (("low", low), ("high", high)):
        if band[side] is not None:
            share = (band[side] - centre) / (end - centre)
            assert abs(share - 1) <= WITHIN, f"{name} {side}: {band[side]:.5g}, drawn {end:.5g}"


def test_each_end_of_each_band_is_that_of_the_draws(both):
    found, drawn = both
    compared = 0
    for name, sample in drawn.values.items():
        band = found["values"][name]
        if band is not None and np.ptp(sample) > 1e-6 * np.abs(np.median(sample)):
            compare(name, band, sample)
            compared += 1
    assert compared >= 7


def test_each_equivalent_s_band_is_that_of_the_draws(both):
    found, drawn = both
    assert len(found["equivalents"]) == len(drawn.equivalents)
    for row, sample in zip(found["equivalents"], drawn.equivalents, strict=True):
        compare("equivalent", {"value": row["rpm_here"], "low": row["low"], "high": row["high"]}, sample)


def test_a_go_lets_go_in_at_most_five_of_a_hundred_draws(both):
    found, drawn = both
    assert found["verdict"] != "go" or drawn.failing <= 0.05
