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
    group: str = "first"  # where the form shows it: first, notes, note_launch, hull, launch, fine

    @property
    def units(self) -> tuple[str, ...]:
        """Unit choices, for a quantity."""
        return tuple(units.QUANTITIES.get(self.kind, ()))


PHONE_ALTITUDE = 50.0  # 95 % half-width of an altitude from a phone [m] [P]
LENGTH_OVER_BEAM = 3.2  # of the bottom, where it was not measured [P]
DRY_SHARE = 0.37  # of the length, where the dry boat balances, where it was not measured [P]
HUB_SHARE = (1 / 5, 1 / 2.5)  # 95 % range of hub over impeller where the hub was not measured [P]
PRESSURE_TRAP = 0.06  # share by which the pressure at the water may differ from its altitude's standard [P]
HIGH_APART = 500.0  # m between two wide-open rpm that tell of the engine at altitude [P]
MOST_HUB = 0.8  # of the impeller's diameter: more is a slip of the tape [P]
LONGEST_TEXT = 80  # characters of a label
MOST_NOTES = 200


def _length(key: str, label: str, meaning: str, measure: str, low: float, high: float, **more: Any) -> Field:
    spread: dict[str, Any] = {"tolerance": 0.01, "tolerance_kind": "relative"}
    return Field(key, label, meaning, measure, "length", low, high, **spread | more)


def _mass(key: str, label: str, meaning: str, measure: str, low: float, high: float, **more: Any) -> Field:
    spread: dict[str, Any] = {"tolerance": 0.05, "tolerance_kind": "relative", "source": "practice"}
    return Field(key, label, meaning, measure, "mass", low, high, **spread | more)


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
    Field(
        "boat.wide_open_altitude",
        "Wide-open rpm seen at",
        "Altitude at which the wide-open rpm was read.",
        "Read it off the map. Sea level if left out.",
        "altitude",
        -450.0,
        6000.0,
        0.0,
        source="practice",
        group="fine",
    ),
    Field(
        "boat.aspiration",
        "Engine breathes",
        "How the engine gets its air: what altitude takes from it follows from this.",
        "Boosted is a petrol engine with a turbo or blower; say up to which altitude it keeps its power.",
        "choice",
        default="natural",
        source="iso1585",
        choices=("natural", "boosted", "diesel", "turbo_diesel"),
        group="fine",
    ),
    Field(
        "boat.critical_altitude",
        "Boost lasts up to",
        "Altitude up to which a boosted engine keeps its power.",
        "Ask who tuned it, or note at which altitude wide open first turned slower.",
        "altitude",
        0.0,
        6000.0,
        source="practice",
        group="fine",
    ),
    _rpm(
        "boat.high_rpm",
        "Wide-open rpm seen up high",
        "A second wide-open rpm, read far above the first: it replaces the rule for her engine.",
        "Light, flat deep water, wide open. Let the tach settle, then read it.",
        1000.0,
        group="fine",
    ),
    Field(
        "boat.high_altitude",
        "Seen up high at",
        "Altitude of that second wide-open rpm.",
        "Read it off the map.",
        "altitude",
        -450.0,
        6000.0,
        tolerance=30.0,
        tolerance_kind="absolute",
        source="practice",
        group="fine",
    ),
    _length(
        "boat.chine_beam",
        "Beam between the chines",
        "Width of the bottom from chine to chine, where she is widest.",
        "On the trailer, with a tape under her, chine to chine.",
        0.8,
        5.0,
        group="hull",
    ),
    _mass(
        "boat.dry_mass",
        "Weight, dry",
        "The boat ready to run, without people, fuel and gear.",
        "A public scale with and without the boat on the trailer, or the plate.",
        150.0,
        20000.0,
        group="hull",
    ),
    _length(
        "boat.hull_length",
        "Length of the bottom",
        "Length of the bottom from the transom to where it meets the water up front.",
        "A tape along the keel. 3.2 times the beam if left out.",
        2.5,
        20.0,
        group="hull",
    ),
    Field(
        "boat.deadrise",
        "Deadrise",
        "Angle of the bottom against level, aft of midship.",
        "A phone's level on the bottom beside the keel, boat level.",
        "angle",
        0.0,
        math.radians(30.0),
        math.radians(10.0),
        source="practice",
        group="hull",
    ),
    _length(
        "boat.centre_of_gravity",
        "Balance point, dry",
        "Where she balances without people, fuel and gear, ahead of the transom.",
        "Lift or roll her on one bar until she balances. 0.37 of the length if left out.",
        0.3,
        12.0,
        group="hull",
    ),
    _length(
        "boat.intake_height",
        "Intake under the shaft",
        "How far the intake's opening lies under the shaft's centre.",
        "A tape at the transom. The wear ring's bore if left out.",
        0.0,
        1.5,
        group="hull",
    ),
    _mass(
        "boat.load_limit",
        "Most aboard",
        "The most that may be aboard: people, fuel and gear together. It caps the heaviest load.",
        "Read the capacity plate, or take what your licence says.",
        10.0,
        20000.0,
        group="hull",
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
    Field(
        "place.room",
        "Clear water ahead",
        "How much clear water she has to get on plane and still turn away.",
        "Pace it along the bank, or measure it on the map.",
        "distance",
        5.0,
        5000.0,
        group="launch",
    ),
    Field(
        "place.current",
        "Current",
        "Speed of the river at the launch.",
        "Drift with the engine off and read the GPS.",
        "speed",
        0.0,
        8.0,
        0.0,
        source="practice",
        group="launch",
    ),
    Field(
        "place.below",
        "What lies beyond",
        "What comes after the clear water. A rapid or rocks take ten metres more.",
        "Walk down and look.",
        "choice",
        source="practice",
        choices=("flat", "rapid", "rocks"),
        group="launch",
    ),
    _length(
        "place.depth",
        "Depth of the water",
        "Depth where she launches. Deep if left out.",
        "A pole or the sounder.",
        0.2,
        100.0,
        group="launch",
    ),
    Field(
        "place.wind",
        "Wind against her",
        "Wind from ahead on the launch.",
        "Calm: flags hang. Breeze: they lift. Strong: spray flies.",
        "choice",
        default="calm",
        source="practice",
        choices=("calm", "breeze", "strong"),
        group="launch",
    ),
    Field(
        "place.air_temperature",
        "Air",
        "Temperature of the air. The standard one at the altitude if left out.",
        "A thermometer in the shade.",
        "temperature",
        233.15,
        328.15,
        tolerance=2.0,
        tolerance_kind="absolute",
        source="practice",
        group="fine",
    ),
    Field(
        "place.humidity",
        "Humidity",
        "Relative humidity of the air. It costs an engine a little power on a hot day.",
        "Leave it out unless it is hot and close.",
        "share",
        0.0,
        1.0,
        0.0,
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
        "plan.people",
        "People",
        "How many are aboard. 85 kg each.",
        "Count heads, yours too.",
        "count",
        0,
        60,
        0,
        source="practice",
        group="launch",
    ),
    _mass(
        "plan.gear",
        "Gear",
        "Weight of all that is aboard beside people and fuel.",
        "Weigh a few bags, count the rest.",
        0.0,
        15000.0,
        default=0.0,
        group="launch",
    ),
    Field(
        "plan.fuel",
        "Fuel",
        "Fuel aboard.",
        "Read the gauge, or what was filled.",
        "volume",
        0.0,
        5.0,
        0.0,
        tolerance=0.05,
        tolerance_kind="relative",
        source="practice",
        group="launch",
    ),
    Field(
        "plan.rows",
        "People sit",
        "Where most people sit until she is on plane.",
        "Tell them before you start.",
        "choice",
        default="middle",
        source="practice",
        choices=("back", "middle", "front"),
        group="launch",
    ),
    Field(
        "plan.direction",
        "Launch",
        "Up against the current or down with it. Both are answered where it is left out.",
        "Choose one once you have decided.",
        "choice",
        source="practice",
        choices=("up", "down"),
        group="launch",
    ),
    Field(
        "plan.feed_in",
        "Feed in over",
        "Time from idle to the planned rpm. The advised one if left out.",
        "Count it.",
        "time",
        0.0,
        60.0,
        tolerance=0.5,
        tolerance_kind="absolute",
        source="practice",
        group="launch",
    ),
    Field(
        "plan.water",
        "The water itself",
        "Air in it at the intake. Fizzy: fine bubbles. Aerated: milky. White: foam.",
        "Look at it where the intake will be, not at the bank.",
        "choice",
        default="clear",
        source="practice",
        choices=("clear", "fizzy", "aerated", "white"),
        group="launch",
    ),
    Field(
        "plan.grate",
        "Grate",
        "Whether anything lies on the intake grate.",
        "Engine off, key out, then look or reach.",
        "choice",
        default="clean",
        source="practice",
        choices=("clean", "weed", "stick"),
        group="launch",
    ),
    Field(
        "plan.standing_waves",
        "Standing waves in the run",
        "Whether the run has waves or a drop that lift the stern out of the water.",
        "Scout the run.",
        "choice",
        default="no",
        source="practice",
        choices=("no", "yes"),
        group="launch",
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
        "Held; the revs ran up but she did not let go; she let go; got on plane; or would not get on plane.",
        "Write what she did, not what you hoped.",
        "choice",
        choices=("held", "flared", "let_go", "planed", "would_not_plane"),
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
    _mass(
        "notes.load",
        "Load then",
        "People, fuel and gear aboard then, together.",
        "85 kg a head, 0.74 kg a litre of fuel, and the gear.",
        0.0,
        20000.0,
        group="note_launch",
    ),
    Field(
        "notes.seconds",
        "Seconds to plane",
        "From opening the throttle until she was on plane.",
        "Count it, or let somebody aboard time it.",
        "time",
        0.5,
        180.0,
        tolerance=0.15,
        tolerance_kind="relative",
        source="practice",
        group="note_launch",
    ),
    Field(
        "notes.feed_in",
        "Fed in over",
        "Time from idle to that rpm then.",
        "Count it.",
        "time",
        0.0,
        60.0,
        tolerance=0.5,
        tolerance_kind="absolute",
        source="practice",
        group="note_launch",
    ),
    Field(
        "notes.rows",
        "People sat",
        "Where most people sat then.",
        "As you remember it.",
        "choice",
        default="middle",
        source="practice",
        choices=("back", "middle", "front"),
        group="note_launch",
    ),
    _length(
        "notes.depth",
        "Depth there",
        "Depth of the water then. Deep if left out.",
        "A pole or the sounder.",
        0.2,
        100.0,
        group="note_launch",
    ),
    Field(
        "notes.wind",
        "Wind then",
        "Wind from ahead then.",
        "As you remember it.",
        "choice",
        default="calm",
        source="practice",
        choices=("calm", "breeze", "strong"),
        group="note_launch",
    ),
    Field(
        "notes.current",
        "Current then",
        "Speed of the river then.",
        "Drift and read the GPS.",
        "speed",
        0.0,
        8.0,
        source="practice",
        group="note_launch",
    ),
    Field(
        "notes.water",
        "The water then",
        "Air in it at the intake then.",
        "As you remember it.",
        "choice",
        default="clear",
        source="practice",
        choices=("clear", "fizzy", "aerated", "white"),
        group="note_launch",
    ),
    Field(
        "notes.grate",
        "Grate then",
        "Whether anything lay on the grate then.",
        "What you found when you looked.",
        "choice",
        default="clean",
        source="practice",
        choices=("clean", "weed", "stick"),
        group="note_launch",
    ),
)
FIELD = {field.key: field for field in FIELDS}
_PARTS = ("place", "boat", "plan", "notes")
_SHORT = {
    part: {field.key.partition(".")[2]: field for field in FIELDS if field.key.startswith(f"{part}.")}
    for part in _PARTS
}
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
        self.hull(values["boat"])
        for i, note in enumerate(values["notes"]):
            self.launched(f"notes[{i}]", note, values["boat"])
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

    def hull(self, boat: Values) -> None:
        """Engine and hull readings that go together; typical ones follow the beam."""
        for name, other in (("high_rpm", "high_altitude"), ("high_altitude", "high_rpm")):
            if f"boat.{name}" in self.given and f"boat.{other}" not in self.given:
                field = FIELD[f"boat.{other}"]
                self.fail(field.key, None, allowed_text(field), f"Fill this in as well. {field.measure}")
        low, high = boat.get("wide_open_altitude"), boat.get("high_altitude")
        if low is not None and high is not None and high - low < HIGH_APART:
            far = units.show(HIGH_APART, "altitude", self.units.get("altitude", "m"))
            self.fail(
                "boat.high_altitude",
                self.given["boat.high_altitude"],
                f"{far} or more above the first",
                "So close to the first it says nothing. Leave both out.",
            )
        if boat.get("aspiration") == "boosted" and "boat.critical_altitude" not in self.given:
            field = FIELD["boat.critical_altitude"]
            self.fail(field.key, None, allowed_text(field), f"Fill this in. {field.measure}")
        beam = boat.get("chine_beam")
        if beam is None:
            return
        length = boat.setdefault("hull_length", LENGTH_OVER_BEAM * beam)
        boat.setdefault("centre_of_gravity", DRY_SHARE * length)
        for name, least, most in (
            ("hull_length", 1.5 * beam, 8.0 * beam),
            ("centre_of_gravity", 0.1 * length, 0.8 * length),
        ):
            if not least <= boat[name] <= most:
                unit = self.units.get("length", "m")
                self.fail(
                    f"boat.{name}",
                    self.given.get(f"boat.{name}"),
                    units.allowed("length", least, most, unit),
                    "It does not go with the beam and the length given. Measure again.",
                )

    def launched(self, path: str, note: Values, boat: Values) -> None:
        """What a note of a launch needs beside its rpm."""
        if note.get("outcome") not in ("planed", "would_not_plane"):
            return
        needed = ["load", "seconds", "feed_in"] if note["outcome"] == "planed" else ["load"]
        for name in needed:
            key = f"{path}.{name}"
            if name not in note and key not in self.given:
                field = FIELD[f"notes.{name}"]
                self.fail(key, None, allowed_text(field), f"Fill this in. {field.measure}")
        if note.get("boat_speed"):
            key = f"{path}.boat_speed"
            self.fail(key, self.given[key], "0", "A launch starts from standing. Leave the boat speed out.")

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
    raise BadReading("", "", ", ".join(field.choices), "Choose one of these.")


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


_FOLLOWS = {
    "boat.hub_diameter": "a third of the wear ring's bore",
    "boat.jets_running": "all jets",
    "boat.hull_length": "3.2 times the beam",
    "boat.centre_of_gravity": "0.37 of the length",
    "boat.intake_height": "the wear ring's bore",
    "place.air_temperature": "the standard one",
    "place.depth": "deep",
    "notes.depth": "deep",
    "plan.feed_in": "the advised one",
    "plan.direction": "both",
}


def default_text(field: Field) -> str:
    """What stands in for a field that is left out, in words."""
    if field.key in _FOLLOWS:
        return _FOLLOWS[field.key]
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
