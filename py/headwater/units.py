"""Units: one table, what people type into SI, and SI into what they read.

Factors: SI brochure and NIST SP 811 [V]. Feet and inches are international; gallons are US.
"""

import math
import re
from typing import NamedTuple

from headwater.errors import BadReading


class Unit(NamedTuple):
    """One unit: SI = (typed + offset) x factor."""

    symbol: str  # as shown
    factor: float
    offset: float
    step: float  # what it is rounded to when shown
    names: tuple[str, ...]  # further spellings, lower case


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
    ("in", _IN, 0.0, 0.01, "inch inches \" ″"),
    ("m", 1.0, 0.0, 0.001, "metre metres meter meters"),
    ("ft", _FT, 0.0, 0.01, "foot feet ' ′"),
)
QUANTITIES: dict[str, dict[str, Unit]] = {
    "temperature": _table(
        ("C", 1.0, 273.15, 0.1, "°c degc celsius"),
        ("F", 5 / 9, 459.67, 0.1, "°f degf fahrenheit"),
        ("K", 1.0, 0.0, 0.1, "kelvin"),
    ),
    "temperature_step": _table(("C", 1.0, 0.0, 0.1, ""), ("F", 5 / 9, 0.0, 1.0, ""), ("K", 1.0, 0.0, 0.1, "")),
    "altitude": _table(
        ("m", 1.0, 0.0, 1.0, "metre metres meter meters masl"),
        ("ft", _FT, 0.0, 1.0, "foot feet ' ′ amsl"),
        ("km", 1000.0, 0.0, 0.001, ""),
    ),
    "length": _table(*_LENGTHS),
    "head": _table(("m", 1.0, 0.0, 0.01, ""), ("ft", _FT, 0.0, 0.1, "")),
    "pressure": _table(
        ("hPa", 100.0, 0.0, 0.1, "hectopascal mbar mb millibar"),
        ("inHg", _INHG, 0.0, 0.01, "in.hg inhg \"hg"),
        ("kPa", 1000.0, 0.0, 0.01, ""),
        ("psi", 6894.757293168, 0.0, 0.01, "psia lbf/in2"),
        ("mmHg", 133.322387415, 0.0, 0.1, "torr"),
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
        ("km/h", 1 / 3.6, 0.0, 0.1, "kmh kph kmph"),
        ("kn", 1852 / 3600, 0.0, 0.1, "kt kts knot knots"),
        ("m/s", 1.0, 0.0, 0.1, "mps"),
    ),
    "rotation": _table(("rpm", 1.0, 0.0, 1.0, "1/min rev/min r/min revs")),
    "mass": _table(("kg", 1.0, 0.0, 1.0, "kilo kilos"), ("lb", _LB, 0.0, 1.0, "lbs pound pounds")),
    "volume": _table(
        ("l", 0.001, 0.0, 1.0, "litre litres liter liters"),
        ("gal", 231 * _IN**3, 0.0, 0.1, "gallon gallons usgal"),
        ("m3", 1.0, 0.0, 0.001, "m³"),
    ),
    "force": _table(("N", 1.0, 0.0, 10.0, ""), ("lbf", _LB * 9.80665, 0.0, 1.0, ""), ("kN", 1000.0, 0.0, 0.01, "")),
    "angle": _table(("deg", math.pi / 180, 0.0, 0.1, "° degree degrees")),
    "share": _table(("%", 0.01, 0.0, 1.0, "percent pct")),
    "time": _table(("s", 1.0, 0.0, 0.1, "sec second seconds"), ("min", 60.0, 0.0, 0.1, "minute minutes")),
    "flow": _table(
        ("l/s", 0.001, 0.0, 1.0, ""), ("gpm", 231 * _IN**3 / 60, 0.0, 10.0, "gal/min"), ("m3/s", 1.0, 0.0, 0.001, "m³/s")
    ),
    "density": _table(("kg/m3", 1.0, 0.0, 0.1, "kg/m³")),
}
_SETS = {
    "us": "F ft in ft inHg hp mph rpm lb gal lbf deg % s gpm kg/m3",
    "metric": "C m mm m hPa kW km/h rpm kg l N deg % s l/s kg/m3",
}
_SET_ORDER = (
    "temperature altitude length head pressure power speed rotation mass volume force angle share time flow density"
).split()
SYSTEMS = {name: dict(zip(_SET_ORDER, symbols.split(), strict=True)) for name, symbols in _SETS.items()}
for _system in SYSTEMS.values():
    _system["temperature_step"] = _system["temperature"]

_NAMES = {
    quantity: {name: unit for unit in table.values() for name in (unit.symbol.lower(), *unit.names)}
    for quantity, table in QUANTITIES.items()
}
_SPACES = re.compile(r"[\s\u00a0\u2007\u2009\u202f_]+")
_TYPED = re.compile(r"([+-]?)((?:\d|[.,'’ ](?=\d))+[.,]?)(?:e([+-]?\d{1,2}))?\s*(\D?.*)", re.IGNORECASE | re.DOTALL)
_LONGEST = 64  # characters of a typed quantity


def parse(text: object, quantity: str, low: float = -math.inf, high: float = math.inf) -> Reading:
    """What a typed quantity means, SI.

    A comma or point before exactly three last digits is a thousand, unless only the decimal reading is in range.

    :param text: number and unit as typed; a plain number only for rotation and share
    :param quantity: key of ``QUANTITIES``
    :param low: smallest SI value allowed
    :param high: largest SI value allowed
    Raises BadReading, without a field.
    """
    table = QUANTITIES[quantity]
    if isinstance(text, bool) or not isinstance(text, (str, int, float)):
        raise BadReading("", _quote(text), allowed(quantity, low, high), "Write a number and its unit.")
    typed = _clean(text)
    match = _TYPED.fullmatch(typed) if len(typed) <= _LONGEST else None
    if match is None:
        raise BadReading("", _quote(text), allowed(quantity, low, high), "Write a number and its unit.")
    sign, digits, power, name = match.groups()
    unit = _NAMES[quantity].get(name.strip().rstrip(".").lower())
    if unit is None and not name.strip():
        if quantity == "rotation":
            unit = table["rpm"]
        elif quantity == "share":
            unit = Unit("", 1.0, 0.0, 0.01, ())
        else:
            raise BadReading("", _quote(text), allowed(quantity, low, high), f"Add the unit: {', '.join(table)}.")
    if unit is None:
        raise BadReading("", _quote(text), allowed(quantity, low, high), f"Use one of these units: {', '.join(table)}.")
    readings = _numbers(digits.strip())
    if not readings:
        raise BadReading("", _quote(text), allowed(quantity, low, high, unit.symbol), "Write the number again.")
    scale = (-1.0 if sign == "-" else 1.0) * 10.0 ** int(power or 0)
    meant = [(scale * number + unit.offset) * unit.factor for number in readings]
    value = next((value for value in meant if low <= value <= high), meant[0])
    if not low <= value <= high:
        action = "Check the number and the unit."
        raise BadReading("", _quote(text), allowed(quantity, low, high, unit.symbol), action)
    symbol = unit.symbol or "%"
    return Reading(value, symbol, _exact(value, quantity, symbol))


def _clean(text: str | int | float) -> str:
    typed = text if isinstance(text, str) else repr(text)
    if len(typed) > 4 * _LONGEST:
        return typed
    return _SPACES.sub(" ", typed.replace("\u2212", "-").replace("\u2013", "-")).strip()


def _numbers(digits: str) -> list[float]:
    """The readings of typed digits, the likelier first."""
    plain = digits.replace(" ", "").replace("'", "").replace("’", "")
    spaced = re.fullmatch(r"\d{1,3}([ '’]\d{3})+([.,]\d+)?|[^ '’]+", digits)
    if not spaced:
        return []
    if re.fullmatch(r"\d*[.,]?\d+|\d+[.,]", plain):
        decimal = float(plain.replace(",", "."))
        if re.fullmatch(r"[1-9]\d{0,2}[,.]\d{3}", plain):
            thousand = float(re.sub("[,.]", "", plain))
            return [thousand, decimal] if "," in plain else [decimal, thousand]
        return [decimal]
    if re.fullmatch(r"\d{1,3}(,\d{3})+(\.\d+)?", plain):
        return [float(plain.replace(",", ""))]
    if re.fullmatch(r"\d{1,3}(\.\d{3})+(,\d+)?", plain):
        return [float(plain.replace(".", "").replace(",", "."))]
    return []


def _quote(text: object) -> str:
    shown = text if isinstance(text, str) else repr(text)
    return shown if len(shown) <= _LONGEST else shown[:_LONGEST] + "…"


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
    turn = {"down": math.floor, "up": math.ceil}.get(rounded or "", round)
    slack = {"down": 1e-9, "up": -1e-9}.get(rounded or "", 0.0)
    places = max(0, -math.floor(math.log10(step) + 1e-9))
    return f"{turn(from_si(value, quantity, symbol) / step + slack) * step:,.{places}f}".replace("-0.0", "0.0")


def show(value: float, quantity: str, symbol: str, rounded: str | None = None) -> str:
    """An SI value with its unit as a person reads it."""
    degree = "°" if quantity.startswith("temperature") and symbol != "K" else ""
    return f"{number(value, quantity, symbol, rounded)} {degree}{symbol}"


def _exact(value: float, quantity: str, symbol: str) -> str:
    """A value as it was understood: no digit that was typed is rounded away."""
    text = f"{from_si(value, quantity, symbol):,.6f}".rstrip("0").rstrip(".")
    degree = "°" if quantity.startswith("temperature") and symbol != "K" else ""
    return f"{'0' if text in ('', '-0') else text} {degree}{symbol}"


def allowed(quantity: str, low: float, high: float, symbol: str | None = None) -> str:
    """The allowed range in words, in a unit."""
    shown = symbol if symbol in QUANTITIES[quantity] else next(iter(QUANTITIES[quantity]))
    if math.isinf(low) or math.isinf(high):
        return ""
    return f"{_exact(low, quantity, shown)} to {_exact(high, quantity, shown)}"


def other(quantity: str, symbol: str) -> str | None:
    """The other common unit, shown beneath what was typed; none where there is only one."""
    common = [SYSTEMS[name][quantity] for name in ("us", "metric")]
    rest = [unit for unit in common if unit != symbol]
    return rest[-1] if rest else None
