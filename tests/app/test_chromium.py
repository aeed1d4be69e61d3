"""The app in Chromium, used as a guide would: first visit, no network, bad typing, links, restarts."""

import json
import re
import subprocess
import sys
import time
from pathlib import Path

import pytest
from playwright.sync_api import expect

ROOT = Path(__file__).resolve().parents[2]
DEMO = json.loads((ROOT / "static" / "demo.json").read_text())["case"]
PHONE = {"width": 390, "height": 844}
OPTIONS = [
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
]
OPTIONS += ["--disable-component-update", "--disable-sync"]


class Watched:
    """A page with what it asked for and what it complained of."""

    def __init__(self, context, url):
        self.context, self.url = context, url
        self.requests, self.complaints = [], []
        context.on("request", lambda request: self.requests.append(request.url))
        context.add_init_script(
            "addEventListener('securitypolicyviolation',"
            " (e) => console.error('policy: ' + e.violatedDirective))"
        )
        self.page = self.watch(context.new_page())

    def watch(self, page):
        page.on("console", lambda message: message.type == "error" and self.complaints.append(message.text))
        page.on("pageerror", lambda error: self.complaints.append(str(error)))
        return page

    def open(self, fragment=""):
        self.page.goto(self.url + fragment)
        return self.page

    def ready_offline(self):
        self.page.wait_for_selector("#offline[data-ready=true]", timeout=60_000)


@pytest.fixture
def phone(chromium, server):
    context = chromium.new_context(viewport=PHONE)
    yield Watched(context, server.url)
    context.close()


def state(page, wanted, timeout=60_000):
    page.wait_for_selector(f"#answer[data-state={wanted}][data-settled=true]", timeout=timeout)


def text(page, selector):
    return (page.text_content(selector) or "").strip()


def until(page, selector, part):
    page.wait_for_function(
        "([s, t]) => document.querySelector(s).textContent.includes(t)", arg=[selector, part]
    )


def gone(page):
    """Whether the network is gone: a file that is in no cache cannot be had."""
    return page.evaluate("fetch('not-kept-' + Math.random()).then(() => false, () => true)")


def fill_own_boat(page):
    page.click("#to-boat")
    for key, value, unit in (
        ("nozzle_diameter", "130", "mm"),
        ("impeller_diameter", "215", "mm"),
        ("engine_power", "280", "hp"),
    ):
        page.select_option(f"#boat-{key}-unit", unit)
        page.fill(f"#boat-{key}", value)
    page.fill("#boat-wide_open_rpm", "4200")
    page.click("#add-note")
    box = page.locator("#note-list > li").last
    box.locator("[data-input='notes.rpm']").fill("3700")
    box.locator("[data-input='notes.boat_speed']").fill("0")
    box.locator("[data-input='notes.altitude']").fill("1200")
    box.locator("[data-input='notes.water_temperature']").fill("54")
    page.click("#to-putin")
    page.fill("#place-altitude", "1200")
    page.fill("#place-water_temperature", "54")
    page.fill("#plan-hard", "3600")
    state(page, "go")


def command_line(tmp_path, case, *more):
    file = tmp_path / "case.json"
    file.write_text(json.dumps(case))
    command = [sys.executable, "-m", "headwater", "check", str(file), *more]
    done = subprocess.run(command, capture_output=True, text=True, cwd=ROOT / "py", check=True)
    return done.stdout


def test_done_means_offline_the_demo_boat_moved_to_2500_m_reads_as_the_command_line_says(
    phone, server, tmp_path
):
    page = phone.open("#demo")
    state(page, "go")
    phone.ready_offline()
    server.kill()
    page.reload()
    state(page, "go")
    assert gone(page)
    page.select_option("#place-altitude-unit", "m")
    page.fill("#place-altitude", "2500")
    state(page, "caution")
    lead, headline = text(page, "#lead"), text(page, "#headline")
    assert lead == "Your 3,700 at Alder Landing is 3,230 here."
    case = json.loads(json.dumps(DEMO))
    case["place"]["altitude"] = "2500 m"
    printed = command_line(tmp_path, case, "--units", "us")
    assert lead in printed
    assert headline in printed
    assert phone.complaints == [] or all("not-kept" in line or "ERR_" in line for line in phone.complaints)


def test_first_visit_paints_before_python_is_up_and_loses_nothing_that_is_typed(phone):
    page = phone.page
    page.goto(phone.url, wait_until="commit")
    page.wait_for_selector("#place-altitude")
    page.fill("#place-altitude", "1234")
    assert text(page, ".lets-go").startswith("Lets go? To idle")
    page.wait_for_selector("#wrong li", timeout=60_000)
    assert page.input_value("#place-altitude") == "1234"
    assert "Nozzle bore" in text(page, "#wrong")


def test_the_answer_the_place_line_and_the_plan_row_stand_on_the_first_screen(phone):
    page = phone.open("#demo")
    state(page, "go")
    page.fill("#place-altitude", "8200")
    state(page, "caution")  # the longer headline of the two
    for selector in (
        "#headline",
        "#lead",
        "#gauge",
        "#place-altitude",
        "#place-water_temperature",
        "#plan-hard",
    ):
        box = page.locator(selector).bounding_box()
        assert box["y"] >= 0, selector
        assert box["y"] + box["height"] <= PHONE["height"], selector
    bar = page.locator(".lets-go").bounding_box()
    assert bar["y"] + bar["height"] <= PHONE["height"]


@pytest.mark.parametrize("width", [320, 390, 1280])
def test_nothing_scrolls_sideways(chromium, server, width):
    context = chromium.new_context(viewport={"width": width, "height": 800})
    page = context.new_page()
    page.goto(server.url + "#demo")
    state(page, "go")
    for tab in ("#to-putin", "#to-boat"):
        page.click(tab)
        wide = page.evaluate("document.documentElement.scrollWidth - document.documentElement.clientWidth")
        assert wide == 0, tab
    context.close()


def test_controls_are_large_enough_for_gloves_and_text_in_them_does_not_zoom(phone):
    page = phone.open("#demo")
    state(page, "go")
    small = page.evaluate(
        """[...document.querySelectorAll('#putin button, #putin input:not([type=checkbox]), #putin select')]
        .filter((e) => e.offsetParent && (e.getBoundingClientRect().height < 48
          || parseFloat(getComputedStyle(e).fontSize) < 16)).map((e) => e.id)"""
    )
    assert small == []
    assert "user-scalable" not in page.get_attribute("meta[name=viewport]", "content")


def test_bad_readings_are_named_beside_their_inputs_all_at_once_and_kept(phone):
    page = phone.open("#demo")
    state(page, "go")
    page.fill("#place-altitude", "12oo")
    page.fill("#place-water_temperature", "540")
    page.fill("#plan-hard", "fast")
    state(page, "none")
    until(page, "#headline", "3 readings")
    for name in ("place-altitude", "place-water_temperature", "plan-hard"):
        assert text(page, f"#{name}-error") != ""
        assert page.get_attribute(f"#{name}", "aria-invalid") == "true"
    assert page.input_value("#place-altitude") == "12oo"
    assert page.input_value("#plan-hard") == "fast"
    page.fill("#place-altitude", "1,200")
    page.fill("#place-water_temperature", "54")
    page.fill("#plan-hard", "")
    state(page, "go")
    assert text(page, "#place-altitude-error") == ""


def test_a_unit_typed_wins_and_a_unit_switched_turns_the_figure_over(phone):
    page = phone.open("#demo")
    state(page, "go")
    page.fill("#place-altitude", "366 m")
    until(page, "#place-altitude-other", "1,201 ft")
    page.fill("#place-altitude", "1200")
    until(page, "#place-altitude-other", "366 m")
    page.select_option("#place-altitude-unit", "m")
    expect(page.locator("#place-altitude")).to_have_value("366")
    state(page, "go")


@pytest.mark.parametrize("again", range(3))
def test_typing_faster_than_the_answer_ends_with_the_last_one(phone, again):
    page = phone.open("#demo")
    state(page, "go")
    page.reload()
    state(page, "go")
    page.fill("#place-altitude", "2500")
    page.select_option("#place-altitude-unit", "m")
    page.fill("#place-altitude", "2,500")
    for rpm in range(3000, 3600, 25):
        page.fill("#plan-hard", str(rpm))
    page.fill("#plan-hard", "3,600")
    state(page, "caution", 20_000)
    assert page.input_value("#place-altitude") == "2,500"
    assert "to 3,600 rpm" in text(page, "#lines")


def test_notes_are_added_changed_and_removed_and_the_answer_follows(phone):
    page = phone.open("")
    fill_own_boat(page)
    assert "Your 3,700 there is 3,700 here" in text(page, "#lead")
    page.click("#to-boat")
    page.locator("[data-input='notes.rpm']").first.fill("3500")
    page.click("#to-putin")
    state(page, "caution")
    page.click("#to-boat")
    page.click("#note-list .remove")
    page.click("#to-putin")
    until(page, "#headline", "I don't know this pump yet")


def test_the_demo_is_one_tap_away_one_tap_gone_and_leaves_the_own_boat_alone(phone):
    page = phone.open("")
    fill_own_boat(page)
    page.fill("#plan-hard", "3550")
    page.click("#demo-foot")
    page.wait_for_selector("#demo:not([hidden])")
    assert page.input_value("#plan-hard") == "3,600"
    page.fill("#plan-hard", "1000")
    page.click("#demo-close")
    assert page.input_value("#plan-hard") == "3550"
    assert page.is_hidden("#demo")
    page.click("#demo-foot")
    assert page.input_value("#plan-hard") == "3,600"


def test_a_link_opens_elsewhere_read_only_until_made_mine(chromium, server, phone):
    phone.context.grant_permissions(["clipboard-read", "clipboard-write"])
    page = phone.open("#demo")
    state(page, "go")
    page.click("#share")
    until(page, "#share-state", "Link copied")
    sent = page.evaluate("navigator.clipboard.readText()")
    assert "GO · feed it in over" in sent
    link = re.search(r"http\S+#\S+", sent)[0]
    assert len(link.partition("#")[2]) <= 520

    other = Watched(chromium.new_context(viewport=PHONE), server.url)
    other.page.goto(link)
    assert "Sent" in text(other.page, "#sent-state")
    state(other.page, "go")
    assert "read-only" in text(other.page, "#sent-state")
    assert other.page.is_disabled("#place-altitude")
    assert "Demo boat" in text(other.page, "#sent-what")
    other.page.click("#sent-mine")
    state(other.page, "go")
    other.page.reload()
    state(other.page, "go")
    assert other.page.input_value("#place-altitude") == "1,200"
    assert other.page.is_enabled("#place-altitude")
    other.context.close()


@pytest.mark.parametrize("fragment", ["1.cut", "9.abcdefgh", "1.%00%ff", "1." + "A" * 9000])
def test_a_bad_link_is_told_in_plain_words_and_harms_nothing(phone, fragment):
    page = phone.open("")
    fill_own_boat(page)
    page.evaluate(f"location.hash = {json.dumps(fragment)}")
    page.wait_for_selector("#fault:not([hidden])")
    assert "link" in text(page, "#fault")
    assert page.input_value("#plan-hard") == "3600"
    state(page, "go")


def test_nothing_is_asked_of_another_origin_and_no_policy_is_broken(phone):
    page = phone.open("#demo")
    state(page, "go")
    phone.ready_offline()
    page.click("#to-boat")
    page.click("#to-putin")
    assert {url for url in phone.requests if not url.startswith((phone.url, "data:", "blob:"))} == set()
    assert phone.complaints == []
    page.evaluate("setTimeout('window.evaluated = true'); 0")  # text as code is what the policy refuses
    page.wait_for_timeout(200)
    assert page.evaluate("window.evaluated") is None
    assert any("policy: script-src" in line for line in phone.complaints)


@pytest.fixture
def kept_profile(playwright, tmp_path):
    """Starts Chromium with a profile that outlives it."""
    import machine

    opened, path = [], machine.browsers()["chromium"]

    def start():
        launch = playwright.chromium.launch_persistent_context
        opened.append(launch(tmp_path / "profile", executable_path=path, args=OPTIONS, viewport=PHONE))
        return opened[-1]

    yield start
    opened[-1].close()


def test_after_a_restart_without_network_boat_notes_and_typing_are_there_and_the_last_answer_is_dated(
    kept_profile, server
):
    context = kept_profile()
    first = Watched(context, server.url)
    page = first.open("")
    fill_own_boat(page)
    first.ready_offline()
    page.fill("#plan-hard", "3650")
    page.wait_for_timeout(600)
    context.close()
    server.kill()

    context = kept_profile()
    page = context.new_page()
    page.add_init_script(
        "window.Worker = class extends Worker {"
        " postMessage(...a) { setTimeout(() => super.postMessage(...a), 1500) } }"
    )
    page.goto(server.url)
    page.wait_for_selector("#last:not([hidden])")
    assert "Last answer" in text(page, "#last")
    assert "Not fresh" in text(page, "#last")
    assert page.get_attribute("#answer", "data-state") == "none"
    state(page, "go")
    assert page.is_hidden("#last")
    assert page.input_value("#plan-hard") == "3650"
    assert gone(page)
    page.click("#to-boat")
    assert page.locator("#note-list > li").count() == 1
    assert page.input_value("#boat-nozzle_diameter") == "130"


def test_the_app_is_installable(kept_profile, server):
    context = kept_profile()
    page = context.new_page()
    page.goto(server.url)
    page.wait_for_selector("#offline[data-ready=true]", timeout=60_000)
    session = context.new_cdp_session(page)
    deadline = time.monotonic() + 10
    while (
        errors := session.send("Page.getInstallabilityErrors")["installabilityErrors"]
    ) and time.monotonic() < deadline:
        time.sleep(0.3)
    assert errors == []


def test_back_goes_back_and_rotating_keeps_all(phone):
    page = phone.open("#demo")
    state(page, "go")
    page.click("#to-boat")
    assert page.is_visible("#boat")
    page.go_back()
    assert page.is_visible("#putin")
    page.set_viewport_size({"width": 844, "height": 390})
    assert page.is_visible("#headline")
    assert page.input_value("#plan-hard") == "3,600"
    state(page, "go")


def test_night_and_day_are_one_tap_and_remembered(phone):
    page = phone.open("#demo")
    state(page, "go")
    page.click("#theme")
    assert page.get_attribute("html", "data-theme") == "night"
    page.wait_for_timeout(300)
    page.reload()
    page.wait_for_selector("html[data-theme=night]")


def test_done_means_the_loaded_demo_boat_at_2500_m_is_launched_offline_as_the_command_line_says(
    phone, server, tmp_path
):
    page = phone.open("#demo")
    state(page, "go")
    phone.ready_offline()
    server.kill()
    page.reload()
    state(page, "go")
    page.click("#launch-more > summary")
    for name, value in (("altitude", "8202 ft"), ("water_temperature", "46.4"), ("room", "460")):
        page.fill(f"#place-{name}", value)
    for name, value in (("hard", ""), ("people", "7"), ("fuel", "120"), ("gear", "216")):
        page.fill(f"#plan-{name}", value)
    state(page, "caution")
    until(page, "#remedies", "ashore")
    case = json.loads(json.dumps(DEMO))
    case["place"] |= {"altitude": "8202 ft", "water_temperature": "46.4 F", "room": "460 ft"}
    case["plan"] = {"people": "7", "fuel": "120 l", "gear": "216 kg"}
    printed = " ".join(command_line(tmp_path, case).split())
    for selector in ("#headline", "#lead", "#abort", "#heaviest"):
        said = text(page, selector)
        assert said and said in printed, selector
    for remedy in page.locator("#remedies li").all_text_contents():
        assert remedy in printed
    for row in page.locator("#schedule tbody tr").all():
        assert " ".join(row.locator("th, td").all_text_contents()) in printed
    assert "On plane in" in text(page, "#lines")


def test_slip_is_said_on_the_boat_s_page_and_kept(phone):
    page = phone.open("#demo")
    state(page, "go")
    page.click("#to-boat")
    page.click("#slip > summary")
    page.fill("#slip-0-rpm", "4500")
    until(page, "#slip-said", "she slips")
    page.fill("#slip-1-rpm", "fast")
    until(page, "#slip-said", "Allowed")
    page.fill("#slip-1-rpm", "4120")
    page.fill("#slip-1-boat_speed", "20")
    until(page, "#slip-said", "air or vapour")
    page.wait_for_timeout(400)
    page.evaluate("history.replaceState(null, '', location.pathname)")  # else the demo opens afresh
    page.reload()
    state(page, "go")
    assert page.input_value("#slip-0-rpm") == "4500"
