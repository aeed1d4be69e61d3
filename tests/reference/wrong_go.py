"""The hunt for wrong gos: random boats, places, notes that agree with a hidden limit, plans near the line."""

import math
import random
from typing import NamedTuple

from launch_draws import draw_launch
from monte_carlo import draw

from headwater import air, jet, suction, water
from headwater.answer import answer


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


def hunt(cases: int, draws: int = 2000, seed: int = 1) -> Hunt:
    """Try random cases; each go is drawn and must fail in at most 5 % of the draws."""
    rng = random.Random(seed)
    go, worst, wrong = 0, 0.0, []
    for number in range(cases):
        case = _case(rng)
        found = answer(case)
        if found["errors"]:
            raise AssertionError(found["errors"])
        if found["verdict"] != "go":
            continue
        go += 1
        failing = draw(case, draws, seed=number, lines=False).failing
        worst = max(worst, failing)
        if failing > 0.05:
            wrong.append({"failing": failing, "case": case})
    return Hunt(cases, go, worst, wrong)


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
        rpm = held[0]["rpm"] if held else 0.85 * case["boat"]["wide_open_rpm"]
        load = rng.uniform(100, 700)
        case["notes"].append(
            {
                "outcome": "planed",
                "rpm": rpm,
                "altitude": case["notes"][0]["altitude"] if case["notes"] else "400 m",
                "water_temperature": "12 C",
                "load": f"{load:.0f} kg",
                "feed_in": f"{rng.uniform(1, 5):.1f} s",
                "seconds": f"{rng.uniform(5, 16):.1f} s",
            }
        )
    return case


def hunt_launches(count: int, draws: int = 500, seed: int = 1) -> Hunt:
    """Draw each launch that is a go, under its own rpm, feed-in and direction.

    :param count: random cases
    :param draws: of each
    """
    rng, go, worst, wrong = random.Random(seed), 0, 0.0, []
    for _ in range(count):
        case = _launch_case(rng)
        found = answer(case)
        if found["verdict"] != "go":
            continue
        go += 1
        way = found["launch"][found["launch"]["better"]]
        made = case, way["planned_rpm"], way["feed_in"], found["launch"]["better"]
        failing = draw_launch(*made, n=draws).failing
        if failing > 0.05:  # a closer look, so that no chance of the draws decides
            failing = draw_launch(*made, n=2000, seed=2).failing
        worst = max(worst, failing)
        if failing > 0.05:
            wrong.append({"failing": failing, "case": case})
    return Hunt(count, go, worst, wrong)
