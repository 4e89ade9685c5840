"""What was drawn, from what somebody said: measured, judged by eye, or by weighing the bottle."""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.errors import BadAmount, MissingFigure, NotAllowed
from stockroom.measure.amounts import PER_UNIT, Amount, Kind
from stockroom.measure.by_eye import ByEye
from stockroom.measure.formats import format_about, format_amount, format_number
from stockroom.service.work import Work, check_amount
from stockroom.store.changing import record_change
from stockroom.store.estimates import WEIGHED
from stockroom.store.ledger import overfull
from stockroom.store.tables import Bottle, Line


@dataclass(frozen=True, slots=True)
class Weighed:
    """A bottle on the balance as it stands: its gross mass, and its tare where one is given."""

    gross: Amount
    tare: Amount | None = None


@dataclass(frozen=True, slots=True)
class Taken:
    """What left a bottle: how much, whether by eye, the note to keep, and how it was told."""

    amount: Amount
    about: bool = False
    note: str = ""
    told: tuple[str, ...] = ()

    @property
    def words(self) -> str:
        """The amount in words, with "about" where it was judged."""
        return format_about(self.amount) if self.about else format_amount(self.amount)


def taken(work: Work, bottle: Bottle, said: Amount | ByEye | Weighed, held: int) -> Taken:
    """What was drawn from a bottle that held so much (micro-units) on the day.

    A mass of a liquid, and a bottle of it weighed, go through the density of its line.
    Raises: BadAmount for nothing, or of the wrong kind; NotAllowed when more would be left than
    was there; MissingFigure for a weighing without a tare, or without a density.
    """
    if isinstance(said, Weighed):
        return _by_weighing(work, bottle, said, held)
    if isinstance(said, Amount):
        return of_its_kind(work.line(bottle), said)
    if said.drawn is not None:
        measured = of_its_kind(work.line(bottle), said.drawn)
        return Taken(measured.amount, about=True, note=said.text, told=measured.told)
    return _by_eye(work, bottle, said, held)


def of_its_kind(line: Line, amount: Amount) -> Taken:
    """An amount in what its line is measured by: 20 g of a liquid are so many cm³.

    Raises: BadAmount for nothing, and for a kind that no density turns into the other.
    """
    if amount.kind is Kind.MASS and line.kind == Kind.VOLUME and line.density:
        volume = _volume(amount, line.density)
        check_amount(line, volume)
        said = f"{format_amount(amount)} is {_figures(volume)} at {line.density:g} g/cm³"
        return Taken(volume, note=format_amount(amount), told=(said,))
    return Taken(check_amount(line, amount))


def _by_eye(work: Work, bottle: Bottle, said: ByEye, held: int) -> Taken:
    assert said.left is not None
    if not bottle.size:
        raise NotAllowed(
            f'{bottle.number}: "{said.text}" of what? Its size was never written down.',
            f"Count it: stockroom count {bottle.number} …",
        )
    # of the bottle's size and not of what was in it: that is what an eye compares with
    target = round(said.left * bottle.size)
    size = work.say(bottle, bottle.size)
    amount = _what_went(work, bottle, held, target, f'"{said.text}" of {size}')
    told = f'"{said.text}" of {size}: {format_about(Amount(amount.kind, target))}'
    return Taken(amount, about=True, note=said.text, told=(told,) if target else ())


def _by_weighing(work: Work, bottle: Bottle, said: Weighed, held: int) -> Taken:
    line = work.line(bottle)
    if line.kind == Kind.ITEMS:
        raise BadAmount(f"{line.key} is counted, not weighed.", "Give how many were taken.")
    tare = _tare(work, bottle, said)
    net = said.gross - tare
    weighed = f"{format_amount(said.gross)} gross, tare {format_amount(tare)}"
    if net.micro < 0:
        raise BadAmount(f"{bottle.number}: {weighed}: less than empty.", "Weigh it again.")
    if line.kind == Kind.VOLUME:
        if not line.density:
            raise MissingFigure(
                f"{bottle.number}: the density of {line.key} is not known, so {weighed} says no"
                " volume.",
                "Say in cm³ what was drawn, or what is left.",
            )
        net = _volume(net, line.density)
    if overfull(bottle, net.micro):
        raise BadAmount(
            f"{bottle.number}: {weighed} would be {format_amount(net)} in a bottle of"
            f" {work.say(bottle, bottle.size)}.",
            "Check both masses.",
        )
    amount = _what_went(work, bottle, held, net.micro, weighed)
    return Taken(amount, note=f"{WEIGHED}{weighed}", told=(f"{weighed}: {_figures(net)} in it",))


def _tare(work: Work, bottle: Bottle, said: Weighed) -> Amount:
    if said.tare is not None:
        keep_tare(work, bottle, said.tare)
        return said.tare
    if bottle.tare is None:
        raise MissingFigure(
            f"{bottle.number}: its tare is not known, so {format_amount(said.gross)} gross does"
            " not say what is left.",
            'Weigh the like of it empty, with its cap: --tare "172 g". It is kept with the bottle.',
        )
    return Amount(Kind.MASS, bottle.tare)


def keep_tare(work: Work, bottle: Bottle, tare: Amount) -> None:
    """Keep the mass of the empty bottle, and on record when that was and what stood before.

    Raises: BadAmount unless it is a mass above nothing.
    """
    if tare.kind is not Kind.MASS or tare.micro <= 0:
        raise BadAmount(f"{format_amount(tare)} is no tare of {bottle.number}.", "Give it in g.")
    before, bottle.tare = bottle.tare, tare.micro
    work.session.add(bottle)
    if before != tare.micro:
        # a first one too: the weighing it came with may be put right, and it stays
        was = "" if before is None else format_amount(Amount(Kind.MASS, before))
        why = "weighed again" if was else "weighed"
        record_change(work.desk, "bottle", bottle.number, "tare", (was, format_amount(tare)), why)


def _what_went(work: Work, bottle: Bottle, held: int, target: int, said: str) -> Amount:
    if target >= held:
        left, there = work.say(bottle, target), work.say(bottle, held)
        raise NotAllowed(
            f"{bottle.number}: {said} is {left} left, and {there} is entered: nothing was drawn.",
            f'If it holds that, count it: stockroom count {bottle.number} "{left}"',
        )
    return Amount(Kind(work.line(bottle).kind), held - target)


def _volume(mass: Amount, density: float) -> Amount:
    return Amount(Kind.VOLUME, round(mass.number / density * PER_UNIT[Kind.VOLUME]))


def _figures(amount: Amount) -> str:
    # a density has three or four figures, and so has what comes of it
    return f"{format_number(amount.number)} {amount.unit.replace('m3', 'm³')}"
