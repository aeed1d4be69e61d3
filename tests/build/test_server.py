"""The server: right types, caching, compression, security headers, and no page where a file is missing."""

import gzip
import ssl
import tempfile
import threading
import urllib.error
import urllib.request
from collections.abc import Callable
from pathlib import Path
from typing import Any

import brotli
import pytest

import serve
import server as web

Get = Callable[..., Any]
LASTING = "public, max-age=31536000, immutable"


def only(folder: Path, pattern: str) -> str:
    """The one file of a pattern, as the server names it."""
    (file,) = folder.glob(pattern)
    return file.relative_to(folder).as_posix()


@pytest.mark.parametrize(
    ("pattern", "expected"),
    [
        ("index.html", "text/html; charset=utf-8"),
        ("sw.js", "text/javascript; charset=utf-8"),
        ("app/main-*.js", "text/javascript; charset=utf-8"),
        ("app/worker-*.js", "text/javascript; charset=utf-8"),
        ("app/style-*.css", "text/css; charset=utf-8"),
        ("app/core-*.zip", "application/zip"),
        ("manifest.webmanifest", "application/manifest+json"),
        ("runtime/*/pyodide.mjs", "text/javascript; charset=utf-8"),
        ("runtime/*/pyodide.asm.mjs", "text/javascript; charset=utf-8"),
        ("runtime/*/pyodide.asm.wasm", "application/wasm"),
        ("icons/icon.svg", "image/svg+xml"),
        ("icons/icon-512.png", "image/png"),
    ],
)
def test_each_kind_of_file_has_its_type(dist: Path, get: Get, pattern: str, expected: str) -> None:
    assert get(only(dist, pattern)).headers["Content-Type"] == expected


@pytest.mark.parametrize(
    ("pattern", "expected"),
    [
        ("index.html", "no-cache"),
        ("sw.js", "no-cache"),
        ("manifest.webmanifest", "no-cache"),
        ("icons/icon.svg", "no-cache"),
        ("app/main-*.js", LASTING),
        ("app/core-*.zip", LASTING),
        ("runtime/*/pyodide.asm.wasm", LASTING),
    ],
)
def test_only_what_is_named_by_content_or_version_is_kept_for_long(
    dist: Path, get: Get, pattern: str, expected: str
) -> None:
    assert get(only(dist, pattern)).headers["Cache-Control"] == expected


def test_the_root_is_the_page(dist: Path, get: Get) -> None:
    assert get("").read() == (dist / "index.html").read_bytes()


@pytest.mark.parametrize(
    ("accepted", "coding", "unpack"),
    [
        ("gzip, deflate, br", "br", brotli.decompress),
        ("gzip", "gzip", gzip.decompress),
        ("identity", None, bytes),
    ],
)
def test_the_best_accepted_coding_is_sent(
    dist: Path, get: Get, accepted: str, coding: str | None, unpack: Callable[[bytes], bytes]
) -> None:
    answer = get("index.html", Accept_Encoding=accepted)
    assert answer.headers["Content-Encoding"] == coding
    assert answer.headers["Vary"] == "Accept-Encoding"
    assert unpack(answer.read()) == (dist / "index.html").read_bytes()


@pytest.mark.parametrize(
    "path", ["app/gone.js", "no/such/page", "icons/", "../pyproject.toml", "%2e%2e/pyproject.toml"]
)
def test_a_missing_file_is_an_error_and_never_the_page(get: Get, path: str) -> None:
    answer = get(path)
    assert answer.status == 404
    assert answer.headers["Content-Type"] == "text/plain; charset=utf-8"
    assert b"<html" not in answer.read()


def test_head_says_what_get_says(get: Get) -> None:
    asked, whole = get("index.html", method="HEAD"), get("index.html")
    differing = {"Date"}
    assert {k: v for k, v in asked.headers.items() if k not in differing} == {
        k: v for k, v in whole.headers.items() if k not in differing
    }
    assert asked.read() == b""


def test_every_answer_is_guarded(get: Get) -> None:
    for path in ("index.html", "sw.js", "gone"):
        headers = get(path).headers
        policy = dict(
            part.strip().partition(" ")[::2] for part in headers["Content-Security-Policy"].split(";")
        )
        assert policy["default-src"] == "'none'"
        assert policy["connect-src"] == "'self'"
        assert policy["frame-ancestors"] == "'none'"
        assert "unsafe-inline" not in policy["script-src"] and "'unsafe-eval'" not in policy["script-src"]
        assert headers["X-Content-Type-Options"] == "nosniff"
        assert headers["Referrer-Policy"] == "no-referrer"


def test_nothing_answers_once_the_server_is_killed(server: Any) -> None:
    server.kill()
    with pytest.raises(urllib.error.URLError):
        urllib.request.urlopen(server.url)


def test_https_for_a_phone_in_the_same_network(
    dist: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    context = serve._certificate(["127.0.0.1"])
    authority = capsys.readouterr().out.strip().rpartition(" ")[2]
    running = web.make(dist, "127.0.0.1", 0, context)
    threading.Thread(target=running.serve_forever, daemon=True).start()
    trusting = ssl.create_default_context(cafile=authority)
    address = f"https://127.0.0.1:{running.server_address[1]}/"
    try:
        assert urllib.request.urlopen(address, context=trusting).read() == (dist / "index.html").read_bytes()
        with pytest.raises(urllib.error.URLError, match="CERTIFICATE_VERIFY_FAILED"):
            urllib.request.urlopen(address)
    finally:
        running.shutdown()
        running.server_close()
