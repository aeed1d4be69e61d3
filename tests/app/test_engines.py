"""First visit and an answer without network in Firefox and in WebKit."""

import os
import subprocess
import time

import pytest

import machine


def settle(read, wanted, seconds=90):
    """Wait until what is read contains what is wanted; returns what was read last."""
    deadline = time.monotonic() + seconds
    while wanted not in (found := read()) and time.monotonic() < deadline:
        time.sleep(0.2)
    return found


def test_firefox_answers_on_a_first_visit_and_without_network(playwright, server):
    path = machine.browsers()["firefox"]
    browser = playwright.firefox.launch(channel="moz-firefox", executable_path=path)
    page = browser.new_page(viewport={"width": 390, "height": 844})
    page.goto(server.url + "#demo")
    page.wait_for_selector("#answer[data-state=go]", timeout=90_000)
    page.wait_for_selector("#offline[data-ready=true]", timeout=90_000)
    server.kill()
    page.reload()
    page.wait_for_selector("#answer[data-state=go]", timeout=90_000)
    assert page.evaluate("fetch('not-kept').then(() => false, () => true)")
    page.fill("#place-altitude", "8202")
    page.wait_for_selector("#answer[data-state=caution]", timeout=30_000)
    assert "is 3,230 here" in page.text_content("#lead")
    browser.close()


@pytest.fixture
def webkit():
    """WebKitGTK's own small browser under a virtual screen, by its driver."""
    from selenium import webdriver

    display = ":97"
    screen = subprocess.Popen(["Xvfb", display, "-screen", "0", "1280x1000x24"], stderr=subprocess.DEVNULL)
    before = {key: os.environ.get(key) for key in ("DISPLAY", "LIBGL_ALWAYS_SOFTWARE")}
    os.environ.update(DISPLAY=display, LIBGL_ALWAYS_SOFTWARE="1")
    options = webdriver.WebKitGTKOptions()
    options.binary_location = machine.browsers()["webkit"]
    for argument in ("--automation", "--features=StorageAPI,StorageAPIEstimate,FileSystem", "--full-screen"):
        options.add_argument(argument)
    service = webdriver.WebKitGTKService("/usr/bin/WebKitWebDriver")
    driver = webdriver.WebKitGTK(options=options, service=service)
    driver.set_window_rect(0, 0, 393, 852)
    yield driver
    driver.quit()
    screen.kill()
    screen.wait()
    for key, value in before.items():
        os.environ.pop(key, None) if value is None else os.environ.update({key: value})


def test_webkit_answers_on_a_first_visit_and_without_network(webkit, server):
    def read(selector, attribute):
        code = "const e = document.querySelector(arguments[0]); return e ? String(e[arguments[1]]) : ''"
        return webkit.execute_script(code, selector, attribute)

    def answer_state():
        return webkit.execute_script("return document.querySelector('#answer').dataset.state")

    webkit.get(server.url + "#demo")
    assert settle(answer_state, "go") == "go"
    assert "Ready offline" in settle(lambda: read("#offline", "textContent"), "Ready offline")
    server.kill()
    webkit.refresh()
    assert settle(answer_state, "go") == "go"
    code = "const done = arguments[0]; fetch('not-kept').then(() => done(false), () => done(true))"
    assert webkit.execute_async_script(code)
    webkit.execute_script(
        "const e = document.querySelector('#place-altitude'); e.value = '8202';"
        "e.dispatchEvent(new Event('input', {bubbles: true}))"
    )
    assert settle(answer_state, "caution") == "caution"
    assert "is 3,230 here" in read("#lead", "textContent")
