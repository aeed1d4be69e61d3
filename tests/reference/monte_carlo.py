"""Draws of one case: the formulas of jet and suction typed once more on arrays, S learned again in each draw.

What is drawn: every coefficient and length on its 95 % span (two half normals in the logarithm that meet at
the typical value, so that it is the median), the shaft's depth, engine power and wide-open rpm, the tach's
scale (one for notes and plan), the plan's own rpm reading, air pressure and water temperature. A note's own
reading errors and its different blade angle are the scatter of its likelihood; a note made at the plan's
altitude shares its error. Water and air are the core's own relations, checked elsewhere.
"""

import math
from typing import NamedTuple

import numpy as np

from headwater import air, fields, water

GRAVITY = 9.80665
SIGMAS = 1.959964
GRID = 160  # points of the posterior, over what the notes leave of the prior


class Draws(NamedTuple):
    """Results of each draw, by name; equivalents one array a note."""

    values: dict[str, np.ndarray]
    equivalents: list[np.ndarray]
    failing: float  # share of draws in which the plan lets go


def normal_share(z):
    """Normal distribution function, to 1.2e-7: the Chebyshev fit of erfc in Numerical Recipes [M]."""
    x = np.abs(z) / math.sqrt(2)
    t = 1 / (1 + 0.5 * x)
    terms = (-1.26551223, 1.00002368, 0.37409196, 0.09678418, -0.18628806)
    terms += (0.27886807, -1.13520398, 1.48851587, -0.82215223, 0.17087277)
    power = np.zeros_like(t)
    for term in reversed(terms):
        power = power * t + term
    tail = 0.5 * t * np.exp(-x * x + power)
    return np.where(z > 0, 1 - tail, tail)


def two_sided(rng, n, middle, low, high):
    z = rng.standard_normal(n)
    return middle * np.exp(np.where(z > 0, z * np.log(high / middle), z * np.log(middle / low)) / SIGMAS)


class World:
    """The drawn boat."""

    def __init__(self, readings, n, rng):
        boat, papers = readings.values["boat"], readings.values["boat"]["rpm_from"] == "papers"
        self.boat = boat

        def relative(middle, share):
            return middle * (1 + share / SIGMAS * rng.standard_normal(n))

        def coefficient(name):
            field = fields.FIELD["boat." + name]
            low, high = (boat[name] * end / field.default for end in field.span)
            return np.clip(two_sided(rng, n, boat[name], low, high), 0, field.high if field.high < 1 else 9)

        self.wake, self.zeta = coefficient("wake_fraction"), coefficient("ram_loss")
        self.k_b, self.psi = coefficient("intake_loss"), coefficient("nozzle_loss")
        self.eta = coefficient("pump_efficiency") * coefficient("driveline_efficiency")
        self.nozzle = math.pi / 4 * relative(boat["nozzle_diameter"], 0.01) ** 2
        ring = relative(boat["impeller_diameter"], 0.01)
        share = boat["hub_diameter"] / boat["impeller_diameter"]
        measured = "boat.hub_diameter" in readings.given
        hub = ring * (relative(share, 0.01) if measured else two_sided(rng, n, share, 1 / 5, 1 / 2.5))
        self.inlet = math.pi / 4 * (ring**2 - hub**2)
        self.depth = boat["shaft_depth"] + 0.02 / SIGMAS * rng.standard_normal(n) - ring / 2
        self.power = relative(boat["engine_power"], 0.15 if papers else 0.05)
        self.wide_open = relative(boat["wide_open_rpm"], 0.05 if papers else 0.01)
        self.tach = relative(1.0, 0.02)

    def state(self, rpm, speed, pressure, temperature):
        """One unit: jet speed, flow, head, ln S asked, head asked times S^(4/3), thrust, power."""
        density = water.density(temperature)
        ratio = (1 + self.psi) + self.k_b * (self.nozzle / self.inlet) ** 2
        ram = (1 - self.zeta) * ((1 - self.wake) * speed) ** 2
        power = self.power / self.boat["jets"] * (rpm / self.wide_open) ** 3
        drive = 2 * self.eta * power / (density * self.nozzle)
        jet = np.sqrt((drive / ratio) ** (2 / 3) + ram / ratio)
        for _ in range(4):
            jet = jet - (ratio * jet**3 - ram * jet - drive) / (3 * ratio * jet**2 - ram)
        flow = self.nozzle * jet
        inlet_speed = flow / self.inlet
        head = (pressure - water.vapor_pressure(temperature, np)) / (density * GRAVITY) + self.depth
        head = head + ram / (2 * GRAVITY) - self.k_b * inlet_speed**2 / (2 * GRAVITY)
        asks = self.tach * rpm / self.boat["gear_ratio"] * np.sqrt(flow)
        x = np.where(head > 0, np.log(asks / np.maximum(head, 1e-9) ** 0.75), np.inf)
        thrust = density * flow * (jet - (1 - self.wake) * speed)
        return {
            "jet_speed": jet,
            "flow_rate": flow,
            "npsh_available": head,
            "x": x,
            "asks": asks,
            "thrust": thrust,
            "power": power,
        }

    def rpm_at(self, x, speed, pressure, temperature):
        """Engine rpm that asks ln S of x, by bisection."""
        low, high = np.full_like(self.wake, 20.0), np.full_like(self.wake, 30000.0)
        for _ in range(30):
            middle = (low + high) / 2
            over = self.state(middle, speed, pressure, temperature)["x"] > x
            low, high = np.where(over, low, middle), np.where(over, middle, high)
        return (low + high) / 2


def pressure_of(place):
    """Pressure at the water and its 95 % half-width [Pa]."""
    if "station_pressure" in place:
        return place["station_pressure"], 200.0
    altitude = place["altitude"]
    reach = 50.0 if place.get("altitude_from") == "phone" else 30.0
    by_altitude = (air.standard_pressure(altitude - reach) - air.standard_pressure(altitude + reach)) / 2
    if "altimeter_setting" in place:
        return air.station_pressure(place["altimeter_setting"], altitude), math.hypot(by_altitude, 200.0)
    return air.standard_pressure(altitude), by_altitude


def sample_limit(rng, n, bounds):
    """ln S drawn from its posterior in each draw: flat prior in ln omega 2 to 30, each note's likelihood."""
    low = np.full(n, math.log(2 * 52.919))
    high = np.full(n, max([math.log(30 * 52.919), *(float(np.median(x)) + 1 for _, x, _ in bounds)]))
    for below, x, sigma in bounds:  # six sigmas past a note nothing is left
        low = np.maximum(low, x - 6 * sigma) if below else low
        high = high if below else np.minimum(high, x + 6 * sigma)
    low = np.minimum(low, high - 1e-6)
    shares = (np.arange(GRID) + 0.5) / GRID
    out, at = np.empty(n), rng.random(n)
    for start in range(0, n, 10_000):
        rows = slice(start, start + 10_000)
        wide = (high - low)[rows, None]
        grid = low[rows, None] + shares * wide
        weight = np.ones_like(grid)
        for below, x, sigma in bounds:
            z = (grid - x[rows, None]) / sigma[rows, None]
            weight *= normal_share(z if below else -z) + 1e-30
        total = np.cumsum(weight, axis=1)
        total /= total[:, -1:]
        k = np.minimum((total < at[rows, None]).sum(axis=1), GRID - 1)
        index = np.arange(len(k))
        before = np.where(k > 0, total[index, np.maximum(k - 1, 0)], 0.0)
        inside = (at[rows] - before) / np.maximum(total[index, k] - before, 1e-300)
        out[rows] = grid[index, k] + (inside - 0.5) * wide[:, 0] / GRID
    return out


def draw(case, n=100_000, seed=1, lines=True):
    """Draw a case n times.

    :param lines: also solve for the rpm that lets go and for each note's equivalent
    """
    rng = np.random.default_rng(seed)
    readings = fields.read(case)
    assert readings.errors == []
    boat, place, plan = (readings.values[part] for part in ("boat", "place", "plan"))
    world, speed = World(readings, n, rng), plan["boat_speed"]
    pressure, reach = pressure_of(place)
    error = reach / SIGMAS * rng.standard_normal(n)
    here = pressure + error
    temperature = np.maximum(place["water_temperature"] + rng.standard_normal(n) / SIGMAS, 273.15)
    if "power" in plan:
        rpm = (plan["power"] / boat["jets_running"] / (world.power / boat["jets"])) ** (
            1 / 3
        ) * world.wide_open
    else:
        # ISO 1585 for a petrol engine in dry standard air, power as torque^e where it meets the jet.
        standard = 288.15 * (pressure / 101325) ** 0.1902632
        torque = (pressure / 101325) ** 1.2 * (288.15 / standard) ** 0.6
        e = 1.25 + 0.25 / SIGMAS * rng.standard_normal(n)
        rpm = plan.get("throttle", 1.0) * boat["wide_open_rpm"] * torque ** (e / 3)
        rpm = np.full(n, plan["rpm"]) if "rpm" in plan else rpm
    rpm = rpm * (1 + 0.01 / SIGMAS * rng.standard_normal(n))
    state = world.state(rpm, speed, here, temperature)

    seen = []
    for note in readings.values["notes"]:
        if "boat_speed" not in note:
            continue
        there, its_reach = pressure_of(note)
        keys = ("station_pressure", "altimeter_setting")
        same = not any(key in place or key in note for key in keys) and note["altitude"] == place["altitude"]
        pressure_there = there + (error if same else 0.0)
        warm = np.full(n, note["water_temperature"])
        made = world.state(np.full(n, note["rpm"]), note["boat_speed"], pressure_there, warm)
        nudged = world.state(np.full(n, note["rpm"] * 1.0001), note["boat_speed"], pressure_there, warm)
        with np.errstate(invalid="ignore"):  # a draw without head has no slope and no say
            slope = np.nan_to_num((nudged["x"] - made["x"]) / math.log(1.0001), nan=2.0)
        rise = water.vapor_pressure(note["water_temperature"] + 1) - water.vapor_pressure(
            note["water_temperature"]
        )
        place_head = math.hypot(0.0 if same else its_reach, rise) / (
            water.density(note["water_temperature"]) * GRAVITY
        )
        own = np.hypot(slope * 0.005, 0.75 * place_head / SIGMAS / made["npsh_available"])
        seen.append((note, made, own, note["boat_speed"] or speed))

    def spread(made, own, running, other):
        apart = np.log(made["flow_rate"] / made["rpm"] / other) if running else 0.0
        return np.hypot(own, apart)

    for note, made, _, _ in seen:
        made["rpm"] = note["rpm"]
    q_over_n = state["flow_rate"] / rpm
    bounds = [
        (n_["outcome"] != "let_go", m["x"], spread(m, own, runs, q_over_n)) for n_, m, own, runs in seen
    ]
    fixed = boat.get("suction_specific_speed")
    limit = np.full(n, math.log(fixed)) if fixed else sample_limit(rng, n, bounds)
    ratio = np.exp(np.minimum(4 / 3 * (limit - state["x"]), 50.0))
    required = (state["asks"] / np.exp(limit)) ** (4 / 3)
    z = rng.standard_normal(n)
    deduction = np.where(z > 0, 0.05 * z, 0.08 * z) / SIGMAS
    values = {
        "jet_speed": state["jet_speed"],
        "flow_rate": state["flow_rate"],
        "npsh_available": state["npsh_available"],
        "thrust": boat["jets_running"] * state["thrust"] * (1 - deduction),
        "planned_power": boat["jets_running"] * state["power"],
        "suction_specific_speed_asked": np.exp(state["x"]),
        "npsh_required": required,
        "margin": state["npsh_available"] - required,
        "ratio": ratio,
        "suction_specific_speed": np.exp(limit),
    }
    equivalents = []
    if lines:
        values["let_go_rpm"] = world.rpm_at(limit, speed, here, temperature)
        for _, made, own, runs in seen:
            found = world.rpm_at(made["x"], speed, here, temperature)
            there = world.state(found, speed, here, temperature)["flow_rate"] / found
            blurred = made["x"] + spread(made, own, runs, there) * rng.standard_normal(n)
            equivalents.append(world.rpm_at(blurred, speed, here, temperature))
    return Draws(values, equivalents, float(np.mean(ratio < 1)))
