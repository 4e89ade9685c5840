"""How big a batch really is, in how many vessels, and what that costs."""

from __future__ import annotations

import math

from stockroom.chemistry.weighing import least_weighable
from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.measure.formats import format_number
from stockroom.planning.amounts import draw_for, say
from stockroom.planning.batch import keeps
from stockroom.planning.batches import Item, Run
from stockroom.planning.facts import Balance, Closeness, Facts, Form, Line, Method
from stockroom.planning.fitness import found_valid_from
from stockroom.planning.timing import ready_at

_MICROGRAMS = PER_UNIT[Kind.MASS]


class Sizing:
    """The sizes of batches of one line by its method. Volumes in µL.

    `exact` makes no more than is needed, whatever the house's steps and least batches.
    """

    def __init__(self, facts: Facts, line: Line, method: Method, *, exact: bool = False) -> None:
        self.facts, self.line, self.method, self.exact = facts, line, method, exact
        sizes = (line.largest_batch, facts.house.largest_vessel)
        self.most = min((size for size in sizes if size), default=None)

    def vessels(self, volume: int) -> int:
        """How many vessels a volume takes; 1 where no largest is known."""
        return -(-volume // self.most) if self.most else 1

    def cost(self, run: Run) -> tuple[int, int]:
        """Hands-on minutes, titrating again included, and the µL that would be thrown away."""
        volume, _, _ = self.volume(run)
        minutes = (self.method.minutes + self.method.finish_minutes) * self.vessels(volume)
        minutes += self.method.finish_minutes * len(self.retitrations(run))
        # a heel that becomes stock is not thrown away, so it costs nothing here
        kept = keeps(self.facts, self.line, volume - run.needed, run.on)
        return minutes, 0 if kept else volume - run.needed

    def volume(self, run: Run) -> tuple[int, int, list[str]]:
        """Real volume, the part of it a rule forced on us, and why."""
        if self.exact:
            return run.needed, 0, ["made to the exact need: there is no more to make it from"]
        step = max(1, self.facts.house.batch_step)
        exact = -(-run.needed // step) * step
        volume, reasons = exact, []
        if volume < self.method.smallest_batch:
            volume = self.method.smallest_batch
            reasons.append(f"never less than {say(volume, Kind.VOLUME)} is made")
        weighable, why = self._weighable(run, volume)
        # more of it and not a finer figure: the balance is what it is
        volume = max(volume, -(-weighable // step) * step)
        reasons += [why] if why else []
        if self.vessels(volume) > 1 and self.most:
            largest = say(self.most, Kind.VOLUME)
            reasons.append(f"in {self.vessels(volume)} vessels of {largest} at most: mix them")
        return volume, volume - exact, reasons

    def _weighable(self, run: Run, volume: int) -> tuple[int, str]:
        """The least volume whose solids can all be weighed closely enough, and why."""
        grams = [
            draw_for(solid, None, self.line, volume, per_dm3) / _MICROGRAMS
            for solid, per_dm3 in self._solids(run)
        ]
        here = [balance for balance in self.facts.balances if balance.here(run.on)]
        # the finest there that day; whether it is free that hour nobody enters
        balance = min(here, key=lambda b: (b.step, b.name), default=None)
        if not grams or balance is None:
            return volume, "No balance that day" if grams and self.facts.balances else ""
        tolerance, least_of_all = _closest(run), min(grams)
        least = least_weighable(balance.step / _MICROGRAMS, tolerance)
        if not 0 < least_of_all < least:
            return volume, ""
        scaled = round(volume * least / least_of_all)
        # several vessels would each be weighed for, and each too little again
        if self.most and scaled > self.most:
            return volume, _through_an_intermediate(least_of_all, least, volume)
        return scaled, _too_little(least_of_all, least, tolerance, balance, scaled)

    def _solids(self, run: Run) -> list[tuple[Line, int | None]]:
        parts = run.items[0].wants[0].parts
        found = [(self.facts.lines[part.line], part.ingredient) for part in parts]
        return [(x, i.per_dm3) for x, i in found if i is not None and x.form is Form.SOLID]

    def retitrations(self, run: Run) -> list[Item]:
        """The items for which the batch must be titrated again, as late as each allows."""
        if not self.method.titrated:
            return []
        calendar = self.facts.calendar
        found = ready_at((run.on, calendar.open_from), self.method, calendar)[0]
        again = []
        for item in sorted(run.items, key=lambda item: item.use_on):
            needs = [want.need for want in item.wants if want.under is None]
            exact = [n for n in needs if n.requirement.closeness is Closeness.EXACT]
            if exact and found_valid_from(exact[0].requirement, self.line, item.use_on) > found:
                again.append(item)
                found = calendar.before(item.use_on, 1)
        return again


def _closest(run: Run) -> float:
    """The tightest tolerance among what the run serves; "present" is weighed as rough."""
    wants = [want for item in run.items for want in item.wants]
    return min(want.tolerance or 0.20 for want in wants)


def _too_little(grams: float, least: float, tolerance: float, balance: Balance, volume: int) -> str:
    step = format_number(balance.step / _MICROGRAMS)
    return (
        f"{format_number(grams, 3)} g is too little to weigh to {100 * tolerance:g} % on "
        f"{balance.name} ({step} g): {format_number(least, 3)} g in "
        f"{say(volume, Kind.VOLUME)} instead"
    )


def _through_an_intermediate(grams: float, least: float, volume: int) -> str:
    """Where no vessel holds a batch that can be weighed: a stronger one, diluted."""
    times = math.ceil(least / grams)
    return (
        f"{format_number(grams, 3)} g is too little to weigh: weigh "
        f"{format_number(grams * times, 3)} g into {say(volume, Kind.VOLUME)}, then dilute "
        f"1 in {times}"
    )
