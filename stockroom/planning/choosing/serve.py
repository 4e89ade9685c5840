"""Serving a want from what stands on the shelf: which bottles, and how much of each.

Here each is served in its turn, an open bottle before a sealed one, then in the order to use
them. Whoever finds nothing in its turn is found room by `lookahead.py`.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from datetime import date
from itertools import combinations

from stockroom.planning.amounts import say, take_for
from stockroom.planning.choosing.fitness import judge_for_dilution, judge_for_need
from stockroom.planning.choosing.shelf import Judge, Promise, Shelf, same_house
from stockroom.planning.choosing.strengths_held import solute_held
from stockroom.planning.facts import Bottle, Closeness, Facts, Form, Line
from stockroom.planning.wants import TOO_CLOSE, Settled, Want
from stockroom.safety.bars import barred_by

# a fifth of what an exact line allows, so that putting together never decides a need
_SAME_STRENGTH = 1e-3
"""Bottles whose expected strengths agree this closely (as a fraction) may be put together."""

_MIXED = 3
"""Bottles put together for one want, where every way is tried."""

Shares = list[tuple[str, int]]
"""So much of each bottle."""


class Serving:
    """Promises bottles of a shelf to wants. One class one strength: one bottle if one will do.

    `held` has the wants served from each line so far, `holders` those on each bottle.
    `kept` names for whom a bottle is kept from a need (`second_thoughts.py`).
    """

    def __init__(self, facts: Facts, shelf: Shelf, like: Serving | None = None) -> None:
        self.facts = facts
        self.shelf = shelf
        self.held: dict[str, dict[int, Want]] = {}
        self.holders: dict[str, dict[int, Want]] = {}
        self.to_last_drop: set[int] = set()
        self.kept: Mapping[tuple[str, str], str] = {}
        self._judges: dict[tuple[object, ...], Judge] = {}
        self._strengths: dict[tuple[str, date], float | None] = {}
        if like is not None and same_house(facts, like.facts):
            new = shelf.changed_since(like.shelf)
            self._judges = like._judges
            self._strengths = {k: v for k, v in like._strengths.items() if k[0] not in new}

    def start_again(self) -> None:
        """Forget who was served; what was learnt of the bottles is kept."""
        self.held.clear()
        self.holders.clear()
        self.to_last_drop.clear()

    # -- in its turn ---------------------------------------------------------------------

    def from_shelf(self, want: Want, line: Line, *, last_drops: bool = False) -> bool:
        """Promise it from the shelf if that can be done; `last_drops` lifts "too close"."""
        # whatever stands there should have been destroyed: it is never counted on
        if line.never_kept:
            return False
        if last_drops:
            self.to_last_drop.add(id(want))
        good: list[str] = []
        for sealed in (False, True):
            found = len(good)
            for number in self._good_bottles(want, line, sealed=sealed):
                amount = self.amount_of(want, line, number)
                enough = amount <= self.shelf.left[number]
                if enough and not self._too_close(want, number, amount):
                    return self.hold(want, line, [(number, amount)])
                if not enough:
                    left, wanted = self.shelf.left[number], say(amount, line.kind)
                    words = f"only {say(left, line.kind)} of it not promised, {wanted} wanted"
                    want.passed_over.append((number, words))
                good.append(number)
            # two open bottles put together leave a third one shut
            if len(good) > found and self.hold(want, line, self.together(want, line, good)):
                return True
        return False

    def rest_of_jars(self, want: Want, line: Line) -> None:
        """Promise what there is of a solid, however little; the rest is for buying."""
        # solids only: the rest of a solution and a new bottle of it would be two strengths
        if line.form is not Form.SOLID:
            return
        missing = self.amount_from(want, line)
        for sealed in (False, True):
            for number in list(self._good_bottles(want, line, sealed=sealed)):
                share = min(missing, self.shelf.left[number])
                self._promise(want, line, [(number, share)])
                missing -= share

    def _good_bottles(self, want: Want, line: Line, *, sealed: bool) -> Iterator[str]:
        """Bottles that will do, in the order to use them; the others are noted with why not."""
        row = self.shelf.in_order(line.key, want.use_day, want.purpose)
        for bottle in [b for b in row if self.shelf.would_open(b.number) is sealed]:
            if self.shelf.left[bottle.number] <= 0:
                continue
            reason = self.unfit(want, line, bottle)
            if reason:
                want.passed_over.append((bottle.number, reason))
            else:
                yield bottle.number

    def _too_close(self, want: Want, number: str, amount: int) -> bool:
        if not self.too_close(want, number, amount):
            return False
        line = self.facts.lines[self.shelf.bottle[number].line]
        held = self.shelf.bottle[number].left
        gone = held - self.shelf.left[number] + amount
        words = f"{say(gone, line.kind)} of {say(held, line.kind)} in {number}: {TOO_CLOSE}"
        want.passed_over.append((number, words))
        want.reasons.append(f"{words}, count on a fresh make or bottle")
        return True

    # -- what a bottle is to a want ------------------------------------------------------

    def amount_from(self, want: Want, line: Line) -> int:
        """Micro-units wanted of a line at its nominal strength."""
        return want.amount if want.amount is not None else take_for(line, None, want.solute or 0.0)

    def amount_of(self, want: Want, line: Line, number: str) -> int:
        """Micro-units wanted of one bottle, at what it is expected to hold on the day."""
        if want.amount is not None:
            return want.amount
        held = self._strength(line, number, want.use_day)
        return take_for(line, held, want.solute or 0.0)

    def too_close(self, want: Want, number: str, amount: int) -> bool:
        """True when what would remain is too little to count on, and that counts for this want."""
        if id(want) in self.to_last_drop:
            return False
        return self.shelf.too_close(number, amount, want.need.booking.number)

    def unfit(self, want: Want, line: Line, bottle: Bottle) -> str:
        """Why a bottle will not do for a want, as promised so far; "" if it will."""
        kept_for = self.kept.get((want.ref, bottle.number))
        if kept_for:
            return f"kept for {kept_for}, which would be short without it"
        return self.barred(want, bottle) or self.shelf.unfit(
            bottle.number, want.use_day, want.purpose, self.judge(want, line)
        )

    def barred(self, want: Want, bottle: Bottle) -> str:
        """Why the recipe bars what this bottle was made from; "" if it does not."""
        recipe = want.need.recipe
        if not recipe.bars or not bottle.lineage:
            return ""
        own = {self.facts.lines[one.line].substance for one in recipe.requirements}
        # what it was made from is still in it, whatever its own label says
        for number in bottle.lineage:
            parent = self.shelf.bottle.get(number)
            substance = self.facts.lines[parent.line].substance if parent else ""
            reason = barred_by(recipe, substance, own)
            if reason:
                return f"made from {number}, {substance}, barred in {recipe.code}: {reason}"
        return ""

    def judge(self, want: Want, line: Line) -> Judge:
        """Who judges bottles for a want. Alike wants have the same, so that it is asked once."""
        if want.under is None:
            requirement, on = want.need.requirement, want.need.on
            # the recipes stand still while a plan is made, so one is known by where it stands
            key: tuple[object, ...] = (id(requirement), line.key, on)
            if key not in self._judges:
                self._judges[key] = judge_for_need(requirement, line, on)
            return self._judges[key]
        product = self.facts.lines[want.under.line]
        per_dm3 = want.ingredient.per_dm3 if want.ingredient else None
        key = (line.key, product.key, per_dm3)
        if key not in self._judges:
            self._judges[key] = judge_for_dilution(line, product, per_dm3)
        return self._judges[key]

    # -- several bottles together --------------------------------------------------------

    def together(self, want: Want, line: Line, good: list[str]) -> Shares:
        """Several bottles for one want: any of a solid, equal strengths of a solution."""
        tried: set[str] = set()
        # half, since a stronger bottle gives less of it
        if 2 * sum(self.shelf.left[n] for n in good) < self.amount_from(want, line):
            return []
        for first in good:
            if first in tried:
                continue
            alike = [number for number in good if self.alike(want, line, first, number)]
            tried.update(alike)
            shares = self._filled_in_turn(want, line, alike)
            if shares:
                return shares
        return []

    def _filled_in_turn(self, want: Want, line: Line, alike: list[str]) -> Shares:
        if len(alike) < 2:
            return []
        shares: Shares = []
        for number in alike:
            share = min(self._still_wanted(want, line, shares, number), self.shelf.left[number])
            if share:
                shares.append((number, share))
        # only the last of them is left with something in it
        if self._still_wanted(want, line, shares, alike[-1]) or self.too_close(want, *shares[-1]):
            return []
        return shares

    def _still_wanted(self, want: Want, line: Line, given: Shares, number: str) -> int:
        """What one more bottle would give after others gave theirs, micro-units."""
        whole = self.amount_of(want, line, given[0][0] if given else number)
        if line.form is not Form.SOLID:
            return whole - sum(amount for _, amount in given)
        # in parts of the whole: a gram of one jar may hold more than a gram of another
        part = sum(amount / self.amount_of(want, line, one) for one, amount in given)
        return max(0, round(self.amount_of(want, line, number) * (1.0 - part)))

    def mixed(
        self, want: Want, line: Line, fit: list[str], to_empty: list[str]
    ) -> Iterator[Shares]:
        """Some emptied and the rest from one more, as `together` does it in one way."""
        left = self.shelf.left
        for several in range(1, _MIXED):
            for emptied in combinations(to_empty, several):
                if not all(self.alike(want, line, emptied[0], n) for n in emptied[1:]):
                    continue
                given = [(number, left[number]) for number in emptied]
                for last in fit:
                    missing = self._still_wanted(want, line, given, last)
                    if last in emptied or not 0 < missing <= left[last]:
                        continue
                    alike = self.alike(want, line, emptied[0], last)
                    if alike and not self.too_close(want, last, missing):
                        yield [*given, (last, missing)]

    def alike(self, want: Want, line: Line, first: str, number: str) -> bool:
        """True when a class may be given some of each of two bottles."""
        if want.under is None and want.need.requirement.closeness is Closeness.PRESENT:
            return True
        # any jar of a solid will do, whatever its assay: each is weighed by its own
        if line.form is Form.SOLID:
            return True
        one, other = (self._strength(line, n, want.use_day) for n in (first, number))
        if one is None or other is None:
            return one is other
        return abs(other - one) <= _SAME_STRENGTH * one

    def _strength(self, line: Line, number: str, on: date) -> float | None:
        if self.shelf.ages_from_opening(number):
            return solute_held(self.shelf, line, number, on)
        if (number, on) not in self._strengths:
            self._strengths[number, on] = solute_held(self.shelf, line, number, on)
        return self._strengths[number, on]

    # -- holding it ----------------------------------------------------------------------

    def hold(self, want: Want, line: Line, shares: Shares) -> bool:
        """Promise the whole of a want, as shares of bottles; False when there are none."""
        if not shares:
            return False
        self._promise(want, line, shares)
        want.settled = Settled.HELD
        self.held.setdefault(line.key, {})[id(want)] = want
        for number, _ in shares:
            self.holders.setdefault(number, {})[id(want)] = want
        return True

    def let_go(self, want: Want, line: Line) -> Shares:
        """Take back all that a want holds of a line; what it was, to be held again."""
        shares = [(promise.bottle, promise.amount) for promise in want.promises]
        for promise in want.promises:
            self.shelf.release(promise)
            self.holders[promise.bottle].pop(id(want), None)
        want.promises.clear()
        want.settled = Settled.OPEN
        self.held[line.key].pop(id(want), None)
        return shares

    def _promise(self, want: Want, line: Line, shares: Shares) -> None:
        judge = self.judge(want, line)
        beside = len(shares) > 1 and line.form is not Form.SOLID
        for number, amount in shares:
            if amount:
                day, ref = want.use_day, want.ref
                made = Promise(number, amount, day, ref, want.purpose, judge, beside)
                self.shelf.promise(made)
                want.promises.append(made)
