"""The launch: from rest under a throttle that is fed in, over the hump and onto the plane.

Deterministic, in SI, of the whole boat. While the throttle opens the run goes in steps of time; once it has
settled, in steps of boat speed, so that a slow hump costs no more than a quick one.
"""

import math
from collections.abc import Sequence
from typing import NamedTuple

from headwater import hull, jet
from headwater.jet import GRAVITY, Unit

IDLE_RPM = 700.0  # an engine's idle [P]
QUICKEST_FEED = 0.5  # nothing opens faster [s] [P]
INTAKE_LENGTH = (0.3, 0.6, 1.0)  # L of the water column in the intake: low, middle, high [m] [D]
ADDED_MASS = 1.05  # of the boat with the water that she drags along [P]
STALL = 0.005  # acceleration under which she gains no more [m/s2] [P]
LONGEST = 180.0  # a run takes no longer [s] [P]
_NEWTON_STEPS = 2  # of the jet's speed: within 1e-6 at the speeds of a launch
_HAIR = 1e-6  # m/s, to count as on plane with the last step
_STEP = 0.2  # while the throttle opens [s]
_MOST_STEPS = 30  # the same, where it opens slowly and little changes in a step
_PANELS = 24  # of boat speed once it has settled; even
_NODES = 20  # of the drag curve
_HUMP_FROUDE = 1.6  # about where drag is highest, for a word on the range
_TOP_FROUDE = 3.6  # where the drag curve ends
_LEAST_ALLOWANCE, _MOST_ALLOWANCE = 0.3, 4.0  # between which a note's is looked for
_HALVINGS = 10
_LEAST_SLOPE = 0.2  # of ln seconds over ln allowance, where she planes while the throttle still opens


class Drag(NamedTuple):
    """Drag of a hull for an allowance of one, as cubics between even speeds; made by :func:`drag`."""

    first: float  # speed at volume Froude 1 [m/s]
    step: float  # [m/s]
    plane: float  # speed on plane [m/s]
    square: float  # drag over speed squared under the first speed [N s2/m2]
    cubics: Sequence[tuple[float, float, float, float]]
    speeds: Sequence[float]  # of the nodes [m/s]
    nodes: Sequence[float]  # [N]
    inside: bool  # whether hump and plane lie within the range of the published tests


class Craft(NamedTuple):
    """All that a run needs to know of boat and place."""

    unit: Unit
    jets: int  # running
    density: float  # of the water at the pump [kg/m3]
    head: float  # at rest [m]
    tach: float  # true rpm over rpm read
    mass: float  # [kg]
    drag: Drag
    allowance: float  # on the drag
    wind: float  # wind's drag over (V + wind speed) squared [N s2/m2]
    wind_speed: float  # from ahead [m/s]
    thrust_share: float  # 1 - t
    intake_length: float  # L [m]


class Run(NamedTuple):
    """One launch, at its instants; speeds and distances through the water."""

    time: list[float]  # [s]
    boat_speed: list[float]  # [m/s]
    distance: list[float]  # [m]
    rpm: list[float]
    asked: list[float]  # ln of the suction specific speed asked; infinite where no head is left
    flow: list[float]  # Q of one unit [m3/s]
    planed: bool
    time_to_plane: float  # infinite if never [s]
    distance_to_plane: float  # [m]
    surplus: float  # least of (thrust - drag)/drag up to the plane at the settled throttle
    bow_high: float  # time from volume Froude 1 to the plane [s]


def drag(body: hull.Hull, density: float, viscosity: float) -> Drag:
    """A hull's drag curve, tabulated.

    :param body: the loaded hull
    :param density: of the water [kg/m3]
    :param viscosity: dynamic [Pa s]
    :returns: for an allowance of one
    Source: Savitsky 1964, hump factor of Blount and Fox 1976 [V]; under volume Froude 1 as its square [P].
    """
    first = hull.speed_at_volume_froude(1.0, body.mass, density)
    step = (_TOP_FROUDE - 1) * first / (_NODES - 1)
    speeds = [first + k * step for k in range(_NODES)]
    nodes = hull.table(body, density, viscosity, speeds)
    slopes = _slopes(nodes)
    cubics = []
    for k in range(_NODES - 1):
        y, z, m, n = nodes[k], nodes[k + 1], slopes[k], slopes[k + 1]
        cubics.append((y, m, 3 * (z - y) - 2 * m - n, 2 * (y - z) + m + n))
    plane = hull.PLANE_FROUDE * first
    inside = all(
        hull.within(body, speed, hull.planing(body, speed, density, viscosity))
        for speed in (_HUMP_FROUDE * first, plane)
    )
    return Drag(first, step, plane, nodes[0] / first**2, cubics, speeds, nodes, inside)


def _slopes(nodes: Sequence[float]) -> list[float]:
    """Differences of fourth order between even nodes, of third at the ends: a node's slope, a step long."""
    last = len(nodes) - 1
    slopes = []
    for k in range(len(nodes)):
        if 1 < k < last - 1:
            slopes.append((nodes[k - 2] - 8 * nodes[k - 1] + 8 * nodes[k + 1] - nodes[k + 2]) / 12)
        elif k in (1, last - 1):
            slopes.append((nodes[k + 1] - nodes[k - 1]) / 2)
        else:
            side = 1 if k == 0 else -1
            a, b, c, d = (nodes[k + side * j] for j in range(4))
            slopes.append(side * (-11 * a + 18 * b - 9 * c + 2 * d) / 6)
    return slopes


def drag_at(table: Drag, speed: float) -> float:
    """Drag for an allowance of one.

    :param table: from :func:`drag`
    :param speed: through the water [m/s]
    :returns: [N]
    Source: cubic through the tabulated curve, held in speed squared outside it [D].
    """
    if speed < table.first:
        return table.square * speed * speed
    place = (speed - table.first) / table.step
    k = int(place)
    if k >= len(table.cubics):
        return table.nodes[-1] * (speed / table.speeds[-1]) ** 2
    a, b, c, d = table.cubics[k]
    u = place - k
    return a + u * (b + u * (c + u * d))


def resistance(craft: Craft, speed: float) -> float:
    """Drag of water and wind.

    :param craft: boat and place
    :param speed: through the water [m/s]
    :returns: [N]
    Source: allowance on the hull's drag, wind outside it [P].
    """
    air = speed + craft.wind_speed
    return craft.allowance * drag_at(craft.drag, speed) + craft.wind * air * air


def thrust(craft: Craft, rpm: float, speed: float) -> tuple[float, float]:
    """Thrust of all running units, and the jet's speed.

    :param craft: boat and place
    :param rpm: of the engine [1/min]
    :param speed: through the water [m/s]
    :returns: [N], [m/s]
    Source: power and momentum balance [D].
    """
    unit = craft.unit
    inflow = unit.wake_share * speed
    drive = 2 * unit.efficiency * unit.absorption * rpm**3 / (craft.density * unit.nozzle_area)
    v_j = jet.balance(unit.outlet_factor, unit.ram_share * inflow * inflow, drive, _NEWTON_STEPS)
    push = craft.jets * craft.thrust_share * craft.density * unit.nozzle_area
    return push * v_j * (v_j - inflow), v_j


def asked(craft: Craft, rpm: float, speed: float, jet_speed: float, opening: float, gain: float) -> float:
    """ln of the suction specific speed that an instant asks; infinite where no head is left.

    :param craft: boat and place
    :param rpm: of the engine [1/min]
    :param speed: through the water [m/s]
    :param jet_speed: V_j [m/s]
    :param opening: how fast rpm rises [1/min/s]
    :param gain: acceleration of the boat [m/s2]
    Source: NPSH with the inertial head (L/g) dV_1/dt of the water column [D].
    """
    unit, v_j = craft.unit, jet_speed
    share = unit.ram_share * unit.wake_share**2
    ram = share * speed * speed
    stiff = 3 * unit.outlet_factor * v_j * v_j - ram
    drive = (unit.outlet_factor * v_j * v_j - ram) * v_j
    jet_gain = (3 * drive * opening / rpm + v_j * 2 * share * speed * gain) / stiff
    over = unit.nozzle_area / unit.inlet_area
    v_1 = over * v_j
    head = craft.head + (ram - unit.intake_loss * v_1 * v_1) / (2 * GRAVITY)
    head -= craft.intake_length / GRAVITY * over * jet_gain
    if head <= 0:
        return math.inf
    flow = unit.nozzle_area * v_j
    return math.log(craft.tach * rpm / unit.gear_ratio * flow**0.5 / head**0.75)


def run(craft: Craft, rpm: float, feed_in: float, opening_alone: bool = False, fine: int = 1) -> Run:
    """From rest onto the plane.

    :param craft: boat and place
    :param rpm: of the plan, reached from idle in a straight line [1/min]
    :param feed_in: from idle to plan [s]
    :param opening_alone: stop where the throttle has settled
    :param fine: times as many steps
    Source: Newton's second law with 5 % added mass [P]; midpoint rule in time, Simpson's in boat speed [D].
    """
    mass, plane = ADDED_MASS * craft.mass, craft.drag.plane
    feed_in = max(feed_in, QUICKEST_FEED)
    idle = min(IDLE_RPM, rpm)
    opening = (rpm - idle) / feed_in
    steps = min(max(math.ceil(feed_in / _STEP), 4), _MOST_STEPS) * fine
    dt = feed_in / steps
    t = x = v = 0.0
    found = Run([], [], [], [], [], [], False, math.inf, math.inf, math.inf, 0.0)
    planed_at, first_at = (math.inf, math.inf), math.inf
    gained = 0.0
    for k in range(steps + 1):
        n = idle + opening * t
        push, v_j = thrust(craft, n, v)
        gained = (push - resistance(craft, v)) / mass
        _note(found, craft, t, v, x, n, v_j, opening, gained)
        if k == steps:
            break
        half = max(v + gained * dt / 2, 0.0)
        push, _ = thrust(craft, n + opening * dt / 2, half)
        faster = max(v + (push - resistance(craft, half)) / mass * dt, 0.0)
        if v < craft.drag.first <= faster:
            first_at = t + dt * (craft.drag.first - v) / (faster - v)
        if v < plane <= faster or (k == steps - 1 and v < plane < faster + _HAIR):
            share = (plane - v) / (faster - v)
            planed_at = t + share * dt, x + share * dt * (v + plane) / 2
        t, x, v = t + dt, x + half * dt, faster
    if opening_alone:
        return found
    if planed_at[0] < math.inf:
        return found._replace(
            planed=True,
            time_to_plane=planed_at[0],
            distance_to_plane=planed_at[1],
            surplus=_surplus(craft, rpm),
            bow_high=planed_at[0] - first_at,
        )
    return _settled(found, craft, rpm, t, x, v, first_at, fine)


def _settled(
    found: Run, craft: Craft, rpm: float, t: float, x: float, v: float, first_at: float, fine: int
) -> Run:
    """The rest of a run once the throttle has settled."""
    mass, panels = ADDED_MASS * craft.mass, _PANELS * fine
    plane, first = craft.drag.plane, craft.drag.first
    step = (plane - v) / panels
    slow = 0.0  # time a metre per second more takes, at the last even node
    odd = (0.0, 0.0)
    speeds = [v + k * step for k in range(panels + 1)]
    pushes = [thrust(craft, rpm, speed) for speed in speeds]
    against = [resistance(craft, speed) for speed in speeds]
    surplus = min(push / drag - 1 for (push, _), drag in zip(pushes, against, strict=True))
    found = found._replace(surplus=surplus)
    for k, speed in enumerate(speeds):
        push, v_j = pushes[k]
        gained = (push - against[k]) / mass
        if gained < STALL:
            return found
        if k % 2:
            odd = 1 / gained, speed / gained
            continue
        if k:
            before = t
            t += step / 3 * (slow + 4 * odd[0] + 1 / gained)
            x += step / 3 * (slow * (speed - 2 * step) + 4 * odd[1] + speed / gained)
            if t > LONGEST:
                return found
            if speed - 2 * step < first <= speed:
                first_at = before + (t - before) * (first - speed + 2 * step) / (2 * step)
            _note(found, craft, t, speed, x, rpm, v_j, 0.0, gained)
        slow = 1 / gained
    return found._replace(planed=True, time_to_plane=t, distance_to_plane=x, bow_high=t - min(first_at, t))


def _note(
    found: Run, craft: Craft, t: float, v: float, x: float, n: float, v_j: float, opening: float, gain: float
) -> None:
    found.time.append(t)
    found.boat_speed.append(v)
    found.distance.append(x)
    found.rpm.append(n)
    found.flow.append(craft.unit.nozzle_area * v_j)
    found.asked.append(asked(craft, n, v, v_j, opening, gain))


def _surplus(craft: Craft, rpm: float) -> float:
    """Least of (thrust - drag)/drag over the hump, for a run that is over it while the throttle opens."""
    speeds = [speed for speed in craft.drag.speeds if speed <= craft.drag.plane]
    return min(thrust(craft, rpm, speed)[0] / resistance(craft, speed) - 1 for speed in speeds)


def critical_allowance(craft: Craft, rpm: float) -> float:
    """The allowance on the drag at which she just cannot plane at a settled throttle.

    :param craft: boat and place
    :param rpm: of the engine [1/min]
    Source: thrust equals drag at the hump [D].
    """
    found = math.inf
    for speed, node in zip(craft.drag.speeds, craft.drag.nodes, strict=True):
        if speed <= craft.drag.plane:
            air = speed + craft.wind_speed
            found = min(found, (thrust(craft, rpm, speed)[0] - craft.wind * air * air) / node)
    return found


class Shape(NamedTuple):
    """What of a hull and its place is taken as certain, or counts for little."""

    length: float  # of the bottom [m]
    deadrise: float  # [deg]
    density: float  # of the clear water [kg/m3]
    viscosity: float  # dynamic, of the water [Pa s]
    air_density: float  # [kg/m3]


class Outing(NamedTuple):
    """How she is loaded, and the wind."""

    loads: tuple[
        tuple[float, float], ...
    ]  # mass [kg] and where it sits, share of the length from the transom
    wind_speed: float  # from ahead [m/s]


class Body(NamedTuple):
    """A loaded hull by what is uncertain of it."""

    dry_mass: float  # [kg]
    centre_of_gravity: float  # of the dry boat ahead of the transom [m]
    beam: float  # between the chines [m]


def weighed(body: Body, shape: Shape, loads: Sequence[tuple[float, float]]) -> tuple[float, float]:
    """Mass and centre of gravity ahead of the transom, loaded.

    :param body: the dry hull
    :param shape: of the hull
    :param loads: mass [kg] and place of each, share of the length from the transom
    :returns: [kg], [m]
    Source: weighted mean [D].
    """
    mass = body.dry_mass + sum(load for load, _ in loads)
    moment = body.dry_mass * body.centre_of_gravity + sum(
        load * share * shape.length for load, share in loads
    )
    return mass, moment / mass


def allowance_seen(craft: Craft, rpm: float, feed_in: float, seconds: float) -> tuple[float, float]:
    """The allowance on the drag under which a run takes as long as it was seen to take.

    :param craft: boat and place
    :param rpm: of the engine [1/min]
    :param feed_in: [s]
    :param seconds: to the plane [s]
    :returns: the allowance, and d ln seconds / d ln allowance there
    Source: the run solved for its allowance by halving [D].
    """
    low, high = math.log(_LEAST_ALLOWANCE), math.log(_MOST_ALLOWANCE)
    for _ in range(_HALVINGS):
        middle = (low + high) / 2
        took = run(craft._replace(allowance=math.exp(middle)), rpm, feed_in).time_to_plane
        low, high = (middle, high) if took < seconds else (low, middle)
    found, near = math.exp((low + high) / 2), 0.01
    times = [
        run(craft._replace(allowance=found * share), rpm, feed_in).time_to_plane for share in (1, 1 - near)
    ]
    if max(times) < math.inf:
        return found, max(-math.log(times[1] / times[0]) / near, _LEAST_SLOPE)
    return found, 1 / near  # on the cliff


def hardest(found: Run) -> int:
    """The instant of a run at which most is asked of the pump.

    :param found: a run
    Source: definition [D].
    """
    return max(range(len(found.asked)), key=found.asked.__getitem__)
