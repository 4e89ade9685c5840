"""What a batch takes: drawn again for the whole of it, from the bottles promised to its parts."""

from __future__ import annotations

from datetime import date

from stockroom.keeping.rules import Purpose
from stockroom.measure.amounts import Kind
from stockroom.planning.amounts import draw_for, say
from stockroom.planning.buying.on_way import OnWay, ordered_today
from stockroom.planning.choosing.fitness import judge_for_dilution
from stockroom.planning.choosing.shelf import Promise, Shelf
from stockroom.planning.choosing.strengths_held import solute_held
from stockroom.planning.facts import Facts, Form, Ingredient, Line
from stockroom.planning.making.batch import Batch, Source, Taken, taken_for
from stockroom.planning.wants import Settled, Want


class Drawing:
    """Draws for batches on a shelf, and keeps account of what bought lines give.

    `taken` is what each need takes of each bought line; `waiting` holds, by
    want, the sources that a batch still to be dated will fill; `outgrown` the
    lines whose batches, made bigger than needed, ask for more than there is. `coming`
    is what is on its way and promised to nobody.
    """

    def __init__(self, facts: Facts, shelf: Shelf, coming: OnWay) -> None:
        self.facts, self.shelf, self.coming = facts, shelf, coming
        self.taken: list[Taken] = []
        self.waiting: dict[int, Source] = {}
        self.outgrown: set[str] = set()

    def settle(self, batch: Batch) -> None:
        """Give the batch its sources: what its parts were promised, drawn again as one."""
        groups: dict[tuple[Ingredient, str, bool], list[Want]] = {}
        for want in batch.wants:
            for part in want.parts:
                assert part.ingredient is not None
                key = (part.ingredient, part.line, part.settled is Settled.MAKE)
                groups.setdefault(key, []).append(part)
        # the solute first, as a person reads it; then by name, whatever the order of the rows
        row = sorted(groups.items(), key=lambda g: (g[0][0].role != "solute", *g[0][1:]))
        for (ingredient, _, _), parts in row:
            # every ingredient first: the shortest one settles the volume for all
            self._no_more_than_held(batch, ingredient, parts, share_of(batch, parts))
        for (ingredient, _, _), parts in row:
            self._draw(batch, ingredient, parts, share_of(batch, parts))

    def _no_more_than_held(
        self, batch: Batch, ingredient: Ingredient, parts: list[Want], share: float
    ) -> None:
        """Making more than is needed stops at what the bottles of an ingredient hold."""
        line = self.facts.lines[parts[0].line]
        promises = [promise for part in parts for promise in part.promises]
        if not promises or any(part.to_buy for part in parts):
            return
        numbers = {promise.bottle for promise in promises}
        # any jar of a solid will do; another bottle of a solution may be of another strength
        if line.form is Form.SOLID:
            numbers |= set(self._jars(batch, ingredient, line))
        held = sum(self.shelf.left[number] for number in numbers)
        held += sum(promise.amount for promise in promises)
        strength = solute_held(self.shelf, line, promises[0].bottle, batch.start[0])
        wanted = draw_for(line, strength, batch.line, batch.volume, ingredient.per_dm3)
        if round(wanted * share) > held:
            exact = batch.run.needed
            if batch.forced:
                batch.reasons.append(
                    f"made {say(exact, Kind.VOLUME)} all the same: "
                    f"{', '.join(sorted(numbers))} holds no more"
                )
            batch.volume, batch.forced = exact, 0

    def _jars(self, batch: Batch, ingredient: Ingredient, line: Line) -> list[str]:
        day, judge = batch.start[0], judge_for_dilution(line, batch.line, ingredient.per_dm3)
        jars = self.shelf.in_order(line.key, day, Purpose.ANY)
        fit = [b.number for b in jars if not self.shelf.unfit(b.number, day, Purpose.ANY, judge)]
        return [number for number in fit if self.shelf.left[number] > 0]

    def _draw(self, batch: Batch, ingredient: Ingredient, parts: list[Want], share: float) -> None:
        line = self.facts.lines[parts[0].line]
        if parts[0].settled is Settled.MAKE:
            amount = draw_for(line, line.strength, batch.line, batch.volume, ingredient.per_dm3)
            source = Source(line, round(amount * share), strength=line.strength)
            batch.sources.append(source)
            self.waiting.update({id(part): source for part in parts})
            return
        numbers = [promise.bottle for part in parts for promise in part.promises]
        # given back before it is drawn again, or the shelf would count it twice
        for part in parts:
            for promise in part.promises:
                self.shelf.release(promise)
        unique, to_buy = list(dict.fromkeys(numbers)), sum(part.to_buy for part in parts)
        sources = self._from_bottles(batch, ingredient, line, unique, share, to_buy)
        batch.sources += sources
        if line.key not in self.facts.methods:
            self._note_taken(batch, line, parts, sources)

    def _from_bottles(
        self,
        batch: Batch,
        ingredient: Ingredient,
        line: Line,
        numbers: list[str],
        share: float,
        to_buy: int,
    ) -> list[Source]:
        """Draw this share of an ingredient again: the promised bottles first, then other jars."""
        day, judge = batch.start[0], judge_for_dilution(line, batch.line, ingredient.per_dm3)
        if line.form is Form.SOLID:
            jars = self._jars(batch, ingredient, line)
            numbers += [number for number in jars if number not in numbers]
        share_left, sources = share, []
        for number in numbers:
            held = solute_held(self.shelf, line, number, day)
            whole = draw_for(line, held, batch.line, batch.volume, ingredient.per_dm3)
            amount = min(round(whole * share_left), self.shelf.left[number])
            if amount:
                ref = batch.needs[0].ref
                self.shelf.promise(Promise(number, amount, day, ref, Purpose.ANY, judge))
                sources.append(Source(line, amount, number, held))
                share_left -= amount / whole
        whole = draw_for(line, line.strength, batch.line, batch.volume, ingredient.per_dm3)
        missing = round(whole * share_left)
        # what rounding each bottle's share to whole micro-units leaves is nothing to buy
        if missing > len(sources) and share_left > 1e-6:
            # whole micro-units are left out, as above
            more = missing - to_buy if missing - to_buy > len(numbers) + 1 else 0
            if not to_buy or (more and not self._comes_too(line, more, day)):
                self.outgrown |= _chain(batch)
            sources.append(Source(line, missing, strength=line.strength))
        return sources

    def _comes_too(self, line: Line, more: int, day: date) -> bool:
        """Whether so much more than the needs wait for is in hand by a day as well."""
        if ordered_today(self.facts, line) <= day:
            return True
        if self.coming.available(line.key, day, day) < more:
            return False
        self.coming.promise(line.key, more, day, day)
        return True

    def _note_taken(self, batch: Batch, line: Line, parts: list[Want], got: list[Source]) -> None:
        """Share what was drawn among the needs: each its exact part, the forced rest in proportion.

        Rounding a batch up is left out of account: running sums follow the exact needs.
        """
        exact = [part.to_buy + sum(p.amount for p in part.promises) for part in parts]
        bought = sum(source.amount for source in got if not source.bottle)
        waiting = sum(part.to_buy for part in parts)
        forced = round((sum(source.amount for source in got) - sum(exact)) * batch.forced_part)
        for part, amount in zip(parts, exact, strict=True):
            weight = amount / sum(exact) if sum(exact) else 0.0
            # a batch made earlier may find in a jar what its part alone had to wait for
            to_buy = round(bought * (part.to_buy / waiting if waiting else weight))
            held = amount + round(max(0, forced) * weight) - to_buy
            bottles = [source.bottle for source in got if source.bottle]
            taken = taken_for(part, batch.start[0], max(0, held), to_buy, bottles)
            self.taken.append(taken)


def _chain(batch: Batch) -> set[str]:
    """The line of a batch and every line made from it for the same needs."""
    lines: set[str] = set()
    for want in batch.wants:
        above: Want | None = want
        while above is not None:
            lines.add(above.line)
            above = above.under
    return lines


def share_of(batch: Batch, parts: list[Want]) -> float:
    """How much of an ingredient of a batch these parts are, 0 to 1: all, unless some are
    held and others made.
    """
    every = [p for w in batch.wants for p in w.parts if p.ingredient == parts[0].ingredient]
    if len(parts) == len(every):
        return 1.0
    return _basis(parts) / _basis(every)


def _basis(parts: list[Want]) -> float:
    return sum(p.solute if p.solute is not None else float(p.amount or 0) for p in parts) or 1.0
