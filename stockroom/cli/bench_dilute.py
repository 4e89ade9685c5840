"""The bench sum for what to dilute."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.bench import (
    Density,
    StrengthText,
    Volume,
    asking_density,
    closeness_of,
    density_of,
    name_of,
    show_sum,
)
from stockroom.cli.shared import of
from stockroom.service.typed import amount_of


def dilute(
    ctx: typer.Context,
    volume: Volume,
    text: StrengthText,
    of_what: Annotated[
        str,
        typer.Option("--of", metavar="NAME", help="A name or a formula; a bottle says its own."),
    ] = "",
    source: Annotated[
        str, typer.Option("--from", metavar="STRENGTH|BOTTLE", help='"91 vol", neat, or B01.')
    ] = "",
    second: Annotated[
        str,
        typer.Option("--with", metavar="STRENGTH|BOTTLE", help="A second one, instead of water."),
    ] = "",
    density: Density = None,
    closeness: Annotated[
        str, typer.Option(metavar="PERCENT", help="How near it must be measured.")
    ] = "5",
) -> None:
    """What to take of a stronger solution for a dilution, or of two that are mixed.

    Ethanol gets its water told too, since the volumes do not add. A mass to make, as
    "500 g", is answered by mass from strengths in % w/w.

    Example: stockroom dilute "500 cm3" "0.100 mol/dm3" --from "91 vol" --of "hydrogen peroxide"
    """
    from stockroom.service import bench_dilute

    shared = of(ctx)
    with asking_density():
        diluted = bench_dilute.dilute(
            amount_of(volume),
            text,
            source=source,
            second=second,
            of=name_of(of_what, shared),
            density=density_of(density, "--density"),
            closeness=closeness_of(closeness) / 100,
            store=shared.path,
            as_at=shared.given_day,
        )
    show_sum(shared, diluted)
