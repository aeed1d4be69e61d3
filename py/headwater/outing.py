"""The launch's part of an answer: both directions, schedule, abort mark, heaviest load, what would help."""

import math
from collections.abc import Callable, Mapping
from typing import Any, NamedTuple

from headwater import hull, suction, verdict
from headwater.doubt import CHANCE, LOW, Reckoning
from headwater.launch import IDLE_RPM, Outing
from headwater.trial import LONGEST_FEED, TURN_LENGTHS, TURN_MORE, Attempt, Band, Site, Trial
from headwater.tried import SIGMAS, Tries
from headwater.verdict import Decision, Launching

PERSON = 85.0  # kg [P]
FUEL_DENSITY = 740.0  # kg/m3 [P]
UNKNOWN_FEED = 4.0  # advised while nothing is known to hold [s] [P]
GAS_CAUTION, GAS_STOP = 0.02, 0.04  # share of free gas at the impeller: rough, gas-bound [S]
_CLEAN = {"grate": "clean", "water": "clear"}
_SIGNS = {"up": -1, "down": 1}
_LEAST_GAIN = 0.03  # of the room, for a remedy to be worth a word
_LOAD_SPARE = 0.97  # of the heaviest load, to be advised
_LIGHTER = (0.8, 0.6, 0.4, 0.2, 0.05)  # shares of the load, tried where she does not plane with all of it
_RPM_APART = 25.0  # between two rpm that are not the same advice
_LOAD_STEP = 5.0  # kg, of a heaviest load
_SPARE, _MOST_SPARE = 0.5, 1.5  # added to an advised feed-in that falls short by the last of its doubt [s]


class Way(NamedTuple):
    """A launch in one direction."""

    name: str  # up, down
    sign: int
    attempt: Attempt
    distance: Band  # over ground [m]
    decision: Decision


class Plan(NamedTuple):
    """How the launch is meant to be made."""

    rpm: float
    feed_in: float
    advised: float | None  # feed-in under which the pump holds at this rpm; none if none does [s]


def gas(check: Reckoning) -> tuple[float, float]:
    """Free gas at the impeller, middle and high, as a share; the pressure ahead of it is the middle one's.

    :param check: the steady check
    """
    inputs = check.inputs
    most = max([inputs["gas"], *(end.inputs["gas"] for end in check.ends if end.field == "gas")])
    expansion = inputs["expansion"]
    return suction.gas_share(inputs["gas"], expansion), suction.gas_share(most, expansion)


def foam(values: Mapping[str, Any], check: Reckoning) -> str:
    """Code of water with so much air that it stops any plan; empty if it has not.

    :param values: readings of the case, SI
    :param check: the steady check
    """
    if values["plan"]["water"] == "white":
        return "white_water"
    return "gas_bound" if gas(check)[0] > GAS_STOP else ""


def flags(values: Mapping[str, Any], check: Reckoning) -> list[str]:
    """Codes of what forbids a go by itself, standing as on a launch.

    :param values: readings of the case, SI
    :param check: the steady check
    """
    plan, found = values["plan"], []
    if plan["grate"] != "clean":
        found.append("grate")
    if gas(check)[1] > GAS_CAUTION:
        found.append("air")
    if plan["standing_waves"] == "yes":
        found.append("standing_waves")
    return found


class Outlook:
    """All that is said of a launch.

    :param values: readings of the case, SI
    :param check: the steady check at rest
    :param tries: launches that were made, and the hull
    :param wide_open: engine rpm wide open here [1/min]
    :param allowed: the most ln S that is a go, by boat speed; none where nothing is known to hold
    :param full_speed: boat speed from which wide open is a go [m/s]; none if never
    :param cleaner: the same launch in clear water with a clean grate
    """

    def __init__(
        self,
        values: Mapping[str, Any],
        check: Reckoning,
        tries: Tries,
        wide_open: float,
        allowed: Callable[[float], float] | None,
        full_speed: float | None,
        cleaner: Callable[[], "Outlook"],
    ) -> None:
        self.values, self.check, self.tries, self.cleaner = values, check, tries, cleaner
        self.wide_open, self.allowed, self.full_speed = wide_open, allowed, full_speed
        self.boat, self.place, self.plan = (values[part] for part in ("boat", "place", "plan"))
        room = self.place.get("room")
        turn = TURN_LENGTHS * self.boat["hull_length"]
        if self.place.get("below") in ("rapid", "rocks"):
            turn += TURN_MORE
        shallow = self.place.get("depth", math.inf) < hull.SHALLOW
        self.site = Site(self.place["current"], room, turn, shallow)
        self.trial = self._trial(self.plan["rows"])
        self.planned = self._planned(self.trial)
        self.ways = self._ways(self.trial, self.planned)
        wanted = self.plan.get("direction")
        self.better = wanted or min(self.ways.values(), key=_rank).name

    @property
    def load(self) -> float:
        """People, fuel and gear [kg]."""
        return sum(mass for mass, _ in self._loads(self.plan["rows"]))

    def _loads(self, rows: str) -> tuple[tuple[float, float], ...]:
        plan = self.plan
        return (
            (PERSON * plan["people"], hull.ROWS[rows]),
            (FUEL_DENSITY * plan["fuel"], hull.CARGO),
            (plan["gear"], hull.CARGO),
        )

    def _trial(self, rows: str, share: float = 1.0) -> Trial:
        loads = tuple((mass * share, place) for mass, place in self._loads(rows))
        outing = Outing(loads, hull.WINDS[self.place["wind"]])
        running = self.boat["jets_running"]
        return Trial(self.check, self.tries, outing, running, self.site, self.allowed)

    # How it is meant to be made, and what it comes to

    def _planned(self, trial: Trial) -> Plan:
        feed = self.plan.get("feed_in")
        if not any(key in self.plan for key in ("power", "rpm", "throttle")):
            best = trial.best_rpm(self.wide_open)
            if best:
                return Plan(best[0], best[1] if feed is None else feed, best[1])
        rpm = self.check.rpm
        shortest = trial.shortest_feed(rpm)
        advised = None if shortest is None else trial.advised_feed(shortest)
        if feed is None:
            unknown = UNKNOWN_FEED if self.allowed is None else LONGEST_FEED
            feed = unknown if advised is None else advised
        return Plan(rpm, feed, advised)

    def _ways(self, trial: Trial, planned: Plan) -> dict[str, Way]:
        attempt = trial.attempt(planned.rpm, planned.feed_in)
        advised = self.plan.get("feed_in") is None
        spare = 0.0
        while advised and planned.advised is not None and not self._holds(attempt) and spare < _MOST_SPARE:
            spare += _SPARE  # the last of the doubt is known only from the attempt itself
            attempt = trial.attempt(planned.rpm, planned.feed_in + spare)
        best = attempt
        if not advised:
            feed = LONGEST_FEED if planned.advised is None else planned.advised
            best = trial.attempt(planned.rpm, feed)
        return {name: self._way(trial, attempt, best, name) for name in _SIGNS}

    def _holds(self, attempt: Attempt) -> bool:
        check = self.check
        if verdict.over(attempt.judged, check.stop_dropped):
            return False
        return verdict.inside(attempt.judged, check.fixed is not None, check.today).verdict == "go"

    def _way(self, trial: Trial, attempt: Attempt, best: Attempt, name: str) -> Way:
        check, site, sign = self.check, self.site, _SIGNS[name]
        distance = trial.distance(attempt, sign)
        room = site.room_for_plane
        made = Launching(
            attempt.judged,
            best.judged,
            _chance(attempt),
            trial.chance_short(attempt, sign),
            distance.high is not None,
            distance.high is not None and (room is None or distance.high <= room),
            best.run.planed,
            site.room is None or trial.ground(best.run, sign) <= site.room,
            room is None or room > 0,
            foam(self.values, check),
            [*flags(self.values, check), *self._unsure()],
        )
        decision = verdict.launch(made, check.stop_dropped, check.fixed is not None, check.today)
        return Way(name, sign, attempt, distance, decision)

    def _unsure(self) -> list[str]:
        """Codes of what is too unsure for a go: shallow water without a launch there, power out of papers."""
        found = ["shallow"] if self.site.shallow and not self.trial.measured else []
        papers = self.boat["rpm_from"] == "papers" and "power" in self.plan
        return [*found, "papers"] if papers else found

    def cautions(self) -> list[str]:
        """Codes of what is worth a word beside the launch's verdict."""
        codes = []
        if self.planned.advised is None and self.allowed is not None:
            codes.append("never_holds")
        if self.site.shallow:
            codes.append("shallow_drag")
        if any(mark.too_good(hull.ALLOWANCE) for mark in self.check.marks):
            codes.append("launch_off")
        depth = self.place.get("depth")
        below = self.boat["shaft_depth"] + self.boat.get("intake_height", self.boat["impeller_diameter"])
        attempt = next(iter(self.ways.values())).attempt
        if depth is not None and depth - below < hull.depth_to_spare_bed(max(attempt.run.flow)):
            codes.append("gravel")
        if self.site.room is None:
            codes.append("room_unknown")
        if not self.trial.craft.drag.inside:
            codes.append("hull_extrapolated")
        return codes

    # What the answer carries

    def build(self) -> dict[str, Any]:
        """The launch as the contract has it, by direction, without what takes longer to work out."""
        return {"better": self.better, **{name: self._row(way) for name, way in self.ways.items()}}

    def _row(self, way: Way) -> dict[str, Any]:
        run, attempt = way.attempt.run, way.attempt
        at, drift = self.check.centre, way.sign * self.site.current
        limits = [self._limits(speed) for speed in run.boat_speed]
        time = self.trial.time(attempt)
        surplus = self.trial.surplus(attempt)
        demand = at.unit.absorption * self.boat["jets_running"]
        middle = attempt.ratio[1]
        limit = None if middle is None else 3 / 4 * middle + run.asked[attempt.worst]
        return {
            "verdict": way.decision.verdict,
            "ground": way.decision.ground,
            "time": run.time,
            "boat_speed": run.boat_speed,
            "ground_speed": [speed + drift for speed in run.boat_speed],
            "distance": [x + drift * t for x, t in zip(run.distance, run.time, strict=True)],
            "power": [demand * rpm**3 for rpm in run.rpm],
            "rpm": run.rpm,
            "ratio": [
                None if limit is None or x == math.inf else math.exp(4 / 3 * (limit - x)) for x in run.asked
            ],
            "limit": limits,
            "planned_rpm": attempt.rpm,
            "feed_in": attempt.feed_in,
            "feed_in_band": _value(*self.trial.feed_band(attempt), "s"),
            "shortest_feed_in": self.planned.advised,
            "least_ratio": None
            if attempt.judged.asked is None
            else _value(_exp(middle), _exp(attempt.ratio[0]), _exp(attempt.ratio[2]), "1"),
            "time_to_plane": _value(time.value, time.low, time.high, "s"),
            "distance_to_plane": _value(way.distance.value, way.distance.low, way.distance.high, "m"),
            "bow_high": run.bow_high if run.planed else None,
            "plane_speed": self.trial.craft.drag.plane,
            "hump_surplus": _value(surplus.value, surplus.low, surplus.high, "1"),
            "schedule": self._schedule(way),
            "room_for_plane": self.site.room_for_plane,
        }

    def _limits(self, speed: float) -> str:
        return "pump" if self._most_rpm(speed) < self.wide_open else "engine"

    def _most_rpm(self, speed: float) -> float:
        """What pump and engine allow at a boat speed."""
        if self.allowed is None:
            return self.wide_open
        return min(self.wide_open, self.check.rpm_at(self.allowed(speed), speed))

    def _schedule(self, way: Way) -> list[dict[str, float | None]]:
        """Rpm against speed by GPS: how it is fed in, and from where it may be opened further."""
        run, drift = way.attempt.run, way.sign * self.site.current
        opened = next(k for k, rpm in enumerate(run.rpm) if rpm >= way.attempt.rpm - 1e-6)
        picked = [0, opened // 2, opened]
        rows = [(run.time[k], run.boat_speed[k], run.rpm[k]) for k in picked]
        full = self.full_speed
        if full is not None and run.planed and way.attempt.rpm < self.wide_open - 1:
            last = max(full, run.boat_speed[opened])
            rows.append((math.inf, last, self.wide_open))
        return [
            {
                "time": time if time < math.inf else None,
                "ground_speed": speed + drift,
                "rpm": min(rpm, max(self._most_rpm(speed), IDLE_RPM)),
            }
            for time, speed, rpm in rows
        ]

    def later(self) -> dict[str, Any]:
        """What takes longer: heaviest load and abort mark by direction, and the remedies."""
        limit = self.boat.get("load_limit")
        found: dict[str, Any] = {}
        for name, way in self.ways.items():
            row: dict[str, Any] = {"heaviest_load": None, "abort_mark": None}
            if self.site.room is not None:
                load = self._heaviest(way.sign, way.attempt, limit)
                row["heaviest_load"] = None if load is None else math.floor(load / _LOAD_STEP) * _LOAD_STEP
            if way.attempt.run.planed and self.site.room is not None:
                row["abort_mark"] = self.trial.abort_mark(way.attempt, way.sign)
            found[name] = row
        found["remedies"] = self._remedies()
        return found

    # What would help, the cheapest first, each worked out

    def _remedies(self) -> list[dict[str, Any]]:
        way = self.ways[self.better]
        if way.decision.verdict == "go" or self.allowed is None:
            return []
        rows: list[dict[str, Any]] = []

        def offer(
            code: str, trial: Trial, rpm: float, feed: float, name: str, values: Mapping[str, Any]
        ) -> None:
            attempt = trial.attempt(rpm, feed)
            self._offer(rows, way, self._way(trial, attempt, attempt, name), code, values)

        advised, best = self.planned.advised, None
        if advised is not None and advised > way.attempt.feed_in:
            offer("feed_in", self.trial, way.attempt.rpm, advised, way.name, {"feed_in": advised})
        other = "down" if way.name == "up" else "up"
        if self.site.current and "direction" in self.plan:
            self._offer(rows, way, self.ways[other], "direction", {"direction": other})
        if any(key in self.plan for key in ("power", "rpm", "throttle")):
            best = self.trial.best_rpm(self.wide_open)
            if best and abs(best[0] - way.attempt.rpm) < _RPM_APART:
                best = None
        if best and best[0] < way.attempt.rpm:
            offer("less_rpm", self.trial, *best, way.name, {"rpm": best[0], "feed_in": best[1]})
        rpm, feed = way.attempt.rpm, max(way.attempt.feed_in, advised or 0.0)
        if best and best[0] < rpm:
            rpm, feed = best
        if self.plan["people"]:
            order = list(hull.ROWS)
            for rows_name in order[order.index(self.plan["rows"]) + 1 :]:
                offer("forward", self._trial(rows_name), rpm, feed, way.name, {"rows": rows_name})
        dirt = [name for name, clean in _CLEAN.items() if self.plan[name] != clean]
        if dirt:
            self._offer(rows, way, self.cleaner().ways[way.name], "cleaner", {"what": dirt})
        if best and best[0] > rpm:
            offer("more_rpm", self.trial, *best, way.name, {"rpm": best[0], "feed_in": best[1]})
        if self.load:
            lighter = self._lighter(way, rpm, feed)
            if lighter is not None:
                share = lighter / self.load
                trial = self._trial(self.plan["rows"], share)
                told = {"load": lighter, "less": self.load - lighter}
                offer("less_load", trial, rpm, feed, way.name, told)
        return rows

    def _lighter(self, way: Way, rpm: float, feed: float) -> float | None:
        """The most aboard with which she is on plane within the room, on the low side [kg]."""
        most = self._heaviest(way.sign, self.trial.attempt(rpm, feed), self.load)
        if most is None or most >= self.load:
            return None
        return math.floor(_LOAD_SPARE * most / _LOAD_STEP) * _LOAD_STEP

    def _heaviest(self, sign: int, attempt: Attempt, limit: float | None) -> float | None:
        """The most aboard in this room, looked for from a load with which she planes at all [kg]."""
        trial = self.trial
        for share in _LIGHTER:
            if attempt.run.planed or not self.load:
                break
            trial = self._trial(self.plan["rows"], share)
            attempt = trial.attempt(attempt.rpm, attempt.feed_in)
        return trial.heaviest_load(attempt, sign, limit)

    def _offer(
        self, rows: list[dict[str, Any]], before: Way, after: Way, code: str, values: Mapping[str, Any]
    ) -> None:
        """Keep a remedy that betters the verdict or the room."""
        better = _RANKS[after.decision.verdict] < _RANKS[before.decision.verdict]
        was, now = before.distance.value, after.distance.value
        shorter = now is not None and (was is None or now < (1 - _LEAST_GAIN) * was)
        if better or (shorter and _RANKS[after.decision.verdict] <= _RANKS[before.decision.verdict]):
            distance = {"before": was, "after": now, "low": after.distance.low, "high": after.distance.high}
            rows.append({"code": code, "verdict": after.decision.verdict, "distance": distance, **values})


_RANKS = {"go": 0, "caution": 1, "no-go": 2}


def _rank(way: Way) -> tuple[int, float]:
    """Order of two ways: by verdict, then by the room they need on the far side."""
    band = way.distance
    far = math.inf if band.high is None else band.high
    return _RANKS[way.decision.verdict], far if far < math.inf else (band.value or math.inf) * 1e6


def _chance(attempt: Attempt) -> float:
    """Chance of letting go in an attempt that is a go."""
    if attempt.judged.chance is not None and attempt.judged.chance <= CHANCE:
        return attempt.judged.chance
    low, middle, _ = attempt.ratio
    if low is None or middle is None or middle <= low:
        return LOW
    return 0.5 * math.erfc(middle / (middle - low) * SIGMAS / math.sqrt(2))


def _exp(x: float | None) -> float | None:
    return None if x is None else math.exp(x)


def _value(value: float | None, low: float | None, high: float | None, unit: str) -> dict[str, Any]:
    return {"value": value, "unit": unit, "low": low, "high": high, "mark": "M"}
