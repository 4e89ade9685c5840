"""Serving a want from what stands on the shelf: which bottles, and how much of each."""

from __future__ import annotations

from collections.abc import Iterator

from stockroom.planning.amounts import say, take_for
from stockroom.planning.facts import Bottle, Closeness, Facts, Form, Line
from stockroom.planning.fitness import judge_for_dilution, judge_for_need
from stockroom.planning.shelf import Judge, Promise, Shelf, solute_held
from stockroom.planning.wants import Settled, Want
from stockroom.safety.bars import barred_by

# a fifth of what an exact line allows, so that putting together never decides a need
_SAME_STRENGTH = 1e-3
"""Bottles whose expected strengths agree this closely (as a fraction) may be put together."""


class Serving:
    """Promises bottles of a shelf to wants. One class one strength: one bottle if one will do."""

    def __init__(self, facts: Facts, shelf: Shelf) -> None:
        self.facts = facts
        self.shelf = shelf

    def from_shelf(self, want: Want, line: Line, *, last_drops: bool = False) -> bool:
        """Promise it from the shelf if that can be done; `last_drops` lifts "too close"."""
        # whatever stands there should have been destroyed: it is never counted on
        if line.never_kept:
            return False
        good = []
        for number in self._good_bottles(want, line):
            amount = self._amount_of(want, line, number)
            enough = amount <= self.shelf.left[number]
            if enough and (last_drops or not self._too_close(want, number, amount)):
                self._promise(want, line, [(number, amount)])
                return True
            if not enough:
                left, wanted = self.shelf.left[number], say(amount, line.kind)
                words = f"only {say(left, line.kind)} of it not promised, {wanted} wanted"
                want.passed_over.append((number, words))
            good.append(number)
        return self._promise(want, line, self._together(want, line, good))

    def rest_of_jars(self, want: Want, line: Line) -> None:
        """Promise what there is of a solid, however little; the rest is for buying."""
        # solids only: the rest of a solution and a new bottle of it would be two strengths
        if line.form is not Form.SOLID:
            return
        missing = self.amount_from(want, line)
        for number in list(self._good_bottles(want, line)):
            share = min(missing, self.shelf.left[number])
            self._promise(want, line, [(number, share)])
            missing -= share

    def amount_from(self, want: Want, line: Line) -> int:
        """Micro-units wanted of a line at its nominal strength."""
        return want.amount if want.amount is not None else take_for(line, None, want.solute or 0.0)

    def _amount_of(self, want: Want, line: Line, number: str) -> int:
        if want.amount is not None:
            return want.amount
        held = solute_held(self.shelf, line, number, want.use_day)
        return take_for(line, held, want.solute or 0.0)

    def _good_bottles(self, want: Want, line: Line) -> Iterator[str]:
        """Bottles that will do, in the order to use them; the others are noted with why not."""
        judge = self._judge(want, line)
        for bottle in self.shelf.in_order(line.key, want.use_day, want.purpose):
            if self.shelf.left[bottle.number] <= 0:
                continue
            reason = self._barred(want, bottle) or self.shelf.unfit(
                bottle.number, want.use_day, want.purpose, judge
            )
            if reason:
                want.passed_over.append((bottle.number, reason))
            else:
                yield bottle.number

    def _barred(self, want: Want, bottle: Bottle) -> str:
        """Why the recipe bars what this bottle was made from; "" if it does not."""
        recipe = want.need.recipe
        own = {self.facts.lines[one.line].substance for one in recipe.requirements}
        # what it was made from is still in it, whatever its own label says
        for number in bottle.lineage if recipe.bars else ():
            parent = self.shelf.bottle.get(number)
            substance = self.facts.lines[parent.line].substance if parent else ""
            reason = barred_by(recipe, substance, own)
            if reason:
                return f"made from {number}, {substance}, barred in {recipe.code}: {reason}"
        return ""

    def _judge(self, want: Want, line: Line) -> Judge:
        if want.under is None:
            return judge_for_need(want.need.requirement, line, want.need.on)
        product = self.facts.lines[want.under.line]
        per_dm3 = want.ingredient.per_dm3 if want.ingredient else None
        return judge_for_dilution(line, product, per_dm3)

    def _too_close(self, want: Want, number: str, amount: int) -> bool:
        if not self.shelf.too_close(number, amount, want.need.booking.number):
            return False
        line = self.facts.lines[self.shelf.bottle[number].line]
        held = self.shelf.bottle[number].left
        gone = held - self.shelf.left[number] + amount
        words = f"{say(gone, line.kind)} of {say(held, line.kind)} in {number}: too close to call"
        want.passed_over.append((number, words))
        want.reasons.append(f"{words}, count on a fresh make or bottle")
        return True

    def _together(self, want: Want, line: Line, good: list[str]) -> list[tuple[str, int]]:
        """Several bottles for one want: any of a solid, equal strengths of a solution."""
        alike = [number for number in good if self._alike(want, line, good[0], number)]
        if len(alike) < 2:
            return []
        missing = self._amount_of(want, line, alike[0])
        shares: list[tuple[str, int]] = []
        for number in alike:
            share = min(missing, self.shelf.left[number])
            shares.append((number, share))
            missing -= share
        # only the last of them is left with something in it
        if missing or self.shelf.too_close(*shares[-1], want.need.booking.number):
            return []
        return shares

    def _alike(self, want: Want, line: Line, first: str, number: str) -> bool:
        if want.under is None and want.need.requirement.closeness is Closeness.PRESENT:
            return True
        one, other = (solute_held(self.shelf, line, n, want.use_day) for n in (first, number))
        if one is None or other is None:
            return one is other
        return abs(other - one) <= _SAME_STRENGTH * one

    def _promise(self, want: Want, line: Line, shares: list[tuple[str, int]]) -> bool:
        judge = self._judge(want, line)
        for number, amount in shares:
            if amount:
                made = Promise(number, amount, want.use_day, want.ref, want.purpose, judge)
                self.shelf.promise(made)
                want.promises.append(made)
        if shares:
            want.settled = Settled.HELD
        return bool(shares)
