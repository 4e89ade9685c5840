"""What the bench sums' commands share: their arguments, and showing an answer."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.printing import show, width
from stockroom.cli.shared import Shared
from stockroom.errors import BadInput

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


def celsius_or_none(text: str | None, where: str) -> float | None:
    """A temperature typed after the option `where`, "20 °C" as 20, or None. Raises: BadInput."""
    if text is None:
        return None
    match = re.fullmatch(r"(-?[0-9]+(?:[.,][0-9]+)?)\s*(?:°?\s*C)?", text.strip())
    if match is None:
        raise BadInput(f"{where} {text!r} is not a temperature in °C.", "Write it as 20.")
    return float(match[1].replace(",", "."))


def show_sum(shared: Shared, answer: Sum) -> None:
    """Print the answer of a bench sum, in words or as JSON."""
    from stockroom.reports.bench_text import bench_json, bench_text

    practice = answer.practice
    show(
        shared,
        lambda: bench_text(answer.text, answer.details, practice=practice, width=width()),
        lambda: bench_json(
            answer.value, answer.unit, answer.text, answer.details, practice=practice
        ),
    )
