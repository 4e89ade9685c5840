"""The order lines are settled in: what is made before what it is made from."""

from __future__ import annotations

from stockroom.errors import NotAllowed
from stockroom.planning.facts import Facts


def settling_order(facts: Facts) -> list[str]:
    """Every line key, each before its ingredients.

    Raises NotAllowed for a line made, in the end, from itself.
    """
    before = _successors(facts)
    order: list[str] = []
    state: dict[str, int] = {}
    for key in sorted(facts.lines):
        _visit(key, before, state, order, ())
    order.reverse()
    return order


def _successors(facts: Facts) -> dict[str, list[str]]:
    after: dict[str, list[str]] = {}
    for method in facts.methods.values():
        for ingredient in method.ingredients:
            after.setdefault(method.line, []).extend(ingredient.lines)
    return after


def _visit(
    key: str,
    after: dict[str, list[str]],
    state: dict[str, int],
    order: list[str],
    path: tuple[str, ...],
) -> None:
    if state.get(key) == 2:
        return
    if state.get(key) == 1:
        chain = " from ".join((*path[path.index(key) :], key))
        raise NotAllowed(f"Made from itself: {chain}.", "Mend the method of one of them.")
    state[key] = 1
    for following in sorted(set(after.get(key, []))):
        _visit(following, after, state, order, (*path, key))
    state[key] = 2
    order.append(key)
