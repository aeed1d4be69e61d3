"""Icons out of one drawing: plain ones and a maskable one with room around it."""

import shutil
from pathlib import Path

import resvg_py

SIZES = (180, 192, 512)


def draw(svg: Path, folder: Path) -> None:
    """PNG files of each size; the maskable one is drawn small on a full ground."""
    folder.mkdir(parents=True)
    text = svg.read_text()
    shutil.copy(svg, folder / "icon.svg")
    for size in SIZES:
        _write(text, size, folder / f"icon-{size}.png")
    inner = text[text.index(">", text.index("<svg")) + 1 : text.rindex("</svg>")]
    maskable = (
        '<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 512 512">'
        '<rect width="512" height="512" fill="#fff"/>'
        f'<g transform="translate(77 77) scale(0.7)">{inner}</g></svg>'
    )
    _write(maskable, 512, folder / "maskable-512.png")


def _write(svg: str, size: int, out: Path) -> None:
    out.write_bytes(bytes(resvg_py.svg_to_bytes(svg_string=svg, width=size, height=size)))
