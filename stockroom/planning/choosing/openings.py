"""Sealed bottles left shut where the open ones can serve everybody between them."""

from __future__ import annotations

from itertools import combinations, islice

from stockroom.planning.choosing.lookahead import FEW, Lookahead
from stockroom.planning.wants import Want

_ON_ONE = 2 * FEW
"""Wants on one bottle, up to which others are looked for for all of them. Our choice."""
_SETS = 60
"""Sets of bottles tried, each one smaller than what is opened. Our choice."""


def open_fewest(ahead: Lookahead) -> None:
    """Serve the same wants of a line with as few sealed bottles opened as can be found.

    Among few wants every set with one bottle fewer is tried, then one fewer again; among
    many, each opened bottle is tried without. Then, if anybody moved, all are served as
    they would prefer it in their order, with no more opened.
    """
    wants = ahead.held
    opened = _opened(ahead)
    if opened and len(wants) <= FEW:
        while opened and _with_fewer(ahead, wants, opened):
            opened = _opened(ahead)
    elif opened:
        for number in opened:
            _without(ahead, number)
    if ahead.moved and len(wants) <= FEW:
        shut = frozenset(n for n in _sealed(ahead) if ahead.shelf.would_open(n))
        ahead.arranged(wants, shut, in_rank=True)


def _sealed(ahead: Lookahead) -> list[str]:
    row = ahead.shelf.of_line(ahead.line.key)
    return [bottle.number for bottle in row if ahead.shelf.is_sealed(bottle.number)]


def _opened(ahead: Lookahead) -> list[str]:
    """Sealed bottles that only wants of this line that could be moved have opened."""
    opened = [number for number in _sealed(ahead) if ahead.shelf.promises[number]]
    held = ahead.serving.holders
    return [n for n in opened if len(held.get(n, {})) == len(ahead.shelf.promises[n])]


def _with_fewer(ahead: Lookahead, wants: list[Want], opened: list[str]) -> bool:
    sealed = [n for n in _sealed(ahead) if n in opened or ahead.shelf.would_open(n)]
    fewer = len(opened) - 1
    # first of those opened already: it disturbs least
    rest = (some for some in combinations(sealed, fewer) if not set(some) <= set(opened))
    sets = [*combinations(opened, fewer), *islice(rest, _SETS)]
    return any(ahead.arranged(wants, frozenset(sealed) - set(some)) for some in sets[:_SETS])


def _without(ahead: Lookahead, number: str) -> None:
    on_it = list(ahead.serving.holders.get(number, {}).values())
    shut = {n for n in _sealed(ahead) if ahead.shelf.would_open(n)}
    if not 0 < len(on_it) <= _ON_ONE:
        return
    # most often somebody on it finds nothing elsewhere, and then there is nothing to try
    left = ahead.shelf.left
    for want in on_it:
        open_ones = [n for n in ahead.will_do(want) if n != number and n not in shut]
        if sum(left[n] for n in open_ones) < want.promises[0].amount:
            return
    row = sorted(on_it, key=lambda w: w.need.rank)
    ahead.arranged(row, frozenset(shut | {number}), in_rank=True)
