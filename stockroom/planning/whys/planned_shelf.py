"""The shelf with every promise of a plan on it, for judging what the plan did not choose."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date
from functools import cached_property

from stockroom.keeping.rules import Purpose
from stockroom.planning.buying.packs import Rate, rates
from stockroom.planning.choosing.fitness import judge_for_dilution, judge_for_need
from stockroom.planning.choosing.shelf import Judge, Promise, Shelf
from stockroom.planning.decisions import Answer, Draw, Make, Plan
from stockroom.planning.explode import Need, explode, standing
from stockroom.planning.facts import Bottle, Closeness, Facts, Ingredient, Line
from stockroom.planning.numbers import Natural, natural

Rank = tuple[int, date, int, Natural, int]


@dataclass(frozen=True, slots=True)
class Claim:
    """Who is promised how much of a bottle: a need or a make, and its place in the queue."""

    ref: str
    amount: int
    rank: Rank


class PlannedShelf:
    """What a plan promises, bottle by bottle, seen by whoever asks about another choice.

    The plan must reach over every booking from `as_at` on, or promises would be missing.
    """

    def __init__(self, facts: Facts, plan: Plan) -> None:
        self.facts, self.plan = facts, plan
        self._shelves: dict[str, Shelf] = {}

    @cached_property
    def needs(self) -> dict[str, Need]:
        """Every need the plan answers, by its reference."""
        last = max((answer.booking.on for answer in self.plan.needs), default=self.facts.end)
        bookings = standing(self.facts.bookings, self.facts.as_at, last)
        return {need.ref: need for need in explode(self.facts, bookings)}

    @cached_property
    def rates(self) -> dict[str, Rate]:
        """How fast the bookings use each bought line: the rate its packs were chosen by."""
        return rates(self.facts)

    @cached_property
    def claims(self) -> dict[str, list[Claim]]:
        """What of each bottle is promised to whom, first served first."""
        row: dict[str, list[Claim]] = {}
        for answer in self.plan.needs:
            for draw in self.promised(answer):
                claim = Claim(answer.ref, draw.amount, self.needs[answer.ref].rank)
                row.setdefault(draw.bottle, []).append(claim)
        for make in self.plan.makes:
            for source in make.sources:
                if source.bottle:
                    claim = Claim(make.id, source.amount, self.rank_of(make))
                    row.setdefault(source.bottle, []).append(claim)
        return {number: sorted(claims, key=lambda c: c.rank) for number, claims in row.items()}

    def promised(self, answer: Answer) -> tuple[Draw, ...]:
        """The draws of an answer still to come: what is already drawn is off the balance."""
        drawn = len(self.needs[answer.ref].drawn) if answer.ref in self.needs else len(answer.draws)
        return tuple(draw for draw in answer.draws[drawn:] if draw.bottle)

    @cached_property
    def _by_booking(self) -> dict[str, Rank]:
        row: dict[str, Rank] = {}
        for need in self.needs.values():
            number = need.booking.number
            row[number] = min(row.get(number, need.rank), need.rank)
        return row

    def rank_of(self, make: Make) -> Rank:
        """A make stands in the queue where the first of the bookings it serves stands."""
        served = [self._by_booking[one] for one in make.bookings if one in self._by_booking]
        return min(served, default=(2, make.on, 0, natural(make.id), 0))

    def bottle(self, number: str) -> Bottle | None:
        """A bottle by its label number, in any case of letters; None if there is none."""
        wanted = number.strip().lower()
        return next((b for b in self.facts.bottles if b.number.lower() == wanted), None)

    def without(self, ref: str) -> Shelf:
        """A shelf with every promise on it but those of one need or make."""
        if ref not in self._shelves:
            self._shelves[ref] = self._filled(ref)
        return self._shelves[ref]

    def _filled(self, ref: str) -> Shelf:
        shelf = Shelf(self.facts)
        for promise in self._promises():
            # a make may be rounded by less than a micro-unit past what stands there
            amount = min(promise.amount, shelf.left[promise.bottle])
            if promise.for_ref != ref and amount > 0:
                shelf.promise(
                    Promise(promise.bottle, amount, promise.on, promise.for_ref, promise.purpose,
                            promise.judge)
                )  # fmt: skip
        return shelf

    def _promises(self) -> Iterable[Promise]:
        for answer in self.plan.needs:
            for draw in self.promised(answer):
                need = self.needs[answer.ref]
                judge = judge_for_need(need.requirement, need.line, need.on)
                yield Promise(
                    draw.bottle, draw.amount, need.on, answer.ref, purpose_of(need), judge
                )
        for make in self.plan.makes:
            for source in make.sources:
                if source.bottle:
                    judge = self.judge_of(make, self.facts.lines[source.line])
                    yield Promise(
                        source.bottle, source.amount, make.on, make.id, Purpose.ANY, judge
                    )

    def judge_of(self, make: Make, line: Line) -> Judge:
        """How bottles of a line are judged as a source of a make."""
        part = self.ingredient(make, line.key)
        per_dm3 = part.per_dm3 if part else None
        return judge_for_dilution(line, self.facts.lines[make.line], per_dm3)

    def ingredient(self, make: Make, key: str) -> Ingredient | None:
        """The ingredient of a make's method that a line may give; None if none."""
        method = self.facts.methods.get(make.line)
        return next((i for i in (method.ingredients if method else ()) if key in i.lines), None)

    def served(self, make: Make) -> list[Need]:
        """The needs a make serves itself, in the order of the plan."""
        refs = [answer.ref for answer in self.plan.needs if answer.make == make.id]
        return [self.needs[ref] for ref in refs if ref in self.needs]

    def feeds(self, make: Make) -> list[Make]:
        """The makes that take from a make."""
        return [m for m in self.plan.makes if any(s.make == make.id for s in m.sources)]

    def makes_under(self, answer: Answer) -> list[Make]:
        """The make that serves a need and every make that one takes from, the last first."""
        by_id = {make.id: make for make in self.plan.makes}
        row, waiting = [], [answer.make]
        while waiting:
            make = by_id.get(waiting.pop(0))
            if make and make not in row:
                row.append(make)
                waiting += [source.make for source in make.sources if source.make]
        return row


def purpose_of(need: Need) -> Purpose:
    """Exact for an exact line, any for the others."""
    return Purpose.EXACT if need.requirement.closeness is Closeness.EXACT else Purpose.ANY
