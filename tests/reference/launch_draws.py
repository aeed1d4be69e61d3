"""Draws of one launch: hull, jet and run typed once more on arrays, drag and S learned again in each draw.

Beside what monte_carlo.World draws: each weight, beam, length and balance point of the hull, the thrust
deduction, the water column in the intake, the plan's rpm reading and feed-in by hand, the current, the drag
of this launch against the last, the drag's allowance out of its own posterior. Nothing of the core's hull,
jet, suction, engine, launch or doubt is used. Tolerances are 95 % half-widths [P].
"""

import math
from typing import NamedTuple

import numpy as np
from monte_carlo import GRAVITY, SIGMAS, World, normal_share, pressure_of, sample_limit, two_sided

from headwater import fields, water

ROWS = {"back": 0.30, "middle": 0.45, "front": 0.60}  # of the length [P]
CARGO = 0.40  # where fuel and gear lie, of the length [P]
WINDS = {"calm": 0.0, "breeze": 5.0, "strong": 12.0}  # m/s [P]
PERSON, PETROL = 85.0, 740.0  # kg, kg/m3 [P]
IDLE, LEAST_FEED = 700.0, 0.5  # rpm, s [P]
ADDED, PLANE, STALL, LONGEST = 1.05, 2.8, 0.005, 180.0  # m_e/m, Fn_v on plane, m/s2, s [P]
WINDAGE = 2.4  # C_d A [m2] [P]
ALLOWANCE = (1.07, 0.85, 1.35, 1.8)  # median, 95 % ends, upper end under a metre of water [P]
SHALLOW = 1.0  # m
NODES = 24  # of the drag curve
GRID = 300  # of the allowance's posterior


class LaunchDraws(NamedTuple):
    """Results of each draw, and the share that fails."""

    planes: np.ndarray
    time: np.ndarray  # to plane [s], nan where she never planes
    distance: np.ndarray  # over ground [m], nan where she never planes
    least_ratio: np.ndarray  # NPSHA over NPSHR while watched
    fits: np.ndarray  # on plane within the room for it
    failing: float
    drag_allowance: np.ndarray  # this launch's own
    limit: np.ndarray  # ln S


class Hull(NamedTuple):
    """A loaded hull's drag in still deep water, by speed."""

    first: np.ndarray  # speed at volume Froude number 1 [m/s]
    drag: np.ndarray  # M D at NODES speeds from first up, one row a draw [N]
    mass: np.ndarray


class Trip(NamedTuple):
    """A run from rest."""

    time: np.ndarray  # to plane, infinite where never
    distance: np.ndarray  # through the water
    hardest: np.ndarray  # ln of the largest S asked
    turned: np.ndarray  # Q/N then
    moment: np.ndarray  # and when


def ittc(reynolds):
    """ITTC-57 friction line [V]."""
    return 0.075 / (np.log10(reynolds) - 2) ** 2


def hump(froude, balance):
    """Blount and Fox 1976 [V]: hump drag over Savitsky's, balance being LCG/b."""
    x = froude - 0.85
    return 0.98 + 2 * balance**1.45 * np.exp(-2 * x) - 3 * balance * np.exp(-3 * x)


def savitsky(beam, deadrise, lcg, vcg, mass, speed, rho, mu, thrust_arm=0.2, rough=0.0004):
    """Savitsky 1964 [V] in balance, thrust along the keel: trim in degrees, lambda and drag; deadrise too."""
    weight, c_v = mass * GRAVITY, speed / np.sqrt(GRAVITY * beam)
    c_lb = weight / (0.5 * rho * speed**2 * beam**2)
    c_l0 = c_lb + 0.0065 * deadrise * c_lb**0.6
    for _ in range(6):
        off = c_l0 - 0.0065 * deadrise * c_l0**0.6 - c_lb
        c_l0 = np.maximum(c_l0 - off / (1 - 0.0039 * deadrise * c_l0**-0.4), c_lb)
    slope, height = np.tan(np.radians(deadrise)), np.cos(np.radians(deadrise))
    arm = vcg - beam / 4 * slope

    def at(trim):
        lift = trim**1.1
        # Convex in lambda from here down: the larger single-term root lies above both terms' own.
        wanted = c_l0 / lift
        lam = np.minimum((wanted / 0.0120) ** 2, (wanted * c_v**2 / 0.0055) ** 0.4)
        for _ in range(5):
            root = np.sqrt(lam)
            steep = 0.0055 * root**3 / c_v**2
            lam = lam - (0.0120 * root + steep * lam - wanted) / (0.0060 / root + 2.5 * steep)
            lam = np.maximum(lam, 1e-6)
        sine, cosine = np.sin(np.radians(trim)), np.cos(np.radians(trim))
        c_ld = 0.0120 * np.sqrt(lam) * lift
        mean = speed * np.sqrt(np.maximum(1 - (c_ld - 0.0065 * deadrise * c_ld**0.6) / (lam * cosine), 0.01))
        friction = ittc(mean * lam * beam * rho / mu) + rough
        rubbing = rho * mean**2 * lam * beam**2 * friction / (2 * height)
        ahead = lcg - (0.75 - 1 / (5.21 * c_v**2 / lam**2 + 2.39)) * lam * beam
        turn = weight * ((1 - sine**2) * ahead / cosine - thrust_arm * sine) + rubbing * (arm - thrust_arm)
        return turn, lam, weight * sine / cosine + rubbing / cosine

    low, high = np.full_like(c_lb, 0.1), np.full_like(c_lb, 30.0)
    for _ in range(19):
        middle = (low + high) / 2
        over = at(middle)[0] > 0
        low, high = np.where(over, low, middle), np.where(over, middle, high)
    trim = (low + high) / 2
    return trim, *at(trim)[1:]


NUMBERS = np.linspace(1.0, 3.3, NODES)
SPACING = float(NUMBERS[1] - NUMBERS[0])


def hull_of(beam, deadrise, lcg, mass, rho, mu, vcg=None):
    """The drag curve of hulls; VCG 0.28 b [P] where none is given."""
    first = np.sqrt(GRAVITY * np.cbrt(mass / rho))
    columns = [one[:, None] for one in (beam, lcg, 0.28 * beam if vcg is None else vcg, mass)]
    wide, balance, high, heavy = columns
    speed = first[:, None] * NUMBERS
    drag = savitsky(wide, deadrise, balance, high, heavy, speed, rho, mu)[2]
    return Hull(first, drag * hump(NUMBERS, balance / wide), mass)


def drag_at(hull, speed):
    """Between the nodes by a parabola [D], the square of the speed below the first [P]."""
    place = np.clip((speed / hull.first - 1) / SPACING, 0, NODES - 2.001)
    k = place.astype(int)
    index = np.arange(len(hull.first)) * NODES + k
    low, high, next_one = (hull.drag.ravel()[index + step] for step in (0, 1, 2))
    part = place - k
    bend = part * (part - 1) / 2 * (next_one - 2 * high + low)
    return (low + part * (high - low) + bend) * np.minimum(speed / hull.first, 1) ** 2


def travel(gain, plane, feed, watch=None, until=LONGEST, step=0.15):
    """A run by Heun's method; the steps end on the throttle's own end, where most is asked.

    gain(t, V, rising) is the acceleration, watch(t, V, dV/dt, rising) what is asked, ln S and Q/N.
    """
    n = len(plane)
    speed, place = np.zeros(n), np.zeros(n)
    time, distance = np.full(n, np.inf), np.full(n, np.inf)
    hardest, turned, moment = np.full(n, -np.inf), np.ones(n), np.zeros(n)
    stuck = np.zeros(n, bool)
    feeding = max(math.ceil(float(np.max(feed)) / step), 6)
    now = np.zeros(n)

    def look(rising, pull, over):
        nonlocal hardest, turned, moment
        asked, at = watch(now, speed, pull, rising)
        more = over & (asked > hardest)
        hardest, turned = np.where(more, asked, hardest), np.where(more, at, turned)
        moment = np.where(more, now, moment)

    for k in range(feeding + math.ceil(until / step)):
        rising = k < feeding
        dt = feed / feeding if rising else step
        if k == feeding:
            now = feed + 0.0
        here = gain(now, speed, rising)
        if watch:
            if k == feeding:  # the last instant of the rising throttle
                look(True, gain(now, speed, True), np.ones(n, bool))
            look(rising, here, np.full(n, rising) | (time == np.inf) & ~stuck)
        waiting = time == np.inf
        if not rising:
            stuck |= waiting & (here < STALL)
            if np.all(stuck | ~waiting | (now > until)):
                break
        guess = np.maximum(speed + here * dt, 0)
        there = gain(now + dt, guess, rising)
        faster = np.maximum(speed + (here + there) / 2 * dt, 0)
        up = waiting & ~stuck & (faster >= plane)
        part = (plane - speed) / np.where(up, faster - speed, 1.0)
        time = np.where(up, now + part * dt, time)
        distance = np.where(up, place + part * dt * (speed + plane) / 2, distance)
        place = place + dt * (speed + faster) / 2
        speed, now = faster, now + dt
    late = time > until
    return Trip(np.where(late, np.inf, time), np.where(late, np.inf, distance), hardest, turned, moment)


class LaunchWorld(World):
    """The drawn boat with its hull."""

    def __init__(self, readings, n, rng):
        super().__init__(readings, n, rng)
        boat, normal = self.boat, rng.standard_normal
        self.n, self.deadrise = n, math.degrees(boat["deadrise"])
        self.dry = boat["dry_mass"] * (1 + 0.05 / SIGMAS * normal(n))
        self.beam = boat["chine_beam"] * (1 + 0.01 / SIGMAS * normal(n))
        self.length = boat["hull_length"] * (1 + 0.01 / SIGMAS * normal(n))
        sure = 0.01 if "boat.centre_of_gravity" in readings.given else 0.03
        self.balance = boat["centre_of_gravity"] + sure * boat["hull_length"] / SIGMAS * normal(n)
        self.column = two_sided(rng, n, 0.6, 0.3, 1.0)
        z = normal(n)
        self.deduction = np.where(z > 0, 0.05 * z, 0.08 * z) / SIGMAS

    def loaded(self, loads, rho, mu):
        """The hull with loads of (mass, share of the length)."""
        mass, turn = self.dry, self.dry * self.balance
        for load, share in loads:
            mass, turn = mass + load, turn + load * share * self.length
        return hull_of(self.beam, self.deadrise, turn / mass, mass, rho, mu)

    def jet(self, rpm, speed, rho):
        """Jet speed of one unit by the cubic power balance, and what it rests on."""
        ratio = (1 + self.psi) + self.k_b * (self.nozzle / self.inlet) ** 2
        ram = (1 - self.zeta) * ((1 - self.wake) * speed) ** 2
        drive = (
            2 * self.eta * self.power / self.boat["jets"] * (rpm / self.wide_open) ** 3 / (rho * self.nozzle)
        )
        jet = np.sqrt(np.cbrt(drive / ratio) ** 2 + ram / ratio)
        for _ in range(3):
            jet = jet - (ratio * jet**3 - ram * jet - drive) / (3 * ratio * jet**2 - ram)
        return jet, ratio, ram, drive

    def go(self, hull, allowance, rpm, feed, wind, jets, head, rho, rho_air, look=True, until=LONGEST):
        """The run of a launch with a linear throttle."""
        feed = np.maximum(np.broadcast_to(feed, (self.n,)), LEAST_FEED).astype(float)
        rpm = np.broadcast_to(rpm, (self.n,)).astype(float)
        opening = (rpm - IDLE) / feed
        inertia = ADDED * hull.mass

        def turning(now, rising):
            return IDLE + opening * now if rising else rpm

        def gain(now, speed, rising):
            jet = self.jet(turning(now, rising), speed, rho)[0]
            push = jets * rho * self.nozzle * jet * (jet - (1 - self.wake) * speed) * (1 - self.deduction)
            against = allowance * drag_at(hull, speed) + 0.5 * rho_air * WINDAGE * (speed + wind) ** 2
            return (push - against) / inertia

        def watch(now, speed, pull, rising):
            n = turning(now, rising)
            jet, ratio, ram, drive = self.jet(n, speed, rho)
            # dV_j/dt out of ratio V_j^3 - ram V_j = drive, as throttle and boat speed move [D].
            ram_rate = 2 * (1 - self.zeta) * (1 - self.wake) ** 2 * speed * pull
            drive_rate = drive * 3 * opening / n if rising else 0.0
            jet_rate = (drive_rate + ram_rate * jet) / (3 * ratio * jet**2 - ram)
            over, flow = self.nozzle / self.inlet, self.nozzle * jet
            column = self.column / GRAVITY * jet_rate * over
            left = head + (ram - self.k_b * (over * jet) ** 2) / (2 * GRAVITY) - column
            asks = self.tach * n / self.boat["gear_ratio"] * np.sqrt(flow)
            with np.errstate(divide="ignore"):
                asked = np.where(left > 0, np.log(asks / np.maximum(left, 1e-9) ** 0.75), np.inf)
            return asked, flow / n

        return travel(gain, PLANE * hull.first, feed, watch if look else None, until)

    def most_allowance(self, hull, rpm, wind, jets, rho, rho_air):
        """The allowance that just leaves the settled throttle no acceleration somewhere on the way [D]."""
        least = np.full(self.n, np.inf)
        for number in np.linspace(0.8, PLANE, 41):
            speed = number * hull.first
            jet = self.jet(rpm, speed, rho)[0]
            push = jets * rho * self.nozzle * jet * (jet - (1 - self.wake) * speed) * (1 - self.deduction)
            spare = push - 0.5 * rho_air * WINDAGE * (speed + wind) ** 2 - STALL * ADDED * hull.mass
            least = np.minimum(least, spare / drag_at(hull, speed))
        return np.maximum(least, 0.05)


class Waters(NamedTuple):
    """A place as a launch meets it, on the central readings but for the pressure."""

    head: np.ndarray
    rho: float
    mu: float
    rho_air: float


def _waters(world, pressure, celsius_kelvin, error):
    rho, vapor = water.density(celsius_kelvin), water.vapor_pressure(celsius_kelvin)
    standard = 288.15 * (pressure / 101325) ** 0.1902632  # of the standard atmosphere at that pressure
    head = (pressure + error - vapor) / (rho * GRAVITY) + world.depth
    return Waters(head, rho, water.viscosity(celsius_kelvin), pressure / (287.042 * standard))


def _same_place(one, other):
    """Whether two altitudes without a barometer are the same reading, whose error they share."""
    keys = ("station_pressure", "altimeter_setting")
    return not any(key in one or key in other for key in keys) and one["altitude"] == other["altitude"]


def _planed(world, note, there):
    """A note's allowance, its one sigma in the logarithm, and its run at that allowance."""
    jets, wind = world.boat["jets"], WINDS[note["wind"]]
    feed = max(note["feed_in"], LEAST_FEED)

    def hull(share):
        load = np.full(world.n, share * note["load"])
        return world.loaded([(load, ROWS[note["rows"]])], there.rho, there.mu)

    own = hull(1.0)

    def run(a, rpm=note["rpm"], feed=feed, hull=own, look=False, until=LONGEST):
        return world.go(hull, a, rpm, feed, wind, jets, there.head, there.rho, there.rho_air, look, until)

    low, high = np.full(world.n, math.log(0.3)), np.full(world.n, math.log(4.0))
    for _ in range(11):
        middle = (low + high) / 2
        slow = run(np.exp(middle), until=note["seconds"]).time > note["seconds"]
        low, high = np.where(slow, low, middle), np.where(slow, middle, high)
    a = np.exp(low)  # the side that does plane
    made = run(a, look=True)
    easier, quicker, lighter = (
        run(0.98 * a),
        run(a, rpm=1.01 * note["rpm"], look=True),
        run(a, hull=hull(0.95)),
    )
    later = run(a, feed=feed + 0.5, look=True)

    def moved(trip):
        return np.minimum(
            np.abs(np.log(np.minimum(trip.time, LONGEST) / np.minimum(made.time, LONGEST))), 5.0
        )

    slope = np.maximum(moved(easier) / -math.log(0.98), 0.05)
    parts = (0.15, moved(later), moved(quicker), moved(lighter))  # of time, for each reading's half-width
    sigma = np.sqrt(0.10**2 + sum((part / slope) ** 2 for part in parts)) / SIGMAS
    asked = np.hypot((quicker.hardest - made.hardest) / 2, (later.hardest - made.hardest) / SIGMAS)
    return a, sigma, made, asked


def _would_not(world, note, there):
    """The allowance at which she just would not plane, and its one sigma in the logarithm."""
    jets, wind = world.boat["jets"], WINDS[note["wind"]]

    def most(rpm, share):
        load = np.full(world.n, share * note["load"])
        hull = world.loaded([(load, ROWS[note["rows"]])], there.rho, there.mu)
        return world.most_allowance(hull, rpm, wind, jets, there.rho, there.rho_air)

    a = most(note["rpm"], 1.0)
    parts = (most(1.01 * note["rpm"], 1.0), most(note["rpm"], 1.05))
    return a, np.sqrt(0.10**2 + sum(np.log(part / a) ** 2 for part in parts)) / SIGMAS


def prior(grid, shallow):
    """Two half normals in ln a that meet at the median, half of the chance on each side."""
    median, low, deep, wide = ALLOWANCE
    up, down = math.log((wide if shallow else deep) / median) / SIGMAS, math.log(median / low) / SIGMAS
    off = grid - math.log(median)
    sigma = np.where(off > 0, up, down)
    return np.exp(-0.5 * (off / sigma) ** 2) / sigma


def sample_allowance(rng, n, shallow, seen):
    """The drag's allowance out of its posterior in each draw; seen holds (planed, a, one sigma)."""
    grid = np.linspace(math.log(0.4), math.log(4.5), GRID)
    logs = np.tile(np.log(prior(grid, shallow) + 1e-300), (n, 1))
    for planed, a, sigma in seen:
        z = (grid - np.log(a)[:, None]) / sigma[:, None]
        logs += -0.5 * z**2 if planed else np.log(normal_share(z) + 1e-300)
    total = np.cumsum(np.exp(logs - logs.max(axis=1, keepdims=True)), axis=1)
    at = rng.random(n) * total[:, -1]
    k = np.minimum((total < at[:, None]).sum(axis=1), GRID - 1)
    return np.exp(grid[k] + (rng.random(n) - 0.5) * (grid[1] - grid[0]))


def _shallow(place):
    return place.get("depth", math.inf) < SHALLOW


def draw_launch(case, rpm, feed_in, direction, n=500, seed=1):
    """Draw a launch n times.

    :param case: as contract.md has it
    :param rpm: planned, of the engine
    :param feed_in: planned [s]
    :param direction: up or down
    Raises ValueError where the case has what is not drawn: air in the water, a grate that is not clean, notes
    of an older set-up.
    """
    readings = fields.read(case)
    if readings.errors:
        raise ValueError(readings.errors)
    boat, place, plan = (readings.values[part] for part in ("boat", "place", "plan"))
    notes = readings.values["notes"]
    muddled = [one for one in (plan, *notes) if one["water"] != "clear" or one["grate"] != "clean"]
    if muddled or "date" in boat or any("set_up" in note for note in notes):
        raise ValueError("not drawn: air in the water, a grate that is not clean, older set-ups")
    rng = np.random.default_rng(seed)
    normal = rng.standard_normal
    world = LaunchWorld(readings, n, rng)
    pressure, reach = pressure_of(place)
    error = reach / SIGMAS * normal(n)
    here = _waters(world, pressure, place["water_temperature"], error)
    warm = np.maximum(place["water_temperature"] + normal(n) / SIGMAS, 273.15)
    here = here._replace(
        head=(pressure + error - water.vapor_pressure(warm, np)) / (here.rho * GRAVITY) + world.depth
    )

    def weighed(mass):
        return mass * (1 + 0.05 / SIGMAS * normal(n))

    people, fuel = weighed(PERSON * plan["people"]), weighed(PETROL * plan["fuel"])
    loads = [(people, ROWS[plan["rows"]]), (fuel, CARGO), (weighed(plan["gear"]), CARGO)]
    hull = world.loaded(loads, here.rho, here.mu)

    allowances, bounds = [], []
    for note in notes:
        same = _same_place(place, note)
        level, its_reach = pressure_of(note)
        celsius = note["water_temperature"]
        there = _waters(world, level, celsius, error if same else 0.0)
        rise = water.vapor_pressure(celsius + 1) - water.vapor_pressure(celsius)
        off = math.hypot(0.0 if same else its_reach, rise) / (there.rho * GRAVITY) / SIGMAS  # m of head
        alike = _shallow(note) == _shallow(place)
        if note["outcome"] == "planed":
            a, sigma, made, own = _planed(world, note, there)
            bounds.append((True, made.hardest, np.hypot(own, 0.75 * off / there.head), made.turned))
            if alike:
                allowances.append((True, a, sigma))
        elif note["outcome"] == "would_not_plane":
            if alike:
                allowances.append((False, *_would_not(world, note, there)))
        elif "boat_speed" in note:
            still = np.full(n, note["rpm"])
            state, nudged = (
                world.state(
                    still * by, note["boat_speed"], level + (error if same else 0.0), np.full(n, celsius)
                )
                for by in (1.0, 1.0001)
            )
            with np.errstate(invalid="ignore"):  # a draw without head has no slope and no say
                slope = np.nan_to_num((nudged["x"] - state["x"]) / math.log(1.0001), nan=2.0)
            own = np.hypot(slope * 0.005, 0.75 * off / state["npsh_available"])
            bounds.append((note["outcome"] != "let_go", state["x"], own, state["flow_rate"] / note["rpm"]))

    usual = sample_allowance(rng, n, _shallow(place), allowances)
    allowance = usual * np.exp(0.10 / SIGMAS * normal(n))
    turning = rpm * (1 + 0.01 / SIGMAS * normal(n))
    feed = np.maximum(feed_in + 0.5 / SIGMAS * normal(n), LEAST_FEED)
    blown = (WINDS[place["wind"]], boat["jets_running"], here.head, here.rho, here.rho_air)
    trip = world.go(hull, allowance, turning, feed, *blown)

    # Blade angles, in each draw's own unit: what nozzle and efficiency do to Q/N is in note and plan alike.
    spread = [(below, x, np.hypot(own, np.log(at / trip.turned))) for below, x, own, at in bounds]
    fixed = boat.get("suction_specific_speed")
    limit = np.full(n, math.log(fixed)) if fixed else sample_limit(rng, n, spread)
    planes = trip.time < np.inf
    current = (-1 if direction == "up" else 1) * place["current"] * (1 + 0.15 / SIGMAS * normal(n))
    time = np.where(planes, trip.time, np.nan)
    distance = np.where(planes, trip.distance, np.nan) + current * time
    least = np.exp(np.minimum(4 / 3 * (limit - trip.hardest), 50.0))
    fits = np.ones(n, bool)
    if "room" in place:
        turn = 5 * boat["hull_length"] + (10 if place.get("below") in ("rapid", "rocks") else 0)
        fits = distance <= place["room"] - turn
    failing = float(np.mean((least < 1) | ~planes | ~fits))
    return LaunchDraws(planes, time, distance, least, fits, failing, allowance, limit)
