"""What one class wants at what time: its handling, set out, begun, cleared away, destroyed."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field, replace

from stockroom.planning.decisions import Answer, Outcome, Plan
from stockroom.planning.facts import Booking, Facts, Recipe
from stockroom.planning.making.make_card import goes_of
from stockroom.planning.never_kept import standing_of
from stockroom.planning.people import clock
from stockroom.planning.timing import DAY_MINUTES
from stockroom.reports.paper.day_times import TOO_LATE, Times, minutes_to_set_out
from stockroom.reports.paper.week_parts import made_when, tied
from stockroom.reports.words import amount, by_bottle, named, raised
from stockroom.safety.cautions import Caution, Step, cautions_about

BEFORE_IT, HERE, WORK, SET_OUT_STEP, MIX, BEGIN, END, DESTROY = range(8)
"""The order of what is done at one minute."""

DESTROY_FIRST = "first destroy what is never kept"
"""What stands at the end of a class before anything is cleared away."""

DAY_BEFORE = "day before"

_BEFORE = re.compile(r"(\d+) ?(min|h)\b[^.;]*?\bbefore\b")
_LAST_DAY = re.compile(r"overnight|(?:the )?day before|evening before", re.IGNORECASE)
_SENTENCE = re.compile(r"(?<=[.!])\s+(?=[A-Z])")


@dataclass(frozen=True, slots=True)
class Item:
    """One thing to set out: what, from which bottle or make (`origin`), and where that stands.

    `bottles` are those of them that have a number of their own already.
    """

    what: str
    origin: str = ""
    bottles: str = ""
    place: str = ""
    missing: bool = False


@dataclass(frozen=True, slots=True)
class Row:
    """One line of the list. `minute` orders it, below 0 for the day before.

    `must` is what has to be ticked by whoever did it; `plain` wants no tick: a class begins.
    `ref` is the make's number in this plan. `step` is its place among those of one minute: a
    class is set out before it begins.
    """

    key: str
    minute: int
    step: int
    at: str
    what: str
    ref: str = ""
    where: str = ""
    booking: str = ""
    must: bool = False
    plain: bool = False
    items: tuple[Item, ...] = ()
    cautions: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Lesson:
    """One booking with its needs, and the lines of the list it takes."""

    known: Facts
    plan: Plan
    booking: Booking
    needs: tuple[Answer, ...]
    times: Times
    recipe: Recipe = field(init=False)

    def __post_init__(self) -> None:
        recipe = self.known.recipes[self.booking.recipe, self.booking.version]
        object.__setattr__(self, "recipe", recipe)

    def rows(self) -> Iterator[Row]:
        """Handling, somebody there, set out, begin, end, and what must be destroyed."""
        timed, before, rest = handling_of(self.recipe.handling)
        for text in before:
            yield self._row("day before", -DAY_MINUTES, BEFORE_IT, text, at=DAY_BEFORE)
        for minutes, text in timed:
            yield self._row(f"handling {minutes}", self.booking.minute - minutes, BEFORE_IT, text)
        yield self._set_out(rest)
        yield from self._never_kept_begin()
        yield self._row("begin", self.booking.minute, BEGIN, f"START {self._name()}", plain=True)
        yield self._end()
        yield from self._never_kept_end()

    def _row(
        self,
        kind: str,
        minute: int,
        step: int,
        what: str,
        *,
        at: str = "",
        plain: bool = False,
        items: tuple[Item, ...] = (),
        cautions: tuple[str, ...] = (),
    ) -> Row:
        number = self.booking.number
        return Row(
            key=f"{number} {kind}",
            minute=minute,
            step=step,
            at=at or clock(minute),
            what=raised(what),
            where=self.booking.room,
            booking=number,
            plain=plain,
            items=items,
            cautions=tuple(raised(each) for each in cautions),
        )

    def _name(self) -> str:
        return f"{self.booking.number} {self.recipe.title}"

    def _set_out(self, notes: tuple[str, ...]) -> Row:
        items = tuple(self._item(need) for need in self.needs)
        told = (*notes, *self._cautions(Step.USE))
        takes = tied(f"{minutes_to_set_out(self.known, self.booking)} min")
        number = self.booking.number
        late = f"; {TOO_LATE}" if number in self.times.too_late else ""
        what = f"set out for {self._name()}, {takes}{late}"
        return self._row(
            "set out", self.times.set_out[number], SET_OUT_STEP, what, items=items, cautions=told
        )

    def _item(self, need: Answer) -> Item:
        what = f"{named(need.item, need.strength)} {amount(need.amount, need.kind)}"
        if need.outcome in (Outcome.SHORT, Outcome.REFUSED):
            return Item(what, "NOT THERE", missing=True)
        bottles = {bottle.number: bottle for bottle in self.known.bottles}
        drawn = [draw.bottle for draw in by_bottle(need.draws) if draw.bottle]
        made = [self._made(need)]
        places = [bottles[number].place for number in drawn if number in bottles]
        origin = " + ".join(filter(None, (*drawn, *made)))
        # an answer without a source is something a shop sells
        bought = need.outcome is Outcome.BUY and not origin
        where = ", ".join(dict.fromkeys(filter(None, places)))
        return Item(what, "bought" if bought else origin, ", ".join(drawn), where)

    def _made(self, need: Answer) -> str:
        """What is made or bought for it: by its day, since the plan's numbers move.

        Its number stands once, under what is still to do.
        """
        make = next((each for each in self.plan.makes if each.id == need.make), None)
        comes = f"after {need.order}" if need.order else ""
        if make is None:
            return f"once {need.order} has come" if need.order else ""
        when = made_when(make, self.plan.as_at)
        when = "to be made today" if make.on == self.booking.on else when
        return f"{when} {comes}".strip()

    def _never_kept_begin(self) -> Iterator[Row]:
        for each in self.plan.watch:
            if each.booking == self.booking.number:
                what = f"NOT BEFORE {clock(each.not_before)}: mix for {self._name()}, never kept"
                how = _joined(*each.dangers, *mixed_how(each.how))
                yield self._row("mix", each.not_before, MIX, what, cautions=how)

    def _never_kept_end(self) -> Iterator[Row]:
        for each in self.plan.watch:
            if each.booking == self.booking.number:
                by = f", ticked by {each.ticked_by}" if each.ticked_by else ""
                whose = f"what is left of {self._name()}"
                what = f"DESTROYED BY {clock(each.destroy_by)}: {whose}, every vessel rinsed{by}"
                # a container takes nothing of it before: this is of what then remains
                # which a recipe that names its waste knows best, and the page says it below
                into = () if self.recipe.waste else self._cautions(Step.WASTE, collects=True)
                after = (f"Once destroyed: {' '.join(into)}",) if into else ()
                how = _joined(*each.dangers, *destroyed_how(each.how), standing_of(each)) + after
                row = self._row("destroy", each.destroy_by, DESTROY, what, cautions=how)
                yield replace(row, must=True)

    def _end(self) -> Row:
        minute = self.booking.minute + self.booking.lasts_minutes
        if any(each.booking == self.booking.number for each in self.plan.watch):
            what = f"END {self._name()}: {DESTROY_FIRST}, then clear away"
            never = self._cautions(Step.WASTE, collects=False)
            return self._row("end", minute, END, what, cautions=never)
        what = f"END {self._name()}: clear away"
        return self._row("end", minute, END, what, cautions=self._cautions(Step.WASTE))

    def _cautions(self, step: Step, *, collects: bool | None = None) -> tuple[str, ...]:
        """What the list of cautions says of these things at a step, unless the recipe has.

        `collects` asks for those alone that name a container, or for the others.
        """
        said = (self.recipe.handling, self.recipe.never_kept, self.recipe.waste)
        items: dict[Caution, list[str]] = {}
        for need in self.needs:
            thing = goes_of(self.known.lines[need.line])
            for caution in cautions_about([thing], said=said, steps=(step,)):
                if collects not in (None, caution.collects):
                    continue
                items.setdefault(caution, []).append(need.item)
        return tuple(
            f"{'; '.join(dict.fromkeys(names))}: {caution.text}" for caution, names in items.items()
        )


def _joined(*words: str) -> tuple[str, ...]:
    """What is said of one thing, as one caution: a side of paper has no room for several."""
    return (" ".join(words),) if words else ()


_ENDING = re.compile(r"destroy|rinse|wash", re.IGNORECASE)


def mixed_how(how: str) -> tuple[str, ...]:
    """What a recipe says of mixing what is never kept; all of it, where it tells nothing apart."""
    return _clauses(how, ending=False)


def destroyed_how(how: str) -> tuple[str, ...]:
    """What it says of destroying and rinsing; all of it, where it tells nothing apart."""
    return _clauses(how, ending=True)


def _clauses(how: str, *, ending: bool) -> tuple[str, ...]:
    parts = [part.strip() for part in re.split(r";|(?<=\.)\s", how) if part.strip()]
    mine = [part for part in parts if bool(_ENDING.search(part)) is ending] or parts
    text = "; ".join(part.rstrip(".") for part in mine)
    return (f"{text[0].upper()}{text[1:]}.",) if text else ()


def handling_of(
    text: str,
) -> tuple[tuple[tuple[int, str], ...], tuple[str, ...], tuple[str, ...]]:
    """A recipe's handling, sentence by sentence: so many minutes before, the day before, the rest.

    >>> handling_of("Bath at 35 °C from 30 min before. Soak overnight. Gloves.")
    (((30, 'Bath at 35 °C from 30 min before.'),), ('Soak overnight.',), ('Gloves.',))
    """
    timed: list[tuple[int, str]] = []
    before: list[str] = []
    rest: list[str] = []
    for sentence in filter(None, _SENTENCE.split(text.strip())):
        found = _BEFORE.search(sentence)
        if _LAST_DAY.search(sentence):
            before.append(sentence)
        elif found:
            number, unit = found[1], found[2]
            timed.append((int(number) * (60 if unit == "h" else 1), sentence))
        else:
            rest.append(sentence)
    return tuple(timed), tuple(before), (" ".join(rest),) if rest else ()
