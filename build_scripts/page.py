"""The page and the manifest, rendered from the core's fields and sentences, and the page's policy."""

import base64
import hashlib
import json
import re
from pathlib import Path
from types import SimpleNamespace

import jinja2

from machine import PWA

_POLICY = "; ".join(
    (
        "default-src 'none'",
        "script-src 'self' 'wasm-unsafe-eval' 'sha256-{guard}'",
        "worker-src 'self'",
        "connect-src 'self'",
        "style-src 'self'",
        "img-src 'self' data:",
        "manifest-src 'self'",
        "base-uri 'none'",
        "form-action 'none'",
    )
)


def _policy(html: str) -> str:
    guard = re.search(r'<script id="guard">(.*?)</script>', html, re.DOTALL)
    if guard is None:
        raise ValueError("the page has no start guard")
    return _POLICY.format(guard=base64.b64encode(hashlib.sha256(guard[1].encode()).digest()).decode())


def _field(field) -> dict:
    from headwater import fields

    return {
        **field._asdict(),
        "name": field.key.partition(".")[2],
        "units": field.units,
        "allowed": fields.allowed_text(field),
        "usual": fields.default_text(field),
        "signed": field.low < 0,
    }


def render(out: Path, links: dict[str, str], demo: dict) -> str:
    """Write index.html and the manifest; returns the content security policy."""
    from headwater import __version__, fields, units, wording

    table = [_field(field) for field in fields.FIELDS]
    data = {
        "links": links,
        "version": __version__,
        "screen": wording.SCREEN,
        "systems": units.SYSTEMS,
        "fields": {
            row["key"]: {"kind": row["kind"], "units": row["units"], "choices": row["choices"]}
            for row in table
        },
        "demo": demo["case"],
    }
    environment = jinja2.Environment(
        loader=jinja2.FileSystemLoader(PWA),
        autoescape=True,
        undefined=jinja2.StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    context = {
        "fields": {row["key"]: row for row in table},
        "part": lambda name: [row for row in table if row["key"].startswith(name + ".")],
        "links": links,
        "screen": SimpleNamespace(**wording.SCREEN),  # a dict's own methods would hide its sentences
        "version": __version__,
        "systems": units.SYSTEMS,
        "lets_go": wording.LETS_GO,
        "not_checked": wording.NOT_CHECKED,
        "cautions": wording.CAUTIONS_ALWAYS,
        "data": json.dumps(data, ensure_ascii=False, separators=(",", ":")).replace("<", "\\u003c"),
        "policy": "@policy@",
    }
    html = environment.get_template("index.html.j2").render(context)
    policy = _policy(html)
    (out / "index.html").write_text(html.replace("@policy@", policy))
    (out / "manifest.webmanifest").write_text(json.dumps(_manifest(wording.SCREEN), indent=1))
    return policy


def _manifest(screen: dict[str, str]) -> dict:
    icons = [
        {"src": f"icons/icon-{size}.png", "sizes": f"{size}x{size}", "type": "image/png"}
        for size in (192, 512)
    ]
    maskable = {
        "src": "icons/maskable-512.png",
        "sizes": "512x512",
        "type": "image/png",
        "purpose": "maskable",
    }
    return {
        "id": "./?app=headwater",
        "name": screen["title"],
        "short_name": screen["title"],
        "description": screen["tagline"],
        "start_url": "./",
        "scope": "./",
        "display": "standalone",
        "background_color": "#ffffff",
        "theme_color": "#111111",
        "icons": [*icons, maskable],
        "screenshots": [
            {
                "src": "screenshots/phone.png",
                "sizes": "390x844",
                "type": "image/png",
                "form_factor": "narrow",
            },
            {"src": "screenshots/desk.png", "sizes": "1280x800", "type": "image/png", "form_factor": "wide"},
        ],
    }
