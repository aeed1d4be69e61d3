"""Fresh water: the pressure at which it boils, its density and its viscosity.

Every function takes kelvin and pascal and works on a float or a numpy array alike (``xp=numpy``).
"""

import math
from typing import Any

# IAPWS-IF97 region 4, coefficients n1 to n10 of table 34 [V].
_N1, _N2, _N3, _N4, _N5 = (
    1167.0521452767,
    -724213.16703206,
    -17.073846940092,
    12020.824702470,
    -3232555.0322333,
)
_N6, _N7, _N8, _N9, _N10 = (
    14.915108613530,
    -4823.2657361591,
    405113.40542057,
    -0.23855557567849,
    650.17534844798,
)

# Kell 1975, equation for air-free water at one atmosphere, t in degrees Celsius [V].
_KELL = (999.83952, 16.945176, -7.9870401e-3, -46.170461e-6, 105.56302e-9, -280.54253e-12)


def vapor_pressure(temperature: Any, xp: Any = math) -> Any:
    """Saturation pressure of water.

    :param temperature: [K], 273.15 to 647.096
    :returns: [Pa]
    Source: IAPWS-IF97, region 4, equation 30 [V].
    """
    theta = temperature + _N9 / (temperature - _N10)
    a = (theta + _N1) * theta + _N2
    b = (_N3 * theta + _N4) * theta + _N5
    c = (_N6 * theta + _N7) * theta + _N8
    return 1e6 * (2 * c / (-b + xp.sqrt(b * b - 4 * a * c))) ** 4


def boiling_temperature(pressure: Any, xp: Any = math) -> Any:
    """Temperature at which water boils under a pressure, the inverse of :func:`vapor_pressure`.

    :param pressure: absolute [Pa], 611.213 to 22.064e6
    :returns: [K]
    Source: IAPWS-IF97, region 4, equation 31 [V].
    """
    beta = (pressure / 1e6) ** 0.25
    e = (beta + _N3) * beta + _N6
    f = (_N1 * beta + _N4) * beta + _N7
    g = (_N2 * beta + _N5) * beta + _N8
    d = 2 * g / (-f - xp.sqrt(f * f - 4 * e * g))
    return (_N10 + d - xp.sqrt((_N10 + d) ** 2 - 4 * (_N9 + _N10 * d))) / 2


def density(temperature: Any) -> Any:
    """Density of fresh water at one atmosphere.

    :param temperature: [K], 273.15 to 318.15 (checked range)
    :returns: [kg/m3]
    Source: Kell 1975, J. Chem. Eng. Data 20, 97 [V].
    """
    t = temperature - 273.15
    a0, a1, a2, a3, a4, a5 = _KELL
    return (((((a5 * t + a4) * t + a3) * t + a2) * t + a1) * t + a0) / (1 + 16.879850e-3 * t)


def viscosity(temperature: Any) -> Any:
    """Dynamic viscosity of water at 0.1 MPa.

    :param temperature: [K], 253.15 to 383.15
    :returns: [Pa s]
    Source: IAPWS SR6-08 (2011), equation 7 [V].
    """
    x = temperature / 300.0
    return 1e-6 * (280.68 * x**-1.9 + 511.45 * x**-7.7 + 61.131 * x**-19.6 + 0.45903 * x**-40)
