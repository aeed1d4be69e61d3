"""The command line: answers in words or JSON, 0 for an answer, 2 for bad input, never a traceback."""

import io
import json
import os

import pytest

from headwater import __version__
from headwater.__main__ import main
from headwater.answer import answer
from headwater.fields import FIELDS
from headwater.share import encode

CASE = {
    "boat": {
        "label": "Heron",
        "nozzle_diameter": "130 mm",
        "impeller_diameter": "215 mm",
        "wide_open_rpm": "4,100 rpm",
        "engine_power": "290 hp",
    },
    "place": {"label": "Gravel Bar", "altitude": "5,280 ft", "water_temperature": "54 F"},
    "plan": {"rpm": "2,600 rpm"},
    "notes": [
        {
            "outcome": "held",
            "rpm": "3,200 rpm",
            "altitude": "900 ft",
            "water_temperature": "52 F",
            "boat_speed": "0 mph",
            "label": "Home",
        }
    ],
}


@pytest.fixture
def file(tmp_path):
    """Writes what a case file holds, and says where."""

    def write(content):
        path = tmp_path / "case.json"
        if isinstance(content, bytes):
            path.write_bytes(content)
        else:
            path.write_text(content if isinstance(content, str) else json.dumps(content), encoding="utf-8")
        return str(path)

    return write


def test_check_answers_in_words(file, capsys):
    assert main(["check", file(CASE)]) == 0
    out, err = capsys.readouterr()
    result = answer(CASE)
    assert out.splitlines()[0] == result["headline"]["text"]
    assert result["reasons"][0]["text"] in " ".join(out.split())
    assert "Not checked: the run, steering, engine, crew." in out
    assert "ft" in out and err == ""


def test_check_shows_the_units_asked_for(file, capsys):
    assert main(["check", file(CASE), "--units", "metric"]) == 0
    out, _ = capsys.readouterr()
    assert " kW" in out and " hp" not in out
    assert main(["check", file(CASE), "--units", "us"]) == 0
    out, _ = capsys.readouterr()
    assert " hp" in out and " kW" not in out


def test_check_gives_programs_the_whole_answer(file, capsys):
    assert main(["check", "--json", file(CASE)]) == 0
    out, _ = capsys.readouterr()
    assert json.loads(out) == json.loads(json.dumps(answer(CASE)))


def test_check_reads_standard_input(monkeypatch, capsys):
    monkeypatch.setattr("sys.stdin", io.StringIO(json.dumps(CASE)))
    assert main(["check", "-"]) == 0
    assert capsys.readouterr().out.splitlines()[0] == answer(CASE)["headline"]["text"]


def test_check_takes_a_file_that_holds_its_case_under_one_key(file, capsys):
    assert main(["check", file({"case": CASE})]) == 0
    assert capsys.readouterr().out.splitlines()[0] == answer(CASE)["headline"]["text"]


def test_bad_readings_are_named_all_at_once_and_the_code_is_2(file, capsys):
    case = {**CASE, "place": {"altitude": "60,000 ft", "water_temperature": "54"}}
    assert main(["check", file(case)]) == 2
    out, err = capsys.readouterr()
    assert "place.altitude: Given: 60,000 ft. Allowed: -1,476 to 19,685 ft." in out
    assert "place.water_temperature: Given: 54." in out
    assert err == ""
    assert main(["check", file(case), "--json"]) == 2
    assert [row["field"] for row in json.loads(capsys.readouterr().out)["errors"]] == [
        "place.altitude",
        "place.water_temperature",
    ]


@pytest.mark.parametrize(
    ("content", "said"),
    [
        ("", "is not JSON: Expecting value, line 1, column 1."),
        ('{"boat": ', "is not JSON: Expecting value, line 1, column 10."),
        (b"\xff\x00", "is not UTF-8 text."),
        ("9" * 5000, "holds a number that is too long."),
        (
            '{"place": {"altitude": "1 m", "altitude": "900 m"}}',
            "'altitude' is given twice. Leave one of them out.",
        ),
    ],
)
@pytest.mark.parametrize("command", ["check", "link"])
def test_a_file_that_is_no_case_is_an_error_in_one_line(command, content, said, file, capsys):
    assert main([command, file(content)]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert err.startswith("headwater: ") and err.endswith(f"{said}\n") and err.count("\n") == 1


@pytest.mark.parametrize("content", ["null", "[]", "7", "NaN", '"case"', '{"case": null}'])
def test_json_that_is_no_case_is_named(content, file, capsys):
    assert main(["check", file(content)]) == 2
    assert "case: " in capsys.readouterr().out


def test_a_file_that_is_not_there_is_an_error_in_one_line(tmp_path, capsys):
    assert main(["check", str(tmp_path / "none.json")]) == 2
    assert "cannot be read" in capsys.readouterr().err


@pytest.mark.parametrize(
    "arguments",
    [[], ["chek"], ["check"], ["link"], ["link", "a", "--open", "b"], ["check", "-", "--units", "x"]],
)
def test_a_command_that_does_not_exist_is_bad_input(arguments, capsys):
    with pytest.raises(SystemExit) as ended:
        main(arguments)
    assert ended.value.code == 2
    assert "usage: headwater" in capsys.readouterr().err


def test_the_version_is_told(capsys):
    with pytest.raises(SystemExit) as ended:
        main(["--version"])
    assert ended.value.code == 0
    assert capsys.readouterr().out == f"{__version__}\n"


def test_fields_lists_every_reading(capsys):
    assert main(["fields"]) == 0
    out = capsys.readouterr().out
    for field in FIELDS:
        assert f"{field.key}  [" in out
        assert " ".join(f"{field.meaning} {field.measure}".split()) in " ".join(out.split())


def test_fields_in_markdown_is_one_table_with_a_row_for_each_reading(capsys):
    assert main(["fields", "--markdown"]) == 0
    rows = capsys.readouterr().out.splitlines()
    assert len(rows) == len(FIELDS) + 2
    assert {row.count("|") for row in rows} == {rows[0].count("|")}
    assert [row.split("`")[1] for row in rows[2:]] == [field.key for field in FIELDS]


def test_link_prints_the_fragment_and_opens_it_again(file, capsys):
    assert main(["link", file(CASE)]) == 0
    fragment = capsys.readouterr().out.strip()
    assert fragment == encode(CASE)
    assert main(["link", "--open", f"https://example.org/#{fragment}"]) == 0
    assert json.loads(capsys.readouterr().out) == CASE


def test_a_link_that_does_not_open_is_an_error_in_one_line(capsys):
    assert main(["link", "--open", encode(CASE)[:-5]]) == 2
    out, err = capsys.readouterr()
    assert (out, err) == ("", "headwater: This link was cut or changed on its way. Ask for it again.\n")


def test_a_case_that_cannot_go_into_a_link_is_an_error_in_one_line(file, capsys):
    assert main(["link", file({"boat": {"nozzle": 1}})]) == 2
    assert capsys.readouterr().err == "headwater: boat.nozzle cannot go into a link.\n"


def test_a_reader_that_stops_reading_is_no_error(tmp_path, monkeypatch):
    class Closed(io.StringIO):
        """Standard output into a pipe that nobody reads any more."""

        def __init__(self):
            super().__init__()
            self.number = os.open(tmp_path / "out", os.O_CREAT | os.O_WRONLY)

        def write(self, text):
            raise BrokenPipeError

        def fileno(self):
            return self.number

    closed = Closed()
    monkeypatch.setattr("sys.stdout", closed)
    assert main(["fields"]) == 0
    os.close(closed.number)


def test_a_terminal_without_the_signs_still_gets_the_words(file, monkeypatch):
    out = io.TextIOWrapper(io.BytesIO(), encoding="ascii")
    monkeypatch.setattr("sys.stdout", out)
    assert main(["check", file(CASE)]) == 0
    assert b"Not checked: the run, steering, engine, crew." in out.buffer.getvalue()
