"""The suction side: worked examples, conversions, the exact scaling at rest, solutions by other methods."""

import math

import numpy as np
import pytest

from headwater import air, jet, suction, water

GALLON_A_MINUTE = 231 * 0.0254**3 / 60  # m3/s
FOOT = 0.3048
RHO = 999.1


def unit(**more):
    given = {
        "nozzle_diameter": 0.130,
        "impeller_diameter": 0.215,
        "hub_diameter": 0.07,
        "wake_fraction": 0.08,
        "ram_loss": 0.25,
        "intake_loss": 0.15,
        "nozzle_loss": 0.03,
        "pump_efficiency": 0.80,
        "driveline_efficiency": 0.97,
        "absorption": 208795.96 / 4200**3,
        "gear_ratio": 1.0,
    }
    return jet.unit(**given | more)


def head(height, kelvin=288.15, depth=0.0):
    vapor, density = water.vapor_pressure(kelvin), water.density(kelvin)
    return suction.head_at_rest(air.pressure_at_height(height), vapor, density, depth)


def test_us_units_convert_to_metric_s():
    """US S (rev/min, US gal/min, ft) times 0.01936287 is metric [V], here from the units' own definitions."""
    assert suction.S_FROM_US == pytest.approx(GALLON_A_MINUTE**0.5 / FOOT**0.75, rel=5e-7)


def test_dimensionless_s_converts_to_metric_s():
    """omega sqrt(Q)/(g H)^0.75: metric over 52.919, US over 2733.02 [V]."""
    factor = 30 / math.pi * 9.80665**0.75
    assert abs(factor - suction.S_FROM_DIMENSIONLESS) <= 5e-4
    assert abs(factor / suction.S_FROM_US - 2733.02) <= 0.03


def test_head_required_of_the_worked_example():
    """N 3600 rev/min, Q 0.35 m3/s, US S 8500 gives NPSHR 30.381 m [V]."""
    state = suction.State(0.0, 0.0, 0.35, 0.0, 10.0, 3600.0)
    assert abs(suction.npsh_required(state, 8500 * suction.S_FROM_US) - 30.381) <= 5e-4


def test_speed_asked_and_head_required_are_inverse():
    state = suction.state(unit(), 9.0, RHO, 3700.0, 6.0)
    asked = suction.speed_asked(state)
    assert suction.npsh_required(state, asked) == pytest.approx(state.npsh_available, rel=1e-12)
    assert suction.ratio(state, 1.2 * asked) == pytest.approx(1.2 ** (4 / 3), rel=1e-12)


@pytest.mark.parametrize("rpm", [900.0, 3700.0, 5000.0])
@pytest.mark.parametrize("speed", [0.0, 8.0, 20.0])
def test_head_offered_is_the_sum_of_its_terms(rpm, speed):
    """Typed again: rest, ram, intake; and Bernoulli for the static pressure [D]."""
    made, rest = unit(), 8.3
    state = suction.state(made, rest, RHO, rpm, speed)
    v_1 = made.nozzle_area * jet.jet_speed(made, made.absorption * rpm**3, speed, RHO) / made.inlet_area
    expected = rest + 0.75 * (0.92 * speed) ** 2 / 19.6133 - 0.15 * v_1**2 / 19.6133
    assert state.npsh_available == pytest.approx(expected, rel=1e-12)
    assert suction.inlet_loss(made, v_1) == pytest.approx(0.15 * v_1**2 / 19.6133, rel=1e-12)
    pressure = RHO * 9.80665 * (expected - v_1**2 / 19.6133) + 1705.0
    assert suction.static_pressure(state, 1705.0, RHO) == pytest.approx(pressure, rel=1e-12)


@pytest.mark.parametrize("intake_loss", [0.0, 0.05, 0.15, 0.5, 1.5])
def test_at_rest_rpm_goes_as_the_root_of_the_head_and_power_as_its_power_one_and_a_half(intake_loss):
    """Exact for any intake loss [D]; the factors of power at 1500, 2000 and 2500 m in 15 C water [V]."""
    made = unit(intake_loss=intake_loss)
    sea = suction.rpm_at(made, head(0), RHO, 0.0, 420.0)
    for height, power in ((1500, 0.758), (2000, 0.690), (2500, 0.627)):
        rpm = suction.rpm_at(made, head(height), RHO, 0.0, 420.0)
        assert rpm / sea == pytest.approx((head(height) / head(0)) ** 0.5, rel=1e-12)
        assert abs((rpm / sea) ** 3 - power) <= 5e-4


@pytest.mark.parametrize("s", [120.0, 300.0, 420.0, 900.0])
@pytest.mark.parametrize("speed", [0.0, 2.0, 9.0, 17.0, 25.0])
def test_rpm_at_is_the_root_that_bisection_finds(s, speed):
    made, rest = unit(), 7.2
    low, high = 1.0, 40000.0
    for _ in range(200):
        middle = (low + high) / 2
        state = suction.state(made, rest, RHO, middle, speed)
        over = state.npsh_available <= 0 or suction.speed_asked(state) > s
        low, high = (low, middle) if over else (middle, high)
    assert suction.rpm_at(made, rest, RHO, speed, s) == pytest.approx(low, rel=1e-9)
    assert suction.rpm_at(made, rest, RHO, speed, s, suction.FEW_STEPS) == pytest.approx(low, rel=1e-4)


@pytest.mark.parametrize("speed", [0.0, 5.0, 15.0])
@pytest.mark.parametrize("rpm", [1500.0, 3000.0, 4200.0])
def test_slope_is_that_of_finite_differences(rpm, speed):
    made = unit()

    def ln_asked(n):
        return math.log(suction.speed_asked(suction.state(made, 8.0, RHO, n, speed)))

    step = 1e-5
    expected = (ln_asked(rpm * (1 + step)) - ln_asked(rpm * (1 - step))) / (2 * step)
    found = suction.rpm_slope(made, suction.state(made, 8.0, RHO, rpm, speed), speed)
    assert found == pytest.approx(expected, rel=1e-6)


def test_slope_at_rest_is_one_and_a_half_times_the_head_without_loss_over_the_head():
    """1.5 h/NPSHA [D]."""
    made = unit()
    state = suction.state(made, 8.0, RHO, 3700.0, 0.0)
    assert suction.rpm_slope(made, state, 0.0) == pytest.approx(1.5 * 8.0 / state.npsh_available, rel=1e-12)


def test_half_the_rpm_at_the_impeller_where_the_gear_halves_it():
    straight, geared = unit(), unit(gear_ratio=2.0)
    fast, slow = (suction.state(one, 8.0, RHO, 3000.0, 0.0) for one in (straight, geared))
    assert suction.speed_asked(slow) == pytest.approx(suction.speed_asked(fast) / 2, rel=1e-12)


def test_arrays_and_scalars_agree():
    speeds, s = np.linspace(0, 25, 30), np.linspace(200, 800, 30)
    expected = [suction.rpm_at(unit(), 8.0, RHO, float(v), float(x)) for v, x in zip(speeds, s, strict=True)]
    np.testing.assert_allclose(suction.rpm_at(unit(), 8.0, RHO, speeds, s), expected, rtol=1e-12)
