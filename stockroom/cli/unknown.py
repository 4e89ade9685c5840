"""A bottle nobody knows: logged with a number, and named later by evidence."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show_done
from stockroom.cli.shared import of
from stockroom.cli.stock import Happened, when
from stockroom.errors import BadInput
from stockroom.service.typed import amount_of


def unknown(
    ctx: typer.Context,
    what: Annotated[
        str,
        typer.Argument(metavar="LOOK|BOTTLE", help="How it looks; with --is, its number: B52."),
    ],
    place: Annotated[str, typer.Option(metavar="PLACE", help="Where it stands.")] = "",
    size: Annotated[
        str, typer.Option(metavar="AMOUNT", help='What it holds, about: "100 g", "250 cm3".')
    ] = "",
    named: Annotated[
        str, typer.Option("--is", metavar="LINE", help="What it proved to be, by evidence.")
    ] = "",
    evidence: Annotated[str, typer.Option(metavar="TEXT", help="With --is: how it is known.")] = "",
    on: Happened = None,
) -> None:
    """A bottle nobody can name: a number, and a label that says to leave it alone.

    Example: stockroom unknown "brown powder, label gone" --place X1 --size "100 g" --by T1
    """
    from stockroom.service import unknown as service

    shared = of(ctx)
    if named:
        if place or size:
            raise BadInput(f"{what}: named, or logged?", "With --is, leave out --place and --size.")
        happened = when(shared, on)
        done = service.name_unknown(shared.path, what, named, evidence=evidence, **happened)
    else:
        _check_told(what, place=place, size=size, evidence=evidence)
        held = amount_of(size)
        done = service.log_unknown(shared.path, what, held, place=place, **when(shared, on))
    show_done(shared, done)


def _check_told(what: str, *, place: str, size: str, evidence: str) -> None:
    if evidence:
        raise BadInput(f"{what}: evidence of what?", "Say what it is: --is LINE.")
    if not place or not size:
        missing = "where does it stand" if not place else "about how much is in it"
        raise BadInput(
            f"{what}: {missing}?",
            'A new unknown: --place X1 --size "100 g". One named now: BOTTLE --is LINE.',
        )
