"""One launch under doubt: does the pump hold all the way, how is it fed in, how much room does she need.

Each uncertain input is moved to its ends and the run is made again there, the notes learned again under it.
A search (for the feed-in, the rpm, the heaviest load) makes one run a trial, never once more for each input.
"""

import math
from collections.abc import Callable
from typing import NamedTuple

from headwater import hull, launch, notes
from headwater.doubt import HIGH, LOW, MIDDLE, Inputs, Judged, Reckoning, Setting, reach, setting
from headwater.jet import GRAVITY
from headwater.launch import Craft, Outing, Run
from headwater.tried import DRAG_AGAIN, FEED_BY_HAND, RPM_SCATTER, SIGMAS, STILL, WEIGHT, Tries

LONGEST_FEED = 15.0  # s; past it the advice is less rpm [P]
_SLACK = 0.012  # in ln S, kept in a search for the doubt that only the whole attempt knows
_FEED_GRID = 0.25  # of the shortest feed-in [s]
_FEED_SPARE = 0.5  # put on top of the shortest, and the grid of the advice [s] [P]
_RPM_GRID = 50.0  # of an advised rpm
_RPM_TRIALS = 8
_LEAST_SHARE = 0.5  # of wide open, from where an rpm is looked for
TURN_LENGTHS = 5.0  # of the boat, kept of the room to turn away in [P]
TURN_MORE = 10.0  # m, where a rapid or rocks lie beyond [P]
_CURRENT_DOUBT = 0.15  # of the current, relative [P]
_CLIFF = 0.05  # least surplus over the drag under which she may not plane
_CLIFF_LOW = 0.03  # the same on its low side
_FLAT = 1e-4  # in ln S a second, under which a longer feed-in gains nothing
_CLIFF_STEP = 1.0  # in ln distance, for an end under which she never planes
_LOAD_TRIALS = 9
_MOST_LOAD = 4.0  # times the dry boat, searched
# Inputs that move the head alone, not how she runs.
_HEAD_ONLY = STILL - {"gas"}


class Site(NamedTuple):
    """What of the place a launch feels."""

    current: float  # [m/s]
    room: float | None  # clear water ahead [m]
    turn: float  # of it kept to turn away in [m]
    shallow: bool  # under a metre of water

    @property
    def room_for_plane(self) -> float | None:
        return None if self.room is None else self.room - self.turn


class Attempt(NamedTuple):
    """A launch at an rpm and a feed-in, with its doubt; distances through the water."""

    rpm: float
    feed_in: float
    run: Run
    worst: int  # the instant nearest to the pump's limit, or past it most
    judged: Judged  # that instant against what is known of the pump
    ends: list[Run | None]  # the run under each end of each input; none where only the head moves
    ratio: tuple[float | None, float | None, float | None]  # ln NPSHA/NPSHR there, low, middle, high
    steps: list[float | None]  # by how much each end moves what is asked there
    feed_slope: float  # by how much a second longer feed-in lowers it, in ln S


class Band(NamedTuple):
    """A result with its 95 % span; a side is none where it does not exist."""

    value: float | None
    low: float | None
    high: float | None


class Trial:
    """One boat, load and place, to be launched at any rpm and feed-in.

    :param check: the steady check at rest
    :param tries: launches that were made, and the hull
    :param outing: how she is loaded, and the wind
    :param running: jet units that run
    :param site: the place
    :param allowed: the most ln S that is a go, by boat speed; none where nothing is known to hold
    """

    def __init__(
        self,
        check: Reckoning,
        tries: Tries,
        outing: Outing,
        running: int,
        site: Site,
        allowed: Callable[[float], float] | None,
    ) -> None:
        self.check, self.tries, self.outing, self.running = check, tries, outing, running
        self.site, self.allowed = site, allowed
        prior = hull.SHALLOW_ALLOWANCE if site.shallow else hull.ALLOWANCE
        alike = [
            k
            for k, made in enumerate(tries.made)
            if made.shallow == site.shallow and not check.marks[k].too_good(prior)
        ]
        marks = [check.marks[k] for k in alike]
        belief = notes.learn_allowance(prior, marks)
        low, middle, high = (belief.quantile(share) for share in (LOW, MIDDLE, HIGH))
        follows = notes.allowance_followed(prior, marks, MIDDLE)
        self.allowance = middle  # ln
        self.spread = -math.hypot(middle - low, DRAG_AGAIN), math.hypot(high - middle, DRAG_AGAIN)
        self.measured = any(mark.measured for mark in marks)
        self._moves = [
            sum(weight * end.allowances[k] for weight, k in zip(follows, alike, strict=True))
            for end in check.ends
        ]
        self.craft = self._craft(check.inputs, check.centre)
        self._crafts = [
            None if end.field in _HEAD_ONLY else self._craft(end.inputs, end.setting, middle + move)
            for end, move in zip(check.ends, self._moves, strict=True)
        ]

    def _craft(
        self,
        inputs: Inputs,
        at: Setting,
        allowance: float | None = None,
        load: float = 1.0,
    ) -> Craft:
        outing = self.outing
        if load != 1.0:
            outing = outing._replace(loads=tuple((mass * load, share) for mass, share in outing.loads))
        drag = math.exp(self.allowance if allowance is None else allowance)
        return self.tries.craft(inputs, at.unit, at.tach, at.head, at.density, outing, self.running, drag)

    # How near a run comes to the pump's limit

    def over(self, run: Run, k: int) -> float:
        """By how much an instant asks more than is a go there, in ln S."""
        assert self.allowed
        return run.asked[k] - self.allowed(run.boat_speed[k])

    def worst(self, run: Run) -> int:
        """The instant of a run that asks most against what is a go there."""
        if self.allowed is None:
            return launch.hardest(run)
        return max(range(len(run.asked)), key=lambda k: self.over(run, k))

    def _excess(self, run: Run) -> float:
        k = self.worst(run)
        return run.asked[k] if self.allowed is None else self.over(run, k)

    # One attempt

    def attempt(self, rpm: float, feed_in: float) -> Attempt:
        """A launch with its doubt: one run for each end of each input."""
        check, at = self.check, self.check.centre
        run = launch.run(self.craft, rpm, feed_in)
        k = self.worst(run)
        x, speed, turned, flow = run.asked[k], run.boat_speed[k], run.rpm[k], run.flow[k]
        known = check.known(speed, flow / turned)
        slower = max(feed_in - FEED_BY_HAND, 0.0), feed_in + FEED_BY_HAND
        own = [
            launch.run(self._craft(check.inputs, at, load=1 - self._load_doubt), rpm, feed_in),
            launch.run(self._craft(check.inputs, at, load=1 + self._load_doubt), rpm, feed_in),
            *(
                launch.run(self.craft._replace(allowance=math.exp(self.allowance + side)), rpm, feed_in)
                for side in self.spread
            ),
            *(launch.run(self.craft, rpm, feed) for feed in slower),
            *(launch.run(self.craft, rpm * (1 + side * RPM_SCATTER), feed_in) for side in (-1, 1)),
        ]
        ends: list[Run | None] = [
            None if craft is None else launch.run(craft, rpm, feed_in) for craft in self._crafts
        ]
        if x == math.inf:
            none = Judged(None, True, known, None, None, None, False)
            return Attempt(rpm, feed_in, run, k, none, [*ends, *own], (None, None, None), [], 0.0)
        base = self._excess(run)
        steps: list[float | None] = []
        for end, moved in zip(check.ends, ends, strict=True):
            if moved is None:
                steps.append(self._by_head(end.setting, x, turned, flow))
            else:
                step = self._excess(moved) - base
                steps.append(step if abs(step) < math.inf else None)
        for moved in own[:-2]:
            step = self._excess(moved) - base
            steps.append(step if abs(step) < math.inf else None)
        slope = check.slope(turned, speed)
        read = [*steps, -slope * RPM_SCATTER, slope * RPM_SCATTER]
        middle = check.limit(known, MIDDLE) if check.capped else None
        ratio = (
            check.ratio_low(known, x, read),
            None if middle is None else 4 / 3 * (middle - x),
            check.ratio_high(known, x, read),
        )
        head = self._head(x, turned, flow)
        v_1 = flow / at.unit.inlet_area
        boils = at.density * (GRAVITY * head - v_1 * v_1 / 2) <= 0
        judged = check.judged(x, boils, known, turned, speed, steps, ratio[2])
        slope = (self._excess(own[4]) - self._excess(own[5])) / (slower[1] - slower[0])
        return Attempt(rpm, feed_in, run, k, judged, [*ends, *own], ratio, steps, slope)

    @property
    def _load_doubt(self) -> float:
        masses = [mass for mass, _ in self.outing.loads]
        total = sum(masses)
        return WEIGHT * math.hypot(*masses) / total if total else 0.0

    def _head(self, x: float, rpm: float, flow: float) -> float:
        """NPSH available where ln S of x is asked [m]."""
        at = self.check.centre
        return float((at.tach * rpm / at.unit.gear_ratio * flow**0.5 / math.exp(x)) ** (4 / 3))

    def _by_head(self, at: Setting, x: float, rpm: float, flow: float) -> float | None:
        """By how much another head at rest moves the ln S asked."""
        before = self._head(x, rpm, flow)
        after = before + at.head - self.check.centre.head
        return (
            math.log(at.tach / self.check.centre.tach) - 0.75 * math.log(after / before)
            if after > 0
            else None
        )

    # Room and time

    def ground(self, run: Run, sign: int) -> float:
        """Distance over ground to the plane; up against the current (-1) or down with it (1) [m]."""
        return run.distance_to_plane + sign * self.site.current * run.time_to_plane

    def distance(self, attempt: Attempt, sign: int) -> Band:
        """Room she needs to get on plane, over ground."""
        slack = sign * _CURRENT_DOUBT * self.site.current * attempt.run.time_to_plane
        band = self._band(attempt, lambda run: self.ground(run, sign), slack)
        if band.high is None:
            return band
        # Near the hump the room grows faster than any one end tells: all of them together, each by its part.
        far = launch.run(self._hard_craft(self.low_side(attempt, sign)), attempt.rpm, attempt.feed_in)
        together = self.ground(far, sign) + abs(slack)
        return band._replace(high=max(band.high, together) if far.planed else None)

    def time(self, attempt: Attempt) -> Band:
        """Seconds until on plane."""
        return self._band(attempt, lambda run: run.time_to_plane, 0.0)

    def _band(self, attempt: Attempt, get: Callable[[Run], float], slack: float) -> Band:
        if not attempt.run.planed:
            return Band(None, None, None)
        centre = get(attempt.run)
        if centre <= 0:  # carried backwards by the current as she planes
            return Band(centre, None, None)
        steps = self._steps(attempt, get, centre)
        own = abs(slack) / centre
        low = centre * math.exp(-reach([0.0 if s is None else min(s, 9.0) for s in steps], own, -1))
        if self.may_not_plane(attempt) or any(s is None for s in steps):
            return Band(centre, low, None)
        return Band(centre, low, centre * math.exp(reach(steps, own, 1)))

    def _steps(self, attempt: Attempt, get: Callable[[Run], float], centre: float) -> list[float | None]:
        """By how much each end moves ln of a result; none where she never planes."""
        steps: list[float | None] = []
        for run in attempt.ends:
            if run is None:
                steps.append(0.0)
            elif not run.planed:
                steps.append(None)
            else:
                steps.append(math.log(max(get(run), 1e-3) / centre))
        return steps

    def surplus(self, attempt: Attempt) -> Band:
        """Least of (thrust - drag)/drag up to the plane."""
        centre = attempt.run.surplus
        steps = [0.0 if run is None else run.surplus - centre for run in attempt.ends]
        return Band(centre, centre - reach(steps, 0.0, -1), centre + reach(steps, 0.0, 1))

    def may_not_plane(self, attempt: Attempt) -> bool:
        """Whether the hump lies so close that the doubt has no far side."""
        low = self.surplus(attempt).low
        return attempt.run.surplus < _CLIFF or low is None or low <= _CLIFF_LOW

    def chance_short(self, attempt: Attempt, sign: int) -> float:
        """Chance that she is not on plane within the room for it."""
        room, band = self.site.room_for_plane, self.distance(attempt, sign)
        if band.value is None or band.high is None:
            return 1.0
        if room is None:
            return 0.0
        if room <= 0:
            return 1.0
        sigma = math.log(band.high / band.value) / SIGMAS
        return 0.5 * math.erfc(math.log(room / band.value) / max(sigma, 1e-9) / math.sqrt(2))

    # Searches, on one run a trial

    def shortest_feed(self, rpm: float) -> float | None:
        """Shortest feed-in under which the pump holds all the way; none if none up to the longest [s]."""
        if self.allowed is None:
            return None

        def holds(feed: float) -> bool:
            return self._excess(launch.run(self.craft, rpm, feed, opening_alone=True)) <= -_SLACK

        low, high = round(launch.QUICKEST_FEED / _FEED_GRID), round(LONGEST_FEED / _FEED_GRID)
        if holds(low * _FEED_GRID):
            return low * _FEED_GRID
        if not holds(high * _FEED_GRID):
            return None
        while high - low > 1:
            middle = (low + high) // 2
            low, high = (low, middle) if holds(middle * _FEED_GRID) else (middle, high)
        return high * _FEED_GRID

    def advised_feed(self, shortest: float) -> float:
        """The feed-in to advise: the shortest parks every launch on the line [s]."""
        return math.ceil((shortest + _FEED_SPARE) / _FEED_SPARE - 1e-9) * _FEED_SPARE

    def best_rpm(self, most: float) -> tuple[float, float] | None:
        """The rpm, and its feed-in, that planes in the least room on the low side; none if no rpm holds.

        Where none planes there, the rpm with the most push over the hump.

        :param most: engine rpm wide open here [1/min]
        """
        hard = self.craft._replace(allowance=math.exp(self.allowance + self.spread[1]))
        low, high = math.floor(_LEAST_SHARE * most / _RPM_GRID), math.ceil(most / _RPM_GRID)
        found: dict[int, tuple[float, float, float, float, float]] = {}

        def room(step: int) -> tuple[float, float, float, float, float]:
            """Room on the low side, on the middle, less the drag that would stop her; rpm and feed-in."""
            if step not in found:
                rpm = min(step * _RPM_GRID, most)
                shortest = self.shortest_feed(rpm)
                if shortest is None or self.advised_feed(shortest) > LONGEST_FEED:
                    found[step] = math.inf, math.inf, math.inf, rpm, 0.0
                else:
                    feed = self.advised_feed(shortest)
                    far, near = (
                        launch.run(craft, rpm, feed).distance_to_plane for craft in (hard, self.craft)
                    )
                    found[step] = far, near, -launch.critical_allowance(self.craft, rpm), rpm, feed
            return found[step]

        stride = max((high - low) // _RPM_TRIALS, 1)
        best = min(range(high, low, -stride), key=room)
        while stride > 1:
            stride = (stride + 1) // 2
            best = min((s for s in (best, best - stride, best + stride) if low <= s <= high), key=room)
        *_, short, rpm, feed = room(best)
        return (rpm, feed) if short < math.inf else None

    def feed_band(self, attempt: Attempt) -> Band:
        """The feed-in with its doubt: what each input moves at the pump, over what a second more gains there.

        A side is none where the feed-in changes nothing.
        """
        if attempt.feed_slope <= _FLAT or attempt.feed_slope == math.inf:
            return Band(attempt.feed_in, None, None)
        apart, proven = list(attempt.steps[:-2]), attempt.judged.known.proven
        if proven:
            for k, end in enumerate(self.check.ends):  # what it shares with the note cancels
                here, there = apart[k], end.xs[proven.note]
                apart[k] = None if here is None or there is None else here - (there - proven.x)
        low, high = (reach(apart, 0.0, sign) / attempt.feed_slope for sign in (-1, 1))
        least = max(attempt.feed_in - low, launch.QUICKEST_FEED)
        most = attempt.feed_in + high
        return Band(attempt.feed_in, least, most if most <= LONGEST_FEED else None)

    # The low side in one run

    def low_side(self, attempt: Attempt, sign: int) -> tuple[Inputs, float, float]:
        """Inputs, ln allowance and load's share at the far side of the room, each moved by its part in it."""
        centre = self.ground(attempt.run, sign)
        steps = self._steps(attempt, lambda run: self.ground(run, sign), centre)
        far = [_CLIFF_STEP if step is None else step for step in steps]
        total = reach(far, 0.0, 1) or 1.0
        inputs = dict(self.check.inputs)
        moved = self.allowance
        count = len(self.check.ends)
        for k in range(0, count, 2):
            j = k if far[k] >= far[k + 1] else k + 1
            share = max(far[j], 0.0) / total
            end = self.check.ends[j]
            inputs[end.field] += share * (end.inputs[end.field] - inputs[end.field])
            moved += share * self._moves[j]
        load_low, load_high, _, drag_high = far[count : count + 4]
        load = 1 + self._load_doubt * (max(load_high, 0.0) if load_high >= load_low else 0.0) / total
        return inputs, moved + self.spread[1] * max(drag_high, 0.0) / total, load

    def _hard_craft(self, low_side: tuple[Inputs, float, float], load: float | None = None) -> Craft:
        """Boat and place at the far side; ``load`` is the mass of people, fuel and gear [kg]."""
        inputs, allowance, share = low_side
        outing = self.outing
        total = sum(mass for mass, _ in outing.loads)
        if load is not None and not total:
            outing, total = Outing(((1.0, hull.CARGO),), outing.wind_speed), 1.0
        factor = share if load is None else share * load / total
        loads = tuple((mass * factor, place) for mass, place in outing.loads)
        at = setting(inputs)
        return self.tries.craft(
            inputs,
            at.unit,
            at.tach,
            at.head,
            at.density,
            outing._replace(loads=loads),
            self.running,
            math.exp(allowance),
        )

    def heaviest_load(self, attempt: Attempt, sign: int, limit: float | None) -> float | None:
        """The most that may be aboard to be on plane within the room, on the low side [kg].

        :param limit: never over it [kg]
        :returns: none where even the empty boat fails, or no room is known
        """
        room = self.site.room_for_plane
        if room is None or not attempt.run.planed:
            return None
        side = self.low_side(attempt, sign)

        def fits(load: float) -> bool:
            run = launch.run(self._hard_craft(side, load), attempt.rpm, attempt.feed_in)
            return run.planed and self.ground(run, sign) <= room

        most = _MOST_LOAD * self.check.inputs["boat.dry_mass"]
        most = most if limit is None else min(most, limit)
        if fits(most):
            return most
        low, high = 0.0, most
        if not fits(low):
            return None
        for _ in range(_LOAD_TRIALS):
            middle = (low + high) / 2
            low, high = (middle, high) if fits(middle) else (low, middle)
        return low

    def abort_mark(self, attempt: Attempt, sign: int) -> float | None:
        """Ground speed that she must have at half the room, on the low side [m/s]; none if on plane by then.

        Negative or zero where she has not left the spot.
        """
        assert self.site.room is not None
        half = self.site.room / 2
        run = launch.run(self._hard_craft(self.low_side(attempt, sign)), attempt.rpm, attempt.feed_in)
        if run.planed and self.ground(run, sign) <= half:
            return None
        speed = run.boat_speed[-1]
        for k in range(1, len(run.time)):
            places = [run.distance[i] + sign * self.site.current * run.time[i] for i in (k - 1, k)]
            if places[1] >= half:
                part = (half - places[0]) / max(places[1] - places[0], 1e-9)
                speed = run.boat_speed[k - 1] + max(part, 0.0) * (run.boat_speed[k] - run.boat_speed[k - 1])
                break
        return speed + sign * self.site.current
