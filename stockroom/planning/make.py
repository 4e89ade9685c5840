"""Step 4: each batch its real volume, its sources, and what that leaves.

Lines are taken in the same order as in netting, so that a batch's day is known
before what it is made from is dated. What netting promised part by part is
taken back and drawn again for the whole batch, at the strength expected on the
day it is made: a stronger bottle gives less.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date

from stockroom.chemistry.weighing import least_weighable
from stockroom.keeping.rules import Purpose, RuleKind
from stockroom.measure.amounts import Kind
from stockroom.measure.formats import format_number, format_strength
from stockroom.planning.amounts import draw_for, say
from stockroom.planning.batches import Item, Run, cut
from stockroom.planning.explode import Need
from stockroom.planning.facts import Closeness, Facts, Form, Ingredient, Line, Method
from stockroom.planning.fitness import found_valid_from, judge_for_dilution
from stockroom.planning.order_of_lines import settling_order
from stockroom.planning.shelf import Promise, Shelf, solute_held
from stockroom.planning.timing import Moment, latest_start, ready_at
from stockroom.planning.wants import Settled, Want
from stockroom.planning.windows import earliest_start, good_until


@dataclass(slots=True)
class Source:
    """So much of a line for a batch: from a bottle, or (`bottle` "") made or bought."""

    line: Line
    amount: int
    bottle: str = ""
    strength: float | None = None
    batch: Batch | None = None


@dataclass(slots=True)
class Batch:
    """One batch as it is worked out; `decide.py` freezes it into a Make."""

    line: Line
    method: Method
    run: Run
    start: Moment
    ready: Moment
    volume: int
    sources: list[Source] = field(default_factory=list)
    reasons: list[str] = field(default_factory=list)
    forced: int = 0
    id: str = ""

    @property
    def wants(self) -> list[Want]:
        """Every want it serves, in order."""
        return sorted(
            (want for item in self.run.items for want in item.wants), key=lambda w: w.need.rank
        )

    @property
    def needs(self) -> list[Need]:
        """Every need it serves in the end, each once, in order."""
        return list({want.ref: want.need for want in self.wants}.values())

    @property
    def heel(self) -> int:
        """What is left over when all is served, µL."""
        return max(0, self.volume - self.run.needed)

    @property
    def fresh(self) -> bool:
        """True when it is made on the morning of its booking."""
        return any(item.fresh for item in self.run.items)


@dataclass(frozen=True, slots=True)
class Taken:
    """So much of a bought line used for a need: what running sums and shares are made of."""

    line: str
    need: Need
    amount: int
    start: date


@dataclass(slots=True)
class Made:
    """All batches in the order of their days, and what they take of bought lines."""

    batches: list[Batch]
    taken: list[Taken]
    unmet: dict[str, int]


def make_up(facts: Facts, wants: list[Want], shelf: Shelf) -> Made:
    """Turn every want to be made into batches with days, volumes and sources."""
    return _Making(facts, wants, shelf).run()


class _Making:
    def __init__(self, facts: Facts, wants: list[Want], shelf: Shelf) -> None:
        self.facts, self.shelf = facts, shelf
        self.roots = wants
        self.batch_of: dict[int, Batch] = {}
        self.waiting: dict[int, Source] = {}
        self.batches: list[Batch] = []
        self.taken: list[Taken] = []
        self.unmet: dict[str, int] = {}
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
            amount = root.to_buy + sum(promise.amount for promise in root.promises)
            self.taken.append(Taken(root.line, root.need, amount, root.need.on))

    def run(self) -> Made:
        for key in settling_order(self.facts):
            groups: dict[tuple[object, ...], list[Want]] = {}
            for want in self.to_make.get(key, []):
                groups.setdefault(self._signature(want), []).append(want)
            for signature in sorted(groups, key=str):
                self._make_line(self.facts.lines[key], groups[signature])
        self.batches.sort(key=lambda b: (b.start, b.line.key, b.needs[0].rank))
        for number, batch in enumerate(self.batches, 1):
            batch.id = f"M{number:02d}"
        return Made(self.batches, self.taken, self.unmet)

    def _signature(self, want: Want) -> tuple[object, ...]:
        """What it is made from: only wants made from the same things share a batch.

        What goes into one batch is one thing, whichever bottles its parts were
        promised: it is told by the first of them.
        """
        if want.under is not None:
            batch = self.batch_of[id(want.under)]
            first = next(part for w in batch.wants for part in w.parts if part.line == want.line)
            want = first if first.settled is Settled.MAKE else want
        parts = []
        for part in want.parts:
            solid = self.facts.lines[part.line].form is Form.SOLID
            bottles = () if solid else tuple(promise.bottle for promise in part.promises)
            parts.append((part.line, part.settled is Settled.MAKE, bottles))
        return tuple(parts)

    def _make_line(self, line: Line, wants: list[Want]) -> None:
        method = self.facts.methods[line.key]
        items = self._items(line, method, wants)
        sizes = (line.largest_batch, self.facts.house.largest_vessel)
        most = min((size for size in sizes if size), default=None)
        for run in cut(items, most=most, cost_of=lambda run: self._cost(line, method, run, most)):
            self._settle(self._batch(line, method, run))

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
        volume = draw_for(line, line.strength, batch.line, batch.volume, ingredient.per_dm3)
        latest = latest_start(batch.start, method, self.facts.calendar, self.facts.as_at)
        assert latest is not None, f"{line.key} cannot be ready for {batch.line.key}"
        first = earliest_start(self.facts, line, None, batch.start[0], latest[0])
        ready_from = max(want.ready_from or first for want in wants)
        first = min(max(first, ready_from), latest[0])
        return Item(wants, volume, batch.start[0], batch.start, first, latest[0])

    # -- what a batch costs ----------------------------------------------------------------

    def _cost(self, line: Line, method: Method, run: Run, most: int | None) -> tuple[int, int]:
        volume, _, _ = self._volume(line, method, run)
        vessels = -(-volume // most) if most else 1
        minutes = (method.minutes + method.finish_minutes) * vessels
        minutes += method.finish_minutes * len(retitrations(self.facts, line, method, run))
        kept = keeps(self.facts, line, volume - run.needed, run.on)
        return minutes, 0 if kept else volume - run.needed

    def _volume(self, line: Line, method: Method, run: Run) -> tuple[int, int, list[str]]:
        """Real volume, the part of it a rule forced on us, and why (all µL)."""
        step = max(1, self.facts.house.batch_step)
        exact = -(-run.needed // step) * step
        volume, reasons = exact, []
        if volume < method.smallest_batch:
            volume = method.smallest_batch
            reasons.append(f"never less than {say(volume, Kind.VOLUME)} is made")
        weighable, why = self._weighable(line, method, run, volume)
        volume = max(volume, -(-weighable // step) * step)
        reasons += [why] if why else []
        return volume, volume - exact, reasons

    def _weighable(self, line: Line, method: Method, run: Run, volume: int) -> tuple[int, str]:
        """The least volume whose solids can be weighed closely enough on the day, and why."""
        steps = [b for b in self.facts.balances if b.here(run.on)]
        balance = min(steps, key=lambda b: (b.step, b.name), default=None)
        tolerance = _closest(run)
        if balance is None or tolerance is None:
            return volume, "No balance that day" if self.facts.balances else ""
        least = least_weighable(balance.step / 1e6, tolerance)
        for source in self._solids(line, method, run):
            grams = draw_for(source[0], None, line, volume, source[1]) / 1e6
            if 0 < grams < least:
                scaled = round(volume * least / grams)
                return scaled, (
                    f"{format_number(grams, 3)} g is too little to weigh to "
                    f"{100 * tolerance:g} % on {balance.name} "
                    f"({format_number(balance.step / 1e6)} g): {format_number(least, 3)} g in "
                    f"{say(scaled, Kind.VOLUME)} instead"
                )
        return volume, ""

    def _solids(self, line: Line, method: Method, run: Run) -> list[tuple[Line, int | None]]:
        parts = run.items[0].wants[0].parts
        found = [(self.facts.lines[part.line], part.ingredient) for part in parts]
        return [(x, i.per_dm3) for x, i in found if i is not None and x.form is Form.SOLID]

    # -- making it -----------------------------------------------------------------------

    def _batch(self, line: Line, method: Method, run: Run) -> Batch:
        deadline = min(item.deadline for item in run.items)
        calendar = self.facts.calendar
        start = latest_start(deadline, method, calendar, run.on)
        start = start if start and start[0] == run.on else (run.on, calendar.open_from)
        volume, forced, reasons = self._volume(line, method, run)
        ready = ready_at(start, method, calendar)
        batch = Batch(line, method, run, start, ready, volume, reasons=reasons, forced=forced)
        for want in batch.wants:
            self.batch_of[id(want)] = batch
            if id(want) in self.waiting:
                self.waiting[id(want)].batch = batch
        self.batches.append(batch)
        return batch

    def _settle(self, batch: Batch) -> None:
        by_ingredient: dict[Ingredient, list[Want]] = {}
        for want in batch.wants:
            for part in want.parts:
                assert part.ingredient is not None
                by_ingredient.setdefault(part.ingredient, []).append(part)
        for ingredient, parts in by_ingredient.items():
            self._no_more_than_held(batch, ingredient, parts)
        for ingredient, parts in by_ingredient.items():
            self._draw(batch, ingredient, parts)

    def _no_more_than_held(self, batch: Batch, ingredient: Ingredient, parts: list[Want]) -> None:
        """Rounding a batch up stops at what the bottles of a solution promised to it hold."""
        line = self.facts.lines[parts[0].line]
        promises = [promise for part in parts for promise in part.promises]
        if line.form is Form.SOLID or not promises:
            return
        held = sum(self.shelf.left[number] for number in {p.bottle for p in promises})
        held += sum(promise.amount for promise in promises)
        strength = solute_held(self.shelf, line, promises[0].bottle, batch.start[0])
        wanted = draw_for(line, strength, batch.line, batch.volume, ingredient.per_dm3)
        if wanted > held:
            batch.volume, batch.forced = batch.run.needed, 0

    def _draw(self, batch: Batch, ingredient: Ingredient, parts: list[Want]) -> None:
        line = self.facts.lines[parts[0].line]
        if parts[0].settled is Settled.MAKE:
            amount = draw_for(line, line.strength, batch.line, batch.volume, ingredient.per_dm3)
            source = Source(line, amount, strength=line.strength)
            batch.sources.append(source)
            self.waiting.update({id(part): source for part in parts})
            return
        numbers = [promise.bottle for part in parts for promise in part.promises]
        for part in parts:
            for promise in part.promises:
                self.shelf.release(promise)
        sources = self._from_bottles(batch, ingredient, line, list(dict.fromkeys(numbers)))
        batch.sources += sources
        if line.key not in self.facts.methods:
            self._note_taken(batch, line, parts, sum(source.amount for source in sources))

    def _from_bottles(
        self, batch: Batch, ingredient: Ingredient, line: Line, numbers: list[str]
    ) -> list[Source]:
        """Draw the whole batch's share again: the promised bottles first, then others alike."""
        day, judge = batch.start[0], judge_for_dilution(line, batch.line, ingredient.per_dm3)
        if line.form is Form.SOLID:
            others = self.shelf.in_order(self.shelf.of_line(line.key), day, Purpose.ANY)
            numbers += [b.number for b in others if b.number not in numbers]
        share_left, sources = 1.0, []
        for number in numbers:
            if share_left <= 1e-12 or self.shelf.unfit(number, day, Purpose.ANY, judge):
                continue
            held = solute_held(self.shelf, line, number, day)
            whole = draw_for(line, held, batch.line, batch.volume, ingredient.per_dm3)
            amount = min(round(whole * share_left), self.shelf.left[number])
            if not amount:
                continue
            self.shelf.promise(Promise(number, amount, day, batch.needs[0].ref, Purpose.ANY, judge))
            sources.append(Source(line, amount, number, held))
            share_left -= amount / whole
        whole = draw_for(line, line.strength, batch.line, batch.volume, ingredient.per_dm3)
        missing = round(whole * share_left) if share_left > 1e-9 else 0
        if missing > 0:
            sources.append(Source(line, missing, strength=line.strength))
            self.unmet[line.key] = self.unmet.get(line.key, 0) + missing
        return sources

    def _note_taken(self, batch: Batch, line: Line, parts: list[Want], drawn: int) -> None:
        """Share what was drawn among the needs: each its exact part, the forced rest the first."""
        shares = [self._exact(part, line) for part in parts]
        rounding = 1 - batch.forced / batch.volume if batch.volume else 1.0
        extra = drawn - round(drawn * rounding)
        for number, (part, share) in enumerate(zip(parts, shares, strict=True)):
            amount = share + (extra if number == 0 else 0)
            self.taken.append(Taken(line.key, part.need, amount, batch.start[0]))

    def _exact(self, part: Want, line: Line) -> int:
        promised = sum(promise.amount for promise in part.promises)
        return promised + part.to_buy


def _closest(run: Run) -> float | None:
    """The tightest tolerance among what the run serves; "present" is weighed as rough."""
    wants = [want for item in run.items for want in item.wants]
    return min((want.tolerance or 0.20 for want in wants), default=None)


def keeps(facts: Facts, line: Line, heel: int, made: date) -> bool:
    """True when a heel of this size becomes stock: above the floor, and of a line that keeps."""
    if heel <= facts.house.heel_floor or line.never_kept:
        return False
    until = good_until(line, made)
    return until is None or until > made


def retitrations(facts: Facts, line: Line, method: Method, run: Run) -> list[Item]:
    """The items for which the batch must be titrated again, as late as each allows."""
    if not method.titrated:
        return []
    found = ready_at((run.on, facts.calendar.open_from), method, facts.calendar)[0]
    again = []
    for item in sorted(run.items, key=lambda item: item.use_on):
        needs = [want.need for want in item.wants if want.under is None]
        exact = [n for n in needs if n.requirement.closeness is Closeness.EXACT]
        if exact and found_valid_from(exact[0].requirement, line, item.use_on) > found:
            again.append(item)
            found = facts.calendar.before(item.use_on, 1)
    return again


def recheck_interval(line: Line) -> bool:
    """True when the line's strength has to be found again from time to time."""
    return any(rule.kind is RuleKind.RECHECK for rule in line.rules)


def strength_words(source: Source) -> str:
    """A source's strength on the day in words; "" for a solid."""
    if source.strength is None or source.line.form is Form.SOLID:
        return ""
    return format_strength(source.strength, source.line.unit)
