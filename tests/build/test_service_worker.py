"""The service worker's life, in Chromium: kept whole or not at all, offline, updated when told, mended."""

import functools
import hashlib
import re
import shutil
import threading
from collections import Counter
from collections.abc import Callable, Iterator
from http.server import ThreadingHTTPServer
from pathlib import Path
from typing import Any

import pytest

import server as web

KIND = """kind => new Promise(resolve => {
  const channel = new MessageChannel();
  channel.port1.onmessage = ({ data }) => resolve(data);
  navigator.serviceWorker.controller.postMessage({ kind }, [channel.port2]);
})"""
CONTROLLED = "() => navigator.serviceWorker.controller !== null"
WAITING = "async () => (await navigator.serviceWorker.getRegistration()).waiting !== null"
TAKE = """async () => {
  const { waiting } = await navigator.serviceWorker.getRegistration();
  const changed = new Promise(done => navigator.serviceWorker.addEventListener('controllerchange', done));
  waiting.postMessage({ kind: 'take' });
  await changed;
}"""
FETCHES = "url => fetch(url, { cache: 'no-store' }).then(response => response.status, () => 'no network')"


@pytest.fixture
def page(chromium: Any) -> Iterator[Any]:
    """A page in a fresh profile."""
    context = chromium.new_context()
    yield context.new_page()
    context.close()


def visit(page: Any, url: str) -> None:
    """First visit, until the service worker serves the page."""
    page.goto(url)
    page.wait_for_function(CONTROLLED)


def until(page: Any, asked: str) -> None:
    """Wait for what an asynchronous function says."""
    for _ in range(200):
        if page.evaluate(asked):
            return
        page.wait_for_timeout(50)
    raise TimeoutError(asked)


def ask(page: Any, kind: str) -> dict:
    return page.evaluate(KIND, kind)


def state(page: Any) -> dict:
    return ask(page, "state")


def take(page: Any) -> None:
    """Say yes to the waiting version, and wait until it serves the page."""
    page.evaluate(TAKE)


def another_build(dist: Path, out: Path) -> Path:
    """The app with another title, and the service worker's list and build with it."""
    shutil.copytree(dist, out)
    file, worker = out / "index.html", out / "sw.js"
    old = hashlib.sha256(file.read_bytes()).hexdigest()
    file.write_bytes(file.read_bytes().replace(b"</title>", b", next</title>"))
    for twin in (".br", ".gz"):
        for changed in (file, worker):
            changed.with_name(changed.name + twin).unlink(missing_ok=True)
    script = worker.read_text()
    assert old in script
    worker.write_text(
        script.replace(old, hashlib.sha256(file.read_bytes()).hexdigest()).replace(build_of(dist), "next")
    )
    return out


def build_of(dist: Path) -> str:
    (found,) = set(re.findall(r'"([0-9a-f]{10})"', (dist / "sw.js").read_text()))
    return found


def runtime(paths: list[str]) -> list[str]:
    return [path for path in paths if "/runtime/" in path]


def test_first_visit_keeps_every_file_whole_and_survives_the_servers_death(
    page: Any, dist: Path, server: Any
) -> None:
    visit(page, server.url)
    assert state(page) == {"ready": True, "bad": [], "build": build_of(dist)}
    server.kill()
    assert page.evaluate(FETCHES, server.url + "not-kept.txt") == "no network"
    page.reload()
    assert page.title() == "Headwater"


def test_first_visit_brings_no_large_file_twice(page: Any, server: Any) -> None:
    visit(page, server.url)
    assert state(page)["ready"]
    large = [path for path in server.asked() if path.endswith((".wasm", ".zip", ".asm.mjs"))]
    assert {path: count for path, count in Counter(large).items() if count > 1} == {}
    assert len(large) == 3


def test_an_update_is_offered_and_brings_no_runtime_and_comes_when_taken(
    page: Any, dist: Path, serve: Callable[..., Any], tmp_path: Path
) -> None:
    old = serve(dist)
    visit(page, old.url)
    build = state(page)["build"]
    old.kill()
    new = serve(another_build(dist, tmp_path / "next"), old.port)
    page.reload()
    until(page, WAITING)
    assert state(page)["build"] == build
    assert page.title() == "Headwater"
    assert runtime(new.asked()) == []
    take(page)
    page.reload()
    assert page.title() == "Headwater, next"
    assert state(page) == {"ready": True, "bad": [], "build": "next"}


def test_the_build_before_stays_until_the_new_one_has_run(
    page: Any, dist: Path, serve: Callable[..., Any], tmp_path: Path
) -> None:
    old = serve(dist)
    visit(page, old.url)
    old.kill()
    serve(another_build(dist, tmp_path / "next"), old.port)
    page.reload()
    until(page, WAITING)
    take(page)
    shells = "async () => (await caches.keys()).filter(name => name.includes(' shell ')).length"
    assert page.evaluate(shells) == 2
    ask(page, "ran")
    assert page.evaluate(shells) == 1
    assert state(page)["ready"]


def test_one_bad_file_and_a_version_is_not_installed(
    page: Any, dist: Path, serve: Callable[..., Any], tmp_path: Path
) -> None:
    old = serve(dist)
    visit(page, old.url)
    build = state(page)["build"]
    old.kill()
    broken = another_build(dist, tmp_path / "next")
    (broken / "index.html").write_text("<p>not what was built")
    serve(broken, old.port)
    page.reload()
    ended = """async () => {
      const registration = await navigator.serviceWorker.getRegistration();
      try { await registration.update(); } catch { return "refused"; }
      const worker = registration.installing;
      if (!worker) return registration.waiting ? "waiting" : "gone";
      return new Promise(done => worker.onstatechange = () => done(worker.state));
    }"""
    assert page.evaluate(ended) in ("redundant", "gone", "refused")
    assert state(page) == {"ready": True, "bad": [], "build": build}
    assert page.evaluate("async () => (await caches.keys()).filter(name => name.endsWith('next'))") == []


def test_a_first_install_that_fails_is_told_to_the_page(
    page: Any, dist: Path, serve: Callable[..., Any], tmp_path: Path
) -> None:
    broken = another_build(dist, tmp_path / "next")
    (broken / "manifest.webmanifest").write_text("{}")
    for twin in (".br", ".gz"):
        (broken / f"manifest.webmanifest{twin}").unlink()
    page.add_init_script(
        "window.told = []; navigator.serviceWorker.addEventListener('message', e => window.told.push(e.data))"
    )
    page.goto(serve(broken).url)
    page.wait_for_function("() => window.told.length > 0")
    assert page.evaluate("window.told") == [{"fault": "install"}]
    assert not page.evaluate(CONTROLLED)


def test_what_the_phone_threw_out_is_named_and_mended(page: Any, server: Any) -> None:
    visit(page, server.url)
    assert state(page)["ready"]
    page.evaluate(
        """async () => {
      for (const name of await caches.keys()) {
        const cache = await caches.open(name);
        await cache.delete("manifest.webmanifest");
        const script = (await cache.keys()).find(({ url }) => url.includes("/pyodide.mjs"));
        if (script) await cache.put(script, new Response("cut"));
      }
    }"""
    )
    kept = state(page)
    assert (kept["ready"], [Path(path).name for path in kept["bad"]]) == (
        False,
        ["pyodide.mjs", "manifest.webmanifest"],
    )
    assert ask(page, "repair")["ready"]
    assert state(page)["ready"]


def test_a_repair_without_network_leaves_what_is_there(page: Any, server: Any) -> None:
    visit(page, server.url)
    assert state(page)["ready"]
    page.evaluate(
        """async () => {
      for (const name of await caches.keys()) await (await caches.open(name)).delete("manifest.webmanifest");
    }"""
    )
    server.kill()
    mended = ask(page, "repair")
    assert (mended["ready"], mended["bad"], mended["fault"]) == (False, ["manifest.webmanifest"], "install")
    page.reload()
    assert page.title() == "Headwater"


def test_a_missing_file_is_an_error_never_the_page(page: Any, server: Any) -> None:
    visit(page, server.url)
    assert page.evaluate(FETCHES, server.url + "app/gone.js") == 404
    answer = page.goto(server.url + "no/such/page")
    assert answer.status == 404
    assert page.title() != "Headwater"


def test_two_copies_on_one_host_keep_apart(
    page: Any, dist: Path, serve: Callable[..., Any], tmp_path: Path
) -> None:
    site = tmp_path / "site"
    for name in ("one", "two"):
        shutil.copytree(dist, site / name)
    shutil.copy(dist / "policy.txt", site)
    server = serve(site)
    for name in ("one", "two"):
        visit(page, f"{server.url}{name}/")
        ask(page, "ran")
    server.kill()
    for name in ("one", "two"):
        page.goto(f"{server.url}{name}/")
        assert page.title() == "Headwater"
        assert state(page)["ready"]


def test_a_host_that_redirects_the_page_to_its_folder_will_do(page: Any, dist: Path) -> None:
    class Redirecting(web.Handler):
        def do_GET(self) -> None:
            if self.path == "/index.html":
                self._reply(301, b"", {"Location": "/"}, True)
            else:
                super().do_GET()

    policy = (dist / "policy.txt").read_text().strip()
    handler = functools.partial(Redirecting, directory=str(dist), policy=policy, quiet=True)
    running = ThreadingHTTPServer(("127.0.0.1", 0), handler)
    threading.Thread(target=running.serve_forever, daemon=True).start()
    try:
        visit(page, f"http://localhost:{running.server_address[1]}/")
        assert state(page)["ready"]
        page.reload()
        assert page.title() == "Headwater"
    finally:
        running.shutdown()
        running.server_close()
