"""Room for whoever finds no bottle in its turn: those before it move to others that will do.

Nobody served is left out for it: each is moved, or nothing is. First along chains, one
giving up its bottle for the next; then, among few, by trying every way there is, the
hardest to serve first. All is counted in steps and not in time, so that the same facts
give the same plan everywhere.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from itertools import islice

from stockroom.planning.choosing.said import forget
from stockroom.planning.choosing.serve import Serving, Shares
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.facts import Line
from stockroom.planning.wants import Want

# our choices: beyond these a better sharing may be missed, though never a bottle promised twice
FEW = 12
"""Wants that hang together by their bottles, up to which every way to serve them is tried."""
TRIES = 1_500
"""Bottles tried for one want before it counts as one that nothing can be done for."""
TRIES_A_LINE = 2_000
"""The same for all wants of a line together."""
LONGEST_CHAIN = 4
CHAIN_TRIES = 100


class Lookahead:
    """Moves what `serving` has promised of one line. `moved`: whom, and what each had before."""

    def __init__(self, serving: Serving, line: Line) -> None:
        self.serving, self.line = serving, line
        self.shelf: Shelf = serving.shelf
        self.moved: dict[int, tuple[Want, Shares]] = {}
        bottles = self.shelf.of_line(line.key)
        self._meant_for = frozenset(number for b in bottles for number in b.meant_for)
        self._left_to_try = TRIES_A_LINE
        self._tries = 0
        self._shut: frozenset[str] = frozenset()
        self._every = True
        self._will_do: dict[tuple[object, ...], list[str]] = {}
        self._before: dict[int, tuple[Want, Shares]] = {}
        self._hopeless: dict[tuple[object, ...], int] = {}

    @property
    def held(self) -> list[Want]:
        """The wants served from the line, in their order."""
        return sorted(self.serving.held.get(self.line.key, {}).values(), key=lambda w: w.need.rank)

    def start_again(self, moved: dict[int, tuple[Want, Shares]]) -> None:
        """Forget whom nothing could be done for: the bottles are shared out anew."""
        self._hopeless.clear()
        self.moved = moved

    def make_room(self, want: Want) -> bool:
        """Serve a want by moving others of its line; True when all are served."""
        amount = self.serving.amount_from(want, self.line)
        booking = want.need.booking.number
        sort = (
            self.serving.judge(want, self.line),
            want.use_day,
            want.need.recipe.code,
            id(want) in self.serving.to_last_drop,
            booking if booking in self._meant_for else "",
        )
        # the shelf only gets fuller: whoever asks for as much on the same day fares no better
        if amount >= self._hopeless.get(sort, amount + 1) or not self._possible(want, amount):
            return False
        for way in (self._by_a_chain, self._every_way):
            self._before = {}
            if way(want) and self._still_good():
                self._note_moved()
                forget(want, {promise.bottle for promise in want.promises})
                return True
            self._restore(want)
        self._hopeless[sort] = amount
        return False

    def _possible(self, want: Want, amount: int) -> bool:
        bottles = self.shelf.of_line(self.line.key)
        # half, since a stronger bottle gives less of it
        left = sum(self.shelf.left[bottle.number] for bottle in bottles)
        return bool(self.serving.held.get(self.line.key)) and 2 * left >= amount

    # -- along a chain -------------------------------------------------------------------

    def _by_a_chain(self, want: Want) -> bool:
        self._tries = min(CHAIN_TRIES, self._left_to_try)
        return self._along_a_chain(want, LONGEST_CHAIN, frozenset())

    def _along_a_chain(self, want: Want, longest: int, given_up: frozenset[str]) -> bool:
        """Put a want where another stood, and that one elsewhere, itself by a chain if need be."""
        for number in self.will_do(want):
            if number in given_up:
                continue
            holders = list(self.serving.holders.get(number, {}).values())
            for other in sorted(holders, key=lambda w: w.need.rank, reverse=True):
                self._spend(1)
                if self._tries <= 0:
                    return False
                if id(other) not in self.serving.holders.get(number, {}):
                    continue
                had = self._let_go(other)
                if self._on(want, number):
                    if self._in_turn(other, given_up | {number}):
                        return True
                    if longest > 1 and self._along_a_chain(other, longest - 1, given_up | {number}):
                        return True
                    self.serving.let_go(want, self.line)
                self.serving.hold(other, self.line, had)
        return False

    def _in_turn(self, want: Want, given_up: frozenset[str]) -> bool:
        self._spend(1)
        return any(
            self._hold(want, shares)
            for shares in self.ways(want, every=False)
            if given_up.isdisjoint(number for number, _ in shares)
        )

    def _on(self, want: Want, number: str) -> bool:
        return any(self._hold(want, shares) for shares in self._alone(want, [number]))

    def _hold(self, want: Want, shares: Shares) -> bool:
        self._spend(1)
        return self.serving.hold(want, self.line, shares)

    # -- every way -----------------------------------------------------------------------

    def _every_way(self, want: Want) -> bool:
        together = self._hang_together(want)
        if together is None:
            return False
        for one in together:
            if one is not want:
                self._let_go(one)
        self._tries = min(TRIES, self._left_to_try)
        # who is put together from what others leave is found only after them
        return self.fill(together) or self.fill(together, in_rank=True)

    def _hang_together(self, want: Want) -> list[Want] | None:
        """The want and all held whose bottles may have to change for it; None when too many."""
        found, waiting, seen = {id(want): want}, [want], set[str]()
        while waiting:
            for number in self.will_do(waiting.pop()):
                if number in seen:
                    continue
                seen.add(number)
                for one in self.serving.holders.get(number, {}).values():
                    if id(one) not in found:
                        found[id(one)] = one
                        waiting.append(one)
            if len(found) > FEW:
                return None
        return sorted(found.values(), key=lambda w: w.need.rank)

    def fill(self, rest: list[Want], *, in_rank: bool = False) -> bool:
        """Serve them all, the one with the fewest ways first; nothing is held if that fails.

        `in_rank`: in the order given, so that the first way found is the one most preferred.
        """
        if not rest:
            return True
        want, row = (
            (rest[0], self.ways(rest[0], every=self._every)) if in_rank else self._hardest(rest)
        )
        others = [one for one in rest if one is not want]
        for shares in row:
            if self._tries <= 0:
                return False
            self._hold(want, shares)
            if self.fill(others, in_rank=in_rank):
                return True
            self.serving.let_go(want, self.line)
        return False

    def _hardest(self, rest: list[Want]) -> tuple[Want, Iterable[Shares]]:
        self._spend(len(rest))
        # whoever has many ways is not the hardest, however many they are
        every = [(len(list(islice(self.ways(one), FEW))), one) for one in rest]
        _, want = min(every, key=lambda w: (w[0], -self._size(w[1]), w[1].need.rank))
        return want, self.ways(want)

    def _spend(self, tries: int) -> None:
        self._tries -= tries
        self._left_to_try -= tries

    def arranged(self, wants: list[Want], shut: frozenset[str], *, in_rank: bool = False) -> bool:
        """Serve all of these anew with some bottles left shut; False: all is as it was."""
        # among many the ways to mix are too many to be worth one bottle left shut
        self._every = len(self.held) <= FEW
        self._before, self._shut = {}, shut
        self._tries = min(TRIES if len(wants) <= FEW else 2 * len(wants), self._left_to_try)
        for want in wants:
            self._let_go(want)
        done = self.fill(wants, in_rank=in_rank) and self._still_good()
        self._shut, self._every = frozenset(), True
        if done:
            self._note_moved()
        else:
            self._restore(None)
        return done

    def place(self, want: Want) -> bool:
        """Serve it from what is left, as preferred, without a word; False when nothing will do."""
        return any(self._hold(want, shares) for shares in self.ways(want))

    def _size(self, want: Want) -> int:
        return self.serving.amount_from(want, self.line)

    # -- what will do --------------------------------------------------------------------

    def will_do(self, want: Want) -> list[str]:
        """Bottles that would do for a want if nothing were promised, in the order to use them."""
        judge, recipe = self.serving.judge(want, self.line), want.need.recipe
        key = (judge, want.use_day, want.purpose, recipe.code if recipe.bars else "")
        if key not in self._will_do:
            self._will_do[key] = [
                bottle.number
                for bottle in self.shelf.in_order(self.line.key, want.use_day, want.purpose)
                if bottle.left > 0
                and not self.serving.barred(want, bottle)
                and not self.shelf.unfit_opened(
                    bottle.number, want.use_day, want.purpose, judge, want.use_day
                )
            ]
        kept, ref = self.serving.kept, want.ref
        row = [number for number in self._will_do[key] if number not in self._shut]
        return [number for number in row if (ref, number) not in kept] if kept else row

    def ways(self, want: Want, *, every: bool = True) -> Iterator[Shares]:
        """Ways to serve a want from what is left: from one bottle first, then several.

        All of them, or (not `every`) of the ways to put several together only the first.
        """
        left = self.shelf.left
        fit = [n for n in self.will_do(want) if left[n] > 0 and self._fit(want, n)]
        fit.sort(key=self.shelf.would_open)
        yield from self._alone(want, fit)
        if len(fit) < 2:
            return
        in_turn = self.serving.together(want, self.line, fit)
        if len(in_turn) > 1:
            yield in_turn
        if every:
            yield from self.serving.mixed(want, self.line, fit, fit[: FEW // 2])

    def _fit(self, want: Want, number: str) -> bool:
        # it would do unopened, and what does not age from its opening is none the worse for it
        if not self.shelf.ages_from_opening(number):
            return True
        return not self.serving.unfit(want, self.line, self.shelf.bottle[number])

    def _alone(self, want: Want, numbers: list[str]) -> Iterator[Shares]:
        for number in numbers:
            amount = self.serving.amount_of(want, self.line, number)
            enough = amount <= self.shelf.left[number]
            close = enough and self.serving.too_close(want, number, amount)
            if enough and not close and self._fit(want, number):
                yield [(number, amount)]

    # -- before and after ----------------------------------------------------------------

    def _let_go(self, want: Want) -> Shares:
        had = self.serving.let_go(want, self.line)
        self._before.setdefault(id(want), (want, had))
        return had

    def _restore(self, want: Want | None) -> None:
        held = self.serving.held.get(self.line.key, {})
        for one in [*filter(None, [want]), *(one for one, _ in self._before.values())]:
            if id(one) in held:
                self.serving.let_go(one, self.line)
        for one, had in self._before.values():
            if one is not want:
                self.serving.hold(one, self.line, had)

    def _still_good(self) -> bool:
        """Nobody who stayed is spoilt for by who went: opened later, a bottle is stronger."""
        numbers = {number for _, had in self._before.values() for number, _ in had}
        for number in sorted(numbers):
            opened = self.shelf.opening(number)
            ages = opened and self.shelf.ages_from_opening(number)
            if ages and opened and self.shelf.spoilt(number, opened):
                return False
        return True

    def _note_moved(self) -> None:
        for want, had in self._before.values():
            self.moved.setdefault(id(want), (want, had))
