"""Orders placed with a supplier, and what is still to come of them."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show, show_done, width
from stockroom.cli.shared import of
from stockroom.cli.stock import Happened, when
from stockroom.errors import BadInput
from stockroom.service.typed import amount_of, day_or_none, pence_or_none, whole

_HOW = 'Write it as: stockroom order "silver nitrate" 1 "25 g" --price 46.00'

Dept = Annotated[
    str | None,
    typer.Option("--dept", metavar="CODE", help="Whose money, if it is not to be split."),
]
Cancel = Annotated[
    str | None, typer.Option(metavar="NUMBER", help="Cancel the rest of this order: P01.")
]
PutOff = Annotated[
    str | None,
    typer.Option(metavar="NUMBER", help="This order comes on another day: give --expected."),
]
Why = Annotated[str | None, typer.Option("--why", help="Why it is cancelled or put off.")]


def order(
    ctx: typer.Context,
    line: Annotated[
        str | None,
        typer.Argument(metavar="LINE", help="What it is; or an order of the plan: O02."),
    ] = None,
    packs: Annotated[str | None, typer.Argument(metavar="PACKS", help="How many packs.")] = None,
    pack: Annotated[
        str | None, typer.Argument(metavar="PACK", help='What one holds: "500 g".')
    ] = None,
    price: Annotated[
        str | None,
        typer.Option(metavar="POUNDS", help="Of one pack; else as entered for that pack."),
    ] = None,
    expected: Annotated[
        str | None,
        typer.Option(metavar="DATE", help="The day it should come; else by the lead time."),
    ] = None,
    supplier: Annotated[str | None, typer.Option(metavar="NAME", help="Who sells it.")] = None,
    dept: Dept = None,
    cancel: Cancel = None,
    put_off: PutOff = None,
    reason: Why = None,
    note: Annotated[str | None, typer.Option(help="Anything to remember of it.")] = None,
    on: Happened = None,
) -> None:
    """Something was ordered: it gets a number, and the plan counts on it from its day.

    Example: stockroom order "silver nitrate" 1 "25 g" --price 46.00 --expected 2027-01-18 --by P1
    """
    from stockroom.service import ordering
    from stockroom.service.order_terms import Asked

    shared = of(ctx)
    due, happened = day_or_none(expected, "--expected"), when(shared, on)
    _check_one_thing(line, cancel, put_off)
    given = {
        "--price": price, "--expected": expected, "--supplier": supplier, "--dept": dept,
        "--why": reason, "--note": note,
    }  # fmt: skip
    path, why = shared.path, reason or ""
    if cancel is not None:
        _check_used(f"--cancel {cancel}", given, "--why")
        done = ordering.cancel_order(path, cancel, why=why, **happened)
    elif put_off is not None:
        _check_used(f"--put-off {put_off}", given, "--why", "--expected")
        done = ordering.put_off(path, put_off, expected=due, why=why, **happened)
    elif line is not None and packs is None and ordering.is_planned(line):
        # its price, seller and shares are those the plan shows, or the sheet would not be true
        _check_used(line, given, "--expected", "--note")
        done = ordering.order_planned(path, line, expected=due, note=note or "", **happened)
    else:
        _check_used("order", given, *(name for name in given if name != "--why"))
        if line is None or packs is None or pack is None:
            raise BadInput(f"How much of {line or 'what'} was ordered?", _HOW)
        count, each = whole(packs, "PACKS"), amount_of(pack)
        pence = pence_or_none(price, "--price")
        asked = Asked(line, count, each, pence, due, supplier, dept or "", note or "")
        done = ordering.order(path, asked, **happened)
    show_done(shared, done)


def on_order(ctx: typer.Context) -> None:
    """What was ordered and has not all come: expected when, and what is overdue.

    Example: stockroom on-order
    """
    from stockroom.reports.buying_text import on_order_text
    from stockroom.reports.json_plan import on_order_json
    from stockroom.service.plan import term_plan

    shared = of(ctx)
    answer = term_plan(shared.path, as_at=shared.today)
    show(shared, lambda: on_order_text(answer, width()), lambda: on_order_json(answer))


def _check_one_thing(line: str | None, cancel: str | None, put_off: str | None) -> None:
    given = [name for name in (line, cancel, put_off) if name is not None]
    if len(given) != 1:
        said = " and ".join(repr(name) for name in given) or "nothing"
        raise BadInput(f"order: {said} given.", f"One thing at a time. {_HOW}")


def _check_used(what: str, given: dict[str, str | None], *used: str) -> None:
    """Refuse the options that would go unheeded. Raises: BadInput naming them."""
    unused = [name for name, value in given.items() if value is not None and name not in used]
    if unused:
        one = len(unused) == 1
        raise BadInput(
            f"{what} takes no {' and no '.join(unused)}: {'it' if one else 'they'} would be lost.",
            f"Leave {'it' if one else 'them'} out; {what} takes {' and '.join(used)}.",
        )
