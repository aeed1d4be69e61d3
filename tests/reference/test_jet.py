"""One jet unit against its regression case, a textbook case, closed forms and the formulas typed again."""

import math

import numpy as np
import pytest

from headwater import jet, suction

RHO = 999.1
POWER = 220e3


def unit(**more):
    """The regression boat's unit."""
    given = {
        "nozzle_diameter": 0.150,
        "impeller_diameter": 0.215,
        "hub_diameter": 0.07,
        "wake_fraction": 0.08,
        "ram_loss": 0.20,
        "intake_loss": 0.10,
        "nozzle_loss": 0.03,
        "pump_efficiency": 0.80,
        "driveline_efficiency": 0.97,
        "absorption": POWER / 4000**3,
        "gear_ratio": 1.0,
    }
    return jet.unit(**given | more)


@pytest.mark.parametrize(
    ("speed", "jet_speed", "flow", "thrust"),
    [(0, 26.3284, 0.4653, 12238.55), (10, 27.1372, 0.4796, 8594.09), (20, 29.5501, 0.5222, 5817.30)],
)
def test_regression_case(speed, jet_speed, flow, thrust):
    """220 kW through a 150 mm nozzle [D]; half the last digit."""
    found = jet.jet_speed(unit(), POWER, speed, RHO)
    assert abs(found - jet_speed) <= 5e-5
    assert abs(found * unit().nozzle_area - flow) <= 5e-5
    assert abs(jet.thrust(unit(), found, speed, RHO) - thrust) <= 5e-3


def test_textbook_momentum_case():
    """Jet 20 m/s over the ground, 0.18 m2, boat 30 km/h, inlets amidships, no ram: 102.0 kN, 41.52 % [V]."""
    boat = 30 / 3.6
    jet_speed = 20 + boat  # through the water
    thrust = 1000 * 0.18 * jet_speed * 20
    made = unit(nozzle_diameter=math.sqrt(4 * 0.18 / math.pi), impeller_diameter=1.0, wake_fraction=0.0)
    assert abs(jet.thrust(made, jet_speed, boat, 1000.0) - thrust) <= 1e-6
    assert abs(thrust / 1000 - 102.0) <= 0.05
    power_in_jet = 1000 * 0.18 * jet_speed * jet_speed**2 / 2
    assert abs(100 * thrust * boat / power_in_jet - 41.52) <= 0.005


@pytest.mark.parametrize("power", [5e3, 50e3, 220e3, 900e3])
def test_closed_form_at_rest(power):
    """V_j = (2 eta P/(rho A_n (1 + psi')))^(1/3) [D]."""
    made = unit()
    loss = 0.03 + 0.10 * (made.nozzle_area / made.inlet_area) ** 2
    expected = (2 * 0.80 * 0.97 * power / (RHO * made.nozzle_area * (1 + loss))) ** (1 / 3)
    assert jet.jet_speed(made, power, 0.0, RHO) == pytest.approx(expected, rel=1e-14)


@pytest.mark.parametrize("speed", [0.0, 3.0, 12.0, 25.0])
@pytest.mark.parametrize("power", [2e3, 60e3, 220e3, 1.5e6])
def test_jet_speed_balances_the_power(power, speed):
    """rho g Q H = eta P, the head typed again from its terms [D]; solved here by bisection."""

    def surplus(v):
        flow = made.nozzle_area * v
        v_1 = flow / made.inlet_area
        head = (1.03 * v * v - 0.8 * (0.92 * speed) ** 2 + 0.10 * v_1 * v_1) / (2 * 9.80665)
        return RHO * 9.80665 * flow * head - 0.80 * 0.97 * power

    made = unit()
    low, high = 0.92 * speed * 0.8**0.5 / 1.1, 400.0
    for _ in range(200):
        middle = (low + high) / 2
        low, high = (low, middle) if surplus(middle) > 0 else (middle, high)
    found = jet.jet_speed(made, power, speed, RHO)
    assert found == pytest.approx(low, rel=1e-9)
    assert jet.pump_head(made, found, speed) * RHO * 9.80665 * made.nozzle_area * found == pytest.approx(
        0.80 * 0.97 * power, rel=1e-9
    )


def test_thrust_turns_negative_where_the_boat_outruns_the_jet():
    assert jet.thrust(unit(), 10.0, 20.0, RHO) < 0


def test_thrust_deduction_takes_its_share():
    """Eslamdoost et al. 2018 [S]."""
    assert jet.thrust(unit(), 25.0, 5.0, RHO, 0.05) == pytest.approx(
        0.95 * jet.thrust(unit(), 25.0, 5.0, RHO)
    )


def test_absorption_is_the_affinity_law():
    """P = c N^3 [V]: half the rpm, an eighth of the power; two jets share it."""
    assert jet.absorption(240e3, 4000.0, 2) * 2000.0**3 == pytest.approx(240e3 / 2 / 8)


def test_arrays_and_scalars_agree():
    speeds, powers = np.linspace(0, 25, 40), np.linspace(1e4, 4e5, 40)
    expected = [jet.jet_speed(unit(), float(p), float(v), RHO) for p, v in zip(powers, speeds, strict=True)]
    np.testing.assert_allclose(jet.jet_speed(unit(), powers, speeds, RHO), expected, rtol=1e-12)
    rpm = np.linspace(1000, 5000, 40)
    states = [suction.state(unit(), 9.0, RHO, float(n), float(v)) for n, v in zip(rpm, speeds, strict=True)]
    np.testing.assert_allclose(
        suction.state(unit(), 9.0, RHO, rpm, speeds).npsh_available,
        [s.npsh_available for s in states],
        rtol=1e-12,
    )
