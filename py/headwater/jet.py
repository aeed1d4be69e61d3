"""The jet unit: how much water a power moves, how fast it leaves, and the thrust that makes.

Symbols follow ITTC waterjet usage. A boat has one, two or three alike units that share its power equally;
everything here is of one unit, in SI, and works on a float or a numpy array alike.
"""

import math
from typing import Any, NamedTuple

GRAVITY = 9.80665  # m/s2, standard
_NEWTON_STEPS = 4  # from just above the root of a convex cubic: full float precision for any power and speed


class Unit(NamedTuple):
    """One jet unit as the relations need it, made by :func:`unit`."""

    nozzle_area: Any  # A_n [m2]
    inlet_area: Any  # A_1, just ahead of the impeller [m2]
    wake_share: Any  # 1 - w [-]
    ram_share: Any  # 1 - zeta [-]
    intake_loss: Any  # K_b on the V_1 head [-]
    outlet_factor: Any  # 1 + psi + K_b (A_n/A_1)^2 [-]
    efficiency: Any  # eta_p eta_m [-]
    absorption: Any  # engine power of this unit over engine rpm cubed [W min3]
    gear_ratio: Any  # engine rpm over impeller rpm [-]


def unit(
    nozzle_diameter: Any,
    impeller_diameter: Any,
    hub_diameter: Any,
    wake_fraction: Any,
    ram_loss: Any,
    intake_loss: Any,
    nozzle_loss: Any,
    pump_efficiency: Any,
    driveline_efficiency: Any,
    absorption: Any,
    gear_ratio: Any,
) -> Unit:
    """One jet unit from its measures and coefficients.

    :param nozzle_diameter: fixed bore of the nozzle [m]
    :param impeller_diameter: bore of the wear ring at the impeller's front [m]
    :param hub_diameter: hub or shaft just ahead of the blades [m]
    :param wake_fraction: w [-]
    :param ram_loss: zeta, share of the ram head lost in the intake [-]
    :param intake_loss: K_b on the velocity head ahead of the impeller [-]
    :param nozzle_loss: psi on the velocity head of the jet [-]
    :param pump_efficiency: eta_p [-]
    :param driveline_efficiency: eta_m [-]
    :param absorption: power of one unit over engine rpm cubed, see :func:`absorption` [W min3]
    :param gear_ratio: engine rpm over impeller rpm [-]
    Source: van Terwisga 1996; Allison 1993 [M]; areas [D].
    """
    nozzle_area = math.pi / 4 * nozzle_diameter**2
    inlet_area = math.pi / 4 * (impeller_diameter**2 - hub_diameter**2)
    return Unit(
        nozzle_area,
        inlet_area,
        1 - wake_fraction,
        1 - ram_loss,
        intake_loss,
        1 + nozzle_loss + intake_loss * (nozzle_area / inlet_area) ** 2,
        pump_efficiency * driveline_efficiency,
        absorption,
        gear_ratio,
    )


def blocked(unit: Unit, grate_loss: Any) -> Unit:
    """A unit with something on its grate.

    :param grate_loss: K_grate on the velocity head ahead of the impeller, added to K_b [-]
    Source: loss coefficients add [D].
    """
    over = unit.nozzle_area / unit.inlet_area
    return unit._replace(
        intake_loss=unit.intake_loss + grate_loss, outlet_factor=unit.outlet_factor + grate_loss * over**2
    )


def absorption(engine_power: Any, wide_open_rpm: Any, jets: Any) -> Any:
    """What one unit absorbs, over engine rpm cubed: P = c N^3.

    :param engine_power: of all units together at ``wide_open_rpm`` [W]
    :param wide_open_rpm: engine rpm that the boat really turns [1/min]
    :param jets: number of units
    :returns: [W min3]
    Source: pump affinity law [V], that it hardly changes with boat speed [S].
    """
    return engine_power / jets / wide_open_rpm**3


def ram(unit: Unit, boat_speed: Any) -> Any:
    """Twice the ram head times g that reaches the pump: (1 - zeta)((1 - w) V_0)^2.

    :param boat_speed: V_0 through the water [m/s]
    :returns: [m2/s2]
    Source: van Terwisga 1996 [M].
    """
    return unit.ram_share * (unit.wake_share * boat_speed) ** 2


def jet_speed(unit: Unit, power: Any, boat_speed: Any, density: Any) -> Any:
    """Speed at which the water leaves the nozzle, V_j.

    :param power: brake power of this unit, over 0 [W]
    :param boat_speed: V_0 through the water [m/s]
    :param density: of the water [kg/m3]
    :returns: [m/s]
    Source: power balance rho g Q H = eta P of one unit [D].
    """
    drive = 2 * unit.efficiency * power / (density * unit.nozzle_area)
    return balance(unit.outlet_factor, ram(unit, boat_speed), drive)


def balance(outlet_factor: Any, ram: Any, drive: Any, steps: int = _NEWTON_STEPS) -> Any:
    """The jet speed at which a V_j^3 - r V_j = q: what the jet takes is what the engine gives.

    :param outlet_factor: a = 1 + psi + K_b (A_n/A_1)^2 [-]
    :param ram: r, see :func:`ram` [m2/s2]
    :param drive: q = 2 eta P/(rho A_n), over 0 [m3/s3]
    :param steps: of Newton's method
    :returns: [m/s]
    Source: power balance of one unit, a cubic [D]; its root by Newton's method in a fixed number of steps.
    """
    x = ((drive / outlet_factor) ** (2 / 3) + ram / outlet_factor) ** 0.5  # never below the root
    for _ in range(steps):
        xx = outlet_factor * x * x
        x = (2 * xx * x + drive) / (3 * xx - ram)
    return x


def pump_head(unit: Unit, jet_speed: Any, boat_speed: Any) -> Any:
    """Head that the pump must add, H; the nozzle's height over the water is neglected.

    :param jet_speed: V_j [m/s]
    :param boat_speed: V_0 through the water [m/s]
    :returns: [m]
    Source: energy balance from the free stream to the nozzle [D].
    """
    return (unit.outlet_factor * jet_speed**2 - ram(unit, boat_speed)) / (2 * GRAVITY)


def thrust(unit: Unit, jet_speed: Any, boat_speed: Any, density: Any, thrust_deduction: Any = 0.0) -> Any:
    """Thrust of one unit; negative where the boat outruns the jet.

    :param jet_speed: V_j [m/s]
    :param boat_speed: V_0 through the water [m/s]
    :param density: of the water [kg/m3]
    :param thrust_deduction: t [-]
    :returns: [N]
    Source: momentum balance [D]; t from Eslamdoost et al. 2018, Ocean Eng. 152 [S].
    """
    flow = unit.nozzle_area * jet_speed
    return (1 - thrust_deduction) * density * flow * (jet_speed - unit.wake_share * boat_speed)
