"""The hunt for wrong gos: random boats, places, notes that agree with a hidden limit, plans near the line."""

import copy
import math
import random
import re
from typing import NamedTuple

from launch_draws import draw_launch
from monte_carlo import draw

from headwater import air, hull, jet, launch, suction, water
from headwater.answer import answer
from headwater.fields import read


class Hunt(NamedTuple):
    """What a hunt found."""

    tried: int
    go: int
    worst: float  # largest share of failing draws behind a go
    wrong: list[dict]  # cases with a go that fails in over 5 % of the draws


def _case(rng: random.Random) -> dict:
    """A boat whose pump has a hidden S, notes of what it then does, and a plan near what it holds."""
    ring = rng.uniform(0.14, 0.30)
    nozzle, hub = ring * rng.uniform(0.5, 0.68), ring / 3
    wide_open = rng.uniform(2400, 6000)
    speed = rng.uniform(21, 29)  # of the jet, wide open: sizes the engine to the unit
    engine = 0.5 * 1000 * math.pi / 4 * nozzle**2 * speed**3 * 1.05 / 0.776
    depth = rng.uniform(-0.05, 0.2)
    unit = jet.unit(nozzle, ring, hub, 0.08, 0.25, 0.15, 0.03, 0.8, 0.97, engine / wide_open**3, 1.0)
    boat = {
        "nozzle_diameter": f"{1000 * nozzle:.2f} mm",
        "impeller_diameter": f"{1000 * ring:.2f} mm",
        "wide_open_rpm": wide_open,
        "engine_power": f"{engine / 1000:.2f} kW",
        "shaft_depth": f"{1000 * depth:.1f} mm",
        "rpm_from": "papers" if rng.random() < 0.15 else "seen",
    }
    if rng.random() < 0.5:
        boat["hub_diameter"] = f"{1000 * hub:.2f} mm"

    def lets_go(s: float, altitude: float, celsius: float, boat_speed: float) -> float:
        kelvin = celsius + 273.15
        pressure, vapor, density = (
            air.standard_pressure(altitude),
            water.vapor_pressure(kelvin),
            water.density(kelvin),
        )
        head = suction.head_at_rest(pressure, vapor, density, depth - ring / 2)
        return suction.rpm_at(unit, head, density, boat_speed, s)

    # A hidden S that lets go somewhere around wide open at sea level.
    s = math.exp(rng.uniform(math.log(250), math.log(650)))
    notes = []
    for _ in range(rng.randint(1, 5)):
        altitude, celsius = rng.choice([rng.uniform(0, 3500), 400.0]), rng.uniform(2, 26)
        boat_speed = rng.choice([0.0, 0.0, 0.0, rng.uniform(2, 14)])
        limit = lets_go(s, altitude, celsius, boat_speed)
        outcome, share = rng.choice(
            [
                ("held", rng.uniform(0.75, 0.99)),
                ("held", rng.uniform(0.9, 0.99)),
                ("flared", rng.uniform(0.88, 0.99)),
                ("let_go", rng.uniform(1.0, 1.12)),
            ]
        )
        notes.append(
            {
                "outcome": outcome,
                "rpm": share * limit * (1 + 0.005 * rng.gauss(0, 1)),
                "altitude": f"{altitude:.0f} m",
                "water_temperature": f"{celsius:.1f} C",
                "boat_speed": f"{boat_speed:.2f} m/s",
            }
        )
    altitude, celsius = rng.choice([rng.uniform(0, 3500), 400.0]), rng.uniform(2, 26)
    boat_speed = rng.choice([0.0, 0.0, rng.uniform(1, 14)])
    place = {"altitude": f"{altitude:.0f} m", "water_temperature": f"{celsius:.1f} C"}
    if rng.random() < 0.2:
        place["altitude_from"] = "phone"
    case = {"boat": boat, "place": place, "plan": {"boat_speed": f"{boat_speed:.2f} m/s"}, "notes": notes}
    holding = answer(case)["values"]["holding_rpm"]
    near = (
        holding["value"]
        if holding and rng.random() < 0.7
        else rng.uniform(0.7, 1.05) * lets_go(s, altitude, celsius, boat_speed)
    )
    rpm = max(near * rng.uniform(0.95, 1.0), 150.0)
    if rng.random() < 0.15:
        case["plan"]["power"] = f"{engine / 1000 * (rpm / wide_open) ** 3:.3f} kW"
    else:
        case["plan"]["rpm"] = rpm
    return case


def hunt(cases: int, draws: int = 500, seed: int = 1, climbs: int = 30) -> Hunt:
    """Try random steady cases; each go is drawn and must fail in at most 5 % of the draws."""
    return _hunt(_case, _failing, cases, draws, seed, climbs)


def hunt_launches(cases: int, draws: int = 500, seed: int = 1, climbs: int = 10) -> Hunt:
    """Try random launches; each go is drawn under its own rpm, feed-in and direction."""
    return _hunt(_launch_case, _launch_failing, cases, draws, seed, climbs)


def _failing(case: dict, draws: int, seed: int) -> float | None:
    """Share of draws in which a steady go lets go; none where it is no go."""
    found = answer(case)
    if found["errors"]:
        raise AssertionError(found["errors"])
    if found["verdict"] != "go" or _out_of_reach(found):
        return None
    return draw(case, draws, seed=seed, lines=False).failing


def _out_of_reach(found: dict) -> bool:
    """Whether the plan is past what her engine turns by so much that nobody can run it."""
    return found["values"]["planned_rpm"]["value"] > 1.05 * found["curve"]["engine_limit_rpm"]


def _launch_failing(case: dict, draws: int, seed: int) -> float | None:
    """Share of draws in which a launch that is a go fails; none where it is no go."""
    found = answer(case)
    if found["errors"]:
        raise AssertionError(found["errors"])
    if found["verdict"] != "go" or not found["launch"] or _out_of_reach(found):
        return None
    better = found["launch"]["better"]
    way = found["launch"][better]
    return draw_launch(case, way["planned_rpm"], way["feed_in"], better, draws, seed).failing


def _hunt(make, failing_of, cases: int, draws: int, seed: int, climbs: int) -> Hunt:
    """Random cases, then a climb from the worst of them towards a worse one.

    A share that comes near the limit is drawn again, more often and from another seed, so that chance alone
    neither finds nor hides a wrong go.
    """
    rng = random.Random(seed)
    found: list[tuple[float, int, dict]] = []

    def look(case: dict, number: int) -> float | None:
        failing = failing_of(case, draws, number)
        if failing is not None and failing > _NEAR:
            failing = failing_of(case, _CLOSER, number + 1)
        return failing

    tried = 0
    for number in range(cases):
        case = make(rng)
        failing = look(case, number)
        tried += 1
        if failing is not None:
            found.append((failing, number, case))
    for worst in sorted(found, key=lambda one: -one[0])[:_CLIMBED]:
        failing, number, case = worst
        for step in range(climbs):
            moved = _nudged(case, rng)
            higher = look(moved, number)
            tried += 1
            if higher is not None:
                found.append((higher, cases + step, moved))
                if higher > failing:
                    failing, case = higher, moved
    wrong = [{"failing": failing, "case": case} for failing, _, case in found if failing > 0.05]
    return Hunt(tried, len(found), max((failing for failing, _, _ in found), default=0.0), wrong)


_NEAR, _CLOSER = 0.04, 20_000  # share that is looked at again, and the draws it then gets
_CLIMBED = 3  # of the worst cases, climbed from
_FIGURE = re.compile(r"-?\d+(?:\.\d+)?")


def _nudged(case: dict, rng: random.Random) -> dict:
    """The case with one or two of its figures a little moved."""
    moved = copy.deepcopy(case)
    parts = [moved["place"], moved["plan"], *moved["notes"], moved["boat"]]
    for _ in range(rng.randint(1, 2)):
        part = rng.choice(parts)
        names = [name for name, value in part.items() if _FIGURE.match(str(value)) and name not in _WHOLE]
        if not names:
            continue
        name = rng.choice(names)
        share = rng.uniform(0.97, 1.03)
        value = part[name]
        if isinstance(value, str):
            part[name] = _FIGURE.sub(
                lambda match, share=share: f"{float(match[0]) * share:.4f}", value, count=1
            )
        else:
            part[name] = value * share
    return moved


_WHOLE = {"people", "jets"}


def _what_she_did(boat: dict, made: dict, rng: random.Random) -> dict:
    """A launch under a hidden drag: its seconds as somebody counts them, or that she would not plane."""
    values = read({"boat": boat, "place": made | {"rpm": None, "load": None}, "notes": []}).values["boat"]
    load, feed = float(made["load"].split()[0]), rng.uniform(1, 5)
    pressure = air.standard_pressure(float(made["altitude"].split()[0]))
    body = launch.Body(values["dry_mass"], values["centre_of_gravity"], values["chine_beam"])
    shape = launch.Shape(values["hull_length"], 10.0, 999.5, 1.235e-3, 1.2)
    mass, balance = launch.weighed(body, shape, [(load, 0.45)])
    unit = jet.unit(
        values["nozzle_diameter"],
        values["impeller_diameter"],
        values["hub_diameter"],
        *(0.08, 0.25, 0.15, 0.03, 0.8, 0.97),
        jet.absorption(values["engine_power"], values["wide_open_rpm"], 1),
        1.0,
    )
    table = launch.drag(hull.hull(body.beam, 10.0, balance, mass), 999.5, 1.235e-3)
    head = suction.head_at_rest(pressure, 1400.0, 999.5, 0.0)
    drag = math.exp(rng.gauss(math.log(1.07), 0.118))
    craft = launch.Craft(unit, 1, 999.5, head, 1.0, mass, table, drag, 1.4, 0.0, 1.0, 0.6)
    took = launch.run(craft, made["rpm"], feed).time_to_plane * math.exp(rng.gauss(0, 0.07))
    if took > 100:
        return {"outcome": "would_not_plane"}
    return {"outcome": "planed", "feed_in": f"{feed:.1f} s", "seconds": f"{took:.1f} s"}


def _launch_case(rng: random.Random) -> dict:
    """A boat with a hidden S, notes of what it then did, a hull, a load and a room near what does."""
    case = _case(rng)
    case["boat"]["rpm_from"] = "seen"
    ring = float(case["boat"]["impeller_diameter"].split()[0]) / 1000
    beam = ring * rng.uniform(8, 10)
    dry = 1000 * (beam / 1.95) ** 3 * rng.uniform(0.8, 1.4)
    case["boat"] |= {"chine_beam": f"{beam:.3f} m", "dry_mass": f"{dry:.0f} kg"}
    case["notes"] = [note for note in case["notes"] if note["boat_speed"].startswith("0.00")]
    people = rng.randint(1, 8)
    case["plan"] = {
        "people": people,
        "fuel": f"{rng.uniform(10, 150):.0f} l",
        "gear": f"{rng.uniform(0, 300):.0f} kg",
    }
    if rng.random() < 0.3:
        case["plan"]["throttle"] = f"{rng.uniform(75, 100):.0f} %"
    if rng.random() < 0.2:
        case["plan"]["feed_in"] = f"{rng.uniform(0.5, 8):.1f} s"
    if rng.random() < 0.4:
        case["place"]["current"] = f"{rng.uniform(0.2, 2.5):.1f} m/s"
    if rng.random() < 0.4:
        case["place"]["wind"] = rng.choice(["breeze", "strong"])
    case["place"]["room"] = f"{rng.uniform(50, 400):.0f} m"
    if rng.random() < 0.7:
        held = [note for note in case["notes"] if note["outcome"] == "held"]
        made = {
            "rpm": held[0]["rpm"] if held else 0.85 * case["boat"]["wide_open_rpm"],
            "altitude": case["notes"][0]["altitude"] if case["notes"] else "400 m",
            "water_temperature": "12 C",
            "load": f"{rng.uniform(100, 700):.0f} kg",
        }
        case["notes"].append(made | _what_she_did(case["boat"], made, rng))
    return case
