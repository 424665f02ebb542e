"""Where the application listens: a socket held from the first moment, and what keeps it from being had, in words."""

from __future__ import annotations

import errno
import socket

from django.core.management.base import CommandError

EVERYWHERE = ("0.0.0.0", "::", "")  # noqa: S104 (what a person asked for with --host)


def listen(host: str, port: int) -> socket.socket:
    if not 1 <= port <= 65535:
        raise CommandError(f"--port is {port}; allowed is a number from 1 to 65535.")
    try:
        family, kind, protocol, _, place = socket.getaddrinfo(
            host or None, port, type=socket.SOCK_STREAM, flags=socket.AI_PASSIVE
        )[0]
    except (socket.gaierror, UnicodeError) as fault:
        raise CommandError(f"--host is {host!r}, which is no address of this machine.") from fault
    sock = socket.socket(family, kind, protocol)
    sock.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
    try:
        sock.bind(place)
        sock.listen(128)
    except OSError as fault:
        sock.close()
        raise CommandError(why_not(fault, host, port)) from fault
    return sock


def why_not(fault: OSError, host: str, port: int) -> str:
    if fault.errno == errno.EADDRINUSE:
        return f"Port {port} is taken by another program. Choose another one: python3 manage.py start --port {port + 1}"
    if fault.errno == errno.EACCES:
        return f"Port {port} may only be used by the administrator. Choose one above 1023, such as --port 8000."
    if fault.errno == errno.EADDRNOTAVAIL:
        return f"--host is {host!r}, which is no address of this machine."
    return f"Cannot listen on {host}, port {port}: {fault.strerror}."


def names(host: str) -> list[str]:
    """The names by which a browser may ask for this machine when it listens on `host`."""
    if host not in EVERYWHERE:
        return [host]
    name = socket.gethostname()
    found = [name, f"{name}.local"]
    try:
        found += [str(entry[4][0]) for entry in socket.getaddrinfo(name, None, type=socket.SOCK_STREAM)]
    except socket.gaierror:
        pass
    outward = outward_address()
    return list(dict.fromkeys([*found, *([outward] if outward else [])]))


def outward_address() -> str | None:
    """This machine's address in its own network. Nothing is sent: connecting a datagram socket only picks a route."""
    with socket.socket(socket.AF_INET, socket.SOCK_DGRAM) as probe:
        try:
            probe.connect(("192.0.2.1", 9))  # an address reserved for documentation, RFC 5737
        except OSError:
            return None
        return str(probe.getsockname()[0])


def url(host: str, port: int) -> str:
    """What to type into a browser on this machine."""
    if host in EVERYWHERE:
        host = "127.0.0.1"
    return f"http://[{host}]:{port}/" if ":" in host else f"http://{host}:{port}/"
