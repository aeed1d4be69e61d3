"""The steady verdict: each rule, its edges and what it says. The boat and its notes are invented."""

import pytest

from headwater.answer import answer

BOAT = {
    "nozzle_diameter": "130 mm",
    "impeller_diameter": "215 mm",
    "hub_diameter": "70 mm",
    "shaft_depth": "0.1 m",
    "wide_open_rpm": 4200,
    "engine_power": "280 hp",
}
HOME = {"altitude": "366 m", "water_temperature": "12 C"}


def note(outcome, rpm, **more):
    return {"outcome": outcome, "rpm": rpm, "boat_speed": "0 m/s", **HOME, **more}


def check(notes=(), plan=None, boat=None, place=None):
    case = {
        "boat": BOAT | (boat or {}),
        "place": HOME | (place or {}),
        "plan": {"rpm": 3600} if plan is None else plan,
        "notes": list(notes),
    }
    found = answer(case)
    assert found["errors"] == []
    return found


def codes(found, part="reasons"):
    return [row["code"] for row in found[part]]


HELD, GONE = note("held", 3700), note("let_go", 4050)


def test_no_harder_than_a_held_note_is_go_done_before():
    found = check([HELD, GONE], {"rpm": 3700})
    assert ("go", "done_before") == (found["verdict"], found["ground"])
    assert found["headline"]["text"] == "GO · the pump holds"


def test_one_held_note_alone_proves_its_own_rpm():
    assert check([HELD], {"rpm": 3700})["verdict"] == "go"


def test_just_past_what_held_is_caution_with_the_rpm_that_is_go():
    found = check([HELD], {"rpm": 3720})
    assert ("caution", "new") == (found["verdict"], found["ground"])
    assert "keep it to 3,700 rpm" in found["headline"]["text"]


def test_at_what_let_go_is_no_go_and_says_what_she_holds():
    found = check([HELD, GONE], {"rpm": 4050})
    assert ("no-go", "over") == (found["verdict"], found["ground"])
    assert "let_go_here" in codes(found)
    assert "she holds 3,700 rpm standing" in found["headline"]["text"]


def test_a_let_go_close_above_withholds_the_go_and_eight_per_cent_gives_it():
    assert check([HELD, note("let_go", 3700 * 1.05)], {"rpm": 3700})["verdict"] == "caution"
    assert check([HELD, note("let_go", 3700 * 1.085)], {"rpm": 3700})["verdict"] == "go"


def test_holding_repeated_gives_the_go_that_one_note_could_not():
    close = note("let_go", 3700 * 1.065)
    assert check([HELD, close], {"rpm": 3700})["verdict"] == "caution"
    assert check([HELD, HELD, HELD, close], {"rpm": 3700})["verdict"] == "go"


def test_no_note_at_all_is_caution_unknown_and_leads_with_the_share_of_sea_level():
    found = check([], {"rpm": 1500}, place={"altitude": "2500 m"})
    assert ("caution", "unknown") == (found["verdict"], found["ground"])
    assert codes(found)[0] == "share"
    assert codes(found)[-1] == "teach_first"
    assert "I don't know this pump yet" in found["headline"]["text"]
    assert found["values"]["holding_rpm"] is None


def test_new_ground_needs_a_note_on_each_side_and_its_reserve():
    held, flared = note("held", 3300), note("flared", 3900)
    found = check([held, flared], {"rpm": 3500})
    assert ("go", "new") == (found["verdict"], found["ground"])
    assert check([held], {"rpm": 3350})["verdict"] == "caution"


def test_well_under_where_the_revs_ran_up_is_go_though_nothing_was_held():
    found = check([note("flared", 3900)], {"rpm": 3400})
    assert ("go", "new") == (found["verdict"], found["ground"])
    assert check([note("flared", 3900)], {"rpm": 3600})["verdict"] == "caution"
    assert check([GONE], {"rpm": 2000})["verdict"] == "caution"


def test_past_a_learned_flare_line_is_caution():
    found = check([note("held", 3300), note("flared", 3700), GONE], {"rpm": 3700})
    assert ("caution", "new") == (found["verdict"], found["ground"])


def test_a_typical_flare_line_never_makes_a_caution():
    found = check([HELD, GONE], {"rpm": 3700})
    assert found["values"]["flare_rpm"]["mark"] == "P"
    assert found["verdict"] == "go"


def test_notes_that_contradict_prove_nothing_over_the_let_go_and_forbid_a_go_from_five_per_cent_under_it():
    notes = [note("held", 3950), note("held", 3300), note("let_go", 3700)]
    assert check(notes, {"rpm": 3300})["verdict"] == "go"
    found = check(notes, {"rpm": 3600})
    assert found["verdict"] == "caution"
    assert "disagree" in codes(found)
    assert "notes_disagree" in codes(found, "cautions")
    assert check(notes, {"rpm": 3700})["verdict"] == "no-go"
    assert found["values"]["holding_rpm"]["value"] < 0.95 * 3700


def test_held_above_let_go_within_their_scatter_is_no_contradiction():
    found = check([note("held", 3710), note("let_go", 3700)], {"rpm": 3000})
    assert codes(found, "cautions") == []


def test_older_set_up_notes_are_hints_only():
    notes = [note("held", 3700, date="2026-05-01"), note("let_go", 4050, set_up="2025-01-01")]
    found = check(notes, {"rpm": 2000}, {"date": "2026-06-01"})
    assert ("caution", "unknown") == (found["verdict"], found["ground"])
    assert codes(found, "cautions") == ["older_notes_only"]
    found = check([*notes, note("held", 3600, date="2026-06-02")], {"rpm": 3600}, {"date": "2026-06-01"})
    assert ("go", "done_before") == (found["verdict"], found["ground"])


def test_an_older_let_go_never_stops():
    old = note("let_go", 3500, set_up="2025-01-01")
    assert check([HELD, old], {"rpm": 3600}, {"date": "2026-06-01"})["verdict"] != "no-go"


def test_a_note_without_boat_speed_proves_nothing_and_is_asked_for():
    held = {key: value for key, value in HELD.items() if key != "boat_speed"}
    found = check([held], {"rpm": 3000})
    assert ("caution", "unknown") == (found["verdict"], found["ground"])
    assert codes(found, "cautions") == ["note_needs_speed"]


def test_papers_block_a_go_for_a_plan_in_power_alone():
    papers = {"rpm_from": "papers"}
    found = check([HELD, GONE], {"power": "150 hp"}, papers)
    assert ("caution", "done_before") == (found["verdict"], found["ground"])
    assert check([HELD, GONE], {"rpm": 3400}, papers)["verdict"] == "go"
    assert check([HELD, note("let_go", 4600)], {}, papers | {"wide_open_rpm": 3690})["verdict"] == "go"


def test_with_no_plan_the_answer_says_how_far_she_may_go():
    found = check([HELD, GONE], {})
    assert found["verdict"] == "caution"
    assert "standing: up to 3,700 rpm. Wide open from" in found["headline"]["text"]
    assert check([note("held", 4200)], {})["verdict"] == "go"


def test_with_no_plan_only_a_pump_that_holds_less_than_idle_is_no_go():
    weak = [note("held", 720), note("let_go", 900)]
    assert check(weak, {})["verdict"] == "caution"
    found = check(weak, {}, place={"altitude": "3000 m"})
    assert ("no-go", "under_idle") == (found["verdict"], found["headline"]["code"])


def test_a_plan_past_wide_open_is_answered_with_a_caution_that_names_the_limit():
    found = check([note("held", 4400)], {"rpm": 4300})
    assert found["verdict"] == "go"
    assert "4,120 rpm" in found["cautions"][0]["text"]  # of 4,200 at sea level
    assert found["values"]["holding_rpm"]["capped"] is True


def test_water_that_boils_ahead_of_the_impeller_is_no_go():
    found = check([note("held", 2000)], {"rpm": 4900})
    assert ("no-go", "over") == (found["verdict"], found["ground"])
    assert "boils_ahead" in codes(found)


def test_a_held_note_past_that_stop_drops_it_and_says_that_a_measurement_is_off():
    found = check([note("held", 5000)], {"rpm": 4900})
    assert found["verdict"] == "go"
    assert "measurement_off" in codes(found, "cautions")


def test_no_head_at_the_pump_is_no_go():
    high = {"altitude": "6000 m", "water_temperature": "45 C"}
    found = check(
        [HELD],
        {"rpm": 4200, "boat_speed": "0 m/s"},
        {"shaft_depth": "-0.5 m", "nozzle_diameter": "200 mm", "intake_loss": 2},
        high,
    )
    assert ("no-go", "over") == (found["verdict"], found["ground"])
    assert codes(found)[1:] == ["no_head", *codes(found)[2:]]


def test_a_fixed_s_is_new_ground_with_its_reserve_and_notes_are_checked_against_it():
    fixed = {"suction_specific_speed": 430}
    found = check([], {"rpm": 3200}, fixed)
    assert ("go", "new") == (found["verdict"], found["ground"])
    assert check([], {"rpm": 3500}, fixed)["verdict"] == "caution"
    assert check([note("let_go", 3000)], {"rpm": 3100}, fixed)["verdict"] == "no-go"
    assert "fixed_disagrees" in codes(check([note("let_go", 3000)], {"rpm": 2000}, fixed), "cautions")


def test_a_larger_reserve_asks_for_more_on_new_ground():
    fixed = {"suction_specific_speed": 430}
    typical = check([], {"rpm": 3200}, fixed)["values"]["holding_rpm"]["value"]
    careful = check([], {"rpm": 3200, "reserve": 1.3}, fixed)["values"]["holding_rpm"]["value"]
    assert careful < typical


def test_speed_gives_back_what_altitude_took():
    high = {"altitude": "2500 m"}
    standing = check([HELD, GONE], {"rpm": 3500}, place=high)
    assert standing["verdict"] == "caution"
    speed = standing["headline"]["values"]["plan_speed"]
    running = check([HELD, GONE], {"rpm": 3500, "boat_speed": f"{speed + 0.1:.2f} m/s"}, place=high)
    assert running["verdict"] == "go"


@pytest.mark.parametrize("speed", ["0 m/s", "4 m/s", "11 m/s", "23 m/s"])
@pytest.mark.parametrize("notes", [[HELD], [HELD, GONE], [note("held", 3300), note("flared", 3900)]])
def test_the_rpm_that_she_holds_is_go_and_half_a_per_cent_more_is_not(speed, notes):
    holding = check(notes, {"rpm": 3000, "boat_speed": speed})["values"]["holding_rpm"]["value"]
    assert check(notes, {"rpm": holding * (1 - 1e-6), "boat_speed": speed})["verdict"] == "go"
    assert check(notes, {"rpm": holding * 1.005, "boat_speed": speed})["verdict"] != "go"
