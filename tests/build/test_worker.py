"""The worker and the page around it, in Chromium: what cannot start is said in words."""

import shutil
from collections.abc import Callable
from pathlib import Path
from typing import Any

from headwater.wording import SCREEN


def test_where_webassembly_is_refused_the_page_says_so(
    chromium: Any, dist: Path, serve: Callable[..., Any], tmp_path: Path
) -> None:
    refusing = shutil.copytree(dist, tmp_path / "dist")
    policy = refusing / "policy.txt"
    assert " 'wasm-unsafe-eval'" in policy.read_text()
    policy.write_text(policy.read_text().replace(" 'wasm-unsafe-eval'", ""))
    page = chromium.new_page()
    page.goto(serve(refusing).url)
    page.wait_for_selector("#fault button:visible", timeout=10_000)  # well before any watchdog
    assert SCREEN["fatal_end"] in page.inner_text("#fault")
    page.close()


def test_where_python_does_not_arrive_the_page_says_so_and_starts_again_when_asked(
    chromium: Any, dist: Path, serve: Callable[..., Any], tmp_path: Path
) -> None:
    lacking = shutil.copytree(dist, tmp_path / "dist")
    (core,) = lacking.glob("app/core-*.zip")
    kept = core.rename(tmp_path / core.name)
    page = chromium.new_page()
    page.goto(serve(lacking).url + "#demo")
    page.wait_for_selector("#fault button:visible", timeout=30_000)
    shutil.copy(kept, core)
    page.click("#fault button")
    page.wait_for_selector("#answer[data-state=go], #answer[data-state=caution], #answer[data-state=no-go]")
    assert not page.is_visible("#fault")
    page.close()
