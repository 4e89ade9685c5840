"""Step 2: settle every want, by the shelf, by making, by buying, or not at all.

Lines that have nothing to do with each other are settled apart. On each line the wants are
served firm before pencilled, then by day: from one bottle where one will do (one class, one
strength), else by the next line that may give it, else by making, else by buying. A need
that cannot be met is left out and the rest of its lines settled again, so that nothing is
held for it.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field

from stockroom.planning.choosing.serve import Serving
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.explode import Need
from stockroom.planning.facts import Facts
from stockroom.planning.making_times import MakingTimes
from stockroom.planning.netting import Netting
from stockroom.planning.order_of_lines import settling_order
from stockroom.planning.timing import deadline_for
from stockroom.planning.wants import Settled, Want


@dataclass(slots=True)
class Netted:
    """Every need's want, the shelf with all promises on it, and the needs that failed."""

    wants: list[Want]
    shelf: Shelf
    missed: list[Want] = field(default_factory=list)


def net(facts: Facts, needs: tuple[Need, ...]) -> Netted:
    """Settle all needs; those that cannot be met come out SHORT or REFUSED, with the reason."""
    netted = Netted([], Shelf(facts))
    serving, times = Serving(facts, netted.shelf), MakingTimes(facts)
    for lines, asked in _families(facts, needs):
        _Family(facts, serving, times, lines, asked).settle(netted)
    netted.wants.sort(key=lambda want: want.need.rank)
    return netted


def _families(facts: Facts, needs: tuple[Need, ...]) -> Iterator[tuple[list[str], list[Need]]]:
    """Lines that hang together by what they are made from, in settling order, and their needs."""
    head = {key: key for key in facts.lines}

    def top(key: str) -> str:
        while head[key] != key:
            head[key] = head[head[key]]
            key = head[key]
        return key

    for method in facts.methods.values():
        for ingredient in method.ingredients:
            for key in ingredient.lines:
                head[top(key)] = top(method.line)
    lines: dict[str, list[str]] = {}
    for key in settling_order(facts):
        lines.setdefault(top(key), []).append(key)
    asked: dict[str, list[Need]] = {}
    for need in needs:
        asked.setdefault(top(need.line.key), []).append(need)
    for key, row in lines.items():
        if key in asked:
            yield row, asked[key]


class _Family:
    """The needs of lines that hang together, settled again until those left can all be met."""

    def __init__(
        self,
        facts: Facts,
        serving: Serving,
        times: MakingTimes,
        lines: list[str],
        needs: list[Need],
    ) -> None:
        self.facts, self.serving, self.times = facts, serving, times
        self.lines, self.needs = lines, needs
        self.failed: dict[str, Want] = {}
        self.as_late: frozenset[str] = frozenset()

    def settle(self, netted: Netted) -> None:
        """Settle the family and add what came of it to `netted`."""
        strict = False
        netting, wants = self._attempt(strict=strict)
        while True:
            failing = netting.failures(wants)
            if failing and netting.took_chances:
                # what was saved may be what is missing now: first without any of it
                strict = True
            elif failing:
                self._drop(_to_drop(failing, self.serving.shelf), netted)
            elif in_vain := netting.in_vain(wants):
                self.as_late |= in_vain
            else:
                break
            netting, wants = self._attempt(strict=strict)
        if strict:
            wants = self._more_freely()
        netted.wants += [*wants, *self.failed.values()]

    def _more_freely(self) -> list[Want]:
        """Settled with chances taken once what cannot be met is gone; without, if that fails."""
        netting, wants = self._attempt(strict=False)
        if netting.failures(wants) or netting.in_vain(wants):
            _, wants = self._attempt(strict=True)
        return wants

    def _attempt(self, *, strict: bool) -> tuple[Netting, list[Want]]:
        """Settle all that is not dropped afresh; `strict`: in rank order and as late as may be."""
        self.serving.shelf.clear(self.lines)
        self.serving.start_again()
        wants = [_root(self.facts, need) for need in self.needs if need.ref not in self.failed]
        netting = Netting(
            self.facts, self.serving, self.times, self.lines, strict=strict, as_late=self.as_late
        )
        netting.settle(wants)
        return netting, wants

    def _drop(self, roots: list[Want], netted: Netted) -> None:
        for root in roots:
            self.failed[root.ref] = root
            netted.missed += [w for w in root.tree() if w.to_buy and w.settled is Settled.SHORT]


def _to_drop(failing: list[Want], shelf: Shelf) -> list[Want]:
    """Those that fail whatever the others do; of those that only clash, the last in rank.

    A need may be short only because another failing one holds its bottle: once
    that one is dropped there is enough, so it is settled again first.
    """
    holders: dict[str, set[str]] = {}
    for root in failing:
        for want in root.tree():
            for promise in want.promises:
                holders.setdefault(promise.bottle, set()).add(root.ref)
    alone = [root for root in failing if not _clashes(root, holders, shelf)]
    return alone or [max(failing, key=lambda root: root.need.rank)]


def _clashes(root: Want, holders: dict[str, set[str]], shelf: Shelf) -> bool:
    """True when a bottle of a line it lacks is held for another need that fails."""
    for number in _lacked(root, shelf):
        held = holders.get(number)
        # no set is made of it: there may be thousands on one bottle
        if held and (len(held) > 1 or root.ref not in held):
            return True
    return False


def _lacked(root: Want, shelf: Shelf) -> Iterable[str]:
    lacking = [w for w in root.tree() if w.settled is Settled.SHORT and not w.parts]
    keys = dict.fromkeys(key for want in lacking for key in want.choices)
    return (bottle.number for key in keys for bottle in shelf.of_line(key))


def _root(facts: Facts, need: Need) -> Want:
    booking = need.booking
    method = facts.methods.get(need.line.key)
    deadline = (booking.on, booking.minute)
    if method:
        deadline = deadline_for(
            booking.on,
            booking.minute,
            fresh=need.fresh,
            method=method,
            calendar=facts.calendar,
            house=facts.house,
        )
    settled = Settled.OPEN if need.missing else Settled.HELD
    return Want(need, (need.line.key,), deadline, amount=need.missing, settled=settled)
