"""A titration, worked out and written down: titrate."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.printing import show, suggest, width
from stockroom.cli.shared import Shared, of
from stockroom.cli.stock import Happened, when
from stockroom.errors import BadInput
from stockroom.service.figures import assay_of, cm3_of, titres_of

if TYPE_CHECKING:
    from stockroom.service.titrate import Titrated


Reaction = Annotated[
    str, typer.Argument(metavar="REACTION", help='"thiosulfate on iodate"; none: list them.')
]
Titres = Annotated[
    list[str] | None, typer.Argument(metavar="TITRE...", help="In cm³, as read: 25.30 25.35.")
]
Standard = Annotated[
    str,
    typer.Option(metavar="WHAT", help='In the flask: "25.00 cm3 of 0.0167 M", "0.1675 g of KHP".'),
]
Titrant = Annotated[
    str, typer.Option(metavar="STRENGTH|BOTTLE", help="In the burette, where that is known.")
]
Uncertainty = Annotated[
    str, typer.Option(metavar="STRENGTH", help="Standard, of the strength that is known.")
]
Sample = Annotated[str, typer.Option(metavar="VOLUME", help="The aliquot in the flask.")]
Dilution = Annotated[
    list[str] | None,
    typer.Option(
        metavar="A to B", help='Of the sample, before: "10 cm3 to 250 cm3"; again for a second.'
    ),
]
Percent = Annotated[
    str | None, typer.Option(metavar="PERCENT", help="Of what was weighed; else as its line says.")
]
Blank = Annotated[str | None, typer.Option(metavar="CM3", help="Taken off every titre.")]
Within = Annotated[str, typer.Option(metavar="CM3", help="How far apart titres may lie.")]
Burette = Annotated[str, typer.Option(metavar="CM3", help="Its size.")]
Glass = Annotated[str, typer.Option(metavar="A|B", help="The class of the glassware.")]
Bottle = Annotated[str, typer.Option(metavar="BOTTLE", help="Write the result to this bottle.")]
Sure = Annotated[
    bool, typer.Option("--sure", help="Keep it though it is far from the label, or unopened.")
]


def titrate(
    ctx: typer.Context,
    reaction: Reaction = "",
    titres: Titres = None,
    standard: Standard = "",
    titrant: Titrant = "",
    uncertainty: Uncertainty = "",
    sample: Sample = "",
    dilution: Dilution = None,
    assay: Percent = None,
    blank: Blank = None,
    within: Within = "0.10",
    burette: Burette = "50",
    glass: Glass = "B",
    bottle: Bottle = "",
    sure: Sure = False,
    on: Happened = None,
) -> None:
    """Titres in, strength out; with --bottle it is written down and the bottle re-dated.

    A standard that was made up is "0.3562 g of sodium oxalate in 250 cm3", its aliquot --sample.

    Example: stockroom titrate "thiosulfate on iodate" 25.30 25.35 --standard
    "25.00 cm3 of 0.01667 mol/dm3" --bottle S01 --by T1
    """
    from stockroom.reports import titrate_text as report
    from stockroom.service import titrate as service

    shared = of(ctx)
    if not reaction:
        show(shared, report.reactions_text, report.reactions_json)
        return
    if not bottle:
        _refuse_unwritten(sure, on)
    label = assay_of(assay)
    asked = service.Asked(
        reaction,
        titres_of(titres or []),
        titrant=titrant,
        uncertainty=uncertainty,
        standard=standard,
        sample=sample,
        dilution=", then ".join(dilution or []),
        assay_percent=label.percent,
        assay_within=label.within,
        glass_class=glass,
        **_cubic(blank, within, burette),
    )
    found = service.titrate(asked, store=shared.path, as_at=shared.given_day)
    _tell(shared, found, bottle, sure, on)


def _cubic(blank: str | None, within: str, burette: str) -> dict[str, float]:
    return {
        "blank_cm3": cm3_of(blank or "0", "--blank", like="0.05", zero=True),
        "within_cm3": cm3_of(within, "--within", like="0.10"),
        "burette_cm3": cm3_of(burette, "--burette", like="50"),
    }


def _tell(shared: Shared, found: Titrated, bottle: str, sure: bool, on: str | None) -> None:
    from stockroom.reports import titrate_text as report

    if bottle:
        _record(shared, bottle, found, sure, on)
        return
    show(shared, lambda: report.titrated_text(found, width()), lambda: report.titrated_json(found))


def _record(shared: Shared, bottle: str, found: Titrated, sure: bool, on: str | None) -> None:
    from stockroom.reports import titrate_text as report
    from stockroom.service.titrate_bottle import record

    written = record(shared.path, bottle, found, sure=sure, **when(shared, on))
    show(
        shared,
        lambda: report.written_text(written, width()),
        lambda: report.written_json(written),
    )
    suggest(shared, written.done.next)
    # what is on the bottle now says another strength and another day
    suggest(shared, f"stockroom label {written.done.bottle or bottle}")


def _refuse_unwritten(sure: bool, on: str | None) -> None:
    # what is typed and then left out would be taken for a part of the answer
    for option, given in (("--sure", sure), ("--on", on)):
        if given:
            raise BadInput(
                f"{option}{'' if given is True else f' {given}'}: nothing is written to a bottle.",
                "Add --bottle, or leave it out.",
            )
