"""Slip against published arithmetic of the affinity law, the formulas typed again, and its verdicts."""

import math

import numpy as np
import pytest

from headwater import jet, slip, wording
from headwater.slip import Seen, Slip


@pytest.mark.parametrize(("factor", "ratio"), [(1.03, 0.915), (1.05, 0.864), (1.10, 0.751)])
def test_absorbed_power_of_a_slipping_pump(factor, ratio):
    """k^-3, affinity law [D]; half the last digit."""
    assert abs(slip.absorbed_power_ratio(factor) - ratio) <= 5e-4


def test_five_percent_of_power_is_under_two_percent_of_rpm():
    """A 5 % power error is 1.6 % rpm, affinity law [D]; half the last digit."""
    full, more = (slip.expected_rpm(power, 3.4e-6) for power in (220e3, 1.05 * 220e3))
    assert abs(100 * (more / full - 1) - 1.6) <= 0.05


def test_relations_typed_again_on_arrays():
    """N = (P/c)^(1/3), and the power that k leaves, on a grid [V]; float and array alike."""
    power, absorption = np.meshgrid(np.linspace(2e3, 600e3, 40), np.geomspace(5e-7, 2e-5, 20))
    found = slip.expected_rpm(power, absorption)
    np.testing.assert_allclose(found, np.cbrt(power / absorption), rtol=1e-13)
    assert found[7, 11] == pytest.approx(slip.expected_rpm(float(power[7, 11]), float(absorption[7, 11])))
    k = np.linspace(0.8, 1.5, 71)
    np.testing.assert_allclose(slip.absorbed_power_ratio(k), 1 / (k * k * k), rtol=1e-13)


def test_expected_rpm_undoes_the_absorption():
    """What one unit of two takes at the wide-open rpm turns it just there [D]."""
    absorption = jet.absorption(400e3, 4200.0, 2)
    assert slip.expected_rpm(200e3, absorption) == pytest.approx(4200.0, rel=1e-13)


def test_absorbed_power_is_what_the_pump_takes_of_the_engine():
    """A pump that takes a share of c N^3 turns k times as fast on the same power [D]."""
    for share in (0.75, 0.9, 1.0):
        k = slip.expected_rpm(100e3, share * 3e-6) / slip.expected_rpm(100e3, 3e-6)
        assert slip.absorbed_power_ratio(k) == pytest.approx(share, rel=1e-13)


def test_band_of_k_typed_again():
    """Expected 3.9 to 4.2 thousand about 4000, and 1 % of the reading: in quadrature in the logarithm."""
    found = slip.judge(4100.0, 4000.0, 3900.0, 4200.0)
    assert found.factor == pytest.approx(4100 / 4000)
    down = (math.log(4200 / 4000) ** 2 + math.log(1.01) ** 2) ** 0.5
    up = (math.log(4000 / 3900) ** 2 + math.log(1.01) ** 2) ** 0.5
    assert found.low == pytest.approx(1.025 / math.e**down)
    assert found.high == pytest.approx(1.025 * math.e**up)


def test_band_of_k_is_that_of_many_draws():
    """Power known to 5 %, rpm read to 1 %: 95 % of 200,000 draws, within 2 % of the band's half-width."""
    rng = np.random.default_rng(3)
    sigma = np.log1p([0.05, 0.01]) / 1.959964
    power, reading = rng.normal(0, sigma, (200_000, 2)).T
    draws = 4100 * np.exp(reading) / slip.expected_rpm(200e3 * np.exp(power), 200e3 / 4000**3)
    ends = [slip.expected_rpm(200e3 * factor, 200e3 / 4000**3) for factor in (1 / 1.05, 1.05)]
    found = slip.judge(4100.0, 4000.0, *ends)
    half = math.log(found.high / found.low) / 2
    assert np.log(np.quantile(draws, [0.025, 0.975])) == pytest.approx(
        np.log([found.low, found.high]), abs=0.02 * half
    )


@pytest.mark.parametrize(
    ("seen", "code", "under"),
    [
        (3700.0, "suspect", True),
        (3920.0, "suspect", True),
        (3930.0, "within_reading", False),
        (4000.0, "within_reading", False),
        (4070.0, "within_reading", False),
        (4085.0, "suspect", False),
        (4195.0, "suspect", False),
        (4210.0, "slipping", False),
        (4600.0, "slipping", False),
    ],
)
def test_verdict_on_an_rpm(seen, code, under):
    """Power known to 5 %: k within 1.9 % says nothing; slipping only where its low side is over 1.03 [P]."""
    expected = [4000 * factor ** (1 / 3) for factor in (1.0, 1 / 1.05, 1.05)]
    found = slip.judge(seen, *expected)
    assert (found.code, found.under) == (code, under)


def reading(group, factor, reach=0.02):
    low, high = factor * (1 - reach), factor * (1 + reach)
    return Seen(Slip(factor, low, high, "unused"), group)


@pytest.mark.parametrize(
    ("seen", "expected"),
    [
        ([], "unknown"),
        ([reading("low", 1.10)], "unknown"),
        ([reading("low", 1.10), reading("low", 1.11)], "unknown"),
        ([reading("low", 1.10), reading("low", 1.20)], "unknown"),
        ([reading("low", 1.10), reading("high", 1.10)], "wear"),
        ([reading("low", 1.09), reading("high", 1.10), reading("running", 1.11)], "wear"),
        ([reading("low", 1.00), reading("high", 1.10)], "air"),
        ([reading("low", 1.10), reading("high", 1.10), reading("running", 1.02)], "air"),
        ([reading("low", 1.05), reading("high", 1.15)], "air"),
        ([reading("low", 0.90), reading("high", 1.03)], "air"),
        ([reading("low", 1.00), reading("high", 1.03)], "unknown"),
        ([reading("low", 1.00), reading("high", 1.00)], "unknown"),
        ([reading("low", 0.90), reading("high", 0.97)], "unknown"),
        ([reading("low", 0.90), reading("high", 0.90)], "unknown"),
    ],
)
def test_cause_is_air_where_it_changes_and_wear_where_it_does_not(seen, expected):
    """Air changes with place or speed past the bands, wear is the same everywhere [P]; in any order."""
    assert slip.cause(seen) == expected
    assert slip.cause(seen[::-1]) == expected


def test_what_to_do_once_it_let_go_is_said_with_the_same_figures():
    """To idle, count two, feed in again 200 rpm lower [P]."""
    assert slip.LETS_GO_EASE == 200.0
    assert f"count two, feed in again {slip.LETS_GO_EASE:.0f} rpm lower" in wording.LETS_GO
