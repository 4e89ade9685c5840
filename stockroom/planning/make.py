"""Step 4: each batch its day, its real volume and its sources.

Lines are taken in the same order as in netting, so that a batch's day is known
before what it is made from is dated. What netting promised part by part is
taken back and drawn again for the whole batch, at the strength expected on the
day it is made: a stronger bottle gives less.
"""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.planning.amounts import draw_for
from stockroom.planning.batch import Batch, Taken, taken_alone
from stockroom.planning.batches import Item, Run, cut
from stockroom.planning.drawing import Drawing, share_of
from stockroom.planning.facts import Facts, Form, Ingredient, Line, Method
from stockroom.planning.order_of_lines import settling_order
from stockroom.planning.shelf import Shelf
from stockroom.planning.sizing import Sizing
from stockroom.planning.timing import latest_start, ready_at
from stockroom.planning.wants import Settled, Want
from stockroom.planning.windows import earliest_start


@dataclass(slots=True)
class Made:
    """All batches in the order of their days, and what each need takes of bought lines.

    `outgrown`: lines whose batches, bigger than needed, ask for more than there is.
    """

    batches: list[Batch]
    taken: list[Taken]
    outgrown: frozenset[str] = frozenset()


def make_up(
    facts: Facts, wants: list[Want], shelf: Shelf, exact: frozenset[str] = frozenset()
) -> Made:
    """Turn every want to be made into batches with days, volumes and sources.

    Lines in `exact` are made to the exact need, no more.
    """
    return _Making(facts, wants, shelf, exact).run()


class _Making:
    def __init__(
        self, facts: Facts, wants: list[Want], shelf: Shelf, exact: frozenset[str]
    ) -> None:
        self.facts, self.exact = facts, exact
        self.drawing = Drawing(facts, shelf)
        self.batch_of: dict[int, Batch] = {}
        self.batches: list[Batch] = []
        self.to_make: dict[str, list[Want]] = {}
        for root in wants:
            self._sort_out(root)

    def _sort_out(self, root: Want) -> None:
        if root.settled in (Settled.SHORT, Settled.REFUSED):
            return
        for want in root.tree():
            if want.settled is Settled.MAKE:
                self.to_make.setdefault(want.line, []).append(want)
        if root.settled in (Settled.HELD, Settled.BUY) and root.line not in self.facts.methods:
            self.drawing.taken.append(taken_alone(root, root.need.on))

    def run(self) -> Made:
        for key in settling_order(self.facts):
            # two strengths of stock in one batch would give a strength nobody has worked out
            groups: dict[tuple[object, ...], list[Want]] = {}
            for want in self.to_make.get(key, []):
                groups.setdefault(self._signature(want), []).append(want)
            for signature in sorted(groups, key=str):
                self._make_line(self.facts.lines[key], groups[signature])
        # numbered at the end, in the order of the days, as a person works through them
        self.batches.sort(key=lambda b: (b.start, b.line.key, b.needs[0].rank))
        for number, batch in enumerate(self.batches, 1):
            batch.id = f"M{number:02d}"
        return Made(self.batches, self.drawing.taken, frozenset(self.drawing.outgrown))

    def _signature(self, want: Want) -> tuple[object, ...]:
        """What it is made from: only wants made from the same things share a batch.

        What goes into one batch is one thing, whichever bottles its parts were
        promised: it is told by the first of them.
        """
        if want.under is not None:
            batch = self.batch_of[id(want.under)]
            alike = (p for w in batch.wants for p in w.parts if p.ingredient == want.ingredient)
            want = next(p for p in alike if (p.line, p.settled) == (want.line, want.settled))
        parts = []
        for part in want.parts:
            solid = self.facts.lines[part.line].form is Form.SOLID
            bottles = () if solid else tuple(promise.bottle for promise in part.promises)
            parts.append((part.line, part.settled is Settled.MAKE, bottles))
        return tuple(parts)

    def _make_line(self, line: Line, wants: list[Want]) -> None:
        method = self.facts.methods[line.key]
        sizing = Sizing(self.facts, line, method, exact=line.key in self.exact)
        items = self._items(line, method, wants)
        for run in cut(items, most=sizing.most, cost_of=sizing.cost):
            self.drawing.settle(self._batch(line, method, run, sizing))

    # -- what a batch must serve ---------------------------------------------------------

    def _items(self, line: Line, method: Method, wants: list[Want]) -> list[Item]:
        items: list[Item] = []
        under: dict[tuple[int, Ingredient], tuple[Batch, list[Want]]] = {}
        for want in wants:
            if want.under is None:
                items.append(self._item_for_need(want))
            else:
                batch = self.batch_of[id(want.under)]
                assert want.ingredient is not None
                key = (id(batch), want.ingredient)
                under.setdefault(key, (batch, []))[1].append(want)
        for batch, together in under.values():
            items.append(self._item_for_batch(line, method, batch, together))
        return items

    def _item_for_need(self, want: Want) -> Item:
        assert want.latest and want.amount is not None
        first = max(want.earliest or want.latest[0], want.ready_from or want.latest[0])
        on, latest = want.need.on, want.latest[0]
        fresh = latest == on
        first = min(first, latest)
        return Item([want], want.amount, on, want.deadline, first, latest, fresh)

    def _item_for_batch(self, line: Line, method: Method, batch: Batch, wants: list[Want]) -> Item:
        ingredient = wants[0].ingredient
        assert ingredient is not None
        whole = draw_for(line, line.strength, batch.line, batch.volume, ingredient.per_dm3)
        volume = round(whole * share_of(batch, wants))
        latest = latest_start(batch.start, method, self.facts.calendar, self.facts.as_at)
        assert latest is not None, f"{line.key} cannot be ready for {batch.line.key}"
        first = earliest_start(self.facts, line, None, batch.start[0], latest[0])
        ready_from = max(want.ready_from or first for want in wants)
        first = min(max(first, ready_from), latest[0])
        return Item(wants, volume, batch.start[0], batch.start, first, latest[0])

    # -- making it -----------------------------------------------------------------------

    def _batch(self, line: Line, method: Method, run: Run, sizing: Sizing) -> Batch:
        deadline = min(item.deadline for item in run.items)
        calendar = self.facts.calendar
        start = latest_start(deadline, method, calendar, run.on)
        # the last start may fall on a later day than the one chosen: then its morning will do
        start = start if start and start[0] == run.on else (run.on, calendar.open_from)
        volume, forced, reasons = sizing.volume(run)
        ready = ready_at(start, method, calendar)
        batch = Batch(line, method, run, start, ready, volume, reasons=reasons, forced=forced)
        batch.vessels = sizing.vessels(volume)
        for want in batch.wants:
            self.batch_of[id(want)] = batch
            if id(want) in self.drawing.waiting:
                self.drawing.waiting[id(want)].batch = batch
        self.batches.append(batch)
        return batch
