"""Every input is in one table, and a case is read by it: all bad readings at once, and never an exception."""

import copy
import datetime

import pytest

from headwater import fields, units
from headwater.fields import FIELD, FIELDS, read
from headwater.sources import SOURCES

CASE = {
    "boat": {
        "label": "Heron",
        "date": "2026-04-18",
        "nozzle_diameter": "5 1/8 in",
        "impeller_diameter": "8.5 in",
        "wide_open_rpm": "4,100 rpm",
        "engine_power": "290 hp",
    },
    "place": {"label": "Gravel Bar", "altitude": "5,280 ft", "water_temperature": "54F"},
    "plan": {"rpm": 3050},
    "notes": [
        {
            "outcome": "held",
            "rpm": "3,200",
            "altitude": "900 m",
            "water_temperature": "11 C",
            "boat_speed": "0 mph",
            "date": "2026-05-30",
        }
    ],
}


def changed(**parts):
    """The case with readings put in, or taken out where they are None."""
    case = copy.deepcopy(CASE)
    for part, readings in parts.items():
        target = case["notes"][0] if part == "note" else case[part]
        for name, value in readings.items():
            target.pop(name, None)
            if value is not None:
                target[name] = value
    return case


def wrong(case):
    """Fields in error."""
    return [error["field"] for error in read(case).errors]


def only_error(case):
    (error,) = read(case).errors
    return error


# The table


def test_every_key_of_the_case_is_read():
    assert len(FIELD) == len(FIELDS) == 78


def test_every_field_says_what_it_is_and_how_to_get_it():
    for field in FIELDS:
        assert field.label and field.meaning.endswith(".") and field.measure.endswith("."), field.key
        assert field.source in SOURCES, field.key
        assert field.group in ("first", "notes", "note_launch", "hull", "launch", "fine"), field.key
        assert len(set(field.choices)) == len(field.choices), field.key


def test_what_is_measured_in_the_pump_is_measured_with_the_engine_off():
    for name in ("nozzle_diameter", "impeller_diameter", "hub_diameter", "shaft_depth"):
        assert "Engine off, key out" in FIELD[f"boat.{name}"].measure


def test_every_default_is_in_its_own_range_and_every_range_is_wider_than_the_span():
    for field in FIELDS:
        if isinstance(field.default, (int, float)):
            assert field.low <= field.default <= field.high, field.key
        if field.span:
            assert field.low <= field.span[0] < field.default < field.span[1] <= field.high, field.key


def test_a_tolerance_says_whether_it_is_of_the_reading():
    for field in FIELDS:
        assert (field.tolerance > 0) == (field.tolerance_kind in ("absolute", "relative")), field.key


@pytest.mark.parametrize(
    ("key", "tolerance", "kind"),
    [
        ("place.water_temperature", 1.0, "absolute"),
        ("place.altitude", 30.0, "absolute"),
        ("place.station_pressure", 200.0, "absolute"),
        ("boat.engine_power", 0.05, "relative"),
        ("boat.nozzle_diameter", 0.01, "relative"),
        ("boat.shaft_depth", 0.020, "absolute"),
        ("plan.rpm", 0.01, "relative"),
    ],
)
def test_tolerances_are_those_of_common_practice(key, tolerance, kind):
    """95 % half-widths of readings, common practice [P]."""
    assert (FIELD[key].tolerance, FIELD[key].tolerance_kind, FIELD[key].mark) == (tolerance, kind, "P")


@pytest.mark.parametrize(
    ("name", "default", "span"),
    [
        ("wake_fraction", 0.08, (0.03, 0.15)),
        ("ram_loss", 0.25, (0.1, 0.5)),
        ("intake_loss", 0.15, (0.05, 0.5)),
        ("nozzle_loss", 0.03, (0.01, 0.05)),
        ("pump_efficiency", 0.80, (0.70, 0.92)),
        ("driveline_efficiency", 0.97, (0.95, 0.99)),
    ],
)
def test_coefficients_are_typical_figures_from_memory(name, default, span):
    """Typical of jet units [M]; the wake fraction after van Terwisga 1996 and Allison 1993 [M]."""
    field = FIELD[f"boat.{name}"]
    assert (field.default, field.span, field.mark, SOURCES[field.source].mark) == (default, span, "M", "M")


@pytest.mark.parametrize(
    ("key", "shown"),
    [
        ("boat.hub_diameter", "a third of the wear ring's bore"),
        ("boat.jets_running", "all jets"),
        ("boat.rpm_from", "seen"),
        ("boat.shaft_depth", "0 mm"),
        ("boat.intake_loss", "0.15"),
        ("boat.nozzle_diameter", ""),
    ],
)
def test_what_stands_in_for_a_reading_left_out_is_said_in_words(key, shown):
    assert fields.default_text(FIELD[key]) == shown


# A good case


def test_a_case_is_read_into_si():
    values = read(CASE).values
    assert values["boat"]["nozzle_diameter"] == pytest.approx(0.130175)
    assert values["boat"]["engine_power"] == pytest.approx(290 * 745.69987)
    assert values["boat"]["date"] == datetime.date(2026, 4, 18)
    assert values["place"]["altitude"] == pytest.approx(1609.344)
    assert values["place"]["water_temperature"] == pytest.approx(285.3722222)
    assert values["plan"]["rpm"] == 3050.0
    (note,) = values["notes"]
    assert note["outcome"] == "held"
    assert note["water_temperature"] == pytest.approx(284.15)
    assert note["boat_speed"] == 0.0
    assert note["date"] == datetime.date(2026, 5, 30)


def test_a_good_case_has_no_errors_and_echoes_all_that_was_typed():
    readings = read(CASE)
    assert readings.errors == []
    assert set(readings.understood) == readings.given
    assert len(readings.given) == 16
    assert readings.understood["boat.nozzle_diameter"] == "5.125 in"
    assert readings.understood["place.altitude"] == "5,280 ft"
    assert readings.understood["notes[0].rpm"] == "3,200 rpm"


def test_defaults_are_filled_in_and_are_not_given():
    readings = read(CASE)
    boat = readings.values["boat"]
    assert (boat["jets"], boat["jets_running"], boat["gear_ratio"], boat["shaft_depth"]) == (1, 1, 1.0, 0.0)
    assert boat["hub_diameter"] == pytest.approx(8.5 * 0.0254 / 3)
    assert boat["rpm_from"] == "seen"
    assert "suction_specific_speed" not in boat
    assert readings.values["place"]["altitude_from"] == "map"
    assert readings.values["plan"] == {
        "rpm": 3050.0,
        "boat_speed": 0.0,
        "reserve": 1.10,
        "people": 0,
        "gear": 0.0,
        "fuel": 0.0,
        "rows": "middle",
        "water": "clear",
        "grate": "clean",
        "standing_waves": "no",
    }
    assert not {"boat.jets", "boat.hub_diameter", "plan.reserve"} & readings.given


def test_jets_running_are_all_jets_where_left_out():
    assert read(changed(boat={"jets": 2})).values["boat"]["jets_running"] == 2


def test_the_first_unit_typed_of_each_quantity_is_remembered():
    typed = read(CASE).units
    assert typed == {
        "altitude": "ft",
        "temperature": "F",
        "length": "in",
        "rotation": "rpm",
        "power": "hp",
        "speed": "mph",
    }


def test_a_null_counts_as_left_out():
    case = changed()
    case["boat"]["hub_diameter"] = None
    case["plan"]["rpm"] = None
    assert read(case).errors == []
    assert "rpm" not in read(case).values["plan"]


def test_a_note_without_a_boat_speed_is_read_and_has_none():
    readings = read(changed(note={"boat_speed": None}))
    assert readings.errors == []
    assert "boat_speed" not in readings.values["notes"][0]


def test_a_case_is_left_as_it_was():
    case = copy.deepcopy(CASE)
    read(case)
    assert case == CASE


@pytest.mark.parametrize("typed", [0.2, "0.2", "0,2", " .20 "])
def test_coefficients_are_plain_numbers_typed_or_not(typed):
    assert read(changed(boat={"intake_loss": typed})).values["boat"]["intake_loss"] == 0.2


@pytest.mark.parametrize("typed", ["80 %", "0.8", 0.8])
def test_a_share_of_wide_open_is_a_percentage_or_a_plain_number(typed):
    assert read(changed(plan={"rpm": None, "throttle": typed})).values["plan"]["throttle"] == 0.8


# Bad readings


def test_all_bad_readings_come_at_once_each_with_what_was_given_what_is_allowed_and_what_to_do():
    case = changed(
        boat={"nozzle_diameter": "5.125", "jets": 4},
        place={"water_temperature": "150 F"},
        note={"rpm": "fast"},
    )
    assert read(case).errors == [
        {
            "field": "place.water_temperature",
            "given": "150 F",
            "allowed": "32 to 113 °F",
            "action": "Check the number and the unit.",
        },
        {
            "field": "boat.nozzle_diameter",
            "given": "5.125",
            "allowed": "40 to 400 mm",
            "action": "Add the unit: mm, cm, in, m, ft.",
        },
        {
            "field": "boat.jets",
            "given": "4",
            "allowed": "1 to 3",
            "action": "Write a plain number in this range.",
        },
        {
            "field": "notes[0].rpm",
            "given": "fast",
            "allowed": "100 to 12,000 rpm",
            "action": "Write one number and its unit.",
        },
    ]


def test_a_bad_reading_does_not_stop_the_others():
    readings = read(changed(place={"altitude": "high"}))
    assert wrong(changed(place={"altitude": "high"})) == ["place.altitude"]
    assert readings.values["place"]["water_temperature"] == pytest.approx(285.3722222)
    assert readings.understood["boat.engine_power"] == "290 hp"


def test_what_is_missing_is_asked_for():
    assert wrong({}) == [
        "place.altitude",
        "place.water_temperature",
        "boat.nozzle_diameter",
        "boat.impeller_diameter",
        "boat.wide_open_rpm",
        "boat.engine_power",
    ]
    case = changed()
    case["notes"] = [{}]
    assert wrong(case) == [f"notes[0].{name}" for name in ("outcome", "rpm", "altitude", "water_temperature")]


def test_a_bare_number_for_a_quantity_with_a_unit_is_an_error_that_names_the_units():
    error = only_error(changed(place={"altitude": 1609}))
    assert error["given"] == "1609"
    assert error["action"] == "Write it as text with its unit: m, ft, km."


@pytest.mark.parametrize(
    ("more", "field"),
    [
        ({"boat": {"aspiration": "boosted"}}, "boat.critical_altitude"),
        ({"boat": {"high_rpm": 3800}}, "boat.high_altitude"),
        ({"boat": {"high_altitude": "2000 m"}}, "boat.high_rpm"),
        ({"boat": {"high_rpm": 3800, "high_altitude": "100 m"}}, "boat.high_altitude"),
        ({"boat": {"chine_beam": "2 m", "hull_length": "2.6 m"}}, "boat.hull_length"),
        ({"boat": {"chine_beam": "2 m", "centre_of_gravity": "6 m"}}, "boat.centre_of_gravity"),
        (
            {"note": {"outcome": "planed", "boat_speed": None, "load": "300 kg", "feed_in": "2 s"}},
            "notes[0].seconds",
        ),
        ({"note": {"outcome": "would_not_plane", "boat_speed": None}}, "notes[0].load"),
        (
            {"note": {"outcome": "would_not_plane", "boat_speed": "9 mph", "load": "300 kg"}},
            "notes[0].boat_speed",
        ),
    ],
)
def test_readings_that_need_each_other_are_asked_for(more, field):
    error = only_error(changed(**more))
    assert error["field"] == field
    assert error["action"]


def test_a_launch_is_read_with_what_it_needs():
    case = changed(
        note={"outcome": "planed", "boat_speed": None, "load": "900 kg", "feed_in": "2 s", "seconds": "6 s"}
    )
    found = read(case)
    assert found.errors == []
    assert (found.values["notes"][0]["load"], found.values["notes"][0]["seconds"]) == (900.0, 6.0)


def test_a_hull_s_length_and_balance_follow_its_beam():
    boat = read(changed(boat={"chine_beam": "2 m"})).values["boat"]
    assert boat["hull_length"] == pytest.approx(6.4)
    assert boat["centre_of_gravity"] == pytest.approx(0.37 * 6.4)


@pytest.mark.parametrize(
    ("part", "name", "typed"),
    [
        ("boat", "rpm_from", "Seen"),
        ("boat", "rpm_from", 1),
        ("boat", "jets", 1.5),
        ("boat", "jets", True),
        ("boat", "jets", "two"),
        ("boat", "pump_efficiency", "80 %"),
        ("boat", "pump_efficiency", 1.01),
        ("boat", "gear_ratio", "1_0"),
        ("boat", "gear_ratio", float("nan")),
        ("boat", "gear_ratio", "inf"),
        ("boat", "gear_ratio", 10**400),
        ("boat", "label", 7),
        ("boat", "label", "x" * 81),
        ("boat", "label", "two\nlines"),
        ("boat", "label", "\ud800"),
        ("boat", "label", "turned \u202e round"),
        ("boat", "date", "18.4.2026"),
        ("boat", "date", "2026-02-30"),
        ("boat", "date", "2026-04-18 or so"),
        ("boat", "date", "0206-04-18"),
        ("boat", "date", 20260418),
        ("place", "station_pressure_confirmed", "true"),
        ("plan", "boat_speed", "-1 mph"),
        ("plan", "reserve", 0.9),
        ("note", "outcome", ["held"]),
    ],
)
def test_readings_of_the_wrong_kind_are_named_errors(part, name, typed):
    error = only_error(changed(**{part: {name: typed}}))
    assert error["field"] == (f"notes[0].{name}" if part == "note" else f"{part}.{name}")
    assert error["action"]


def test_labels_may_hold_any_letters():
    label = "Żabí bród 🚤 – Bär’s Landing"
    assert read(changed(place={"label": label})).values["place"]["label"] == label


@pytest.mark.parametrize("when", ["2026-04-18", " 2026-04-18 ", "2026-04-18T07:30:00Z"])
def test_dates_are_iso_dates_with_or_without_an_hour(when):
    assert read(changed(boat={"date": when})).values["boat"]["date"] == datetime.date(2026, 4, 18)


# Readings that must agree


@pytest.mark.parametrize(
    ("plan", "second"),
    [
        ({"rpm": "3050", "power": "150 hp"}, "plan.power"),
        ({"rpm": "3050", "throttle": "80 %"}, "plan.throttle"),
        ({"rpm": None, "power": "150 hp", "throttle": "80 %"}, "plan.throttle"),
        ({"rpm": "fast", "power": "150 hp"}, "plan.power"),
    ],
)
def test_only_one_of_rpm_power_and_share_may_be_planned(plan, second):
    assert wrong(changed(plan=plan))[-1] == second
    assert read(changed(plan=plan)).errors[-1]["allowed"] == "one of rpm, power or share"


@pytest.mark.parametrize("part", ["place", "note"])
def test_only_one_barometer_may_be_given(part):
    case = changed(
        **{part: {"altitude": "900 m", "station_pressure": "910 hPa", "altimeter_setting": "1013 hPa"}}
    )
    assert only_error(case)["field"].endswith("altimeter_setting")


@pytest.mark.parametrize("part", ["place", "note"])
def test_a_pressure_reduced_to_sea_level_is_not_taken_for_the_pressure_at_the_water(part):
    error = only_error(changed(**{part: {"altitude": "5,280 ft", "station_pressure": "29.92 inHg"}}))
    assert error["field"].endswith("station_pressure")
    assert error["given"] == "29.92 inHg"
    assert error["allowed"] == "23.16 to 26.11 inHg at this altitude"
    assert "altimeter setting" in error["action"]


@pytest.mark.parametrize(("hpa", "good"), [(785, True), (784, False), (884, True), (885, False)])
def test_the_barometer_may_differ_by_six_percent_from_the_standard_of_its_altitude(hpa, good):
    """834.3 hPa is standard at 1609.344 m (US Standard Atmosphere 1976 [V]), give or take 50.1 hPa [P]."""
    assert (wrong(changed(place={"station_pressure": f"{hpa} hPa"})) == []) == good


def test_a_barometer_far_from_the_standard_is_taken_once_confirmed():
    place = {"station_pressure": "29.92 inHg", "station_pressure_confirmed": True}
    assert read(changed(place=place)).errors == []
    assert wrong(changed(place=place | {"station_pressure_confirmed": False})) == ["place.station_pressure"]


@pytest.mark.parametrize("part", ["place", "note"])
def test_the_altitude_may_be_left_out_only_with_the_pressure_at_the_water(part):
    path = "notes[0]" if part == "note" else "place"
    assert wrong(changed(**{part: {"altitude": None, "station_pressure": "840 hPa"}})) == []
    assert wrong(changed(**{part: {"altitude": None}})) == [f"{path}.altitude"]
    assert wrong(changed(**{part: {"altitude": None, "altimeter_setting": "1013 hPa"}})) == [
        f"{path}.altitude"
    ]


def test_a_null_barometer_does_not_stand_in_for_the_altitude():
    case = changed(place={"altitude": None})
    case["place"]["station_pressure"] = None
    assert wrong(case) == ["place.altitude"]


def test_no_more_jets_can_run_than_she_has():
    error = only_error(changed(boat={"jets": 2, "jets_running": 3}))
    assert (error["field"], error["given"], error["allowed"]) == ("boat.jets_running", "3", "up to 2")


def test_a_bad_number_of_jets_is_not_blamed_on_those_running():
    assert wrong(changed(boat={"jets": 9, "jets_running": 2})) == ["boat.jets"]


@pytest.mark.parametrize("name", ["nozzle_diameter", "hub_diameter"])
def test_nozzle_and_hub_are_smaller_than_the_wear_ring(name):
    assert wrong(changed(boat={name: "8.5 in"})) == [f"boat.{name}"]
    assert wrong(changed(boat={name: "6.7 in"})) == []


# Any JSON

HUGE = pytest.param(10**5000, id="huge")


@pytest.mark.parametrize("case", [None, 1, 0.5, True, "case", [], [CASE], float("nan"), HUGE])
def test_what_is_no_case_is_one_named_error(case):
    assert wrong(case) == ["case"]


def nested(depth):
    value = []
    for _ in range(depth):
        value = [value]
    return value


@pytest.mark.parametrize(
    "value", [None, 1, "x", [], [1], {}, {"a": 1}, {1: 2}, nested(50_000), HUGE, "x" * 10**6]
)
def test_any_value_anywhere_gives_named_errors_and_no_exception(value):
    for part in ("boat", "place", "plan", "notes"):
        for error in read(changed() | {part: value}).errors:
            assert error["field"].startswith(part)
            assert error["action"] and len(error["given"]) <= 60
    for field in FIELDS:
        part, name = field.key.split(".")
        case = changed(**{"note" if part == "notes" else part: {name: value}})
        assert all(error["action"] and len(error["given"]) <= 60 for error in read(case).errors)


def test_keys_that_do_not_exist_are_named():
    case = changed(boat={"nozzle": "130 mm", 7: 1, "x" * 500: 1}) | {"crew": {}, 10**5000: 1}
    assert wrong(case) == [
        "crew",
        "a huge number",
        "boat.nozzle",
        "boat.7",
        "boat." + "x" * 59 + "…",
    ]


def test_a_note_that_is_no_object_is_named():
    case = changed()
    case["notes"] += ["held", None]
    assert wrong(case) == ["notes[1]", "notes[2]"]


def test_there_is_an_end_to_notes():
    case = changed()
    case["notes"] *= fields.MOST_NOTES + 1
    assert only_error(case)["allowed"] == "up to 200"


# The other unit


@pytest.mark.parametrize(
    ("key", "text", "symbol", "shown"),
    [
        ("place.water_temperature", "54 F", None, "12.2 °C"),
        ("notes.altitude", "1,000 m", None, "3,281 ft"),
        ("boat.nozzle_diameter", "5 1/8 in", None, "130 mm"),
        ("place.station_pressure", "840 hPa", "mmHg", "630.1 mmHg"),
        ("plan.rpm", "3050", None, ""),
    ],
)
def test_what_was_typed_is_shown_in_the_other_common_unit(key, text, symbol, shown):
    assert fields.other_unit(key, text, symbol) == shown


@pytest.mark.parametrize(
    ("key", "text"), [("boat.label", "x"), ("boat.x", "1 m"), (None, None), ("place.altitude", 5)]
)
def test_what_has_no_other_unit_is_a_named_error(key, text):
    with pytest.raises(fields.BadReading) as caught:
        fields.other_unit(key, text)
    assert caught.value.action


def test_every_range_can_be_said_in_every_unit_of_its_field():
    for field in FIELDS:
        for symbol in field.units:
            assert fields.allowed_text(field, symbol).endswith(symbol)
            assert units.parse(
                units.show(field.high, field.kind, symbol, "down"), field.kind
            ).value <= field.high * (1 + 1e-9)
