"""A case goes into a link and comes out the same; every other link is refused in plain words."""

import base64
import copy
import json
import zlib

import pytest

from headwater import fields, share
from headwater.errors import BadReading
from headwater.fields import FIELD
from headwater.share import decode, encode

CASE = {
    "boat": {
        "label": "Żabí bród 🚤",
        "date": "2026-04-18",
        "nozzle_diameter": "5 1/8 in",
        "impeller_diameter": "8.5 in",
        "hub_diameter": "2.75 in",
        "shaft_depth": "4 in",
        "wide_open_rpm": "4,100 rpm",
        "engine_power": "290hp",
    },
    "place": {"label": "Gravel Bar", "altitude": "5\u202f280 ft", "water_temperature": "54F"},
    "plan": {"rpm": 3050, "boat_speed": "0 mph"},
    "notes": [
        {
            "outcome": "held",
            "rpm": "3,200 rpm",
            "altitude": "900 m",
            "water_temperature": "11 C",
            "boat_speed": "0 mph",
            "label": "Home",
            "date": "2026-05-30",
        },
        {
            "outcome": "let_go",
            "rpm": "3,550 rpm",
            "altitude": "900 m",
            "water_temperature": "11 C",
            "boat_speed": "0 mph",
            "label": "Home",
            "date": "2026-05-30",
        },
    ],
}
# Made by each version when it was frozen: they must open for ever.
FROZEN = [
    (
        "1.ZdLNDYAgDIbhXTyjaQkouIQDGE-GBRD2t7WAf0cOJF_fPI_ES0ohSlqywmRKYUR3R0YP8uCkVo2vpBqBqXylsbB1E2AGoUbnHc"
        "bRjiJLm8FXXcfezSnmUMtfIicRyaehFnCt-4-aUb5t4wBaoYXGzpND-pqlp-2BWCEHOQEzT9TZQ",
        {
            "boat": {
                "label": "Otter",
                "jets": 2,
                "jets_running": 1,
                "nozzle_diameter": "118 mm",
                "impeller_diameter": "190 mm",
                "wide_open_rpm": "5,600 rpm",
                "engine_power": "210 kW",
                "rpm_from": "papers",
                "pump_efficiency": 0.8,
                "suction_specific_speed": 410,
            },
            "place": {
                "station_pressure": "24.9 inHg",
                "station_pressure_confirmed": True,
                "water_temperature": "48 F",
            },
            "plan": {"throttle": "70 %", "boat_speed": "12 km/h"},
            "notes": [
                {
                    "outcome": "flared",
                    "rpm": "4,900 rpm",
                    "altitude": "2,150 m",
                    "water_temperature": "9 C",
                    "set_up": "2025-07-01",
                }
            ],
        },
    ),
    ("1.gwQxJBjySnNyIN6IrQUAXnBsGw", {"boat": {}, "place": None, "notes": []}),
]
EVERY = {
    "boat": {
        field.key.split(".")[1]: field.default if field.default is not None else "x"
        for field in fields.FIELDS
        if field.key.startswith("boat.")
    },
    "place": {"altitude_from": "map", "station_pressure": None, "station_pressure_confirmed": True},
    "plan": {"reserve": 1.1, "throttle": 0.8},
    "notes": [{"set_up": ""}, {}],
}


def said(link):
    """What is said about a link that does not open."""
    with pytest.raises(BadReading) as caught:
        decode(link)
    assert caught.value.field == "link"
    return caught.value.action


def forged(content, version=1, raw=False):
    """A link with a good check on its end that holds anything."""
    text = content if raw else json.dumps(content).encode()
    deflate = zlib.compressobj(9, zlib.DEFLATED, -15, zdict=share._USUAL)
    body = base64.urlsafe_b64encode(deflate.compress(text) + deflate.flush()).decode().rstrip("=")
    check = zlib.crc32(f"{version}.{body}".encode()).to_bytes(4, "big")
    return f"{version}.{body}{base64.urlsafe_b64encode(check).decode().rstrip('=')}"


# Good links


@pytest.mark.parametrize(
    "case",
    [
        CASE,
        EVERY,
        {},
        {"boat": {}, "notes": []},
        {"place": None, "notes": None},
        {"boat": {"jets": 1, "gear_ratio": 1, "ram_loss": "0.25", "label": ""}},
        {"plan": {"rpm": 3050.5, "reserve": 1.1}},
    ],
)
def test_a_case_comes_out_of_a_link_exactly_as_it_was_typed(case):
    out = decode(encode(case))
    assert out == case
    assert json.dumps(out, sort_keys=True) == json.dumps(case, sort_keys=True)  # 1 is not 1.0 nor True


def test_a_link_made_of_what_a_link_held_is_the_same_link():
    link = encode(CASE)
    assert encode(decode(link)) == link


def test_the_order_in_which_readings_were_typed_makes_no_other_link():
    turned = {part: CASE[part] for part in reversed(CASE)}
    turned["boat"] = dict(reversed(CASE["boat"].items()))
    assert encode(turned) == encode(CASE)


def test_a_case_with_two_notes_makes_a_link_of_at_most_400_characters():
    assert len(encode(CASE)) <= 400


def test_a_link_holds_only_characters_that_no_messenger_changes():
    assert set(encode(CASE)) <= set("0123456789abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ-_.")


def test_a_typed_default_costs_no_more_than_its_name():
    plain = {"boat": {"label": "x"}}
    typed = {"boat": {"label": "x", "pump_efficiency": 0.80}}
    assert len(encode(typed)) - len(encode(plain)) <= 8


@pytest.mark.parametrize("around", ["#{}", "https://example.org/app/#{}", " {}\n", "{}.", "({})", "<{}>"])
def test_a_link_opens_as_messages_carry_it(around):
    link = encode(CASE)
    assert decode(around.format(link).removeprefix("(").removeprefix("<")) == CASE
    assert decode(around.format(link[:40] + "\n " + link[40:]).removeprefix("(").removeprefix("<")) == CASE


@pytest.mark.parametrize(("link", "case"), FROZEN)
def test_links_made_long_ago_still_open(link, case):
    assert decode(link) == case


def test_every_reading_of_today_can_go_into_a_link():
    names = {short_key for part in share._PARTS.values() for short_key in fields._SHORT[part]}
    assert names == set(share._NAMES[share.VERSION].values())
    assert len(share._SHORT) == len(share._NAMES[share.VERSION])


def test_a_link_goes_on_meaning_what_it_meant_when_a_default_changes(monkeypatch):
    link = encode({"boat": {"label": "x", "ram_loss": 0.25}})
    monkeypatch.setitem(share.FIELD, "boat.intake_loss", FIELD["boat.intake_loss"]._replace(default=0.2))
    monkeypatch.setitem(share.FIELD, "boat.ram_loss", FIELD["boat.ram_loss"]._replace(default=0.3))
    assert decode(link) == {"boat": {"label": "x", "ram_loss": 0.25, "intake_loss": 0.15}}


# What cannot go into a link


@pytest.mark.parametrize(
    ("case", "named"),
    [
        (None, "case"),
        ([CASE], "case"),
        ({"crew": {}}, "crew"),
        ({"boat": []}, "boat"),
        ({"boat": {"nozzle": "5 in"}}, "boat.nozzle"),
        ({"boat": {"altitude": "5 m"}}, "boat.altitude"),
        ({"plan": {"depth": "1 m"}}, "plan.depth"),
        ({"boat": {"label": ["x"]}}, "boat.label"),
        ({"boat": {"jets": float("nan")}}, "boat.jets"),
        ({"boat": {"jets": 10**5000}}, "boat.jets"),
        ({"boat": {7: 1}}, "boat.7"),
        ({"boat": {"label": "\ud800"}}, "reading"),
        ({"notes": ["held"]}, "notes"),
        ({"notes": {"rpm": "3050"}}, "notes"),
        ({"notes": [None]}, "notes"),
    ],
)
def test_what_is_no_case_makes_no_link_and_is_named(case, named):
    with pytest.raises(BadReading) as caught:
        encode(case)
    assert named in caught.value.action


def test_a_case_too_long_for_a_link_says_so():
    notes = [{"label": str(i**9), "rpm": f"{i} rpm"} for i in range(2000)]
    with pytest.raises(BadReading) as caught:
        encode({"notes": notes})
    assert "too long" in caught.value.action


# Bad links


def test_a_link_cut_anywhere_is_known_as_cut():
    link = encode(CASE)
    for length in range(1, len(link)):
        assert said(link[:length]) == share._CUT


def test_a_link_with_one_letter_changed_is_known_as_changed():
    link = encode(CASE)
    for place in range(2, len(link)):
        other = "A" if link[place] != "A" else "B"
        assert said(link[:place] + other + link[place + 1 :]) == share._CUT


@pytest.mark.parametrize(
    "link",
    ["", "#", "settings", "https://example.org/", "0.abc", "12345.abcdefgh", "1:abcdefgh", "1.ab%20cd",
     "1.abcdé", "١.abcdefgh", "x" * 10**6, None, 7, b"1.abc", ["1."]],
)  # fmt: skip
def test_what_is_no_link_of_ours_is_said_to_be_none(link):
    assert said(link) == "This is not a link of Headwater."


@pytest.mark.parametrize("version", [3, 4, 9999])
def test_a_link_of_a_newer_version_says_so(version):
    assert "newer version" in said(forged({}, version=version))


@pytest.mark.parametrize(
    "content",
    [
        None,
        [],
        "boat",
        1,
        {"z": {}},
        {"b": []},
        {"b": {"zz": 1}},
        {"b": {"a": "5 m"}},
        {"b": {"l": ["x"]}},
        {"b": {"l": {}}},
        {"b": {"l": []}},
        {"s": {"r": "3050"}},
        {"b": {"j": 1e300}},
        {"s": [[]]},
        {"s": ["held"]},
        {"p": "x"},
        {"b": {"l": [[[[[]]]]]}},
    ],
)
def test_a_link_that_holds_something_else_says_so(content):
    assert said(forged(content)) == share._UNKNOWN


@pytest.mark.parametrize("number", [b"NaN", b"Infinity", b"1e999", b"9" * 4000])
def test_a_link_holds_no_number_that_is_none(number):
    assert said(forged(b'{"b":{"j":' + number + b"}}", raw=True)) == share._UNKNOWN


@pytest.mark.parametrize("text", [b"", b"{", b"\xff\xfe", b'{"b":{"l":"\\ud8', b"9" * 5000])
def test_a_link_whose_content_is_damaged_says_so(text):
    assert said(forged(text, raw=True)) == share._CUT


def test_a_link_that_unpacks_to_very_much_is_refused_before_it_is_unpacked():
    bomb = forged(b'{"b":{"l":"' + b" " * 5_000_000 + b'"}}', raw=True)
    assert len(bomb) < 8000
    assert said(bomb) == "This link holds too much to be a case."


def test_a_link_nested_very_deeply_is_refused_before_it_is_read():
    assert said(forged(b"[" * 30_000 + b"]" * 30_000, raw=True)) == share._UNKNOWN
    assert said(forged(b'{"b":' * 9_000, raw=True)) == share._UNKNOWN


def test_brackets_in_a_label_are_no_depth():
    case = {"boat": {"label": '[[[[{{{{"\\"[['}}
    assert decode(encode(case)) == case


def test_a_case_is_left_as_it_was():
    case = copy.deepcopy(CASE)
    encode(case)
    assert case == CASE
