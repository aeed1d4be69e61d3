"""How sure the check is: every reading and coefficient moved to its ends, the pump learned again under each.

Errors common to the notes and the plan cancel because S is learned through the same nozzle, areas, losses and
absorption law that the plan then uses. Shifts are carried in ln S and ln rpm, up and down kept apart.
"""

import copy
import math
from collections.abc import Callable, Iterable, Sequence
from functools import cached_property
from itertools import chain, repeat, zip_longest
from operator import mul
from typing import NamedTuple

from headwater import jet, notes, suction, water
from headwater.jet import GRAVITY
from headwater.notes import Bound
from headwater.suction import State
from headwater.tried import RPM_SCATTER, SIGMAS, STILL, Held, Tries

# 95 % half-widths of what is not an input of its own [P].
TACH_SCALE = 0.02  # of the tach, relative; common to notes and plan
PAPERS_POWER, PAPERS_RPM = 0.15, 0.05  # of engine power and wide-open rpm out of papers, relative
THRUST_DEDUCTION = (-0.08, 0.0, 0.05)  # low, middle, high; Eslamdoost et al. 2018 [S]

# Of letting go, the most that proven ground may carry: 4 % [P], less what the hunt for wrong gos found hidden
# in errors that notes from several places share only in part.
CHANCE = 0.0385
LOW, MIDDLE, HIGH = 0.025, 0.5, 0.975
EQUAL = 1e-6  # in ln S
# Inputs that a launch alone feels, and those that leave one unit and the water as they are.
LAUNCH_ALONE = frozenset(
    ("boat.dry_mass", "boat.centre_of_gravity", "boat.chine_beam", "thrust_deduction", "intake_length")
)
ELSEWHERE = LAUNCH_ALONE | {"engine_exponent"}
_FEW_PASSES = 2  # with so few the ends are worked out but once
_SAME_DOUBT = 0.005  # relative change of rpm under which the ends are not worked out again
DISAGREE_EASE = 0.95  # of the lowest let-go rpm, from where notes that contradict forbid a go [P]

Inputs = dict[str, float]


class Setting(NamedTuple):
    """The pump and the water here, under one set of inputs."""

    unit: jet.Unit  # with what lies on the grate here
    clean: jet.Unit  # with a clean grate, as notes count
    submergence: float  # z [m]
    vapor_pressure: float  # [Pa]
    density: float  # of the water with its air, here [kg/m3]
    head: float  # at rest, here [m]
    pressure_error: float  # [Pa], shared by notes made at this very place
    tach: float  # true rpm over rpm read


class Seen(NamedTuple):
    """A note as physics needs it."""

    note: int
    outcome: str
    rpm: float  # [1/min]
    boat_speed: float  # [m/s]
    air_pressure: float  # [Pa]
    vapor_pressure: float  # [Pa]
    density: float  # [kg/m3]
    head_sigma: float  # one sigma of its place's own readings [m]
    here: bool  # its pressure is the plan's own reading
    hint: bool  # of an older pump set-up, or it let go in froth or with a grate that was not clean
    clean: bool  # clear water and a clean grate: it may prove
    planed: bool = False  # a launch: it held at its hardest instant


class End(NamedTuple):
    """One input at one end of its range."""

    field: str
    inputs: Inputs
    setting: Setting
    plan_rpm: float
    xs: list[float | None]  # ln S of each note under it
    allowances: list[float]  # by how much it moves each launch's ln allowance on the drag


class Moved(NamedTuple):
    """The plan's state under one end of an input, or of its own reading."""

    setting: Setting
    state: State
    rpm: float


class Known(NamedTuple):
    """What is known of the pump for one state asked about."""

    bounds: list[Bound]  # on the limit, without those that contradict
    flare_bounds: list[Bound]
    belief: notes.Belief | None
    held: list[Bound]  # clean held notes of today's set-up, the hardest first
    lid: Bound | None  # the lowest let go

    @property
    def proven(self) -> Bound | None:
        """The hardest clean held note."""
        return self.held[0] if self.held else None


class Judged(NamedTuple):
    """A state against what is known of the pump."""

    asked: float | None  # ln S; none where no head is left
    boils: bool  # ahead of the impeller
    known: Known
    high: float | None  # ln of the high side of NPSHA/NPSHR; none while nothing bounds the pump from above
    chance: float | None  # of letting go; none where no held note asked as much
    new_ground: float | None  # the largest ln S that is a go on new ground
    disputed: bool  # notes contradict, and it is no more than 5 % in rpm under the lowest let go


class Flare(NamedTuple):
    """Where revs run up without letting go."""

    x: float  # ln S
    own: tuple[float, float]  # step of x down and up by what was learned, over 0
    learned: bool  # from a flared note, else typical


class Holding(NamedTuple):
    """The most rpm that is a go at a boat speed."""

    rpm: float  # [1/min]
    x: float  # ln S asked there
    kind: str  # what sets it: proven, chance, reserve, let_go, stop, disagree
    steps: Sequence[float | None]  # by how much each end moves x
    known: Known  # what it was judged by


class Line(NamedTuple):
    """An rpm at which the pump asks for a given ln S."""

    rpm: float
    x: float  # ln S asked there
    kind: str  # what sets it
    low: float  # rpm, 2.5 % point
    high: float
    power_low: float  # share of the line's power
    power_high: float


def setting(inputs: Inputs) -> Setting:
    """The pump and the water under a set of inputs, keyed by field."""
    clean = jet.unit(
        inputs["boat.nozzle_diameter"],
        inputs["boat.impeller_diameter"],
        inputs["boat.impeller_diameter"] * inputs["hub_share"],
        inputs["boat.wake_fraction"],
        inputs["boat.ram_loss"],
        inputs["boat.intake_loss"],
        inputs["boat.nozzle_loss"],
        inputs["boat.pump_efficiency"],
        inputs["boat.driveline_efficiency"],
        absorption(inputs),
        inputs["boat.gear_ratio"],
    )
    submergence = inputs["boat.shaft_depth"] - inputs["boat.impeller_diameter"] / 2
    temperature = inputs["place.water_temperature"]
    vapor_pressure = water.vapor_pressure(temperature)
    gas = suction.gas_share(inputs["gas"], inputs["expansion"])
    density = water.density(temperature) * (1 - gas)
    pressure_error = inputs["pressure_error"]
    air_pressure = inputs["place.air_pressure"] + pressure_error
    head = suction.head_at_rest(air_pressure, vapor_pressure, density, submergence)
    unit = jet.blocked(clean, inputs["grate_loss"])
    return Setting(unit, clean, submergence, vapor_pressure, density, head, pressure_error, inputs["tach"])


def absorption(inputs: Inputs) -> float:
    """Engine power that one unit absorbs over engine rpm cubed, from what wide open turned and where."""
    power = inputs["boat.engine_power"] * inputs["engine_there"]
    return float(jet.absorption(power, inputs["boat.wide_open_rpm"], inputs["boat.jets"]))


def asked(at: Setting, rpm: float, boat_speed: float) -> float | None:
    """ln S that the plan's place asks at an rpm and a boat speed; none where no head is left."""
    state = suction.state(at.unit, at.head, at.density, rpm, boat_speed)
    return math.log(at.tach * suction.speed_asked(state)) if state.npsh_available > 0 else None


def seen_state(at: Setting, seen: Seen) -> State:
    """The state a note was made in."""
    pressure = seen.air_pressure + (at.pressure_error if seen.here else 0.0)
    head = suction.head_at_rest(pressure, seen.vapor_pressure, seen.density, at.submergence)
    return suction.state(at.clean, head, seen.density, seen.rpm, seen.boat_speed)


def seen_asked(at: Setting, seen: Seen) -> float | None:
    """ln S that a note's own state asked of the pump; none where no head is left."""
    state = seen_state(at, seen)
    return math.log(at.tach * suction.speed_asked(state)) if state.npsh_available > 0 else None


def boiling_rpm(at: Setting, boat_speed: float) -> float:
    """Engine rpm at which water boils ahead of the impeller, p_1 = p_v; the head at rest must be over 0.

    Source: Bernoulli along the intake and the power balance, solved for rpm [D].
    """
    unit, ram = at.unit, jet.ram(at.unit, boat_speed)
    v_1 = math.sqrt((2 * GRAVITY * at.head + ram) / (1 + unit.intake_loss))
    v_j = v_1 * unit.inlet_area / unit.nozzle_area
    power = at.density * unit.nozzle_area / (2 * unit.efficiency) * v_j * (unit.outlet_factor * v_j**2 - ram)
    return float(max(power / unit.absorption, 0.0) ** (1 / 3))


def sumprod(first: Sequence[float], second: Sequence[float]) -> float:
    """Sum of products."""
    return float(sum(map(mul, first, second)))


def reach(steps: Sequence[float | None], own: float, sign: int) -> float:
    """How far a result reaches to one side: the larger step of each input's two ends, in quadrature.

    :param steps: of the result at both ends of each input in turn; none where an end has no head left
    :param own: a further step to that side, over 0
    :param sign: -1 for the low side, 1 for the high one
    :returns: the reach, over 0
    Source: propagation of uncertainty by one evaluation at each end [P].
    """
    total, pairs = own * own, iter(steps)
    for first, second in zip(pairs, pairs, strict=True):
        one, other = sign * (first or 0.0), sign * (second or 0.0)
        far = one if one > other else other
        if far > 0:
            total += far * far
    return math.sqrt(total)


def spread(
    centre: float, ends: Iterable[float | None], low: float = 0.0, high: float = 0.0
) -> tuple[float, float]:
    """Low and high side of a result from its values at the ends, see :func:`reach`."""
    steps = [None if end is None else end - centre for end in ends]
    return centre - reach(steps, low, -1), centre + reach(steps, high, 1)


class Reckoning:
    """One boat at one place with one plan: what its pump asks, what it has shown, and how sure that is.

    :param inputs: central inputs by key, SI
    :param spans: low and high end of each uncertain input
    :param seen: notes that count, of this set-up or an older one
    :param plan_rpm: rpm of the plan under given inputs
    :param boat_speed: of the plan [m/s]
    :param reserve: asked of NPSH on new ground
    :param fixed: ln S where the person fixed it
    :param tries: launches that were made, where the hull is known; those that planed are in ``seen``
    """

    def __init__(
        self,
        inputs: Inputs,
        spans: dict[str, tuple[float, float]],
        seen: Sequence[Seen],
        plan_rpm: Callable[[Inputs], float],
        boat_speed: float,
        reserve: float,
        fixed: float | None,
        tries: Tries | None = None,
    ) -> None:
        self.inputs, self.boat_speed, self.reserve, self.fixed = inputs, boat_speed, reserve, fixed
        self.centre = at = setting(inputs)
        self.rpm = plan_rpm(inputs)
        self.marks: list[notes.Mark] = []
        self._launched: dict[int, Held] = {}
        if tries:
            self.marks, self._launched = tries.first(inputs, at.clean, at.submergence, at.tach)
        self.seen, self.xs, self.sigmas, self.flow_per_rpm = self._read(seen)
        kept = {note.note for note in self.seen}
        self.without_head = [note.note for note in seen if note.note not in kept]
        self.state = suction.state(
            self.centre.unit, self.centre.head, self.centre.density, self.rpm, boat_speed
        )
        self.asked = asked(self.centre, self.rpm, boat_speed)
        self.ends = []
        for key, span in spans.items():
            for value in span:
                moved = {**inputs, key: value}
                at = self.centre if key in ELSEWHERE else setting(moved)
                allowances: list[float] = []
                asked_by: dict[int, float | None] = {}
                if tries and key in STILL:
                    allowances, asked_by = tries.still(at.submergence, at.tach)
                elif tries:
                    allowances, asked_by = tries.again(moved, at.clean, at.submergence, at.tach, self.marks)
                xs = [
                    asked_by[note.note] if note.planed else x if at is self.centre else seen_asked(at, note)
                    for note, x in zip(self.seen, self.xs, strict=True)
                ]
                self.ends.append(End(key, moved, at, plan_rpm(moved), xs, allowances))
        self.stop_dropped = any(
            note.outcome == "held" and note.clean and not note.planed and not self._above_boiling(note)
            for note in self.seen
        )

    def _read(self, seen: Sequence[Seen]) -> tuple[list[Seen], list[float], list[float], list[float]]:
        kept, xs, sigmas, flows = [], [], [], []
        for note in seen:
            if note.planed:
                held = self._launched[note.note]
                if held.x < math.inf:
                    kept.append(note._replace(boat_speed=held.boat_speed))
                    xs.append(held.x)
                    sigmas.append(held.sigma)
                    flows.append(held.flow_per_rpm)
                continue
            state = seen_state(self.centre, note)
            if state.npsh_available <= 0:
                continue
            slope = suction.rpm_slope(self.centre.unit, state, note.boat_speed)
            kept.append(note)
            xs.append(math.log(suction.speed_asked(state)))
            sigmas.append(math.hypot(slope * RPM_SCATTER / 2, 0.75 * note.head_sigma / state.npsh_available))
            flows.append(state.flow / note.rpm)
        return kept, xs, sigmas, flows

    def _above_boiling(self, note: Seen) -> bool:
        state = seen_state(self.centre, note)
        return bool(suction.static_pressure(state, note.vapor_pressure, note.density) > note.vapor_pressure)

    def replanned(self, rpm: float) -> "Reckoning":
        """The same with a plan at another engine rpm."""
        other = copy.copy(self)
        for name in ("known_at_plan", "capped", "learned_ends", "plan_states", "plan_steps", "plan_ratio"):
            other.__dict__.pop(name, None)
        other.__dict__.pop("plan_judged", None)
        at = other.centre
        other.rpm = rpm
        other.state = suction.state(at.unit, at.head, at.density, rpm, other.boat_speed)
        other.asked = asked(at, rpm, other.boat_speed)
        other.ends = [end._replace(plan_rpm=rpm) for end in other.ends]
        return other

    # What is known, for the state asked about

    def bounds(self, boat_speed: float, flow_per_rpm: float) -> list[Bound]:
        """Every note as a bound on the limit at a state with this Q/N; one made at another Q/N is spread."""
        limit = []
        for i, note in enumerate(self.seen):
            sigma = self.sigmas[i]
            if boat_speed or note.boat_speed:
                sigma = math.hypot(sigma, math.log(self.flow_per_rpm[i] / flow_per_rpm))
            if note.hint:
                sigma = math.hypot(sigma, notes.OLDER_SIGMA)
            limit.append(Bound(i, self.xs[i], sigma, note.outcome != "let_go", note.hint))
        return limit

    def known(self, boat_speed: float, flow_per_rpm: float) -> Known:
        """What the notes say of a state with this Q/N."""
        if boat_speed or any(note.boat_speed for note in self.seen):
            return self._known(boat_speed, flow_per_rpm)
        return self._known_standing

    @cached_property
    def _known_standing(self) -> Known:
        """The same at rest from notes at rest, which no Q/N sets apart."""
        return self._known(0.0, self.flow_at_rest)

    def _known(self, boat_speed: float, flow_per_rpm: float) -> Known:
        limit = self.bounds(boat_speed, flow_per_rpm)
        bounds = [b for b in limit if b.note not in self.dropped]
        held = [
            b
            for b in bounds
            if self.seen[b.note].outcome == "held" and self.seen[b.note].clean and not b.hint
        ]
        flare = [b for b in self._flare_bounds(limit) if b.note not in self._flare_dropped]
        return Known(
            bounds,
            flare,
            notes.learn(bounds) if bounds else None,
            sorted(held, key=lambda b: -b.x),
            notes.lowest_above(limit),
        )

    @cached_property
    def known_at_plan(self) -> Known:
        """What is known for the plan's own state."""
        return self.known(self.boat_speed, self.state.flow / self.rpm)

    def _flare_bounds(self, limit: Sequence[Bound]) -> list[Bound]:
        """Notes of today's set-up as bounds on the flare line: all but what held bounds it from above."""
        return [b._replace(below=self.seen[b.note].outcome == "held") for b in limit if not b.hint]

    @cached_property
    def _own(self) -> list[Bound]:
        """Notes of today's set-up as bounds on the limit, each with its own scatter alone."""
        return [
            Bound(i, x, sigma, note.outcome != "let_go", False)
            for i, (x, sigma, note) in enumerate(zip(self.xs, self.sigmas, self.seen, strict=True))
            if not note.hint
        ]

    def _apart(self, first: int, second: int) -> float:
        """One sigma in ln S between two notes that saw different blade angles."""
        if self.seen[first].boat_speed or self.seen[second].boat_speed:
            return abs(math.log(self.flow_per_rpm[first] / self.flow_per_rpm[second]))
        return 0.0

    @cached_property
    def contradiction(self) -> tuple[int, int] | None:
        """A note that held or flared and the let-go note it contradicts, by their places in ``seen``."""
        return notes.contradiction(self._own, self._apart)

    @cached_property
    def dropped(self) -> set[int]:
        """Notes that prove nothing, since they contradict."""
        return notes.crossed(self._own) if self.contradiction else set()

    @cached_property
    def _flare_dropped(self) -> set[int]:
        flare = self._flare_bounds(self._own)
        return notes.crossed(flare) if notes.contradiction(flare, self._apart) else set()

    @cached_property
    def today(self) -> bool:
        """Whether any note of today's pump set-up counts."""
        return any(not note.hint for note in self.seen)

    @cached_property
    def flow_at_rest(self) -> float:
        """Q/N at rest, the same at any rpm [m3 min/s]."""
        at = self.centre
        return float(suction.state(at.unit, at.head, at.density, self.rpm, 0.0).flow / self.rpm)

    @cached_property
    def capped(self) -> bool:
        """Whether the limit is known from above: S is fixed, or something of this set-up let go."""
        return self.fixed is not None or self.known_at_plan.lid is not None

    def limit(self, known: Known, share: float) -> float | None:
        """ln S of the pump's limit at a share of the belief; none where nothing is known."""
        if self.fixed is not None:
            return self.fixed
        return known.belief.quantile(share) if known.belief else None

    def flare(self, known: Known) -> Flare | None:
        """The flare line; none where nothing draws it."""
        flared = [b for b in known.flare_bounds if self.seen[b.note].outcome == "flared"]
        if flared and self.fixed is None:
            lowest = min(flared, key=lambda b: b.x)
            note, reach = self.seen[lowest.note], SIGMAS * lowest.sigma
            eased = seen_asked(self.centre, note._replace(rpm=note.rpm * notes.FLARE_EASE)) or lowest.x
            if any(b.below for b in known.flare_bounds):
                low, middle, high = (notes.learn(known.flare_bounds).quantile(q) for q in (LOW, MIDDLE, HIGH))
                if middle >= eased:  # a note that held far below does not lower the line
                    return Flare(middle, (middle - low, high - middle), True)
            return Flare(eased, (reach, reach), True)
        limits = [x for x in (self.limit(known, q) for q in (LOW, MIDDLE, HIGH)) if x is not None]
        if not limits or not (self.fixed is not None or known.lid):
            return None
        typical = limits[1] - 0.75 * math.log(notes.FLARE_RATIO)
        line = max(typical, known.proven.x) if known.proven else typical
        return Flare(line, (limits[1] - limits[0], limits[2] - limits[1]), False)

    # How the ends move things

    @cached_property
    def learned_ends(self) -> list[tuple[float, float, float] | None]:
        """By how much each end moves the low, middle and high quantile of ln S.

        Each note's S is worked out again under each end; the quantiles follow the notes, in the same way for
        any plan at this boat speed: as at wide open.
        """
        at, wide_open = self.centre, self.inputs["boat.wide_open_rpm"]
        flow = suction.state(at.unit, at.head, at.density, wide_open, self.boat_speed).flow
        known, still = self.known(self.boat_speed, flow / wide_open), (0.0, 0.0, 0.0)
        if self.fixed is not None or known.belief is None:
            return [still] * len(self.ends)
        low, middle, high = notes.followed(known.belief, known.bounds, (LOW, MIDDLE, HIGH))
        moved: list[tuple[float, float, float] | None] = []
        for end in self.ends:
            xs = [end.xs[b.note] for b in known.bounds]
            steps = [x - b.x for x, b in zip(xs, known.bounds, strict=True) if x is not None]
            if len(steps) < len(xs):
                moved.append(None)
                continue
            moved.append((sumprod(low, steps), sumprod(middle, steps), sumprod(high, steps)))
        return moved

    def learned_step(self, at: Setting) -> float:
        """By how much the notes move under another setting, on the mean."""
        if self.fixed is not None or not self.seen:
            return 0.0
        moved = [(seen_asked(at, note), x) for note, x in zip(self.seen, self.xs, strict=True)]
        steps = [there - x for there, x in moved if there is not None]
        return sum(steps) / len(steps) if steps else 0.0

    def asked_steps(self, rpm: float, boat_speed: float) -> list[float | None]:
        """By how much each end moves the ln S asked at an rpm and a boat speed here."""
        centre = asked(self.centre, rpm, boat_speed)
        if centre is None:
            return [None] * len(self.ends)
        moved = (
            centre if end.setting is self.centre else asked(end.setting, rpm, boat_speed) for end in self.ends
        )
        return [None if x is None else x - centre for x in moved]

    @cached_property
    def plan_states(self) -> list[Moved]:
        """The plan's state under each end of each input, and under both ends of its own reading last."""
        at, moved = self.centre, [(end.setting, end.plan_rpm) for end in self.ends]
        moved += [(at, self.rpm * (1 - RPM_SCATTER)), (at, self.rpm * (1 + RPM_SCATTER))]
        return [
            Moved(at, suction.state(at.unit, at.head, at.density, rpm, self.boat_speed), rpm)
            for at, rpm in moved
        ]

    @cached_property
    def plan_steps(self) -> list[float | None]:
        """By how much each of those moves the ln S that the plan asks."""
        assert self.asked is not None
        return [
            math.log(at.tach * suction.speed_asked(state)) - self.asked if state.npsh_available > 0 else None
            for at, state, _ in self.plan_states
        ]

    def slope(self, rpm: float, boat_speed: float) -> float:
        """d ln S_req / d ln rpm here."""
        at = self.centre
        state = suction.state(at.unit, at.head, at.density, rpm, boat_speed)
        return float(suction.rpm_slope(at.unit, state, boat_speed))

    def _blur(self, bound: Bound, slope: float, steps: Sequence[float | None]) -> float:
        """One sigma in ln S of what does not cancel between a state and a note.

        :param slope: d ln S_req / d ln rpm at the state
        :param steps: by how much each end moves the ln S that the state asks, and what else moves it
        """
        apart = list(steps)
        for k, (end, step) in enumerate(zip(self.ends, steps, strict=False)):
            there = end.xs[bound.note]
            apart[k] = None if step is None or there is None else step - (there - bound.x)
        return math.hypot(slope * RPM_SCATTER / 2, reach(apart, 0.0, 1) / SIGMAS)

    def _away(self, steps: Sequence[float | None], side: int) -> list[float | None]:
        """By how much each end moves the limit's quantile away from what a state asks."""
        learned = chain(self.learned_ends, repeat((0.0, 0.0, 0.0)))
        return [
            None if step is None or moved is None else moved[side] - step
            for step, moved in zip(steps, learned, strict=False)
        ]

    def ratio_low(self, known: Known, x: float, steps: Sequence[float | None]) -> float | None:
        """ln of the low side of NPSHA/NPSHR for a state that asks ln S of x."""
        middle, low = self.limit(known, MIDDLE), self.limit(known, LOW)
        if middle is None or low is None:
            return None
        return 4 / 3 * (middle - x - reach(self._away(steps, 0), middle - low, -1))

    def ratio_high(self, known: Known, x: float, steps: Sequence[float | None]) -> float | None:
        """ln of the high side of NPSHA/NPSHR; none while nothing bounds the pump from above."""
        middle, high = self.limit(known, MIDDLE), self.limit(known, HIGH)
        if middle is None or high is None or not self.capped:
            return None
        return 4 / 3 * (middle - x + reach(self._away(steps, 2), high - middle, 1))

    @cached_property
    def plan_ratio(self) -> tuple[float | None, float | None]:
        """ln of the low and the high side of NPSHA/NPSHR at the plan."""
        if self.asked is None:
            return None, None
        known = self.known_at_plan
        return (
            self.ratio_low(known, self.asked, self.plan_steps),
            self.ratio_high(known, self.asked, self.plan_steps),
        )

    @cached_property
    def plan_judged(self) -> Judged:
        """The plan's steady state against what is known of the pump."""
        known, at = self.known_at_plan, self.centre
        boils = suction.static_pressure(self.state, at.vapor_pressure, at.density) <= at.vapor_pressure
        if self.asked is None:
            return Judged(None, bool(boils), known, None, None, None, False)
        return self.judged(
            self.asked,
            bool(boils),
            known,
            self.rpm,
            self.boat_speed,
            self.plan_steps[:-2],
            self.plan_ratio[1],
        )

    def judged(
        self,
        x: float,
        boils: bool,
        known: Known,
        rpm: float,
        boat_speed: float,
        steps: Sequence[float | None],
        high: float | None,
    ) -> Judged:
        """A state that asks ln S of x against what is known of the pump.

        The state is blurred by what does not cancel with the nearest of the notes that prove it: the one that
        shares most of its errors.

        :param steps: by how much each end moves x, without the state's own reading
        :param high: ln of the high side of NPSHA/NPSHR
        """
        slope = self.slope(rpm, boat_speed)
        proving = [bound for bound in known.held if bound.x + EQUAL >= x]
        chance = None
        if proving and known.belief is not None and self.fixed is None:
            sigma = min(self._blur(bound, slope, steps) for bound in proving)
            chance = known.belief.chance_under(x, sigma)
        new = self._new_ground(known, x, [*steps, -slope * RPM_SCATTER, slope * RPM_SCATTER])
        disputed = False
        if self.contradiction and known.lid:
            eased = asked(self.centre, DISAGREE_EASE * self.rpm_at(known.lid.x, boat_speed), boat_speed)
            disputed = eased is not None and x >= eased
        return Judged(x, boils, known, high, chance, new, disputed)

    @cached_property
    def absorbed_steps(self) -> list[float]:
        """By how much each end moves ln power at the same rpm."""
        here = self.centre.unit.absorption
        return [math.log(end.setting.unit.absorption / here) for end in self.ends]

    # Lines: the rpm that holds, flares, lets go

    def rpm_at(self, x: float, boat_speed: float, steps: int = suction.STEPS) -> float:
        """Engine rpm that asks ln S of x here at a boat speed."""
        at = self.centre
        return float(suction.rpm_at(at.unit, at.head, at.density, boat_speed, math.exp(x), steps))

    @cached_property
    def has_head(self) -> bool:
        return self.centre.head > 0

    def holding(self, boat_speed: float, start: float | None = None, passes: int = 40) -> Holding | None:
        """The most rpm that is a go at a boat speed; none where nothing is known to hold.

        :param start: engine rpm to begin from
        :param passes: the most rounds, each judging with the doubt of the rpm found before
        """
        if not self.has_head or (self.fixed is None and not self.today):
            return None
        at, rpm = self.centre, start or self.rpm
        before: Holding | None = None
        found: Holding | None = None
        judged, same = math.inf, _SAME_DOUBT if passes > _FEW_PASSES else math.inf
        steps: list[float | None] = []
        for _ in range(passes):
            state = suction.state(at.unit, at.head, at.density, rpm, boat_speed)
            if state.npsh_available <= 0:
                rpm *= 0.8
                continue
            if not steps or abs(judged / rpm - 1) > same:
                judged, steps = rpm, self.asked_steps(rpm, boat_speed)
            known = self.known(boat_speed, state.flow / rpm)
            slope = float(suction.rpm_slope(at.unit, state, boat_speed))
            before, found = (
                found,
                self._hold(known, boat_speed, math.log(suction.speed_asked(state)), slope, steps),
            )
            settled = found is not None and abs(found.rpm / rpm - 1) < EQUAL / 10
            if found is None or (settled and (same == 0.0 or found.kind == "proven")):
                return found
            if abs(found.rpm / rpm - 1) < EQUAL:
                same = 0.0  # settled: once more with the doubt of this very rpm
            rpm = found.rpm
        # Two rpm that each lead to the other: the lower one is a go, judged at itself.
        return min(before, found, key=lambda one: one.rpm) if before and found else found

    def _hold(
        self, known: Known, boat_speed: float, x: float, slope: float, steps: Sequence[float | None]
    ) -> Holding | None:
        """The most rpm that is a go, judged with the doubt of a state that asks ln S of x."""
        limits = []
        if known.proven and known.belief and self.fixed is None:
            limits.append(self._proven_limit(known, known.belief, slope, steps))
        low = self.limit(known, LOW)
        if low is not None and (not limits or low - 0.75 * math.log(self.reserve) > limits[0][0]):
            new = self._new_ground(known, x, [*steps, -slope * RPM_SCATTER, slope * RPM_SCATTER])
            if new is not None:
                limits.append((new, "reserve"))
        if not limits:
            return None
        x, kind = max(limits)
        if known.lid and known.lid.x - EQUAL <= x:
            x, kind = known.lid.x - 2 * EQUAL, "let_go"
        found = self.rpm_at(x, boat_speed)
        stop = math.inf if self.stop_dropped else boiling_rpm(self.centre, boat_speed)
        if found >= stop:
            found, kind = stop * (1 - EQUAL), "stop"
        if self.contradiction and known.lid:
            eased = DISAGREE_EASE * self.rpm_at(known.lid.x, boat_speed)
            if found >= eased:
                found, kind = eased * (1 - EQUAL), "disagree"
        if kind in ("stop", "disagree"):
            x = asked(self.centre, found, boat_speed) or x
        return Holding(found, x, kind, steps, known)

    def _proven_limit(
        self, known: Known, belief: notes.Belief, slope: float, steps: Sequence[float | None]
    ) -> tuple[float, str]:
        """The largest ln S under a held note with the chance of letting go small enough, and what sets it."""
        sigma, x = math.inf, -math.inf
        for bound, lower in zip_longest(known.held, known.held[1:]):
            sigma = min(sigma, self._blur(bound, slope, steps))
            if belief.chance_under(bound.x, sigma) <= CHANCE:
                return bound.x, "proven"
            x = belief.x_at_chance(CHANCE, sigma)
            if lower is None or x > lower.x:
                break
        return x, "chance"

    def _new_ground(self, known: Known, x: float, steps: Sequence[float | None]) -> float | None:
        """The largest ln S that is a go on new ground, judged with the doubt of the state that asks x."""
        low = self.ratio_low(known, x, steps)
        if low is None:
            return None
        top = x + 0.75 * (low - math.log(self.reserve))
        flare = self.flare(known)
        if flare and flare.learned:
            top = min(top, flare.x - EQUAL)
        if self.fixed is not None:
            return top
        today = [b for b in known.bounds if not b.hint]
        beneath = any(b.below for b in today)  # held or flared: the limit lies over it
        above = any(
            self.seen[b.note].outcome != "held" for b in today
        )  # flared or let go: the line lies under it
        return top if beneath and above else None

    def line(
        self,
        x: float,
        boat_speed: float,
        kind: str,
        own: tuple[float, float],
        follows: tuple[int, int] | int,
        rpm: float,
        steps: Sequence[float | None] | None = None,
    ) -> Line:
        """A line's rpm with its band.

        :param x: ln S on the line
        :param own: step of x down and up by what was learned, over 0
        :param follows: the quantiles of S (0 low, 1 middle, 2 high) that the low and the high side move
            with, or the note that the whole line follows
        :param rpm: engine rpm on the line
        :param steps: by how much each end moves the ln S asked near there, for a band by the slope; left out,
            rpm is solved anew under each end
        """
        slope = self.slope(rpm, boat_speed)
        if isinstance(follows, int):
            here = self.xs[follows]
            theirs = [None if (there := end.xs[follows]) is None else there - here for end in self.ends]
            learned = (theirs, theirs)
        else:
            first, second = follows
            learned = (
                [None if q is None else q[first] for q in self.learned_ends],
                [None if q is None else q[second] for q in self.learned_ends],
            )
        low_ends = self._rpm_ends(x, boat_speed, kind, rpm, learned[0], steps)
        alike = learned[0] is learned[1]
        high_ends = low_ends if alike else self._rpm_ends(x, boat_speed, kind, rpm, learned[1], steps)
        far = own[0] / slope, own[1] / slope
        rpm_low, rpm_high = math.exp(-reach(low_ends, far[0], -1)), math.exp(reach(high_ends, far[1], 1))
        low_power, high_power = (self._power_ends(ends) for ends in (low_ends, high_ends))
        power_low, power_high = reach(low_power, 3 * far[0], -1), reach(high_power, 3 * far[1], 1)
        return Line(rpm, x, kind, rpm * rpm_low, rpm * rpm_high, math.exp(-power_low), math.exp(power_high))

    def _power_ends(self, rpm_ends: Sequence[float | None]) -> list[float | None]:
        """By how much each end moves ln power on a line, from how it moves ln rpm."""
        return [
            None if end is None else 3 * end + absorbed
            for end, absorbed in zip(rpm_ends, self.absorbed_steps, strict=True)
        ]

    def _rpm_ends(
        self,
        x: float,
        boat_speed: float,
        kind: str,
        rpm: float,
        moves: Sequence[float | None],
        steps: Sequence[float | None] | None,
    ) -> list[float | None]:
        """By how much each end moves ln rpm of a line, where it moves the line's ln S."""
        if steps is not None:
            slope = self.slope(rpm, boat_speed)
            return [
                None if move is None or step is None else (move - step) / slope
                for move, step in zip(moves, steps, strict=True)
            ]
        out: list[float | None] = []
        for end, move in zip(self.ends, moves, strict=True):
            at = end.setting
            if move is None or at.head <= 0:
                out.append(None)
            elif kind == "stop":
                out.append(math.log(boiling_rpm(at, boat_speed) / rpm))
            else:
                s = math.exp(x + move) / at.tach
                found = suction.rpm_at(at.unit, at.head, at.density, boat_speed, s, suction.FEW_STEPS)
                out.append(math.log(found / rpm))
        return out
