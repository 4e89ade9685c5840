"""Who takes the bottle where the rest can be made: what is cheapest to make decides.

Served in turn, a bottle may go to a class that would have shared a make with the next one,
and leave a third to be made for by itself. So the sharing in turn is held against others:
first whoever cannot be made for or has the fewest bottles; first the latest; first all that
one make would have served. What is compared is priced in minutes (`lots/objective.py`).
"""

from __future__ import annotations

from bisect import bisect_left, bisect_right
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from datetime import date

from stockroom.keeping.rules import Purpose
from stockroom.lots.objective import PENCE_A_MINUTE
from stockroom.planning.amounts import price
from stockroom.planning.choosing.lookahead import Lookahead
from stockroom.planning.choosing.said import forget
from stockroom.planning.choosing.serve import Shares
from stockroom.planning.facts import Facts
from stockroom.planning.making_times import Times
from stockroom.planning.wants import Settled, Want

# our choice: some ways of sharing are then left untried, and the plan is dearer but no less true
PLACINGS = 2_000
"""Wants placed anew, all ways of sharing a line's bottles together."""

Worth = tuple[tuple[bool, ...], float]
"""Who is left out that nobody can make for, the first in rank first; then minutes."""


@dataclass(frozen=True, slots=True)
class Window:
    """Something to be made of a line: µL, to be begun on a day from `first` to `last`."""

    want: Want
    volume: int
    first: date
    last: date


def makes_of(windows: Sequence[Window]) -> list[list[Window]]:
    """The fewest makes that serve them all, each begun on the last day of its first."""
    runs: list[list[Window]] = []
    for one in sorted(windows, key=lambda w: (w.last, w.first, w.want.need.rank)):
        # by last days, so whoever may begin by the run's day can share it
        if runs and one.first <= runs[-1][0].last:
            runs[-1].append(one)
        else:
            runs.append([one])
    return runs


class MakeOrTake:
    """Ways to share the bottles of one line among wants of it that could be made as well."""

    def __init__(
        self, facts: Facts, ahead: Lookahead, times_of: Callable[[Want], Times | None]
    ) -> None:
        self.facts, self.ahead, self.times_of = facts, ahead, times_of
        self.serving, self.line = ahead.serving, ahead.line
        method = facts.methods[self.line.key]
        self.minutes = method.minutes + method.finish_minutes
        sizes = (self.line.largest_batch, facts.house.largest_vessel)
        self.most = min((size for size in sizes if size), default=None)
        self.pence = price(facts, self.line)
        self.windows: dict[int, Window] = {}

    def settle(self, asked: list[Want]) -> bool:
        """Share the bottles in the cheapest way found; True when that is not as in turn.

        `asked` have been served in turn as far as the bottles go, in order of rank.
        """
        for want in asked:
            times = self.times_of(want)
            if times and times.latest and times.earliest:
                volume = self.serving.amount_from(want, self.line)
                window = Window(want, volume, times.earliest, times.latest[0])
                self.windows[id(want)] = window
        in_turn = best = self._now(asked), self._worth(asked)
        moved = dict(self.ahead.moved)
        left, better = max(1, PLACINGS // len(asked)), True
        while better:
            better = False
            for order in self._orders(asked, left):
                left -= 1
                self._serve(asked, order)
                worth = self._worth(asked)
                if worth < best[1]:
                    best, better = (self._now(asked), worth), True
            self._put_back(asked, best[0])
        self.ahead.start_again(moved if best is in_turn else {})
        if best is in_turn:
            return False
        self._say(asked, in_turn[0])
        return True

    # -- what it is worth ----------------------------------------------------------------

    def _left_out(self, asked: list[Want]) -> list[Want]:
        return [want for want in asked if want.settled is not Settled.HELD]

    def _runs(self, asked: list[Want]) -> list[list[Window]]:
        left_out = [self.windows.get(id(want)) for want in self._left_out(asked)]
        return makes_of([window for window in left_out if window])

    def _worth(self, asked: list[Want]) -> Worth:
        stuck = [want for want in asked if id(want) not in self.windows]
        minutes = float(sum(self.minutes * self._vessels(run) for run in self._runs(asked)))
        minutes += self.pence * self._thrown_away() / PENCE_A_MINUTE
        # rounded, so that the last binary digit decides nothing
        return tuple(want.settled is not Settled.HELD for want in stuck), round(minutes, 6)

    def _vessels(self, run: list[Window]) -> int:
        volume = sum(window.volume for window in run)
        return -(-volume // self.most) if self.most else 1

    def _thrown_away(self) -> int:
        """What goes past unused in bottles of the line before the plan's last day, micro-units."""
        shelf, last = self.serving.shelf, self.facts.horizon or self.facts.end
        return sum(
            shelf.left[bottle.number]
            for bottle in shelf.of_line(self.line.key)
            if self.facts.as_at
            <= shelf.usable_until(bottle.number, Purpose.ANY, shelf.opening(bottle.number))
            < last
        )

    # -- other ways ----------------------------------------------------------------------

    def _orders(self, asked: list[Want], most: int) -> list[list[Want]]:
        """Orders to serve in, each with those first whom nobody can make for."""
        runs, left_out = self._runs(asked), self._left_out(asked)
        saved = self._worth_serving(runs, asked)[:most]
        rows = [self._first(run, asked) for run in saved]
        if len(left_out) > len(self._makeable(left_out)) or len(asked) ** 2 <= PLACINGS:
            bottles = {id(want): len(self.ahead.will_do(want)) for want in asked}
            rows += [
                sorted(asked, key=lambda w: bottles[id(w)]),
                sorted(asked, key=lambda w: w.use_day, reverse=True),
                self._first(left_out, asked),
            ]
        # sorting keeps the order of rank among equals
        return [sorted(row, key=lambda w: id(w) in self.windows) for row in rows[:most]]

    def _makeable(self, wants: list[Want]) -> list[Want]:
        return [want for want in wants if id(want) in self.windows]

    def _first(self, first: list[Want], asked: list[Want]) -> list[Want]:
        """These first; last of all whoever could share a make with another that is left out."""
        row, inside = list(first), {id(want) for want in first}
        rest = [want for want in asked if id(want) not in inside]
        days = [run[0].last for run in self._runs(asked) if id(run[0].want) not in inside]
        return row + sorted(rest, key=lambda want: self._shares_one(want, days))

    def _shares_one(self, want: Want, days: list[date]) -> bool:
        window = self.windows.get(id(want))
        return window is not None and any(window.first <= day <= window.last for day in days)

    def _worth_serving(self, runs: list[list[Window]], asked: list[Want]) -> list[list[Want]]:
        """The makes that might be saved: others hold enough, and could share a make instead."""
        days = sorted(run[0].last for run in runs)
        # by how many makes each could share: one that could share only this one saves nothing
        several, only = 0, dict.fromkeys(days, 0)
        for want in self._makeable(asked):
            window = self.windows[id(want)]
            low, high = bisect_left(days, window.first), bisect_right(days, window.last)
            if want.settled is Settled.HELD and high - low > 1:
                several += window.volume
            elif want.settled is Settled.HELD and high > low:
                only[days[low]] += window.volume
        everyone = several + sum(only.values())
        return [
            [window.want for window in run]
            for run in runs
            if sum(window.volume for window in run) <= everyone - only[run[0].last]
        ]

    def _serve(self, asked: list[Want], order: list[Want]) -> None:
        self._put_back(asked, [])
        self.ahead.start_again({})
        stuck = [w for w in order if not self.ahead.place(w) and id(w) not in self.windows]
        for want in stuck:
            self.ahead.make_room(want)

    def _now(self, asked: list[Want]) -> list[tuple[Want, Shares]]:
        held = [want for want in asked if want.settled is Settled.HELD]
        return [(want, [(p.bottle, p.amount) for p in want.promises]) for want in held]

    def _put_back(self, asked: list[Want], before: list[tuple[Want, Shares]]) -> None:
        for want in asked:
            if want.settled is Settled.HELD:
                self.serving.let_go(want, self.line)
        for want, shares in before:
            self.serving.hold(want, self.line, shares)

    def _say(self, asked: list[Want], in_turn: list[tuple[Want, Shares]]) -> None:
        """Tell whoever would have had a bottle in its turn whom it is kept for, and why."""
        before = {id(want): shares for want, shares in in_turn}
        for want in asked:
            now = {promise.bottle for promise in want.promises}
            forget(want, now)
            for number, _ in before.get(id(want), []) if not now else []:
                holders = self.serving.holders.get(number, {}).values()
                last = max(holders, key=lambda w: w.need.rank, default=None)
                alone = last is not None and id(last) in self.windows
                why = (
                    "which would be made for by itself"
                    if alone
                    else "which nothing else will serve"
                )
                want.passed_over.append(
                    (number, f"kept for {last.ref}, {why}" if last else "kept for others")
                )
