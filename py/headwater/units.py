"""Units: one table, what people type into SI, and SI into what they read.

Factors follow from the units' definitions, ``sources.SOURCES["si"]`` [D]. Feet and inches are international,
gallons US.
"""

import math
import re
from typing import NamedTuple

from headwater.errors import BadReading, quote


class Unit(NamedTuple):
    """One unit: SI = (typed + offset) x factor."""

    symbol: str  # as shown
    factor: float
    offset: float
    step: float  # what it is rounded to when shown
    names: tuple[str, ...]  # further spellings, lower case, without spaces and points


class Reading(NamedTuple):
    """What was understood of a typed quantity."""

    value: float  # SI
    unit: str
    echo: str


_FT, _IN, _LB, _HP, _INHG = 0.3048, 0.0254, 0.45359237, 745.69987, 3386.389


def _table(*rows: tuple[str, float, float, float, str]) -> dict[str, Unit]:
    return {s: Unit(s, factor, offset, step, tuple(names.split())) for s, factor, offset, step, names in rows}


_LENGTHS = (
    ("mm", 0.001, 0.0, 1.0, "millimetre millimetres millimeter millimeters"),
    ("cm", 0.01, 0.0, 0.1, "centimetre centimetres centimeter centimeters"),
    ("in", _IN, 0.0, 0.01, 'inch inches " ″'),
    ("m", 1.0, 0.0, 0.001, "metre metres meter meters"),
    ("ft", _FT, 0.0, 0.01, "foot feet ' ′"),
)
QUANTITIES: dict[str, dict[str, Unit]] = {
    "temperature": _table(
        ("C", 1.0, 273.15, 0.1, "°c degc celsius"),
        ("F", 5 / 9, 459.67, 0.1, "°f degf fahrenheit"),
        ("K", 1.0, 0.0, 0.1, "kelvin"),
    ),
    "temperature_step": _table(
        ("C", 1.0, 0.0, 0.1, ""),
        ("F", 5 / 9, 0.0, 1.0, ""),
        ("K", 1.0, 0.0, 0.1, ""),
    ),
    "altitude": _table(
        ("m", 1.0, 0.0, 1.0, "metre metres meter meters masl"),
        ("ft", _FT, 0.0, 1.0, "foot feet ' ′ amsl"),
        ("km", 1000.0, 0.0, 0.001, ""),
    ),
    "length": _table(*_LENGTHS),
    "distance": _table(
        ("m", 1.0, 0.0, 1.0, "metre metres meter meters"),
        ("ft", _FT, 0.0, 1.0, "foot feet ' ′"),
        ("yd", 3 * _FT, 0.0, 1.0, "yard yards"),
    ),
    "head": _table(("m", 1.0, 0.0, 0.01, ""), ("ft", _FT, 0.0, 0.1, "")),
    "pressure": _table(
        ("hPa", 100.0, 0.0, 0.1, "hectopascal mbar mb millibar millibars"),
        ("inHg", _INHG, 0.0, 0.01, 'in inch inches " "hg ″hg ″'),
        ("kPa", 1000.0, 0.0, 0.01, ""),
        ("psi", 6894.757293168, 0.0, 0.01, "psia lbf/in2"),
        ("mmHg", 133.322387415, 0.0, 0.1, "mm torr"),
        ("bar", 100000.0, 0.0, 0.0001, ""),
        ("Pa", 1.0, 0.0, 1.0, "pascal"),
    ),
    "power": _table(
        ("hp", _HP, 0.0, 1.0, "bhp horsepower"),
        ("kW", 1000.0, 0.0, 0.1, "kilowatt kilowatts"),
        ("W", 1.0, 0.0, 1.0, "watt watts"),
    ),
    "speed": _table(
        ("mph", 0.44704, 0.0, 0.1, "mi/h"),
        ("km/h", 1 / 3.6, 0.0, 0.1, "kmh kph kmph km/hr"),
        ("kn", 1852 / 3600, 0.0, 0.1, "kt kts knot knots"),
        ("m/s", 1.0, 0.0, 0.1, "mps"),
    ),
    "rotation": _table(("rpm", 1.0, 0.0, 1.0, "rpms 1/min rev/min r/min u/min revs")),
    "mass": _table(("kg", 1.0, 0.0, 1.0, "kilo kilos"), ("lb", _LB, 0.0, 1.0, "lbs pound pounds")),
    "volume": _table(
        ("l", 0.001, 0.0, 1.0, "litre litres liter liters"),
        ("gal", 231 * _IN**3, 0.0, 0.1, "gallon gallons usgal"),
        ("m3", 1.0, 0.0, 0.001, "m³"),
    ),
    "force": _table(
        ("N", 1.0, 0.0, 10.0, ""),
        ("lbf", _LB * 9.80665, 0.0, 1.0, ""),
        ("kN", 1000.0, 0.0, 0.01, ""),
    ),
    "angle": _table(("deg", math.pi / 180, 0.0, 0.1, "° degree degrees")),
    "share": _table(("%", 0.01, 0.0, 1.0, "percent pct")),
    "time": _table(("s", 1.0, 0.0, 0.1, "sec second seconds"), ("min", 60.0, 0.0, 0.1, "minute minutes")),
    "flow": _table(
        ("l/s", 0.001, 0.0, 1.0, ""),
        ("gpm", 231 * _IN**3 / 60, 0.0, 10.0, "gal/min"),
        ("m3/s", 1.0, 0.0, 0.001, "m³/s"),
    ),
    "density": _table(("kg/m3", 1.0, 0.0, 0.1, "kg/m³")),
}
_SETS = {
    "us": "F F ft in ft ft inHg hp mph rpm lb gal lbf deg % s gpm kg/m3",
    "metric": "C C m mm m m hPa kW km/h rpm kg l N deg % s l/s kg/m3",
}
SYSTEMS = {name: dict(zip(QUANTITIES, symbols.split(), strict=True)) for name, symbols in _SETS.items()}

_NAMES = {
    quantity: {name: unit for unit in table.values() for name in (unit.symbol.lower(), *unit.names)}
    for quantity, table in QUANTITIES.items()
}
_LONGEST = 64  # characters of a typed quantity
_TIDY = str.maketrans(
    dict.fromkeys("\u2212\u2010\u2011\u2012\u2013\ufe63\uff0d", "-")  # all that is pasted as a minus
    | dict.fromkeys("\u200b\u2060\ufeff\u200e\u200f", "")  # pasted marks without width
    | dict.fromkeys("\u201c\u201d", '"')
    | {"\u2019": "'", "_": " ", "\u00ba": "\u00b0", "\u2044": "/"}
)
_TYPED = re.compile(
    r"([+-]?) ?"
    r"(?:(?:(\d+)[ -])?(\d+)/(\d+)"  # a tape's fractions: 5 1/8
    r"|(\d{1,3}(?:[ ']\d{3})+(?!\d)(?:[.,]\d+)?|\d[\d.,]*|[.,]\d+)(?:e([+-]?\d{1,2})(?!\d))?)"
    r"(.*)",
    re.IGNORECASE,
)
_UNGROUPED = re.compile(r"\d*[.,]?\d+|\d+[.,]")
_EITHER = re.compile(r"[1-9]\d{0,2}[.,]\d{3}")
_COMMA_GROUPS = re.compile(r"\d{1,3}(?:,\d{3})+(?:\.\d+)?")
_POINT_GROUPS = re.compile(r"\d{1,3}(?:\.\d{3})+(?:,\d+)?")
_PLAIN_SHARE = Unit("%", 1.0, 0.0, 1.0, ())  # 0.8 typed for 80 %


def parse(text: object, quantity: str, low: float = -math.inf, high: float = math.inf) -> Reading:
    """What a typed quantity means, SI.

    A comma before exactly three last digits is a thousand, unless only the decimal reading is in range. A
    point there is a decimal point, unless only the thousand is in range; where both are, it is asked for
    again. An altitude taken the wrong way makes a wrong go: "1.609 m" is asked for again, and "20,000 ft" is
    out of range, never 20 ft.

    :param text: number and unit as typed; a plain number only for rotation and share
    :param quantity: key of ``QUANTITIES``
    :param low: smallest SI value allowed
    :param high: largest SI value allowed
    Raises BadReading, without a field.
    """

    def bad(action: str, unit: Unit | None = None) -> BadReading:
        return BadReading("", quote(text), allowed(quantity, low, high, unit and unit.symbol), action)

    numbers, name = _split(text)
    unit = _NAMES[quantity].get(name)
    if not numbers or (unit is None and name[:1].isdigit()):
        raise bad("Write one number and its unit.")
    if not name:
        unit = {"rotation": QUANTITIES["rotation"]["rpm"], "share": _PLAIN_SHARE}.get(quantity)
        if unit is None:
            raise bad(f"Add the unit: {', '.join(QUANTITIES[quantity])}.")
    if unit is None:
        raise bad(f"Use one of these units: {', '.join(QUANTITIES[quantity])}.")
    if quantity == "altitude" and unit.step >= 1 and abs(numbers[0]) > abs(numbers[-1]):
        numbers = numbers[:1]
    meant = [(number, (number + unit.offset) * unit.factor) for number in numbers]
    fitting = [(number, value) for number, value in meant if _within(value, low, high)]
    if not fitting:
        raise bad("Check the number and the unit.", unit)
    if len(fitting) > 1 and abs(numbers[0]) < abs(numbers[1]) and not math.isinf(high - low):
        either = f"{numbers[1]:.0f} {unit.symbol} or {numbers[0]:.2f} {unit.symbol}"
        raise bad(f"A thousand or a decimal point? Write {either}.", unit)
    number, value = fitting[0]
    value = min(max(value, low), high) + 0.0  # plus zero: no minus zero
    if unit is _PLAIN_SHARE:
        number *= 100
    return Reading(value, unit.symbol, f"{number + 0.0:,.10g} {_degree(quantity, unit.symbol)}{unit.symbol}")


def _split(text: object) -> tuple[list[float], str]:
    """The readings of a typed number, the likelier first, and its unit in lower case."""
    if isinstance(text, (int, float)) and not isinstance(text, bool):
        return ([float(text)] if abs(text) < 1e100 else []), ""
    match = None
    if isinstance(text, str) and len(text) <= _LONGEST:
        match = _TYPED.fullmatch(" ".join(text.translate(_TIDY).split()))
    if match is None:
        return [], ""
    sign, whole, over, under, digits, power, name = match.groups()
    if digits:
        scale = 10.0 ** int(power or 0)
        numbers = [number * scale for number in _numbers(digits.replace(" ", "").replace("'", ""))]
    else:
        numbers = [int(whole or 0) + int(over) / int(under)] if int(under) else []
    name = name.replace(" ", "").replace(".", "").lower()
    return [-number if sign == "-" else number for number in numbers], name


def _numbers(digits: str) -> list[float]:
    """The readings of typed digits, the likelier first."""
    if _UNGROUPED.fullmatch(digits):
        decimal = float(digits.replace(",", "."))
        if not _EITHER.fullmatch(digits):
            return [decimal]
        thousand = float(digits.replace(",", "").replace(".", ""))
        return [thousand, decimal] if "," in digits else [decimal, thousand]
    if _COMMA_GROUPS.fullmatch(digits):
        return [float(digits.replace(",", ""))]
    if _POINT_GROUPS.fullmatch(digits):
        return [float(digits.replace(".", "").replace(",", "."))]
    return []


def _within(value: float, low: float, high: float) -> bool:
    """Whether a value is in range, its ends included whatever unit they were typed in."""
    return low <= value <= high or math.isclose(value, low) or math.isclose(value, high)


def to_si(number: float, quantity: str, symbol: str) -> float:
    """SI value of a number in a unit."""
    unit = QUANTITIES[quantity][symbol]
    return (number + unit.offset) * unit.factor


def from_si(value: float, quantity: str, symbol: str) -> float:
    """Number in a unit of an SI value."""
    unit = QUANTITIES[quantity][symbol]
    return value / unit.factor - unit.offset


def number(value: float, quantity: str, symbol: str, rounded: str | None = None) -> str:
    """An SI value in a unit, with sensible digits and no unit.

    :param rounded: "down", "up" or, by default, to the nearest
    """
    step = QUANTITIES[quantity][symbol].step
    if quantity == "rotation":
        step = 10.0 if abs(value) >= 100 else 1.0
    steps = from_si(value, quantity, symbol) / step
    if rounded == "down":
        whole = math.floor(steps + 1e-9 * max(1.0, abs(steps)))
    elif rounded == "up":
        whole = math.ceil(steps - 1e-9 * max(1.0, abs(steps)))
    else:
        whole = round(steps)
    places = max(0, -math.floor(math.log10(step) + 1e-9))
    return f"{whole * step:,.{places}f}"


def show(value: float, quantity: str, symbol: str, rounded: str | None = None) -> str:
    """An SI value with its unit as a person reads it."""
    return f"{number(value, quantity, symbol, rounded)} {_degree(quantity, symbol)}{symbol}"


def _degree(quantity: str, symbol: str) -> str:
    return "°" if quantity.startswith("temperature") and symbol != "K" else ""


def allowed(quantity: str, low: float, high: float, symbol: str | None = None) -> str:
    """The allowed range in words, in a unit, its ends rounded inward; empty where there is no range."""
    shown = symbol if symbol in QUANTITIES[quantity] else next(iter(QUANTITIES[quantity]))
    if math.isinf(low) or math.isinf(high):
        return ""
    ends = (number(low, quantity, shown, "up"), number(high, quantity, shown, "down"))
    low_text, high_text = (end.rstrip("0").rstrip(".") if "." in end else end for end in ends)
    return f"{low_text} to {high_text} {_degree(quantity, shown)}{shown}"


def other(quantity: str, symbol: str) -> str | None:
    """The other common unit, shown beneath what was typed; none where there is only one."""
    common = [SYSTEMS[name][quantity] for name in ("us", "metric")]
    rest = [unit for unit in common if unit != symbol]
    return rest[-1] if rest else None
