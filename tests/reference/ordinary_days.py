"""Thirty ordinary days: whole cases as an operator types them, each with the verdict and the sums beside it.

Boats, waters and readings are invented. The verdict is what someone who runs such boats would say on
the bank, under the rules of the check; it was written before the check was asked. The working needs a
pocket calculator and no part of the core:

    head      h = (p_air - p_vapour)/(rho g), in m; standard atmosphere 1976, vapour pressure IAPWS-IF97,
              density Kell 1975; as printed for 15 C water: 10.167, 8.999, 8.456, 7.939, 7.448, 6.981 m
              at 0, 1000, 1500, 2000, 2500, 3000 m
    tips      shaft depth less half the impeller, added to h: what the blade tips have standing
    standing  rpm here = rpm there x sqrt(tips here/tips there), exact at rest whatever the losses [D]
    running   ram head 0.75 (0.92 V_0)^2/(2 g), less 0.15 V_1^2/(2 g) for the intake, typical losses [M];
              S = impeller rpm x sqrt(Q)/NPSHA^0.75; the same S is the same demand on the pump. V_j from the
              head and power balance, e P = rho A_n V_j ((1.03 V_j^2 + 0.15 V_1^2)/2 - g ram), e = 0.776
    gap       with one held note alone at the plan's own rpm a let-go must stand about 8 % above it
"""

from dataclasses import dataclass
from typing import Any


@dataclass(frozen=True)
class Day:
    """One day: the case as typed, what is expected of the check, and why."""

    name: str
    case: dict[str, Any]
    verdict: str
    ground: str
    why: str
    working: str
    plan_rpm: float | None
    """engine rpm of the plan, by hand; None where no plan is typed"""
    equivalents: tuple[float | None, ...]
    """each note's rpm here at the plan's boat speed, by hand; None where the note has no boat speed"""
    line: float | None = None
    """rpm here of the line (holds, revs run up, lets go) that the plan lies within 5 % of"""
    daily: bool = False
    """daily work inside ground that this boat has proven"""


def note(
    outcome: str, rpm: str, place: dict[str, str], boat_speed: str | None = "0 mph", **more: str
) -> dict[str, str]:
    """A note made at a place; boat_speed None leaves it out."""
    speed = {} if boat_speed is None else {"boat_speed": boat_speed}
    return {"outcome": outcome, "rpm": rpm, **place, **speed, **more}


# ---- the boats ----
MARSH_WREN = {  # tips -0.107 m
    "label": "Marsh Wren",
    "nozzle_diameter": "5.12 in",
    "impeller_diameter": "8.46 in",
    "hub_diameter": "2.76 in",
    "wide_open_rpm": "4,200 rpm",
    "engine_power": "280 hp",
}
GRAY_HERON = {  # two jets; tips -0.122 m
    "label": "Gray Heron",
    "jets": 2,
    "nozzle_diameter": "0.150 m",
    "impeller_diameter": "0.245 m",
    "hub_diameter": "80 mm",
    "wide_open_rpm": "3800 rpm",
    "engine_power": "560 kW",
}
SANDPIPER = {  # tips -0.095 m
    "label": "Sandpiper",
    "nozzle_diameter": "4.6 in",
    "impeller_diameter": "7.5 in",
    "hub_diameter": "2.5 in",
    "wide_open_rpm": "5,000 rpm",
    "engine_power": "200hp",
}
KESTREL = {  # tips +0.050 - 0.100 = -0.050 m
    "label": "Kestrel",
    "nozzle_diameter": "120 mm",
    "impeller_diameter": "200 mm",
    "hub_diameter": "66 mm",
    "shaft_depth": "5 cm",
    "wide_open_rpm": "4600 rpm",
    "engine_power": "190 kW",
}
MUDLARK = {  # slow and big; tips +0.100 - 0.140 = -0.040 m
    "label": "Mudlark",
    "nozzle_diameter": "170 mm",
    "impeller_diameter": "280 mm",
    "hub_diameter": "90 mm",
    "shaft_depth": "10 cm",
    "wide_open_rpm": "3,000 rpm",
    "engine_power": "300 hp",
}
WATER_OUZEL = {  # geared down 1.25; tips -0.114 m
    "label": "Water Ouzel",
    "gear_ratio": 1.25,
    "nozzle_diameter": "5.5 in",
    "impeller_diameter": "9 in",
    "hub_diameter": "3 in",
    "wide_open_rpm": "4,500 rpm",
    "engine_power": "320 hp",
}
BANK_SWALLOW = {  # a small impeller for its nozzle; tips -0.100 m
    "label": "Bank Swallow",
    "nozzle_diameter": "130 mm",
    "impeller_diameter": "200 mm",
    "hub_diameter": "67 mm",
    "wide_open_rpm": "4,200 rpm",
    "engine_power": "280 hp",
}


def at(label: str, altitude: str, water_temperature: str) -> dict[str, str]:
    """A place by its altitude, standard air."""
    return {"label": label, "altitude": altitude, "water_temperature": water_temperature}


# ---- the waters ----
TIDE_LANDING = at("Tide Landing", "60 ft", "55 F")
COTTON_BAR = at("Cotton Bar", "200 ft", "56F")
OTTER_FLATS = at("Otter Flats", "300 m", "14 C")
STONE_WHARF = at("Stone Wharf", "4,500 ft", "54 F")
HOLLOW_FORD = at("Hollow Ford", "800 ft", "58 °F")
LONG_QUAY = at("Long Quay", "150 m", "16 C")
HAY_BRIDGE = at("Hay Bridge", "500 ft", "57 F")
BROAD_REACH = at("Broad Reach", "500 m", "12 C")
MILE_PUT_IN = at("Mile Put-in", "5,000 ft", "52 F")
GRAVEL_YARD = at("Gravel Yard", "700 m", "12 C")
TWO_CEDARS = at("Two Cedars", "2,400 ft", "56 F")
RUSHY_BEND = at("Rushy Bend", "450 m", "15 C")
MILL_STAIRS = at("Mill Stairs", "600 m", "12 C")
UPPER_STAIRS = at("Upper Stairs", "1,000 m", "12 C")
LOW_BANK = at("Low Bank", "300 ft", "48 F")
SCREE_LAKE = at("Scree Lake", "1,800 m", "9 C")


THIRTY = (
    # ---- daily work ----
    Day(
        "home water, a little under what she held",
        {
            "boat": MARSH_WREN,
            "place": TIDE_LANDING,
            "plan": {"rpm": "3,500 rpm"},
            "notes": [note("held", "3,600 rpm", TIDE_LANDING), note("let_go", "3,960 rpm", TIDE_LANDING)],
        },
        "go",
        "done_before",
        "She has held 100 rpm more on this very water, and lets go only 10 % above that.",
        """Same place: nothing moves. 3,500 is 2.8 % under the 3,600 held; the let-go is 10 % over it (8
        asked). (h = (101.11 - 1.48) kPa/(999.4 x 9.80665) = 10.165 m.)""",
        3500,
        (3600, 3960),
        line=3600,
        daily=True,
    ),
    Day(
        "the home boat at six thousand feet, throttled back",
        {
            "boat": MARSH_WREN,
            "place": at("Elk Meadow", "6,000 ft", "52 F"),
            "plan": {"rpm": "2,950 rpm"},
            "notes": [note("held", "3,400 rpm", COTTON_BAR), note("let_go", "3,740 rpm", COTTON_BAR)],
        },
        "go",
        "done_before",
        "The home 3,400 is about 3,050 up here, and the plan stays 100 under.",
        """There (100.59 - 1.53) kPa: h 10.108, tips 10.001 m. Here (81.20 - 1.32) kPa: h 8.149, tips 8.042
        m. sqrt(8.042/10.001) = 0.8967: 3,400 -> 3,049; 3,740 -> 3,354. 2,950 is 3.2 % under 3,049.""",
        2950,
        (3049, 3354),
        line=3049,
        daily=True,
    ),
    Day(
        "rescue cover on the high lake",
        {
            "boat": KESTREL,
            "place": at("Glacier Gate", "3450 m", "6 C"),
            "plan": {"rpm": "2850 rpm"},
            "notes": [
                note("held", "3300 rpm", at("Boat House", "1500 m", "12 C")),
                note("let_go", "3620 rpm", at("Boat House", "1500 m", "12 C")),
            ],
        },
        "go",
        "done_before",
        "Two thousand metres up costs 11 % of the rpm; they planned on 13 or more.",
        """There (84.56 - 1.40) kPa: h 8.484, tips 8.434 m. Here (66.20 - 0.94) kPa: h 6.656, tips 6.606 m.
        sqrt(6.606/8.434) = 0.8850: 3,300 -> 2,921; 3,620 -> 3,204. 2,850 is 2.4 % under 2,921.""",
        2850,
        (2921, 3204),
        line=2921,
        daily=True,
    ),
    Day(
        "two jets, the usual tour higher up the valley",
        {
            "boat": GRAY_HERON,
            "place": at("Weir Pool", "1,200 m", "11 C"),
            "plan": {"rpm": "2,900 rpm"},
            "notes": [
                note("held", "3,150 rpm", OTTER_FLATS),
                note("held", "3,100 rpm", OTTER_FLATS),
                note("let_go", "3,400 rpm", OTTER_FLATS),
            ],
        },
        "go",
        "done_before",
        "Held twice down the valley; both come to more than the plan here.",
        """There (97.77 - 1.60) kPa: h 9.814, tips 9.692 m. Here (87.72 - 1.31) kPa: h 8.814, tips 8.692 m.
        sqrt(8.692/9.692) = 0.9470: 3,150 -> 2,983; 3,100 -> 2,936; 3,400 -> 3,220. 2,900 is 2.8 % under
        2,983. Both jets alike: each is asked what it was asked there.""",
        2900,
        (2983, 2936, 3220),
        line=2983,
        daily=True,
    ),
    Day(
        "more revs once she runs twenty",
        {
            "boat": MARSH_WREN,
            "place": STONE_WHARF,
            "plan": {"rpm": "3,200 rpm", "boat_speed": "20 mph"},
            "notes": [note("held", "3,100 rpm", STONE_WHARF), note("let_go", "3,400 rpm", STONE_WHARF)],
        },
        "go",
        "done_before",
        "At twenty the river feeds the pump; 3,200 there is easier than 3,100 standing.",
        """(85.90 - 1.42) kPa: h 8.619, tips 8.511 m. 20 mph = 8.94 m/s: ram 0.75 (8.225)^2/19.613 = 2.587 m.
        Held, standing: V_j 21.03, Q 0.2793, V_1 8.62: 8.511 - 0.15 x 3.789 = 7.943 m; S 346.3. Let go: S
        402.1. Plan: V_j 22.45, Q 0.2982, V_1 9.20: 8.511 + 2.587 - 0.15 x 4.316 = 10.451 m; S 300.6, 13 %
        under 346.3. At 20 mph S 346.3 is 3,503 rpm (Q 0.3246, 10.331 m), S 402.1 is 3,848 rpm (Q 0.3549,
        10.181 m).""",
        3200,
        (3503, 3848),
        daily=True,
    ),
    Day(
        "four fifths throttle with a small boat",
        {
            "boat": SANDPIPER,
            "place": at("Fir Point", "3 000 ft", "55 F"),
            "plan": {"throttle": "80 %"},
            "notes": [
                note("held", "4,100 rpm", HOLLOW_FORD),
                note("held", "4,080 rpm", HOLLOW_FORD),
                note("let_go", "4,450 rpm", HOLLOW_FORD),
            ],
        },
        "go",
        "done_before",
        "Her 5,000 is about 4,760 up here, four fifths of it 3,810; her two good runs come to over 3,900.",
        """There (98.43 - 1.65) kPa: h 9.877, tips 9.782 m. Here (90.81 - 1.48) kPa: h 9.115, tips 9.020 m.
        sqrt(9.020/9.782) = 0.9603: 4,100 -> 3,937; 4,080 -> 3,918; 4,450 -> 4,273. Wide open:
        torque (90.81/101.325)^1.2 (288.15/282.2)^0.6 = 0.888, rpm 5,000 x 0.888^(1.25/3) = 4,758, four fifths
        3,807, 3.3 % under 3,937.""",
        3807,
        (3937, 3918, 4273),
        line=3937,
        daily=True,
    ),
    Day(
        "survey boat with a plan in kilowatts",
        {
            "boat": MUDLARK,
            "place": at("Dam Foot", "900 m", "13 °C"),
            "plan": {"power": "110 kW"},
            "notes": [note("held", "2,600 rpm", LONG_QUAY), note("let_go", "2,850 rpm", LONG_QUAY)],
        },
        "go",
        "done_before",
        "110 kW turns her about 2,370; she holds nearly 2,490 here, a margin over any error in power.",
        """300 hp = 223.7 kW at 3,000: 3,000 (110/223.7)^(1/3) = 2,368 rpm; 5 % of power is 1.6 % of rpm.
        There (99.54 - 1.82) kPa: h 9.975, tips 9.935 m. Here (90.97 - 1.50) kPa: h 9.129, tips 9.089 m.
        sqrt(9.089/9.935) = 0.9565: 2,600 -> 2,487; 2,850 -> 2,726. 2,368 is 4.8 % under 2,487.""",
        2368,
        (2487, 2726),
        line=2487,
        daily=True,
    ),
    Day(
        "the barometer on the dash, a low day",
        {
            "boat": MARSH_WREN,
            "place": {
                "label": "Ranger Station",
                "altitude": "4,800 ft",
                "station_pressure": "24.80 inHg",
                "water_temperature": "50 F",
            },
            "plan": {"rpm": "3,050 rpm"},
            "notes": [note("held", "3,450 rpm", HAY_BRIDGE), note("let_go", "3,780 rpm", HAY_BRIDGE)],
        },
        "go",
        "done_before",
        "The low glass takes another 20 rpm off; 3,050 is still under what she held.",
        """There (99.51 - 1.59) kPa: h 9.992, tips 9.885 m. 24.80 inHg x 3.386389 = 83.98 kPa (standard
        84.94). Here (83.98 - 1.23) kPa: h 8.441, tips 8.334 m. sqrt(8.334/9.885) = 0.9182: 3,450 ->
        3,168; 3,780 -> 3,471. 3,050 is 3.7 % under 3,168.""",
        3050,
        (3168, 3471),
        line=3168,
        daily=True,
    ),
    Day(
        "altimeter setting from the airfield, revs ran up once",
        {
            "boat": SANDPIPER,
            "place": {
                "label": "Airfield Bend",
                "altitude": "4,200 ft",
                "altimeter_setting": "30,12 inHg",
                "water_temperature": "52 F",
            },
            "plan": {"rpm": "3,700 rpm"},
            "notes": [
                note("held", "4,150 rpm", HOLLOW_FORD),
                note("flared", "4,300 rpm", HOLLOW_FORD),
                note("let_go", "4,550 rpm", HOLLOW_FORD),
            ],
        },
        "go",
        "done_before",
        "Well under the rpm she held clean, and further under where the revs ran up.",
        """30.12 inHg reduced to 4,200 ft: (1019.98^k - 1013.25^k x 0.0065 x 1280.2/288.15)^(1/k) = 874.6
        hPa. There (98.43 - 1.65) kPa: h 9.877, tips 9.782 m. Here (87.46 - 1.32) kPa: h 8.787, tips 8.692
        m. sqrt(8.692/9.782) = 0.9426: 4,150 -> 3,912; 4,300 -> 4,053; 4,550 -> 4,289. 3,700 is 5.4 %
        under 3,912.""",
        3700,
        (3912, 4053, 4289),
        daily=True,
    ),
    Day(
        "no plan typed, a boat that holds wide open",
        {
            "boat": MUDLARK,
            "place": at("Old Lock", "120 m", "18 C"),
            "notes": [note("held", "3,000 rpm", BROAD_REACH), note("held", "2,990 rpm", BROAD_REACH)],
        },
        "go",
        "done_before",
        "She holds wide open from a standstill 380 m higher; down here there is more air over her.",
        """There (95.46 - 1.40) kPa: h 9.596, tips 9.556 m. Here (99.89 - 2.06) kPa: h 9.990, tips 9.950 m.
        sqrt(9.950/9.556) = 1.0204: 3,000 -> 3,061; 2,990 -> 3,051. Wide open is 3,000, 2.0 % under 3,061.""",
        None,
        (3061, 3051),
        daily=True,
    ),
    Day(
        "no plan typed, a boat that lets go wide open",
        {
            "boat": MARSH_WREN,
            "place": MILE_PUT_IN,
            "notes": [note("held", "3,100 rpm", MILE_PUT_IN), note("let_go", "3,350 rpm", MILE_PUT_IN)],
        },
        "caution",
        "new",
        "Asked how far she may go: standing to 3,100, wide open only with way on.",
        """Wide open standing is 4,200 and she lets go at 3,350, so wide open at rest is no go; but no plan
        was typed and 3,100 is far over idle, so it is caution with the figure. (84.31 - 1.32) kPa: h
        8.466 m.""",
        None,
        (3100, 3350),
        daily=True,
    ),
    Day(
        "kilowatts from the papers",
        {
            "boat": {**KESTREL, "rpm_from": "papers"},
            "place": at("Fish Ladder", "1,100 m", "11 C"),
            "plan": {"power": "70 kW"},
            "notes": [
                note("held", "3,700 rpm", GRAVEL_YARD),
                note("held", "3,650 rpm", GRAVEL_YARD),
                note("let_go", "4,050 rpm", GRAVEL_YARD),
            ],
        },
        "caution",
        "done_before",
        "Inside what she has done by any reading, but nobody has seen what rpm 70 kW really is.",
        """4,600 (70/190)^(1/3) = 3,298 rpm, if the papers are right. There (93.19 - 1.40) kPa: h 9.365, tips
        9.315 m. Here (88.79 - 1.31) kPa: h 8.924, tips 8.874 m. sqrt(8.874/9.315) = 0.9760: 3,700 ->
        3,611; 3,650 -> 3,563; 4,050 -> 3,953. 3,298 is 8.7 % under; papers: 15 % power (5 % rpm), 5 %
        rpm.""",
        3298,
        (3611, 3563, 3953),
        daily=True,
    ),
    Day(
        "right at what she held, and she let go close above",
        {
            "boat": SANDPIPER,
            "place": TWO_CEDARS,
            "plan": {"rpm": "3,900 rpm"},
            "notes": [note("held", "3,900 rpm", TWO_CEDARS), note("let_go", "4,050 rpm", TWO_CEDARS)],
        },
        "caution",
        "new",
        "Held once, and 150 rpm more let go: a tach needle's width, not a margin.",
        """Same place. The let-go is 4,050/3,900 = 3.8 % over the one held note and the plan stands right at
        it: 8 % is asked. In ln S the gap is 1.6 x 3.8 = 6.1 % against a scatter of 0.82 %, blurred by the
        plan's own to 1.16 %: weight under the plan about 0.40 x 1.16/6.1 = 7.6 %, over 4 %. (92.84 -
        1.53) kPa: h 9.317 m.""",
        3900,
        (3900, 4050),
        line=3900,
        daily=True,
    ),
    Day(
        "only knows where the revs run up",
        {
            "boat": WATER_OUZEL,
            "place": at("Larch Camp", "2,200 m", "10 C"),
            "plan": {"rpm": "2,950 rpm"},
            "notes": [note("flared", "3,800 rpm", RUSHY_BEND), note("let_go", "4,200 rpm", RUSHY_BEND)],
        },
        "go",
        "new",
        "He never wrote a clean hold, but 14 % under where the revs run up is clean water.",
        """There (96.03 - 1.71) kPa: h 9.628, tips 9.513 m. Here (77.55 - 1.23) kPa: h 7.785, tips 7.671 m.
        sqrt(7.671/9.513) = 0.8979: 3,800 -> 3,412; 4,200 -> 3,771. No held note: flare line 3,412 less 10
        % = 3,071, and 2,950 is 3.9 % under it. S bounded under by 3,412: NPSH ratio at least about
        (3,412/2,950)^2 = 1.34, over 1.10; bounded above by both notes.""",
        2950,
        (3412, 3771),
        line=3071,
        daily=True,
    ),
    Day(
        "the pump's figure measured in the shop",
        {
            "boat": {**GRAY_HERON, "suction_specific_speed": 400},
            "place": UPPER_STAIRS,
            "plan": {"rpm": "2,350 rpm"},
            "notes": [note("held", "2,900 rpm", MILL_STAIRS), note("held", "2,400 rpm", UPPER_STAIRS)],
        },
        "go",
        "new",
        "The shop's figure allows some 3,050 here, and 2,350 is far under even at its worst.",
        """(89.88 - 1.40) kPa: h 9.026, tips 8.904 m. Plan: V_j 17.66, Q 0.3121 each, V_1 7.41: 8.904 - 0.15
        x 2.800 = 8.484 m; S 2,350 sqrt(0.3121)/8.484^0.75 = 264.1. NPSH ratio (400/264.1)^(4/3) = 1.74.
        With every range at its bad end at once (intake loss 0.5, pump 0.92, power +5 %, lengths 1 %): S
        302, ratio 1.46; 1.10 asked. A fixed figure is never proven ground. There (94.32 - 1.40) kPa: tips
        9.357 m, 0.9755: 2,900 -> 2,829.""",
        2350,
        (2829, 2400),
        daily=True,
    ),
    Day(
        "cruising pace, done at that pace before",
        {
            "boat": KESTREL,
            "place": UPPER_STAIRS,
            "plan": {"rpm": "3,800 rpm", "boat_speed": "30 km/h"},
            "notes": [
                note("held", "3,300 rpm", MILL_STAIRS),
                note("let_go", "3,750 rpm", MILL_STAIRS),
                note("held", "4,000 rpm", MILL_STAIRS, "30 km/h"),
            ],
        },
        "go",
        "done_before",
        "She held 4,000 at this pace 400 m lower; that is 3,920 here.",
        """There h 9.480, tips 9.430 m; here (89.88 - 1.40) kPa: h 9.026, tips 8.976 m. 30 km/h = 8.33 m/s:
        ram 0.75 (7.667)^2/19.613 = 2.248 m. Note at pace: Q 0.2928, V_1 10.46: 9.430 + 2.248 - 0.15 x
        5.577 = 10.841 m; S 362.3. Plan: Q 0.2788, V_1 9.96: 8.976 + 2.248 - 0.15 x 5.056 = 10.466 m; S
        344.8, under 362.3. Here at pace: S 362.3 is 3,920 (Q 0.2872, 10.419 m). Standing notes S 311.8 (Q
        0.2364, 8.885 m) and 382.8 (Q 0.2686, 8.726 m) are 3,564 (Q 0.2623, 10.552 m) and 4,059 (Q 0.2969,
        10.364 m). 3,800 is 3.1 % under 3,920.""",
        3800,
        (3564, 4059, 3920),
        line=3920,
        daily=True,
    ),
    Day(
        "home on one of two jets",
        {
            "boat": {**GRAY_HERON, "jets_running": 1},
            "place": at("Shale Narrows", "1900 m", "9 C"),
            "plan": {"rpm": "2750 rpm"},
            "notes": [note("held", "3150 rpm", OTTER_FLATS), note("let_go", "3420 rpm", OTTER_FLATS)],
        },
        "go",
        "done_before",
        "Each pump minds only its own revs; the one still turning is asked less than it has held.",
        """There h 9.814, tips 9.692 m. Here (80.49 - 1.15) kPa: h 8.093, tips 7.970 m. sqrt(7.970/9.692) =
        0.9068: 3,150 -> 2,857; 3,420 -> 3,101. 2,750 is 3.7 % under 2,857. One jet at the same rpm takes
        half the power and passes its own half of the flow: nothing changes for it.""",
        2750,
        (2857, 3101),
        line=2857,
        daily=True,
    ),
    Day(
        "August water, notes made in April",
        {
            "boat": MARSH_WREN,
            "place": at("Low Bank", "300 ft", "86 F"),
            "plan": {"rpm": "3,280 rpm"},
            "notes": [note("held", "3,420 rpm", LOW_BANK), note("let_go", "3,720 rpm", LOW_BANK)],
        },
        "go",
        "done_before",
        "Warm water costs her 50 rpm; they have taken off 140.",
        """48 F: (100.23 - 1.14) kPa: h 10.107, tips 9.999 m. 86 F = 30 C: (100.23 - 4.25) kPa/(995.6 x
        9.80665) = 9.831, tips 9.723 m. sqrt(9.723/9.999) = 0.9861: 3,420 -> 3,372; 3,720 -> 3,668. 3,280
        is 2.7 % under 3,372.""",
        3280,
        (3372, 3668),
        line=3372,
        daily=True,
    ),
    Day(
        "notes from two lakes, on to a third",
        {
            "boat": MUDLARK,
            "place": at("Cirque Lake", "2.4 km", "8 C"),
            "plan": {"rpm": "2,250 rpm"},
            "notes": [
                note("held", "2,420 rpm", SCREE_LAKE),
                note("held", "2,550 rpm", at("Long Quay", "300 m", "17 C")),
                note("let_go", "2,640 rpm", SCREE_LAKE),
            ],
        },
        "go",
        "done_before",
        "What she held at 1,800 m is the harder of the two, and comes to 2,330 here.",
        """Here (75.63 - 1.07) kPa: h 7.604, tips 7.564 m. Scree Lake (81.49 - 1.15) kPa: tips 8.155 m,
        0.9631: 2,420 -> 2,331; 2,640 -> 2,543. Long Quay (97.77 - 1.94) kPa: tips 9.744 m, 0.8811: 2,550
        -> 2,247. The larger counts: 2,250 is 3.5 % under 2,331.""",
        2250,
        (2331, 2247, 2543),
        line=2331,
        daily=True,
    ),
    Day(
        "new impeller in spring, last year's let-go with the old one",
        {
            "boat": {**GRAY_HERON, "date": "2026-04-18"},
            "place": at("Sluice Head", "800 m", "12 C"),
            "plan": {"rpm": "2,900 rpm"},
            "notes": [
                note("held", "3,120 rpm", at("Rope Ferry", "250 m", "13 C"), date="2026-05-09"),
                note("let_go", "3,400 rpm", at("Rope Ferry", "250 m", "13 C"), date="2026-05-09"),
                note("let_go", "2,700 rpm", at("Rope Ferry", "250 m", "13 C"), date="2025-08-02"),
            ],
        },
        "go",
        "done_before",
        "The let-go at 2,700 was the worn impeller; this one has held 3,120.",
        """There (98.36 - 1.50) kPa: h 9.883, tips 9.761 m. Here (92.08 - 1.40) kPa: h 9.251, tips 9.128 m.
        sqrt(9.128/9.761) = 0.9671: 3,120 -> 3,017; 3,400 -> 3,288; 2,700 -> 2,611, an older set-up, which
        never stops. 2,900 is 3.9 % under 3,017.""",
        2900,
        (3017, 3288, 2611),
        line=3017,
        daily=True,
    ),
    # ---- beyond it ----
    Day(
        "the home revs at nine thousand feet",
        {
            "boat": MARSH_WREN,
            "place": at("Pika Basin", "9,000 ft", "48 F"),
            "plan": {"rpm": "3,400 rpm"},
            "notes": [
                note("held", "3,400 rpm", at("Cane Dock", "150 ft", "57 F")),
                note("let_go", "3,700 rpm", at("Cane Dock", "150 ft", "57 F")),
            ],
        },
        "no-go",
        "over",
        "Holds all day at home; up here even what let go at home is 3,130.",
        """There (100.78 - 1.59) kPa: h 10.122, tips 10.015 m. Here (72.44 - 1.14) kPa: h 7.272, tips 7.165
        m. sqrt(7.165/10.015) = 0.8458: 3,400 -> 2,876; 3,700 -> 3,130. 3,400 is 8.6 % over the let-go.""",
        3400,
        (2876, 3130),
    ),
    Day(
        "hitting it at walking pace, high up",
        {
            "boat": SANDPIPER,
            "place": at("Tarn Gate", "7,500 ft", "50 F"),
            "plan": {"rpm": "4,300 rpm", "boat_speed": "8 mph"},
            "notes": [
                note("held", "4,050 rpm", at("Willow Yard", "900 ft", "60 F")),
                note("let_go", "4,400 rpm", at("Willow Yard", "900 ft", "60 F")),
            ],
        },
        "no-go",
        "over",
        "Eight miles an hour gives back 100 rpm of the 500 that the height takes.",
        """There (98.07 - 1.77) kPa: tips 9.735 m; here (76.72 - 1.23) kPa: h 7.700, tips 7.605 m; 8 mph =
        3.58 m/s: ram 0.75 (3.290)^2/19.613 = 0.414 m. Let go: Q 0.2580, V_1 10.18: 8.942 m, S 432.2.
        Plan: Q 0.2533, V_1 10.00: 7.605 + 0.414 - 0.15 x 5.094 = 7.255 m, S 489.5. At 8 mph S 432.2 is
        3,986 rpm (Q 0.2349, 7.362 m); held S 377.9 (Q 0.2375, 9.063 m) is 3,667 (Q 0.2164, 7.461 m).
        4,300 is 7.9 % over the let-go.""",
        4300,
        (3667, 3986),
    ),
    Day(
        "boils ahead of a small impeller",
        {
            "boat": BANK_SWALLOW,
            "place": at("Snow Bowl", "3,400 m", "7 C"),
            "plan": {"rpm": "3,600 rpm"},
            "notes": [
                note("held", "2,700 rpm", at("Saddle Lake", "3,000 m", "8 C")),
                note("held", "2,750 rpm", at("Saddle Lake", "3,000 m", "8 C")),
            ],
        },
        "no-go",
        "over",
        "She never let go because nobody asked this much of her; a third more revs in thin air will.",
        """(66.63 - 1.00) kPa: h 6.693, tips 6.593 m. Plan: V_j 24.36, Q 0.3233, A_1 = 0.7854 (0.200^2 -
        0.067^2) = 0.02789: V_1 11.59 m/s, V_1^2/2g 6.851 m; NPSHA 6.593 - 0.15 x 6.851 = 5.565 m, less
        than 6.851: the pressure ahead of the blades is under boiling by 1.29 m. There (70.12 - 1.07) kPa:
        tips 6.942 m, 0.9745: 2,700 -> 2,631; 2,750 -> 2,680, where V_1^2/2g is 4.00 m and NPSHA 6.34 m:
        no held note lies past the stop.""",
        3600,
        (2631, 2680),
    ),
    Day(
        "a hair over where she would let go",
        {
            "boat": KESTREL,
            "place": at("Upper Hut", "2300 m", "9 C"),
            "plan": {"rpm": "3120 rpm"},
            "notes": [
                note("held", "3100 rpm", at("Lower Hut", "900 m", "12 C")),
                note("let_go", "3350 rpm", at("Lower Hut", "900 m", "12 C")),
            ],
        },
        "no-go",
        "over",
        "Looks like the 3,100 she held, but up here letting go starts at 3,070.",
        """There (90.97 - 1.40) kPa: h 9.138, tips 9.088 m. Here (76.59 - 1.15) kPa: h 7.694, tips 7.644 m.
        sqrt(7.644/9.088) = 0.9171: 3,100 -> 2,843; 3,350 -> 3,072. 3,120 is 1.6 % over the let-go.""",
        3120,
        (2843, 3072),
        line=3072,
    ),
    Day(
        "nearly full power for a tow on the high reservoir",
        {
            "boat": MUDLARK,
            "place": at("High Reservoir", "2,600 m", "7 C"),
            "plan": {"power": "280 hp"},
            "notes": [
                note("held", "2,600 rpm", at("Coal Basin", "100 m", "16 C")),
                note("flared", "2,700 rpm", at("Coal Basin", "100 m", "16 C")),
                note("let_go", "2,860 rpm", at("Coal Basin", "100 m", "16 C")),
            ],
        },
        "no-go",
        "over",
        "She would not take that power at sea level.",
        """3,000 (280/300)^(1/3) = 2,932 rpm. There (100.13 - 1.82) kPa: h 10.036, tips 9.996 m. Here (73.76
        - 1.00) kPa: h 7.420, tips 7.380 m. sqrt(7.380/9.996) = 0.8593: 2,600 -> 2,234; 2,700 -> 2,320;
        2,860 -> 2,457. 2,932 is 19 % over the let-go.""",
        2932,
        (2234, 2320, 2457),
    ),
    Day(
        "let go with way on, asked for more standing",
        {
            "boat": GRAY_HERON,
            "place": at("Chain Pier", "400 m", "14 C"),
            "plan": {"rpm": "3,450 rpm"},
            "notes": [
                note("held", "3,050 rpm", at("Chain Pier", "400 m", "14 C")),
                note("let_go", "3,400 rpm", at("Chain Pier", "400 m", "14 C"), "15 km/h"),
            ],
        },
        "no-go",
        "over",
        "She let go at less with way on; standing is harder still.",
        """(96.61 - 1.60) kPa: h 9.696, tips 9.573 m. 15 km/h = 4.17 m/s: ram 0.75 (3.833)^2/19.613 = 0.562
        m. Let go: Q 0.4540, V_1 10.78: 9.573 + 0.562 - 0.15 x 5.924 = 9.247 m, S 432.0; standing that is
        3,311 rpm (Q 0.4398, 8.740 m). Plan: Q 0.4582, V_1 10.88: 9.573 - 0.15 x 6.035 = 8.668 m, S 462.3.
        4.2 % over 3,311.""",
        3450,
        (3050, 3311),
        line=3311,
    ),
    Day(
        "between what held and what let go",
        {
            "boat": MARSH_WREN,
            "place": at("Ash Crossing", "3,500 ft", "54 F"),
            "plan": {"rpm": "3,240 rpm"},
            "notes": [
                note("held", "3,300 rpm", at("Ferry Steps", "300 ft", "58 F")),
                note("let_go", "3,650 rpm", at("Ferry Steps", "300 ft", "58 F")),
            ],
        },
        "caution",
        "new",
        "Over what she has held and under what let go: nobody knows, so creep up on it.",
        """There (100.23 - 1.65) kPa: h 10.061, tips 9.954 m. Here (89.15 - 1.42) kPa: h 8.950, tips 8.843 m.
        sqrt(8.843/9.954) = 0.9426: 3,300 -> 3,110; 3,650 -> 3,440. 3,240 is 4.2 % over the one, 5.8 %
        under the other; a reserve of 1.10 wants it 4.7 % under what is sure, and what is sure is 3,110.""",
        3240,
        (3110, 3440),
        line=3110,
    ),
    Day(
        "two notes that cannot both be right",
        {
            "boat": MARSH_WREN,
            "place": at("Bend Camp", "1,200 ft", "55 F"),
            "plan": {"rpm": "2,950 rpm"},
            "notes": [
                note("held", "2,600 rpm", at("Bend Camp", "1,200 ft", "55 F")),
                note("held", "3,300 rpm", at("Bend Camp", "1,200 ft", "55 F")),
                note("let_go", "3,050 rpm", at("Bend Camp", "1,200 ft", "55 F")),
            ],
        },
        "caution",
        "new",
        "Held 3,300 one day and let go at 3,050 the next: air, weed or a misread tach; find out first.",
        """Same place. In ln S the held note stands 1.6 x ln(3,300/3,050) = 12.6 % over the let-go; the two
        scatter 1.96 x 0.82 x sqrt(2) = 2.3 %. The 3,300 proves nothing then; 2,950 is over the 2,600 that
        still does, and only 3.3 % under 3,050 (caution from 5 %: 2,898). (97.01 - 1.48) kPa: h 9.747 m.""",
        2950,
        (2600, 3300, 3050),
        line=3050,
    ),
    Day(
        "wear ring changed yesterday, every note is older",
        {
            "boat": {**KESTREL, "date": "2026-06-01"},
            "place": BROAD_REACH,
            "plan": {"rpm": "3,000 rpm"},
            "notes": [
                note("held", "3,300 rpm", BROAD_REACH, date="2025-07-11"),
                note("let_go", "3,600 rpm", BROAD_REACH, date="2025-07-12"),
            ],
        },
        "caution",
        "unknown",
        "Likely better than before, but nobody has tried this ring: one slow roll-up first.",
        """Same place, so 3,300 and 3,600 stay; both belong to the older ring: hints only, no valid note is
        left. (95.46 - 1.40) kPa: h 9.596 m.""",
        3000,
        (3300, 3600),
    ),
    Day(
        "wrote the revs, not whether she was moving",
        {
            "boat": SANDPIPER,
            "place": at("Second Bridge", "2,000 ft", "57 F"),
            "plan": {"rpm": "3,500 rpm"},
            "notes": [
                note("held", "4,000 rpm", at("First Bridge", "700 ft", "57 F"), None),
                note("held", "3,900 rpm", at("First Bridge", "700 ft", "57 F"), None),
            ],
        },
        "caution",
        "unknown",
        "4,000 at twenty miles an hour says nothing about 3,500 standing.",
        """Without a boat speed there is no ram head, no NPSHA and no S: no valid note. (Were they standing:
        tips 9.824 -> 9.357 m, 0.9760, 4,000 -> 3,904: a go.)""",
        3500,
        (None, None),
    ),
)
