"""From a case's readings to what physics takes: central inputs, their spans, the notes, the launches."""

import math
from collections.abc import Iterable, Mapping
from typing import Any

from headwater import air, engine, fields, hull, launch, suction, water
from headwater.doubt import PAPERS_POWER, PAPERS_RPM, TACH_SCALE, THRUST_DEDUCTION, Inputs, Seen
from headwater.fields import FIELD
from headwater.jet import GRAVITY
from headwater.launch import Outing, Shape
from headwater.tried import RPM_SCATTER, SIGMAS, WEIGHT, Launched, Tries

LAUNCHES = ("planed", "would_not_plane")  # outcomes
BLOCKED = {"clean": 0.0, "weed": 0.25, "stick": 0.5}  # share of the grate [D]
# Free gas at the surface, low, middle and high [P].
GAS = {
    "clear": (0.0, 0.0, 0.0),
    "fizzy": (0.001, 0.0022, 0.005),
    "aerated": (0.005, 0.0122, 0.03),
    "white": (0.03, 0.05, 0.10),
}
_FACTORS_APART = 0.02  # in ln torque factor, that two wide-open rpm tell of the engine
_GUESSED_BALANCE = 0.03  # of the length, 95 % half-width of a balance point that was not measured [P]
_COEFFICIENTS = (
    "boat.wake_fraction",
    "boat.ram_loss",
    "boat.intake_loss",
    "boat.nozzle_loss",
    "boat.pump_efficiency",
    "boat.driveline_efficiency",
)


def air_pressure(place: Mapping[str, Any]) -> float:
    """Pressure at the water from a place's or a note's readings [Pa]."""
    if "station_pressure" in place:
        return float(place["station_pressure"])
    if "altimeter_setting" in place:
        return float(air.station_pressure(place["altimeter_setting"], place["altitude"]))
    return float(air.standard_pressure(place["altitude"]))


def pressure_doubt(place: Mapping[str, Any]) -> float:
    """95 % half-width of the pressure at the water [Pa]: the barometer's, the altitude's, or both."""
    barometer = FIELD["place.station_pressure"].tolerance
    if "station_pressure" in place:
        return float(barometer)
    altitude = place["altitude"]
    reach = FIELD["place.altitude"].tolerance
    if place.get("altitude_from") == "phone":
        reach = fields.PHONE_ALTITUDE
    by_altitude = (air.standard_pressure(altitude - reach) - air.standard_pressure(altitude + reach)) / 2
    return math.hypot(by_altitude, barometer) if "altimeter_setting" in place else float(by_altitude)


def inputs_of(values: Mapping[str, Any]) -> Inputs:
    """Central inputs by key, SI, from the readings of a case."""
    boat, place = values["boat"], values["place"]
    inputs = {key: float(boat[key.partition(".")[2]]) for key in _COEFFICIENTS}
    for key in (
        "jets",
        "nozzle_diameter",
        "impeller_diameter",
        "shaft_depth",
        "wide_open_rpm",
        "engine_power",
        "gear_ratio",
    ):
        inputs["boat." + key] = float(boat[key])
    inputs["hub_share"] = boat["hub_diameter"] / boat["impeller_diameter"]
    inputs["place.air_pressure"] = pressure = air_pressure(place)
    inputs["place.water_temperature"] = float(place["water_temperature"])
    inputs["pressure_error"] = 0.0
    inputs["tach"] = 1.0
    inputs["grate_loss"] = suction.grate_loss(BLOCKED[values["plan"]["grate"]])
    inputs["gas"], inputs["expansion"] = GAS[values["plan"]["water"]][1], 1.0
    warm = place.get("air_temperature", air.temperature_at_pressure(pressure))
    here = engine_factor(boat, pressure, warm, place["humidity"])
    there = engine_factor_at(boat, boat["wide_open_altitude"])
    inputs["engine_here"], inputs["engine_there"] = here, there
    inputs["engine_exponent"] = engine_exponent(boat, there)[1]
    if "chine_beam" in boat and "dry_mass" in boat:
        for key in ("dry_mass", "chine_beam", "centre_of_gravity"):
            inputs["boat." + key] = float(boat[key])
        inputs["thrust_deduction"] = THRUST_DEDUCTION[1]
        inputs["intake_length"] = launch.INTAKE_LENGTH[1]
    return inputs


def engine_factor(boat: Mapping[str, Any], pressure: float, temperature: float, humidity: float) -> float:
    """Torque here over that in dry standard air at sea level."""
    critical = boat.get("critical_altitude", 0.0)
    return float(engine.torque_factor(boat["aspiration"], pressure, temperature, humidity, critical))


def engine_factor_at(boat: Mapping[str, Any], altitude: float) -> float:
    """The same in dry standard air at an altitude."""
    pressure = float(air.standard_pressure(altitude))
    return engine_factor(boat, pressure, air.temperature_at_pressure(pressure), 0.0)


def engine_exponent(boat: Mapping[str, Any], there: float) -> tuple[float, float, float]:
    """Exponent of power over torque factor, low, middle and high; from a wide-open rpm read up high if given.

    :param there: torque factor where the wide-open rpm was read
    """
    if "high_rpm" in boat and "high_altitude" in boat:
        high = engine_factor_at(boat, boat["high_altitude"])
        if abs(math.log(high / there)) > _FACTORS_APART:
            found = float(engine.exponent_seen(boat["wide_open_rpm"], boat["high_rpm"], there, high))
            reach = 3 * math.sqrt(2) * RPM_SCATTER / abs(math.log(high / there))
            return found - reach, found, found + reach
    return engine.EXPONENT


def wide_open_here(inputs: Inputs) -> float:
    """Engine rpm that she turns wide open here [1/min]."""
    there, here = inputs["engine_there"], inputs["engine_here"]
    return float(engine.wide_open_rpm(inputs["boat.wide_open_rpm"], there, here, inputs["engine_exponent"]))


def spans_of(
    values: Mapping[str, Any], given: Iterable[str], inputs: Inputs
) -> dict[str, tuple[float, float]]:
    """Low and high end of each uncertain input (95 % span), by key, SI."""
    boat, papers = values["boat"], values["boat"]["rpm_from"] == "papers"
    spans = {}
    for key in _COEFFICIENTS:
        field, here = FIELD[key], inputs[key]
        assert field.span and field.default
        low, high = (here * end / field.default for end in field.span)
        spans[key] = (max(low, field.low), min(high, field.high))
    # Pump and driveline act as one efficiency: their spans in quadrature, moved together.
    pump, driveline = spans["boat.pump_efficiency"], spans.pop("boat.driveline_efficiency")
    here, other = inputs["boat.pump_efficiency"], inputs["boat.driveline_efficiency"]
    low, high = (math.hypot(math.log(pump[k] / here), math.log(driveline[k] / other)) for k in (0, 1))
    spans["boat.pump_efficiency"] = (here * math.exp(-low), here * math.exp(high))
    for key in ("boat.nozzle_diameter", "boat.impeller_diameter"):
        spans[key] = _about(inputs[key], FIELD[key].tolerance)
    hub = FIELD["boat.hub_diameter"]
    if "boat.hub_diameter" in given:
        spans["hub_share"] = _about(inputs["hub_share"], hub.tolerance)
    else:
        spans["hub_share"] = fields.HUB_SHARE
    depth = FIELD["boat.shaft_depth"].tolerance
    spans["boat.shaft_depth"] = (boat["shaft_depth"] - depth, boat["shaft_depth"] + depth)
    power = PAPERS_POWER if papers else FIELD["boat.engine_power"].tolerance
    spans["boat.engine_power"] = _about(inputs["boat.engine_power"], power)
    spans["boat.wide_open_rpm"] = _about(inputs["boat.wide_open_rpm"], PAPERS_RPM if papers else RPM_SCATTER)
    warm = FIELD["place.water_temperature"].tolerance
    here = inputs["place.water_temperature"]
    spans["place.water_temperature"] = (max(here - warm, 273.15), here + warm)
    doubt = pressure_doubt(values["place"])
    spans["pressure_error"] = (-doubt, doubt)
    if inputs["engine_here"] != inputs["engine_there"]:
        low, _, high = engine_exponent(boat, inputs["engine_there"])
        spans["engine_exponent"] = (low, high)
    if inputs["gas"]:
        spans["gas"] = (GAS[values["plan"]["water"]][0], GAS[values["plan"]["water"]][2])
    if "boat.dry_mass" in inputs:
        spans["boat.dry_mass"] = _about(inputs["boat.dry_mass"], WEIGHT)
        spans["boat.chine_beam"] = _about(inputs["boat.chine_beam"], FIELD["boat.chine_beam"].tolerance)
        measured = "boat.centre_of_gravity" in given
        reach = FIELD["boat.centre_of_gravity"].tolerance if measured else _GUESSED_BALANCE
        balance, far = inputs["boat.centre_of_gravity"], reach * boat["hull_length"]
        spans["boat.centre_of_gravity"] = (balance - far, balance + far)
        spans["thrust_deduction"] = (THRUST_DEDUCTION[0], THRUST_DEDUCTION[2])
        spans["intake_length"] = (launch.INTAKE_LENGTH[0], launch.INTAKE_LENGTH[2])
    if "suction_specific_speed" in boat:  # else the tach's scale is common to notes and plan and cancels
        spans["tach"] = (1 - TACH_SCALE, 1 + TACH_SCALE)
    return spans


def _about(value: float, share: float) -> tuple[float, float]:
    return value * (1 - share), value * (1 + share)


def older(boat: Mapping[str, Any], note: Mapping[str, Any]) -> bool:
    """Whether a note belongs to an older pump set-up than today's."""
    if "set_up" in note:
        return bool(note["set_up"] != boat.get("date"))
    return "date" in note and "date" in boat and bool(note["date"] < boat["date"])


def seen_of(values: Mapping[str, Any]) -> list[Seen]:
    """The notes that count, ready for physics; one without a boat speed proves nothing and is left out.

    One that let go, or whose revs ran up, in froth or with a grate that was not clean is a hint only: it may
    have been the air. A launch that planed counts where the hull is known.
    """
    place, seen = values["place"], []
    hull_known = "chine_beam" in values["boat"] and "dry_mass" in values["boat"]
    for index, note in enumerate(values["notes"]):
        planed = note["outcome"] == "planed" and hull_known
        if not planed and (note["outcome"] in LAUNCHES or "boat_speed" not in note):
            continue
        clean = note["water"] == "clear" and note["grate"] == "clean"
        temperature = note["water_temperature"]
        density = water.density(temperature)
        warm = FIELD["place.water_temperature"].tolerance
        by_heat = (water.vapor_pressure(temperature + warm) - water.vapor_pressure(temperature)) / (
            density * GRAVITY
        )
        here = _altitude_alone(note) is not None and _altitude_alone(note) == _altitude_alone(place)
        by_air = 0.0 if here else pressure_doubt(note) / (density * GRAVITY)
        seen.append(
            Seen(
                index,
                "held" if planed else note["outcome"],
                note["rpm"],
                0.0 if planed else note["boat_speed"],
                air_pressure(note),
                water.vapor_pressure(temperature),
                density,
                math.hypot(by_heat, by_air) / SIGMAS,
                here,
                older(values["boat"], note) or (not clean and note["outcome"] != "held"),
                clean,
                planed,
            )
        )
    return seen


def tries_of(values: Mapping[str, Any]) -> Tries | None:
    """The launches that were made with today's set-up, where the hull is known."""
    boat, place = values["boat"], values["place"]
    if "chine_beam" not in boat or "dry_mass" not in boat:
        return None
    temperature = place["water_temperature"]
    pressure = air_pressure(place)
    warm = place.get("air_temperature", air.temperature_at_pressure(pressure))
    shape = Shape(
        boat["hull_length"],
        math.degrees(boat["deadrise"]),
        water.density(temperature),
        water.viscosity(temperature),
        pressure / (air.GAS_CONSTANT * warm),
    )
    made, doubts = [], {seen.note: seen for seen in seen_of(values)}
    for index, note in enumerate(values["notes"]):
        if note["outcome"] not in LAUNCHES or note["water"] != "clear" or note["grate"] != "clean":
            continue
        planed = note["outcome"] == "planed"
        density = water.density(note["water_temperature"])
        head = (air_pressure(note) - water.vapor_pressure(note["water_temperature"])) / (density * GRAVITY)
        made.append(
            Launched(
                index,
                note["rpm"],
                note.get("feed_in", 0.0),
                note["seconds"] if planed else None,
                Outing(((note["load"], hull.ROWS[note["rows"]]),), hull.WINDS[note["wind"]]),
                density,
                head,
                doubts[index].head_sigma if planed else 0.0,
                note.get("depth", math.inf) < hull.SHALLOW,
            )
        )
    return Tries(shape, boat["jets"], made)


def _altitude_alone(place: Mapping[str, Any]) -> float | None:
    if "station_pressure" in place or "altimeter_setting" in place:
        return None
    return float(place["altitude"])
