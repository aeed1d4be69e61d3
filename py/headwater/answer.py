"""The one door: a case in, an answer out, for the phone, the command line and the tests."""

import json
import math
from collections.abc import Callable, Mapping, Sequence
from functools import cached_property
from typing import Any

from headwater import air, engine, fields, hull, jet, notes, share, slip, suction, verdict, water, wording
from headwater.doubt import (
    HIGH,
    LAUNCH_ALONE,
    LOW,
    MIDDLE,
    PAPERS_RPM,
    THRUST_DEDUCTION,
    Holding,
    Inputs,
    Line,
    Reckoning,
    Setting,
    absorption,
    setting,
    spread,
)
from headwater.errors import BadReading, quote
from headwater.fields import FIELD, Readings
from headwater.inputs import (
    LAUNCHES,
    engine_exponent,
    inputs_of,
    older,
    pressure_doubt,
    seen_of,
    spans_of,
    tries_of,
    wide_open_here,
)
from headwater.jet import GRAVITY
from headwater.notes import Bound
from headwater.outing import Outlook, flags, foam
from headwater.suction import State
from headwater.tried import RPM_SCATTER, SIGMAS
from headwater.units import QUANTITIES as UNITS
from headwater.units import parse
from headwater.verdict import Decision

CONTRACT = 1
CURVE_SPEEDS = [float(v) for v in range(26)]  # m/s
_NODES = (0.0, 8.0, 16.0, 25.0)  # m/s, where the curve's limits and bands are worked out in full
_NODE_PASSES = 1  # rounds in finding a node's holding rpm, from where the node before it holds
# Head over boiling at sea level in 15 C water [m], for the share of what she holds there.
_SEA_LEVEL_HEAD = suction.head_at_rest(
    air.STANDARD_PRESSURE, water.vapor_pressure(288.15), water.density(288.15), 0.0
)
# What the movers try, and by how much: a round step in the person's own unit, by quantity and unit.
_MOVER_STEPS = {
    "place.altitude": ("altitude", {"m": 300.0, "ft": 1000.0}, "m"),
    "place.station_pressure": ("pressure", {"hPa": -10.0, "inHg": -0.3}, "Pa"),
    "place.water_temperature": ("temperature_step", {"C": 5.0, "F": 10.0}, "K"),
    "boat.shaft_depth": ("length", {"m": 0.05, "in": 2.0}, "m"),
    "plan.boat_speed": ("speed", {"km/h": 10.0, "mph": 5.0, "kn": 5.0}, "m/s"),
}


def answer(case: Any, units: str | Mapping[str, str] | None = None) -> dict[str, Any]:
    """Whether the pump holds water: the whole answer to a case.

    :param case: readings by key, quantities as strings with a unit
    :param units: "us", "metric" or a unit for each quantity, for the sentences; by default what was typed
    :returns: verdict, headline, reasons, values with bands, curve and the rest; with errors no values
    Raises nothing: bad readings come back in ``errors``, all at once.
    """
    return _answered(case, units, WHOLE)[0]


# How far an answer is worked out: what stands still, the launch as well, what would help as well.
STEADY, LAUNCH, WHOLE = 0, 1, 2


def _answered(
    case: Any, units: str | Mapping[str, str] | None, depth: int
) -> tuple[dict[str, Any], dict[str, str]]:
    """An answer as far as asked for, and the units of its sentences."""
    readings = fields.read(case)
    chosen = wording.units_for(readings, units)
    if not readings.errors:
        return _Answer(readings, chosen, depth).build(), chosen
    return {
        "contract": CONTRACT,
        "verdict": None,
        "headline": wording.errors_headline(readings.errors),
        "ground": "unknown",
        "reasons": [],
        "cautions": [],
        "values": {},
        "equivalents": [],
        "curve": {},
        "ledger": [],
        "movers": [],
        "launch": None,
        "errors": readings.errors,
        "understood": readings.understood,
    }, chosen


def answer_json(text: str) -> str:
    """The answer to a case given as JSON text, as JSON text."""
    return _dump(answer(_load(text)))


def _load(text: str) -> Any:
    try:
        return json.loads(text)
    except (ValueError, RecursionError):
        return text  # not a case: the fields say so


def _dump(value: Any) -> str:
    return json.dumps(value, allow_nan=False, ensure_ascii=False, separators=(",", ":"))


def _value(
    value: float | None, unit: str, low: float | None, high: float | None, mark: str, **more: bool
) -> dict[str, Any]:
    return {"value": value, "unit": unit, "low": low, "high": high, "mark": mark, **more}


def _lagrange(at: float) -> tuple[float, ...]:
    """Shares of the nodes in a value between them, by the polynomial through all."""
    return tuple(
        math.prod((at - other) / (node - other) for other in _NODES if other != node) for node in _NODES
    )


_CURVE_SHARES = [_lagrange(speed) for speed in CURVE_SPEEDS]


def _launching(readings: Readings) -> bool:
    """Whether a launch is asked about: from standing, with the hull and the load known."""
    boat, loaded = readings.values["boat"], {"plan.people", "plan.gear"} & readings.given
    known = "chine_beam" in boat and "dry_mass" in boat
    return bool(loaded and known and not readings.values["plan"]["boat_speed"])


class _Answer:
    """One answer in the making."""

    def __init__(self, readings: Readings, units: Mapping[str, str], depth: int) -> None:
        self.readings, self.values, self.units = readings, readings.values, units
        self.boat, self.place, self.plan = (self.values[part] for part in ("boat", "place", "plan"))
        self.running = self.boat["jets_running"]
        self.speed = float(self.plan["boat_speed"])
        self.typed = any(key in self.plan for key in ("power", "rpm", "throttle"))
        self.depth = depth
        self.outlook: Outlook | None = None
        self.launching = _launching(readings)
        # A launch that planed counts as a note; to run it again takes a while: the steady part comes first.
        noted = any(note["outcome"] in LAUNCHES for note in self.values["notes"])
        self.tries = tries_of(self.values) if depth > STEADY and (self.launching or noted) else None
        inputs = inputs_of(self.values)
        self.wide_open, self.exponent = wide_open_here(inputs), inputs["engine_exponent"]
        if inputs["gas"]:
            inputs["expansion"] = self._expansion(inputs)
        self.check = self.reckon(inputs, self.speed)
        self.held_to = self.check.holding(self.speed)
        standing = self.speed == 0
        self.held_standing = (
            self.held_to if standing else self.check.holding(0.0, min(self.check.rpm, self.wide_open))
        )
        self.lines = self._lines()
        self.shares = {"holding_rpm_share": self._share(0.5), "holding_power_share": self._share(1.5)}
        papers = self.boat["rpm_from"] == "papers" and "power" in self.plan
        holding_rpm = self.held_to.rpm if self.held_to else None
        self.decision = verdict.hindered(
            verdict.steady(self.check, self.typed, papers, holding_rpm),
            foam(self.values, self.check),
            flags(self.values, self.check),
        )

    def reckon(self, inputs: Inputs, speed: float) -> Reckoning:
        fixed = self.boat.get("suction_specific_speed")
        spans = spans_of(self.values, self.readings.given, inputs)
        if not self.tries:
            spans = {key: span for key, span in spans.items() if key not in LAUNCH_ALONE}
        return Reckoning(
            inputs,
            spans,
            [seen for seen in seen_of(self.values) if self.tries or not seen.planed],
            self.plan_rpm,
            speed,
            self.plan["reserve"],
            math.log(fixed) if fixed else None,
            self.tries,
        )

    def _expansion(self, inputs: Inputs) -> float:
        """How many times air in the water has expanded ahead of the impeller, by clear water's pressure.

        At the plan; where none was typed at the most that is a go.
        """
        clear = self.reckon({**inputs, "gas": 0.0}, self.speed)
        held = None if self.typed else clear.holding(self.speed)
        at, rpm = clear.centre, min(held.rpm, clear.rpm) if held else clear.rpm
        state = suction.state(at.unit, at.head, at.density, rpm, self.speed)
        ahead = suction.static_pressure(state, at.vapor_pressure, at.density)
        return float(inputs["place.air_pressure"] / ahead) if ahead > at.vapor_pressure else 1.0

    def plan_rpm(self, inputs: Inputs) -> float:
        """Engine rpm of the plan; wide open where none was typed."""
        if "rpm" in self.plan:
            return float(self.plan["rpm"])
        if "power" in self.plan:
            return float((self.plan["power"] / self.running / absorption(inputs)) ** (1 / 3))
        # A share, or no plan typed, counts as a plan in rpm of wide open, as sure as the engine is.
        thin = inputs["engine_here"] / inputs["engine_there"]
        turned = self.wide_open * thin ** ((inputs["engine_exponent"] - self.exponent) / 3)
        return float(self.plan.get("throttle", 1.0) * turned)

    def power(self, rpm: float) -> float:
        """Engine power of the running units at an rpm [W]."""
        return float(self.check.centre.unit.absorption * self.running * rpm**3)

    def build(self) -> dict[str, Any]:
        curve = self._curve()
        equivalents = self._equivalents()
        facts = self._facts(curve, equivalents)
        decision = self._launch(facts) if self.launching and self.tries else self.decision
        launched, facts["why"] = facts["launch"], decision.why
        return {
            "contract": CONTRACT,
            "verdict": decision.verdict,
            "headline": wording.headline(decision.verdict, decision.code, facts, self.units),
            "ground": decision.ground,
            "reasons": wording.reasons(decision.why, facts, self.units),
            "cautions": wording.cautions(
                [*self._caution_codes(), *facts["launch_cautions"]], facts, self.units
            ),
            "values": self._values(facts),
            "equivalents": equivalents,
            "curve": curve,
            "ledger": self._ledger(),
            "movers": self._movers(),
            "launch": launched,
            "errors": [],
            "understood": self.readings.understood,
        }

    # The launch

    def _launch(self, facts: dict[str, Any]) -> Decision:
        """Work the launch out, put it among the facts, and decide by it."""
        assert self.tries
        self.outlook = outlook = Outlook(
            self.values,
            self.check,
            self.tries,
            self.wide_open,
            self._allowed if self.holding_nodes else None,
            facts["full_speed"],
            self._cleaner,
        )
        launched = outlook.build()
        if self.depth == WHOLE:
            later = outlook.later()
            launched["remedies"] = later.pop("remedies")
            for name, row in later.items():
                launched[name].update(row)
        facts["launch"] = launched
        facts["launch_cautions"] = outlook.cautions()
        facts["critical_speed"] = hull.critical_speed(self.place.get("depth", math.inf))
        if not self.typed:
            self.check = self.check.replanned(outlook.planned.rpm)
            facts["plan_rpm"] = outlook.planned.rpm
        return outlook.ways[outlook.better].decision

    def _cleaner(self) -> Outlook:
        """The same launch in clear water with a clean grate."""
        values = {**self.values, "plan": {**self.plan, "water": "clear", "grate": "clean"}}
        other = _Answer(self.readings._replace(values=values), self.units, LAUNCH)
        other.build()
        assert other.outlook
        return other.outlook

    def _allowed(self, speed: float) -> float:
        """The most ln S that is a go at a boat speed; as the curve has it."""
        v = min(speed, _NODES[-1])
        a, b, c, d = self._allowed_cubic
        return a + v * (b + v * (c + v * d))

    @cached_property
    def _allowed_cubic(self) -> tuple[float, float, float, float]:
        """Coefficients of the cubic through the nodes, by divided differences."""
        table, rows = list(self.holding_nodes), []
        for order in range(len(_NODES)):
            rows.append(table[0])
            table = [
                (table[i + 1] - table[i]) / (_NODES[i + order + 1] - _NODES[i]) for i in range(len(table) - 1)
            ]
        f0, f1, f2, f3 = rows
        _, p, q, _ = _NODES  # the first is 0
        return f0, f1 - p * f2 + p * q * f3, f2 - (p + q) * f3, f3

    # Lines and curve

    def _held_line(self, held: Holding, speed: float, bounds: list[Bound], exact: bool) -> Line:
        """The line that holds, with the band of what sets it."""
        check, steps = self.check, None if exact else held.steps
        if check.fixed is not None:
            return check.line(held.x, speed, held.kind, (0.0, 0.0), (0, 0), held.rpm, steps)
        near = min((b for b in bounds if not b.hint), key=lambda b: abs(b.x - held.x))
        own = SIGMAS * near.sigma
        follows = near.note if held.kind in ("proven", "let_go", "disagree") else (0, 0)
        return check.line(held.x, speed, held.kind, (own, own), follows, held.rpm, steps)

    def _lines_at(self, speed: float, held: Holding | None, exact: bool) -> dict[str, Line]:
        """The lines that can be drawn at a boat speed: holding, let_go, flare.

        :param exact: work each line's band out at its own rpm, not all at that which holds
        """
        check, at = self.check, self.check.centre
        if not check.has_head:
            return {}
        if held:
            known, shared = held.known, held.steps
        else:
            state = suction.state(at.unit, at.head, at.density, self.wide_open, speed)
            known = check.known(speed, state.flow / self.wide_open)
            shared = check.asked_steps(self.wide_open, speed)
        steps = None if exact else shared

        def line(x: float, kind: str, own: tuple[float, float]) -> Line:
            return check.line(x, speed, kind, own, (0, 2), check.rpm_at(x, speed), steps)

        lines = {}
        if held:
            lines["holding"] = self._held_line(held, speed, known.bounds, exact)
        if check.capped:
            low, middle, high = (check.limit(known, share) for share in (LOW, MIDDLE, HIGH))
            if low is not None and middle is not None and high is not None:
                lines["let_go"] = line(middle, "let_go", (middle - low, high - middle))
        flare = check.flare(known)
        if flare:
            rpm = check.rpm_at(flare.x, speed)
            if flare.learned or "let_go" not in lines:
                lines["flare"] = check.line(flare.x, speed, "flare", flare.own, (0, 2), rpm, shared)
            else:  # typical: it lies as surely as the let-go line that it is drawn from
                gone, share = lines["let_go"], rpm / lines["let_go"].rpm
                lines["flare"] = gone._replace(
                    rpm=rpm, x=flare.x, kind="flare", low=gone.low * share, high=gone.high * share
                )
        return lines

    def _lines(self) -> dict[str, Line]:
        return self._lines_at(self.speed, self.held_to, exact=True)

    def _curve(self) -> dict[str, Any]:
        """The lines from 0 to 25 m/s: rpm solved at each speed, limit and band interpolated between nodes."""
        check, nodes, held = self.check, [], self.held_standing
        for speed in _NODES:
            if speed:
                held = check.holding(speed, check.rpm_at(held.x, speed) if held else None, _NODE_PASSES)
            nodes.append(self.lines if speed == self.speed else self._lines_at(speed, held, exact=False))
        self.holding_nodes = [node["holding"].x for node in nodes if "holding" in node]
        if len(self.holding_nodes) < len(_NODES):
            self.holding_nodes = []
        curve: dict[str, Any] = {"boat_speed": CURVE_SPEEDS}
        for name in ("holding", "let_go", "flare"):
            drawn = all(name in node for node in nodes)
            rpm, power = self._curve_line([node[name] for node in nodes]) if drawn else (None, None)
            curve[name + "_rpm"], curve[name + "_power"] = rpm, power
        curve["engine_limit_rpm"] = self.wide_open
        curve["engine_limit_power"] = self.power(self.wide_open)
        return curve

    def _curve_line(self, nodes: list[Line]) -> tuple[dict[str, list[float]], dict[str, list[float]]]:
        def between(values: Sequence[float]) -> list[float]:
            first, second, third, fourth = values
            return [a * first + b * second + c * third + d * fourth for a, b, c, d in _CURVE_SHARES]

        at, full = self.check.centre, self.power(1.0)
        limits = [math.exp(x) for x in between([node.x for node in nodes])]
        rpm = [
            float(suction.rpm_at(at.unit, at.head, at.density, speed, s, suction.ONE_STEP))
            for speed, s in zip(CURVE_SPEEDS, limits, strict=True)
        ]
        power = [full * value**3 for value in rpm]

        def line(values: list[float], low: list[float], high: list[float]) -> dict[str, list[float]]:
            return {
                "value": values,
                "low": [value * share for value, share in zip(values, low, strict=True)],
                "high": [value * share for value, share in zip(values, high, strict=True)],
            }

        low, high = between([n.low / n.rpm for n in nodes]), between([n.high / n.rpm for n in nodes])
        weak, strong = between([n.power_low for n in nodes]), between([n.power_high for n in nodes])
        return line(rpm, low, high), line(power, weak, strong)

    def _speed_for(self, rpm: float, curve: Mapping[str, Any]) -> float | None:
        """Boat speed from which an rpm is a go; 0 at rest, none where it never is."""
        if not self.held_standing or curve["holding_rpm"] is None:
            return None
        if self.held_standing.rpm >= rpm:
            return 0.0
        holds = curve["holding_rpm"]["value"]
        after = next((i for i, held in enumerate(holds) if held >= rpm), None)
        if after is None:
            return None
        v0, v1 = CURVE_SPEEDS[after - 1], CURVE_SPEEDS[after]
        rise = (holds[after] - holds[after - 1]) / (v1 - v0)
        speed = v0 + (rpm - holds[after - 1]) / rise
        found = self.check.holding(speed, rpm, passes=1)
        return max(speed + (rpm - found.rpm) / rise, 0.0) if found else None

    # Parts of the answer

    def _equivalents(self) -> list[dict[str, Any]]:
        """One row a note; without rpm where it was made at no known speed or where no head is left."""
        check, at = self.check, self.check.centre
        out: list[dict[str, Any]] = [
            {
                "note": i,
                "outcome": note["outcome"],
                "rpm_there": note["rpm"],
                "rpm_here": None,
                "low": None,
                "high": None,
            }
            for i, note in enumerate(self.values["notes"])
        ]
        for i, seen in enumerate(check.seen if check.has_head else ()):
            rpm = check.rpm_at(check.xs[i], self.speed)
            line = self.lines.get("holding")
            if not (line and line.kind == "proven" and line.x == check.xs[i]):
                state = suction.state(at.unit, at.head, at.density, rpm, self.speed)
                own = SIGMAS * check.bounds(self.speed, state.flow / rpm)[i].sigma
                line = check.line(check.xs[i], self.speed, seen.outcome, (own, own), i, rpm)
            out[seen.note].update(rpm_here=rpm, low=line.low, high=line.high)
        return out

    def _facts(self, curve: Mapping[str, Any], equivalents: list[dict[str, Any]]) -> dict[str, Any]:
        """What the sentences need, SI."""
        check = self.check
        facts: dict[str, Any] = {
            "typed": self.typed,
            "boat_speed": self.speed,
            "plan_rpm": check.rpm,
            "plan_power": self.power(check.rpm),
            "wide_open_rpm": self.wide_open,
            "holding_rpm": self.held_to.rpm if self.held_to else None,
            "standing_rpm": self.held_standing.rpm if self.held_standing else None,
            "let_go_rpm": self.lines["let_go"].rpm if "let_go" in self.lines else None,
            "full_speed": self._speed_for(self.wide_open, curve),
            "reserve": self.plan["reserve"],
            "teach": self._teach(),
            "note": None,
            "launch": None,
            "launch_cautions": [],
            "direction": self.plan.get("direction"),
            "holding_rpm_share": self.shares["holding_rpm_share"][0],
            "holding_power_share": self.shares["holding_power_share"][0],
        }
        asks_speed = self.typed and self.decision.verdict != "go"
        facts["plan_speed"] = self._speed_for(check.rpm, curve) if asks_speed else facts["full_speed"]
        lead = self._lead(equivalents)
        if lead:
            facts["note"] = {
                **lead,
                "label": self.values["notes"][lead["note"]].get("label", ""),
                "place": self.place.get("label", ""),
            }
        if check.contradiction:
            facts["disagree"] = [self._named(check.seen[i].note) for i in check.contradiction]
        facts["off"] = [self._named(note) for note in check.without_head]
        facts["speedless"] = [self._named(i) for i in self._speedless()]
        return facts

    def _speedless(self) -> list[int]:
        """Notes that do not say whether she stood or ran."""
        return [
            i
            for i, note in enumerate(self.values["notes"])
            if "boat_speed" not in note and note["outcome"] not in LAUNCHES
        ]

    def _named(self, index: int) -> dict[str, Any]:
        note = self.values["notes"][index]
        return {
            "index": index,
            "rpm": note["rpm"],
            "outcome": note["outcome"],
            "label": note.get("label", ""),
        }

    def _lead(self, equivalents: list[dict[str, Any]]) -> dict[str, Any] | None:
        """The equivalent that leads the answer: the best held note's, else the lowest that did not hold."""
        check = self.check
        known = check.known_at_plan
        if not check.has_head:
            return None
        held = sorted(known.held, key=lambda b: check.seen[b.note].planed)  # a plain one before a launch
        if held:
            return equivalents[check.seen[held[0].note].note]
        rest = [equivalents[seen.note] for seen in check.seen if not seen.hint and seen.outcome != "held"]
        return min(rest, key=lambda row: row["rpm_here"]) if rest else None

    def _teach(self) -> dict[str, Any] | None:
        """The one observation that would teach most: its code and the rpm to try here, if any."""
        check = self.check
        if check.fixed is not None or not check.has_head:
            return None
        standing = check.known(0.0, check.flow_at_rest)
        held, lid = standing.proven, standing.lid
        if held is None and lid is None:
            return {"code": "teach_first"}
        if held is None and lid is not None:
            return {"code": "teach_lower", "rpm": notes.FLARE_EASE * check.rpm_at(lid.x, 0.0)}
        assert held is not None
        holds = check.rpm_at(held.x, 0.0)
        if lid is None:
            return {"code": "teach_upper", "rpm": holds}
        lets_go = check.rpm_at(lid.x, 0.0)
        if lets_go < holds:
            return {"code": "teach_again", "rpm": lets_go}
        if self.held_standing and self.held_standing.kind == "chance":
            return {"code": "teach_repeat", "rpm": self.held_standing.rpm}
        return {"code": "teach_between", "rpm": (holds + lets_go) / 2} if lets_go > 1.1 * holds else None

    def _caution_codes(self) -> list[str]:
        check, codes = self.check, []
        if check.rpm > self.wide_open * (1 + 1e-9):
            codes.append("over_wide_open")
        if check.contradiction:
            codes.append("notes_disagree")
        if check.stop_dropped or check.without_head:
            codes.append("measurement_off")
        if self._speedless():
            codes.append("note_needs_speed")
        if check.seen and not check.today:
            codes.append("older_notes_only")
        elif any(note.hint for note in check.seen):
            codes.append("older_notes")
        if check.fixed is not None and self._fixed_disagrees():
            codes.append("fixed_disagrees")
        if "station_pressure" in self.place and "altitude" not in self.place:
            codes.append("barometer_at_water")
        if self.boat["rpm_from"] == "papers":
            codes.append("papers")
        if not self.launching and not self.speed:
            loaded = {"plan.people", "plan.gear"} & self.readings.given
            if loaded:
                codes.append("hull_unknown")
            elif "chine_beam" in self.boat and "dry_mass" in self.boat:
                codes.append("load_unknown")
        if "rpm" not in self.plan and "power" not in self.plan and self._engine_reckoned():
            codes.append("engine_extrapolated")
        return codes

    def _engine_reckoned(self) -> bool:
        """Whether what wide open turns here is reckoned past the standards' reach, and was never read."""
        low = air.standard_pressure(engine.EXTRAPOLATED_ABOVE)
        return self.check.inputs["place.air_pressure"] < low and "high_rpm" not in self.boat

    def _fixed_disagrees(self) -> bool:
        check = self.check
        assert check.fixed is not None
        for x, sigma, note in zip(check.xs, check.sigmas, check.seen, strict=True):
            crossed = check.fixed - x if note.outcome == "let_go" else x - check.fixed
            if not note.hint and crossed > SIGMAS * sigma:
                return True
        return False

    def _share(self, power: float) -> tuple[float, float, float]:
        """What any pump holds at rest here over what it holds at sea level in 15 C water, with its band."""

        def share(at: Setting) -> float:
            level = _SEA_LEVEL_HEAD + at.submergence
            return float(max(at.head / level, 0.0) ** power) if level > 0 else 0.0

        centre = share(self.check.centre)
        low, high = spread(centre, (share(end.setting) for end in self.check.ends))
        return centre, max(low, 0.0), high

    def _values(self, facts: Mapping[str, Any]) -> dict[str, Any]:
        check = self.check
        out = {
            **self._here(),
            **self._at_plan(),
            **self._against_limit(),
            "holding_rpm": None,
            "holding_power": None,
            "let_go_rpm": None,
            "let_go_power": None,
            "flare_rpm": None,
            "flare_power": None,
        }
        for name, line in self.lines.items():
            out_of_reach = {"capped": True} if line.rpm > self.wide_open else {}
            power = self.power(line.rpm)
            mark = "P" if name == "flare" else "M"
            if name == "holding" and not self.speed and check.fixed is None:
                mark = "D"  # at rest it scales from the note whatever the coefficients
            out[name + "_rpm"] = _value(line.rpm, "rev/min", line.low, line.high, mark, **out_of_reach)
            low, high = power * line.power_low, power * line.power_high
            out[name + "_power"] = _value(power, "W", low, high, mark, **out_of_reach)
        for name, (centre, low, high) in self.shares.items():
            out[name] = _value(centre, "1", low, high, "D")
        full = facts["full_speed"]
        out["full_speed"] = None if full is None else _value(full, "m/s", None, None, "M")
        return out

    def _here(self) -> dict[str, Any]:
        """The water and the air here."""
        at, pressure = self.check.centre, self.check.inputs["place.air_pressure"]
        doubt = pressure_doubt(self.place)
        warm = FIELD["place.water_temperature"].tolerance
        here = self.check.inputs["place.water_temperature"]
        cold, hot = max(here - warm, 273.15), here + warm
        boils = [water.boiling_temperature(p) for p in (pressure, pressure - doubt, pressure + doubt)]
        low_density, high_density = sorted((water.density(cold), water.density(hot)))
        return {
            "vapor_pressure": _value(
                at.vapor_pressure, "Pa", water.vapor_pressure(cold), water.vapor_pressure(hot), "V"
            ),
            "boiling_temperature": _value(boils[0], "K", boils[1], boils[2], "V"),
            "air_pressure": _value(pressure, "Pa", pressure - doubt, pressure + doubt, "V"),
            "water_density": _value(at.density, "kg/m3", low_density, high_density, "V"),
        }

    def _at_plan(self) -> dict[str, Any]:
        """What the plan makes of one unit, and of the boat."""
        check, running = self.check, self.running

        def band(get: Callable[[Setting, State, float], float], unit: str, mark: str) -> dict[str, Any]:
            centre = get(check.centre, check.state, check.rpm)
            ends = [get(at, state, rpm) for at, state, rpm in check.plan_states]
            if centre <= 0 or min(ends) <= 0:
                return _value(centre, unit, *spread(centre, ends), mark)
            low, high = spread(0.0, [math.log(end / centre) for end in ends])
            return _value(centre, unit, centre * math.exp(low), centre * math.exp(high), mark)

        def push(at: Setting, state: State, deduction: float) -> float:
            return float(running * jet.thrust(at.unit, state.jet_speed, self.speed, at.density, deduction))

        least, usual, most = THRUST_DEDUCTION
        thrust = push(check.centre, check.state, usual)
        ends = [push(at, state, usual) for at, state, _ in check.plan_states]
        deducted = [push(check.centre, check.state, end) for end in (most, least)]
        asked = None
        if check.asked is not None:
            low, high = (math.exp(check.asked + side) for side in spread(0.0, check.plan_steps))
            asked = _value(math.exp(check.asked), "metric", low, high, "M")
        return {
            "jet_speed": band(lambda at, state, rpm: state.jet_speed, "m/s", "M"),
            "flow_rate": band(lambda at, state, rpm: state.flow, "m3/s", "M"),
            "impeller_inlet_speed": band(lambda at, state, rpm: state.inlet_speed, "m/s", "M"),
            "npsh_available": band(lambda at, state, rpm: state.npsh_available, "m", "M"),
            "inlet_static_pressure": band(
                lambda at, state, rpm: suction.static_pressure(state, at.vapor_pressure, at.density),
                "Pa",
                "M",
            ),
            "thrust": _value(thrust, "N", *spread(thrust, [*ends, *deducted]), "M"),
            "planned_power": band(lambda at, state, rpm: running * state.power, "W", "P"),
            "planned_rpm": band(lambda at, state, rpm: rpm, "rev/min", "P"),
            "suction_specific_speed_asked": asked,
        }

    def _against_limit(self) -> dict[str, Any]:
        """The plan against what is known of the pump's limit: NPSHR, margin, ratio and S.

        While nothing bounds the pump from above, each has but one side.
        """
        check = self.check
        learned_ends = [*check.learned_ends, (0.0, 0.0, 0.0), (0.0, 0.0, 0.0)]
        found = [check.limit(check.known_at_plan, share) for share in (LOW, MIDDLE, HIGH)]
        quantiles = [x for x in found if x is not None]
        if not quantiles or not (check.fixed is not None or check.today):
            return dict.fromkeys(("npsh_required", "margin", "ratio", "suction_specific_speed"))

        def side(get: Callable[[Setting, State, float], float], which: int, limit: int) -> float:
            """The low (0) or high (1) side of a result, made by the limit's low (0) or high (2) end."""
            base = get(check.centre, check.state, quantiles[limit])
            middle = get(check.centre, check.state, quantiles[1])
            own = abs(middle - base)
            ends = [
                None if learned is None else middle + get(at, state, quantiles[limit] + learned[limit]) - base
                for (at, state, _), learned in zip(check.plan_states, learned_ends, strict=True)
            ]
            return spread(middle, ends, low=own, high=own)[which]

        def required(at: Setting, state: State, x: float) -> float:
            """ln NPSHR."""
            return math.log(suction.npsh_required(state, math.exp(x) / at.tach))

        def margin(at: Setting, state: State, x: float) -> float:
            return float(state.npsh_available) - math.exp(required(at, state, x))

        def limit(at: Setting, state: State, x: float) -> float:
            return x

        capped, middle = check.capped, quantiles[1]
        log_low, log_high = check.plan_ratio
        ratio = None if check.asked is None else math.exp(4 / 3 * (middle - check.asked))
        demand = math.exp(required(check.centre, check.state, middle))
        s_low, s_high = math.exp(side(limit, 0, 0)), math.exp(side(limit, 1, 2)) if capped else None
        return {
            "npsh_required": _value(
                demand if capped else None,
                "m",
                math.exp(side(required, 0, 2)) if capped else None,
                math.exp(side(required, 1, 0)),
                "M",
            ),
            "margin": _value(
                margin(check.centre, check.state, middle) if capped else None,
                "m",
                side(margin, 0, 0),
                side(margin, 1, 2) if capped else None,
                "M",
            ),
            "ratio": None
            if ratio is None
            else _value(
                ratio if capped else None,
                "1",
                None if log_low is None else math.exp(log_low),
                None if log_high is None else math.exp(log_high),
                "M",
            ),
            "suction_specific_speed": _value(
                math.exp(middle) if capped else None, "metric", s_low, s_high, "M"
            ),
        }

    def _ledger(self) -> list[dict[str, Any]]:
        """An account of head at the plan, in metres, that sums to the margin."""
        check, at = self.check, self.check.centre
        weight = at.density * GRAVITY
        middle = check.limit(check.known_at_plan, MIDDLE) if check.capped else None
        rows = [
            ("air", self.check.inputs["place.air_pressure"] / weight),
            ("boiling", -at.vapor_pressure / weight),
            ("depth", at.submergence),
            ("ram", jet.ram(at.unit, self.speed) / (2 * GRAVITY)),
            ("intake", -suction.inlet_loss(at.unit, check.state.inlet_speed)),
        ]
        if middle is not None:
            rows.append(("demand", -suction.npsh_required(check.state, math.exp(middle))))
        rows.append(("margin" if middle is not None else "available", sum(value for _, value in rows)))
        return [{"term": term, "value": float(value), "unit": "m"} for term, value in rows]

    def _movers(self) -> list[dict[str, Any]]:
        """How far one step in each reading moves the rpm that she holds, largest first."""
        if not self.held_to:
            return []
        check, (rpm, x, *_) = self.check, self.held_to
        out = []
        for key, (quantity, amounts, unit) in _MOVER_STEPS.items():
            symbol = self.units[quantity] if self.units[quantity] in amounts else next(iter(amounts))
            step = amounts[symbol] * UNITS[quantity][symbol].factor
            part, _, name = key.partition(".")
            if name not in self.values[part] or (name == "altitude" and "station_pressure" in self.place):
                continue
            moved = {**self.values, part: {**self.values[part], name: self.values[part][name] + step}}
            at = setting(inputs_of(moved))
            if at.head <= 0:
                continue
            learned = check.learned_step(at)
            held = float(
                suction.rpm_at(
                    at.unit, at.head, at.density, moved["plan"]["boat_speed"], math.exp(x + learned)
                )
            )
            change = held - rpm
            out.append(
                {
                    "field": key,
                    "step": step,
                    "unit": unit,
                    "holding_rpm_change": change,
                    "text": wording.mover(key, step, change, {**self.units, quantity: symbol}),
                }
            )
        return sorted(out, key=lambda row: -abs(row["holding_rpm_change"]))


def shown(case: Any, units: str | Mapping[str, str] | None = None) -> dict[str, Any]:
    """The answer to a case and the sheet of sentences that shows it."""
    return _shown(case, units, WHOLE)


def _shown(case: Any, units: str | Mapping[str, str] | None, depth: int) -> dict[str, Any]:
    result, chosen = _answered(case, units, depth)
    sheet = wording.sheet(result, chosen)
    if depth == STEADY and result["verdict"] and _launching(fields.read(case)):
        sheet = {**sheet, **wording.waiting()}
    return {"answer": result, "sheet": sheet}


def slipping(case: Any, seen: Any, units: str | Mapping[str, str] | None = None) -> dict[str, Any]:
    """Rpm seen at a place against what the boat should turn there.

    :param case: readings by key, as for :func:`answer`; its plan is not looked at
    :param seen: rows with ``rpm``, and ``share`` of the power or ``boat_speed`` where known, as typed
    :param units: as for :func:`answer`
    :returns: one row for each, the cause, or errors
    Raises nothing: bad readings come back in ``errors``, all at once.
    """
    readings = fields.read(case)
    errors, rows = list(readings.errors), []
    for index, row in enumerate(seen if isinstance(seen, list) else []):
        rows.append(_seen_row(index, row if isinstance(row, Mapping) else {}, errors))
    if not rows:
        errors.append(BadReading("seen", "", "", "Give the rpm that you see.").as_dict())
    if errors:
        told = [{**error, "text": wording.error_text(error)} for error in errors]
        return {"rows": [], "cause": "unknown", "errors": told, "text": []}
    chosen, values = wording.units_for(readings, units), readings.values
    boat, inputs = values["boat"], inputs_of(values)
    low, _, high = engine_exponent(boat, inputs["engine_there"])
    ends = sorted(wide_open_here({**inputs, "engine_exponent": e}) for e in (low, high))
    wide_open = ends[0], wide_open_here(inputs), ends[1]
    doubt = PAPERS_RPM if boat["rpm_from"] == "papers" else RPM_SCATTER
    pairs = [
        (note["boat_speed"], note["rpm"])
        for note in values["notes"]
        if note["outcome"] == "held" and note.get("boat_speed") and not older(boat, note)
    ]
    out, judged = [], []
    for given in rows:
        speed = given.get("boat_speed")
        by_pairs = slip.expected_by_pairs(pairs, speed) if speed else None
        expected = by_pairs or slip.expected_wide_open(wide_open, given.get("share", 1.0), doubt)
        found = slip.judge(given["rpm"], expected[1], expected[0], expected[2])
        judged.append(slip.Seen(found, f"{speed}"))
        made = {
            "rpm": given["rpm"],
            "expected": _value(expected[1], "rev/min", expected[0], expected[2], "P"),
            "by": "pairs" if by_pairs else "engine",
            "factor": _value(found.factor, "1", found.low, found.high, "P"),
            "absorbed": slip.absorbed_power_ratio(found.factor),
            "code": found.code,
            "under": found.under,
        }
        out.append({**made, "text": wording.slip_text(made, chosen)})
    cause = slip.cause(judged)
    high_side = any(row.slip.low > 1 for row in judged)
    text = [row["text"] for row in out] + ([wording.SLIP_CAUSES[cause]] if high_side else [])
    return {"rows": out, "cause": cause, "errors": [], "text": text}


_SEEN_KINDS = {
    "rpm": ("rotation", 100.0, 12000.0),
    "share": ("share", 0.1, 1.0),
    "boat_speed": ("speed", 0.0, 25.0),
}


def _seen_row(index: int, row: Mapping[str, Any], errors: list[dict[str, str]]) -> dict[str, float]:
    """One row of rpm seen, SI; what is wrong goes to the errors."""
    out: dict[str, float] = {}
    for name, (kind, low, high) in _SEEN_KINDS.items():
        given = row.get(name)
        if given is None and name != "rpm":
            continue
        try:
            out[name] = parse(given, kind, low, high).value
        except BadReading as bad:
            errors.append(
                BadReading(f"seen[{index}].{name}", quote(given), bad.allowed, bad.action).as_dict()
            )
    return out


def reply(text: str) -> str:
    """The phone's door: a request as JSON text, its reply as JSON text. Never raises.

    Asks: ``check`` a case, whether she does ``slip``, make a ``link`` of a case, ``open`` a link's fragment,
    say what a typed reading is ``shown`` as in its field's other common unit.
    """
    request = _load(text)
    if not isinstance(request, dict):
        request = {}
    ask = request.get("ask")
    try:
        if ask == "check":
            depth = request.get("depth", WHOLE)
            return _dump(_shown(request.get("case"), request.get("units"), depth))
        if ask == "slip":
            return _dump(slipping(request.get("case"), request.get("seen"), request.get("units")))
        if ask == "link":
            return _dump({"fragment": share.encode(request.get("case"))})
        if ask == "open":
            return _dump({"case": share.decode(request.get("fragment"))})
        if ask == "shown":
            return _dump(
                {
                    "other": fields.other_unit(
                        request.get("field"), request.get("text"), request.get("unit")
                    ),
                    "error": None,
                }
            )
    except BadReading as bad:
        return _dump({"error": {**bad.as_dict(), "text": wording.error_text(bad.as_dict())}})
    return _dump({"error": {"field": "ask", "text": "Ask to check, slip, link, open or shown."}})
