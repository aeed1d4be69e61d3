"""What people type is understood, what is understood is shown, and nothing else is taken."""

import math

import pytest

from headwater import units
from headwater.errors import BadReading

ALTITUDE = ("altitude", -450.0, 6000.0)
BORE = ("length", 0.04, 0.40)
DEPTH = ("length", -0.5, 1.5)
RPM = ("rotation", 100.0, 12000.0)
WATER = ("temperature", 273.15, 318.15)
BAROMETER = ("pressure", 40000.0, 110000.0)
POWER = ("power", 5e3, 3e6)
SPEED = ("speed", 0.0, 25.0)
SHARE = ("share", 0.1, 1.0)


@pytest.mark.parametrize(
    ("typed", "field", "si", "echo"),
    [
        ("54F", WATER, 285.3722222, "54 °F"),
        ("54 °F", WATER, 285.3722222, "54 °F"),
        ("54 ° F", WATER, 285.3722222, "54 °F"),
        ("54 degF", WATER, 285.3722222, "54 °F"),
        ("54 deg. f", WATER, 285.3722222, "54 °F"),
        ("12,5 C", WATER, 285.65, "12.5 °C"),
        ("285.65 K", WATER, 285.65, "285.65 K"),
        ("1,609 m", ALTITUDE, 1609.0, "1,609 m"),
        ("1609.5 m", ALTITUDE, 1609.5, "1,609.5 m"),
        ("5 280 ft", ALTITUDE, 1609.344, "5,280 ft"),
        ("5\u202f280 ft", ALTITUDE, 1609.344, "5,280 ft"),
        ("5\u00a0280\u00a0ft", ALTITUDE, 1609.344, "5,280 ft"),
        ("5'280 ft", ALTITUDE, 1609.344, "5,280 ft"),
        ("5,280'", ALTITUDE, 1609.344, "5,280 ft"),
        ("1.6 km", ALTITUDE, 1600.0, "1.6 km"),
        ("\u2212120 FT", ALTITUDE, -36.576, "-120 ft"),
        ("- 120 ft", ALTITUDE, -36.576, "-120 ft"),
        ("29,80 inHg", BAROMETER, 100914.3922, "29.8 inHg"),
        ("29.80 in. Hg", BAROMETER, 100914.3922, "29.8 inHg"),
        ("1.013,25 hPa", BAROMETER, 101325.0, "1,013.25 hPa"),
        ("1,013.25 mbar", BAROMETER, 101325.0, "1,013.25 hPa"),
        ("760 mmHg", BAROMETER, 101325.0144, "760 mmHg"),
        ("240hp", POWER, 178967.9688, "240 hp"),
        ("180 kW", POWER, 180000.0, "180 kW"),
        ("3,050 rpm", RPM, 3050.0, "3,050 rpm"),
        ("3050", RPM, 3050.0, "3,050 rpm"),
        ("3050 1/min", RPM, 3050.0, "3,050 rpm"),
        (3050, RPM, 3050.0, "3,050 rpm"),
        (3050.5, RPM, 3050.5, "3,050.5 rpm"),
        ("0.130 m", BORE, 0.130, "0.13 m"),
        ("0,130 m", BORE, 0.130, "0.13 m"),
        ("130MM", BORE, 0.130, "130 mm"),
        ("5 1/8 in", BORE, 0.130175, "5.125 in"),
        ('5-1/8"', BORE, 0.130175, "5.125 in"),
        ("-1/2 in", DEPTH, -0.0127, "-0.5 in"),
        ("20 km/h", SPEED, 5.555555556, "20 km/h"),
        ("0 mph", SPEED, 0.0, "0 mph"),
        ("-0 mph", SPEED, 0.0, "0 mph"),
        ("12 kts", SPEED, 6.173333333, "12 kn"),
        ("80 %", SHARE, 0.8, "80 %"),
        ("0.8", SHARE, 0.8, "80 %"),
        (0.8, SHARE, 0.8, "80 %"),
    ],
)
def test_what_people_type_is_understood(typed, field, si, echo):
    reading = units.parse(typed, *field)
    assert reading.value == pytest.approx(si, rel=1e-9)
    assert reading.echo == echo


@pytest.mark.parametrize(
    ("typed", "field", "si"),
    [
        ("1,250 m", ALTITUDE, 1250.0),  # both readings are in range: a thousand
        ("1,250 m", DEPTH, 1.25),  # only the decimal one is
        ("29,921 inHg", BAROMETER, 29.921 * 3386.389),
        ("1,013 hPa", BAROMETER, 101300.0),
        ("1,013 bar", BAROMETER, 101300.0),
        ("3.050 rpm", RPM, 3050.0),  # only the thousand is
        ("1.609 km", ALTITUDE, 1609.0),
    ],
)
def test_three_digits_after_a_comma_are_a_thousand_unless_only_the_decimal_is_in_range(typed, field, si):
    assert units.parse(typed, *field).value == pytest.approx(si, rel=1e-12)


def test_a_point_before_three_digits_is_asked_for_again_where_both_readings_are_in_range():
    with pytest.raises(BadReading) as caught:
        units.parse("1.609 m", *ALTITUDE)
    assert caught.value.action == "A thousand or a decimal point? Write 1609 m or 1.61 m."


@pytest.mark.parametrize("typed", ["20,000 ft", "7,000 m"])
def test_an_altitude_in_thousands_out_of_range_is_not_taken_for_a_decimal(typed):
    with pytest.raises(BadReading) as caught:
        units.parse(typed, *ALTITUDE)
    assert caught.value.action == "Check the number and the unit."


def test_a_json_number_is_never_read_as_a_thousand():
    with pytest.raises(BadReading):
        units.parse(3.125, *RPM)


@pytest.mark.parametrize(
    "typed",
    [
        "", " ", "F", "rpm", "nan rpm", "inf rpm", "NaN", "1e400 rpm", "1e99 rpm", "3,05,0 rpm", "1.2.3 rpm",
        "30 50 rpm", "3050 - 3100 rpm", "3050 rpm 2", "1/0 rpm", "0x1F rpm", "3050 hp", "--3050", "9" * 5000,
        "3050 " + "rpm" * 30, math.nan, math.inf, -math.inf, 10**400, True, False, None, [], {},
    ],
)  # fmt: skip
def test_anything_else_is_a_named_error(typed):
    with pytest.raises(BadReading) as caught:
        units.parse(typed, *RPM)
    assert caught.value.allowed == "100 to 12,000 rpm"
    assert caught.value.action


def test_a_missing_unit_is_an_error_that_names_the_choices():
    with pytest.raises(BadReading) as caught:
        units.parse("5280", *ALTITUDE)
    assert caught.value.action == "Add the unit: m, ft, km."


def test_a_foreign_unit_is_an_error_that_names_the_choices():
    with pytest.raises(BadReading) as caught:
        units.parse("54 psi", *WATER)
    assert caught.value.action == "Use one of these units: C, F, K."


@pytest.mark.parametrize(
    ("typed", "field", "allowed"),
    [
        ("20,000 ft", ALTITUDE, "-1,476 to 19,685 ft"),
        ("7,000 m", ALTITUDE, "-450 to 6,000 m"),
        ("120 F", WATER, "32 to 113 °F"),
        ("50 C", WATER, "0 to 45 °C"),
        ("20 in", BORE, "1.58 to 15.74 in"),
        ("5 %", SHARE, "10 to 100 %"),
    ],
)
def test_the_allowed_range_is_shown_in_the_unit_that_was_typed_and_is_itself_allowed(typed, field, allowed):
    with pytest.raises(BadReading) as caught:
        units.parse(typed, *field)
    assert caught.value.allowed == allowed
    low, _, rest = allowed.partition(" to ")
    units.parse(f"{low} {rest.split()[1]}", *field)
    units.parse(rest, *field)


@pytest.mark.parametrize(
    ("quantity", "symbol"), [(q, s) for q, table in units.QUANTITIES.items() for s in table]
)
def test_every_unit_goes_to_si_and_back_and_is_known_by_its_names(quantity, symbol):
    assert units.from_si(units.to_si(37.5, quantity, symbol), quantity, symbol) == pytest.approx(
        37.5, rel=1e-12
    )
    for name in (symbol, *units.QUANTITIES[quantity][symbol].names):
        assert units.parse(f"37.5 {name}", quantity) == units.parse(f"37.5 {name.upper()}", quantity)
        assert units.parse(f"37.5 {name}", quantity).unit == symbol


@pytest.mark.parametrize(
    ("quantity", "symbol", "si"),
    [
        ("length", "in", 0.0254),
        ("length", "ft", 0.3048),
        ("speed", "mph", 1609.344 / 3600),
        ("speed", "kn", 1852 / 3600),
        ("mass", "lb", 0.45359237),
        ("volume", "gal", 231 * 0.0254**3),
        ("force", "lbf", 0.45359237 * 9.80665),
        ("pressure", "psi", 0.45359237 * 9.80665 / 0.0254**2),
        ("pressure", "mmHg", 13.5951 * 9.80665),
    ],
)
def test_units_defined_exactly_are_exact(quantity, symbol, si):
    """Definitions of the international inch, foot, mile, nautical mile and pound, standard gravity [D]."""
    assert units.to_si(1, quantity, symbol) == pytest.approx(si, rel=1e-11)


def test_horsepower_and_inch_of_mercury_follow_from_their_definitions():
    """550 ft lbf/s; an inch of mercury at 13595.1 kg/m3 under standard gravity [D]."""
    assert units.to_si(1, "power", "hp") == pytest.approx(550 * 0.3048 * 0.45359237 * 9.80665, abs=5e-6)
    assert units.to_si(1, "pressure", "inHg") == pytest.approx(13595.1 * 9.80665 * 0.0254, abs=5e-4)


@pytest.mark.parametrize(
    ("si", "quantity", "symbol", "rounded", "shown"),
    [
        (2684.0, "rotation", "rpm", None, "2,680 rpm"),
        (2689.0, "rotation", "rpm", "down", "2,680 rpm"),
        (2681.0, "rotation", "rpm", "up", "2,690 rpm"),
        (2680.0, "rotation", "rpm", "down", "2,680 rpm"),
        (2680.0, "rotation", "rpm", "up", "2,680 rpm"),
        (67.4, "rotation", "rpm", None, "67 rpm"),
        (1609.344, "altitude", "ft", None, "5,280 ft"),
        (285.3722222, "temperature", "F", None, "54.0 °F"),
        (273.15, "temperature", "C", None, "0.0 °C"),
        (273.11, "temperature", "C", None, "0.0 °C"),
        (100914.39, "pressure", "inHg", None, "29.80 inHg"),
        (178967.97, "power", "hp", None, "240 hp"),
        (-0.02, "length", "m", None, "-0.020 m"),
        (-0.0151, "head", "m", None, "-0.02 m"),
        (0.8, "share", "%", None, "80 %"),
    ],
)
def test_values_are_shown_with_sensible_digits_and_their_sign(si, quantity, symbol, rounded, shown):
    assert units.show(si, quantity, symbol, rounded) == shown


def test_a_sign_is_never_shown_before_zero():
    assert units.number(-0.004, "head", "m") == "0.00"


def test_both_unit_sets_name_a_known_unit_for_every_quantity():
    for chosen in units.SYSTEMS.values():
        assert set(chosen) == set(units.QUANTITIES)
        assert all(symbol in units.QUANTITIES[quantity] for quantity, symbol in chosen.items())


@pytest.mark.parametrize(
    ("quantity", "symbol", "other"),
    [("temperature", "F", "C"), ("temperature", "C", "F"), ("length", "in", "mm"), ("rotation", "rpm", None)],
)
def test_the_other_common_unit_is_that_of_the_other_set(quantity, symbol, other):
    assert units.other(quantity, symbol) == other
