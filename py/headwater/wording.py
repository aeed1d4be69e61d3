"""What to say: codes and figures become sentences, here and nowhere else."""

import math
import re
from collections.abc import Iterable, Mapping
from typing import Any

from headwater import fields, slip
from headwater import units as unit_table
from headwater.sources import SOURCES

Units = Mapping[str, str]
Facts = Mapping[str, Any]

STATES = {"go": "GO", "caution": "CAUTION", "no-go": "NO-GO"}
NOT_CHECKED = "Not checked: the run, steering, engine, crew."
LAUNCH_NOT_CHECKED = "Launch not checked. " + NOT_CHECKED
LETS_GO = f"Lets go? To idle, count two, feed in again {slip.LETS_GO_EASE:.0f} rpm lower."
CAUTIONS_ALWAYS = (
    "Life jackets on, kill-switch lanyard clipped.",
    "Scout the run first.",
    "Bucket up and helm straight before power.",
    "After backing, wait for the wash to clear.",
    "Pump stopped means no steering.",
    "Beached or on gravel: engine off, pole to knee-deep water.",
    "Grate not clean: engine off, clear it.",
    "Local rules, licences and your own eyes come first.",
)
GROUND = {
    "done_before": "Done before: a note that held asked as much.",
    "new": "New ground: no note that held asked as much.",
    "over": "Over: past what this pump does here.",
    "unknown": "Unknown: no note of this pump as it is now.",
}


def units_for(readings: Any, units: str | Units | None) -> dict[str, str]:
    """Display unit of each quantity: what was asked for, else what was typed, else what goes with it."""
    typed = dict(readings.units)
    system = units if isinstance(units, str) else "us" if _typed_us(typed) else "metric"
    chosen = dict(unit_table.SYSTEMS.get(system, unit_table.SYSTEMS["metric"]))
    if units is None:
        chosen.update(typed)
    elif not isinstance(units, str):
        chosen.update(units)
    return chosen


def _typed_us(typed: Units) -> bool:
    return any(symbol in ("ft", "in", "F", "mph", "inHg", "psi") for symbol in typed.values())


class _Say:
    """Figures as the person reads them."""

    def __init__(self, units: Units) -> None:
        self.units = units

    def show(self, value: float, quantity: str, rounded: str | None = None) -> str:
        return unit_table.show(value, quantity, self.units[quantity], rounded)

    def number(self, value: float, quantity: str, rounded: str | None = None) -> str:
        return unit_table.number(value, quantity, self.units[quantity], rounded)

    def rpm(self, value: float, rounded: str | None = None) -> str:
        return self.show(value, "rotation", rounded)

    def holds(self, value: float) -> str:
        """An rpm to keep to, rounded down so that what is read is still a go."""
        return self.rpm(value, "down")

    def from_speed(self, value: float) -> str:
        """A boat speed to wait for, rounded up."""
        return self.show(value, "speed", "up")

    def span(self, low: float, high: float, quantity: str) -> str:
        return f"{self.number(low, quantity)} to {self.number(high, quantity)}"


# The headline


def headline(verdict: str, code: str, facts: Facts, units: Units) -> dict[str, Any]:
    """State and instruction in one line, with the figures it rests on."""
    say = _Say(units)
    text = f"{STATES[verdict]} · {_instruction(code, facts, say)}"
    kept = ("plan_rpm", "holding_rpm", "standing_rpm", "let_go_rpm", "plan_speed", "full_speed")
    return {"code": code, "text": text, "values": {key: facts[key] for key in kept}}


def errors_headline(errors: list[dict[str, Any]]) -> dict[str, Any]:
    """In place of a verdict where readings are missing or wrong."""
    count = len(errors)
    text = "One reading needs another look" if count == 1 else f"{count} readings need another look"
    return {"code": "errors", "text": text, "values": {"count": count}}


def _instruction(code: str, facts: Facts, say: _Say) -> str:
    holding, standing, speed = facts["holding_rpm"], facts["standing_rpm"], facts["plan_speed"]
    where = "standing" if not facts["boat_speed"] else f"at {say.show(facts['boat_speed'], 'speed')}"
    if code == "holds":
        return "the pump holds"
    if code == "keep_to":
        text = f"{where}, keep it to {say.holds(holding)}"
        return text + (f"; {say.rpm(facts['plan_rpm'])} from {say.from_speed(speed)}" if speed else "")
    if code == "up_to":
        text = f"{where}: up to {say.holds(holding)}"
        full = facts["full_speed"]
        return text + (
            f". Wide open from {say.from_speed(full)}." if full else ". Not wide open at any speed."
        )
    if code == "teach":
        return "I don't know this pump yet"
    if code == "none_held":
        return "nothing has held yet"
    if code == "papers":
        return f"go by the tach: {say.holds(facts['plan_rpm'])}"
    if code == "over":
        if standing is None:
            return "past this pump"
        text = f"she holds {say.holds(standing)} standing"
        return text + (f"; {say.rpm(facts['plan_rpm'])} from {say.from_speed(speed)}" if speed else "")
    if code == "under_idle":
        return "she holds less than idle here"
    if code in _HINDERED:
        return _HINDERED[code]
    if code.startswith("launch_"):
        return _launch_instruction(code, facts, say)
    return "no head left at the pump"


_HINDERED = {
    "grate": "engine off, clear the grate",
    "air": "too much air in this water",
    "standing_waves": "standing waves in the run",
    "white_water": "white water at the intake",
    "gas_bound": "too much air in this water",
    "launch_turn": "no room to turn",
}
_ROW_WORDS = {"middle": "in the middle", "front": "up front"}
_WAY_WORDS = {"up": "up, against the current", "down": "down, with the current"}


def _launch_instruction(code: str, facts: Facts, say: _Say) -> str:
    """What to do on a launch: on a go how, else what would make it one, else what is in the way."""
    launched = facts["launch"]
    way = launched[launched["better"]]
    if code == "launch_go":
        room = say.show(way["distance_to_plane"]["value"], "distance", "up")
        return f"{_which_way(facts)}feed it in over {say.show(way['feed_in'], 'time')}, on plane in {room}"
    problem = {
        "launch_over": "the pump lets go on this launch",
        "launch_heavy": "too heavy for this water",
        "launch_room": "not enough room",
    }.get(code)
    remedies = launched.get("remedies", [])
    best = next((row for row in remedies if row["verdict"] == "go"), None)
    if problem:
        best = best or next((row for row in remedies if row["verdict"] == "caution"), None)
        return f"{problem}; {remedy_words(best, say)}" if best else problem
    if best:
        return _which_way(facts) + remedy_words(best, say)
    return _launch_trouble(facts["why"], facts, way, say)


def _which_way(facts: Facts) -> str:
    """The better way by name, where it was left open and it matters."""
    launched = facts["launch"]
    if facts["direction"] or launched["up"]["ground_speed"] == launched["down"]["ground_speed"]:
        return ""
    return f"launch {launched['better']}, "


def _launch_trouble(why: list[str], facts: Facts, way: Mapping[str, Any], say: _Say) -> str:
    for code in why:
        if code in _HINDERED:
            return _HINDERED[code]
    if "unknown" in why:
        return "I don't know this pump yet"
    if "may_not_plane" in why:
        return "she may not plane"
    if "room_tight" in why:
        return "the room is tight"
    if "shallow" in why:
        return "shallow water, room not known"
    if facts["standing_rpm"] is not None:
        return "close to what the pump holds"
    return "nothing has held yet"


def remedy_words(row: Mapping[str, Any], say: _Say) -> str:
    """A remedy as an instruction."""
    code = row["code"]
    if code == "feed_in":
        return f"feed it in over {say.show(row['feed_in'], 'time')}"
    if code == "direction":
        return f"launch {_WAY_WORDS[row['direction']]}"
    if code in ("less_rpm", "more_rpm"):
        return f"run {say.holds(row['rpm'])}, fed in over {say.show(row['feed_in'], 'time')}"
    if code == "cleaner":
        words = {"grate": "engine off, clear the grate", "water": "find clear water"}
        return ", then ".join(words[name] for name in row["what"])
    if code == "forward":
        return f"seat people {_ROW_WORDS[row['rows']]}"
    return f"leave {say.show(row['less'], 'mass', 'up')} ashore"


# Reasons and cautions


def reasons(codes: Iterable[str], facts: Facts, units: Units) -> list[dict[str, Any]]:
    """What leads the answer, what decided it, and what would teach most."""
    say = _Say(units)
    out = [_lead(facts, say)]
    out += [{"code": code, "text": _reason(code, facts, say), "values": {}} for code in codes]
    if facts["teach"]:
        teach = facts["teach"]
        out.append({"code": teach["code"], "text": _teach(teach, say), "values": {"rpm": teach.get("rpm")}})
    return out


def _at(label: str, fallback: str) -> str:
    return f"at {label}" if label else fallback


def _lead(facts: Facts, say: _Say) -> dict[str, Any]:
    note = facts["note"]
    if not note:
        share = facts["holding_rpm_share"]
        fewer = round((1 - share) * 100)
        if fewer >= 1:
            text = f"Standing here any pump holds {fewer} % fewer rpm than at sea level, whatever that is."
        elif fewer <= -1:
            text = f"Standing here any pump holds {-fewer} % more rpm than at sea level, whatever that is."
        else:
            text = "Standing here any pump holds as many rpm as at sea level."
        values = {"holding_rpm_share": share, "holding_power_share": facts["holding_power_share"]}
        return {"code": "share", "text": text, "values": values}
    there = say.number(note["rpm_there"], "rotation")
    here = say.number(note["rpm_here"], "rotation", "down" if note["outcome"] == "held" else None)
    place = _at(note["label"], "there")
    tail = f" at {say.show(facts['boat_speed'], 'speed')}" if facts["boat_speed"] else ""
    if note["outcome"] == "held":
        text = f"Your {there} {place} is {here} here{tail}."
    elif note["outcome"] == "flared":
        text = f"Her revs ran up at {there} {place}: that is {here} here{tail}."
    else:
        text = f"She let go at {there} {place}: that is {here} here{tail}."
    return {"code": "equivalent", "text": text, "values": dict(note)}


def _reason(code: str, facts: Facts, say: _Say) -> str:
    if code == "disagree":
        held, gone = facts["disagree"]
        return (
            f"Notes disagree: {_note(held, say)} held, {_note(gone, say)} let go, and the first asked more. "
            "Air, weed on the grate or a misread tach are the likely causes."
        )
    if code == "chance":
        return "What held lies close under what let go. Hold it once more, or stay lower."
    return {
        "done_before": "She has done this: the plan asks no more of the pump than a note that held.",
        "reserve": "New ground, but known from both sides and with its reserve.",
        "past_proven": "The plan asks more of the pump than any note that held.",
        "no_reserve": "Too near the limit you fixed for this pump.",
        "let_go_here": "She has let go at no more than this.",
        "past_limit": "Past the pump's limit, even on its kindest reading.",
        "boils_ahead": "The water would boil ahead of the impeller.",
        "no_head": "The pump has no head left here: the air is thin, the water warm or the shaft high.",
        "papers": "Power and rpm are out of papers. Read the tach wide open, then plan in rpm.",
        "unknown": "No note of this pump as it is now.",
        "none_held": "No note says that she held so much.",
        "white_water": "White water at the intake: the pump fills with air.",
        "gas_bound": "Air in the water swells ahead of the impeller, to where it binds the pump.",
        "grate": "The grate is not clean. Engine off, clear it.",
        "air": "Air in the water swells ahead of the impeller, to where it runs rough.",
        "standing_waves": "Standing waves or a drop lift the stern out of the water.",
        "shallow": "Under a metre of water the drag is not known. One launch timed there would tell.",
        "never_planes": "On the middle estimate she does not get over the hump with this load.",
        "over_room": "On the middle estimate she needs more than the whole room.",
        "no_room_to_turn": "The room is less than she needs to turn away.",
        "may_not_plane": "The hump is close: with a little more drag or less push she stays behind it.",
        "room_tight": "The room is close: on the far side of the doubt she is not up in time.",
        "both_tight": "Pump and room are each close; together they leave too much to chance.",
    }[code]


def _note(named: Mapping[str, Any], say: _Say) -> str:
    text = say.rpm(named["rpm"])
    return f"{text} {_at(named['label'], '')}".strip()


def _teach(teach: Mapping[str, Any], say: _Say) -> str:
    code = teach["code"]
    if code == "teach_first":
        return (
            "First job, standing, deep clean water, clean grate: roll up slowly until the revs run up "
            "or she holds wide open. Note both rpm."
        )
    rpm = say.holds(teach["rpm"])
    return {
        "teach_lower": f"Would teach most: hold {rpm} standing and note it.",
        "teach_upper": f"Would teach most: standing, roll up slowly past {rpm} until the revs run up.",
        "teach_again": f"Would teach most: standing, clean water, roll up to {rpm} and note what she does.",
        "teach_repeat": f"Would teach most: hold {rpm} once more and note it.",
        "teach_between": f"Would teach most: standing, roll up slowly to {rpm} and note what she does.",
    }[code]


def cautions(codes: Iterable[str], facts: Facts, units: Units) -> list[dict[str, Any]]:
    """One line each, only where it helps."""
    say = _Say(units)
    return [{"code": code, "text": _caution(code, facts, say)} for code in codes]


def _caution(code: str, facts: Facts, say: _Say) -> str:
    if code == "over_wide_open":
        return f"The plan is past wide open: she turns {say.rpm(facts['wide_open_rpm'])} here."
    if code == "notes_disagree":
        held, gone = facts["disagree"]
        return f"Notes disagree: {_note(held, say)} held against {_note(gone, say)} let go."
    if code == "note_needs_speed":
        which = ", ".join(_note(named, say) for named in facts["speedless"])
        return f"Standing or running? A note without boat speed proves nothing: {which}."
    if code == "shallow_drag":
        near = say.show(facts["critical_speed"], "speed")
        return (
            f"Under a metre of water drag is higher, most near {near}, where her own waves keep up with her."
        )
    if code == "measurement_off":
        which = ", ".join(_note(named, say) for named in facts["off"])
        text = "A measurement is off: she has done what it rules out. Check nozzle, hub, wear ring and power"
        return f"{text}; see {which}." if which else f"{text}."
    return {
        "older_notes_only": "All notes are of an older pump set-up. They are hints and prove nothing now.",
        "older_notes": "Notes of an older pump set-up count as hints only.",
        "fixed_disagrees": "A note disagrees with the S you fixed. The fixed one is used.",
        "barometer_at_water": "The barometer must show the pressure at the water. Add the altitude to check.",
        "papers": "Rpm and power are out of papers: the spans are wider.",
        "hull_unknown": "For the launch, give beam and weight on the boat's page.",
        "load_unknown": "For the launch, say who and what is aboard.",
        "launch_off": "A launch you noted was quicker than any hull of this weight. It is left out: "
        "check its seconds and load, beam and weight.",
        "never_holds": "At this rpm no feed-in keeps the pump within what it is known to hold.",
        "gravel": "Shallow under the intake: standing at this power it lifts gravel. Move to deeper water.",
        "hull_extrapolated": "This hull lies outside the tests its drag is reckoned from.",
        "room_unknown": "Room not given: compare what she needs with what you have.",
        "engine_extrapolated": "Over 1,000 m the engine's power is reckoned past its standard. "
        "Note wide open up here once.",
    }[code]


_MOVER_WORDS = {
    "place.altitude": ("higher", "lower"),
    "place.station_pressure": ("more pressure", "less pressure"),
    "place.water_temperature": ("warmer water", "colder water"),
    "boat.shaft_depth": ("deeper shaft", "shallower shaft"),
    "plan.boat_speed": ("faster through the water", "slower through the water"),
}
_MOVER_QUANTITY = {
    "place.altitude": "altitude",
    "place.station_pressure": "pressure",
    "place.water_temperature": "temperature_step",
    "boat.shaft_depth": "length",
    "plan.boat_speed": "speed",
}


def mover(field: str, step: float, change: float, units: Units) -> str:
    """What one step in a reading does to the rpm that she holds."""
    say = _Say(units)
    quantity = _MOVER_QUANTITY[field]
    amount = say.show(abs(step), quantity)
    word = _MOVER_WORDS[field][0 if step > 0 else 1]
    return f"{amount} {word}: {say.rpm(abs(change))} {'more' if change > 0 else 'fewer'}"


# The sheet: all that a screen or the command line shows

_LINES = (
    ("holding", "holds", "Holds"),
    ("flare", "flare", "Revs run up"),
    ("let_go", "lets_go", "Lets go"),
)
_LEDGER = {
    "air": "Air over the water",
    "boiling": "less boiling",
    "depth": "plus depth over the blades",
    "ram": "plus ram of the moving boat",
    "intake": "less the intake",
    "demand": "less what the impeller asks",
    "margin": "leaves",
    "available": "leaves for the impeller",
}
# Title, symbol, formula, value, quantity it is shown in, source; and the formula with its figures.
_WORKING = (
    (
        "Air pressure at the water",
        "p_atm",
        "p0 (1 - 0.0065 H/288.15)^5.25588",
        "air_pressure",
        "pressure",
        "ussa1976",
    ),
    (
        "Boiling pressure of the water",
        "p_v",
        "saturation line, region 4",
        "vapor_pressure",
        "pressure",
        "if97",
    ),
    (
        "Boiling temperature under this air",
        "T_s",
        "saturation line, region 4",
        "boiling_temperature",
        "temperature",
        "if97",
    ),
    ("Density of the water", "rho", "rational polynomial in t", "water_density", "density", "kell1975"),
    ("Rpm planned", "N", "as typed", "planned_rpm", "rotation", "affinity"),
    ("Power absorbed", "P", "c N^3", "planned_power", "power", "affinity"),
    ("Jet speed", "V_j", "rho g Q H = eta_p eta_m P", "jet_speed", "speed", "terwisga1996"),
    ("Water through one unit", "Q", "A_n V_j", "flow_rate", "flow", "terwisga1996"),
    ("Speed ahead of the impeller", "V_1", "Q/A_1", "impeller_inlet_speed", "speed", "terwisga1996"),
    ("Thrust of the boat", "T", "(1 - t) rho Q (V_j - (1 - w) V_0)", "thrust", "force", "eslamdoost2018"),
    (
        "Head available",
        "NPSHA",
        "(p_atm - p_v)/(rho g) + z + (1 - zeta)((1 - w) V_0)^2/2g - K_b V_1^2/2g",
        "npsh_available",
        "head",
        "npsh",
        "{air} - {boiling} {depth} + {ram} - {intake} m",
    ),
    (
        "Suction specific speed asked",
        "S_req",
        "N sqrt(Q)/NPSHA^0.75",
        "suction_specific_speed_asked",
        "plain",
        "npsh",
        "{rpm} sqrt({flow_rate})/{npsh_available}^0.75",
    ),
    (
        "Suction specific speed of this pump",
        "S",
        "learned from the notes",
        "suction_specific_speed",
        "plain",
        "learned",
    ),
    (
        "Head required",
        "NPSHR",
        "(N sqrt(Q)/S)^(4/3)",
        "npsh_required",
        "head",
        "npsh",
        "({rpm} sqrt({flow_rate})/{suction_specific_speed})^(4/3)",
    ),
    ("Margin", "", "NPSHA - NPSHR", "margin", "head", "npsh", "{npsh_available} - {npsh_required} m"),
    ("Ratio", "", "NPSHA/NPSHR", "ratio", "plain", "npsh", "{npsh_available}/{npsh_required}"),
    (
        "Static pressure ahead of the impeller",
        "p_1",
        "rho g (NPSHA - V_1^2/2g) + p_v",
        "inlet_static_pressure",
        "pressure",
        "npsh",
        "{water_density} (9.80665 x {npsh_available} - {impeller_inlet_speed}^2/2) + {vapor_pressure} Pa",
    ),
)
_TICKS = (100.0, 250.0, 500.0, 1000.0, 2000.0)  # steps of the gauge board, rpm
_MOST_TICKS = 9


def sheet(answer: Mapping[str, Any], units: Units) -> dict[str, Any]:
    """An answer as strings: what the phone paints and the command line prints.

    :param units: display unit of each quantity, from :func:`units_for`
    """
    say = _Say(units)
    errors = [
        {"field": error["field"], "label": _label(error["field"]), "text": error_text(error)}
        for error in answer["errors"]
    ]
    common = {
        "state": answer["verdict"],
        "headline": answer["headline"]["text"],
        "errors": errors,
        "understood": answer["understood"],
        "others": {key: other for key, text in answer["understood"].items() if (other := _other(key, text))},
        "not_checked": NOT_CHECKED if answer["launch"] else LAUNCH_NOT_CHECKED,
        "lets_go": LETS_GO,
        "waits": False,
    }
    if errors:
        return common
    values = answer["values"]
    texts = [{"code": row["code"], "text": row["text"]} for row in answer["reasons"]]
    teach = next((row["text"] for row in texts if row["code"].startswith("teach")), None)
    return {
        **common,
        "lead": texts[0]["text"],
        "lines": _lines(values, say, bool(answer["launch"])),
        "ground": GROUND[answer["ground"]],
        "reasons": [row for row in texts[1:] if not row["code"].startswith("teach")],
        "teach": teach,
        "cautions": answer["cautions"],
        "launch": launch_sheet(answer["launch"], say),
        "gauge": _gauge(values, say),
        "ledger": [_ledger_row(row, say) for row in answer["ledger"]],
        "movers": [
            {"field": row["field"], "text": row["text"]}
            for row in answer["movers"]
            if abs(row["holding_rpm_change"]) >= 1  # less is no news
        ],
        "equivalents": [_equivalent(row, say) for row in answer["equivalents"]],
        "working": _working(answer, say),
        "curve": _curve(answer["curve"], say),
    }


def waiting() -> dict[str, Any]:
    """What stands in a sheet in place of the verdict while the launch is worked out."""
    return {"state": None, "headline": SCREEN["launch_working"], "waits": True}


def launch_sheet(launched: Mapping[str, Any] | None, say: _Say) -> dict[str, Any] | None:
    """The launch as strings; none where none was asked about."""
    if not launched:
        return None
    way = launched[launched["better"]]
    same = launched["up"]["ground_speed"] == launched["down"]["ground_speed"]
    named = "" if same else launched["better"]
    return {
        "way": _WAY_WORDS[named] if named else "",
        "lines": _launch_lines(way, say),
        "schedule": {
            "head": [f"GPS, {say.units['speed']}", "Rpm", f"After, {say.units['time']}"],
            "rows": [_schedule_row(row, say) for row in way["schedule"]],
        },
        "abort": _abort(way, say),
        "heaviest": _heaviest(way, say),
        "remedies": [_remedy(row, say) for row in launched.get("remedies", [])],
        "ways": [] if same else [_way_row(name, launched[name], say) for name in ("up", "down")],
        "done": "remedies" in launched,
    }


def _launch_lines(way: Mapping[str, Any], say: _Say) -> list[dict[str, Any]]:
    rows = [
        {
            "key": "feed_in",
            "first": True,
            "label": "Feed it in over",
            "value": say.show(way["feed_in"], "time"),
            "span": _feed_span(way["feed_in_band"], say),
            "aside": f"to {say.holds(way['planned_rpm'])}",
        }
    ]
    distance = way["distance_to_plane"]
    rows.append({"key": "room", "first": True, "label": "On plane in", **_spanned(distance, "distance", say)})
    rows.append(
        {"key": "time", "first": False, "label": "Seconds", **_spanned(way["time_to_plane"], "time", say)}
    )
    if way["bow_high"] is not None:
        rows.append(_line("bow", "Bow high for", say.show(way["bow_high"], "time")))
    surplus = way["hump_surplus"]
    rows.append(_line("hump", "Push over the hump", f"{round(100 * surplus['value'])} %"))
    if way["room_for_plane"] is not None:
        left = max(way["room_for_plane"], 0.0)
        rows.append(_line("left", "Room for it, turn kept", say.show(left, "distance", "down")))
    return rows


def _feed_span(band: Mapping[str, Any], say: _Say) -> str:
    """Its span, where it has two sides."""
    return "" if band["high"] is None else say.span(band["low"], band["high"], "time")


def _line(key: str, label: str, value: str) -> dict[str, Any]:
    return {"key": key, "first": False, "label": label, "value": value, "span": "", "aside": ""}


def _spanned(value: Mapping[str, Any], quantity: str, say: _Say) -> dict[str, str]:
    """A figure with its span; without a far side she may not plane, without a figure she does not."""
    if value["value"] is None:
        return {"value": "does not plane", "span": "", "aside": ""}
    shown = say.show(value["value"], quantity, "up")
    if value["high"] is None:
        return {"value": shown, "span": "may not plane", "aside": ""}
    return {"value": shown, "span": say.span(value["low"], value["high"], quantity), "aside": ""}


def _schedule_row(row: Mapping[str, Any], say: _Say) -> list[str]:
    speed = say.number(row["ground_speed"], "speed")
    time = "then on" if row["time"] is None else say.number(row["time"], "time")
    return [speed, say.number(row["rpm"], "rotation", "down"), time]


def _abort(way: Mapping[str, Any], say: _Say) -> str:
    if "abort_mark" not in way or way["distance_to_plane"]["value"] is None or way["room_for_plane"] is None:
        return ""
    mark = way["abort_mark"]
    if mark is None:
        return "On plane by half the room, else chop."
    return f"Under {say.show(mark, 'speed', 'up')} by GPS at half the room: chop."


def _heaviest(way: Mapping[str, Any], say: _Say) -> str:
    if (
        "heaviest_load" not in way
        or way["room_for_plane"] is None
        or way["distance_to_plane"]["value"] is None
    ):
        return ""
    load = way["heaviest_load"]
    if load is None:
        return "Even empty she is not sure to be up in this room."
    return f"Heaviest load for this room: {say.show(load, 'mass', 'down')} of people, fuel and gear."


def _remedy(row: Mapping[str, Any], say: _Say) -> str:
    words = remedy_words(row, say)
    before, after = row["distance"]["before"], row["distance"]["after"]
    text = words[:1].upper() + words[1:]
    if after is not None:
        was = "not planing" if before is None else say.show(before, "distance", "up")
        text += f": {was} becomes {say.show(after, 'distance', 'up')}"
    return f"{text}. {STATES[row['verdict']]}."


def _way_row(name: str, way: Mapping[str, Any], say: _Say) -> list[str]:
    distance = _spanned(way["distance_to_plane"], "distance", say)
    room = f"{distance['value']} ({distance['span']})" if distance["span"] else distance["value"]
    return [name, STATES[way["verdict"]], room]


def _field_key(path: str) -> str:
    return re.sub(r"^notes\[\d+\]", "notes", path)


def _label(path: str) -> str:
    """A reading's name on screen; a note's carries which note."""
    field = fields.FIELD.get(_field_key(path))
    label = field.label if field else path
    note = re.match(r"notes\[(\d+)\]", path)
    return f"{SCREEN['note']} {int(note[1]) + 1}, {label}" if note else label


def _other(path: str, text: str) -> str:
    """A reading in the other common unit, for beneath it."""
    field = fields.FIELD[_field_key(path)]
    return fields.other_unit(field.key, text) if field.kind in unit_table.QUANTITIES else ""


def error_text(error: Mapping[str, Any]) -> str:
    """One bad reading in one line: what was given, what is allowed, what to do."""
    given = f"Given: {error['given']}. " if error["given"] else ""
    allowed = f"Allowed: {error['allowed']}. " if error["allowed"] else ""
    return f"{given}{allowed}{error['action']}"


def _lines(values: Mapping[str, Any], say: _Say, launched: bool) -> list[dict[str, Any]]:
    """What she holds and where she lets go; ``first`` marks what stands in the answer itself."""
    rows: list[dict[str, Any]] = []
    for name, key, label in _LINES:
        rpm, power = values[name + "_rpm"], values[name + "_power"]
        if rpm is None:
            continue
        if name == "flare" and rpm["mark"] == "P":
            label += ", typical"
        reach = " · past wide open" if rpm.get("capped") else ""
        value = say.holds(rpm["value"]) if name == "holding" else say.rpm(rpm["value"])
        rows.append(
            {
                "key": key,
                "first": name != "flare",
                "label": label,
                "value": value,
                "span": say.span(rpm["low"], rpm["high"], "rotation"),
                "aside": say.show(power["value"], "power") + reach,
            }
        )
    plan, power = values["planned_rpm"], values["planned_power"]
    rows.append(
        {
            "key": "plan",
            "first": False,
            "label": "Plan",
            "value": say.rpm(plan["value"]),
            "span": say.span(plan["low"], plan["high"], "rotation"),
            "aside": say.show(power["value"], "power"),
        }
    )
    full = values["full_speed"]
    if full and full["value"] > 0:
        rows.append(
            {
                "key": "wide_open",
                "first": not launched,  # feed-in and room take its place
                "label": "Wide open from",
                "value": say.from_speed(full["value"]),
                "span": "",
                "aside": "",
            }
        )
    return rows


def _gauge(values: Mapping[str, Any], say: _Say) -> dict[str, Any]:
    """The answer as heights on a gauge board, in shares of its height."""
    marks = []
    names = {"holding_rpm": "holds", "flare_rpm": "flare", "let_go_rpm": "lets_go", "planned_rpm": "plan"}
    drawn = {key: values[name] for name, key in names.items() if values[name]}
    top = 1.08 * max(row["value"] for row in drawn.values())
    step = next((step for step in _TICKS if top / step <= _MOST_TICKS), _TICKS[-1])
    top = math.ceil(top / step) * step
    for key, row in drawn.items():
        low, high = (
            None if row[side] is None else min(max(row[side] / top, 0.0), 1.0) for side in ("low", "high")
        )
        text = say.number(row["value"], "rotation", "down" if key == "holds" else None)
        marks.append({"key": key, "at": row["value"] / top, "low": low, "high": high, "text": text})
    ticks = [
        {"at": k * step / top, "text": say.number(k * step, "rotation"), "major": True}
        for k in range(round(top / step) + 1)
    ]
    spoken = {"holds": "holds", "flare": "revs run up", "lets_go": "lets go", "plan": "plan"}
    text = ", ".join(f"{spoken[mark['key']]} {mark['text']} {say.units['rotation']}" for mark in marks)
    return {
        "unit": say.units["rotation"],
        "ticks": ticks,
        "marks": marks,
        "text": text[:1].upper() + text[1:] + ".",
    }


def _ledger_row(row: Mapping[str, Any], say: _Say) -> dict[str, str]:
    total = row["term"] in ("margin", "available")
    sign = "=" if total else "-" if row["value"] < 0 else "+"
    value = row["value"] if total else abs(row["value"])
    term = (
        "less the shaft over the water"
        if row["term"] == "depth" and row["value"] < 0
        else _LEDGER[row["term"]]
    )
    return {"key": row["term"], "term": term, "value": say.show(value, "head"), "sign": sign}


def _equivalent(row: Mapping[str, Any], say: _Say) -> dict[str, Any]:
    did = {
        "held": "Held",
        "flared": "Revs ran up at",
        "let_go": "Let go at",
        "planed": "Planed at",
        "would_not_plane": "Would not plane at",
    }[row["outcome"]]
    if row["outcome"] == "would_not_plane":
        text = f"{did} {say.number(row['rpm_there'], 'rotation')}: it tells of the hull, not of the pump."
        return {"note": row["note"], "text": text}
    if row["rpm_here"] is None:
        return {
            "note": row["note"],
            "text": f"{did} {say.number(row['rpm_there'], 'rotation')}: no telling here.",
        }
    asked = "its hardest moment asked as much as " if row["outcome"] == "planed" else ""
    here = f"{asked}{say.rpm(row['rpm_here'])} here, {say.span(row['low'], row['high'], 'rotation')}"
    return {"note": row["note"], "text": f"{did} {say.number(row['rpm_there'], 'rotation')}: {here}."}


def _working(answer: Mapping[str, Any], say: _Say) -> list[dict[str, str]]:
    """Each relation with its formula, figures, source and mark."""
    values = answer["values"]
    figures = {
        name: f"{row['value']:.5g}" for name, row in values.items() if row and row["value"] is not None
    }
    head = {row["term"]: row["value"] for row in answer["ledger"]}
    figures |= {term: f"{abs(value):.3f}" for term, value in head.items()}
    figures["depth"] = f"{'-' if head['depth'] < 0 else '+'} {abs(head['depth']):.3f}"
    asked = values["suction_specific_speed_asked"]
    if asked:  # of the impeller, behind the gear
        available, flow = values["npsh_available"]["value"], values["flow_rate"]["value"]
        figures["rpm"] = f"{asked['value'] * available**0.75 / flow**0.5:.5g}"
    rows = []
    for title, symbol, formula, name, quantity, source, *inserted in _WORKING:
        value = values[name]
        if value is None:
            continue
        result, span = _working_figures(value, quantity, say)
        template = inserted[0] if inserted else ""
        known = all(key in figures for key in re.findall(r"{(\w+)}", template))
        rows.append(
            {
                "title": title,
                "symbol": symbol,
                "formula": formula,
                "numbers": template.format(**figures) if known else "",
                "result": result,
                "span": span,
                "source": SOURCES[source].text,
                "mark": value["mark"],
            }
        )
    return rows


def _working_figures(value: Mapping[str, Any], quantity: str, say: _Say) -> tuple[str, str]:
    """A value and its span, in words."""

    def show(number: float) -> str:
        return f"{number:.3g}" if quantity == "plain" else say.show(number, quantity)

    low, middle, high = (value[part] for part in ("low", "value", "high"))
    span = f"{show(low)} to {show(high)}" if low is not None and high is not None else ""
    if middle is not None:
        return show(middle), span
    return f"at least {show(low)}" if low is not None else f"at most {show(high)}", span


def _curve(curve: Mapping[str, Any], say: _Say) -> dict[str, Any]:
    drawn = [(name, label) for name, _, label in _LINES if curve[name + "_rpm"]]
    rows = []
    for i in range(0, len(curve["boat_speed"]), 5):
        row = [say.show(curve["boat_speed"][i], "speed")]
        for name, _ in drawn:
            line = curve[name + "_rpm"]
            value = say.holds(line["value"][i]) if name == "holding" else say.rpm(line["value"][i])
            row.append(f"{value} ({say.span(line['low'][i], line['high'][i], 'rotation')})")
        rows.append(row)
    return {"head": ["Boat speed", *(label for _, label in drawn)], "rows": rows}


# Slip


def slip_text(row: Mapping[str, Any], units: Units) -> str:
    """What an rpm seen says of the pump."""
    say = _Say(units)
    seen, expected = say.number(row["rpm"], "rotation"), say.rpm(row["expected"]["value"])
    span = say.span(row["expected"]["low"], row["expected"]["high"], "rotation")
    ground = "your own log" if row["by"] == "pairs" else "her engine here"
    text = f"{seen} against {expected} ({span}) by {ground}: "
    if row["code"] == "within_reading":
        return text + "within the reading."
    if row["under"]:
        return text + "fewer than she should turn. Engine weak, or something on the shaft?"
    share = round(100 * row["absorbed"])
    word = "she slips" if row["code"] == "slipping" else "more than the reading explains"
    return text + f"{word}. The pump takes {share} % of what it should."


SLIP_CAUSES = {
    "air": "It changes with place or speed: air or vapour. Look at grate, seals and the water.",
    "wear": "It is the same everywhere: ring or impeller is worn.",
    "unknown": "Read it again elsewhere or at another speed: if it changes it is air, if not it is wear.",
}


# Every fixed sentence of the app, compiled into the page at build

SCREEN = {
    "title": "Headwater",
    "tagline": "Does the pump hold water here?",
    "putin": "Put-in",
    "boat": "Boat",
    "notes": "What has she done?",
    "notes_hint": "One for each time you know the rpm: held, revs ran up, let go, planed or would not.",
    "note": "Note",
    "first": "First",
    "first_hint": "Four readings and the check can answer.",
    "fine": "Finer points",
    "fine_hint": "Filled in already, marked typical. Change what you have measured.",
    "place_more": "Barometer, name, reserve",
    "how_hard": "How hard",
    "how_hard_hint": "Empty: the most she takes.",
    "wide_open": "wide open",
    "unit_of": "Unit of",
    "units": "Units",
    "us": "ft, °F, hp, mph",
    "metric": "m, °C, kW, km/h",
    "add_note": "Add a note",
    "remove_note": "Remove this note",
    "typical": "Typical",
    "how": "How to get this",
    "demo_open": "Show a demo boat",
    "demo_on": "Demo, all invented.",
    "demo_close": "Back to my boat",
    "share": "Make a link",
    "shared": "Link copied.",
    "shared_text": "Pump check for",
    "share_failed": "The link could not be copied. It stands in the address line now.",
    "sent": "Sent, not yet checked",
    "sent_checked": "Sent to you. Checked on this phone now, read-only.",
    "make_mine": "Make it mine",
    "make_mine_warns": "Your own boat and notes will be replaced. Go on?",
    "sent_close": "Close",
    "launch": "The launch",
    "launch_more": "Load, direction, water",
    "launch_working": "Working out the launch",
    "not_said": "–",
    "hull": "Hull and weight, for the launch",
    "hull_hint": "Beam and weight, and the launch is checked too. The rest is typical until measured.",
    "note_launch": "Launch, load, grate and water then",
    "slip": "Does she slip?",
    "slip_hint": "Rpm you see wide open, or at a share of the power, here. A second one elsewhere tells why.",
    "slip_rpm": "Rpm seen",
    "slip_share": "Share of power, %",
    "slip_speed": "Boat speed",
    "slip_again": "And once more",
    "schedule": "Rpm against speed",
    "remedies": "What would help",
    "remedies_wait": "Working out what would help.",
    "ways": "Both ways",
    "lines": "Plan and revs",
    "reasons": "Why",
    "equivalents": "Your notes here",
    "ledger": "Head at the pump",
    "movers": "What would change this",
    "curve": "At each boat speed",
    "working": "The working",
    "working_source": "Source",
    "working_mark": "mark",
    "cautions": "Cautions",
    "between": "between",
    "gauge": "Gauge of rpm",
    "starting": "Starting. You can type already.",
    "working_on": "Working it out.",
    "welcome": "Set up your boat, then read the put-in.",
    "welcome_go": "Set up my boat",
    "last": "Last answer",
    "last_stale": "Not fresh.",
    "offline_not": "Getting ready for offline use",
    "offline_ready": "Ready offline",
    "offline_broken": "Not ready offline: files are missing.",
    "offline_install": "Not ready offline: the download did not arrive whole. It is tried again next time.",
    "offline_quota": "Not ready offline: this phone has no room left. Free some, then fetch again.",
    "offline_none": "This browser cannot keep the app offline.",
    "repair": "Fetch them again",
    "update": "A newer version is here.",
    "update_take": "Use it now",
    "update_later": "Later",
    "fatal": "The check stopped and is starting again. What you typed is kept.",
    "fatal_end": "The check does not start on this phone. What you typed is kept.",
    "fatal_again": "Try again",
    "not_saved": "This browser does not let the app keep what you type.",
    "night": "Night",
    "day": "Day",
    "guard": "Headwater did not start. Reload the page, or use a newer browser.",
    "noscript": "Headwater needs JavaScript to work the check out.",
    "skip": "To the answer",
    "version": "Version",
    "go_to_reading": "Go to this reading",
}
