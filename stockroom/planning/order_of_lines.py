"""The order lines are settled in: what is made before what it is made from."""

from __future__ import annotations

from stockroom.errors import NotAllowed
from stockroom.planning.facts import Facts


def settling_order(facts: Facts) -> list[str]:
    """Every line key, each before its ingredients, and earlier choices before later ones.

    Where two methods choose in opposite order the earlier-named line goes first.

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
    methods = [method for _, method in sorted(facts.methods.items())]
    for method in methods:
        for ingredient in method.ingredients:
            after.setdefault(method.line, []).extend(ingredient.lines)
    for method in methods:
        for ingredient in method.ingredients:
            for first, second in zip(ingredient.lines, ingredient.lines[1:], strict=False):
                # two methods of opposite taste are no circle: only what is made from itself is
                if not _leads(after, second, first):
                    after.setdefault(first, []).append(second)
    return after


def _leads(after: dict[str, list[str]], start: str, goal: str) -> bool:
    """True when `goal` comes after `start`, directly or through others."""
    seen: set[str] = set()
    waiting = [start]
    while waiting:
        key = waiting.pop()
        if key == goal:
            return True
        if key not in seen:
            seen.add(key)
            waiting += after.get(key, [])
    return False


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
    # by name, so that the rows' order in the tables cannot change a plan
    for following in sorted(set(after.get(key, []))):
        _visit(following, after, state, order, (*path, key))
    state[key] = 2
    order.append(key)
