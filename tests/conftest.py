"""What the tests share: the built app, and a server of it that can be killed."""

import os
import subprocess
import sys
import urllib.request
from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent
SCRIPTS = ROOT / "build_scripts"
sys.path.insert(0, str(SCRIPTS))


class Server:
    """The app's own server as a process of its own, so that dead means dead."""

    def __init__(self, folder: Path, port: int = 0) -> None:
        command = [sys.executable, str(SCRIPTS / "server.py"), str(folder), "--port", str(port)]
        self.process = subprocess.Popen(command, stdout=subprocess.PIPE, text=True)
        assert self.process.stdout is not None
        self.port = int(self.process.stdout.readline())
        self.url = f"http://localhost:{self.port}/"

    def kill(self) -> None:
        """End the process; nothing answers at its address any more."""
        self.process.kill()
        self.process.wait()


@pytest.fixture(scope="session")
def dist() -> Path:
    """The built app; test.py has built it anew, a bare pytest run takes what is there."""
    import build

    if not (build.DIST / "index.html").exists():
        build.build()
    return build.DIST


@pytest.fixture
def serve() -> Iterator[Callable[..., Server]]:
    """Starts servers of a folder, and ends those still running when the test is over."""
    started: list[Server] = []

    def start(folder: Path, port: int = 0) -> Server:
        started.append(Server(folder, port))
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

    def ask(path: str = "", **headers: str) -> urllib.request.addinfourl:
        named = {key.replace("_", "-"): value for key, value in headers.items()}
        try:
            return urllib.request.urlopen(urllib.request.Request(server.url + path, headers=named))
        except urllib.error.HTTPError as error:
            return error

    return ask


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
