"""Air over the river: pressure by altitude or barometer, and the density of moist air."""

import math
from typing import Any

from headwater import water

STANDARD_PRESSURE = 101325.0  # Pa, ISO 2533
STANDARD_TEMPERATURE = 288.15  # K, ISO 2533
LAPSE_RATE = 0.0065  # K/m, ISO 2533
EARTH_RADIUS = 6_356_766.0  # m, US Standard Atmosphere 1976
_EXPONENT = 5.2558761  # g M/(R L), US Standard Atmosphere 1976
_ALTIMETER_EXPONENT = 0.1902632  # R L/(g M) as ICAO Doc 7488 rounds it
GAS_CONSTANT, _GAS_VAPOR = 287.042, 461.524  # J/(kg K)


def geopotential_height(altitude: Any) -> Any:
    """Geopotential height of an altitude above sea level.

    :param altitude: geometric, above sea level [m]
    :returns: [m]
    Source: US Standard Atmosphere 1976, equation 18 [V].
    """
    return EARTH_RADIUS * altitude / (EARTH_RADIUS + altitude)


def pressure_at_height(height: Any) -> Any:
    """Standard pressure at a geopotential height.

    :param height: geopotential [m], up to 11000
    :returns: [Pa]
    Source: US Standard Atmosphere 1976, equation 33a; ISO 2533 [V].
    """
    return STANDARD_PRESSURE * (1 - LAPSE_RATE * height / STANDARD_TEMPERATURE) ** _EXPONENT


def standard_pressure(altitude: Any) -> Any:
    """Standard pressure at an altitude above sea level.

    :param altitude: geometric [m], up to 11000
    :returns: [Pa]
    Source: US Standard Atmosphere 1976; ISO 2533 [V].
    """
    return pressure_at_height(geopotential_height(altitude))


def temperature_at_pressure(pressure: Any) -> Any:
    """Air temperature of the standard atmosphere where it has a pressure.

    :param pressure: [Pa]
    :returns: [K]
    Source: US Standard Atmosphere 1976 / ISO 2533, solved for temperature [V].
    """
    return STANDARD_TEMPERATURE * (pressure / STANDARD_PRESSURE) ** (1 / _EXPONENT)


def station_pressure(altimeter_setting: Any, elevation: Any) -> Any:
    """Pressure at the water from a barometer that has been reduced to sea level (QNH).

    :param altimeter_setting: [Pa]
    :param elevation: as entered, above sea level [m]
    :returns: [Pa]
    Source: ICAO Doc 7488 relation of altimeter setting to pressure altitude [V].
    """
    k = _ALTIMETER_EXPONENT
    fall = STANDARD_PRESSURE**k * LAPSE_RATE * elevation / STANDARD_TEMPERATURE
    return (altimeter_setting**k - fall) ** (1 / k)


def dry_pressure(pressure: Any, temperature: Any, humidity: Any, xp: Any = math) -> Any:
    """Partial pressure of the dry air in moist air.

    :param pressure: total [Pa]
    :param temperature: of the air [K], 273.15 or more
    :param humidity: relative, 0 to 1
    :returns: [Pa]
    Source: Dalton's law with IAPWS-IF97 saturation [D].
    """
    return pressure - humidity * water.vapor_pressure(temperature, xp)


def density(pressure: Any, temperature: Any, humidity: Any, xp: Any = math) -> Any:
    """Density of moist air.

    :param pressure: total [Pa]
    :param temperature: of the air [K], 273.15 or more
    :param humidity: relative, 0 to 1
    :returns: [kg/m3]
    Source: ideal gas mixture of dry air and water vapour [D].
    """
    dry = dry_pressure(pressure, temperature, humidity, xp)
    return dry / (GAS_CONSTANT * temperature) + (pressure - dry) / (_GAS_VAPOR * temperature)
