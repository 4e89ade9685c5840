"""The local pages: the same store in a browser on this machine, or, shared, in the room."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.printing import show_done, tell
from stockroom.cli.shared import Shared, at_a_terminal, of
from stockroom.errors import BadInput
from stockroom.service.typed import whole

if TYPE_CHECKING:
    from stockroom.web.serving import Manner

PORT = 8765
"""Our choice: free on most machines, and easily typed."""

MOST_WORKERS = 8
"""Processes that answer: more than a college's machine has cores is of no use. Our choice."""


Certificate = Annotated[
    Path | None, typer.Option(metavar="FILE", help="For TLS, as PEM; with --key.")
]
Key = Annotated[Path | None, typer.Option(metavar="FILE", help="The key to it, as PEM.")]
Names = Annotated[
    list[str] | None,
    typer.Option(metavar="NAME", help="Another name this machine has; may be given again."),
]


def serve(
    ctx: typer.Context,
    port: Annotated[
        str, typer.Option(metavar="NUMBER", help="The port to listen at; 0 for any free one.")
    ] = str(PORT),
    share: Annotated[
        bool, typer.Option("--share", help="Let in the room's network, by passphrase.")
    ] = False,
    host: Annotated[
        str, typer.Option(metavar="ADDRESS", help="With --share: listen at this address only.")
    ] = "",
    name: Names = None,
    certificate: Certificate = None,
    key: Key = None,
    workers: Annotated[
        str, typer.Option(metavar="NUMBER", help=f"Processes that answer, 1 to {MOST_WORKERS}.")
    ] = "1",
    set_passphrase: Annotated[
        str | None,
        typer.Option(metavar="ROLE", help="Set the one for read, record or keep-house, and end."),
    ] = None,
    forget_passphrase: Annotated[
        str | None, typer.Option(metavar="ROLE", help="Take that of a role away, and end.")
    ] = None,
) -> None:
    """Open the store as pages in the browser of this machine, until Ctrl-C.

    Nobody else gets in, unless you --share it; then everybody is asked for a passphrase.

    Example: stockroom serve
    """
    from stockroom.web.serving import serve_house

    shared = of(ctx)
    if set_passphrase is not None or forget_passphrase is not None:
        _passphrase(shared, set_passphrase, forget_passphrase)
        return
    manner = _manner(port, share, host, name or [], certificate, key, workers)
    serve_house(shared.path, given=shared.given_day, manner=manner, say=tell)


def _manner(
    port: str,
    share: bool,
    host: str,
    names: list[str],
    certificate: Path | None,
    key: Path | None,
    workers: str,
) -> Manner:
    from stockroom.web.listening import checked_host, checked_name
    from stockroom.web.serving import Manner

    if host and not share:
        raise BadInput(
            f"--host {host} is for a house that is shared.", "Say --share too, or leave it."
        )
    if (certificate is None) != (key is None):
        given, other = ("--certificate", "--key") if certificate else ("--key", "--certificate")
        raise BadInput(f"{given} is given without {other}.", "TLS needs both.")
    return Manner(
        _within("--port", port, 0, 65535),
        share,
        checked_host(host) if host else "",
        tuple(checked_name(each) for each in names),
        certificate,
        key,
        _within("--workers", workers, 1, MOST_WORKERS),
    )


def _within(option: str, typed: str, least: int, most: int) -> int:
    number = whole(typed, option)
    if not least <= number <= most:
        raise BadInput(f"{option} {typed} is not between {least} and {most}.", "Give one that is.")
    return number


def _passphrase(shared: Shared, to_set: str | None, to_forget: str | None) -> None:
    from stockroom.web.door import setting

    if to_set is not None and to_forget is not None:
        raise BadInput("One passphrase is to be set and one forgotten.", "Do one after the other.")
    if to_set is None:
        assert to_forget is not None
        done = setting.forget_passphrase(shared.path, setting.role_named(to_forget))
    else:
        role = setting.role_named(to_set)
        done = setting.set_passphrase(shared.path, role, _typed(role.words))
    show_done(shared, done)


def _typed(role: str) -> str:
    """The passphrase typed twice at a terminal, unseen; else one line of standard input."""
    if not at_a_terminal():
        return sys.stdin.readline().rstrip("\r\n")
    from getpass import getpass

    first = getpass(f"A passphrase for {role}: ", sys.stderr)
    if getpass("Once more: ", sys.stderr) != first:
        raise BadInput("The two are not the same.", "Nothing was set: try again.")
    return first
