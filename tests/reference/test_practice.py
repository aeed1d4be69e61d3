"""Common practice of the trade, no published source [P]: figures that people on the water go by."""

import math

import pytest

from headwater import air, jet, suction, water

HP, PSI, MPH, MILE, FOOT = 745.69987, 6894.757293, 0.44704, 1609.344, 0.3048
BORE = 0.109
RATIO = 3.75  # inlet area over nozzle area
KELVIN = 288.15


def fahrenheit(kelvin):
    return (kelvin - 273.15) * 9 / 5 + 32


def lossless():
    """A unit with no losses, its inlet 3.75 times the nozzle's area."""
    ring = BORE * math.sqrt(RATIO)
    return jet.unit(BORE, ring, 0.0, 0.0, 0.0, 0.0, 0.0, 1.0, 1.0, HP / 1000**3, 1.0)


@pytest.mark.parametrize(("feet", "boils"), [(0, 212), (MILE / FOOT, 202), (29000, 160)])
def test_water_boils_sooner_up_high(feet, boils):
    """Within 3 F [P]."""
    assert abs(fahrenheit(water.boiling_temperature(air.standard_pressure(feet * FOOT))) - boils) <= 3


def test_400_hp_through_a_109_mm_nozzle_leaves_at_90_mph():
    """Within 2 % [P]."""
    speed = jet.jet_speed(lossless(), 400 * HP, 0.0, water.density(KELVIN))
    assert speed / MPH == pytest.approx(90, rel=0.02)


def inlet_pressure(power, boat_speed=0.0):
    """Static pressure ahead of the impeller of the lossless unit, air at 14.7 psi [psi]."""
    density, vapor = water.density(KELVIN), water.vapor_pressure(KELVIN)
    head = suction.head_at_rest(14.7 * PSI, vapor, density, 0.0)
    rpm = 1000 * (power / HP) ** (1 / 3)
    state = suction.state(lossless(), head, density, rpm, boat_speed)
    return suction.static_pressure(state, vapor, density) / PSI, state


def test_the_pressure_at_the_inlet_falls_to_six_and_a_half_psi():
    """Within 3 % [P]."""
    assert inlet_pressure(400 * HP)[0] == pytest.approx(6.5, rel=0.03)


def test_water_at_that_pressure_boils_near_170_f():
    """Within 5 F [P]."""
    assert abs(fahrenheit(water.boiling_temperature(6.5 * PSI)) - 170) <= 5


def test_the_pressure_would_reach_zero_near_950_hp():
    """Within 3 % [P]; found by bisection."""
    low, high = 400.0, 2000.0
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (middle, high) if inlet_pressure(middle * HP)[0] > 0 else (low, middle)
    assert low == pytest.approx(950, rel=0.03)


def test_a_boat_at_the_inlet_s_own_speed_gets_that_pressure_back():
    """[P]: solved for the boat speed at which the inlet's speed is the boat's."""
    speed = 5.0
    for _ in range(100):
        speed = inlet_pressure(400 * HP, speed)[1].inlet_speed
    assert inlet_pressure(400 * HP, speed)[0] == pytest.approx(14.7, rel=1e-6)
