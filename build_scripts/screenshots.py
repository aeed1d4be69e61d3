"""Draws the app's own screenshots into static/screenshots/, for the README and the manifest."""

import subprocess
import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
import machine
from machine import ROOT

FOLDER = ROOT / "static" / "screenshots"
SIZES = {"phone": (390, 844), "desk": (1280, 800)}


def main() -> None:
    """Build, serve, open the demo and take one picture of each size."""
    machine.prepare("build,dev")
    machine.in_venv(__file__)
    from playwright.sync_api import sync_playwright

    import build

    build.build()
    FOLDER.mkdir(exist_ok=True)
    command = [sys.executable, str(Path(__file__).with_name("server.py")), str(build.DIST)]
    server = subprocess.Popen(command, stdout=subprocess.PIPE, text=True)
    try:
        port = (server.stdout.readline() if server.stdout else "").strip()
        with sync_playwright() as playwright:
            path = machine.browsers()["chromium"]
            browser = playwright.chromium.launch(executable_path=path, args=["--no-sandbox", "--disable-gpu"])
            for name, (width, height) in SIZES.items():
                page = browser.new_page(viewport={"width": width, "height": height})
                page.goto(f"http://localhost:{port}/#demo")
                page.wait_for_selector("#answer[data-state=go]")
                page.screenshot(path=FOLDER / f"{name}.png")
            browser.close()
    finally:
        server.kill()
    machine.say(f"drew {', '.join(SIZES)}")


if __name__ == "__main__":
    main()
