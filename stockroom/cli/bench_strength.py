"""The bench sum that turns a strength into another unit."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.bench import Density, Of, StrengthText, celsius_or_none, show_sum
from stockroom.cli.shared import of
from stockroom.cli.values import density_or_none, number_or_none


def strength(
    ctx: typer.Context,
    text: StrengthText,
    of_what: Of,
    to: Annotated[
        str,
        typer.Option(metavar="UNIT", help='mol/dm3, "% w/w", vol, mol/kg, "N for acid-base"...'),
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
        density_or_none(density, "--density"),
        density_or_none(pure_density, "--pure-density"),
        part_of,
        celsius_or_none(temperature, "--temperature"),
        number_or_none(gas_volume, "--gas-volume"),
    )
    show_sum(shared, convert(text, of=of_what, to=to, given=given, store=shared.path))
