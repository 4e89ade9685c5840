"""Makes brought forward to a day when what they take still stands good on the shelf.

The latest day is usually the best. But when a bottle that would have done goes past before
it, that day means making or buying the part anew: then the last day the bottle is good is
taken, if all makes together are the cheaper for it.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date, timedelta

from stockroom.keeping.rules import Purpose
from stockroom.lots.objective import PENCE_A_MINUTE
from stockroom.planning.amounts import solute_in, take_for
from stockroom.planning.choosing.fitness import judge_for_dilution
from stockroom.planning.choosing.make_or_take import Window, makes_of
from stockroom.planning.choosing.serve import Serving
from stockroom.planning.choosing.shelf import Judge
from stockroom.planning.choosing.strengths_held import solute_held
from stockroom.planning.facts import Bottle, Facts, Form, Ingredient, Line, Method
from stockroom.planning.making_times import Times
from stockroom.planning.timing import Moment, ready_at
from stockroom.planning.wants import Settled, Want
from stockroom.planning.windows import good_until

_UNPRICED = 1.0
"""Minutes that buying is worth avoiding where no pack has a price. Our choice."""


@dataclass(frozen=True, slots=True)
class Sooner:
    """The start of a make brought forward for the sake of some of its ingredients."""

    start: Moment
    ingredients: tuple[Ingredient, ...]
    saves: str

    def held(self, want: Want) -> list[str]:
        """The bottles it was brought forward for, where it really has them; else none."""
        parts = [part for part in want.parts if part.ingredient in self.ingredients]
        if want.settled is not Settled.MAKE or not parts:
            return []
        if any(part.settled is not Settled.HELD for part in parts):
            return []
        return list(dict.fromkeys(p.bottle for part in parts for p in part.promises))

    def words(self, want: Want) -> str:
        """Why it is made so soon: "made by 2027-03-03, while S01 is still good: …"."""
        bottles = self.held(want)
        be = "is" if len(bottles) == 1 else "are"
        return (
            f"made by {self.start[0]}, while {' and '.join(bottles)} {be} still good: {self.saves}"
        )


class WhileGood:
    """Looks for makes to bring forward. `_claimed` is what earlier ones would take of bottles."""

    def __init__(self, facts: Facts, serving: Serving) -> None:
        self.facts, self.serving, self.shelf = facts, serving, serving.shelf
        self._claimed: dict[str, int] = {}
        self._last: dict[tuple[str, Judge, date, date], date | None] = {}
        self._judges: dict[tuple[str, str, int | None], Judge] = {}
        self._suits: dict[tuple[str, Judge], bool] = {}

    def sooner(
        self, line: Line, method: Method, dated: list[tuple[Want, Times]]
    ) -> dict[int, Sooner]:
        """Which makes of a line to bring forward, by want, and to when; none if it does not pay."""
        found: dict[int, Sooner] = {}
        lacking: dict[int, float] = {}
        for want, times in dated:
            one, lacks = self._for_one(want, line, method, times)
            lacking[id(want)] = lacks
            if one:
                found[id(want)] = one
        if not found or self._pays(line, method, dated, found, lacking):
            return found
        return {}

    def _for_one(
        self, want: Want, line: Line, method: Method, times: Times
    ) -> tuple[Sooner | None, float]:
        """The day to bring a make forward to, and what is saved by it in minutes."""
        assert times.latest and times.earliest
        volume, early, late = self.serving.amount_from(want, line), times.earliest, times.latest[0]
        waits, days = [], [late]
        for ingredient in method.ingredients:
            number, day = self._last_served(want, line, ingredient, volume, early, late)
            if number:
                days.append(day)
                waits += [ingredient] if day < late else []
        if not waits:
            return None, 0.0
        day = self.facts.calendar.on_or_before(min(days))
        # where no rule limits its life nobody has said that it keeps for weeks
        if good_until(line, day) is None:
            return None, 0.0
        start = self.start(day, times.deadline, method)
        if day < early or start is None:
            return None, 0.0
        keys = list(dict.fromkeys(ingredient.lines[0] for ingredient in waits))
        verb = "making" if all(key in self.facts.methods for key in keys) else "buying"
        saves = f"saves {verb} {' and '.join(keys)}"
        return Sooner(start, tuple(waits), saves), sum(self._worth(key) for key in keys)

    def start(self, day: date, deadline: Moment, method: Method) -> Moment | None:
        """The latest start on a day that is ready in time; None when the day will not do."""
        calendar = self.facts.calendar
        late = max(calendar.open_from, calendar.open_to - method.minutes)
        for minute in (late, calendar.open_from):
            if ready_at((day, minute), method, calendar) <= deadline:
                return day, minute
        return None

    def _worth(self, key: str) -> float:
        method, line = self.facts.methods.get(key), self.facts.lines[key]
        if method:
            return float(method.minutes + method.finish_minutes)
        cheapest = min((pack.pence for pack in line.packs), default=None)
        return _UNPRICED if cheapest is None else cheapest / PENCE_A_MINUTE

    # -- bottles of an ingredient --------------------------------------------------------

    def _last_served(
        self, want: Want, line: Line, ingredient: Ingredient, volume: int, early: date, late: date
    ) -> tuple[str, date]:
        """The bottle with enough that is good longest in the days of a make, and until when."""
        best = "", early
        amount = 0
        for key in ingredient.lines:
            source = self.facts.lines[key]
            if source.never_kept or source.form is Form.SUNDRY:
                continue
            judge = self._judge(source, line, ingredient)
            for bottle in self.shelf.of_line(key):
                day = self.bottle_until(bottle, judge, early, late)
                if day is None or (best[0] and day <= best[1]):
                    continue
                wanted = self._wanted(source, line, ingredient, volume, bottle.number, day)
                if wanted is not None and self._enough(want, bottle, wanted):
                    best, amount = (bottle.number, day), wanted
        if best[0]:
            self._claimed[best[0]] = self._claimed.get(best[0], 0) + amount
        return best

    def _enough(self, want: Want, bottle: Bottle, wanted: int) -> bool:
        # what a recipe bars is looked for in the bottle's history when it is served, not here
        if want.need.recipe.bars and bottle.lineage:
            return False
        wanted += self._claimed.get(bottle.number, 0)
        if wanted > self.shelf.left[bottle.number]:
            return False
        return not self.shelf.too_close(bottle.number, wanted, want.need.booking.number)

    def _wanted(
        self, source: Line, line: Line, ingredient: Ingredient, volume: int, number: str, on: date
    ) -> int | None:
        if ingredient.per_dm3 is not None:
            return -(-volume * ingredient.per_dm3 // 1_000_000)
        strength = solute_held(self.shelf, source, number, on)
        if source.form is not Form.SOLID and not (strength or source.strength):
            return None
        return take_for(source, strength, solute_in(line, volume))

    def _judge(self, source: Line, line: Line, ingredient: Ingredient) -> Judge:
        key = (source.key, line.key, ingredient.per_dm3)
        if key not in self._judges:
            self._judges[key] = judge_for_dilution(source, line, ingredient.per_dm3)
        return self._judges[key]

    def bottle_until(self, bottle: Bottle, judge: Judge, early: date, late: date) -> date | None:
        """The last day from `early` to `late` that a bottle would do; None if there is none."""
        key = (bottle.number, judge, early, late)
        if key not in self._last:
            self._last[key] = self._good_until_afresh(bottle, judge, early, late)
        return self._last[key]

    def _good_until_afresh(
        self, bottle: Bottle, judge: Judge, early: date, late: date
    ) -> date | None:
        opened = self.shelf.opening(bottle.number)

        def fit(day: date) -> bool:
            first = day if opened is None else min(opened, day)
            return not self.shelf.unfit_opened(bottle.number, day, Purpose.ANY, judge, first)

        if bottle.left <= 0 or early < self.facts.as_at:
            return None
        ages = self.shelf.ages_from_opening(bottle.number)
        if not ages and not self.shelf.changes_daily(bottle.number):
            return self._good_until_one_day(bottle, judge, early, late)
        if fit(late):
            return late
        if not fit(early):
            return None
        # the older the less it will do, so the answer splits the days in two
        low, high = 0, (late - early).days
        while high - low > 1:
            middle = (low + high) // 2
            if fit(early + timedelta(days=middle)):
                low = middle
            else:
                high = middle
        return early + timedelta(days=low)

    def _good_until_one_day(
        self, bottle: Bottle, judge: Judge, early: date, late: date
    ) -> date | None:
        """The same for a bottle that is as it is until its last good day: no day is tried."""
        number, shelf = bottle.number, self.shelf
        stands, until = shelf.ready_on(number), shelf.usable_until(number, Purpose.ANY, None)
        last = min(late, until)
        if last < early or not shelf.may_be_used(number, early):
            return None
        # where the last day is too late for it the first must do, or the days do not split in two
        if stands and stands > (late if last == late else early):
            return None
        if (number, judge) not in self._suits:
            told = shelf.verdict(number, self.facts.as_at)
            self._suits[number, judge] = not judge(bottle, told)
        return last if self._suits[number, judge] else None

    # -- whether it pays -----------------------------------------------------------------

    def _pays(
        self,
        line: Line,
        method: Method,
        dated: list[tuple[Want, Times]],
        found: dict[int, Sooner],
        saved: dict[int, float],
    ) -> bool:
        as_late: list[Window] = []
        for want, times in dated:
            assert times.latest and times.earliest
            as_late.append(Window(want, 0, times.earliest, times.latest[0]))
        sooner = [
            replace(window, last=found[id(window.want)].start[0])
            for window in as_late
            if id(window.want) in found
        ]
        # what is made from a bottle shares no batch with what is made from something new
        rest = [window for window in as_late if id(window.want) not in found]
        runs = makes_of(as_late)
        # saved only where everybody in the late make is brought forward
        parts = sum(
            max(saved[id(window.want)] for window in run)
            for run in runs
            if all(id(window.want) in found for window in run)
        )
        more = len(makes_of(sooner)) + len(makes_of(rest)) - len(runs)
        return (method.minutes + method.finish_minutes) * more < parts
