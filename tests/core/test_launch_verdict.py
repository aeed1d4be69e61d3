"""The launch's verdict: rules, remedies, schedule and marks. The boat and its notes are invented."""

import math

import pytest

from headwater.answer import answer

BOAT = {
    "nozzle_diameter": "130 mm",
    "impeller_diameter": "215 mm",
    "hub_diameter": "70 mm",
    "shaft_depth": "0.1 m",
    "wide_open_rpm": 4200,
    "engine_power": "280 hp",
    "chine_beam": "1.95 m",
    "dry_mass": "1,500 kg",
}
HOME = {"altitude": "366 m", "water_temperature": "12 C"}
ROOM = {"room": "200 m"}
NOTES = [
    {"outcome": "held", "rpm": 3700, "boat_speed": "0 m/s", **HOME},
    {"outcome": "let_go", "rpm": 4050, "boat_speed": "0 m/s", **HOME},
]
PLANED = {
    "outcome": "planed",
    "rpm": 3700,
    **HOME,
    "load": "500 kg",
    "feed_in": "2 s",
    "seconds": "7.5 s",
}
CREW = {"people": 4, "fuel": "80 l", "gear": "80 kg"}


def launch(plan=None, boat=None, place=None, notes=None):
    case = {
        "boat": BOAT | (boat or {}),
        "place": HOME | ROOM | (place or {}),
        "plan": CREW | (plan or {}),
        "notes": [*NOTES, PLANED] if notes is None else notes,
    }
    found = answer(case)
    assert found["errors"] == []
    return found


def better(found):
    return found["launch"][found["launch"]["better"]]


def codes(found, part="reasons"):
    return [row["code"] for row in found[part]]


def test_a_proven_boat_with_room_is_go_and_says_how():
    found = launch()
    assert found["verdict"] == "go"
    way = better(found)
    assert found["headline"]["text"].startswith("GO · feed it in over ")
    assert (
        way["distance_to_plane"]["low"] < way["distance_to_plane"]["value"] < way["distance_to_plane"]["high"]
    )
    assert way["distance_to_plane"]["high"] <= way["room_for_plane"]
    assert found["values"]["planned_rpm"]["value"] == pytest.approx(way["planned_rpm"])
    assert found["launch"]["remedies"] == []


@pytest.mark.parametrize("more", [{}, {"people": None}])
def test_without_hull_or_load_the_steady_rule_stands(more):
    case = {"boat": dict(BOAT), "place": HOME | ROOM, "plan": {"rpm": 3600}, "notes": NOTES}
    if more:
        del case["boat"]["chine_beam"]
        case["plan"] |= CREW
    found = answer(case)
    assert found["launch"] is None
    assert codes(found, "cautions") == ["hull_unknown" if more else "load_unknown"]
    assert (found["verdict"], found["headline"]["text"]) == ("go", "GO · the pump holds")


def test_at_a_boat_speed_it_is_no_launch():
    assert launch({"boat_speed": "8 m/s", "rpm": 3600})["launch"] is None


def test_a_load_that_does_not_plane_is_no_go_and_names_the_load_that_does():
    found = launch({"people": 14, "gear": "900 kg"}, place={"altitude": "2500 m"})
    assert (found["verdict"], found["headline"]["code"]) == ("no-go", "launch_heavy")
    assert "ashore" in found["headline"]["text"]
    assert better(found)["time_to_plane"]["value"] is None
    lighter = next(row for row in found["launch"]["remedies"] if row["code"] == "less_load")
    again = launch(
        {"people": 0, "fuel": "0 l", "gear": f"{lighter['load']} kg"}, place={"altitude": "2500 m"}
    )
    assert again["verdict"] != "no-go"


def test_room_that_is_too_short_is_no_go_and_none_to_turn_is_said():
    needs = better(launch({"people": 9}))["distance_to_plane"]["value"]
    short = launch({"people": 9}, place={"room": f"{0.95 * needs:.1f} m"})
    assert (short["verdict"], short["headline"]["code"]) == ("no-go", "launch_room")
    found = launch(place={"room": "30 m"})
    assert (found["verdict"], found["headline"]["code"]) == ("no-go", "launch_turn")
    assert launch(place={"room": "40 m", "below": "rapid"})["headline"]["code"] == "launch_turn"


def test_tight_room_is_caution():
    needs = better(launch())["distance_to_plane"]
    turn = 5 * 3.2 * 1.95
    tight = launch(place={"room": f"{(needs['value'] + needs['high']) / 2 + turn:.1f} m"})
    assert tight["verdict"] == "caution"
    assert "room_tight" in codes(tight)


def test_a_hard_punch_is_caution_and_the_feed_in_that_holds_is_named():
    found = launch({"rpm": 3850, "feed_in": "0.5 s"})
    assert found["verdict"] == "caution"
    remedy = found["launch"]["remedies"][0]
    assert (remedy["code"], remedy["verdict"]) == ("feed_in", "go")
    assert "feed it in over" in found["headline"]["text"]
    assert launch({"rpm": 3850, "feed_in": f"{remedy['feed_in']} s"})["verdict"] == "go"


def test_needing_the_advised_feed_in_is_no_caution():
    assert launch({"rpm": 3850})["verdict"] == "go"


@pytest.mark.parametrize(
    ("plan", "verdict", "code"),
    [
        ({"grate": "weed"}, "caution", "grate"),
        ({"grate": "stick"}, "caution", "grate"),
        ({"standing_waves": "yes"}, "caution", "standing_waves"),
        ({"water": "fizzy"}, "go", "done_before"),
        ({"water": "aerated"}, "caution", "air"),
        ({"water": "white"}, "no-go", "white_water"),
    ],
)
def test_grate_and_water_cap_the_verdict(plan, verdict, code):
    found = launch(plan)
    assert found["verdict"] == verdict
    assert code in codes(found)
    steady = answer({"boat": BOAT, "place": HOME, "plan": {"rpm": 3300, **plan}, "notes": NOTES})
    assert steady["verdict"] == verdict


def test_cleaner_water_is_offered_where_that_would_do():
    remedies = launch({"grate": "weed"})["launch"]["remedies"]
    assert ("cleaner", "go") in [(row["code"], row["verdict"]) for row in remedies]


def test_shallow_water_is_no_go_on_room_without_a_launch_from_like_depth():
    assert "shallow" in codes(launch(place={"depth": "0.8 m"}))
    like = launch(place={"depth": "0.8 m"}, notes=[*NOTES, PLANED | {"depth": "0.7 m"}])
    assert "shallow" not in codes(like)
    assert "shallow_drag" in codes(like, "cautions")
    assert "gravel" in codes(launch(place={"depth": "0.5 m"}), "cautions")


def test_upstream_takes_less_room_and_lower_speeds_by_gps():
    found = launch(place={"current": "1.5 m/s"})
    up, down = found["launch"]["up"], found["launch"]["down"]
    assert up["distance_to_plane"]["value"] < down["distance_to_plane"]["value"]
    for row, other in zip(up["schedule"], down["schedule"], strict=True):
        assert row["ground_speed"] == pytest.approx(other["ground_speed"] - 3.0)
    assert found["launch"]["better"] == "up"
    assert found["headline"]["text"].startswith("GO · launch up, feed it in over ")
    assert launch({"direction": "down"}, place={"current": "1.5 m/s"})["launch"]["better"] == "down"


def test_the_schedule_exceeds_neither_engine_nor_pump():
    found = launch(place={"altitude": "2500 m"})
    limit = found["curve"]["engine_limit_rpm"]
    for row in better(found)["schedule"]:
        assert row["rpm"] <= limit * (1 + 1e-9)


def test_the_heaviest_load_fits_and_is_capped():
    found = launch()
    load = better(found)["heaviest_load"]
    assert launch({"people": 0, "fuel": "0 l", "gear": f"{load} kg"})["verdict"] != "no-go"
    assert better(launch(boat={"load_limit": "450 kg"}))["heaviest_load"] == 450


def test_abort_mark_is_a_speed_at_half_the_room_or_on_plane():
    assert better(launch(place={"room": "400 m"}))["abort_mark"] is None
    mark = better(launch(place={"room": "70 m"}))["abort_mark"]
    assert 0 < mark < better(launch())["plane_speed"]


def test_launches_that_were_made_narrow_the_drag():
    def wide(notes):
        distance = better(launch(notes=notes))["distance_to_plane"]
        return math.log(distance["high"] / distance["low"])

    assert wide([*NOTES, PLANED, PLANED, PLANED]) < wide([*NOTES, PLANED]) < wide(NOTES)


def test_a_launch_that_would_not_plane_counts_against_her():
    heavy = {"outcome": "would_not_plane", "rpm": 3700, **HOME, "load": "900 kg"}
    distances = [better(launch(notes=notes))["distance_to_plane"] for notes in (NOTES, [*NOTES, heavy])]
    assert distances[1]["value"] > 1.03 * distances[0]["value"]


def test_without_notes_the_room_is_told_and_the_pump_is_unknown():
    found = launch(notes=[])
    assert (found["verdict"], found["ground"]) == ("caution", "unknown")
    assert better(found)["distance_to_plane"]["value"] > 0
    assert "don't know this pump" in found["headline"]["text"]


def test_power_out_of_papers_is_no_go_ahead():
    papers = {"rpm_from": "papers"}
    assert "papers" in codes(launch({"power": "180 hp"}, papers))
    assert launch({"power": "180 hp"}, papers)["verdict"] == "caution"


def test_notes_of_an_older_set_up_alone_are_no_go_ahead():
    old = [note | {"date": "2024-05-01"} for note in [*NOTES, PLANED]]
    assert launch(boat={"date": "2026-04-01"}, notes=old)["verdict"] == "caution"


def test_one_jet_of_two_pushes_less():
    two = {"jets": 2, "engine_power": "560 hp", "dry_mass": "1,900 kg"}
    both, one = (better(launch(boat=two | running, notes=NOTES)) for running in ({}, {"jets_running": 1}))
    assert one["hump_surplus"]["value"] < 0.7 * both["hump_surplus"]["value"]


def test_every_figure_of_a_launch_is_one_or_none():
    for found in (launch(), launch({"people": 14, "gear": "900 kg"}, place={"altitude": "2500 m"})):
        for way in (found["launch"]["up"], found["launch"]["down"]):
            count = len(way["time"])
            for name in ("boat_speed", "ground_speed", "distance", "power", "rpm", "ratio", "limit"):
                assert len(way[name]) == count
            assert all(math.isfinite(value) for value in way["boat_speed"])


# What turns a go into a caution


def test_flat_torque_up_high_turns_a_go_into_a_caution():
    """Power near its peak keeps f^1 of sea level's, flat torque f^1.5: wide open read up high tells which."""
    boat = {"dry_mass": "1,650 kg", "high_altitude": "2500 m"}
    torque = (74682.5 / 101325) ** 1.2 * (288.15 / 271.9) ** 0.6  # ISO 1585 in standard air at 2500 m
    there = {"altitude": "2500 m", "room": "90 m"}
    held = [note | {"rpm": note["rpm"] + 500} for note in NOTES]  # a pump that the engine does not reach
    plan = {"throttle": "100 %", "people": 3}
    verdicts = {
        e: launch(plan, boat | {"high_rpm": 4200 * torque ** (e / 3)}, there, held)["verdict"]
        for e in (1.0, 1.5)
    }
    assert verdicts == {1.0: "go", 1.5: "caution"}


def test_gps_speed_read_as_water_speed_downstream_hides_a_caution():
    """At 8 m/s by GPS with 2 m/s of current behind her the pump sees 6."""

    def at(speed):
        plan = {"rpm": 3730, "boat_speed": f"{speed} m/s"}
        return answer({"boat": BOAT, "place": HOME, "plan": plan, "notes": NOTES[:1]})["verdict"]

    speeds = [v / 2 for v in range(0, 25)]
    first = next(v for v in speeds if at(v) == "go")
    assert first > 0
    assert at(first - 2 if first >= 2 else 0) == "caution"


def test_a_touched_impeller_turns_a_go_into_a_caution():
    noted = [note | {"date": "2026-05-01"} for note in [*NOTES, PLANED]]
    assert launch(boat={"date": "2026-04-01"}, notes=noted)["verdict"] == "go"
    touched = launch(boat={"date": "2026-06-01"}, notes=noted)
    assert touched["verdict"] == "caution"
    assert "older_notes_only" in codes(touched, "cautions")
