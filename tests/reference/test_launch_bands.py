"""The launch's bands against draws of the launch, made by physics typed once more."""

import numpy as np
import pytest
from launch_draws import draw_launch

from headwater.answer import answer

DRAWS = 4000
END = 0.15  # of each end of each band

HOME = {"altitude": "366 m", "water_temperature": "12 C"}
BOAT = {
    "nozzle_diameter": "130 mm",
    "impeller_diameter": "215 mm",
    "hub_diameter": "70 mm",
    "shaft_depth": "0.1 m",
    "wide_open_rpm": 4200,
    "engine_power": "280 hp",
    "chine_beam": "1.95 m",
    "dry_mass": "1,400 kg",
}
PUMP = [
    {"outcome": "held", "rpm": 3700, "boat_speed": "0 m/s", **HOME},
    {"outcome": "let_go", "rpm": 4050, "boat_speed": "0 m/s", **HOME},
]
PLANED = {"outcome": "planed", "rpm": 3700, **HOME, "load": "400 kg", "feed_in": "2 s", "seconds": "7.5 s"}
CASES = {
    "at home, the pump known alone": ({}, {}, PUMP),
    "at home, a launch timed": ({}, {}, [*PUMP, PLANED]),
    "at 1800 m against the current": (
        {"altitude": "1800 m", "current": "1 m/s"},
        {"gear": "50 kg"},
        [*PUMP, PLANED],
    ),
    "hurried, against the wind": ({"wind": "strong"}, {"rpm": 3600, "feed_in": "1 s"}, [*PUMP, PLANED]),
    "would not plane once": (
        {},
        {"people": 2},
        [*PUMP, {"outcome": "would_not_plane", "rpm": 3300, **HOME, "load": "1,000 kg"}],
    ),
}


@pytest.fixture(scope="module", params=CASES)
def both(request):
    """A launch's way as answered, and its draws."""
    place, plan, notes = CASES[request.param]
    case = {
        "boat": BOAT,
        "place": HOME | {"room": "300 m"} | place,
        "plan": {"people": 3, "fuel": "80 l"} | plan,
        "notes": notes,
    }
    found = answer(case)
    better = found["launch"]["better"]
    way = found["launch"][better]
    return way, draw_launch(case, way["planned_rpm"], way["feed_in"], better, DRAWS)


@pytest.mark.parametrize("name", ["time_to_plane", "distance_to_plane", "least_ratio"])
def test_each_end_of_each_band_is_that_of_the_draws(both, name):
    way, draws = both
    drawn = {
        "time_to_plane": draws.time,
        "distance_to_plane": draws.distance,
        "least_ratio": draws.least_ratio,
    }
    low, middle, high = np.quantile(np.nan_to_num(drawn[name], nan=np.inf), [0.025, 0.5, 0.975])
    band = way[name]
    assert band["value"] == pytest.approx(middle, rel=0.08)
    assert band["low"] == pytest.approx(low, rel=END)
    assert band["high"] == pytest.approx(high, rel=END)


def test_where_she_may_not_plane_some_draws_do_not():
    case = {
        "boat": BOAT,
        "place": HOME | {"altitude": "2500 m"},
        "plan": {"people": 8, "fuel": "80 l", "gear": "200 kg"},
        "notes": PUMP,
    }
    way = answer(case)["launch"]["up"]
    assert way["distance_to_plane"]["value"] is not None
    assert way["distance_to_plane"]["high"] is None
    planes = draw_launch(case, way["planned_rpm"], way["feed_in"], "up", DRAWS).planes
    assert 0.4 < planes.mean() < 0.975
