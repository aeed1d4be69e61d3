"""Launches that were made: what they say of the hull's drag, and what they asked of the pump.

A launch that planed measures the drag by its seconds, and held at its hardest instant; one that would not
plane bounds the drag from below. Each is run again, in model, under every set of inputs that is looked at.
"""

import math
from collections.abc import Mapping, Sequence
from typing import NamedTuple

from headwater import hull, launch
from headwater.jet import Unit
from headwater.launch import Craft, Drag, Outing, Run, Shape
from headwater.notes import Mark

# 95 % half-widths [P].
RPM_SCATTER = 0.01  # of one rpm reading, relative
DRAG_AGAIN = 0.10  # of the drag, between two launches of one boat, relative
FEED_BY_HAND = 0.5  # of a feed-in [s]
WEIGHT = 0.05  # of each weight, relative
SECONDS = 0.15  # of the seconds to plane, relative
SIGMAS = 1.959964  # of a 95 % half-width
# Inputs that move the head or the reading alone, not how a launch of the past ran.
STILL = frozenset(
    ("boat.shaft_depth", "pressure_error", "place.water_temperature", "tach", "engine_exponent", "gas")
)
_MASS_POWER = 1.3  # of the drag at the hump over mass, for the error of a load [D]


class Launched(NamedTuple):
    """A launch that was made."""

    note: int
    rpm: float  # [1/min]
    feed_in: float  # [s]
    seconds: float | None  # to the plane; none if she would not
    outing: Outing
    density: float  # of the water [kg/m3]
    pressure_head: float  # air pressure less boiling, of water [m]
    head_sigma: float  # one sigma of its place's own readings [m]
    shallow: bool  # under a metre of water


class Held(NamedTuple):
    """A launch that planed, at its hardest instant, as a note that held."""

    x: float  # ln S asked
    sigma: float  # one sigma
    head: float  # NPSH available [m]
    boat_speed: float  # [m/s]
    flow_per_rpm: float  # Q/N [m3 min/s]


class Tries:
    """The launches of one boat.

    :param shape: of the hull, and the water
    :param jets: units that ran
    :param made: launches that were made
    """

    def __init__(self, shape: Shape, jets: int, made: Sequence[Launched]) -> None:
        self.shape, self.jets, self.made = shape, jets, made
        self._tables: dict[tuple[float, float, float], Drag] = {}
        self._instants: dict[int, int] = {}  # the hardest of each launch that planed
        self._crafts: dict[int, Craft] = {}
        self._known: dict[int, Held] = {}
        self._slopes: dict[int, float] = {}  # of ln seconds over ln allowance

    def craft(
        self,
        inputs: Mapping[str, float],
        unit: Unit,
        tach: float,
        head: float,
        density: float,
        outing: Outing,
        jets: int,
        allowance: float = 1.0,
    ) -> Craft:
        """Boat and place as a run needs them.

        :param inputs: by key, SI
        :param unit: one jet unit
        :param tach: true rpm over rpm read
        :param head: at rest [m]
        :param density: of the water at the pump [kg/m3]
        :param outing: how she is loaded, and the wind
        :param jets: units that run
        :param allowance: on the drag
        """
        shape = self.shape
        body = launch.Body(
            inputs["boat.dry_mass"], inputs["boat.centre_of_gravity"], inputs["boat.chine_beam"]
        )
        mass, balance = launch.weighed(body, shape, outing.loads)
        key = (mass, balance, body.beam)
        if key not in self._tables:
            made = hull.hull(body.beam, shape.deadrise, balance, mass)
            self._tables[key] = launch.drag(made, shape.density, shape.viscosity)
        return Craft(
            unit,
            jets,
            density,
            head,
            tach,
            mass,
            self._tables[key],
            allowance,
            hull.wind_factor(shape.air_density),
            outing.wind_speed,
            1 - inputs["thrust_deduction"],
            inputs["intake_length"],
        )

    def _of(
        self, made: Launched, inputs: Mapping[str, float], unit: Unit, depth: float, tach: float
    ) -> Craft:
        head = made.pressure_head + depth
        return self.craft(inputs, unit, tach, head, made.density, made.outing, self.jets)

    def first(
        self, inputs: Mapping[str, float], unit: Unit, depth: float, tach: float
    ) -> tuple[list[Mark], dict[int, Held]]:
        """What each launch says under the central inputs: of the drag, and by note of the pump.

        :param inputs: by key, SI
        :param unit: one jet unit, its grate clean
        :param depth: z [m]
        :param tach: true rpm over rpm read
        """
        marks, held = [], {}
        for made in self.made:
            craft = self._of(made, inputs, unit, depth, tach)
            load = sum(mass for mass, _ in made.outing.loads)
            by_load = WEIGHT * _MASS_POWER * load / craft.mass
            if made.seconds is None:
                x = math.log(max(launch.critical_allowance(craft, made.rpm), 1e-3))
                sigma = math.hypot(DRAG_AGAIN, by_load, 2 * RPM_SCATTER) / SIGMAS
                marks.append(Mark(x, sigma, False))
                continue
            allowance, slope = launch.allowance_seen(craft, made.rpm, made.feed_in, made.seconds)
            craft = craft._replace(allowance=allowance)
            self._crafts[made.note], self._slopes[made.note] = craft, slope
            found = launch.run(craft, made.rpm, made.feed_in)
            slower = launch.run(craft, made.rpm, made.feed_in + FEED_BY_HAND)
            faster = launch.run(craft, made.rpm * (1 + RPM_SCATTER), made.feed_in)
            by_feed, by_rpm = (_apart(found, other) for other in (slower, faster))
            sigma = math.hypot(DRAG_AGAIN, by_load, SECONDS / slope, by_feed / slope, by_rpm / slope) / SIGMAS
            marks.append(Mark(math.log(allowance), sigma, True))
            held[made.note] = self._held(made, found, faster, slower)
        self._known, self._depth, self._tach = held, depth, tach
        return marks, held

    def still(self, depth: float, tach: float) -> tuple[list[float], dict[int, float | None]]:
        """The same as :meth:`again` where an input moves the head or the reading alone.

        :param depth: z [m]
        :param tach: true rpm over rpm read
        """
        asked: dict[int, float | None] = {}
        for note, held in self._known.items():
            after = held.head + depth - self._depth
            by_reading = math.log(tach / self._tach)
            asked[note] = held.x + by_reading - 0.75 * math.log(after / held.head) if after > 0 else None
        return [0.0] * len(self.made), asked

    def _held(self, made: Launched, found: Run, faster: Run, slower: Run) -> Held:
        k = self._instants[made.note] = launch.hardest(found)
        x, n, flow = found.asked[k], found.rpm[k], found.flow[k]
        head = (n * flow**0.5 / math.exp(x)) ** (4 / 3) if x < math.inf else 1.0
        by_rpm = abs(faster.asked[launch.hardest(faster)] - x) / 2
        by_feed = abs(slower.asked[launch.hardest(slower)] - x) / SIGMAS
        sigma = math.hypot(by_rpm, by_feed, 0.75 * made.head_sigma / head)
        return Held(x, sigma, head, found.boat_speed[k], flow / n)

    def again(
        self, inputs: Mapping[str, float], unit: Unit, depth: float, tach: float, marks: Sequence[Mark]
    ) -> tuple[list[float], dict[int, float | None]]:
        """By how much other inputs move each launch's ln allowance, and ln S asked by note under them.

        :param inputs: by key, SI
        :param unit: one jet unit, its grate clean
        :param depth: z [m]
        :param tach: true rpm over rpm read
        :param marks: under the central inputs
        """
        moved, asked = [], {}
        for made, mark in zip(self.made, marks, strict=True):
            craft = self._of(made, inputs, unit, depth, tach)
            if made.seconds is None:
                moved.append(math.log(max(launch.critical_allowance(craft, made.rpm), 1e-3)) - mark.x)
                continue
            found = launch.run(craft._replace(allowance=math.exp(mark.x)), made.rpm, made.feed_in)
            took, slope = found.time_to_plane, self._slopes[made.note]
            if took < math.inf:
                moved.append(-math.log(took / made.seconds) / slope)
            else:  # past the cliff: as far as the cliff itself moves
                here = launch.critical_allowance(self._crafts[made.note], made.rpm)
                there = launch.critical_allowance(craft, made.rpm)
                moved.append(math.log(max(there, 1e-3) / here))
            x = found.asked[self._instants[made.note]]
            asked[made.note] = x if x < math.inf else None
        return moved, asked


def _apart(first: Run, second: Run) -> float:
    """How far two runs lie apart in ln seconds to the plane; wide where one never planes."""
    if first.time_to_plane < math.inf and second.time_to_plane < math.inf:
        return abs(math.log(first.time_to_plane / second.time_to_plane))
    return 1.0
