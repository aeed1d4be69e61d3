"""The verdict of a steady check: go, caution or no-go, the ground it stands on, its headline's code."""

from typing import NamedTuple

from headwater.doubt import CHANCE, EQUAL, Judged, Reckoning
from headwater.launch import IDLE_RPM

FAILS = 0.033  # chance that a launch which is a go fails, pump and room together, at most [P]


class Decision(NamedTuple):
    verdict: str  # "go", "caution", "no-go"
    ground: str  # "done_before", "new", "over", "unknown"
    code: str  # of the headline
    why: list[str]  # codes of what decided it


def over(state: Judged, stop_dropped: bool) -> list[str]:
    """Codes of what puts a state past this pump, whatever else is known; empty if nothing does.

    :param stop_dropped: a held note lies past the stop, so that a measurement is off
    """
    if state.asked is None:
        return ["no_head"]
    why = []
    if state.boils and not stop_dropped:
        why.append("boils_ahead")
    lid = state.known.lid
    if lid and lid.x <= state.asked + EQUAL:
        why.append("let_go_here")
    if state.high is not None and state.high < 0:
        why.append("past_limit")
    return why


def inside(state: Judged, fixed: bool, today: bool) -> Decision:
    """Rules two and three: what she has done, and new ground with its reserve.

    :param fixed: whether the person fixed S
    :param today: whether any note of today's pump set-up counts
    """
    assert state.asked is not None
    if state.disputed:
        return Decision("caution", "new", "keep_to", ["disagree"])
    why = []
    if state.chance is not None:
        if state.chance <= CHANCE * (1 + EQUAL):
            return Decision("go", "done_before", "holds", ["done_before"])
        why.append("chance")
    elif state.known.held and not fixed:
        why.append("past_proven")
    if state.new_ground is not None and state.asked <= state.new_ground + EQUAL:
        return Decision("go", "new", "holds", ["reserve"])
    if fixed:
        why.append("no_reserve")
    return Decision("caution", "", "", why or ["none_held" if today else "unknown"])


def steady(check: Reckoning, typed: bool, papers_power: bool, holding_rpm: float | None) -> Decision:
    """Verdict of a steady check.

    :param typed: whether a plan was typed; else the question is how far she may be opened
    :param papers_power: a plan in power while rpm and power are out of papers
    :param holding_rpm: the most that is a go at this boat speed [1/min], none where nothing is known to hold
    """
    state = check.plan_judged
    against = over(state, check.stop_dropped)
    if "no_head" in against and (typed or not check.has_head):
        return Decision("no-go", "over", "no_head", against)
    if not typed and holding_rpm is not None and holding_rpm < IDLE_RPM:
        return Decision("no-go", "over", "under_idle", against)
    if typed and against:
        return Decision("no-go", "over", "over", against)
    if not against:
        decision = inside(state, check.fixed is not None, check.today)
        if decision.verdict == "go" and papers_power:
            return Decision("caution", decision.ground, "papers", ["papers"])
        if decision.verdict == "go":
            return decision
        against = decision.why
    ground = "new" if check.fixed is not None or check.today else "unknown"
    if holding_rpm is None:
        return Decision("caution", ground, "teach" if ground == "unknown" else "none_held", against)
    return Decision("caution", ground, "keep_to" if typed else "up_to", against)


def hindered(decision: Decision, foam: str, flags: list[str]) -> Decision:
    """A steady verdict in the light of grate and water.

    :param decision: the pump's alone
    :param foam: code of water with so much air that it stops any plan; empty if it has not
    :param flags: codes of what forbids a go by itself
    """
    if foam:
        return Decision("no-go", "over", foam, [foam])
    if flags and decision.verdict == "go":
        return Decision("caution", decision.ground, flags[0], flags)
    return decision


class Launching(NamedTuple):
    """What a launch in one direction comes to."""

    plan: Judged  # its hardest instant under the plan's feed-in
    best: Judged  # the same under the best feed-in
    plan_chance: float  # of letting go under the plan's feed-in, where it is a go
    short_chance: float  # of not being on plane within the room for it
    far_side: bool  # whether the room she needs has a far side; else she may not plane
    far_fits: bool  # whether that is within the room for it
    planes: bool  # under the best feed-in, on the central estimate
    fits: bool  # the same within the whole room
    room_to_turn: bool
    foam: str  # code of water with so much air that it stops any plan; empty if it has not
    flags: list[str]  # codes of what forbids a go by itself


def launch(made: Launching, stop_dropped: bool, fixed: bool, today: bool) -> Decision:
    """Verdict of a launch in one direction.

    :param made: what it comes to
    :param stop_dropped: a held note lies past the stop, so that a measurement is off
    :param fixed: whether the person fixed S
    :param today: whether any note of today's pump set-up counts
    """
    if made.foam:
        return Decision("no-go", "over", made.foam, [made.foam])
    if not made.room_to_turn:
        return Decision("no-go", "over", "launch_turn", ["no_room_to_turn"])
    against = over(made.best, stop_dropped)
    if against:
        return Decision("no-go", "over", "launch_over", against)
    if not made.planes:
        return Decision("no-go", "over", "launch_heavy", ["never_planes"])
    if not made.fits:
        return Decision("no-go", "over", "launch_room", ["over_room"])
    against = over(made.plan, stop_dropped)
    pump = Decision("caution", "new", "", against) if against else inside(made.plan, fixed, today)
    why = list(pump.why)
    if pump.verdict == "go":
        sure = made.far_side and made.far_fits and made.plan_chance + made.short_chance <= FAILS
        if sure and not made.flags:
            return Decision("go", pump.ground, "launch_go", why)
        why = []
    if not made.far_side:
        why.append("may_not_plane")
    elif not made.far_fits or made.short_chance > FAILS:
        why.append("room_tight")
    elif pump.verdict == "go" and not made.flags:
        why.append("both_tight")
    ground = pump.ground or ("new" if fixed or today else "unknown")
    return Decision("caution", ground, "launch_care", [*made.flags, *why])
