"""The hull: planing drag in balance, the hump over it, wind, and shallow water.

Deadrise and trim are in degrees, as the published formulas take them. Everything works on a float or a numpy
array alike; ``xp`` is ``math`` or ``numpy``.
"""

import math
from collections.abc import Sequence
from typing import Any, NamedTuple

from headwater.jet import GRAVITY

HEIGHT_OVER_BEAM = 0.28  # VCG, centre of gravity over the keel [P]
THRUST_BELOW = 0.2  # f, thrust line under the centre of gravity [m] [P]
THRUST_ANGLE = 0.0  # eps, thrust line up relative to the keel [rad] [P]
ROWS = {"back": 0.30, "middle": 0.45, "front": 0.60}  # where people sit, share of the length [P]
CARGO = 0.40  # where fuel and gear lie, share of the length [P]
ROUGHNESS = 0.0004  # added to the friction coefficient [V]
PLANE_FROUDE = 2.8  # volume Froude number at which she is on plane [P]
ALLOWANCE = (0.85, 1.07, 1.35)  # on the drag for spray, air and the intake opening: low, middle, high [P]
SHALLOW_ALLOWANCE = (0.85, 1.07, 1.8)  # the same in water under SHALLOW [P]
SHALLOW = 1.0  # [m] [P]
DRAG_AREA = 3.0 * 0.8  # C_d A of boat and people in the wind [m2] [P]
WINDS = {"calm": 0.0, "breeze": 5.0, "strong": 12.0}  # from ahead [m/s] [P]
GRAVEL_SPEED = 0.5  # of water along the bed that lifts gravel [m/s] [P]
_TRIMS = (0.1, 30.0)  # between which the trim is looked for [deg]
_SPEEDS, _RANGE_TRIMS, _LONGEST = (0.60, 13.0), (2.0, 15.0), 4.0  # C_v, tau [deg], lambda: Savitsky's range
_STEPS = 3  # of the wetted length: drag within 1e-4
_LIFT_STEPS = 2  # of the flat plate's lift, from a start good to a few percent
_BOUND_STEPS = 4  # of the wetted lengths at the ends of the trims
_LEAST_SHARE = 0.01  # of the dynamic pressure under the bottom; only the absurd comes near


class Hull(NamedTuple):
    """A loaded hull as the relations need it, made by :func:`hull`."""

    beam: Any  # b, between the chines [m]
    deadrise: Any  # beta [deg]
    length_centre_of_gravity: Any  # LCG, ahead of the transom [m]
    height: Any  # VCG, centre of gravity over the keel [m]
    thrust_below: Any  # f, thrust line under the centre of gravity [m]
    thrust_angle: Any  # eps, thrust line up relative to the keel [rad]
    mass: Any  # [kg]


class Running(NamedTuple):
    """A hull in balance at a speed."""

    trim: Any  # tau [deg]
    wetted_length: Any  # lambda, mean wetted length over the beam [-]
    drag: Any  # [N]


def hull(
    beam: Any,
    deadrise: Any,
    length_centre_of_gravity: Any,
    mass: Any,
    height_over_beam: Any = HEIGHT_OVER_BEAM,
    thrust_below: Any = THRUST_BELOW,
    thrust_angle: Any = THRUST_ANGLE,
) -> Hull:
    """A loaded hull from its measures, the heights typical unless given.

    :param beam: b, between the chines [m]
    :param deadrise: beta [deg]
    :param length_centre_of_gravity: LCG, ahead of the transom [m]
    :param mass: with all aboard [kg]
    :param height_over_beam: VCG, centre of gravity over the keel, over the beam [-]
    :param thrust_below: f, thrust line under the centre of gravity [m]
    :param thrust_angle: eps, thrust line up relative to the keel [rad]
    Source: typical of small open boats [P].
    """
    height = height_over_beam * beam
    return Hull(beam, deadrise, length_centre_of_gravity, height, thrust_below, thrust_angle, mass)


def friction_coefficient(reynolds: Any, xp: Any = math) -> Any:
    """Friction coefficient of a smooth plate, C_F.

    :param reynolds: Re, over 100 [-]
    Source: ITTC-57 line [V].
    """
    return 0.075 / (xp.log10(reynolds) - 2) ** 2


def volume_froude(speed: Any, mass: Any, density: Any) -> Any:
    """Froude number on the cube root of the displaced volume, Fn_v.

    :param speed: through the water [m/s]
    :param mass: [kg]
    :param density: of the water [kg/m3]
    Source: definition [D].
    """
    return speed / speed_at_volume_froude(1.0, mass, density)


def speed_at_volume_froude(number: Any, mass: Any, density: Any) -> Any:
    """Speed at which the volume Froude number is this.

    :param number: Fn_v [-]
    :param mass: [kg]
    :param density: of the water [kg/m3]
    :returns: [m/s]
    Source: definition [D].
    """
    return number * (GRAVITY * (mass / density) ** (1 / 3)) ** 0.5


def hump_factor(centre_over_beam: Any, number: Any, xp: Any = math) -> Any:
    """How many times the planing drag she takes about the hump, M.

    :param centre_over_beam: LCG over the beam [-]
    :param number: Fn_v, from 1 [-]
    Source: Blount and Fox 1976 [V].
    """
    past, share = number - 0.85, centre_over_beam
    return 0.98 + 2 * share**1.45 * xp.exp(-2 * past) - 3 * share * xp.exp(-3 * past)


def planing(
    hull: Hull, speed: Any, density: Any, viscosity: Any, roughness: Any = ROUGHNESS, xp: Any = math
) -> Running:
    """Trim, wetted length and drag of a hull in balance at a speed.

    Extrapolates outside the range that :func:`within` tells. Where she does not balance between 0.1 and 30
    degrees she is held at the nearer end.

    :param speed: V through the water, over 0 [m/s]
    :param density: of the water [kg/m3]
    :param viscosity: dynamic, of the water [Pa s]
    :param roughness: added to the friction coefficient [-]
    Source: Savitsky 1964, Marine Technology 1 [V]; solved by Newton's method in the wetted length,
    of which the trim is a closed form [D].
    """
    beam, deadrise, centre, height, below, up, mass = hull
    sin, cos = xp.sin, xp.cos
    weight, square = mass * GRAVITY, speed * speed
    flat = _flat_lift(weight / (0.5 * density * square * beam * beam), 0.0065 * deadrise)  # C_L0
    steep = 0.0055 * GRAVITY * beam / square  # 0.0055/C_v^2
    shortest, longest = _wetted_length(flat, _TRIMS[1], steep), _wetted_length(flat, _TRIMS[0], steep)
    dead = deadrise * math.pi / 180
    arm = height - beam / 4 * xp.tan(dead) - below  # a - f
    friction = density * beam * beam / (2 * cos(dead) * weight)  # D_f/Delta over V_m^2 lambda C_F
    per_speed = density * beam / viscosity  # Re over V_m lambda
    spread = 5.21 * 0.0055 / steep  # 5.21 C_v^2

    def balance(lam: Any) -> tuple[Any, Any, Any, Any]:
        """Trim, drag over weight, the arm left unbalanced, and how fast wetted length takes it up."""
        root = lam**0.5
        lift = root * (0.0120 + steep * lam * lam)  # C_L0/tau^1.1
        tau = math.pi / 180 * (flat / lift) ** (1 / 1.1)
        sine, cosine = sin(tau), cos(tau)
        dynamic = 0.0120 * root * flat / lift  # C_Ld
        under = 1 - (dynamic - 0.0065 * deadrise * dynamic**0.6) / (lam * cosine)  # (V_m/V)^2
        v_m = speed * (0.5 * (under + _LEAST_SHARE + abs(under - _LEAST_SHARE))) ** 0.5
        drag = friction * v_m * v_m * lam * (friction_coefficient(v_m * lam * per_speed, xp) + roughness)
        lever = (1 - sine * sin(tau + up)) / cosine
        ahead, ahead_slope = _centre_of_pressure(lam, spread)
        left = centre - beam * ahead - (below * sine - drag * arm) / lever
        turn = -tau / 1.1 * (0.5 / lam + 2 * steep * lam * root / lift)  # d tau/d lambda
        slope = beam * ahead_slope + below * turn / (cosine * cosine) - drag * arm / lam  # near enough
        return tau, sine / cosine + drag / cosine, left, slope

    share = centre / beam
    lam = share / (0.75 - 0.42 * share / (share + spread**0.5))  # pressure roughly under the weight
    ahead, ahead_slope = _centre_of_pressure(lam, spread)
    lam = _between(lam + (share - ahead) / ahead_slope, shortest, longest)
    for _ in range(_STEPS):
        _, _, left, slope = balance(lam)
        lam = _between(lam + left / slope, shortest, longest)
    tau, drag, _, _ = balance(lam)
    return Running(180 / math.pi * tau, lam, weight * drag)


def _flat_lift(lift: Any, dead: Any) -> Any:
    """C_L0 of a flat plate from C_Lb = C_L0 - dead C_L0^0.60."""
    found = lift + dead * (lift + dead**2.5) ** 0.6  # exact where either is nothing
    for _ in range(_LIFT_STEPS):
        taken = dead * found**0.6
        found = (lift + 0.4 * taken) / (1 - 0.6 * taken / found)
    return found


def _wetted_length(flat: Any, trim: float, steep: Any) -> Any:
    """Lambda from C_L0 = tau^1.1 (0.0120 lambda^0.5 + steep lambda^2.5)."""
    y = flat / trim**1.1
    slow, fast = (y / steep) ** 0.2, y / 0.0120  # either term alone
    root = 0.5 * (slow + fast - abs(slow - fast))  # never below the root of a convex function
    for _ in range(_BOUND_STEPS):
        fourth = steep * root**4
        root = (y + 4 * fourth * root) / (0.0120 + 5 * fourth)
    return root * root


def _centre_of_pressure(lam: Any, spread: Any) -> tuple[Any, Any]:
    """C_p lambda, ahead of the transom in beams, and its slope over lambda."""
    over = lam * lam / (spread + 2.39 * lam * lam)
    return lam * (0.75 - over), 0.75 - over * (3 - 4.78 * over)


def _between(value: Any, low: Any, high: Any) -> Any:
    return 0.5 * (low + high + abs(value - low) - abs(value - high))


def within(hull: Hull, speed: Any, running: Running) -> Any:
    """Whether a hull in balance lies within the range of Savitsky's tests: C_v, trim and wetted length.

    :param speed: V through the water [m/s]
    :param running: see :func:`planing`
    Source: Savitsky 1964 [V].
    """
    c_v = speed / (GRAVITY * hull.beam) ** 0.5
    trim, lam = running.trim, running.wetted_length
    return (
        (c_v >= _SPEEDS[0])
        & (c_v <= _SPEEDS[1])
        & (trim >= _RANGE_TRIMS[0])
        & (trim <= _RANGE_TRIMS[1])
        & (lam <= _LONGEST)
    )


def hump_drag(hull: Hull, speed: Any, density: Any, viscosity: Any, xp: Any = math) -> Any:
    """Drag of the water for an allowance of one, M D.

    :param speed: V through the water, from Fn_v = 1 [m/s]
    :param density: of the water [kg/m3]
    :param viscosity: dynamic, of the water [Pa s]
    :returns: [N]
    Source: Savitsky 1964; Blount and Fox 1976 [V].
    """
    number = volume_froude(speed, hull.mass, density)
    factor = hump_factor(hull.length_centre_of_gravity / hull.beam, number, xp)
    return factor * planing(hull, speed, density, viscosity, ROUGHNESS, xp).drag


def table(hull: Hull, density: float, viscosity: float, speeds: Sequence[float]) -> list[float]:
    """Drag of the water for an allowance of one at several speeds.

    :param density: of the water [kg/m3]
    :param viscosity: dynamic, of the water [Pa s]
    :param speeds: V through the water, from Fn_v = 1 [m/s]
    :returns: [N]
    Source: see :func:`hump_drag` [V].
    """
    return [hump_drag(hull, speed, density, viscosity) for speed in speeds]


def critical_speed(depth: Any) -> Any:
    """Speed at which waves in shallow water keep up with her, Fn_h = 1.

    :param depth: of the water [m]
    :returns: [m/s]
    Source: definition [D].
    """
    return (GRAVITY * depth) ** 0.5


def wind_factor(air_density: Any) -> Any:
    """Wind's drag over the square of the speed through the air.

    :param air_density: [kg/m3]
    :returns: [N s2/m2]
    Source: drag coefficient 0.8 on 3 m2 [P].
    """
    return 0.5 * air_density * DRAG_AREA


def depth_to_spare_bed(flow: Any) -> Any:
    """Water needed under the intake at rest so that it lifts no gravel.

    :param flow: Q of one unit [m3/s]
    :returns: [m]
    Source: the intake as a sink over a half space, Q/(2 pi r^2) [D], at :data:`GRAVEL_SPEED` [P].
    """
    return (flow / (2 * math.pi * GRAVEL_SPEED)) ** 0.5
