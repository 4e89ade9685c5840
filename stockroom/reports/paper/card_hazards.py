"""The hazards on a make card: of what goes in, and of what comes out at its strength."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from stockroom.planning.decisions import Make
from stockroom.reports.paper.label_of import hazard_text
from stockroom.reports.words import named, raised
from stockroom.safety.hazards import Hazards


@dataclass(frozen=True, slots=True)
class Danger:
    """One thing's hazards. `product` marks what is made; `statements` are codes and wordings."""

    whose: str
    product: bool = False
    signal: str = ""
    symbols: tuple[str, ...] = ()
    statements: tuple[tuple[str, str], ...] = ()
    basis: str = ""


_GLOVES = frozenset({"H310", "H311", "H312", "H314", "H317"})
"""Burns or passes the skin, or makes it allergic. That gloves go with it: common practice."""


def wants_gloves(danger: Danger) -> bool:
    """Whether one of its statements is of what skin must not meet."""
    return any(code in _GLOVES for code, _ in danger.statements)


def dangers_of(make: Make, hazards: Mapping[str, Hazards]) -> tuple[Danger, ...]:
    """Of each thing that goes in, in order, then of the product."""
    held = {draw.line for draw in make.sources if draw.bottle}
    # a jar still to be bought of what is here too says nothing new
    draws = [draw for draw in make.sources if draw.bottle or draw.line not in held]
    things = {draw.bottle or draw.line: f"{draw.bottle} {draw.item}" for draw in draws}
    into = [_danger(raised(said.strip()), key, hazards.get(key)) for key, said in things.items()]
    whole = named(make.item, make.strength)
    return (*into, _danger(whole, make.line, hazards.get(make.line), product=True))


def _danger(whose: str, key: str, found: Hazards | None, *, product: bool = False) -> Danger:
    text = hazard_text(found, key)
    return Danger(whose, product, text.signal, text.symbols, text.statements, text.basis)
