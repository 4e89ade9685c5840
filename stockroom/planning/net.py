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
from functools import partial

from stockroom.planning.choosing.second_thoughts import (
    IN_TURN,
    NEEDS_SETTLED,
    TRIES_A_FAMILY,
    TRIES_A_NEED,
    SecondThoughts,
    Thought,
    worth_a_try,
)
from stockroom.planning.choosing.serve import Serving
from stockroom.planning.choosing.shelf import Shelf, same_house
from stockroom.planning.explode import Need
from stockroom.planning.facts import Facts
from stockroom.planning.making_times import MakingTimes
from stockroom.planning.netting import Netting
from stockroom.planning.order_of_lines import settling_order
from stockroom.planning.timing import deadline_for
from stockroom.planning.wants import Settled, Want


@dataclass(slots=True)
class Netted:
    """Every need's want, the shelf with all promises on it, and the needs that failed.

    `serving` and `times` hold what was learnt on the way, for whoever nets again; `in_vain`
    the needs no second thought served, or none was left for. `may_settle` is how many needs
    may yet be settled again for the sake of such thoughts.
    """

    wants: list[Want]
    shelf: Shelf
    serving: Serving
    times: MakingTimes
    missed: list[Want] = field(default_factory=list)
    in_vain: set[str] = field(default_factory=set)
    may_settle: int = NEEDS_SETTLED


def net(facts: Facts, needs: tuple[Need, ...], like: Netted | None = None) -> Netted:
    """Settle all needs; those that cannot be met come out SHORT or REFUSED, with the reason.

    `like` is an earlier netting of much the same facts: what it learnt is not asked again.
    """
    shelf = Shelf(facts, like.shelf if like else None)
    serving = Serving(facts, shelf, like.serving if like else None)
    times = like.times if like and same_house(facts, like.shelf.facts) else MakingTimes(facts)
    netted = Netted([], shelf, serving, times, in_vain=set(like.in_vain) if like else set())
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
        self.thought = IN_TURN

    def settle(self, netted: Netted) -> None:
        """Settle the family and add what came of it to `netted`."""
        wants = self._settled()
        if self.failed:
            wants = self._think_again(wants, netted)
        netted.wants += [*wants, *self.failed.values()]
        lacking = (want for root in self.failed.values() for want in root.tree() if want.to_buy)
        netted.missed += [want for want in lacking if want.settled is Settled.SHORT]

    def _settled(self) -> list[Want]:
        """Settle all that can be met; what cannot is in `failed` afterwards."""
        strict = False
        netting, wants = self._attempt(strict=strict)
        while True:
            failing = netting.failures(wants)
            if failing and netting.took_chances:
                # what was saved may be what is missing now: first without any of it
                strict = True
            elif failing:
                dropped = _to_drop(failing, self.serving.shelf)
                self.failed |= {root.ref: root for root in dropped}
            elif in_vain := netting.in_vain(wants):
                self.as_late |= in_vain
            else:
                break
            netting, wants = self._attempt(strict=strict)
        return self._more_freely() if strict else wants

    def _think_again(self, wants: list[Want], netted: Netted) -> list[Want]:
        """Settled so that nobody is short whom another choice on some line would serve."""
        left = TRIES_A_FAMILY
        for short in sorted(self.failed.values(), key=lambda root: root.need.rank):
            most = min(left, TRIES_A_NEED, netted.may_settle // len(self.needs))
            if most <= 0:
                netted.in_vain.add(short.ref)
            known = short.ref in netted.in_vain
            if known or not worth_a_try(self.facts, self.serving, short):
                continue
            trial = partial(self._trial, short)
            search = SecondThoughts(self.facts, self.serving, trial, most)
            as_before = self.thought, self.failed, self.as_late
            found = search.of(short, self.thought)
            left -= most - search.left
            # and once more, below
            netted.may_settle -= (most - search.left + 1) * len(self.needs)
            if found:
                self.thought, self.failed = found, self._failed_but(short)
                wants = self._settled()
            if not found or self._served_less_than(as_before[1]):
                netted.in_vain.add(short.ref)
                # settled again, since the shelf holds the promises of the last trial
                self.thought, self.failed, self.as_late = as_before
                wants = self._settled()
        return wants

    def _trial(self, short: Want, thought: Thought) -> list[Want]:
        """Who is short where `short` is not given up and a thought is followed."""
        as_before = self.thought, self.failed
        self.thought, self.failed = thought, self._failed_but(short)
        netting, wants = self._attempt(strict=True)
        self.thought, self.failed = as_before
        return netting.failures(wants)

    def _failed_but(self, short: Want) -> dict[str, Want]:
        return {ref: root for ref, root in self.failed.items() if root is not short}

    def _served_less_than(self, failed: dict[str, Want]) -> bool:
        """True when the first by rank whose lot has changed was served with these left out."""
        changed = [need for need in self.needs if (need.ref in failed) != (need.ref in self.failed)]
        return not changed or min(changed, key=lambda need: need.rank).ref in self.failed

    def _more_freely(self) -> list[Want]:
        """Settled with chances taken once what cannot be met is gone; without, if that fails."""
        netting, wants = self._attempt(strict=False)
        if netting.failures(wants) or netting.in_vain(wants):
            netting, wants = self._attempt(strict=True)
            # for the words only: what is brought forward on a second thought is so here too
            netting.in_vain(wants)
        return wants

    def _attempt(self, *, strict: bool) -> tuple[Netting, list[Want]]:
        """Settle all that is not dropped afresh; `strict`: in rank order and as late as may be."""
        self.serving.shelf.clear(self.lines)
        self.serving.start_again()
        wants = [_root(self.facts, need) for need in self.needs if need.ref not in self.failed]
        netting = Netting(
            self.facts, self.serving, self.times, self.lines,
            strict=strict, as_late=self.as_late, thought=self.thought,
        )  # fmt: skip
        netting.settle(wants)
        return netting, wants


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
    return alone or _last(failing)


def _last(failing: list[Want]) -> list[Want]:
    """The last in rank, with all that come after the last one that holds anything.

    Whoever holds nothing leaves nothing behind: the rest would be settled as they are.
    """
    row: list[Want] = []
    for root in sorted(failing, key=lambda root: root.need.rank, reverse=True):
        row.append(root)
        if any(want.promises for want in root.tree()):
            break
    return row


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
