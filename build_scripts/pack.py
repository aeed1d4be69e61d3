"""The list of what is kept offline, and the compressed twins of all that compresses."""

import gzip
import hashlib
import shutil
from pathlib import Path

import brotli

from machine import CACHE

_COMPRESSED = (".html", ".js", ".mjs", ".css", ".json", ".webmanifest", ".wasm", ".zip", ".svg", ".txt")


_NOT_SHELL = ("runtime/", "screenshots/")  # the one is kept apart, the other is for the install dialogue


def _hash(file: Path) -> str:
    return hashlib.sha256(file.read_bytes()).hexdigest()


def precache(out: Path) -> dict:
    """What the service worker keeps: each file's path and SHA-256, the runtime's apart from the shell's."""
    files = {
        path.relative_to(out).as_posix(): _hash(path) for path in sorted(out.rglob("*")) if path.is_file()
    }
    shell = [[name, digest] for name, digest in files.items() if not name.startswith(_NOT_SHELL)]
    runtime = [[name, digest] for name, digest in files.items() if name.startswith("runtime/")]
    build = hashlib.sha256("".join(digest for _, digest in shell).encode()).hexdigest()[:10]
    return {
        "SHELL_FILES": shell,
        "RUNTIME_FILES": runtime,
        "BUILD": build,
        "RUNTIME": runtime[0][0].split("/")[1],
    }


def compress(out: Path) -> None:
    """A brotli 11 and a gzip 9 twin beside each file; kept by content, for brotli takes its time."""
    kept = CACHE / "packed"
    kept.mkdir(parents=True, exist_ok=True)
    for file in sorted(out.rglob("*")):
        if not file.is_file() or file.suffix not in _COMPRESSED:
            continue
        for ending in (".br", ".gz"):
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
