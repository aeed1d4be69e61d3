"""Every input in one table: what it means, how to get it, what is allowed, how sure it is; and reading a case by it."""

import datetime
import math
from collections.abc import Mapping
from typing import Any, NamedTuple

from headwater import air, units
from headwater.errors import BadReading

Values = dict[str, Any]


class Field(NamedTuple):
    """One input. Ranges, spans and defaults are SI."""

    key: str
    label: str
    meaning: str
    measure: str  # how to get it at the dock, engine off and key out
    kind: str  # a quantity of units.QUANTITIES, or count, number, choice, text, date, flag
    low: float = -math.inf
    high: float = math.inf
    default: Any = None
    required: bool = False
    tolerance: float = 0.0  # 95 % half-width; a share of the reading where ``relative``
    relative: bool = False
    span: tuple[float, float] | None = None  # 95 % range of a coefficient
    mark: str = "P"
    source: str = "measured"
    choices: tuple[str, ...] = ()
    group: str = "first"  # where the form shows it: first, notes, fine

    @property
    def units(self) -> tuple[str, ...]:
        """Unit choices, for a quantity."""
        return tuple(units.QUANTITIES.get(self.kind, ()))


PHONE_ALTITUDE = 50.0  # 95 % half-width of an altitude from a phone [m] [P]
HUB_SHARE = (1 / 5, 1 / 2.5)  # 95 % range of hub over impeller where the hub was not measured [P]
PRESSURE_TRAP = 0.06  # share by which a barometer at the water may differ from the standard at its altitude [P]
LONGEST_TEXT = 80  # characters of a label
MOST_NOTES = 200
_LENGTH = {"kind": "length", "tolerance": 0.01, "relative": True}
_ALTITUDE = {"kind": "altitude", "low": -450.0, "high": 6000.0, "tolerance": 30.0, "mark": "V", "source": "ussa1976"}
_WATER = {"kind": "temperature", "low": 273.15, "high": 318.15, "tolerance": 1.0, "mark": "V", "source": "if97"}
_BAROMETER = {"kind": "pressure", "low": 40000.0, "high": 110000.0, "tolerance": 200.0}
_QNH = {"kind": "pressure", "low": 90000.0, "high": 110000.0, "tolerance": 200.0, "mark": "V", "source": "icao7488"}
_SPEED = {"kind": "speed", "low": 0.0, "high": 25.0}
_RPM = {"kind": "rotation", "low": 100.0, "high": 15000.0, "tolerance": 0.01, "relative": True}
_COEFFICIENT = {"kind": "number", "mark": "M", "source": "terwisga1996", "group": "fine"}

FIELDS: tuple[Field, ...] = tuple(
    Field(**row)
    for row in (
        dict(
            key="boat.label",
            label="Boat",
            meaning="The name you know her by.",
            measure="Any name, up to 80 letters.",
            kind="text",
        ),
        dict(
            key="boat.nozzle_diameter",
            label="Nozzle bore",
            meaning="Inside width of the fixed nozzle where the jet leaves it, not of the steering nozzle.",
            measure="Swing the bucket up. Measure the fixed nozzle's bore at its narrow end, twice, crosswise.",
            low=0.04,
            high=0.40,
            required=True,
            **_LENGTH,
        ),
        dict(
            key="boat.impeller_diameter",
            label="Wear ring bore",
            meaning="Inside width of the wear ring at the impeller's front.",
            measure="From the intake or the hand hole, measure the ring's bore just ahead of the blades.",
            low=0.06,
            high=0.70,
            required=True,
            **_LENGTH,
        ),
        dict(
            key="boat.wide_open_rpm",
            label="Wide-open rpm",
            meaning="The rpm she really turns wide open, light, on flat deep water.",
            measure="Read the tach wide open on a calm day with a light boat.",
            required=True,
            **_RPM | {"low": 1000.0},
        ),
        dict(
            key="boat.engine_power",
            label="Power at that rpm",
            meaning="Engine power at the wide-open rpm, at sea level, all jets together.",
            measure="From the engine's power curve at that very rpm, not its top figure.",
            kind="power",
            low=4000.0,
            high=3.0e6,
            required=True,
            tolerance=0.05,
            relative=True,
        ),
        dict(
            key="boat.rpm_from",
            label="Rpm and power are",
            meaning="Whether rpm and power were seen on this boat or come out of papers. Papers widen the span.",
            measure="Seen, once you have read the tach wide open yourself.",
            kind="choice",
            default="seen",
            choices=("seen", "papers"),
        ),
        dict(
            key="boat.shaft_depth",
            label="Water over the shaft",
            meaning="Water surface above the shaft's centre, at rest and loaded. Negative where the shaft is above the water.",
            measure="Afloat and loaded, measure from the waterline at the transom down to the shaft's centre.",
            kind="length",
            low=-0.5,
            high=1.5,
            default=0.0,
            tolerance=0.02,
        ),
        dict(
            key="boat.date",
            label="Pump set-up since",
            meaning="Date of this pump set-up. Change it after a new impeller, pitch, ring or nozzle, or a hit.",
            measure="The day the pump was last touched.",
            kind="date",
        ),
        dict(
            key="boat.jets",
            label="Jets",
            meaning="Number of alike jet units.",
            measure="Count them.",
            kind="count",
            low=1,
            high=3,
            default=1,
            group="fine",
        ),
        dict(
            key="boat.jets_running",
            label="Jets running",
            meaning="Number of jet units that run in this plan.",
            measure="All of them, unless one is shut down.",
            kind="count",
            low=1,
            high=3,
            group="fine",
        ),
        dict(
            key="boat.gear_ratio",
            label="Gear ratio",
            meaning="Engine rpm over impeller rpm.",
            measure="On the gearbox plate; 1 where the engine drives the shaft straight.",
            kind="number",
            low=0.3,
            high=5.0,
            default=1.0,
            group="fine",
        ),
        dict(
            key="boat.hub_diameter",
            label="Hub",
            meaning="Hub or shaft just ahead of the blades. A third of the wear ring's bore where it was not measured.",
            measure="From the intake, callipers on the hub just ahead of the blades.",
            low=0.01,
            high=0.50,
            group="fine",
            **_LENGTH,
        ),
        dict(
            key="boat.intake_loss",
            label="Intake loss",
            meaning="Share of the speed head ahead of the impeller that intake and clean grate take.",
            measure="Leave the typical figure unless the unit was tested.",
            low=0.0,
            high=2.0,
            default=0.15,
            span=(0.05, 0.5),
            **_COEFFICIENT,
        ),
        dict(
            key="boat.ram_loss",
            label="Ram loss",
            meaning="Share of the moving boat's ram head lost in the intake.",
            measure="Leave the typical figure unless the unit was tested.",
            low=0.0,
            high=0.9,
            default=0.25,
            span=(0.1, 0.5),
            **_COEFFICIENT,
        ),
        dict(
            key="boat.wake_fraction",
            label="Wake fraction",
            meaning="How much slower than the boat the water enters, as a share of boat speed.",
            measure="Leave the typical figure unless the hull was tested.",
            low=0.0,
            high=0.5,
            default=0.08,
            span=(0.03, 0.15),
            **_COEFFICIENT,
        ),
        dict(
            key="boat.nozzle_loss",
            label="Nozzle loss",
            meaning="Share of the jet's speed head lost in the nozzle.",
            measure="Leave the typical figure unless the unit was tested.",
            low=0.0,
            high=0.5,
            default=0.03,
            span=(0.01, 0.05),
            **_COEFFICIENT,
        ),
        dict(
            key="boat.pump_efficiency",
            label="Pump efficiency",
            meaning="Share of shaft power that becomes head and flow.",
            measure="Leave the typical figure unless the unit was tested.",
            low=0.3,
            high=0.95,
            default=0.80,
            span=(0.70, 0.92),
            **_COEFFICIENT,
        ),
        dict(
            key="boat.driveline_efficiency",
            label="Driveline efficiency",
            meaning="Share of engine power that reaches the impeller.",
            measure="Leave the typical figure.",
            low=0.7,
            high=1.0,
            default=0.97,
            span=(0.95, 0.99),
            **_COEFFICIENT,
        ),
        dict(
            key="boat.suction_specific_speed",
            label="Suction specific speed",
            meaning="The pump's own S in metric units. It wins over the notes, so leave it empty unless it was tested.",
            measure="From a pump test only.",
            kind="number",
            low=50.0,
            high=2000.0,
            mark="D",
            source="npsh",
            group="fine",
        ),
        dict(key="place.label", label="Put-in", meaning="The name of the put-in.", measure="Any name.", kind="text"),
        dict(
            key="place.altitude",
            label="Altitude",
            meaning="Altitude of the water above sea level.",
            measure="From the map at the put-in.",
            required=True,
            **_ALTITUDE,
        ),
        dict(
            key="place.water_temperature",
            label="Water",
            meaning="Temperature of the water.",
            measure="A thermometer an arm deep, for one minute.",
            required=True,
            **_WATER,
        ),
        dict(
            key="place.altitude_from",
            label="Altitude is from",
            meaning="A phone's altitude is less sure than a map's.",
            measure="Map, unless the phone gave it.",
            kind="choice",
            default="map",
            choices=("map", "phone"),
            group="fine",
        ),
        dict(
            key="place.station_pressure",
            label="Barometer at the water",
            meaning="Air pressure as it is at the water, not reduced to sea level.",
            measure="An instrument that shows the pressure where it stands.",
            mark="P",
            source="practice",
            group="fine",
            **_BAROMETER,
        ),
        dict(
            key="place.station_pressure_confirmed",
            label="This is the pressure at the water",
            meaning="Confirms a barometer far from the standard pressure of the altitude.",
            measure="Only after checking that it is not reduced to sea level.",
            kind="flag",
            group="fine",
        ),
        dict(
            key="place.altimeter_setting",
            label="Altimeter setting",
            meaning="Pressure reduced to sea level, as airfields and weather reports give it.",
            measure="From the nearest airfield's report.",
            group="fine",
            **_QNH,
        ),
        dict(
            key="plan.rpm",
            label="How hard, rpm",
            meaning="Engine rpm you mean to run.",
            measure="Leave all empty for wide open.",
            **_RPM,
        ),
        dict(
            key="plan.power",
            label="How hard, power",
            meaning="Engine power you mean to run, all running jets together.",
            measure="Rpm is surer: read it off the tach.",
            kind="power",
            low=1000.0,
            high=3.0e6,
        ),
        dict(
            key="plan.throttle",
            label="How hard, share",
            meaning="Share of the wide-open rpm.",
            measure="A hundred per cent is wide open.",
            kind="share",
            low=0.1,
            high=1.0,
        ),
        dict(
            key="plan.boat_speed",
            label="Boat speed",
            meaning="Speed through the water; zero standing.",
            measure="GPS speed, plus the current going up, less the current going down.",
            default=0.0,
            **_SPEED,
        ),
        dict(
            key="plan.reserve",
            label="Reserve on new ground",
            meaning="Head available over head asked that new ground must keep.",
            measure="Leave the typical figure.",
            kind="number",
            low=1.0,
            high=2.0,
            default=1.10,
            mark="S",
            source="reserve",
            group="fine",
        ),
        dict(
            key="notes.outcome",
            label="What she did",
            meaning="Held; revs ran up but it did not let go; or let go.",
            measure="As it was.",
            kind="choice",
            choices=("held", "flared", "let_go"),
            required=True,
            group="notes",
        ),
        dict(
            key="notes.rpm",
            label="Rpm",
            meaning="Engine rpm at which she did it.",
            measure="Off the tach.",
            required=True,
            **_RPM | {"group": "notes"},
        ),
        dict(
            key="notes.boat_speed",
            label="Boat speed",
            meaning="Speed through the water; zero standing. Left out, the note proves nothing.",
            measure="Zero if she stood.",
            **_SPEED | {"group": "notes"},
        ),
        dict(
            key="notes.altitude",
            label="Altitude there",
            meaning="Altitude of that water above sea level.",
            measure="From the map.",
            required=True,
            **_ALTITUDE | {"group": "notes"},
        ),
        dict(
            key="notes.water_temperature",
            label="Water there",
            meaning="Temperature of that water.",
            measure="As near as you know it.",
            required=True,
            **_WATER | {"group": "notes"},
        ),
        dict(
            key="notes.label",
            label="Where",
            meaning="The name of that water.",
            measure="Any name.",
            kind="text",
            group="notes",
        ),
        dict(
            key="notes.date",
            label="When",
            meaning="The day of the note.",
            measure="Year, month, day.",
            kind="date",
            group="notes",
        ),
        dict(
            key="notes.set_up",
            label="Pump set-up",
            meaning="Date of the pump set-up it belongs to; today's where left out.",
            measure="The date that set-up began.",
            kind="date",
            group="notes",
        ),
        dict(
            key="notes.station_pressure",
            label="Barometer there",
            meaning="Air pressure at that water, not reduced to sea level.",
            measure="An instrument that shows the pressure where it stands.",
            mark="P",
            source="practice",
            **_BAROMETER | {"group": "notes"},
        ),
        dict(
            key="notes.altimeter_setting",
            label="Altimeter setting there",
            meaning="Pressure reduced to sea level on that day.",
            measure="From the nearest airfield's report.",
            **_QNH | {"group": "notes"},
        ),
    )
)
FIELD = {field.key: field for field in FIELDS}
NOT_YET = frozenset(
    f"{part}.{name}"
    for part, names in {
        "boat": "wide_open_altitude high_rpm high_altitude load_limit aspiration critical_altitude chine_beam deadrise "
        "hull_length dry_mass centre_of_gravity intake_height",
        "place": "air_temperature humidity current depth wind room below",
        "plan": "feed_in direction people fuel gear rows water grate standing_waves",
        "notes": "load feed_in seconds water grate depth rows current wind",
    }.items()
    for name in names.split()
)
_OUTCOMES_NOT_YET = ("planed", "would_not_plane")
_PARTS = ("boat", "place", "plan", "notes")
_BY_PART = {
    part: {field.key.partition(".")[2]: field for field in FIELDS if field.key.startswith(part + ".")} for part in _PARTS
}


class Readings(NamedTuple):
    """A case as it was understood."""

    values: dict[str, Any]  # by part and short key, SI, with constant defaults filled in; notes a list
    given: set[str]  # dotted keys that were typed
    understood: dict[str, str]
    errors: list[dict[str, str]]
    units: dict[str, str]  # the first unit typed of each quantity


def read(case: Any) -> Readings:
    """Read a whole case; all bad readings at once. Never raises.

    :param case: the case as it came out of JSON
    """
    return _Reader().read(case)


class _Reader:
    def __init__(self) -> None:
        self.given: set[str] = set()
        self.understood: dict[str, str] = {}
        self.errors: list[dict[str, str]] = []
        self.units: dict[str, str] = {}

    def fail(self, field: str, given: Any, allowed: str, action: str) -> None:
        shown = given if isinstance(given, str) else "" if given is None else repr(given)[:60]
        self.errors.append(BadReading(field, shown[:60], allowed, action).as_dict())

    def read(self, case: Any) -> Readings:
        values: dict[str, Any] = {"boat": {}, "place": {}, "plan": {}, "notes": []}
        if not isinstance(case, Mapping):
            self.fail("case", case, "boat, place, plan and notes", "Send a case as a JSON object.")
            case = {}
        for key in case:
            if key not in _PARTS:
                self.fail(str(key)[:60], "", ", ".join(_PARTS), "Leave this out: it is no part of a case.")
        for part in ("place", "boat", "plan"):
            values[part] = self._part(part, part, case.get(part, {}))
        typed_notes = case.get("notes", [])
        if not isinstance(typed_notes, list):
            self.fail("notes", typed_notes, "a list", "Send notes as a list.")
            typed_notes = []
        if len(typed_notes) > MOST_NOTES:
            self.fail("notes", str(len(typed_notes)), f"up to {MOST_NOTES}", "Keep the notes that tell most.")
            typed_notes = []
        values["notes"] = [self._part("notes", f"notes[{i}]", note) for i, note in enumerate(typed_notes)]
        self._across(values)
        return Readings(values, self.given, self.understood, self.errors, self.units)

    def _part(self, part: str, path: str, typed: Any) -> Values:
        table = _BY_PART[part]
        if not isinstance(typed, Mapping):
            self.fail(path, typed, "an object of readings", "Send it as a JSON object.")
            typed = {}
        values: Values = {}
        for name, given in typed.items():
            field = table.get(name) if isinstance(name, str) else None
            key = f"{path}.{str(name)[:60]}"
            if f"{part}.{name}" in NOT_YET:
                self.fail(key, given, "", "Not yet: this reading comes with a later version. Leave it out.")
            elif field is None:
                self.fail(key, "", "", "Leave this out: there is no such reading.")
            elif given is not None:
                self._one(field, key, name, given, values)
        for name, field in table.items():
            if field.required and name not in values and f"{path}.{name}" not in self.given:
                if name == "altitude" and "station_pressure" in typed:
                    continue
                self.fail(f"{path}.{name}", None, allowed_text(field), f"Fill this in. {field.measure}")
            elif field.default is not None:
                values.setdefault(name, field.default)
        return values

    def _one(self, field: Field, key: str, name: str, given: Any, values: Values) -> None:
        self.given.add(key)
        try:
            value, echo = self._value(field, given)
        except BadReading as bad:
            self.fail(key, bad.given, bad.allowed, bad.action)
        else:
            values[name] = value
            self.understood[key] = echo

    def _value(self, field: Field, given: Any) -> tuple[Any, str]:
        if field.kind in units.QUANTITIES:
            if not isinstance(given, str) and field.kind not in ("rotation", "share"):
                action = f"Write it with its unit: {', '.join(field.units)}."
                raise BadReading("", repr(given)[:60], allowed_text(field), action)
            reading = units.parse(given, field.kind, field.low, field.high)
            self.units.setdefault(field.kind, reading.unit)
            return reading.value, reading.echo
        return _PLAIN[field.kind](field, given)

    def _across(self, values: dict[str, Any]) -> None:
        """Readings that must agree with each other."""
        boat, place, plan = values["boat"], values["place"], values["plan"]
        hard = [name for name in ("rpm", "power", "throttle") if name in plan]
        for name in hard[1:]:
            self.fail(f"plan.{name}", self.understood[f"plan.{name}"], "one of rpm, power and share", f"Keep {hard[0]} or this.")
        if boat:
            boat.setdefault("jets_running", boat.get("jets", 1))
            if boat["jets_running"] > boat.get("jets", 1):
                action = "Lower it, or raise the number of jets."
                self.fail("boat.jets_running", str(boat["jets_running"]), f"up to {boat.get('jets', 1)}", action)
        impeller = boat.get("impeller_diameter")
        if impeller:
            boat.setdefault("hub_diameter", impeller / 3)
            for name, most in (("hub_diameter", 0.8), ("nozzle_diameter", 1.0)):
                if boat.get(name, 0.0) > most * impeller:
                    what = f"under {100 * most:.0f} % of the wear ring's bore"
                    self.fail(f"boat.{name}", self.understood[f"boat.{name}"], what, "Measure both again.")
        self._barometer(place, "place")
        for i, note in enumerate(values["notes"]):
            self._barometer(note, f"notes[{i}]")

    def _barometer(self, place: Values, path: str) -> None:
        if "station_pressure" in place and "altimeter_setting" in place:
            given = self.understood[f"{path}.altimeter_setting"]
            self.fail(f"{path}.altimeter_setting", given, "one of the two barometers", "Keep one of them.")
        if "station_pressure" in place and "altitude" in place and not place.get("station_pressure_confirmed"):
            standard = air.standard_pressure(place["altitude"])
            if abs(place["station_pressure"] / standard - 1) > PRESSURE_TRAP:
                unit = self.units.get("pressure", "hPa")
                ends = (units.show(standard * (1 + side), "pressure", unit) for side in (-PRESSURE_TRAP, PRESSURE_TRAP))
                self.fail(
                    f"{path}.station_pressure",
                    self.understood[f"{path}.station_pressure"],
                    " to ".join(ends) + " at this altitude",
                    "Is it reduced to sea level? Then it is the altimeter setting. Else confirm it.",
                )


def _number(field: Field, given: Any) -> tuple[float, str]:
    value = given
    if isinstance(given, str):
        try:
            value = float(given.strip().replace(",", ".")) if len(given) <= 40 else None
        except ValueError:
            value = None
    if isinstance(value, bool) or not isinstance(value, (int, float)) or not field.low <= value <= field.high:
        raise BadReading("", _short(given), allowed_text(field), "Write a plain number in this range.")
    return float(value), f"{float(value):g}"


def _count(field: Field, given: Any) -> tuple[int, str]:
    value, _ = _number(field, given)
    if value != int(value):
        raise BadReading("", _short(given), allowed_text(field), "Write a whole number.")
    return int(value), str(int(value))


def _choice(field: Field, given: Any) -> tuple[str, str]:
    if given in _OUTCOMES_NOT_YET and field.key == "notes.outcome":
        raise BadReading("", given, ", ".join(field.choices), "Not yet: this comes with a later version.")
    if not isinstance(given, str) or given not in field.choices:
        raise BadReading("", _short(given), ", ".join(field.choices), "Choose one of these.")
    return given, given.replace("_", " ")


def _text(field: Field, given: Any) -> tuple[str, str]:
    if not isinstance(given, str) or len(given) > LONGEST_TEXT or not given.isprintable():
        raise BadReading("", _short(given), f"up to {LONGEST_TEXT} letters", "Write a shorter name, on one line.")
    return given.strip(), given.strip()


def _date(field: Field, given: Any) -> tuple[datetime.date, str]:
    try:
        day = datetime.date.fromisoformat(given[:10]) if isinstance(given, str) and len(given) <= 32 else None
    except ValueError:
        day = None
    if day is None:
        raise BadReading("", _short(given), "year-month-day", "Write it as 2026-06-12.")
    return day, day.isoformat()


def _flag(field: Field, given: Any) -> tuple[bool, str]:
    if not isinstance(given, bool):
        raise BadReading("", _short(given), "true or false", "Tick it or leave it out.")
    return given, "yes" if given else "no"


_PLAIN: dict[str, Any] = {
    "number": _number,
    "count": _count,
    "choice": _choice,
    "text": _text,
    "date": _date,
    "flag": _flag,
}


def _short(given: Any) -> str:
    return given[:60] if isinstance(given, str) else repr(given)[:60]


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
        raise BadReading("field", _short(key), "", "There is no such quantity.")
    reading = units.parse(text, field.kind, field.low, field.high)
    wanted = symbol or units.other(field.kind, reading.unit)
    return units.show(reading.value, field.kind, wanted) if wanted in field.units else ""
