"""A titration, worked out and written down: titrate."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show, show_done, width
from stockroom.cli.shared import of
from stockroom.cli.stock import Happened, when
from stockroom.cli.values import number_or_none
from stockroom.errors import BadInput


def titrate(
    ctx: typer.Context,
    reaction: Annotated[
        str, typer.Argument(metavar="REACTION", help='"thiosulfate on iodate"; none: list them.')
    ] = "",
    titres: Annotated[
        list[str] | None, typer.Argument(metavar="TITRE...", help="In cm³, as read: 25.30 25.35.")
    ] = None,
    standard: Annotated[
        str,
        typer.Option(metavar="WHAT", help='In the flask: "25.00 cm3 of 0.0167 M", "0.1675 g".'),
    ] = "",
    titrant: Annotated[
        str, typer.Option(metavar="STRENGTH|BOTTLE", help="In the burette, where that is known.")
    ] = "",
    uncertainty: Annotated[
        str, typer.Option(metavar="STRENGTH", help="Standard, of the strength that is known.")
    ] = "",
    sample: Annotated[
        str, typer.Option(metavar="VOLUME", help="The aliquot in the flask, where it is asked.")
    ] = "",
    dilution: Annotated[
        str, typer.Option(metavar="A to B", help='Done to the sample before: "10 cm3 to 250 cm3".')
    ] = "",
    assay: Annotated[
        str | None, typer.Option(metavar="PERCENT", help="Of a standard that was weighed.")
    ] = None,
    blank: Annotated[str | None, typer.Option(metavar="CM3", help="Taken off every titre.")] = None,
    within: Annotated[
        str, typer.Option(metavar="CM3", help="How far apart titres may lie.")
    ] = "0.10",
    burette: Annotated[str, typer.Option(metavar="CM3", help="Its size.")] = "50",
    glass: Annotated[str, typer.Option(metavar="A|B", help="The class of the glassware.")] = "B",
    bottle: Annotated[
        str, typer.Option(metavar="BOTTLE", help="Write the result to this bottle.")
    ] = "",
    sure: Annotated[
        bool, typer.Option("--sure", help="Keep it though it is far from the label.")
    ] = False,
    on: Happened = None,
) -> None:
    """Titres in, strength out; with --bottle it is written down and the bottle re-dated.

    Example: stockroom titrate "thiosulfate on iodate" 25.30 25.35 --standard
    "25.00 cm3 of 0.01667 mol/dm3" --bottle S01 --by T1
    """
    from stockroom.reports import titrate_text as report
    from stockroom.service import titrate as service

    shared = of(ctx)
    if not reaction:
        show(shared, report.reactions_text, report.reactions_json)
        return
    asked = service.Asked(
        reaction,
        [_cm3(titre, "titre") for titre in titres or []],
        titrant=titrant,
        uncertainty=uncertainty,
        standard=standard,
        sample=sample,
        dilution=dilution,
        assay_percent=number_or_none(assay, "--assay"),
        blank_cm3=0.0 if blank is None else _cm3(blank, "--blank"),
        within_cm3=_cm3(within, "--within"),
        burette_cm3=_cm3(burette, "--burette"),
        glass_class=glass,
    )
    found = service.titrate(asked, store=shared.path, as_at=shared.given_day)
    if bottle:
        done = service.record(shared.path, bottle, found, sure=sure, **when(shared, on))
        show_done(shared, done)
        return
    show(shared, lambda: report.titrated_text(found, width()), lambda: report.titrated_json(found))


def _cm3(text: str, where: str) -> float:
    number = number_or_none(text.lower().removesuffix("cm3").removesuffix("ml"), where)
    if number is None:
        raise BadInput(f"{where} {text!r} is not a volume in cm³.", "Write it as read: 25.35.")
    return number
