"""The bench sum for what to weigh."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.bench import Density, Of, StrengthText, Volume, show_sum
from stockroom.cli.shared import of
from stockroom.cli.values import amount_of, density_or_none, number_or_none

if TYPE_CHECKING:
    from stockroom.service.bench_task import Assay


def weigh(
    ctx: typer.Context,
    volume: Volume,
    text: StrengthText,
    of_what: Of,
    assay: Annotated[
        str | None,
        typer.Option(metavar="PERCENT", help='Off the label, "99.9 ± 0.1"; else the line\'s own.'),
    ] = None,
    step: Annotated[
        str | None,
        typer.Option(metavar="GRAMS", help="The balance's step, 0.01; else the house's balances."),
    ] = None,
    closeness: Annotated[
        str, typer.Option(metavar="PERCENT", help="How near the strength must be.")
    ] = "5",
    flask: Annotated[str, typer.Option(metavar="A|B|cylinder", help="What it is made up in.")] = "",
    minimum: Annotated[
        str, typer.Option(metavar="RULE", help="The least mass by a pharmacopoeia too: usp.")
    ] = "",
    repeatability: Annotated[
        str | None, typer.Option(metavar="GRAMS", help="Spread of ten weighings, for --minimum.")
    ] = None,
    density: Density = None,
) -> None:
    """The mass to weigh for a volume of solution, whether it can be, and how good it is.

    Example: stockroom weigh "2.00 L" "0.200 mol/dm3" --of "sodium thiosulfate pentahydrate"
    """
    from stockroom.service import bench_weigh
    from stockroom.service.bench_task import Asked
    from stockroom.service.bench_tools import Minimum

    shared = of(ctx)
    asked = Asked(
        amount_of(volume),
        text,
        of_what,
        assay=_assay(assay),
        step=number_or_none(step, "--step"),
        closeness_percent=number_or_none(closeness, "--closeness") or 5.0,
        density=density_or_none(density, "--density"),
        flask=flask,
        minimum=Minimum(minimum.lower(), number_or_none(repeatability, "--repeatability")),
    )
    show_sum(shared, bench_weigh.weigh(asked, store=shared.path, as_at=shared.given_day))


def _assay(text: str | None) -> Assay:
    """ "99.9 ± 0.1" as the figure and how far off it may be."""
    from stockroom.service.bench_task import Assay

    figure, _, within = re.sub(r"\+/?-", "±", text or "").partition("±")
    percent = number_or_none(figure.strip() if text is not None else None, "--assay")
    return Assay(percent, number_or_none(within.strip() or None, "--assay") or 0.0)
