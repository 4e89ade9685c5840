"""The bench sum that turns a strength into another unit."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.bench import (
    PER_MOLE,
    Density,
    Of,
    StrengthText,
    asking_density,
    celsius_or_none,
    density_of,
    name_of,
    show_sum,
)
from stockroom.cli.shared import of
from stockroom.service.figures import figure


def strength(
    ctx: typer.Context,
    text: StrengthText,
    of_what: Of,
    to: Annotated[
        str,
        typer.Option(
            metavar="UNIT", help='mol/dm3, "% w/w", vol, "mg/dm3 as N", "N for acid-base"...'
        ),
    ],
    density: Density = None,
    pure_density: Annotated[
        str | None, typer.Option(metavar="G_PER_CM3", help="Of the pure liquid, for % v/v.")
    ] = None,
    part_of: Annotated[
        str, typer.Option("--from", metavar="STRENGTH", help='What "1 in 10" is one part of.')
    ] = "",
    temperature: Annotated[
        str | None, typer.Option(metavar="CELSIUS", help='For "saturated".')
    ] = None,
    gas_volume: Annotated[
        str | None,
        typer.Option(metavar="DM3_PER_MOL", help="For vol: 22.414 (0 °C, 1 atm) unless given."),
    ] = None,
) -> None:
    """Turn a strength into another unit.

    Example: stockroom strength "100 vol" --of "hydrogen peroxide" --to mol/dm3
    """
    from stockroom.service.bench_strength import Given, convert

    shared = of(ctx)
    # read as text: typer would refuse a number without quoting what it stood for
    given = Given(
        density_of(density, "--density"),
        density_of(pure_density, "--pure-density"),
        part_of,
        celsius_or_none(temperature, "--temperature"),
        figure(gas_volume, "--gas-volume", like="24", units=PER_MOLE),
    )
    with asking_density():
        named = name_of(of_what, shared)
        turned = convert(text, of=named, to=to, given=given, store=shared.path)
    show_sum(shared, turned)
