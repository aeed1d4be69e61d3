"""The suction side: the head the water brings to the impeller, and the head the impeller asks for.

NPSH is net positive suction head, all heads in metres of water. S is the suction specific speed in metric
units: impeller rev/min, m3/s and m. Everything is of one unit and works on a float or a numpy array alike.
"""

from typing import Any, NamedTuple

from headwater import jet
from headwater.jet import GRAVITY, Unit

S_FROM_US = 0.01936287  # metric S over US S (rev/min, US gal/min, ft), from the units' definitions [V]
S_FROM_DIMENSIONLESS = 52.919  # metric S over omega sqrt(Q)/(g NPSH)^0.75 [V]
STEPS = 5  # of the solution for rpm at a speed; at rest the first is exact
FEW_STEPS = 3  # for bands: within 1e-4
ONE_STEP = 1  # for curves: within 1e-3


class State(NamedTuple):
    """One unit at one engine rpm and boat speed."""

    power: Any  # brake power of this unit [W]
    jet_speed: Any  # V_j [m/s]
    flow: Any  # Q [m3/s]
    inlet_speed: Any  # V_1 ahead of the impeller [m/s]
    npsh_available: Any  # [m], may be negative
    impeller_rpm: Any  # N [1/min]


def head_at_rest(air_pressure: Any, vapor_pressure: Any, density: Any, submergence: Any) -> Any:
    """Head over boiling that still water offers at the top of the blades.

    :param air_pressure: [Pa]
    :param vapor_pressure: [Pa]
    :param density: of the water [kg/m3]
    :param submergence: z, water surface above the top of the blade circle, negative when below [m]
    :returns: [m]
    Source: definition of NPSH [D].
    """
    return (air_pressure - vapor_pressure) / (density * GRAVITY) + submergence


def grate_loss(blocked: Any) -> Any:
    """Loss coefficient of a grate that is partly blocked, K_grate on the V_1 head.

    :param blocked: share of its area [-]
    Source: sudden widening behind the free area [D].
    """
    return 0.10 * (1 / (1 - blocked) ** 2 - 1)


def gas_share(surface_share: Any, expansion: Any) -> Any:
    """Share of free gas at the impeller, phi_1.

    :param surface_share: phi_0, at the surface [-]
    :param expansion: air pressure over the static pressure ahead of the impeller [-]
    Source: Boyle's law [D].
    """
    return surface_share * expansion / (1 - surface_share + surface_share * expansion)


def inlet_loss(unit: Unit, inlet_speed: Any) -> Any:
    """Head that the intake takes.

    :param inlet_speed: V_1 ahead of the impeller [m/s]
    :returns: [m]
    Source: loss coefficient K_b on the velocity head [M].
    """
    return unit.intake_loss * inlet_speed**2 / (2 * GRAVITY)


def state(unit: Unit, head: Any, density: Any, rpm: Any, boat_speed: Any) -> State:
    """What one unit does at an engine rpm and a boat speed.

    :param head: at rest, see :func:`head_at_rest` [m]
    :param density: of the water [kg/m3]
    :param rpm: of the engine [1/min]
    :param boat_speed: V_0 through the water [m/s]
    Source: NPSH as total head, so V_1^2/2g is not subtracted [D].
    """
    power = unit.absorption * rpm**3
    ram = jet.ram(unit, boat_speed)
    v_j = jet.balance(unit.outlet_factor, ram, 2 * unit.efficiency * power / (density * unit.nozzle_area))
    flow = unit.nozzle_area * v_j
    v_1 = flow / unit.inlet_area
    available = head + (ram - unit.intake_loss * v_1 * v_1) / (2 * GRAVITY)
    return State(power, v_j, flow, v_1, available, rpm / unit.gear_ratio)


def npsh_required(state: State, suction_specific_speed: Any) -> Any:
    """Head the impeller asks for, NPSHR.

    :param suction_specific_speed: S, metric
    :returns: [m]
    Source: definition of suction specific speed [V].
    """
    return (state.impeller_rpm * state.flow**0.5 / suction_specific_speed) ** (4 / 3)


def speed_asked(state: State) -> Any:
    """The suction specific speed that a state asks of the pump, S_req; its NPSH available must be over 0.

    :returns: S, metric
    Source: definition of suction specific speed [V].
    """
    return state.impeller_rpm * state.flow**0.5 / state.npsh_available**0.75


def static_pressure(state: State, vapor_pressure: Any, density: Any) -> Any:
    """Absolute static pressure ahead of the impeller, p_1, unclamped.

    :param vapor_pressure: [Pa]
    :param density: of the water [kg/m3]
    :returns: [Pa]
    Source: Bernoulli along the intake [D].
    """
    return density * (GRAVITY * state.npsh_available - state.inlet_speed**2 / 2) + vapor_pressure


def rpm_at(
    unit: Unit, head: Any, density: Any, boat_speed: Any, suction_specific_speed: Any, steps: int = STEPS
) -> Any:
    """Engine rpm at which a unit asks just this suction specific speed at a boat speed.

    :param head: at rest, over 0 [m]
    :param density: of the water [kg/m3]
    :param boat_speed: V_0 through the water [m/s]
    :param suction_specific_speed: S, metric
    :param steps: of the solution; fewer leave the error that :data:`FEW_STEPS` says
    :returns: [1/min]
    Source: NPSHA = NPSHR solved for rpm; closed form at rest, else Newton's method in logarithms [D].
    """
    a, r = unit.outlet_factor, jet.ram(unit, boat_speed)
    offered = head + r / (2 * GRAVITY)
    cube = 2 * unit.efficiency * unit.absorption / (density * unit.nozzle_area)  # q over rpm cubed
    loss = unit.intake_loss * (unit.nozzle_area / unit.inlet_area) ** 2 / (2 * GRAVITY)  # over V_j squared
    asked = (unit.nozzle_area**0.5 / (unit.gear_ratio * suction_specific_speed)) ** (4 / 3)
    x = (cube / a) ** (1 / 3)  # V_j over rpm at rest
    rpm = (offered / (loss * x * x + asked * x ** (2 / 3))) ** 0.5
    x = ((x * rpm) ** 2 + r / a) ** 0.5
    for _ in range(steps):
        xx = a * x * x
        x = (2 * xx * x + cube * rpm**3) / (3 * xx - r)
        xx = a * x * x
        follow = 3 * (xx - r) / (3 * xx - r)  # d ln V_j / d ln rpm
        lost = loss * x * x
        required = asked * (rpm * rpm * x) ** (2 / 3)
        used = lost + required
        slope = (2 * follow * lost + (4 + 2 * follow) / 3 * required) / used
        rpm = rpm * (offered / used) ** (1 / slope)
    return rpm


def rpm_slope(unit: Unit, state: State, boat_speed: Any) -> Any:
    """How fast the speed asked rises with rpm, d ln S_req / d ln N; 1.5 h/NPSHA at rest.

    :param boat_speed: V_0 through the water [m/s]
    Source: derivative of the relations above [D].
    """
    a, r = unit.outlet_factor * state.jet_speed**2, jet.ram(unit, boat_speed)
    follow = 3 * (a - r) / (3 * a - r)
    lost = inlet_loss(unit, state.inlet_speed)
    return 1 + follow * (0.5 + 1.5 * lost / state.npsh_available)


def ratio(state: State, suction_specific_speed: Any) -> Any:
    """NPSH available over NPSH required, (S/S_req)^(4/3).

    :param suction_specific_speed: S, metric
    Source: definition of suction specific speed [V].
    """
    return state.npsh_available / npsh_required(state, suction_specific_speed)
