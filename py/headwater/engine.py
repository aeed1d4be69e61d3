"""The engine at altitude: what thin, warm or damp air leaves of its torque, and where it meets the jet.

The jet asks c N^3, so a weaker engine turns slower as well: power falls between the first power of the torque
factor (constant power near the peak) and its 1.5th (flat torque).
"""

import math
from typing import Any

from headwater import air

EXPONENT = (1.0, 1.25, 1.5)  # e in power = sea level's x factor^e: low, middle, high of its 95 % span [D]
EXTRAPOLATED_ABOVE = 1000.0  # m, past which every standard is extrapolated
_DIESEL_POWER = 0.6  # f_m where the fuel per stroke is unknown [S]


def petrol_factor(dry_pressure: Any, temperature: Any) -> Any:
    """Torque factor of a naturally aspirated petrol engine, 1/alpha.

    :param dry_pressure: of the air less its water vapour [Pa]
    :param temperature: of the air [K]
    Source: ISO 1585 / UN R85 [V].
    """
    return (dry_pressure / 99e3) ** 1.2 * (298 / temperature) ** 0.6


def diesel_factor(dry_pressure: Any, temperature: Any, turbo: bool) -> Any:
    """Torque factor of a diesel engine.

    :param dry_pressure: of the air less its water vapour [Pa]
    :param temperature: of the air [K]
    :param turbo: whether it has a turbocharger
    Source: ISO 1585, f_a by how it breathes, from memory [M]; f_m 0.6 where fuel per stroke is unknown [S].
    """
    if turbo:
        thin = (99e3 / dry_pressure) ** 0.7 * (temperature / 298) ** 1.5
    else:
        thin = 99e3 / dry_pressure * (temperature / 298) ** 0.7
    return 1 / thin**_DIESEL_POWER


def boosted_factor(air_pressure: Any, critical_pressure: Any) -> Any:
    """Torque factor of a boosted petrol engine with a wastegate: whole up to its critical altitude.

    :param air_pressure: [Pa]
    :param critical_pressure: standard pressure at the critical altitude [Pa]
    Source: common practice [P].
    """
    share = air_pressure / critical_pressure
    return 0.5 * (1 + share - abs(1 - share))


def torque_factor(
    aspiration: str,
    air_pressure: Any,
    air_temperature: Any,
    humidity: float = 0.0,
    critical_altitude: float = 0.0,
    xp: Any = math,
) -> Any:
    """Torque at the same rpm over that in dry standard air at sea level.

    :param aspiration: natural, boosted, diesel or turbo_diesel
    :param air_pressure: [Pa]
    :param air_temperature: [K]
    :param humidity: relative, 0 to 1; with 0 no vapour pressure is worked out
    :param critical_altitude: up to which a boosted engine keeps its power [m]
    Source: each relation over its own value in standard air [D].
    """
    if aspiration == "boosted":
        return boosted_factor(air_pressure, air.standard_pressure(critical_altitude))
    dry = air.dry_pressure(air_pressure, air_temperature, humidity, xp) if humidity else air_pressure
    if aspiration == "natural":
        here = petrol_factor(dry, air_temperature)
        return here / petrol_factor(air.STANDARD_PRESSURE, air.STANDARD_TEMPERATURE)
    turbo = aspiration == "turbo_diesel"
    return diesel_factor(dry, air_temperature, turbo) / diesel_factor(
        air.STANDARD_PRESSURE, air.STANDARD_TEMPERATURE, turbo
    )


def wide_open_rpm(rpm_there: Any, factor_there: Any, factor_here: Any, exponent: Any) -> Any:
    """Engine rpm at which wide open meets the jet here.

    :param rpm_there: wide-open rpm where it was read [1/min]
    :param factor_there: torque factor there [-]
    :param factor_here: torque factor here [-]
    :param exponent: e of power over torque factor [-]
    :returns: [1/min]
    Source: affinity law c N^3 met by power that goes as factor^e [D].
    """
    return rpm_there * (factor_here / factor_there) ** (exponent / 3)


def exponent_seen(rpm_low: Any, rpm_high: Any, factor_low: Any, factor_high: Any, xp: Any = math) -> Any:
    """The exponent that two wide-open rpm show, the second read up high.

    :param rpm_low: [1/min]
    :param rpm_high: [1/min]
    :param factor_low: torque factor where the first was read [-]
    :param factor_high: torque factor where the second was read [-]
    Source: the relation of :func:`wide_open_rpm` solved for it [D].
    """
    return 3 * xp.log(rpm_high / rpm_low) / xp.log(factor_high / factor_low)
