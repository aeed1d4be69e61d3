"""Fresh water against official tables, reference libraries and the published formulas typed again."""

import math

import iapws
import numpy as np
import pytest

from headwater import water


@pytest.mark.parametrize(
    ("kelvin", "megapascal", "half"),
    [(300, 3.53658941e-3, 5e-12), (500, 2.63889776, 5e-9), (600, 12.3443146, 5e-8)],
)
def test_vapor_pressure_is_that_of_the_official_table(kelvin, megapascal, half):
    """IAPWS-IF97, table 35 [V]."""
    assert abs(water.vapor_pressure(kelvin) / 1e6 - megapascal) <= half


@pytest.mark.parametrize(("megapascal", "kelvin"), [(0.1, 372.755919), (1, 453.035632), (10, 584.149488)])
def test_boiling_temperature_is_that_of_the_official_table(megapascal, kelvin):
    """IAPWS-IF97, table 36 [V]."""
    assert abs(water.boiling_temperature(megapascal * 1e6) - kelvin) <= 5e-7


SHEET = [
    (0.01, 0.611657, 999.8402, 1791.16),
    (10, 1.228184, 999.6996, 1305.90),
    (20, 2.339215, 998.2041, 1001.57),
    (30, 4.246688, 995.6473, 797.21),
    (40, 7.384427, 992.2158, 652.73),
]


@pytest.mark.parametrize(("celsius", "vapor_kpa", "density", "viscosity"), SHEET)
def test_water_from_freezing_to_forty_degrees(celsius, vapor_kpa, density, viscosity):
    """Recomputed from IAPWS-IF97, Kell 1975 and IAPWS SR6-08 [V]."""
    kelvin = celsius + 273.15
    assert abs(water.vapor_pressure(kelvin) / 1000 - vapor_kpa) <= 5e-7
    assert abs(water.density(kelvin) - density) <= 5e-5
    assert abs(water.viscosity(kelvin) * 1e6 - viscosity) <= 5e-3


@pytest.mark.parametrize("celsius", range(1, 46, 2))
def test_density_is_within_four_grams_of_iapws_95(celsius):
    """PyPI iapws, IAPWS-95 at 0.101325 MPa."""
    expected = iapws.IAPWS95(T=celsius + 273.15, P=0.101325).rho
    assert abs(water.density(celsius + 273.15) - expected) < 0.004


@pytest.mark.parametrize("celsius", range(1, 100, 7))
def test_boiling_agrees_with_the_reference_library(celsius):
    """PyPI iapws, IAPWS-IF97 region 4."""
    kelvin = celsius + 273.15
    assert water.vapor_pressure(kelvin) == pytest.approx(iapws.iapws97._PSat_T(kelvin) * 1e6, rel=1e-9)
    pressure = water.vapor_pressure(kelvin)
    assert water.boiling_temperature(pressure) == pytest.approx(
        iapws.iapws97._TSat_P(pressure / 1e6), rel=1e-9
    )


@pytest.mark.parametrize("celsius", range(1, 45, 4))
def test_viscosity_agrees_with_the_reference_library(celsius):
    """PyPI iapws, IAPWS SR6-08 properties of liquid water at 0.1 MPa."""
    expected = iapws._iapws._Liquid(celsius + 273.15)["mu"]
    assert water.viscosity(celsius + 273.15) == pytest.approx(expected, rel=1e-6)


def naive_vapor_pressure(kelvin):
    """IAPWS-IF97 equation 30, typed from the release's own symbols."""
    n = [
        0,
        0.11670521452767e4,
        -0.72421316703206e6,
        -0.17073846940092e2,
        0.12020824702470e5,
        -0.32325550322333e7,
    ]
    n += [0.14915108613530e2, -0.48232657361591e4, 0.40511340542057e6, -0.23855557567849, 0.65017534844798e3]
    theta = kelvin + n[9] / (kelvin - n[10])
    a = theta**2 + n[1] * theta + n[2]
    b = n[3] * theta**2 + n[4] * theta + n[5]
    c = n[6] * theta**2 + n[7] * theta + n[8]
    return (2 * c / (-b + math.sqrt(b**2 - 4 * a * c))) ** 4 * 1e6


def naive_density(celsius):
    """Kell 1975."""
    t = celsius
    top = 999.83952 + 16.945176 * t - 7.9870401e-3 * t**2 - 46.170461e-6 * t**3
    return (top + 105.56302e-9 * t**4 - 280.54253e-12 * t**5) / (1 + 16.879850e-3 * t)


def test_formulas_typed_again_agree_on_many_points_and_on_arrays():
    kelvin = np.linspace(273.15, 372, 300)
    expected = np.array([naive_vapor_pressure(float(t)) for t in kelvin])
    np.testing.assert_allclose(water.vapor_pressure(kelvin, np), expected, rtol=1e-12)
    np.testing.assert_allclose(water.boiling_temperature(expected, np), kelvin, rtol=1e-9)
    kelvin = np.linspace(273.15, 318.15, 300)
    np.testing.assert_allclose(water.density(kelvin), [naive_density(t - 273.15) for t in kelvin], rtol=1e-13)
    np.testing.assert_allclose(
        water.viscosity(kelvin), [water.viscosity(float(t)) for t in kelvin], rtol=1e-13
    )
