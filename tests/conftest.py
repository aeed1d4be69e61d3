"""What the tests share: the built app, a server of it that can be killed, and Chromium."""

import os
import subprocess
import sys
import time
import urllib.error
import urllib.request
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from playwright.sync_api import Browser, Playwright

ROOT = Path(__file__).resolve().parent.parent
SCRIPTS = ROOT / "build_scripts"
sys.path.insert(0, str(SCRIPTS))

CHROMIUM_OPTIONS = (
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
)


class Server:
    """The app's own server as a process of its own, so that dead means dead."""

    def __init__(self, folder: Path, log: Path, port: int = 0) -> None:
        command = [sys.executable, str(SCRIPTS / "server.py"), str(folder), "--port", str(port), "--log"]
        self._log = log
        with log.open("w") as out:
            self.process = subprocess.Popen(command, stdout=out)
        deadline = time.monotonic() + 20
        while not log.read_text().endswith("\n"):
            assert self.process.poll() is None and time.monotonic() < deadline, "the server did not start"
            time.sleep(0.02)
        self.port = int(log.read_text().split()[0])
        self.url = f"http://localhost:{self.port}/"

    def asked(self) -> list[str]:
        """Paths asked for so far, in order."""
        return [line.split()[1] for line in self._log.read_text().splitlines()[1:]]

    def kill(self) -> None:
        """End the process; nothing answers at its address any more."""
        self.process.kill()
        self.process.wait()


@pytest.fixture(scope="session")
def dist() -> Path:
    """The built app; test.py has built it anew, a bare pytest run takes what is there."""
    import build

    if not (build.DIST / "sw.js").exists():
        build.build()
    return build.DIST


@pytest.fixture
def serve(tmp_path: Path) -> Iterator[Callable[..., Server]]:
    """Starts servers of a folder, and ends those still running when the test is over."""
    started: list[Server] = []

    def start(folder: Path, port: int = 0) -> Server:
        started.append(Server(folder, tmp_path / f"server-{len(started)}.log", port))
        return started[-1]

    yield start
    for server in started:
        server.kill()


@pytest.fixture
def server(dist: Path, serve: Callable[..., Server]) -> Server:
    """The built app, served; ``server.kill()`` takes the network away."""
    return serve(dist)


@pytest.fixture
def get(server: Server) -> Callable[..., urllib.request.addinfourl]:
    """Asks the server for a path, with any request headers; errors come back as responses."""

    def ask(path: str = "", method: str = "GET", **headers: str) -> urllib.request.addinfourl:
        named = {key.replace("_", "-"): value for key, value in headers.items()}
        try:
            return urllib.request.urlopen(
                urllib.request.Request(server.url + path, headers=named, method=method)
            )
        except urllib.error.HTTPError as error:
            return error

    return ask


@pytest.fixture(scope="session")
def playwright() -> "Iterator[Playwright]":
    """Playwright, one for the whole run."""
    from playwright.sync_api import sync_playwright

    with sync_playwright() as playwright:
        yield playwright


@pytest.fixture(scope="session")
def chromium(playwright: "Playwright") -> "Iterator[Browser]":
    """Chromium, by Playwright; each test opens a context of its own."""
    import machine

    browser = playwright.chromium.launch(
        executable_path=machine.browsers()["chromium"], args=list(CHROMIUM_OPTIONS)
    )
    yield browser
    browser.close()


@pytest.hookimpl(trylast=True)
def pytest_sessionfinish(session: pytest.Session) -> None:
    """With CI set a skipped test is a failure: there everything must run."""
    if os.environ.get("CI") and _skipped(session.config):
        session.exitstatus = pytest.ExitCode.TESTS_FAILED


def pytest_terminal_summary(terminalreporter: pytest.TerminalReporter, config: pytest.Config) -> None:
    """Names what was skipped where nothing may be."""
    if os.environ.get("CI"):
        for report in _skipped(config):
            terminalreporter.write_line(f"SKIPPED WITH CI SET: {report.nodeid}", red=True)


def _skipped(config: pytest.Config) -> list[pytest.TestReport]:
    reporter = config.pluginmanager.get_plugin("terminalreporter")
    return list(reporter.stats.get("skipped", [])) if reporter else []
