"""The verdict of a steady check: go, caution or no-go, the ground it stands on, its headline's code."""

from typing import NamedTuple

from headwater import suction
from headwater.doubt import CHANCE, DISAGREE_EASE, EQUAL, Reckoning

IDLE_RPM = 700.0  # an engine's idle [P]


class Decision(NamedTuple):
    verdict: str  # "go", "caution", "no-go"
    ground: str  # "done_before", "new", "over", "unknown"
    code: str  # of the headline
    why: list[str]  # codes of what decided it


def over(check: Reckoning) -> list[str]:
    """Codes of what puts the plan past this pump, whatever else is known; empty if nothing does."""
    if check.asked is None:
        return ["no_head"]
    why = []
    at = check.centre
    boiling = suction.static_pressure(check.state, at.vapor_pressure, at.density) <= at.vapor_pressure
    if boiling and not check.stop_dropped:
        why.append("boils_ahead")
    known = check.known_at_plan
    if known.lid and known.lid.x <= check.asked + EQUAL:
        why.append("let_go_here")
    high = check.plan_ratio[1]
    if high is not None and high < 0:
        why.append("past_limit")
    return why


def steady(check: Reckoning, typed: bool, papers_power: bool, holding_rpm: float | None) -> Decision:
    """Verdict of a steady check.

    :param typed: whether a plan was typed; else the question is how far she may be opened
    :param papers_power: a plan in power while rpm and power are out of papers
    :param holding_rpm: the most that is a go at this boat speed [1/min], none where nothing is known to hold
    """
    against = over(check)
    if "no_head" in against and (typed or not check.has_head):
        return Decision("no-go", "over", "no_head", against)
    if not typed and holding_rpm is not None and holding_rpm < IDLE_RPM:
        return Decision("no-go", "over", "under_idle", against)
    if typed and against:
        return Decision("no-go", "over", "over", against)
    if not against:
        decision = _inside(check)
        if decision.verdict == "go" and papers_power:
            return Decision("caution", decision.ground, "papers", ["papers"])
        if decision.verdict == "go":
            return decision
        against = decision.why
    ground = "new" if check.fixed is not None or check.today else "unknown"
    if holding_rpm is None:
        return Decision("caution", ground, "teach" if ground == "unknown" else "none_held", against)
    return Decision("caution", ground, "keep_to" if typed else "up_to", against)


def _inside(check: Reckoning) -> Decision:
    """Rules two and three: what she has done, and new ground with its reserve."""
    known, asked = check.known_at_plan, check.asked
    assert asked is not None
    if (
        check.contradiction
        and known.lid
        and check.rpm >= DISAGREE_EASE * check.rpm_at(known.lid.x, check.boat_speed)
    ):
        return Decision("caution", "new", "keep_to", ["disagree"])
    why = []
    if check.plan_chance is not None:
        if check.plan_chance <= CHANCE * (1 + EQUAL):
            return Decision("go", "done_before", "holds", ["done_before"])
        why.append("chance")
    elif known.held and check.fixed is None:
        why.append("past_proven")
    if check.new_ground_at_plan is not None and asked <= check.new_ground_at_plan + EQUAL:
        return Decision("go", "new", "holds", ["reserve"])
    if check.fixed is not None:
        why.append("no_reserve")
    return Decision("caution", "", "", why or ["none_held" if check.today else "unknown"])
