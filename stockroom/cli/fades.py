"""How a bottle fades, or a typed strength by a typed law."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.printing import show, width
from stockroom.cli.shared import Shared, of
from stockroom.errors import BadInput
from stockroom.service.typed import number_or_none, signed_or_none, whole_or_none

if TYPE_CHECKING:
    from stockroom.service.fades import Typed

What = Annotated[
    str, typer.Argument(metavar="BOTTLE", help="A bottle's number; or a strength, with a law.")
]
Below = Annotated[
    list[str] | None,
    typer.Option(
        metavar="STRENGTH", help="When is it below this? Of a bottle, as often as you like."
    ),
]
Order = Annotated[str | None, typer.Option(metavar="N", help="Of a typed law: 0, 1 or 2.")]
Rate = Annotated[
    str | None, typer.Option(metavar="K", help="Its rate, in the unit of the strength.")
]
Per = Annotated[str, typer.Option(metavar="TIME", help="second, hour, day, month...")]
At = Annotated[str | None, typer.Option(metavar="C", help="The °C the rate is of.")]
To = Annotated[str | None, typer.Option(metavar="C", help="The °C it stands at; else --at.")]
Energy = Annotated[str | None, typer.Option(metavar="KJ_MOL", help="Activation energy.")]
Factor = Annotated[str | None, typer.Option(metavar="X", help="How much faster per 10 °C.")]
Named = Annotated[str, typer.Option(metavar="NAME", help="A named law instead: hypochlorite.")]
After = Annotated[str, typer.Option(metavar="TIME", help='How strong after so long: "90 days".')]


def fades(
    ctx: typer.Context,
    what: What,
    below: Below = None,
    order: Order = None,
    rate: Rate = None,
    per: Per = "day",
    at: At = None,
    to: To = None,
    ea: Energy = None,
    factor: Factor = None,
    law: Named = "",
    after: After = "",
) -> None:
    """How a bottle fades: its strength today, by which law, how warm it stood, until when.

    With a law typed in it is a bench sum of a strength and wants no store:
    stockroom fades "12.5 % w/v" --order 2 --rate 0.0090 --per month --at 20 --factor 3.5 --to 30

    Example: stockroom fades B01 --below "80 vol"
    """
    shared = of(ctx)
    figures = {"--at": at, "--to": to, "--ea": ea, "--factor": factor, "--after": after or None}
    if order is None and rate is None and not law:
        given = [name for name, figure in figures.items() if figure is not None]
        if given:
            many = "wants" if len(given) == 1 else "want"
            raise BadInput(
                f"{', '.join(given)} {many} a law: of which order?",
                "Add --order and --rate; of a bottle ask --as-at the day.",
            )
        _bottle(shared, what, below or [])
        return
    from stockroom.service.fades import Typed

    typed = Typed(
        order=whole_or_none(order, "--order"),
        rate=signed_or_none(rate, "--rate"),
        per=per,
        at_c=signed_or_none(at, "--at"),
        to_c=signed_or_none(to, "--to"),
        energy=number_or_none(ea, "--ea"),
        factor=number_or_none(factor, "--factor"),
        named=law.strip().lower(),
    )
    _strength(shared, what, typed, below or [], after)


def _bottle(shared: Shared, number: str, below: list[str]) -> None:
    from stockroom.reports.fades_text import fades_json, fades_text
    from stockroom.service.fades import fading

    found = fading(shared.path, number, as_at=shared.today, below=tuple(below))
    show(shared, lambda: fades_text(found, width()), lambda: fades_json(found))


def _strength(shared: Shared, text: str, typed: Typed, below: list[str], after: str) -> None:
    from stockroom.reports.fades_sum_text import fades_sum_json, fades_sum_text
    from stockroom.service.fades import fading_sum

    if len(below) > 1:
        raise BadInput(f"--below {below[0]!r} and {below[1]!r}: one sum dates one.", "Ask twice.")
    asked = below[0] if below else ""
    found = fading_sum(text, typed, below=asked, after=after, today=shared.given_day)
    show(shared, lambda: fades_sum_text(found, width()), lambda: fades_sum_json(found))
