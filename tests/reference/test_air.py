"""Air against the US Standard Atmosphere 1976, reference libraries and the formulas typed again."""

import math

import ambiance
import fluids
import numpy as np
import pytest

from headwater import air, water

INHG = 3386.389


@pytest.mark.parametrize(
    ("height", "pressure"), [(1000, 89874.57), (2000, 79495.22), (3000, 70108.54), (6000, 47181.03)]
)
def test_pressure_is_that_of_the_standard_atmosphere(height, pressure):
    """ISO 2533 at geopotential heights, recomputed [V]."""
    assert abs(air.pressure_at_height(height) - pressure) <= 0.005


# US Standard Atmosphere 1976, table I, geometric altitude in metres against pressure in millibar [M].
TABLE = [(0, 1013.25), (500, 954.61), (1000, 898.76), (2000, 795.01), (3000, 701.21), (5000, 540.48)]


@pytest.mark.parametrize(("altitude", "millibar"), TABLE)
def test_pressure_is_that_of_the_printed_table(altitude, millibar):
    """US Standard Atmosphere 1976, table I, from memory [M]; half its last digit."""
    assert abs(air.standard_pressure(altitude) / 100 - millibar) <= 0.006


@pytest.mark.parametrize("altitude", range(-400, 11000, 300))
def test_pressure_and_temperature_agree_with_two_reference_libraries(altitude):
    """PyPI fluids (US Standard Atmosphere 1976) and ambiance (ICAO 1993)."""
    assert air.standard_pressure(altitude) == pytest.approx(fluids.ATMOSPHERE_1976(altitude).P, rel=2e-5)
    assert air.standard_pressure(altitude) == pytest.approx(
        float(ambiance.Atmosphere(altitude).pressure[0]), rel=2e-5
    )
    assert air.temperature_at_pressure(air.standard_pressure(altitude)) == pytest.approx(
        fluids.ATMOSPHERE_1976(altitude).T, abs=0.01
    )


def test_geopotential_height_is_the_published_relation():
    """US Standard Atmosphere 1976, equation 18, r = 6 356 766 m [V]."""
    assert air.geopotential_height(3000) == pytest.approx(6356766 * 3000 / (6356766 + 3000), rel=1e-12)


def test_altimeter_setting_gives_the_station_pressure():
    """ICAO form: 29.80 inHg at 5280 ft gives 830.77 hPa [V]."""
    assert abs(air.station_pressure(29.80 * INHG, 5280 * 0.3048) / 100 - 830.77) <= 0.005


def test_a_standard_altimeter_setting_gives_the_standard_pressure():
    """ICAO form against ISO 2533 [D]."""
    for height in (0, 500, 1500, 3000):
        assert air.station_pressure(101325.0, height) == pytest.approx(
            air.pressure_at_height(height), rel=2e-6
        )


def test_a_barometer_reduced_to_sea_level_would_overstate_the_head_by_1_7_m_at_1500_m():
    """The trap that the reading guards against [V]."""
    kelvin = 288.15
    over = (101325 - air.pressure_at_height(1500)) / (water.density(kelvin) * 9.80665)
    assert abs(over - 1.7) < 0.05


def test_density_of_moist_air():
    """84556 Pa, 30 C, 30 % humidity: 0.96619 kg/m3 [V]."""
    assert abs(air.density(84556, 303.15, 0.30) - 0.96619) <= 5e-6


def test_dry_pressure_leaves_the_vapour_out():
    """Dalton's law [D]."""
    assert air.dry_pressure(90000, 300, 0.5) == 90000 - 0.5 * water.vapor_pressure(300)


@pytest.mark.parametrize(
    ("height", "head"),
    [(0, 10.167), (1000, 8.999), (1500, 8.456), (2000, 7.939), (2500, 7.448), (3000, 6.981)],
)
def test_head_over_boiling_of_15_degree_water(height, head):
    """(p_atm - p_v)/(rho g), recomputed [V]."""
    kelvin = 288.15
    found = (air.pressure_at_height(height) - water.vapor_pressure(kelvin)) / (
        water.density(kelvin) * 9.80665
    )
    assert abs(found - head) <= 5e-4


def test_warming_the_water_costs_a_fifth_of_a_metre():
    """From 15 to 30 C at sea level: 0.22 m [V]."""
    heads = [(101325 - water.vapor_pressure(t)) / (water.density(t) * 9.80665) for t in (288.15, 303.15)]
    assert abs(heads[0] - heads[1] - 0.22) <= 0.05


def test_formulas_typed_again_agree_on_arrays():
    altitude = np.linspace(-400, 6000, 200)
    expected = [101325 * (1 - 0.0065 * (6356766 * z / (6356766 + z)) / 288.15) ** 5.2558761 for z in altitude]
    np.testing.assert_allclose(air.standard_pressure(altitude), expected, rtol=1e-13)
    k, p0 = 0.1902632, 101325.0
    setting = np.linspace(95000, 105000, 200)
    again = [(q**k - p0**k * 0.0065 * 1200 / 288.15) ** (1 / k) for q in setting]
    np.testing.assert_allclose(air.station_pressure(setting, 1200.0), again, rtol=1e-13)
    kelvin = np.linspace(274, 310, 50)
    moist = [air.density(90000.0, float(t), 0.4, math) for t in kelvin]
    np.testing.assert_allclose(air.density(90000.0, kelvin, 0.4, np), moist, rtol=1e-13)
