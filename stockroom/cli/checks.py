"""What was seen of a bottle: a strength found, a look, its date, lost, turned up, spoiled."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show_done, suggest
from stockroom.cli.shared import of
from stockroom.cli.stock import Bottle, Happened, when
from stockroom.errors import BadInput


def found(
    ctx: typer.Context,
    bottle: Bottle,
    strength: Annotated[
        str, typer.Argument(metavar="STRENGTH", help='With its unit: "0.0987 mol/dm3".')
    ],
    uncertainty: Annotated[
        str,
        typer.Option(metavar="STRENGTH", help='Its standard uncertainty: "0.0002 mol/dm3".'),
    ] = "",
    note: Annotated[str, typer.Option(help="How it was found.")] = "",
    sure: Annotated[
        bool,
        typer.Option("--sure", help="Keep it though it is far from the label, or still stands."),
    ] = False,
    on: Happened = None,
) -> None:
    """A strength was found by titration: the bottle's recheck starts again.

    Example: stockroom found S02 "0.0987 mol/dm3" --by T1
    """
    from stockroom.measure.parsing import parse_strength
    from stockroom.service import checks

    shared = of(ctx)
    result = parse_strength(strength)
    spread = parse_strength(uncertainty, where="--uncertainty") if uncertainty else None
    done = checks.found(
        shared.path, bottle, result, spread=spread, note=note, sure=sure, **when(shared, on)
    )
    show_done(shared, done)
    # what is on the bottle now says another strength and another day
    suggest(shared, f"stockroom label {done.bottle or bottle}")


def look(
    ctx: typer.Context,
    bottle: Bottle,
    good: Annotated[
        bool | None, typer.Option("--good/--bad", help="What the look said.", show_default=False)
    ] = None,
    note: Annotated[str, typer.Option(help='What was seen: "milky with breath".')] = "",
    on: Happened = None,
) -> None:
    """A bottle was looked at: good starts its life again, bad sets it aside.

    Example: stockroom look S03 --good --note "starch blank clear" --by T1
    """
    from stockroom.service import checks

    if good is None:
        raise BadInput(f"{bottle}: was it good or bad?", "Add --good or --bad.")
    shared = of(ctx)
    show_done(shared, checks.look(shared.path, bottle, passed=good, note=note, **when(shared, on)))


def tested(
    ctx: typer.Context,
    bottle: Bottle,
    passed: Annotated[
        bool | None,
        typer.Option("--passed/--failed", help="What the test said.", show_default=False),
    ] = None,
    peroxide: Annotated[
        str,
        typer.Option(metavar="MG_PER_KG", help='As H2O2: "12 mg/kg"; says itself if it passed.'),
    ] = "",
    seen: Annotated[
        str, typer.Option(help="Crystals, cloudy, a stuck cap: it overrules the number.")
    ] = "",
    note: Annotated[str, typer.Option(help="How it was tested, and what was read.")] = "",
    on: Happened = None,
) -> None:
    """A peroxide-former was tested: only this moves its safety date.

    Example: stockroom tested B29 --peroxide "12 mg/kg" --note "strip" --by T1
    """
    from stockroom.service import checks

    shared = of(ctx)
    done = checks.tested(
        shared.path,
        bottle,
        passed=passed,
        peroxide=peroxide,
        seen=seen,
        note=note,
        **when(shared, on),
    )
    show_done(shared, done)


def printed(
    ctx: typer.Context,
    bottle: Bottle,
    reading: Annotated[
        str, typer.Argument(metavar="DATE", help="The day that is meant: 2027-05-04.")
    ],
    on: Happened = None,
) -> None:
    """Say which reading of a printed date is right, where it has two.

    Example: stockroom printed B21 2027-05-04 --by T1
    """
    from stockroom.measure.days import parse_day
    from stockroom.service import checks

    shared = of(ctx)
    day = parse_day(reading, where="DATE")
    show_done(shared, checks.printed(shared.path, bottle, day, **when(shared, on)))


def lost(
    ctx: typer.Context,
    bottle: Bottle,
    note: Annotated[str, typer.Option(help="Where it was looked for.")] = "",
    on: Happened = None,
) -> None:
    """A bottle cannot be found: no plan counts on it until it turns up.

    Example: stockroom lost B28 --by T2
    """
    from stockroom.service import checks

    shared = of(ctx)
    show_done(shared, checks.lost(shared.path, bottle, note=note, **when(shared, on)))


def turned_up(
    ctx: typer.Context,
    bottle: Bottle,
    place: Annotated[
        str | None, typer.Option(metavar="PLACE", help="Where; else its last place.")
    ] = None,
    on: Happened = None,
) -> None:
    """A lost bottle turned up: it is set aside until somebody looks at it.

    Example: stockroom turned-up B28 --place A2 --by T2
    """
    from stockroom.service import checks

    shared = of(ctx)
    show_done(shared, checks.turned_up(shared.path, bottle, place, **when(shared, on)))


def spoil(
    ctx: typer.Context,
    bottle: Bottle,
    reason: Annotated[str, typer.Option("--why", help='What is wrong: "yellow tinge".')] = "",
    on: Happened = None,
) -> None:
    """A bottle is spoiled or suspected: it is set aside, what was made from it is in doubt.

    Example: stockroom spoil S05 --why "yellow tinge, iron suspected" --by T2
    """
    from stockroom.service import checks

    shared = of(ctx)
    show_done(shared, checks.spoil(shared.path, bottle, reason, **when(shared, on)))
