"""The bench sum for what to weigh."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.bench import (
    GRAMS,
    Density,
    Of,
    StrengthText,
    Volume,
    asking_density,
    closeness_of,
    density_of,
    name_of,
    show_sum,
)
from stockroom.cli.shared import of
from stockroom.service.figures import assay_of, figure
from stockroom.service.typed import amount_of


def weigh(
    ctx: typer.Context,
    volume: Volume,
    text: StrengthText,
    of_what: Of,
    assay: Annotated[
        str | None,
        typer.Option(
            metavar="PERCENT", help='Off the label: "99.9 ± 0.1", "≥97 %"; else the line\'s own.'
        ),
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

    A mass to make, as "500 g", is answered by mass, with its water.

    Example: stockroom weigh "2.00 L" "0.200 mol/dm3" --of "sodium thiosulfate pentahydrate"
    """
    from stockroom.service import bench_weigh
    from stockroom.service.bench_task import Asked
    from stockroom.service.bench_tools import Minimum

    shared = of(ctx)
    spread = figure(repeatability, "--repeatability", like="0.0002", units=GRAMS)
    asked = Asked(
        amount_of(volume),
        text,
        name_of(of_what, shared, weighed=True),
        assay=assay_of(assay),
        step=figure(step, "--step", like="0.01", units=GRAMS),
        closeness_percent=closeness_of(closeness),
        density=density_of(density, "--density"),
        flask=flask,
        minimum=Minimum(minimum.lower(), spread),
    )
    with asking_density():
        weighed = bench_weigh.weigh(asked, store=shared.path, as_at=shared.given_day)
    show_sum(shared, weighed)
