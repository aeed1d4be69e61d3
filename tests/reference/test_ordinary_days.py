"""The check says on thirty ordinary days what an experienced operator would, and does not cry wolf."""

from collections import Counter
from typing import Any

import pytest
from ordinary_days import THIRTY, Day

from headwater.answer import answer

each_day = pytest.mark.parametrize("day", THIRTY, ids=[day.name for day in THIRTY])
CLOSE = 0.005  # of an rpm, for sums done with a pocket calculator
NEAR = 0.05  # of an rpm, to a line
CRY_WOLF = 1 / 5


@pytest.fixture(scope="module")
def answers() -> dict[str, dict[str, Any]]:
    return {day.name: answer(day.case) for day in THIRTY}


@each_day
def test_verdict_is_the_operators(day: Day, answers: dict[str, dict[str, Any]]) -> None:
    got = answers[day.name]
    assert [] == got["errors"]
    assert (day.verdict, day.ground) == (got["verdict"], got["ground"]), (day.why, got["reasons"])


@each_day
def test_each_note_comes_to_the_rpm_worked_by_hand(day: Day, answers: dict[str, dict[str, Any]]) -> None:
    got = answers[day.name]["equivalents"]
    assert list(range(len(day.equivalents))) == [row["note"] for row in got]
    assert [note["outcome"] for note in day.case["notes"]] == [row["outcome"] for row in got]
    expected = [rpm if rpm is None else pytest.approx(rpm, rel=CLOSE) for rpm in day.equivalents]
    assert expected == [row["rpm_here"] for row in got]


@pytest.mark.parametrize("day", [day for day in THIRTY if day.plan_rpm], ids=lambda day: day.name)
def test_plan_turns_the_rpm_worked_by_hand(day: Day, answers: dict[str, dict[str, Any]]) -> None:
    planned = answers[day.name]["values"]["planned_rpm"]["value"]
    assert pytest.approx(day.plan_rpm, rel=CLOSE) == planned


def test_there_are_thirty_days_of_two_to_five_notes_and_twenty_are_daily_work() -> None:
    assert 30 == len({day.name for day in THIRTY}) == len(THIRTY)
    assert 20 == sum(day.daily for day in THIRTY)
    assert {2, 3, 4, 5} >= {len(day.case["notes"]) for day in THIRTY}


def test_each_verdict_has_at_least_six_days() -> None:
    counts = Counter(day.verdict for day in THIRTY)
    assert {"go", "caution", "no-go"} == set(counts)
    assert min(counts.values()) >= 6


def test_at_least_six_days_lie_near_a_line_and_three_of_those_are_no_go_or_caution() -> None:
    close = [day for day in THIRTY if day.line is not None]
    for day in close:
        lines = [
            rpm * (0.9 if note["outcome"] == "flared" else 1)
            for rpm, note in zip(day.equivalents, day.case["notes"], strict=True)
            if rpm is not None
        ]
        assert any(pytest.approx(line, rel=1e-3) == day.line for line in lines), day.name
        assert pytest.approx(day.line, rel=NEAR) == day.plan_rpm, day.name
    assert len(close) >= 6
    assert 3 <= sum(day.verdict != "go" for day in close)


def test_daily_work_inside_proven_ground_is_rarely_a_caution(answers: dict[str, dict[str, Any]]) -> None:
    daily = [day for day in THIRTY if day.daily]
    for verdicts in ([day.verdict for day in daily], [answers[day.name]["verdict"] for day in daily]):
        assert "no-go" not in verdicts
        assert verdicts.count("caution") <= CRY_WOLF * len(daily)
