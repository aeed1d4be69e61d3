"""A case as the fragment of a link, and back: versioned, short, with a check on its end.

``1.`` then base64url of raw deflate over compact JSON, then six letters of a SHA-256 check. Keys are shortened by
version 1's own table, and what equals version 1's frozen defaults is left out.
"""

import base64
import binascii
import hashlib
import json
import zlib
from collections.abc import Mapping
from typing import Any

from headwater.errors import BadReading

VERSION = "1"
LONGEST = 8000  # characters of a fragment
_MOST_BYTES = 64_000  # of a case once unpacked
_CHECK = 6  # characters
_PARTS = {"b": "boat", "p": "place", "n": "plan", "s": "notes"}
# Frozen: a link made today must open for ever. New keys are added at the end, none is changed.
_SHORT = {
    "l": "label", "d": "date", "j": "jets", "jr": "jets_running", "n": "nozzle_diameter", "i": "impeller_diameter",
    "h": "hub_diameter", "sd": "shaft_depth", "w": "wide_open_rpm", "e": "engine_power", "rf": "rpm_from",
    "g": "gear_ratio", "wf": "wake_fraction", "rl": "ram_loss", "il": "intake_loss", "nl": "nozzle_loss",
    "pe": "pump_efficiency", "de": "driveline_efficiency", "ss": "suction_specific_speed", "a": "altitude",
    "t": "water_temperature", "sp": "station_pressure", "q": "altimeter_setting", "sc": "station_pressure_confirmed",
    "af": "altitude_from", "p": "power", "r": "rpm", "th": "throttle", "v": "boat_speed", "re": "reserve",
    "o": "outcome", "su": "set_up",
}  # fmt: skip
_LONG = {name: short for short, name in _SHORT.items()}
_DEFAULTS: dict[str, dict[str, Any]] = {
    "boat": {"jets": 1, "rpm_from": "seen", "gear_ratio": 1},
    "place": {"altitude_from": "map"},
    "plan": {},
    "notes": {},
}
_START = b'{"b":{"n":" mm","i":" mm","h":" mm","w":"rpm","e":" hp","l":""},"p":{"l":"","a":" ft m","t":" F C"},"s":[{"o":"held","o":"let_go","r":"'


def encode(case: Any) -> str:
    """The fragment of a link that carries a case, without the hash sign.

    :param case: readings as typed
    Raises BadReading where the case is none, or too long for a link.
    """
    if not isinstance(case, Mapping) or not set(case) <= set(_PARTS.values()):
        raise _bad("Only a case can be made into a link.")
    packed: dict[str, Any] = {}
    for short, part in _PARTS.items():
        content = case.get(part)
        if content:
            many = isinstance(content, list)
            packed[short] = [_pack(part, one) for one in content] if many else _pack(part, content)
    try:
        text = json.dumps(packed, allow_nan=False, ensure_ascii=False, separators=(",", ":")).encode()
    except (ValueError, TypeError, RecursionError):
        raise _bad("A reading in this case cannot go into a link.") from None
    deflate = zlib.compressobj(9, zlib.DEFLATED, -15, zdict=_START)
    body = base64.urlsafe_b64encode(deflate.compress(text) + deflate.flush()).decode().rstrip("=")
    fragment = f"{VERSION}.{body}{_check(body)}"
    if len(text) > _MOST_BYTES or len(fragment) > LONGEST:
        raise _bad("This case is too long for a link. Send fewer notes.")
    return fragment


def decode(fragment: Any) -> dict[str, Any]:
    """The case that a link's fragment carries, as it was typed.

    :param fragment: with or without the hash sign
    Raises BadReading, in plain words, for every link that is cut, damaged, foreign or too new.
    """
    if not isinstance(fragment, str):
        raise _bad("This is not a link of Headwater.")
    version, dot, rest = fragment.strip().removeprefix("#").partition(".")
    if not dot or not (version.isascii() and version.isdigit() and len(version) <= 4):
        raise _bad("This is not a link of Headwater.")
    if version != VERSION:
        raise _bad("This link comes from a newer version. Update the app, then open it again.")
    body, check = rest[:-_CHECK], rest[-_CHECK:]
    if len(rest) > LONGEST or not body or not rest.isascii() or _check(body) != check:
        raise _bad("This link was cut or damaged on its way. Ask for it again.")
    try:
        raw = base64.b64decode(body + "=" * (-len(body) % 4), altchars=b"-_", validate=True)
        inflate = zlib.decompressobj(-15, zdict=_START)
        text = inflate.decompress(raw, _MOST_BYTES)
        if inflate.unconsumed_tail or not inflate.eof:
            raise _bad("This link holds too much. Ask for a shorter one.")
        packed = json.loads(text.decode(), parse_constant=_no_constant)
    except (binascii.Error, zlib.error, ValueError, RecursionError) as error:
        if isinstance(error, BadReading):
            raise
        raise _bad("This link is damaged. Ask for it again.") from None
    if not isinstance(packed, dict) or not set(packed) <= set(_PARTS):
        raise _bad("This link holds something else than a check.")
    case: dict[str, Any] = {}
    for short, content in packed.items():
        part = _PARTS[short]
        case[part] = [_unpack(part, one) for one in content] if part == "notes" and isinstance(content, list) else _unpack(part, content)
    return case


def _pack(part: str, content: Any) -> Any:
    if not isinstance(content, Mapping):
        raise _bad("Only a case can be made into a link.")
    usual = _DEFAULTS[part]
    return {
        _LONG.get(name, f"_{name}"): value
        for name, value in content.items()
        if not (name in usual and usual[name] == value and type(usual[name]) is type(value))
    }


def _unpack(part: str, content: Any) -> dict[str, Any]:
    if not isinstance(content, dict):
        raise _bad("This link holds something else than a check.")
    out = {}
    for short, value in content.items():
        name = short[1:] if short.startswith("_") else _SHORT.get(short)
        if name is None or isinstance(value, (dict, list)):
            raise _bad("This link holds something else than a check.")
        out[name] = value
    return out


def _check(body: str) -> str:
    digest = hashlib.sha256(f"{VERSION}.{body}".encode()).digest()
    return base64.urlsafe_b64encode(digest)[:_CHECK].decode()


def _no_constant(name: str) -> None:
    raise ValueError(name)


def _bad(action: str) -> BadReading:
    return BadReading("link", "", "", action)
