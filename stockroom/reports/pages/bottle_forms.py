"""Which short forms stand on a bottle's page: the likely ones first, by how the bottle is."""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.keeping.rules import RuleKind
from stockroom.keeping.unnamed import is_unnamed
from stockroom.keeping.verdict import USABLE, Condition
from stockroom.measure.amounts import Kind
from stockroom.planning.on_shelf import OnShelf

EVERY = (
    "draw",
    "count",
    "look",
    "found",
    "titrate",
    "tested",
    "open",
    "printed",
    "move",
    "lend",
    "lend-back",
    "spill",
    "decant",
    "mix",
    "lost",
    "turned-up",
    "name-unknown",
    "spoil",
    "discard",
)
"""Every event that happens to one bottle, by the name of its form, in the order of use."""

NAMED_OTHERWISE = {"mix": "first"}
"""The field that holds the bottle, where it is not called so."""


@dataclass(frozen=True, slots=True)
class Forms:
    """Names of forms: the likely ones, and the rest. A bottle that is gone has none."""

    first: tuple[str, ...] = ()
    rest: tuple[str, ...] = ()


def forms_for(seen: OnShelf) -> Forms:
    """The forms of one bottle. What can happen to no such bottle is left out altogether."""
    if seen.verdict.condition is Condition.GONE:
        return Forms()
    possible = [name for name in EVERY if _possible(seen, name)]
    first = tuple(name for name in _likely(seen) if name in possible)
    return Forms(first, tuple(name for name in possible if name not in first))


def _likely(seen: OnShelf) -> tuple[str, ...]:
    condition = seen.verdict.condition
    printed = seen.bottle.record.printed
    if condition is Condition.NOT_FOUND:
        return ("turned-up",)
    if is_unnamed(seen.line.key):
        return ("name-unknown", "discard")
    if seen.verdict.warning:
        # nothing that asks for it to be opened, poured or carried about
        return ("tested", "discard") if _tested(seen) else ("discard",)
    if condition is Condition.SET_ASIDE:
        return ("look", "discard")
    if condition is Condition.NO_DATE:
        return ("look", "count")
    if printed and printed.ambiguous:
        return ("printed", "draw", "count")
    if condition is Condition.PAST:
        return ("look", "discard") if seen.verdict.look_would_do else ("discard", "draw")
    check = "found" if condition is Condition.WATCH and _strong(seen) else "look"
    return ("draw", "count", check) if seen.bottle.left else ("discard", "count")


def _possible(seen: OnShelf, name: str) -> bool:
    bottle, condition = seen.bottle, seen.verdict.condition
    if name == "turned-up":
        return condition is Condition.NOT_FOUND
    if name == "name-unknown":
        return is_unnamed(seen.line.key)
    if name == "printed":
        # only where a date is printed on it is there a reading to settle
        return bottle.record.printed is not None
    if name in ("found", "titrate"):
        return _strong(seen)
    if name == "tested":
        return _tested(seen)
    if name == "open":
        return not bottle.record.opened and not bottle.made_here
    if name in ("draw", "lend", "decant", "mix"):
        return condition in USABLE or condition is Condition.PAST
    return not (name == "lost" and condition is Condition.NOT_FOUND)


def _strong(seen: OnShelf) -> bool:
    # what is counted in g or by the piece has no strength that could be found
    return seen.line.kind is Kind.VOLUME and not is_unnamed(seen.line.key)


def _tested(seen: OnShelf) -> bool:
    return any(rule.kind is RuleKind.TEST for rule in seen.line.rules)
