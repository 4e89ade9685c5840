"""Where the server listens: the port taken, the names it has there, and its certificate."""

from __future__ import annotations

import errno
import ipaddress
import re
import socket
import ssl
from pathlib import Path

from stockroom.errors import BadInput, NotAllowed
from stockroom.web.house import House

WAITING = 200
"""Connections the machine keeps waiting."""

_NAME = re.compile(r"[a-z0-9]([a-z0-9-]*[a-z0-9])?(\.[a-z0-9]([a-z0-9-]*[a-z0-9])?)*")


def bound(host: str, port: int) -> socket.socket:
    """A socket that listens there, so that whoever comes from now on waits for an answer.

    Raises: NotAllowed for a port that is taken, or an address this machine has not.
    """
    family = socket.AF_INET6 if ":" in host else socket.AF_INET
    place = socket.socket(family, socket.SOCK_STREAM)
    # a port left a moment ago may be taken again; on Windows the word means something else
    if socket.has_dualstack_ipv6() or family is socket.AF_INET:
        place.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
    try:
        place.bind((host, port))
        place.listen(WAITING)
    except OSError as trouble:
        place.close()
        raise NotAllowed(*_why_not(host, port, trouble)) from trouble
    place.set_inheritable(True)
    return place


def _why_not(host: str, port: int, trouble: OSError) -> tuple[str, str]:
    if trouble.errno == errno.EADDRINUSE:
        return (
            f"Port {port} is taken: another program listens there, or stockroom serve itself.",
            f"End that one, or take another: stockroom serve --port {port % 65535 + 1}",
        )
    if trouble.errno in (errno.EACCES, errno.EPERM):
        return f"Port {port} is not free to anybody.", "Take one above 1023: --port 8765"
    if trouble.errno == errno.EADDRNOTAVAIL:
        return f"{host} is no address of this machine.", "Leave --host away for all it has."
    return f"Nothing can listen at {host}, port {port}: {trouble.strerror}.", "Try another --port."


def checked_host(typed: str) -> str:
    """An address in figures to listen at. Raises: BadInput."""
    try:
        return str(ipaddress.ip_address(typed.strip()))
    except ValueError as fault:
        raise BadInput(
            f"--host {typed!r} is no address in figures.", "Write it as 192.168.1.20, or leave it."
        ) from fault


def checked_name(typed: str) -> str:
    """A further name of the machine, as a browser writes it. Raises: BadInput."""
    name = typed.strip().lower()
    if len(name) > 253 or not _NAME.fullmatch(name):
        raise BadInput(f"--name {typed!r} is no name of a machine.", "Write it as prep.college.uk.")
    return name


def names_of(more: tuple[str, ...]) -> tuple[str, ...]:
    """The names a shared house answers to: this machine's own, and those given."""
    own = socket.gethostname().lower()
    short = own.partition(".")[0]
    usual = ("127.0.0.1", "localhost", "[::1]")
    return tuple(dict.fromkeys((*usual, own, short, f"{short}.local", *more)))


def addresses(house: House, host: str) -> list[str]:
    """The addresses to type into a browser, the likeliest first."""
    kind = "https" if house.secure else "http"
    if house.door is None:
        return [f"{kind}://127.0.0.1:{house.port}/"]
    wide = not host or ipaddress.ip_address(host).is_unspecified
    found = [socket.gethostname().lower(), _in_the_room()] if wide else [_bracketed(host)]
    return [f"{kind}://{each}:{house.port}/" for each in dict.fromkeys(filter(None, found))]


def checked_certificate(certificate: Path, key: Path | None) -> None:
    """See that a certificate and its key belong together. Raises: NotAllowed where not."""
    try:
        # never asked for at the terminal: each worker would ask anew
        ssl.SSLContext(ssl.PROTOCOL_TLS_SERVER).load_cert_chain(certificate, key, password="")
    except (OSError, ValueError) as trouble:
        said = getattr(trouble, "reason", None) or getattr(trouble, "strerror", None) or trouble
        raise NotAllowed(
            f"{certificate} and {key} cannot be used as certificate and key: {said}.",
            "Both are PEM files, belong together, and have no passphrase of their own.",
        ) from trouble


def _in_the_room() -> str:
    """This machine's address in its network, in figures; "" where it has none."""
    with socket.socket(socket.AF_INET, socket.SOCK_DGRAM) as asked:
        try:
            # nothing is sent: it only shows by which address it would be (the address is one kept
            # for examples, RFC 5737)
            asked.connect(("192.0.2.1", 9))
        except OSError:
            return ""
        return str(asked.getsockname()[0])


def _bracketed(host: str) -> str:
    return f"[{host}]" if ":" in host else host
