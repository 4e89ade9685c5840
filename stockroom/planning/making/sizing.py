"""How big a batch really is, in how many vessels, and what that costs."""

from __future__ import annotations

import math
from datetime import date

from stockroom.chemistry.weighing import least_weighable
from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.measure.formats import format_number
from stockroom.planning.amounts import draw_for, say
from stockroom.planning.facts import Balance, Facts, Form, Line, Method
from stockroom.planning.making.batches import Run
from stockroom.planning.making.equipment import largest_vessel, largest_vessel_on
from stockroom.planning.wants import Want

_MICROGRAMS = PER_UNIT[Kind.MASS]
_DM3 = 1_000_000


class Sizing:
    """The sizes of batches of one line by its method. Volumes in µL.

    `exact` makes no more than is needed, whatever the house's steps and least batches.
    """

    def __init__(self, facts: Facts, line: Line, method: Method, *, exact: bool = False) -> None:
        self.facts, self.line, self.method, self.exact = facts, line, method, exact
        sizes = (line.largest_batch, largest_vessel(facts))
        self.most = min((size for size in sizes if size), default=None)

    def most_on(self, day: date) -> int | None:
        """The most one vessel takes that day, µL; None where no largest is known.

        With every vessel away it is as if they were in: the plan notes it, and people borrow.
        """
        sizes = (self.line.largest_batch, largest_vessel_on(self.facts, day))
        return min((size for size in sizes if size), default=self.most)

    def vessels(self, volume: int, day: date) -> int:
        """How many vessels a volume takes that day; 1 where no largest is known."""
        most = self.most_on(day)
        return -(-volume // most) if most else 1

    def least(self, wants: list[Want]) -> int:
        """The least batch worth starting, µL: the house's word, or what can just be weighed.

        On the finest balance of the house; a day it is away may ask for more.
        """
        if self.exact or not wants:
            return 0
        parts, tolerance = wants[0].parts, min(want.tolerance or 0.20 for want in wants)
        masses = [
            draw_for(solid, None, self.line, _DM3, per_dm3) / _MICROGRAMS
            for solid, per_dm3 in self._solids(parts)
        ]
        balance = min(self.facts.balances, key=lambda b: (b.step, b.name), default=None)
        if not masses or balance is None or not min(masses):
            return self.method.smallest_batch
        least = least_weighable(balance.step / _MICROGRAMS, tolerance)
        weighable = math.ceil(_DM3 * least / min(masses))
        # where no vessel holds that much the batch stays small, and goes through an intermediate
        fits = not self.most or weighable <= self.most
        return max(self.method.smallest_batch, weighable if fits else 0)

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
        vessels, most = self.vessels(volume, run.on), self.most_on(run.on)
        if vessels > 1 and most:
            largest = say(most, Kind.VOLUME)
            words = f"in {vessels} vessels of {largest} at most: mix them"
            reasons.append(words + self._away(most, run.on))
        return volume, volume - exact, reasons

    def _away(self, most: int, day: date) -> str:
        """Which larger vessels are not there that day, in brackets; "" when none is missing."""
        away = (v for v in self.facts.vessels if v.size > most and not v.here(day))
        larger = sorted(vessel.name for vessel in away)
        limited = self.line.largest_batch == most
        return f" ({', '.join(larger)} is away on {day})" if larger and not limited else ""

    def _weighable(self, run: Run, volume: int) -> tuple[int, str]:
        """The least volume whose solids can all be weighed closely enough, and why."""
        grams = [
            draw_for(solid, None, self.line, volume, per_dm3) / _MICROGRAMS
            for solid, per_dm3 in self._solids(run.items[0].wants[0].parts)
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
        most = self.most_on(run.on)
        if most and scaled > most:
            return volume, _through_an_intermediate(least_of_all, least, volume)
        return scaled, _too_little(least_of_all, least, tolerance, balance, scaled)

    def _solids(self, parts: list[Want]) -> list[tuple[Line, int | None]]:
        found = [(self.facts.lines[part.line], part.ingredient) for part in parts]
        return [(x, i.per_dm3) for x, i in found if i is not None and x.form is Form.SOLID]


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
