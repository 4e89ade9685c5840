"""A titration, worked out and written down: titrate."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.bench import CUBIC, figure
from stockroom.cli.bench_assay import assay_of
from stockroom.cli.printing import show, suggest, width
from stockroom.cli.shared import Shared, of
from stockroom.cli.stock import Happened, when
from stockroom.errors import BadInput

if TYPE_CHECKING:
    from stockroom.service.titrate import Titrated


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
        typer.Option(
            metavar="WHAT", help='In the flask: "25.00 cm3 of 0.0167 M", "0.1675 g of KHP".'
        ),
    ] = "",
    titrant: Annotated[
        str, typer.Option(metavar="STRENGTH|BOTTLE", help="In the burette, where that is known.")
    ] = "",
    uncertainty: Annotated[
        str, typer.Option(metavar="STRENGTH", help="Standard, of the strength that is known.")
    ] = "",
    sample: Annotated[str, typer.Option(metavar="VOLUME", help="The aliquot in the flask.")] = "",
    dilution: Annotated[
        list[str] | None,
        typer.Option(
            metavar="A to B", help='Of the sample, before: "10 cm3 to 250 cm3"; again for a second.'
        ),
    ] = None,
    assay: Annotated[
        str | None,
        typer.Option(metavar="PERCENT", help="Of what was weighed; else as its line says."),
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
        bool, typer.Option("--sure", help="Keep it though it is far from the label, or unopened.")
    ] = False,
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
        [_titre(text) for text in titres or []],
        titrant=titrant,
        uncertainty=uncertainty,
        standard=standard,
        sample=sample,
        dilution=", then ".join(dilution or []),
        assay_percent=label.percent,
        assay_within=label.within,
        blank_cm3=_cm3(blank or "0", "--blank", like="0.05", zero=True),
        within_cm3=_cm3(within, "--within", like="0.10"),
        burette_cm3=_cm3(burette, "--burette", like="50"),
        glass_class=glass,
    )
    found = service.titrate(asked, store=shared.path, as_at=shared.given_day)
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
    suggest(written.done.next)


def _refuse_unwritten(sure: bool, on: str | None) -> None:
    # what is typed and then left out would be taken for a part of the answer
    for option, given in (("--sure", sure), ("--on", on)):
        if given:
            raise BadInput(
                f"{option}{'' if given is True else f' {given}'}: nothing is written to a bottle.",
                "Add --bottle, or leave it out.",
            )


def _titre(text: str) -> float:
    if "," in text and "." in text:
        raise BadInput(f"titre {text!r} is more than one.", "Write them apart: 25.30 25.35.")
    return _cm3(text, "titre", like="25.35")


def _cm3(text: str, where: str, *, like: str, zero: bool = False) -> float:
    return figure(text, where, like=like, units=CUBIC, zero=zero) or 0.0
