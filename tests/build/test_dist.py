"""The built folder: whole, small, the same each time, and fit for any host."""

import gzip
import hashlib
import json
import re
import zipfile
from pathlib import Path

import brotli

import bake
import build
import pack

ROOT = Path(__file__).resolve().parents[2]
PYODIDE = ROOT / "pwa" / "node_modules" / "pyodide"
TWINS = (".br", ".gz")
# The list itself, what only servers read, what only an install dialogue shows.
NOT_KEPT = ("sw.js", "policy.txt", "screenshots/desk.png", "screenshots/phone.png")


def plain(folder: Path) -> list[Path]:
    """Files of a built folder without their compressed twins."""
    return sorted(file for file in folder.rglob("*") if file.is_file() and file.suffix not in TWINS)


def sha256(file: Path) -> str:
    return hashlib.sha256(file.read_bytes()).hexdigest()


def hashes(folder: Path) -> dict[str, str]:
    return {file.relative_to(folder).as_posix(): sha256(file) for file in plain(folder)}


def core(folder: Path) -> Path:
    (found,) = folder.glob("app/core-*.zip")
    return found


def test_runtime_is_what_npm_ships(dist: Path) -> None:
    version = json.loads((PYODIDE / "package.json").read_text())["version"]
    folder = dist / "runtime" / version
    assert [file.name for file in plain(folder)] == sorted(bake.RUNTIME_FILES)
    assert {name: sha256(folder / name) for name in bake.RUNTIME_FILES} == {
        name: sha256(PYODIDE / name) for name in bake.RUNTIME_FILES
    }


def test_compressed_twins_hold_the_same_bytes(dist: Path) -> None:
    twins = [file for file in dist.rglob("*") if file.suffix in TWINS]
    assert twins
    for twin in twins:
        unpack = brotli.decompress if twin.suffix == ".br" else gzip.decompress
        assert hashlib.sha256(unpack(twin.read_bytes())).hexdigest() == sha256(twin.with_suffix("")), twin


def test_baked_zip_holds_compiled_modules_alone_stored_and_undated(dist: Path) -> None:
    with zipfile.ZipFile(core(dist)) as archive:
        rows = archive.infolist()
        flags = {archive.read(row)[4:8] for row in rows}
    assert {Path(row.filename).suffix for row in rows} == {".pyc"}
    assert {row.compress_type for row in rows} == {zipfile.ZIP_STORED}
    assert {row.date_time for row in rows} == {(1980, 1, 1, 0, 0, 0)}
    assert flags == {(1).to_bytes(4, "little")}  # hash-based, not checked at import
    names = {row.filename for row in rows}
    assert "headwater/answer.pyc" in names
    assert "headwater/__main__.pyc" not in names


def test_nothing_tells_where_it_was_built(dist: Path) -> None:
    told = [str(path).encode() for path in (ROOT, Path.home()) if len(path.parts) > 1]
    assert told
    for file in plain(dist):
        if "runtime" not in file.relative_to(dist).parts:
            content = file.read_bytes()
            assert [path for path in told if path in content] == [], file


def test_service_worker_lists_every_file_and_its_hash(dist: Path) -> None:
    listed = re.findall(r'\["([^"]+)","([0-9a-f]{64})"\]', (dist / "sw.js").read_text())
    built = hashes(dist).items()
    assert dict(listed) == {name: value for name, value in built if not name.startswith(NOT_KEPT)}


def test_page_asks_for_files_of_its_own_folder_alone(dist: Path) -> None:
    html = (dist / "index.html").read_text()
    links = re.findall(r'\s(?:src|href)="([^"]*)"', html)
    assert "manifest.webmanifest" in links
    assert [link for link in links if re.match(r"[a-z]+:|/", link)] == []
    manifest = json.loads((dist / "manifest.webmanifest").read_text())
    places = [manifest["start_url"], manifest["scope"], *(icon["src"] for icon in manifest["icons"])]
    assert [place for place in places if re.match(r"[a-z]+:|/", place)] == []
    files = {link for link in links if not link.startswith("#")} | {icon["src"] for icon in manifest["icons"]}
    assert [name for name in sorted(files) if not (dist / name).is_file()] == []


def test_page_carries_the_policy_for_hosts_that_send_none(dist: Path) -> None:
    html = (dist / "index.html").read_text()
    found = re.search(r'<meta http-equiv="Content-Security-Policy" content="([^"]+)"', html)
    assert found
    assert found[1].replace("&#39;", "'") == (dist / "policy.txt").read_text().strip()


def test_manifest_makes_the_app_installable(dist: Path) -> None:
    manifest = json.loads((dist / "manifest.webmanifest").read_text())
    assert (manifest["name"], manifest["display"]) == ("Headwater", "standalone")
    assert manifest["id"]
    sizes = {(icon["sizes"], icon.get("purpose", "any")) for icon in manifest["icons"]}
    assert {("192x192", "any"), ("512x512", "any"), ("512x512", "maskable")} <= sizes


def test_wheel_weighs_110_kB_or_less(tmp_path: Path) -> None:
    assert bake.wheel(tmp_path).stat().st_size <= 110_000


def test_shell_without_python_weighs_90_kB_or_less(dist: Path) -> None:
    assert pack.weights(dist)["shell"] <= 90_000


def test_first_visit_weighs_4200_kB_or_less(dist: Path) -> None:
    assert pack.weights(dist)["first visit"] <= 4_200_000


def test_a_second_build_gives_the_same_files(dist: Path, tmp_path: Path) -> None:
    assert hashes(build.build(tmp_path / "again")) == hashes(dist)
