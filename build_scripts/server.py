"""Serves the built app as a static host would: types, caching, security headers, compressed files."""

import argparse
import functools
import ssl
import sys
from http.server import SimpleHTTPRequestHandler, ThreadingHTTPServer
from pathlib import Path
from urllib.parse import unquote, urlsplit

TYPES = {
    ".html": "text/html; charset=utf-8",
    ".js": "text/javascript; charset=utf-8",
    ".mjs": "text/javascript; charset=utf-8",
    ".css": "text/css; charset=utf-8",
    ".json": "application/json",
    ".webmanifest": "application/manifest+json",
    ".wasm": "application/wasm",
    ".zip": "application/zip",
    ".svg": "image/svg+xml",
    ".png": "image/png",
    ".txt": "text/plain; charset=utf-8",
}
LASTING = (
    "app",
    "runtime",
)  # folders whose files are named by their content or version; all else is asked for anew
SECURITY = {
    "X-Content-Type-Options": "nosniff",
    "Referrer-Policy": "no-referrer",
    "Permissions-Policy": "camera=(), microphone=(), geolocation=()",
    "Cross-Origin-Opener-Policy": "same-origin",
}


class Handler(SimpleHTTPRequestHandler):
    """Static files; a missing one is 404, never the page."""

    protocol_version = "HTTP/1.1"

    def __init__(self, *args: object, policy: str, quiet: bool, **kwargs: object) -> None:
        self.policy, self.quiet = policy, quiet
        super().__init__(*args, **kwargs)

    def do_GET(self) -> None:
        self._send(body=True)

    def do_HEAD(self) -> None:
        self._send(body=False)

    def _send(self, body: bool) -> None:
        root = Path(self.directory).resolve()
        name = unquote(urlsplit(self.path).path).lstrip("/")
        if not name or name.endswith("/"):
            name += "index.html"
        file = (root / name).resolve()
        if root not in file.parents or not file.is_file() or file.suffix in (".br", ".gz"):
            self._reply(404, b"not found", {"Content-Type": TYPES[".txt"], "Cache-Control": "no-store"}, body)
            return
        headers = {
            "Content-Type": TYPES.get(file.suffix, "application/octet-stream"),
            "Vary": "Accept-Encoding",
        }
        lasting = any(folder.name in LASTING for folder in file.relative_to(root).parents)
        headers["Cache-Control"] = "public, max-age=31536000, immutable" if lasting else "no-cache"
        accepted = self.headers.get("Accept-Encoding", "")
        for coding, ending in (("br", ".br"), ("gzip", ".gz")):
            packed = file.with_name(file.name + ending)
            if coding in accepted and packed.exists():
                headers["Content-Encoding"] = coding
                file = packed
                break
        self._reply(200, file.read_bytes(), headers, body)

    def _reply(self, status: int, content: bytes, headers: dict[str, str], body: bool) -> None:
        self.send_response(status)
        for key, value in {**headers, **SECURITY, "Content-Security-Policy": self.policy}.items():
            self.send_header(key, value)
        self.send_header("Content-Length", str(len(content)))
        self.end_headers()
        if body:
            self.wfile.write(content)

    def log_message(self, format: str, *args: object) -> None:
        if not self.quiet:
            print(f"{self.command} {self.path} {args[1] if len(args) > 1 else ''}", flush=True)


def make(
    folder: Path, host: str, port: int, tls: ssl.SSLContext | None = None, quiet: bool = True
) -> ThreadingHTTPServer:
    """A server of a built folder; port 0 takes a free one."""
    policy = (folder / "policy.txt").read_text().strip() + "; frame-ancestors 'none'"
    handler = functools.partial(Handler, directory=str(folder), policy=policy, quiet=quiet)
    server = ThreadingHTTPServer((host, port), handler)
    server.daemon_threads = True
    if tls:
        server.socket = tls.wrap_socket(server.socket, server_side=True)
    return server


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("folder", type=Path)
    parser.add_argument("--port", type=int, default=0)
    parser.add_argument("--log", action="store_true")
    options = parser.parse_args()
    server = make(options.folder, "127.0.0.1", options.port, quiet=not options.log)
    print(server.server_address[1], flush=True)
    try:
        server.serve_forever()
    except KeyboardInterrupt:
        sys.exit(0)


if __name__ == "__main__":
    main()
