"""Sets the machine up, builds the app, serves it and opens the check with the demo boat."""

from __future__ import annotations  # so that an older Python gets as far as being told

import argparse
import ipaddress
import socket
import ssl
import sys
import tempfile
import webbrowser
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
import machine


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--port", type=int, default=8321)
    parser.add_argument("--no-open", action="store_true", help="do not open a browser")
    parser.add_argument(
        "--https", action="store_true", help="for a phone in the same network, own certificate"
    )
    options = parser.parse_args()
    machine.prepare("build")
    machine.in_venv(__file__)
    import build
    import server

    folder = build.build()
    host, names, tls = "127.0.0.1", ["localhost"], None
    if options.https:
        host, names = "0.0.0.0", [_own_address(), "localhost"]
        tls = _certificate(names)
    try:
        running = server.make(folder, host, options.port, tls, quiet=False)
    except OSError as error:
        sys.exit(f"Port {options.port} cannot be used ({error.strerror}): choose another with --port.")
    scheme, port = "https" if tls else "http", running.server_address[1]
    address = f"{scheme}://{names[0]}:{port}/#demo"
    print(f"Headwater with the demo boat: {address}", flush=True)
    if not options.no_open:
        webbrowser.open(address)
    try:
        running.serve_forever()
    except KeyboardInterrupt:
        print("stopped")


def _own_address() -> str:
    """This machine's address in its network; no packet is sent."""
    with socket.socket(socket.AF_INET, socket.SOCK_DGRAM) as probe:
        try:
            probe.connect(("192.0.2.1", 9))
            return str(probe.getsockname()[0])
        except OSError:
            return "127.0.0.1"


def _certificate(names: list[str]) -> ssl.SSLContext:
    import trustme

    authority = trustme.CA()
    addresses = [str(ipaddress.ip_address(name)) for name in names if name[0].isdigit()]
    issued = authority.issue_cert(*addresses, "localhost", "127.0.0.1")
    context = ssl.SSLContext(ssl.PROTOCOL_TLS_SERVER)
    issued.configure_cert(context)
    trusted = Path(tempfile.gettempdir()) / "headwater-ca.pem"
    authority.cert_pem.write_to_path(str(trusted))
    print(f"Trust this certificate on the phone, for this try only: {trusted}", flush=True)
    return context


if __name__ == "__main__":
    main()
