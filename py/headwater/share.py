"""A case as the fragment of a link, and back: versioned, short, with a check on its end.

``2.`` then base64url of raw deflate over compact JSON, then six letters of CRC-32. Keys are shortened by the
version's own table. A reading typed as that version's default goes as an empty list; one left out stays out,
and where a later program has another default the old one is written in, so that a link goes on meaning what
it meant. Version 1 knew the check alone, version 2 the launch as well.
"""

import base64
import json
import math
import re
import zlib
from collections.abc import Callable, Mapping
from typing import Any

from headwater.errors import BadReading, quote
from headwater.fields import FIELD

VERSION = 2
LONGEST = 8000  # characters of a fragment
_MOST_BYTES = 64_000  # of a case once unpacked
_DEEPEST = 4  # case, notes, note, typed default
_CHECK = 6  # characters
_FRAGMENT = re.compile(r"(\d{1,4})(?:\.([\w-]*))?", re.ASCII)
_BRACKETS = re.compile(r'"(?:[^"\\]|\\.)*"|[\[\]{}]')

# Frozen, all of them: a link made today must open for ever. A change of any makes a new version.
_PARTS = {"b": "boat", "p": "place", "n": "plan", "s": "notes"}
_CHECK_NAMES = {
    "l": "label",
    "d": "date",
    "j": "jets",
    "jr": "jets_running",
    "n": "nozzle_diameter",
    "i": "impeller_diameter",
    "h": "hub_diameter",
    "sd": "shaft_depth",
    "w": "wide_open_rpm",
    "e": "engine_power",
    "rf": "rpm_from",
    "g": "gear_ratio",
    "wf": "wake_fraction",
    "rl": "ram_loss",
    "il": "intake_loss",
    "nl": "nozzle_loss",
    "pe": "pump_efficiency",
    "de": "driveline_efficiency",
    "ss": "suction_specific_speed",
    "o": "outcome",
    "p": "power",
    "r": "rpm",
    "th": "throttle",
    "v": "boat_speed",
    "re": "reserve",
    "a": "altitude",
    "t": "water_temperature",
    "sp": "station_pressure",
    "q": "altimeter_setting",
    "sc": "station_pressure_confirmed",
    "af": "altitude_from",
    "su": "set_up",
}
_LAUNCH_NAMES = {
    "wa": "wide_open_altitude",
    "as": "aspiration",
    "ca": "critical_altitude",
    "hr": "high_rpm",
    "ha": "high_altitude",
    "b": "chine_beam",
    "m": "dry_mass",
    "hl": "hull_length",
    "dr": "deadrise",
    "cg": "centre_of_gravity",
    "ih": "intake_height",
    "ll": "load_limit",
    "ro": "room",
    "c": "current",
    "be": "below",
    "dp": "depth",
    "wi": "wind",
    "at": "air_temperature",
    "hu": "humidity",
    "pp": "people",
    "ge": "gear",
    "fu": "fuel",
    "rw": "rows",
    "di": "direction",
    "f": "feed_in",
    "wt": "water",
    "gr": "grate",
    "sw": "standing_waves",
    "lo": "load",
    "s": "seconds",
}
_NAMES = {1: _CHECK_NAMES, 2: _CHECK_NAMES | _LAUNCH_NAMES}
_CHECK_DEFAULTS: dict[str, dict[str, Any]] = {
    "boat": {
        "jets": 1,
        "rpm_from": "seen",
        "gear_ratio": 1.0,
        "wake_fraction": 0.08,
        "ram_loss": 0.25,
        "intake_loss": 0.15,
        "nozzle_loss": 0.03,
        "pump_efficiency": 0.80,
        "driveline_efficiency": 0.97,
    },
    "place": {"altitude_from": "map"},
    "plan": {"reserve": 1.10},
    "notes": {},
}
_LAUNCH_DEFAULTS: dict[str, dict[str, Any]] = {
    "boat": {"wide_open_altitude": 0.0, "aspiration": "natural", "deadrise": math.radians(10.0)},
    "place": {"current": 0.0, "wind": "calm", "humidity": 0.0},
    "plan": {
        "people": 0,
        "gear": 0.0,
        "fuel": 0.0,
        "rows": "middle",
        "water": "clear",
        "grate": "clean",
        "standing_waves": "no",
    },
    "notes": {"rows": "middle", "wind": "calm", "water": "clear", "grate": "clean"},
}
_DEFAULTS = {
    1: _CHECK_DEFAULTS,
    2: {part: usual | _LAUNCH_DEFAULTS[part] for part, usual in _CHECK_DEFAULTS.items()},
}
_USUAL = (  # what most links hold, for deflate to point at; likeliest last
    b'"jr":2,"rf":"papers","g":1.0,"pe":0.8,"ss":"re":"th":"80 %","p":" kW"},"sp":" inHg"," hPa","q":"29."'
    b' km/h"," kn"," m/s","o":"flared","r":"," C"},{" m","t":" K"," in","h":" cm","sd":"0.'
    b'{"b":{"l":"","d":"2027-0","j":1,"n":" mm","i":" mm","h":" mm","sd":" in","w":"4,000 rpm","e":" hp"},'
    b'"p":{"l":"","a":"1,000 ft","t":"54 F"},"n":{"r":"3,000 rpm","v":"0 mph"},'
    b'"s":[{"l":"","d":"2026-0","o":"held","r":"3,000 rpm","v":"0 mph","a":"1,000 ft","t":"54 F"},'
    b'{"l":"","d":"2026-0","o":"let_go","r":"3,000 rpm","v":"0 mph","a":"1,000 ft","t":"54 F"}]}'
)
_SHORT = {name: short for short, name in _NAMES[VERSION].items()}
_NOT_OURS = "This is not a link of Headwater."
_CUT = "This link was cut or changed on its way. Ask for it again."
_UNKNOWN = "This link holds something that is not understood here. Update the app, then open it again."


def encode(case: Any) -> str:
    """The fragment of a link that carries a case, without the hash sign.

    :param case: readings as typed
    Raises BadReading where the case is none, or too long for a link.
    """
    if not isinstance(case, Mapping):
        raise _bad("Only a case can be made into a link.")
    for key in case:
        if key not in _PARTS.values():
            raise _bad(f"{quote(key)} is no part of a case and cannot go into a link.")
    packed: dict[str, Any] = {}
    for short, part in _PARTS.items():
        if part in case:
            packed[short] = _each(part, case[part], _pack)
    try:
        text = json.dumps(packed, allow_nan=False, ensure_ascii=False, separators=(",", ":")).encode()
    except ValueError:  # not a number, or half a character
        raise _bad("A reading in this case cannot go into a link.") from None
    deflate = zlib.compressobj(9, zlib.DEFLATED, -15, zdict=_USUAL)
    body = _letters(deflate.compress(text) + deflate.flush())
    if len(text) > _MOST_BYTES or len(body) > LONGEST - 10:
        raise _bad("This case is too long for a link. Send fewer notes.")
    return f"{VERSION}.{body}{_check(VERSION, body)}"


def decode(fragment: Any) -> dict[str, Any]:
    """The case that a link carries, as it was typed.

    :param fragment: the link's fragment, or the whole link
    Raises BadReading, in plain words, for every link that is cut, damaged, foreign or too new.
    """
    text = fragment if isinstance(fragment, str) and len(fragment) <= 2 * LONGEST else ""
    tidied = "".join(text.rpartition("#")[2].split()).rstrip(".,;:!?)>]'\"")  # as messages wrap and end it
    match = _FRAGMENT.fullmatch(tidied)
    version = int(match[1]) if match else 0
    if match is None or version < 1:
        raise _bad(_NOT_OURS)
    if version > VERSION:
        raise _bad("This link comes from a newer version. Update the app, then open it again.")
    body, check = (match[2] or "")[:-_CHECK], (match[2] or "")[-_CHECK:]
    if not body or _check(version, body) != check:
        raise _bad(_CUT)
    packed = _unpacked(body)
    if not isinstance(packed, dict):
        raise _bad(_UNKNOWN)
    case: dict[str, Any] = {}
    for short, content in packed.items():
        part = _PARTS.get(short)
        if part is None:
            raise _bad(_UNKNOWN)
        case[part] = _each(part, content, lambda part, content: _unpack(version, part, content))
    for part, usual in _DEFAULTS[version].items():
        old = {name: value for name, value in usual.items() if FIELD[f"{part}.{name}"].default != value}
        if old and part == "notes":
            case[part] = [old | note for note in case.get(part) or []]
        elif old:
            case[part] = old | (case.get(part) or {})
    return case


def _each(part: str, content: Any, turn: Callable[[str, Any], dict[str, Any]]) -> Any:
    """One part of a case turned: the notes one by one."""
    if content is None:
        return None
    if part == "notes" and isinstance(content, list):
        return [turn(part, note) for note in content]
    return turn(part, None if part == "notes" else content)


def _pack(part: str, content: Any) -> dict[str, Any]:
    if not isinstance(content, Mapping):
        raise _bad(f"{part} cannot go into a link: it must hold readings.")
    for name, value in content.items():
        if name not in _SHORT or f"{part}.{name}" not in FIELD or not _plain(value):
            raise _bad(f"{part}.{quote(name)} cannot go into a link.")
    usual = _DEFAULTS[VERSION][part]
    return {
        short: [] if _same(usual.get(name), content[name]) else content[name]
        for name, short in _SHORT.items()
        if name in content
    }


def _unpack(version: int, part: str, content: Any) -> dict[str, Any]:
    if not isinstance(content, dict):
        raise _bad(_UNKNOWN)
    out = {}
    for short, value in content.items():
        name = _NAMES[version].get(short, "")
        if f"{part}.{name}" not in FIELD:
            raise _bad(_UNKNOWN)
        out[name] = _DEFAULTS[version][part].get(name, value) if value == [] else value
        if not _plain(out[name]):
            raise _bad(_UNKNOWN)
    return out


def _unpacked(body: str) -> Any:
    """What the letters of a link hold: size and depth are known to be small before anything is built."""
    inflate = zlib.decompressobj(-15, zdict=_USUAL)
    try:
        raw = base64.b64decode(body + "=" * (-len(body) % 4), altchars=b"-_", validate=True)
        text = inflate.decompress(raw, _MOST_BYTES).decode()
        if not inflate.eof or inflate.unused_data:
            raise _bad(_CUT if not inflate.unconsumed_tail else "This link holds too much to be a case.")
        depth = 0
        for mark in _BRACKETS.findall(text):
            depth += (mark in "[{") - (mark in "]}")
            if depth > _DEEPEST:
                raise _bad(_UNKNOWN)
        return json.loads(text)
    except BadReading:
        raise
    except (ValueError, zlib.error):
        raise _bad(_CUT) from None


def _plain(value: Any) -> bool:
    """Whether a reading is of a kind that a case can hold."""
    if isinstance(value, (int, float)):
        return abs(value) < 1e15  # nor is it infinite or no number
    return value is None or isinstance(value, str)


def _same(usual: Any, value: Any) -> bool:
    return usual is not None and type(usual) is type(value) and usual == value


def _check(version: int, body: str) -> str:
    return _letters(zlib.crc32(f"{version}.{body}".encode()).to_bytes(4, "big"))


def _letters(raw: bytes) -> str:
    return base64.urlsafe_b64encode(raw).decode().rstrip("=")


def _bad(action: str) -> BadReading:
    return BadReading("link", "", "", action)
