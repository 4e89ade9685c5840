"""The bench sum for what to weigh."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.bench import Density, Of, StrengthText, Volume, show_sum
from stockroom.cli.shared import of
from stockroom.cli.values import amount_of, density_or_none, number_or_none


def weigh(
    ctx: typer.Context,
    volume: Volume,
    text: StrengthText,
    of_what: Of,
    assay: Annotated[
        str | None, typer.Option(metavar="PERCENT", help="Off the label; else the line's own.")
    ] = None,
    step: Annotated[
        str | None, typer.Option(metavar="GRAMS", help="The balance's step: 0.01.")
    ] = None,
    closeness: Annotated[
        str, typer.Option(metavar="PERCENT", help="How near the mass must be.")
    ] = "5",
    density: Density = None,
) -> None:
    """The mass to weigh for a volume of solution; with --step, whether it can be.

    Example: stockroom weigh "2.00 L" "0.200 mol/dm3" --of "sodium thiosulfate pentahydrate"
    """
    from stockroom.service import bench_weigh

    shared = of(ctx)
    weighed = bench_weigh.weigh(
        amount_of(volume),
        text,
        of=of_what,
        assay_percent=number_or_none(assay, "--assay"),
        step_g=number_or_none(step, "--step"),
        closeness_percent=number_or_none(closeness, "--closeness") or 5.0,
        density=density_or_none(density, "--density"),
        store=shared.path,
    )
    show_sum(shared, weighed)
