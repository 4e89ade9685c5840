"""The bench sum that turns a strength into another unit."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.bench import Density, Of, StrengthText, show_sum
from stockroom.cli.shared import of
from stockroom.cli.values import density_or_none


def strength(
    ctx: typer.Context,
    text: StrengthText,
    of_what: Of,
    to: Annotated[str, typer.Option(metavar="UNIT", help='mol/dm3, g/dm3, "% w/v", vol...')],
    density: Density = None,
) -> None:
    """Turn a strength into another unit.

    Example: stockroom strength "100 vol" --of "hydrogen peroxide" --to mol/dm3
    """
    from stockroom.service.bench_strength import convert

    shared = of(ctx)
    # read as text: typer would refuse a number without quoting what it stood for
    dense = density_or_none(density, "--density")
    show_sum(shared, convert(text, of=of_what, to=to, density=dense, store=shared.path))
