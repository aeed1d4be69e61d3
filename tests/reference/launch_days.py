"""Thirty launch days: whole cases as an operator types them, each with the verdict and the sums beside it.

Boats, waters and readings are invented. The verdict is what someone who runs such boats would say on the
bank, under the rules of the launch; it was written before the check was asked. The working needs a pocket
calculator and no part of the core:

    head      as in ordinary_days: h = (p_air - p_vapour)/(rho g), 10.17 m at sea level, 9.76 at 366 m, 9.00
              at 1000 m, 8.46 at 1500 m, 7.94 at 2000 m, 7.45 at 2500 m; standing rpm goes as its root [D]
    jet       V_j = (2 x 0.776 P/(rho A_n 1.05))^(1/3) at rest, A_n the nozzle's circle; push
              T = rho A_n V_j (V_j - 0.92 V), V_j taken as at rest: a few percent low at speed
    plane     at volume Froude 2.8: 2.8 sqrt(9.81 (m/1000)^(1/3)), 8.8 m/s at 1 t, 9.7 at 1.8 t, 10.0 at
              2.2 t, 10.3 at 2.6 t
    drag      at the hump, from Savitsky's method with the hump factor for a 10 degree bottom 1.95 m wide:
              0.155, 0.17, 0.187, 0.206 of the weight at 1.8, 2.2, 2.6 and 3.0 t, times 1.07; the mean up to
              the plane is 0.85 of that
    room      1.05 m v^2/(2 (T - R)) at 0.6 of the speed on plane, and the feed-in's first metres; kept to
              turn: five lengths of the bottom, 3.2 beams each
    current   adds or takes its speed times the seconds, 2 x room/v and the feed-in
"""

from dataclasses import dataclass
from typing import Any


@dataclass(frozen=True)
class LaunchDay:
    """One launch: the case as typed, what is expected of the check, and why."""

    name: str
    case: dict[str, Any]
    verdict: str
    why: str
    working: str
    room: float | None = None
    """metres to the plane by hand, in the better direction; None where none was worked out"""
    near: bool = False
    """within some eight percent of a line, in rpm or in room"""
    daily: bool = False
    """a proven boat with an ordinary load and room"""


def note(outcome: str, rpm: str, place: dict[str, str], **more: str) -> dict[str, str]:
    """A note of the pump made standing, or of a launch."""
    speed = {} if outcome in ("planed", "would_not_plane") else {"boat_speed": "0 mph"}
    return {"outcome": outcome, "rpm": rpm, **place, **speed, **more}


# ---- the boats, and what is known of them at home ----
WILLOW_BAR = {"altitude": "1,200 ft", "water_temperature": "54 F"}
SEDGE_WARBLER = {  # T at 3,600 rpm: P 176 hp, V_j 23.9 m/s; 7.6 kN standing, 5.8 kN at 6 m/s
    "label": "Sedge Warbler",
    "nozzle_diameter": "130 mm",
    "impeller_diameter": "215 mm",
    "hub_diameter": "70 mm",
    "shaft_depth": "4 in",
    "wide_open_rpm": "4,200 rpm",
    "engine_power": "280 hp",
    "chine_beam": "1.95 m",
    "dry_mass": "1,450 kg",
}
PUMP = [note("held", "3,700 rpm", WILLOW_BAR), note("let_go", "4,050 rpm", WILLOW_BAR)]
QUICK = note("planed", "3,600 rpm", WILLOW_BAR, load="400 kg", feed_in="2 s", seconds="7 s")
KNOWN = [*PUMP, QUICK]
LONG_REACH = {"room": "200 m"}
CREW = {"people": "3", "fuel": "80 l", "gear": "60 kg"}  # 374 kg: 1.82 t in all
PARTY = {"people": "6", "fuel": "100 l", "gear": "120 kg"}  # 704 kg: 2.15 t in all
FREIGHT = {"people": "8", "fuel": "150 l", "gear": "500 kg"}  # 1,291 kg: 2.74 t in all

PIKE_REACH = {"altitude": "50 m", "water_temperature": "14 C"}
GOOSANDER = {  # two jets, twice the Sedge Warbler's engines, a bottom 2.4 m wide
    **SEDGE_WARBLER,
    "label": "Goosander",
    "jets": "2",
    "engine_power": "560 hp",
    "chine_beam": "2.4 m",
    "dry_mass": "2,600 kg",
}
PAIR = [note("held", "3,700 rpm", PIKE_REACH), note("let_go", "4,050 rpm", PIKE_REACH)]


def day(
    name: str,
    verdict: str,
    why: str,
    working: str,
    plan: dict[str, str] | None = None,
    place: dict[str, str] | None = None,
    boat: dict[str, str] | None = None,
    notes: list[dict[str, str]] | None = None,
    **more: Any,
) -> LaunchDay:
    """A day with the Sedge Warbler and her crew at home, but for what is given."""
    case = {
        "boat": boat or SEDGE_WARBLER,
        "place": {**WILLOW_BAR, **LONG_REACH, **(place or {})},
        "plan": {**CREW, **(plan or {})},
        "notes": KNOWN if notes is None else notes,
    }
    return LaunchDay(name, case, verdict, why, working, **more)


THIRTY_LAUNCHES = [
    # ---- daily work ----
    day(
        "home, crew of three, her usual rpm",
        "go",
        "She does this every day.",
        """1.82 t: v 9.7, hump drag 1.07 x 0.155 x 17.9 kN = 2.97 kN, mean 2.5; push at 5.8 m/s 5.9 kN; net
        3.4 kN: 1.05 x 1820 x 94/6800 = 26 m, a few for the feed-in: 29 m. Room 200 less 31.""",
        {"rpm": "3,600 rpm"},
        room=29,
        daily=True,
    ),
    day(
        "home, six aboard",
        "go",
        "Heavier, but the reach is long.",
        """2.15 t: v 10.0, drag 1.07 x 0.168 x 21.1 = 3.8 kN, mean 3.2; push 5.8; net 2.6: 1.05 x 2150 x
        100/5200 = 43 m, and the feed-in: 46 m of 169.""",
        {**PARTY, "rpm": "3,600 rpm"},
        room=46,
        daily=True,
    ),
    day(
        "home, rpm left to the check",
        "go",
        "Whatever rpm it picks, the reach is long enough.",
        "As with 3,600: some 30 m, less with more rpm; 169 there.",
        daily=True,
    ),
    day(
        "up the river against a brisk current",
        "go",
        "The river holds her back: less ground used.",
        "29 m in some 6.5 s; 1 m/s of current takes 6.5: 22 m.",
        {"rpm": "3,600 rpm", "direction": "up"},
        {"current": "1 m/s"},
        room=22,
        daily=True,
    ),
    day(
        "down the river with it",
        "go",
        "More ground, but there is plenty.",
        "29 + 6.5 = 36 m of 169.",
        {"rpm": "3,600 rpm", "direction": "down"},
        {"current": "1 m/s"},
        room=36,
        daily=True,
    ),
    day(
        "a lake at 1,000 m",
        "go",
        "Home's 3,700 is some 3,550 here; 3,300 asks less.",
        """sqrt(9.0/9.76) = 0.960: 3,700 -> 3,553. At 3,300 push falls by (3,300/3,600)^2 = 0.84 to 4.9 kN;
        net 2.4: 37 m and the feed-in, 41 m.""",
        {"rpm": "3,300 rpm"},
        {"altitude": "1000 m", "water_temperature": "12 C"},
        room=41,
        daily=True,
    ),
    day(
        "a breeze on the nose",
        "go",
        "A little more room, no more.",
        "0.5 x 1.2 x 2.4 x (6 + 5)^2 = 170 N of 3.4 kN: 5 % more, 30 m.",
        {"rpm": "3,600 rpm"},
        {"wind": "breeze"},
        room=30,
        daily=True,
    ),
    day(
        "a pool of eighty metres",
        "go",
        "29 m of 49: known by a timed launch, that is enough.",
        "80 - 31 = 49 m; 29 m with a third on top is 39.",
        {"rpm": "3,600 rpm"},
        {"room": "80 m"},
        room=29,
        daily=True,
    ),
    day(
        "a fizzy tongue under the drop",
        "go",
        "Fine bubbles only: half a percent at most, one at the pump.",
        "0.5 % x 10/5 m of head = 1 % at the impeller, under 2.",
        {"rpm": "3,400 rpm", "water": "fizzy"},
        daily=True,
    ),
    day(
        "cold spring water and a light boat",
        "go",
        "Two aboard, she jumps up.",
        "1.7 t: drag 2.7, mean 2.3 kN; net 3.6 kN: 1.05 x 1700 x 90/7200 = 22 m and the feed-in, 26 m.",
        {"people": "2", "gear": "20 kg", "rpm": "3,600 rpm"},
        {"water_temperature": "40 F"},
        room=26,
        daily=True,
    ),
    day(
        "two jets at sea level",
        "go",
        "Twin pumps, wide bottom, long reach.",
        "3.0 t on 2.4 m: drag about 0.15 W = 4.7 kN, mean 4.0; push 2 x 5.9 = 11.8; net 7.8: 43 m and less.",
        {"rpm": "3,600 rpm"},
        PIKE_REACH,
        GOOSANDER,
        PAIR,
        daily=True,
    ),
    day(
        "a rapid below, with room for it",
        "go",
        "Ten metres more are kept for the rapid.",
        "120 - 31 - 10 = 79 m against 29 and a third.",
        {"rpm": "3,600 rpm"},
        {"room": "120 m", "below": "rapid"},
        room=29,
        daily=True,
    ),
    day(
        "a feed-in counted out slowly",
        "go",
        "Four seconds is slower than she needs.",
        "29 m and two seconds more at a few m/s: 35 m.",
        {"rpm": "3,600 rpm", "feed_in": "4 s"},
        room=35,
        daily=True,
    ),
    day(
        "party of six into a short pool",
        "caution",
        "46 m of 64: a third on top is 61, too near to swear to.",
        "95 - 31 = 64 m; 46 x 1.35 = 62.",
        {**PARTY, "rpm": "3,600 rpm"},
        {"room": "95 m"},
        room=46,
        near=True,
        daily=True,
    ),
    day(
        "weed on the grate",
        "caution",
        "Engine off, clear it first.",
        "No sum: the grate.",
        {"rpm": "3,600 rpm", "grate": "weed"},
        daily=True,
    ),
    # ---- cautions ----
    day(
        "no note of the pump at all",
        "caution",
        "A new boat: nobody knows what the pump holds.",
        "No note.",
        {"rpm": "3,600 rpm"},
        notes=[],
    ),
    day(
        "impeller changed since every note",
        "caution",
        "The notes are of another pump.",
        "All notes older than the set-up.",
        {"rpm": "3,600 rpm"},
        boat={**SEDGE_WARBLER, "date": "2026-06-01"},
        notes=[{**one, "date": "2026-05-01"} for one in KNOWN],
    ),
    day(
        "punched in half a second at the line",
        "caution",
        "3,690 has held rolling up; hit it and the water column wants its share.",
        """Held 3,700 standing. V_1 comes up 9 m/s in half a second: 1.1 m of head of 9.8, and S goes as its
        3/4 power: 8 % over what held. Fed in over seconds it is fine.""",
        {"rpm": "3,690 rpm", "feed_in": "0.5 s"},
        near=True,
    ),
    day(
        "milky water under the fall",
        "caution",
        "Up to 3 % of air: it swells to twice that at the pump.",
        "3 % x 2 = 6 % at worst, over 2.",
        {"rpm": "3,300 rpm", "water": "aerated"},
    ),
    day(
        "standing waves in the run",
        "caution",
        "The stern leaves the water there.",
        "No sum: the run.",
        {"rpm": "3,600 rpm", "standing_waves": "yes"},
    ),
    day(
        "knee-deep gravel bar",
        "caution",
        "Under a metre of water nobody knows her drag without having tried.",
        "Depth 0.8 m.",
        {"rpm": "3,600 rpm"},
        {"depth": "0.8 m"},
    ),
    day(
        "freight at 2,500 m",
        "caution",
        "Near what just planes; a little more drag and she sits behind the hump.",
        """Home's 3,700 is 3,230 here: P 127 hp, V_j 21.4, push at 6 m/s 4.5 kN. 2.15 t: hump drag 3.8 kN
        with 1.07; a fifth to spare, and the drag is known to a fifth.""",
        PARTY,
        {"altitude": "2500 m", "water_temperature": "8 C"},
        near=True,
    ),
    # ---- no-gos ----
    day(
        "freight at 3,000 m",
        "no-go",
        "She does not get over the hump with this.",
        """sqrt(6.98/9.76) = 0.846: 3,130 rpm, P 115 hp, V_j 20.8, push at 6 m/s 4.2 kN. 2.74 t: drag 1.07 x
        0.194 x 26.9 = 5.6 kN.""",
        FREIGHT,
        {"altitude": "3000 m", "water_temperature": "8 C"},
    ),
    day(
        "no room to turn",
        "no-go",
        "A pool of thirty metres for a boat of six.",
        "5 x 6.24 = 31 m to turn, 30 there.",
        {"rpm": "3,600 rpm"},
        {"room": "30 m"},
        near=True,
    ),
    day(
        "party of six, forty-two metres",
        "no-go",
        "She needs more than the whole pool.",
        "46 m against 42.",
        {**PARTY, "rpm": "3,600 rpm"},
        {"room": "42 m"},
        room=46,
        near=True,
    ),
    day(
        "white water at the put-in",
        "no-go",
        "The pump fills with foam.",
        "Over 3 % of air at the surface.",
        {"rpm": "3,300 rpm", "water": "white"},
    ),
    day(
        "all she has, at 2,500 m, hit at once",
        "no-go",
        "4,050 let go at home: that is 3,540 here, and she turns 3,650.",
        """sqrt(7.45/9.76) = 0.874: 4,050 -> 3,538; wide open 4,200 x 0.718^(1.25/3) = 3,658, and at 12 s it
        is no better standing. At the best feed-in she is past it before she moves.""",
        {"rpm": "4,400 rpm", "feed_in": "0.5 s", **PARTY},
        {"altitude": "3500 m", "water_temperature": "15 C"},
    ),
    day(
        "one jet of two, loaded",
        "no-go",
        "Half the push for all the boat.",
        """3.9 t on 2.4 m: drag about 1.07 x 0.18 x 38.3 = 7.4 kN; one jet at 3,600 pushes 5.8 at 6 m/s.""",
        {**FREIGHT, "rpm": "3,600 rpm"},
        PIKE_REACH,
        {**GOOSANDER, "jets_running": "1"},
        PAIR,
    ),
    day(
        "down with the flood into a short reach",
        "no-go",
        "The river carries her through the pool before she is up.",
        "46 m in 10 s; 3 m/s adds 30: 76 m against 70.",
        {**PARTY, "rpm": "3,600 rpm", "direction": "down"},
        {"current": "3 m/s", "room": "70 m"},
        room=76,
        near=True,
    ),
    day(
        "twice her load at home",
        "no-go",
        "Two tonnes of sand on a boat for eight.",
        "3.9 t on 1.95 m: drag 1.07 x 0.24 x 38 = 9.8 kN against 5.8.",
        {"people": "2", "gear": "2,200 kg", "rpm": "3,600 rpm"},
    ),
]
