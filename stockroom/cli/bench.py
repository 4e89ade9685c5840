"""What the bench sums' commands share: their arguments, and showing an answer."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from types import MappingProxyType
from typing import TYPE_CHECKING, Annotated

import typer

from stockroom.cli.printing import show, width
from stockroom.cli.shared import Shared
from stockroom.errors import BadInput, MissingFigure
from stockroom.service.figures import PER_CENT, figure

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
Volume = Annotated[
    str, typer.Argument(metavar="VOLUME", help='How much to make: "2.00 L", "500 g".')
]


GRAMS: Mapping[str, float] = MappingProxyType({"": 1.0, "g": 1.0, "mg": 0.001})
PER_MOLE: Mapping[str, float] = MappingProxyType({"": 1.0, "dm3/mol": 1.0, "l/mol": 1.0})
_PER_CM3: Mapping[str, float] = MappingProxyType(
    {"": 1.0, "g/cm3": 1.0, "g/ml": 1.0, "gcm-3": 1.0, "gml-1": 1.0, "kg/l": 1.0, "kg/dm3": 1.0}
    | {"kg/m3": 0.001, "kgm-3": 0.001, "g/l": 0.001, "g/dm3": 0.001}
)
_LIGHTEST, _HEAVIEST = 0.5, 20.0


def density_of(text: str | None, where: str) -> float | None:
    """A density in g/cm³ typed after `where`, 0.5 to 20, or None; "1180 kg/m3" is 1.18.

    Raises: BadInput.
    """
    value = figure(text, where, like="1.18", units=_PER_CM3)
    # as in the store's own tables, where the same slip is caught
    if value is not None and not _LIGHTEST <= value <= _HEAVIEST:
        raise BadInput(f"{where} {text!r} is not between 0.5 and 20.", "In g/cm³, not kg/m³?")
    return value


@contextmanager
def asking_density() -> Iterator[None]:
    """Where a sum wants a density, the option that gives one is named in the hint."""
    try:
        yield
    except MissingFigure as missing:
        if "density" not in missing.message or "--density" in missing.hint:
            raise
        raise MissingFigure(missing.message, f"{missing.hint} Add it as --density.") from None


def name_of(of_what: str, shared: Shared, *, weighed: bool = False) -> str:
    """What was typed after --of; for the number of a bottle the name of what it holds.

    Raises: UnknownName; NotAllowed for a bottle that must not be opened, or weighed from.
    """
    from stockroom.service.bench_spelling import name_in

    return name_in(of_what, shared.path, shared.given_day, weighed=weighed)


def closeness_of(text: str) -> float:
    """A closeness in per cent, above 0 and below 100. Raises: BadInput."""
    value = figure(text, "--closeness", like="5", units=PER_CENT) or 0.0
    if value >= 100:
        raise BadInput(f"--closeness {value:g} % is not above 0 and below 100.", "Write it as 5.")
    return value


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
    from stockroom.reports.bench_text import sum_json, sum_text

    show(shared, lambda: sum_text(answer, width()), lambda: sum_json(answer))
