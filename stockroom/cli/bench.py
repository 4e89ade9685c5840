"""Bench sums, with or without a store: strength, weigh, dilute."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.printing import show
from stockroom.cli.shared import Shared, of
from stockroom.cli.values import amount_of, density_or_none, number_or_none

if TYPE_CHECKING:
    from stockroom.service.bench import Sum

Of = Annotated[
    str, typer.Option("--of", metavar="NAME", help="A name or a formula: hypo, Na2S2O3·5H2O.")
]
Density = Annotated[
    str | None,
    typer.Option(metavar="G_PER_CM3", help="Off the label; for % v/v the pure liquid's."),
]
StrengthText = Annotated[
    str, typer.Argument(metavar="STRENGTH", help='With its unit: "100 vol", "0.200 mol/dm3".')
]
Volume = Annotated[str, typer.Argument(metavar="VOLUME", help='How much to make: "2.00 L".')]


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
    from stockroom.service import bench

    shared = of(ctx)
    # read as text: typer would refuse a number without quoting what it stood for
    dense = density_or_none(density, "--density")
    _show(shared, bench.convert(text, of=of_what, to=to, density=dense, store=shared.path))


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
    from stockroom.service import bench

    shared = of(ctx)
    weighed = bench.weigh(
        amount_of(volume),
        text,
        of=of_what,
        assay_percent=number_or_none(assay, "--assay"),
        step_g=number_or_none(step, "--step"),
        closeness_percent=number_or_none(closeness, "--closeness") or 5.0,
        density=density_or_none(density, "--density"),
        store=shared.path,
    )
    _show(shared, weighed)


def dilute(
    ctx: typer.Context,
    volume: Volume,
    text: StrengthText,
    of_what: Annotated[
        str,
        typer.Option("--of", metavar="NAME", help="A name or a formula; a bottle says its own."),
    ] = "",
    source: Annotated[
        str, typer.Option("--from", metavar="STRENGTH|BOTTLE", help='"91 vol", or B01.')
    ] = "",
    density: Density = None,
) -> None:
    """The volume of a stronger solution to take for a dilution.

    Example: stockroom dilute "500 cm3" "0.100 mol/dm3" --from "91 vol" --of "hydrogen peroxide"
    """
    from stockroom.service import bench

    shared = of(ctx)
    diluted = bench.dilute(
        amount_of(volume),
        text,
        source=source,
        of=of_what,
        density=density_or_none(density, "--density"),
        store=shared.path,
        as_at=shared.given_day,
    )
    _show(shared, diluted)


def _show(shared: Shared, answer: Sum) -> None:
    from stockroom.reports.bench_text import bench_json, bench_text

    practice = answer.practice
    show(
        shared,
        lambda: bench_text(answer.text, answer.details, practice=practice),
        lambda: bench_json(
            answer.value, answer.unit, answer.text, answer.details, practice=practice
        ),
    )
