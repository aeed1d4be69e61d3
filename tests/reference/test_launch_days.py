"""The check says on thirty launch days what an experienced operator would, and does not cry wolf."""

from collections import Counter
from typing import Any

import pytest
from launch_days import THIRTY_LAUNCHES, LaunchDay

from headwater.answer import answer

each_day = pytest.mark.parametrize("day", THIRTY_LAUNCHES, ids=[day.name for day in THIRTY_LAUNCHES])
CLOSE = 0.25  # of a room, for sums done with a pocket calculator
CRY_WOLF = 1 / 5


@pytest.fixture(scope="module")
def answers() -> dict[str, dict[str, Any]]:
    return {day.name: answer(day.case) for day in THIRTY_LAUNCHES}


@each_day
def test_verdict_is_the_operators(day: LaunchDay, answers: dict[str, dict[str, Any]]) -> None:
    got = answers[day.name]
    assert got["errors"] == []
    assert got["launch"] is not None
    assert day.verdict == got["verdict"], (day.why, got["headline"]["text"], got["reasons"])


@pytest.mark.parametrize("day", [day for day in THIRTY_LAUNCHES if day.room], ids=lambda day: day.name)
def test_room_is_that_worked_by_hand(day: LaunchDay, answers: dict[str, dict[str, Any]]) -> None:
    launched = answers[day.name]["launch"]
    distance = launched[launched["better"]]["distance_to_plane"]["value"]
    assert distance == pytest.approx(day.room, rel=CLOSE)


def test_there_are_thirty_days_with_six_of_each_verdict_and_six_near_a_line() -> None:
    assert len({day.name for day in THIRTY_LAUNCHES}) == len(THIRTY_LAUNCHES) == 30
    counts = Counter(day.verdict for day in THIRTY_LAUNCHES)
    assert set(counts) == {"go", "caution", "no-go"}
    assert min(counts.values()) >= 6
    assert sum(day.near for day in THIRTY_LAUNCHES) >= 6


def test_daily_work_is_rarely_a_caution(answers: dict[str, dict[str, Any]]) -> None:
    daily = [day for day in THIRTY_LAUNCHES if day.daily]
    assert len(daily) >= 15
    for verdicts in ([day.verdict for day in daily], [answers[day.name]["verdict"] for day in daily]):
        assert "no-go" not in verdicts
        assert verdicts.count("caution") <= CRY_WOLF * len(daily)
