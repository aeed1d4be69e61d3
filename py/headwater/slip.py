"""Slip: the rpm that she turns against the rpm that her power should give.

A pump full of solid water takes c N^3. With air or vapour in it, or a worn ring, it takes less, and she turns
faster for the same power.
"""

import math
from collections.abc import Sequence
from typing import Any, NamedTuple

from headwater.tried import RPM_SCATTER

SLIPPING = 1.03  # of rpm seen over expected, low side, from where she slips for certain [P]
SHARE_DOUBT = 0.05  # of a share of the power, relative [P]
SPEED_DOUBT = 0.03  # of a speed by GPS through the water, relative [P]
NEAR_PAIR = 0.15  # of a logged speed, within which one pair tells [P]
LETS_GO_EASE = 200.0  # rpm lower to feed in again once it let go, after idle [P]


class Slip(NamedTuple):
    """An rpm seen against the one expected."""

    factor: float  # k, seen over expected
    low: float  # 2.5 % point
    high: float
    code: str  # within_reading, suspect, slipping

    @property
    def under(self) -> bool:
        """Whether she turns fewer than expected, past the readings: suspect, but nothing slips."""
        return self.high < 1


class Seen(NamedTuple):
    """A slip and where it was seen."""

    slip: Slip
    group: str  # altitude or speed it belongs to, named alike for readings that are alike


def expected_rpm(power: Any, absorption: Any) -> Any:
    """Engine rpm that a power turns while the pump is full, N = (P/c)^(1/3).

    :param power: of one unit [W]
    :param absorption: of one unit, see :func:`headwater.jet.absorption` [W min3]
    :returns: [1/min]
    Source: pump affinity law [V], that it hardly changes with boat speed [S].
    """
    return (power / absorption) ** (1 / 3)


def absorbed_power_ratio(factor: Any) -> Any:
    """Power that the pump takes at an rpm, over what it takes there while full: k^-3.

    :param factor: k, rpm seen over expected [-]
    :returns: [-]
    Source: affinity law at the same engine power [D].
    """
    return factor**-3


def expected_wide_open(
    wide_open: tuple[float, float, float], share: float, rpm_doubt: float
) -> tuple[float, float, float]:
    """Engine rpm that a share of the power gives here, low, middle and high.

    :param wide_open: engine rpm wide open here, low, middle and high, as the engine is known [1/min]
    :param share: of the power wide open gives, 0 to 1
    :param rpm_doubt: 95 % half-width of the wide-open rpm, relative
    :returns: [1/min]
    Source: :func:`expected_rpm`; a share is known to 5 % of the power [P].
    """
    low, middle, high = wide_open
    held = 0.0 if share >= 1 else SHARE_DOUBT / 3
    down = math.hypot(math.log(middle / low), rpm_doubt, held)
    up = math.hypot(math.log(high / middle), rpm_doubt, held)
    here = expected_rpm(share, 1.0) * middle
    return here * math.exp(-down), here, here * math.exp(up)


def expected_by_pairs(
    pairs: Sequence[tuple[float, float]], boat_speed: float
) -> tuple[float, float, float] | None:
    """Engine rpm that the boat's own logged pairs of speed and rpm give at a speed; none where none is near.

    :param pairs: boat speed [m/s] and engine rpm [1/min] of each
    :param boat_speed: through the water [m/s]
    :returns: low, middle and high [1/min]
    Source: straight line between the pairs about it, else in step with the nearest [P].
    """
    under = max((pair for pair in pairs if pair[0] <= boat_speed), default=None)
    over = min((pair for pair in pairs if pair[0] >= boat_speed), default=None)
    if under and over:
        part = (boat_speed - under[0]) / (over[0] - under[0]) if over[0] > under[0] else 0.0
        here = under[1] + part * (over[1] - under[1])
    else:
        near = under or over
        if near is None or abs(boat_speed / near[0] - 1) > NEAR_PAIR:
            return None
        here = near[1] * boat_speed / near[0]
    reach = math.hypot(RPM_SCATTER, SPEED_DOUBT)
    return here * math.exp(-reach), here, here * math.exp(reach)


def judge(seen_rpm: float, expected_rpm: float, low: float, high: float) -> Slip:
    """Whether an rpm lies past what the readings explain, and to which side.

    The tach's scale is in both rpm and cancels; the reading's scatter joins the span of what was expected.

    :param seen_rpm: engine rpm read [1/min]
    :param expected_rpm: engine rpm that the power should turn [1/min]
    :param low: of the expected rpm, 2.5 % point [1/min]
    :param high: of the expected rpm, 97.5 % point [1/min]
    Source: suspect where the band leaves out 1, slipping where its low side is over 1.03 [P].
    """
    factor, scatter = seen_rpm / expected_rpm, math.log1p(RPM_SCATTER)
    down = math.hypot(math.log(high / expected_rpm), scatter)
    up = math.hypot(math.log(expected_rpm / low), scatter)
    least, most = factor * math.exp(-down), factor * math.exp(up)
    code = "within_reading" if least <= 1 <= most else "suspect"
    return Slip(factor, least, most, "slipping" if least > SLIPPING else code)


def cause(seen: Sequence[Seen]) -> str:
    """What makes her slip: air (or vapour), wear, or unknown.

    Air where k is over 1 and bands of two groups lie apart; wear where k is over 1 in two groups or more, and
    no bands lie apart. All else is unknown: a single group, or a group in which nothing slips for certain.

    :param seen: slips, each with the altitude or speed it was seen at
    :returns: air, wear or unknown
    Source: air changes with place and speed, a worn ring or impeller does not [P].
    """
    if any(
        one.group != other.group and one.slip.low > max(1.0, other.slip.high)
        for one in seen
        for other in seen
    ):
        return "air"
    everywhere = len({one.group for one in seen}) > 1 and all(one.slip.low > 1 for one in seen)
    return "wear" if everywhere else "unknown"
