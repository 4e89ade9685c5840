"""Step 4: what is to be made in batches, each with its day, its real volume and its sources.

The planner of batches (`stockroom/lots/`) chooses, over all levels at once, who shares a
batch and on which day. Here that becomes batches, from the top down: what netting promised
part by part is taken back and drawn again for the whole batch, at the strength expected on
the day it is made, since a stronger bottle gives less.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.lots.arrange import arrange
from stockroom.lots.model import Arrangement
from stockroom.planning.amounts import draw_for
from stockroom.planning.buying.on_way import OnWay
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.facts import Facts, Ingredient
from stockroom.planning.making.as_numbers import Numbers, as_numbers, window
from stockroom.planning.making.batch import Batch, Taken, taken_alone
from stockroom.planning.making.batches import Item, Run
from stockroom.planning.making.drawing import Drawing, share_of
from stockroom.planning.making.groups import Group, grouped
from stockroom.planning.making.sizing import Sizing
from stockroom.planning.timing import latest_start, ready_at
from stockroom.planning.wants import Settled, Want
from stockroom.planning.windows import earliest_start, held

# cm³: what is left of a share by rounding is not short
_SOME = 1e-6


@dataclass(slots=True)
class Made:
    """All batches in the order of their days, and what each need takes of bought lines.

    `numbers` and `arranged` are what the planner of batches was asked, and its answer.
    `outgrown`: lines whose batches, bigger than needed, ask for more than there is.
    """

    batches: list[Batch]
    taken: list[Taken]
    numbers: Numbers
    arranged: Arrangement
    outgrown: frozenset[str] = frozenset()


def make_up(
    facts: Facts, wants: list[Want], shelf: Shelf, exact: frozenset[str] = frozenset()
) -> Made:
    """Turn every want to be made into batches with days, volumes and sources.

    Lines in `exact` are made to the exact need, no more.
    """
    alone: frozenset[str] = frozenset()
    while True:
        numbers = as_numbers(facts, grouped(facts, wants, alone), shelf, exact)
        arranged = arrange(numbers.problem)
        crossed = _Building(facts, numbers, shelf, exact).crossed(arranged)
        # a want whose own dates its group could not keep to is made by itself
        if not crossed - alone:
            break
        alone |= crossed
    coming = OnWay(facts)
    coming.set_apart(promised for root in wants for want in root.tree() for promised in want.on_way)
    drawing = Drawing(facts, shelf, coming)
    for root in wants:
        if root.settled in (Settled.HELD, Settled.BUY) and root.line not in facts.methods:
            drawing.taken.append(taken_alone(root, root.need.on))
    batches = _Building(facts, numbers, shelf, exact, drawing).build(arranged)
    # numbered at the end, in the order of the days, as a person works through them
    batches.sort(key=lambda b: (b.start, b.line.key, b.needs[0].rank))
    for number, batch in enumerate(batches, 1):
        batch.id = f"M{number:02d}"
    return Made(batches, drawing.taken, numbers, arranged, frozenset(drawing.outgrown))


class _Building:
    """An arrangement as batches, products before their parts; drawn at once if `drawing` is there.

    What a batch finds in the bottles may make it smaller, and its parts with it: so each is
    drawn before the next is sized.
    """

    def __init__(
        self,
        facts: Facts,
        numbers: Numbers,
        shelf: Shelf,
        exact: frozenset[str],
        drawing: Drawing | None = None,
    ) -> None:
        self.facts, self.numbers, self.shelf = facts, numbers, shelf
        self.exact, self.drawing = exact, drawing

    def build(self, arranged: Arrangement) -> list[Batch]:
        """Every batch of it with its day and volume."""
        asked: dict[int, list[Want]] = {}
        into: dict[int, list[tuple[int, int]]] = {}
        for gift in arranged.gifts:
            if gift.demand >= 0:
                asked.setdefault(gift.batch, []).append(self.numbers.wants[gift.demand])
            else:
                into.setdefault(gift.batch, []).append((gift.into, gift.part))
        row = sorted(range(len(arranged.batches)), key=lambda n: _place(arranged, n))
        built: dict[int, Batch] = {}
        for number in row:
            group = self.numbers.groups[arranged.batches[number].sort]
            items = [_item_for_need(self.facts, want, self.shelf) for want in asked.get(number, [])]
            on = self.facts.as_at + timedelta(days=arranged.batches[number].day)
            for above, part in into.get(number, []):
                items.append(self._item_for_batch(group, built[above], part, on))
            built[number] = self._batch(group, items, on)
        return list(built.values())

    def crossed(self, arranged: Arrangement) -> frozenset[str]:
        """The needs whose dates a batch does not keep to, or that got none."""
        short = enumerate(arranged.short)
        refs = {self.numbers.wants[number].ref for number, missing in short if missing > _SOME}
        for batch in self.build(arranged):
            for item in batch.run.items:
                if not item.earliest <= batch.run.on <= item.latest:
                    refs.update(want.ref for want in item.wants)
        return frozenset(refs)

    def _batch(self, group: Group, items: list[Item], on: date) -> Batch:
        run = Run(tuple(sorted(items, key=lambda item: item.order)), on)
        calendar, method = self.facts.calendar, group.method
        start = latest_start(min(i.deadline for i in items), method, calendar, run.on)
        # on a day before the last, the whole of it is there to work in
        late = max(calendar.open_from, calendar.open_to - method.minutes)
        start = start if start and start[0] == run.on else (run.on, late)
        sizing = Sizing(self.facts, group.line, method, exact=group.line.key in self.exact)
        volume, forced, reasons = sizing.volume(run)
        ready = ready_at(start, method, calendar)
        batch = Batch(group.line, method, run, start, ready, volume, reasons=reasons, forced=forced)
        batch.vessels = sizing.vessels(volume, on)
        batch.group = group
        if self.drawing is not None:
            for item in run.items:
                self._fill(item, batch)
            self.drawing.settle(batch)
        return batch

    def _fill(self, item: Item, batch: Batch) -> None:
        """Tell what is made from this batch how much of it to take, and at what strength."""
        assert self.drawing is not None
        for want in item.wants:
            source = self.drawing.waiting.get(id(want))
            if source is not None:
                source.batch, source.amount = batch, item.volume
                source.strength = held(batch.line, batch.run.on, item.use_on)

    def _item_for_batch(self, group: Group, above: Batch, part: int, on: date) -> Item:
        assert above.group is not None
        ingredient, _ = above.group.parts[part]
        wants = list(_parts_of(above, ingredient))
        # what stands until it is diluted fades meanwhile: weaker means measure more
        strength = held(group.line, on, above.start[0])
        whole = draw_for(group.line, strength, above.line, above.volume, ingredient.per_dm3)
        volume = round(whole * share_of(above, wants))
        latest = latest_start(above.start, group.method, self.facts.calendar, self.facts.as_at)
        last = latest[0] if latest else self.facts.as_at - timedelta(days=1)
        first = last
        if latest is not None:
            first = earliest_start(self.facts, group.line, None, above.start[0], last)
            # never later than its last day by rule alone, but what it waits for may be
            first = max([first, *(want.ready_from for want in wants if want.ready_from)])
        return Item(wants, volume, above.start[0], above.start, first, last)


def _place(arranged: Arrangement, number: int) -> tuple[int, int]:
    batch = arranged.batches[number]
    return batch.sort, batch.day


def _parts_of(batch: Batch, ingredient: Ingredient) -> Iterator[Want]:
    for want in batch.wants:
        for part in want.parts:
            if part.ingredient == ingredient and part.settled is Settled.MAKE:
                yield part


def _item_for_need(facts: Facts, want: Want, shelf: Shelf) -> Item:
    assert want.latest and want.amount is not None
    first, last = window(facts, want, shelf)
    on = want.need.on
    fresh = want.need.fresh and last == on
    return Item([want], want.amount, on, want.deadline, first, last, fresh)
