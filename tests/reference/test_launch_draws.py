"""The draws' physics against published values, a library and arithmetic; numbers: physics.md section 6."""

import math

import launch_draws
import numpy as np
import pytest
from launch_draws import drag_at, draw_launch, hull_of, hump, ittc, prior, savitsky, travel
from openplaning import PlaningBoat

from headwater import water

ONE = np.ones(1)
HP = 745.69987
RHO, NU = 999.1, 1.139e-6


@pytest.mark.parametrize(
    ("reynolds", "friction", "half"), [(1e6, 0.0046875, 5e-8), (1e7, 0.003000, 5e-7), (1e8, 0.002083, 5e-7)]
)
def test_friction_line(reynolds, friction, half):
    """ITTC-57 [V]; half the last digit."""
    assert abs(ittc(reynolds) - friction) <= half


@pytest.mark.parametrize(("froude", "factor"), [(1.5, 1.1778), (2.0, 1.1269)])
def test_hump_factor(froude, factor):
    """Blount and Fox 1976 [V], LCG/b 1.2."""
    assert abs(hump(froude, 1.2) - factor) <= 5e-5


def river(speed):
    """The river case: 1800 kg, b 1.8 m, LCG 2.3, VCG .55, beta 12, f .2, no roughness."""
    return savitsky(1.8 * ONE, 12.0, 2.3 * ONE, 0.55 * ONE, 1800 * ONE, speed * ONE, RHO, RHO * NU, 0.2, 0.0)


def test_savitsky_river_case():
    """12 m/s: tau 4.168, lambda 1.8775, D 2344.5 N; half the last digit."""
    trim, lam, drag = (one.item() for one in river(12.0))
    assert abs(trim - 4.168) <= 5e-4
    assert abs(lam - 1.8775) <= 5e-5
    assert abs(drag - 2344.5) <= 0.05


@pytest.mark.parametrize("speed", [8.0, 10.0, 12.0, 15.0, 18.0])
def test_savitsky_agrees_with_a_published_library(speed):
    """PyPI openplaning: drag within 1.5 % from 8 to 18 m/s [V]."""
    boat = PlaningBoat(
        speed=speed,
        weight=1800 * 9.80665,
        beam=1.8,
        lcg=2.3,
        vcg=0.55,
        r_g=1.4,
        beta=12.0,
        epsilon=0.0,
        vT=0.55 - 0.2,
        lT=0.0,
        ahr=0.0,
        rho=RHO,
        nu=NU,
        g=9.80665,
    )
    boat.get_steady_trim()
    assert river(speed)[2].item() == pytest.approx(-boat.thrust_force[0], rel=0.015)


@pytest.mark.parametrize("step", [0.05, 0.15, 0.2])
def test_a_constant_push_on_a_mass_is_arithmetic(step):
    """5000 N on m_e = 1900 kg to 8 m/s: 3.040 s, 12.16 m."""
    trip = travel(lambda now, speed, rising: 5000 / 1900 * ONE, 8 * ONE, 2 * ONE, step=step)
    assert abs(trip.time.item() - 3.040) <= 5e-4
    assert abs(trip.distance.item() - 12.16) <= 5e-3


def test_the_drag_curve_between_its_nodes_is_the_hull_s():
    """Within 0.3 % of Savitsky and Blount and Fox solved at the very speed; the square below Fn_v 1 [P]."""
    rho, mu = 999.1, 1.138e-3
    hull = hull_of(1.95 * ONE, 10.0, 2.35 * ONE, 2600 * ONE, rho, mu)
    for number in np.linspace(1.0, 2.9, 60):
        speed = number * hull.first
        solved = savitsky(1.95 * ONE, 10.0, 2.35 * ONE, 0.546 * ONE, 2600 * ONE, speed, rho, mu)[2]
        assert drag_at(hull, speed) == pytest.approx(solved * hump(number, 2.35 / 1.95), rel=0.003)
    assert drag_at(hull, 0.5 * hull.first) == pytest.approx(0.25 * drag_at(hull, hull.first), rel=1e-12)


def craft(column=0.6, n=1):
    """The sanity case's boat: nozzle .130, D_1 .215, hub .07, z 0, 280 hp at 4200, default coefficients."""
    world = object.__new__(launch_draws.LaunchWorld)
    given = {
        "wake": 0.08,
        "zeta": 0.25,
        "k_b": 0.15,
        "psi": 0.03,
        "eta": 0.80 * 0.97,
        "nozzle": math.pi / 4 * 0.130**2,
        "inlet": math.pi / 4 * (0.215**2 - 0.07**2),
        "power": 280 * HP,
        "wide_open": 4200.0,
        "tach": 1.0,
        "column": column,
        "deduction": 0.0,
    }
    for name, value in given.items():
        setattr(world, name, np.full(n, value))
    world.n, world.boat = n, {"jets": 1, "gear_ratio": 1.0}
    return world


def sanity(mass, height, plane=launch_draws.PLANE, hump_factor=True):
    """Distance to plane, S 370, P = min(engine x f^1.25, ratio-1 power) at once; infinite where never."""
    world, kelvin = craft(), 288.15
    rho, mu = water.density(kelvin), water.viscosity(kelvin)
    theta = 1 - 0.0065 * height / 288.15
    pressure, warm = 101325 * theta**5.2558761, 288.15 * theta

    def torque(pa, t):  # ISO 1585, standard dry air
        return (pa / 99e3) ** 1.2 * (298 / t) ** 0.6

    most = 4200 * (torque(pressure, warm) / torque(101325, 288.15)) ** (1.25 / 3)
    head = (pressure - water.vapor_pressure(kelvin)) / (rho * 9.80665)
    hull = hull_of(1.95 * ONE, 10.0, 2.35 * ONE, mass * ONE, rho, mu, 0.55 * ONE)
    if not hump_factor:
        hull = hull._replace(drag=hull.drag / hump(launch_draws.NUMBERS, 2.35 / 1.95))

    def holds(speed):
        """Rpm of ratio 1, by halving."""
        low, high = 100 * ONE, 9000 * ONE
        for _ in range(40):
            rpm = (low + high) / 2
            jet, _, ram, _ = world.jet(rpm, speed, rho)
            over = world.nozzle / world.inlet
            left = np.maximum(head + (ram - world.k_b * (over * jet) ** 2) / (2 * 9.80665), 1e-9)
            lets_go = rpm * np.sqrt(world.nozzle * jet) / left**0.75 > 370
            low, high = np.where(lets_go, low, rpm), np.where(lets_go, rpm, high)
        return low

    def gain(now, speed, rising):
        jet = world.jet(np.minimum(most, holds(speed)), speed, rho)[0]
        push = rho * world.nozzle * jet * (jet - 0.92 * speed)
        return (push - drag_at(hull, speed)) / (1.05 * mass)

    return travel(gain, plane * hull.first, 0.5 * ONE, step=0.15).distance.item()


SANITY = [(2100, 0, 22), (2100, 2500, 37), (3000, 0, 67), (3000, 1500, 170), (3000, 2500, math.inf)]


@pytest.mark.parametrize(("mass", "height", "distance"), SANITY)
def test_sanity_case_with_the_plane_at_two_and_a_half_and_no_hump_factor(mass, height, distance):
    """The distances [D], within 10 %: come out without Blount and Fox and with the plane at 2.5."""
    assert sanity(mass, height, 2.5, False) == pytest.approx(distance, rel=0.10)


def test_sanity_case_as_the_rules_have_it():
    """Asked of Fn_v 2.8 and Blount and Fox, as the rules prescribe, each is longer than told [D]."""
    found = [sanity(mass, height) for mass, height, _ in SANITY]
    assert all(there > told for there, (_, _, told) in zip(found[:4], SANITY[:4], strict=True))
    assert found[3:] == [math.inf, math.inf]
    assert found == sorted(found)


def run_of(rpm, feed, allowance=1.07, column=0.6, mass=2300.0):
    world = craft(column)
    hull = hull_of(1.95 * ONE, 10.0, 2.35 * ONE, mass * ONE, 999.1, 1.138e-3)
    return world.go(hull, allowance * ONE, rpm, feed, 0.0, 1, 9.0 * ONE, 999.1, 1.1)


@pytest.mark.parametrize("feed", [0.5, 0.8, 2.0, 4.0])
def test_most_is_asked_as_the_throttle_stops(feed):
    """S asked there out of the power balance and dV_1/dt by differences, typed again."""
    trip = run_of(3400.0, feed)
    assert trip.moment.item() == pytest.approx(feed)
    world, dt, speed, jets = craft(), feed / 4000, 0.0, []
    hull = hull_of(1.95 * ONE, 10.0, 2.35 * ONE, 2300 * ONE, 999.1, 1.138e-3)
    for k in range(4001):
        jet = world.jet((700 + 2700 * k / 4000) * ONE, speed * ONE, 999.1)[0].item()
        jets.append(jet)
        push = 999.1 * world.nozzle.item() * jet * (jet - 0.92 * speed)
        against = 1.07 * drag_at(hull, speed * ONE).item() + 0.5 * 1.1 * 2.4 * speed**2
        last, speed = speed, speed + (push - against) / (1.05 * 2300) * dt
    over = (world.nozzle / world.inlet).item()
    ram = 0.75 * (0.92 * last) ** 2
    head = 9.0 + (ram - 0.15 * (over * jet) ** 2) / (2 * 9.80665)
    head -= 0.6 / 9.80665 * over * (jets[-1] - jets[-2]) / dt
    expected = math.log(3400 * math.sqrt(world.nozzle.item() * jet) / head**0.75)
    assert trip.hardest.item() == pytest.approx(expected, abs=1e-3)


def test_the_allowance_that_just_would_not_plane_parts_the_runs():
    """A whole run planes 1 % under it and does not 1 % over it."""
    hull = hull_of(1.95 * ONE, 10.0, 2.35 * ONE, 2600 * ONE, 999.1, 1.138e-3)
    most = craft().most_allowance(hull, 3400.0, 0.0, 1, 999.1, 1.1).item()
    assert run_of(3400.0, 2.0, 0.99 * most, mass=2600.0).time < launch_draws.LONGEST
    assert run_of(3400.0, 2.0, 1.01 * most, mass=2600.0).time == np.inf


@pytest.mark.parametrize(("shallow", "high"), [(False, 1.35), (True, 1.8)])
def test_the_prior_has_its_median_and_ends(shallow, high):
    """1.07, .85 to 1.35, to 1.8 under a metre [P]."""
    grid = np.linspace(math.log(0.3), math.log(6.0), 20001)
    total = np.cumsum(prior(grid, shallow))
    found = np.exp(np.interp([0.025, 0.5, 0.975], total / total[-1], grid))
    np.testing.assert_allclose(found, [0.85, 1.07, high], rtol=0.002)


HOME = {"altitude": "366 m", "water_temperature": "12 C"}
BOAT = {
    "nozzle_diameter": "130 mm",
    "impeller_diameter": "215 mm",
    "hub_diameter": "70 mm",
    "shaft_depth": "0.1075 m",
    "wide_open_rpm": 4200,
    "engine_power": "280 hp",
    "chine_beam": "1.95 m",
    "dry_mass": "1,700 kg",
}
PUMP = [
    {"outcome": "held", "rpm": 3700, "boat_speed": "0 m/s", **HOME},
    {"outcome": "let_go", "rpm": 4050, "boat_speed": "0 m/s", **HOME},
]
PLANED = {"outcome": "planed", "rpm": 3600, **HOME, "load": "400 kg", "feed_in": "2 s", "seconds": "8 s"}


def case(notes=(), place=(), plan=()):
    return {
        "boat": BOAT,
        "place": {"altitude": "1500 m", "water_temperature": "10 C", **dict(place)},
        "plan": {"people": 4, "fuel": "80 l", "gear": "60 kg", **dict(plan)},
        "notes": [*PUMP, *notes],
    }


def test_a_seed_gives_the_same_draws_and_another_gives_others():
    one, again, other = (draw_launch(case([PLANED]), 3400, 3.0, "up", 300, seed) for seed in (1, 1, 2))
    for name in one._fields:
        np.testing.assert_array_equal(getattr(one, name), getattr(again, name))
    assert not np.array_equal(one.drag_allowance, other.drag_allowance)


def test_notes_of_launches_pull_the_allowance_to_what_they_say():
    """A slow launch lifts it, a quick one lowers it, one that would not plane cuts its low side off."""
    fails = {"outcome": "would_not_plane", "rpm": 3000, **HOME, "load": "700 kg"}
    none, slow, quick, failed = (
        np.quantile(np.log(draw_launch(case(notes), 3400, 3.0, "up", 2000).drag_allowance), [0.025, 0.5])
        for notes in ([], [PLANED | {"seconds": "11 s"}], [PLANED | {"seconds": "5.5 s"}], [fails])
    )
    assert slow[1] > none[1] + 0.08
    assert quick[1] < none[1] - 0.03
    assert failed[0] > none[0] + 0.03


def test_notes_of_shallow_and_of_deep_water_do_not_mix():
    """A deep note leaves the allowance in shallow water alone."""
    shallow = {"depth": "0.8 m"}
    bare, deep, alike = (
        np.log(draw_launch(case(notes, shallow), 3400, 3.0, "up", 2000).drag_allowance)
        for notes in ([], [PLANED], [PLANED | shallow])
    )
    shares = [0.025, 0.5, 0.975]
    np.testing.assert_allclose(np.quantile(deep, shares), np.quantile(bare, shares), atol=0.05)
    assert np.std(alike) < 0.85 * np.std(bare)


def test_room_and_current_decide_what_fits():
    """Five lengths less, ten metres more above a rapid; against the current the ground covered is less."""
    current = {"current": "1 m/s"}
    up, down = (draw_launch(case(place=current), 3400, 3.0, way, 400) for way in ("up", "down"))
    both = up.planes
    assert up.fits.all()  # no room given
    apart = (down.distance - up.distance)[both] / up.time[both]
    assert np.mean(apart) == pytest.approx(2.0, rel=0.02)
    middle = float(np.nanmedian(draw_launch(case(), 3400, 3.0, "up", 400).distance))
    length = 5 * 3.2 * 1.95
    for below, more in (("flat", 0), ("rapid", 10)):
        drawn = draw_launch(
            case(place={"room": f"{middle + length + more:.3f} m", "below": below}), 3400, 3.0, "up", 400
        )
        np.testing.assert_array_equal(drawn.fits, drawn.distance <= middle + 5e-4)
        assert drawn.fits.mean() == pytest.approx(0.5, abs=0.02)
        assert drawn.failing == np.mean((drawn.least_ratio < 1) | ~drawn.planes | ~drawn.fits)


def test_what_is_not_drawn_is_refused():
    for plan in ({"water": "fizzy"}, {"grate": "weed"}):
        with pytest.raises(ValueError, match="not drawn"):
            draw_launch(case(plan=plan), 3400, 3.0, "up", 10)
