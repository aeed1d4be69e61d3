"""The engine at altitude against two standards, a published tractor test and the formulas typed again."""

import math

import iapws
import numpy as np
import pytest

from headwater import air, engine, jet, water

PRESSURE, TEMPERATURE = np.meshgrid(np.linspace(60e3, 104e3, 23), np.linspace(250.0, 320.0, 15))
KPA = PRESSURE / 1000
ASPIRATIONS = ("natural", "boosted", "diesel", "turbo_diesel")


def standard(height):
    """Pressure and temperature of the standard atmosphere at a geopotential height."""
    return air.pressure_at_height(height), 288.15 - 0.0065 * height


def sae_j1349(dry_pressure, temperature):
    """SAE J1349 (1990), 1/CF for the same engines [V]."""
    return 1 / (1.18 * (99 / (dry_pressure / 1000)) * (temperature / 298) ** 0.5 - 0.18)


@pytest.mark.parametrize(("height", "factor"), [(0, 1.0492), (1500, 0.8621), (2500, 0.7533)])
def test_natural_petrol_in_standard_air(height, factor):
    """ISO 1585, 1/alpha in dry standard air at geopotential heights [V]; half the last digit."""
    assert abs(engine.petrol_factor(*standard(height)) - factor) <= 5e-5


@pytest.mark.parametrize(("height", "factor"), [(1500, 0.822), (2000, 0.768), (2500, 0.718)])
def test_torque_that_a_natural_petrol_engine_keeps(height, factor):
    """Of its sea-level torque, standard air, ISO 1585 [V]; half the last digit."""
    assert abs(engine.torque_factor("natural", *standard(height)) - factor) <= 5e-4


@pytest.mark.parametrize(("top", "within"), [(1600, 0.005), (2000, 0.007), (2500, 0.010)])
def test_two_standards_agree(top, within):
    """ISO 1585 against SAE J1349 (1990), dry standard air [V]; half the last digit, 2500 m has 1.001 %."""
    heights = np.linspace(0, top, 101)
    apart = abs(engine.petrol_factor(*standard(heights)) / sae_j1349(*standard(heights)) - 1)
    assert apart.max() <= within + 5e-4


@pytest.mark.parametrize(
    ("observed", "fahrenheit", "inches", "typed", "published"),
    [(48.38, 65, 28.868, 50.38, 50.38), (42.90, 76, 28.690, 45.42, 45.43)],
)
def test_nebraska_tractor_test_520(observed, fahrenheit, inches, typed, published):
    """Nebraska Tractor Test 520 (1954), SAE J607 form: first the form, then ISO 1585 from the same air.

    The older form takes the first power of pressure and the root of temperature, so the two part by 0.8 and
    1.2 % here.
    """
    older = 29.92 / inches * ((fahrenheit + 459.67) / 519.67) ** 0.5
    assert abs(observed * older - typed) <= 0.005
    assert abs(observed * older - published) <= 0.01
    there = engine.petrol_factor(inches * 3386.389, (fahrenheit + 459.67) / 1.8)
    reference = engine.petrol_factor(29.92 * 3386.389, 519.67 / 1.8)
    assert observed * reference / there == pytest.approx(published, rel=0.015)


def test_natural_petrol_typed_again():
    """ISO 1585, alpha = (99/p)^1.2 (T/298)^0.6 [V]; float and array alike."""
    alpha = (99 / KPA) ** 1.2 * (TEMPERATURE / 298) ** 0.6
    found = engine.petrol_factor(PRESSURE, TEMPERATURE)
    np.testing.assert_allclose(found, 1 / alpha, rtol=1e-13)
    assert found[3, 5] == pytest.approx(engine.petrol_factor(float(PRESSURE[3, 5]), float(TEMPERATURE[3, 5])))


@pytest.mark.parametrize(("turbo", "by_pressure", "by_temperature"), [(False, 1, 0.7), (True, 0.7, 1.5)])
def test_diesel_typed_again(turbo, by_pressure, by_temperature):
    """fa^-fm, from memory [M], fm 0.6 [S]."""
    fa = (99 / KPA) ** by_pressure * (TEMPERATURE / 298) ** by_temperature
    np.testing.assert_allclose(engine.diesel_factor(PRESSURE, TEMPERATURE, turbo), fa**-0.6, rtol=1e-13)


def test_boosted_typed_again():
    """min(1, p/p_crit) [P]."""
    critical = air.standard_pressure(2000.0)
    found = engine.boosted_factor(PRESSURE, critical)
    np.testing.assert_allclose(found, np.minimum(1, PRESSURE / critical), rtol=1e-13)
    factor = engine.torque_factor("boosted", PRESSURE, TEMPERATURE, critical_altitude=2000.0)
    np.testing.assert_array_equal(factor, found)


def test_boosted_is_whole_up_to_its_critical_altitude_and_falls_from_there():
    """Wastegate, common practice [P]."""
    below, at, above = (
        engine.torque_factor("boosted", air.standard_pressure(z), 280.0, critical_altitude=2000.0)
        for z in (1500.0, 2000.0, 2500.0)
    )
    assert (below, at) == pytest.approx((1.0, 1.0), rel=1e-14)
    assert above == pytest.approx(air.standard_pressure(2500.0) / air.standard_pressure(2000.0))
    assert above < 0.95


@pytest.mark.parametrize("aspiration", ASPIRATIONS)
def test_torque_is_whole_in_dry_standard_air_at_sea_level(aspiration):
    """Divided by its own value there [D]; a boosted engine whose boost lasts to 1500 m is whole as well."""
    assert engine.torque_factor(aspiration, 101325.0, 288.15, 0.0, 1500.0) == pytest.approx(1.0, rel=1e-14)


@pytest.mark.parametrize("humidity", [0.3, 1.0])
def test_damp_air_counts_by_its_dry_share(humidity):
    """Dalton's law, saturation by PyPI iapws, then each standard typed again over its sea-level value."""
    warm = np.linspace(275.0, 315.0, 9)
    saturated = np.array([iapws.iapws97._PSat_T(t) * 1e6 for t in warm])
    dry = (85e3 - humidity * saturated) / 1000

    def ratio(by_pressure, by_temperature):
        return (dry / 101.325) ** by_pressure * (288.15 / warm) ** by_temperature

    for aspiration, expected in (
        ("natural", ratio(1.2, 0.6)),
        ("diesel", ratio(1, 0.7) ** 0.6),
        ("turbo_diesel", ratio(0.7, 1.5) ** 0.6),
    ):
        found = engine.torque_factor(aspiration, 85e3, warm, humidity, xp=np)
        np.testing.assert_allclose(found, expected, rtol=1e-9)
        one = engine.torque_factor(aspiration, 85e3, float(warm[4]), humidity)
        assert one == pytest.approx(found[4], rel=1e-13)
        assert np.all(found < engine.torque_factor(aspiration, 85e3, warm))


@pytest.mark.parametrize("aspiration", ASPIRATIONS)
def test_dry_air_under_freezing_needs_no_vapour_pressure(aspiration, monkeypatch):
    """Standard air is under 0 C above 2300 m, where the saturation formula does not hold."""

    def refuse(*_):
        raise AssertionError("vapour pressure worked out for dry air")

    monkeypatch.setattr(water, "vapor_pressure", refuse)
    found = engine.torque_factor(aspiration, *standard(3000), critical_altitude=1000.0)
    assert 0.6 < found < 1.0


def test_span_of_the_exponent():
    """1.25, 95 % span 1.0 to 1.5, and the height past which the standards are extrapolated [D]."""
    assert engine.EXPONENT == (1.0, 1.25, 1.5)
    assert engine.EXTRAPOLATED_ABOVE == 1000.0


@pytest.mark.parametrize("exponent", engine.EXPONENT)
def test_wide_open_is_where_the_engine_meets_the_jet(exponent):
    """c N^3 = P f^e, solved here by bisection [D]."""
    factors = np.linspace(0.6, 1.05, 10)
    absorption = jet.absorption(220e3, 4200.0, 1)
    low, high = np.full(10, 1000.0), np.full(10, 6000.0)
    for _ in range(60):
        middle = (low + high) / 2
        over = absorption * middle**3 > 220e3 * factors**exponent
        low, high = np.where(over, low, middle), np.where(over, middle, high)
    found = engine.wide_open_rpm(4200.0, 1.0, factors, exponent)
    np.testing.assert_allclose(found, low, rtol=1e-12)


@pytest.mark.parametrize(("exponent", "torque_power"), [(1.0, -1), (1.5, 0)])
def test_ends_of_the_exponent_are_constant_power_and_flat_torque(exponent, torque_power):
    """Torque f T0 (N/N0)^m met by the jet's c' N^2: m = -1 gives f^1, flat torque f^1.5 [D]."""
    factor = 0.8
    meets = factor ** (1 / (2 - torque_power))  # N/N0, from f (N/N0)^m = (N/N0)^2
    found = engine.wide_open_rpm(1.0, 1.0, factor, exponent)
    assert found == pytest.approx(meets, rel=1e-14)
    assert found**3 == pytest.approx(factor**exponent, rel=1e-14)


def test_wide_open_rpm_read_up_high_leads_back_to_sea_level():
    """Read where the factor is 0.768, back at sea level, and there again [D]."""
    sea = engine.wide_open_rpm(3900.0, 0.768, 1.0, 1.25)
    assert sea == pytest.approx(3900 / math.exp(1.25 / 3 * math.log(0.768)), rel=1e-13)
    assert engine.wide_open_rpm(sea, 1.0, 0.768, 1.25) == pytest.approx(3900.0, rel=1e-13)


def test_two_wide_open_rpm_show_the_exponent():
    """(N_high/N_low)^3 = (f_high/f_low)^e, solved here by bisection, on arrays [D]."""
    low_rpm, high_rpm = np.full(6, 4200.0), np.linspace(3600.0, 4100.0, 6)
    low, high = np.full(6, -1.0), np.full(6, 6.0)
    for _ in range(60):
        middle = (low + high) / 2
        under = (0.75 / 0.95) ** middle < (high_rpm / low_rpm) ** 3
        low, high = np.where(under, low, middle), np.where(under, middle, high)
    found = engine.exponent_seen(low_rpm, high_rpm, 0.95, 0.75, xp=np)
    np.testing.assert_allclose(found, low, rtol=1e-12)
    assert engine.exponent_seen(4200.0, 3600.0, 0.95, 0.75) == pytest.approx(found[0], rel=1e-13)
