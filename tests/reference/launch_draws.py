"""Draws of one launch: hull, jet and run typed once more on arrays; S and the drag learned again in each.

Beside what monte_carlo draws: each weight, the beam, the balance point, the thrust deduction, the water
column in the intake, the drag's allowance out of its own posterior, the drag of this launch against the last,
the feed-in by hand, the current. Nothing of the core's hull, launch, tried or trial is used.
"""

import math
from typing import NamedTuple

import numpy as np
from monte_carlo import GRAVITY, SIGMAS, World, normal_share, pressure_of, sample_limit, two_sided

from headwater import fields, water

ROWS = {"back": 0.30, "middle": 0.45, "front": 0.60}
WINDS = {"calm": 0.0, "breeze": 5.0, "strong": 12.0}
SPEEDS = 26  # of the drag curve
GRID = 120  # of the allowance


class LaunchDraws(NamedTuple):
    """Results of each draw."""

    planes: np.ndarray
    time: np.ndarray  # infinite where she never planes
    distance: np.ndarray  # over ground
    least_ratio: np.ndarray
    failing: float  # share of draws that let go, never plane, or are not up within the room
    limit: np.ndarray  # ln S
    allowance: np.ndarray


class Hull(NamedTuple):
    first: np.ndarray  # speed at Fn_v = 1
    step: np.ndarray
    nodes: np.ndarray  # M D, one row a draw
    mass: np.ndarray


def savitsky(beam, deadrise, lcg, mass, speed, rho, mu):
    """Drag in balance: trim by halving, wetted length and lift by Newton's method."""
    vcg, below, beta = 0.28 * beam, 0.2, np.radians(deadrise)
    c_v2 = speed**2 / (GRAVITY * beam)
    c_lb = mass * GRAVITY / (0.5 * rho * speed**2 * beam**2)
    c_l0 = c_lb + 0.0065 * deadrise * c_lb**0.6
    for _ in range(20):
        c_l0 = c_lb + 0.0065 * deadrise * c_l0**0.6
    low, high = np.full_like(c_lb, math.log(0.1)), np.full_like(c_lb, math.log(30.0))

    def at(log_tau):
        tau = np.exp(log_tau)
        y = c_l0 / tau**1.1
        lam = np.minimum((y / 0.012) ** 2, (y * c_v2 / 0.0055) ** 0.4)
        for _ in range(6):
            f = 0.012 * lam**0.5 + 0.0055 * lam**2.5 / c_v2 - y
            lam = lam - f / (0.006 * lam**-0.5 + 0.01375 * lam**1.5 / c_v2)
            lam = np.maximum(lam, 1e-6)
        c_ld = 0.012 * lam**0.5 * tau**1.1
        angle = np.radians(tau)
        share = 1 - (c_ld - 0.0065 * deadrise * c_ld**0.6) / (lam * np.cos(angle))
        v_m = speed * np.sqrt(np.maximum(share, 0.01))
        re = v_m * lam * beam * rho / mu
        c_f = 0.075 / (np.log10(re) - 2) ** 2 + 0.0004
        d_f = rho * v_m**2 * lam * beam**2 * c_f / (2 * np.cos(beta))
        c = lcg - (0.75 - 1 / (5.21 * c_v2 / lam**2 + 2.39)) * lam * beam
        a = vcg - beam / 4 * np.tan(beta)
        sine, cosine = np.sin(angle), np.cos(angle)
        turn = mass * GRAVITY * ((1 - sine * sine) * c / cosine - below * sine) + d_f * (a - below)
        return turn, mass * GRAVITY * sine / cosine + d_f / cosine

    for _ in range(22):
        middle = (low + high) / 2
        over = at(middle)[0] > 0
        low, high = np.where(over, low, middle), np.where(over, middle, high)
    return at((low + high) / 2)[1]


class LaunchWorld(World):
    """The drawn boat with its hull."""

    def __init__(self, readings, n, rng):
        super().__init__(readings, n, rng)
        boat, place = self.boat, readings.values["place"]
        normal = rng.standard_normal
        self.n = n
        self.dry = boat["dry_mass"] * (1 + 0.05 / SIGMAS * normal(n))
        self.beam = boat["chine_beam"] * (1 + 0.01 / SIGMAS * normal(n))
        self.length = boat["hull_length"]
        far = 0.01 if "boat.centre_of_gravity" in readings.given else 0.03
        self.balance = boat["centre_of_gravity"] + far * self.length / SIGMAS * normal(n)
        self.column = two_sided(rng, n, 0.6, 0.3, 1.0)
        z = normal(n)
        self.deduction = np.where(z > 0, 0.05 * z, 0.08 * z) / SIGMAS
        self.rho = water.density(place["water_temperature"])
        self.mu = water.viscosity(place["water_temperature"])
        pressure = pressure_of(place)[0]
        self.air = pressure / (287.042 * 288.15 * (pressure / 101325) ** 0.1902632)

    def hull(self, loads):
        """The drag curve with these loads, (mass, share of the length) each."""
        mass = self.dry + sum(load for load, _ in loads)
        lcg = (self.dry * self.balance + sum(load * share * self.length for load, share in loads)) / mass
        first = np.sqrt(GRAVITY * np.cbrt(mass / self.rho))
        number = np.linspace(1.0, 3.6, SPEEDS)
        speed = first[:, None] * number
        column = (self.beam[:, None], math.degrees(self.boat["deadrise"]), lcg[:, None], mass[:, None])
        drag = savitsky(*column, speed, self.rho, self.mu)
        share = (lcg / self.beam)[:, None]
        past = number - 0.85
        factor = 0.98 + 2 * share**1.45 * np.exp(-2 * past) - 3 * share * np.exp(-3 * past)
        return Hull(first, 2.6 * first / (SPEEDS - 1), drag * factor, mass)

    def drag(self, hull, speed):
        place = np.clip((speed - hull.first) / hull.step, 0, SPEEDS - 1.001)
        k = place.astype(int)
        part, row = place - k, np.arange(self.n)
        line = hull.nodes[row, k] + part * (hull.nodes[row, k + 1] - hull.nodes[row, k])
        return line * np.minimum(speed / hull.first, 1) ** 2

    def run(self, hull, allowance, rpm, feed, wind, jets, head, rho, until=120.0, dt=0.1):
        """Time and distance through the water to the plane, and the most S asked with its Q/N; from rest."""
        area, over = self.nozzle, self.nozzle / self.inlet
        a = (1 + self.psi) + self.k_b * over**2
        feed = np.maximum(feed, 0.5)
        per = self.power / self.boat["jets"] / self.wide_open**3 * 2 * self.eta / (rho * area)
        plane = 2.8 * hull.first
        speed, place = np.zeros(self.n), np.zeros(self.n)
        time, distance = np.full(self.n, np.inf), np.full(self.n, np.inf)
        hardest, turned = np.full(self.n, -np.inf), np.ones(self.n)
        before, stalled = None, np.zeros(self.n, bool)
        t = 0.0
        while t < until:
            n = np.minimum(700 + (rpm - 700) * t / feed, rpm)
            ram = (1 - self.zeta) * ((1 - self.wake) * speed) ** 2
            drive = per * n**3
            jet = np.sqrt((drive / a) ** (2 / 3) + ram / a)
            for _ in range(3):
                jet = jet - (a * jet**3 - ram * jet - drive) / (3 * a * jet**2 - ram)
            flow = area * jet
            push = jets * rho * flow * (jet - (1 - self.wake) * speed) * (1 - self.deduction)
            against = allowance * self.drag(hull, speed) + 0.5 * self.air * 2.4 * (speed + wind) ** 2
            gain = (push - against) / (1.05 * hull.mass)
            v_1 = flow / self.inlet
            rise = 0.0 if before is None else (v_1 - before) / dt
            before = v_1
            available = head + (ram - self.k_b * v_1**2) / (2 * GRAVITY) - self.column / GRAVITY * rise
            settled = t > feed
            watched = ~((time < np.inf) & settled)
            asks = self.tach * n / self.boat["gear_ratio"] * np.sqrt(flow)
            x = np.where(available > 0, np.log(asks / np.maximum(available, 1e-9) ** 0.75), np.inf)
            more = watched & (x > hardest)
            hardest, turned = np.where(more, x, hardest), np.where(more, flow / n, turned)
            stalled |= settled & (gain < 0.005) & (time == np.inf)
            faster = np.maximum(speed + gain * dt, 0)
            ahead = place + (speed + faster) / 2 * dt
            up = (faster >= plane) & (time == np.inf) & ~stalled
            part = (plane - speed) / np.maximum(faster - speed, 1e-9)
            time = np.where(up, t + part * dt, time)
            distance = np.where(up, place + part * (ahead - place), distance)
            speed, place, t = faster, ahead, t + dt
            if np.all(settled & ((time < np.inf) | stalled)):
                break
        return time, distance, hardest, turned


def draw_launch(case, rpm, feed_in, direction, n=500, seed=1):
    """Draw a launch n times.

    :param rpm: planned
    :param feed_in: planned [s]
    :param direction: up or down
    """
    rng = np.random.default_rng(seed)
    normal = rng.standard_normal
    readings = fields.read(case)
    assert readings.errors == []
    boat, place, plan = (readings.values[part] for part in ("boat", "place", "plan"))
    world = LaunchWorld(readings, n, rng)
    pressure, reach = pressure_of(place)
    error = reach / SIGMAS * normal(n)
    warm = np.maximum(place["water_temperature"] + normal(n) / SIGMAS, 273.15)
    rho = water.density(warm)
    head = (pressure + error - water.vapor_pressure(warm, np)) / (rho * GRAVITY) + world.depth

    def weight(mass):
        return mass * (1 + 0.05 / SIGMAS * normal(n))

    row, cargo = ROWS[plan["rows"]], 0.40
    loads = [(weight(85.0 * plan["people"]), row), (weight(740.0 * plan["fuel"]), cargo)]
    hull = world.hull([*loads, (weight(plan["gear"]), cargo)])
    shallow = place.get("depth", 99) < 1

    # The drag's allowance, and what the launches asked of the pump.
    grid = np.linspace(math.log(0.2), math.log(4.0), GRID)
    top = 1.8 if shallow else 1.35
    z = np.where(grid > math.log(1.07), (grid - math.log(1.07)) / math.log(top / 1.07),
                 (math.log(1.07) - grid) / math.log(1.07 / 0.85)) * SIGMAS  # fmt: skip
    chance = np.tile(np.exp(-0.5 * z**2), (n, 1))
    bounds = []  # below, ln S, own sigma, Q/N or none where made at rest
    for note in readings.values["notes"]:
        there, its_reach = pressure_of(note)
        celsius = note["water_temperature"]
        density = water.density(celsius)
        rise = water.vapor_pressure(celsius + 1) - water.vapor_pressure(celsius)
        same = note.get("altitude") == place.get("altitude")
        off = math.hypot(0.0 if same else its_reach, rise) / (density * GRAVITY)
        if note["outcome"] in ("planed", "would_not_plane"):
            then = world.hull([(np.full(n, note["load"]), ROWS[note["rows"]])])
            base = (there - water.vapor_pressure(celsius)) / (density * GRAVITY) + world.depth
            if same:
                base = base + error / (density * GRAVITY)
            wind, jets = WINDS[note["wind"]], boat["jets"]
            feed = note.get("feed_in", 0.5)

            def made(a, rpm, feed, until=120.0, *given):
                return world.run(given[0], a, rpm, feed, *given[1:], until=until)

            given = (then, wind, jets, base, density)
            if note["outcome"] == "planed":
                low, high = np.full(n, math.log(0.3)), np.full(n, math.log(4.0))
                for _ in range(9):
                    middle = (low + high) / 2
                    quick = made(np.exp(middle), note["rpm"], feed, note["seconds"] + 0.2, *given)[0]
                    slow = quick > note["seconds"]
                    low, high = np.where(slow, low, middle), np.where(slow, middle, high)
                a = np.exp((low + high) / 2)
                took, _, hardest, turned = made(a, note["rpm"], feed, 120.0, *given)
                less = made(0.97 * a, note["rpm"], feed, 120.0, *given)[0]
                later = made(a, note["rpm"], feed + 0.5, 120.0, *given)
                harder = made(a, note["rpm"] * 1.01, feed, 120.0, *given)
                with np.errstate(invalid="ignore", divide="ignore"):
                    slope = np.log(took / less) / -math.log(0.97)
                    slope = np.clip(np.nan_to_num(slope, nan=20, posinf=20), 0.2, 50)
                    apart = [np.abs(np.log(other[0] / took)) for other in (later, harder)]
                    apart = [np.nan_to_num(one, nan=1.0, posinf=1.0) for one in apart]
                by_load = 0.05 * 1.3 * note["load"] / then.mass
                parts = (0.15 / slope, apart[0] / slope, apart[1] / slope, by_load, 0.10 + 0 * slope)
                sigma = np.sqrt(sum(part**2 for part in parts)) / SIGMAS
                chance *= np.exp(-0.5 * ((grid - np.log(a)[:, None]) / sigma[:, None]) ** 2)
                own = np.hypot((harder[2] - hardest) / 2, (later[2] - hardest) / SIGMAS)
                bounds.append((True, hardest, np.hypot(own, 0.75 * off / SIGMAS / 9), turned))
            else:
                low, high = np.full(n, math.log(0.3)), np.full(n, math.log(4.0))
                for _ in range(9):
                    middle = (low + high) / 2
                    never = made(np.exp(middle), note["rpm"], 2.0, 120.0, *given)[0] == np.inf
                    low, high = np.where(never, low, middle), np.where(never, middle, high)
                by_load = 0.05 * 1.3 * note["load"] / then.mass
                sigma = np.sqrt(0.10**2 + by_load**2 + 0.02**2) / SIGMAS
                chance *= normal_share((grid - low[:, None]) / sigma[:, None])
            continue
        state = world.state(np.full(n, note["rpm"]), note["boat_speed"],
                            there + (error if same else 0.0), np.full(n, celsius))  # fmt: skip
        nudged = world.state(np.full(n, note["rpm"] * 1.0001), note["boat_speed"],
                             there + (error if same else 0.0), np.full(n, celsius))  # fmt: skip
        with np.errstate(invalid="ignore"):
            slope = np.nan_to_num((nudged["x"] - state["x"]) / math.log(1.0001), nan=2.0)
        own = np.hypot(slope * 0.005, 0.75 * off / SIGMAS / state["npsh_available"])
        turned = state["flow_rate"] / note["rpm"]
        bounds.append((note["outcome"] != "let_go", state["x"], own, turned))
    total = np.cumsum(chance + 1e-300, axis=1)
    total /= total[:, -1:]
    k = np.minimum((total < rng.random(n)[:, None]).sum(axis=1), GRID - 1)
    allowance = np.exp(grid[k] + (rng.random(n) - 0.5) * (grid[1] - grid[0]) + 0.10 / SIGMAS * normal(n))

    turning = rpm * (1 + 0.01 / SIGMAS * normal(n))
    feed = np.maximum(feed_in + 0.5 / SIGMAS * normal(n), 0.5)
    time, through, hardest, turned = world.run(
        hull, allowance, turning, feed, WINDS[place["wind"]], boat["jets_running"], head, rho
    )
    spread = [(below, x, np.hypot(own, np.log(other / turned))) for below, x, own, other in bounds]
    fixed = boat.get("suction_specific_speed")
    limit = np.full(n, math.log(fixed)) if fixed else sample_limit(rng, n, spread)
    current = (-1 if direction == "up" else 1) * place["current"] * (1 + 0.15 / SIGMAS * normal(n))
    planes = time < np.inf
    with np.errstate(invalid="ignore"):
        distance = np.where(planes, through + current * time, np.inf)
    ratio = np.exp(np.minimum(4 / 3 * (limit - hardest), 50.0))
    fits = planes
    if "room" in place:
        room = place["room"] - 5 * boat["hull_length"]
        room -= 10 if place.get("below") in ("rapid", "rocks") else 0
        fits = distance <= room
    failing = float(np.mean((ratio < 1) | ~fits))
    return LaunchDraws(planes, time, distance, ratio, failing, limit, allowance)
