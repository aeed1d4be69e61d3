"""The list of what is kept offline, and the compressed twins of all that compresses."""

import gzip
import hashlib
import shutil
from pathlib import Path

import brotli

from machine import CACHE

_COMPRESSED = (".html", ".js", ".mjs", ".css", ".json", ".webmanifest", ".wasm", ".zip", ".svg", ".txt")

_TWINS = (".br", ".gz")
# The list itself, what only a server reads, and pictures for the install dialogue.
_NOT_KEPT = ("sw.js", "policy.txt", "screenshots/")


def _hash(file: Path) -> str:
    return hashlib.sha256(file.read_bytes()).hexdigest()


def kept(out: Path) -> list[str]:
    """Names of the files that the phone keeps, out of a built folder."""
    names = [path.relative_to(out).as_posix() for path in sorted(out.rglob("*")) if path.is_file()]
    return [name for name in names if not name.startswith(_NOT_KEPT) and not name.endswith(_TWINS)]


def precache(out: Path) -> dict:
    """What the service worker keeps: each file's path and SHA-256, the runtime's apart from the shell's."""
    files = [[name, _hash(out / name)] for name in kept(out)]
    shell = [row for row in files if not row[0].startswith("runtime/")]
    runtime = [row for row in files if row[0].startswith("runtime/")]
    build = hashlib.sha256("".join(digest for _, digest in shell).encode()).hexdigest()[:10]
    return {
        "SHELL_FILES": shell,
        "RUNTIME_FILES": runtime,
        "BUILD": build,
        "RUNTIME": runtime[0][0].split("/")[1],
    }


def weights(out: Path) -> dict[str, int]:
    """Bytes that a browser receives: on a first visit, and of these all but Python."""

    def sent(name: str) -> int:
        packed = out / (name + ".br")
        return (packed if packed.exists() else out / name).stat().st_size

    first = {name: sent(name) for name in [*kept(out), "sw.js"]}
    shell = [size for name, size in first.items() if not name.startswith(("runtime/", "app/core-"))]
    return {"first visit": sum(first.values()), "shell": sum(shell)}


def compress(out: Path) -> None:
    """A brotli 11 and a gzip 9 twin beside each file; kept by content, for brotli takes its time."""
    kept = CACHE / "packed"
    kept.mkdir(parents=True, exist_ok=True)
    for file in sorted(out.rglob("*")):
        if not file.is_file() or file.suffix not in _COMPRESSED:
            continue
        for ending in _TWINS:
            done = kept / (_hash(file) + ending)
            if not done.exists():
                content = file.read_bytes()
                packed = (
                    brotli.compress(content, quality=11)
                    if ending == ".br"
                    else gzip.compress(content, 9, mtime=0)
                )
                done.write_bytes(packed)
            shutil.copy(done, file.with_name(file.name + ending))
