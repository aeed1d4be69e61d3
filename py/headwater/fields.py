"""Every input in one table: meaning, how to get it, range, how sure it is; and reading a case by it."""

import datetime
import math
import re
from collections.abc import Callable, Mapping
from typing import Any, NamedTuple

from headwater import air, units
from headwater.errors import BadReading, quote

Values = dict[str, Any]


class Field(NamedTuple):
    """One input. Ranges, spans and defaults are SI."""

    key: str
    label: str
    meaning: str
    measure: str  # how to get it, at the dock wherever it can be
    kind: str  # a quantity of units.QUANTITIES, or count, number, choice, text, date, flag
    low: float = -math.inf
    high: float = math.inf
    default: Any = None
    required: bool = False
    tolerance: float = 0.0  # 95 % half-width; of the reading itself where it is relative
    tolerance_kind: str | None = None  # absolute, relative
    span: tuple[float, float] | None = None  # 95 % range of a coefficient
    mark: str = "P"  # of default, span and tolerance
    source: str = "measured"  # key of sources.SOURCES
    choices: tuple[str, ...] = ()
    group: str = "first"  # where the form shows it: first, notes, fine

    @property
    def units(self) -> tuple[str, ...]:
        """Unit choices, for a quantity."""
        return tuple(units.QUANTITIES.get(self.kind, ()))


PHONE_ALTITUDE = 50.0  # 95 % half-width of an altitude from a phone [m] [P]
HUB_SHARE = (1 / 5, 1 / 2.5)  # 95 % range of hub over impeller where the hub was not measured [P]
PRESSURE_TRAP = 0.06  # share by which the pressure at the water may differ from its altitude's standard [P]
MOST_HUB = 0.8  # of the impeller's diameter: more is a slip of the tape [P]
LONGEST_TEXT = 80  # characters of a label
MOST_NOTES = 200


def _length(key: str, label: str, meaning: str, measure: str, low: float, high: float, **more: Any) -> Field:
    spread: dict[str, Any] = {"tolerance": 0.01, "tolerance_kind": "relative"}
    return Field(key, label, meaning, measure, "length", low, high, **spread | more)


def _rpm(key: str, label: str, meaning: str, measure: str, low: float = 100.0, **more: Any) -> Field:
    return Field(
        key,
        label,
        meaning,
        measure,
        "rotation",
        low,
        12000.0,
        tolerance=0.01,
        tolerance_kind="relative",
        **more,
    )


def _place(part: str, there: str, group: str) -> tuple[Field, ...]:
    """Altitude and water, of the put-in or of a note's water."""
    return (
        Field(
            f"{part}.altitude",
            f"Altitude{there}",
            "Altitude of the water above sea level.",
            "Read it off the map, at the water's edge.",
            "altitude",
            -450.0,
            6000.0,
            required=True,
            tolerance=30.0,
            tolerance_kind="absolute",
            source="practice",
            group=group,
        ),
        Field(
            f"{part}.water_temperature",
            f"Water{there}",
            "Temperature of the water.",
            "Hold a thermometer an arm deep for a minute.",
            "temperature",
            273.15,
            318.15,
            required=True,
            tolerance=1.0,
            tolerance_kind="absolute",
            source="practice",
            group=group,
        ),
    )


def _barometers(part: str, there: str, group: str) -> tuple[Field, ...]:
    """The two ways of giving air pressure, at the put-in or at a note's water."""
    barometer: dict[str, Any] = {
        "tolerance": 200.0,
        "tolerance_kind": "absolute",
        "source": "practice",
        "group": group,
    }
    return (
        Field(
            f"{part}.station_pressure",
            f"Barometer at the water{there}",
            "Air pressure as it is at the water, not reduced to sea level.",
            "Read an instrument that shows the pressure where it stands. Most weather reports do not.",
            "pressure",
            40000.0,
            110000.0,
            **barometer,
        ),
        Field(
            f"{part}.altimeter_setting",
            f"Altimeter setting{there}",
            "Air pressure reduced to sea level, as airfields and weather reports give it.",
            "Take it from the nearest airfield's report. The altitude is needed with it.",
            "pressure",
            90000.0,
            110000.0,
            **barometer,
        ),
    )


def _speed(part: str, meaning: str, measure: str, **more: Any) -> Field:
    return Field(f"{part}.boat_speed", "Boat speed", meaning, measure, "speed", 0.0, 25.0, **more)


def _coefficient(
    name: str,
    label: str,
    meaning: str,
    ends: tuple[float, float],
    default: float,
    span: tuple[float, float],
    source: str,
) -> Field:
    measure = "Leave the typical figure unless yours was tested."
    return Field(
        f"boat.{name}",
        label,
        meaning,
        measure,
        "number",
        *ends,
        default,
        span=span,
        mark="M",
        source=source,
        group="fine",
    )


FIELDS: tuple[Field, ...] = (
    Field("boat.label", "Boat", "The name you know her by.", "Any name, up to 80 letters.", "text"),
    _length(
        "boat.nozzle_diameter",
        "Nozzle bore",
        "Inside width of the fixed nozzle where the jet leaves it. Not of the steering nozzle.",
        "Engine off, key out, bucket up. Reach past the steering nozzle and measure the fixed one's bore "
        "at its narrow end, twice, crosswise.",
        0.04,
        0.40,
        required=True,
    ),
    _length(
        "boat.impeller_diameter",
        "Wear ring bore at the impeller's front",
        "Inside width of the wear ring where the water meets the blades.",
        "Engine off, key out. Through the grate or the hand hole, measure the ring's bore just ahead of "
        "the blades.",
        0.06,
        0.70,
        required=True,
    ),
    _rpm(
        "boat.wide_open_rpm",
        "Wide-open rpm you really see",
        "Engine rpm that she really turns wide open, light, on flat deep water.",
        "Run her light and wide open on a calm day. Let the tach settle, then read it.",
        1000.0,
        required=True,
    ),
    Field(
        "boat.engine_power",
        "Power at that rpm",
        "Engine power at the wide-open rpm, at sea level, all jets together.",
        "Read it off the engine's power curve at that very rpm. The top figure is usually at another.",
        "power",
        5.0e3,
        3.0e6,
        required=True,
        tolerance=0.05,
        tolerance_kind="relative",
        source="practice",
    ),
    Field(
        "boat.rpm_from",
        "Rpm and power are",
        "Whether the wide-open rpm was seen on this boat or comes out of papers. Papers widen the span.",
        "Choose seen once you have read the tach wide open yourself.",
        "choice",
        default="seen",
        source="practice",
        choices=("seen", "papers"),
    ),
    _length(
        "boat.shaft_depth",
        "Water over the shaft",
        "Water surface above the shaft's centre, at rest and loaded. Negative where the shaft is above it.",
        "Engine off, key out, loaded and afloat at the dock. Mark the waterline on the transom, then measure "
        "from it down to the shaft's centre.",
        -0.5,
        1.5,
        default=0.0,
        tolerance=0.02,
        tolerance_kind="absolute",
    ),
    Field(
        "boat.date",
        "Pump set-up since",
        "Day this pump set-up began. Notes from before it are hints only.",
        "The day a new impeller, pitch, ring or nozzle went in, or she last hit something.",
        "date",
    ),
    Field(
        "boat.jets",
        "Jets",
        "How many jet units she has, all alike.",
        "Count the nozzles at the transom.",
        "count",
        1,
        3,
        1,
        group="fine",
    ),
    Field(
        "boat.jets_running",
        "Jets running",
        "How many of them run in this plan.",
        "All of them, unless you shut one down.",
        "count",
        1,
        3,
        group="fine",
    ),
    Field(
        "boat.gear_ratio",
        "Gear ratio",
        "Engine rpm over impeller rpm.",
        "Read the gearbox plate. It is 1 where the engine drives the shaft straight.",
        "number",
        0.3,
        5.0,
        1.0,
        group="fine",
    ),
    _length(
        "boat.hub_diameter",
        "Hub",
        "Width of the hub or shaft just ahead of the blades. A third of the wear ring's bore if left out.",
        "Engine off, key out. Through the grate or the hand hole, put callipers on the hub just ahead of "
        "the blades.",
        0.01,
        0.50,
        group="fine",
    ),
    _coefficient(
        "intake_loss",
        "Intake loss",
        "Share of the water's speed head ahead of the impeller that intake and clean grate take.",
        (0.0, 2.0),
        0.15,
        (0.05, 0.5),
        "memory",
    ),
    _coefficient(
        "ram_loss",
        "Ram loss",
        "Share of the moving boat's ram head that is lost in the intake.",
        (0.0, 0.9),
        0.25,
        (0.1, 0.5),
        "memory",
    ),
    _coefficient(
        "wake_fraction",
        "Wake fraction",
        "How much slower than the boat the water comes in, as a share of boat speed.",
        (0.0, 0.5),
        0.08,
        (0.03, 0.15),
        "terwisga1996",
    ),
    _coefficient(
        "nozzle_loss",
        "Nozzle loss",
        "Share of the jet's speed head that is lost in the nozzle.",
        (0.0, 0.5),
        0.03,
        (0.01, 0.05),
        "memory",
    ),
    _coefficient(
        "pump_efficiency",
        "Pump efficiency",
        "Share of the impeller's power that becomes head and flow.",
        (0.3, 0.95),
        0.80,
        (0.70, 0.92),
        "memory",
    ),
    _coefficient(
        "driveline_efficiency",
        "Driveline efficiency",
        "Share of the engine's power that reaches the impeller.",
        (0.7, 1.0),
        0.97,
        (0.95, 0.99),
        "memory",
    ),
    Field(
        "boat.suction_specific_speed",
        "Suction specific speed",
        "The pump's own S in metric units (rpm, m3/s, m). It wins over your notes.",
        "Leave it out, so that it is learned from your notes, unless you have a pump test.",
        "number",
        50.0,
        2000.0,
        mark="D",
        source="npsh",
        group="fine",
    ),
    Field("place.label", "Put-in", "The name of the put-in.", "Any name, up to 80 letters.", "text"),
    *_place("place", "", "first"),
    Field(
        "place.altitude_from",
        "Altitude is from",
        "Where the altitude comes from. A phone is less sure than a map.",
        "Choose phone where you took it from one.",
        "choice",
        default="map",
        source="practice",
        choices=("map", "phone"),
        group="fine",
    ),
    *_barometers("place", "", "fine"),
    Field(
        "place.station_pressure_confirmed",
        "This is the pressure at the water",
        "Stands by a barometer that is far from the standard pressure of the altitude.",
        "Tick it only when you are sure that it is not reduced to sea level.",
        "flag",
        source="practice",
        group="fine",
    ),
    _rpm(
        "plan.rpm",
        "How hard, rpm",
        "Engine rpm that you mean to run.",
        "Leave rpm, power and share out for wide open.",
    ),
    Field(
        "plan.power",
        "How hard, power",
        "Engine power that you mean to run, all running jets together.",
        "Give rpm instead where you can: the tach shows it.",
        "power",
        1.0e3,
        3.0e6,
    ),
    Field(
        "plan.throttle",
        "How hard, share",
        "Share of the wide-open rpm that you mean to run.",
        "100 % is wide open.",
        "share",
        0.1,
        1.0,
    ),
    _speed(
        "plan",
        "Speed through the water. Zero is standing.",
        "GPS speed, plus the current going up, less the current going down.",
        default=0.0,
    ),
    Field(
        "plan.reserve",
        "Reserve on new ground",
        "How many times the head asked must be there before new ground is a go.",
        "Leave the typical figure.",
        "number",
        1.0,
        2.0,
        1.10,
        mark="S",
        source="reserve",
        group="fine",
    ),
    Field(
        "notes.outcome",
        "What she did",
        "Held; the revs ran up but she did not let go; or she let go.",
        "Write what she did, not what you hoped.",
        "choice",
        choices=("held", "flared", "let_go"),
        required=True,
        group="notes",
    ),
    _rpm(
        "notes.rpm",
        "Rpm",
        "Engine rpm at which she did it. For revs that ran up or a let-go, the rpm just before.",
        "Read the tach on the spot.",
        required=True,
        group="notes",
    ),
    _speed(
        "notes",
        "Speed through the water when she did it. Zero is standing. Left out, the note proves nothing.",
        "Zero if she stood. Else GPS speed, plus the current going up, less the current going down.",
        group="notes",
    ),
    *_place("notes", " there", "notes"),
    Field(
        "notes.label",
        "Where",
        "The name of that water.",
        "Any name, up to 80 letters.",
        "text",
        group="notes",
    ),
    Field("notes.date", "When", "The day she did it.", "Year, month, day.", "date", group="notes"),
    Field(
        "notes.set_up",
        "Pump set-up",
        "Day the pump set-up began that she had then. Today's where you leave it out.",
        "Give it only where the pump has been touched since.",
        "date",
        group="notes",
    ),
    *_barometers("notes", " there", "notes"),
)
FIELD = {field.key: field for field in FIELDS}
_PARTS = ("place", "boat", "plan", "notes")
_SHORT = {
    part: {field.key.partition(".")[2]: field for field in FIELDS if field.key.startswith(f"{part}.")}
    for part in _PARTS
}
# What later versions take: known, and refused by name, so that nobody thinks that it was heeded.
NOT_YET = frozenset(
    f"{part}.{name}"
    for part, names in {
        "boat": "wide_open_altitude high_rpm high_altitude load_limit aspiration critical_altitude "
        "chine_beam deadrise hull_length dry_mass centre_of_gravity intake_height",
        "place": "air_temperature humidity current depth wind room below",
        "plan": "feed_in direction people fuel gear rows water grate standing_waves",
        "notes": "load feed_in seconds water grate depth rows current wind",
    }.items()
    for name in names.split()
)
_OUTCOMES_NOT_YET = ("planed", "would_not_plane")
_DAY = re.compile(r"((?:19|20|21)\d\d)-(\d\d)-(\d\d)(?:[T ][\d:.+Z-]*)?", re.ASCII)
_UNWRITABLE = re.compile("[\x00-\x1f\x7f-\x9f\u2028\u2029\u202a-\u202e\u2066-\u2069\ud800-\udfff]")
_DECIMAL = re.compile(r"[+-]?(?:\d+[.,]?\d*|[.,]\d+)", re.ASCII)


class Readings(NamedTuple):
    """A case as it was understood."""

    values: dict[str, Any]  # by part and short key, SI, with constant defaults filled in; notes a list
    given: set[str]  # dotted keys that were typed: "place.altitude", "notes[0].rpm"
    understood: dict[str, str]  # by dotted key, in words
    errors: list[dict[str, str]]
    units: dict[str, str]  # the first unit typed of each quantity


def read(case: Any) -> Readings:
    """Read a whole case; all bad readings at once. Never raises.

    :param case: the case as it came out of JSON
    """
    return _Reader().read(case)


class _Reader:
    """One case being read."""

    def __init__(self) -> None:
        self.given: dict[str, Any] = {}
        self.understood: dict[str, str] = {}
        self.errors: list[dict[str, str]] = []
        self.units: dict[str, str] = {}

    def read(self, case: Any) -> Readings:
        if not isinstance(case, Mapping):
            self.fail("case", case, ", ".join(_PARTS), "Send a case as a JSON object.")
            return Readings({part: {} for part in _PARTS[:3]} | {"notes": []}, set(), {}, self.errors, {})
        for key in case:
            if key not in _PARTS:
                self.fail(
                    quote(key) or "case", None, ", ".join(_PARTS), "Leave this out: it is no part of a case."
                )
        values: dict[str, Any] = {part: self.part(part, part, case.get(part)) for part in _PARTS[:3]}
        notes = enumerate(self.notes(case))
        values["notes"] = [self.part("notes", f"notes[{i}]", note) for i, note in notes]
        self.boat(values["boat"])
        self.one_of("plan", ("rpm", "power", "throttle"), "rpm, power or share")
        for path, place in (
            ("place", values["place"]),
            *((f"notes[{i}]", v) for i, v in enumerate(values["notes"])),
        ):
            self.one_of(
                path, ("station_pressure", "altimeter_setting"), "barometer at the water or altimeter setting"
            )
            self.barometer(path, place)
        return Readings(values, set(self.given), self.understood, self.errors, self.units)

    def fail(self, key: str, given: Any, allowed: str, action: str) -> None:
        self.errors.append(BadReading(key, quote(given), allowed, action).as_dict())

    def notes(self, case: Mapping[Any, Any]) -> list[Any]:
        notes = case.get("notes")
        if notes is None:
            return []
        if not isinstance(notes, list):
            self.fail("notes", notes, "a list", "Send notes as a list, one object a note.")
        elif len(notes) > MOST_NOTES:
            self.fail("notes", str(len(notes)), f"up to {MOST_NOTES}", "Keep the notes that tell most.")
        else:
            return notes
        return []

    def part(self, part: str, path: str, typed: Any) -> Values:
        """The readings of one part, or of one note, by short key."""
        if typed is None and part != "notes":
            typed = {}
        if not isinstance(typed, Mapping):
            self.fail(path, typed, "an object", "Send it as a JSON object of readings.")
            return {}
        table = _SHORT[part]
        values: Values = {}
        for name, given in typed.items():
            field = table.get(name) if isinstance(name, str) else None
            key = f"{path}.{name if field else quote(name)}"
            if field:
                if given is not None:  # a null is left out
                    self.one(field, key, given, values)
            elif isinstance(name, str) and f"{part}.{name}" in NOT_YET:
                self.fail(key, given, "", "Not yet: a later version takes this. Leave it out.")
            else:
                self.fail(key, given, "", "Leave this out: there is no such reading.")
        for name, field in table.items():
            key = f"{path}.{name}"
            if key in self.given:
                continue
            if field.default is not None:
                values[name] = field.default
            elif field.required and not (name == "altitude" and f"{path}.station_pressure" in self.given):
                self.fail(key, None, allowed_text(field), f"Fill this in. {field.measure}")
        return values

    def one(self, field: Field, key: str, given: Any, values: Values) -> None:
        self.given[key] = given
        try:
            if field.kind in units.QUANTITIES:
                reading = units.parse(_with_unit(field, given), field.kind, field.low, field.high)
                value, echo = reading.value, reading.echo
                self.units.setdefault(field.kind, reading.unit)
            else:
                value, echo = _PLAIN[field.kind](field, given)
        except BadReading as bad:
            self.fail(key, given, bad.allowed, bad.action)
        else:
            values[key.rpartition(".")[2]] = value
            self.understood[key] = echo

    # Readings that must agree with each other

    def boat(self, boat: Values) -> None:
        jets, running = boat.get("jets"), boat.get("jets_running")
        if jets is not None and running is None and "boat.jets_running" not in self.given:
            boat["jets_running"] = jets
        elif jets is not None and running is not None and running > jets:
            self.fail("boat.jets_running", running, f"up to {jets}", "Lower it, or raise the number of jets.")
        impeller = boat.get("impeller_diameter")
        if impeller is None:
            return
        if "boat.hub_diameter" not in self.given:
            boat["hub_diameter"] = impeller / 3
        for name, most in (("hub_diameter", MOST_HUB), ("nozzle_diameter", 1.0)):
            if boat.get(name, 0.0) >= most * impeller:
                ring = self.understood["boat.impeller_diameter"]
                under = f"under {ring}" if most == 1.0 else f"under {most:.0%} of {ring}".replace("%", " %")
                action = f"It must be smaller than the wear ring's bore, {ring}. Measure both again."
                self.fail(f"boat.{name}", self.given[f"boat.{name}"], under, action)

    def one_of(self, path: str, names: tuple[str, ...], words: str) -> None:
        for name in [name for name in names if f"{path}.{name}" in self.given][1:]:
            self.fail(
                f"{path}.{name}", self.given[f"{path}.{name}"], f"one of {words}", "Keep only one of these."
            )

    def barometer(self, path: str, place: Values) -> None:
        """The trap: a barometer reduced to sea level, given as that at the water, promises too much head."""
        pressure, altitude = place.get("station_pressure"), place.get("altitude")
        if pressure is None or altitude is None or place.get("station_pressure_confirmed"):
            return
        standard = air.standard_pressure(altitude)
        if abs(pressure / standard - 1) > PRESSURE_TRAP:
            key = f"{path}.station_pressure"
            symbol = self.understood[key].rpartition(" ")[2]
            ends = (standard * (1 - PRESSURE_TRAP), standard * (1 + PRESSURE_TRAP))
            action = "Is it reduced to sea level? Then give it as the altimeter setting."
            action += " If it is right at the water, "
            action += "confirm it." if path == "place" else "leave the altitude out."
            self.fail(
                key, self.given[key], f"{units.allowed('pressure', *ends, symbol)} at this altitude", action
            )


def _with_unit(field: Field, given: Any) -> Any:
    """What was typed, unless it is a bare number for a quantity that needs its unit."""
    if isinstance(given, str) or field.kind in ("rotation", "share"):
        return given
    raise BadReading(
        "", "", allowed_text(field), f"Write it as text with its unit: {', '.join(field.units)}."
    )


def _number(field: Field, given: Any) -> tuple[float, str]:
    value = given
    if isinstance(given, str):
        typed = given.strip()
        value = float(typed.replace(",", ".")) if len(typed) <= 40 and _DECIMAL.fullmatch(typed) else None
    if isinstance(value, bool) or not isinstance(value, (int, float)) or not field.low <= value <= field.high:
        raise BadReading("", "", allowed_text(field), "Write a plain number in this range.")
    return float(value) + 0.0, f"{float(value) + 0.0:.10g}"


def _count(field: Field, given: Any) -> tuple[int, str]:
    value, _ = _number(field, given)
    if value != int(value):
        raise BadReading("", "", allowed_text(field), "Write a whole number.")
    return int(value), str(int(value))


def _choice(field: Field, given: Any) -> tuple[str, str]:
    if isinstance(given, str) and given in field.choices:
        return given, given.replace("_", " ")
    later = field.key == "notes.outcome" and isinstance(given, str) and given in _OUTCOMES_NOT_YET
    action = "Not yet: a later version takes this one." if later else "Choose one of these."
    raise BadReading("", "", ", ".join(field.choices), action)


def _text(field: Field, given: Any) -> tuple[str, str]:
    if not isinstance(given, str) or len(given) > LONGEST_TEXT or _UNWRITABLE.search(given):
        raise BadReading("", "", f"up to {LONGEST_TEXT} letters", "Write a shorter name, on one line.")
    return given.strip(), given.strip()


def _date(field: Field, given: Any) -> tuple[datetime.date, str]:
    match = _DAY.fullmatch(given.strip()) if isinstance(given, str) and len(given) <= 40 else None
    try:
        if match:
            day = datetime.date(*map(int, match.groups()))
            return day, day.isoformat()
    except ValueError:
        pass
    raise BadReading("", "", "year-month-day", "Write it as 2026-06-12.")


def _flag(field: Field, given: Any) -> tuple[bool, str]:
    if not isinstance(given, bool):
        raise BadReading("", "", "true or false", "Tick it or leave it out.")
    return given, "yes" if given else "no"


_PLAIN: dict[str, Callable[[Field, Any], tuple[Any, str]]] = {
    "number": _number,
    "count": _count,
    "choice": _choice,
    "text": _text,
    "date": _date,
    "flag": _flag,
}


def allowed_text(field: Field, symbol: str | None = None) -> str:
    """What a field allows, in words."""
    if field.kind in units.QUANTITIES:
        return units.allowed(field.kind, field.low, field.high, symbol)
    if field.choices:
        return ", ".join(field.choices)
    return "" if math.isinf(field.low) else f"{field.low:g} to {field.high:g}"


def default_text(field: Field) -> str:
    """What stands in for a field that is left out, in words."""
    if field.key == "boat.hub_diameter":
        return "a third of the wear ring's bore"
    if field.key == "boat.jets_running":
        return "all jets"
    if field.default is None:
        return ""
    if field.kind in units.QUANTITIES:
        return units.show(field.default, field.kind, units.SYSTEMS["metric"][field.kind])
    return f"{field.default:g}" if isinstance(field.default, (int, float)) else str(field.default)


def other_unit(key: Any, text: Any, symbol: str | None = None) -> str:
    """A typed quantity in another unit, by default the other common one; empty where there is none.

    :param key: field, "place.altitude"; a note's as "notes.altitude"
    Raises BadReading.
    """
    field = FIELD.get(key) if isinstance(key, str) else None
    if field is None or field.kind not in units.QUANTITIES:
        raise BadReading("field", quote(key), "", "There is no such quantity.")
    try:
        reading = units.parse(_with_unit(field, text), field.kind, field.low, field.high)
    except BadReading as bad:
        raise BadReading(field.key, quote(text), bad.allowed, bad.action) from None
    wanted = symbol or units.other(field.kind, reading.unit)
    return units.show(reading.value, field.kind, wanted) if wanted in field.units else ""
