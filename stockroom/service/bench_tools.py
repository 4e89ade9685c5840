"""The balances and the measuring glass that a bench sum may use on a day, and what is away."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from datetime import date
from typing import TYPE_CHECKING

from stockroom.chemistry.glassware import Ware, ware
from stockroom.chemistry.steps import Bench
from stockroom.chemistry.weighing import Scale, least_by_pharmacopoeia
from stockroom.errors import BadInput, StockroomError, StoreTrouble
from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.measure.formats import format_number
from stockroom.settings import StoreAt

if TYPE_CHECKING:
    from stockroom.planning.facts import Balance, Facts, Glass

_STEP_GIVEN = "the balance"


@dataclass(frozen=True, slots=True)
class Minimum:
    """What the least mass goes by beside the closeness: a pharmacopoeia, or nothing.

    `repeatability` in g is the spread of ten weighings of one mass, where it was found.
    """

    rule: str = ""
    repeatability: float | None = None

    def __post_init__(self) -> None:
        if self.rule not in ("", "usp"):
            raise BadInput(f"--minimum {self.rule!r} is no rule I know.", "Write --minimum usp.")
        if self.repeatability is not None and not self.rule:
            raise BadInput(
                f"--repeatability {self.repeatability:g} g is for a pharmacopoeia's rule.",
                "Add --minimum usp.",
            )

    def least(self, step: float) -> float:
        """The least g on a balance of that step; 0 where only the closeness counts."""
        if not self.rule:
            return 0.0
        return least_by_pharmacopoeia(repeatability_g=self.repeatability, step_g=step)


@dataclass(frozen=True, slots=True)
class Tools:
    """What is there, and in words what is not.

    `away` names the balances away that are finer than any that is there; `glass_away`
    and `unknown` the glass that cannot be counted on. `note` says that there is no
    balance at all.
    """

    bench: Bench = field(default_factory=Bench)
    note: str = ""
    away: tuple[str, ...] = ()
    glass_away: tuple[str, ...] = ()
    unknown: tuple[str, ...] = ()
    practice: bool = False

    @property
    def finest(self) -> Scale | None:
        """The balance with the smallest step."""
        return min(self.bench.scales, key=lambda each: (each.step, each.name), default=None)


def tools_on(
    store: StoreAt | None, as_at: date | None, *, step: float | None, minimum: Minimum
) -> Tools:
    """The house's tools of the day; a `step` given takes the place of its balances.

    No store is no trouble: then nothing is known but the step.
    """
    found = _of_house(store, as_at)
    if step is not None:
        given = (Scale(_STEP_GIVEN, step),)
        found = replace(found, bench=replace(found.bench, scales=given), note="", away=())
    scales = found.bench.scales
    # a repeatability was found on one balance, and that will have been the best
    if minimum.repeatability is not None and found.finest:
        scales = (found.finest,)
    spread = minimum.repeatability or 0.0
    scales = tuple(
        replace(each, least=minimum.least(each.step), repeatability=spread) for each in scales
    )
    return replace(found, bench=replace(found.bench, scales=scales))


def _of_house(store: StoreAt | None, as_at: date | None) -> Tools:
    if store is None or not store.exists():
        return Tools(note="no balance entered: give --step for what it can weigh")
    from stockroom.service.database import day_for
    from stockroom.store.snapshot import facts

    try:
        day = day_for(store, as_at)
        return _there(facts(store, day), day)
    except StoreTrouble as trouble:
        # a sum needs no store, so a damaged one must not stop it
        return Tools(note=f"no balance known: {trouble.message}")


def _there(known: Facts, day: date) -> Tools:
    here = [each for each in known.balances if each.here(day)]
    scales = tuple(_scale(each) for each in here)
    finest = min((each.step for each in here), default=None)
    gone = [each for each in known.balances if each not in here]
    missed = [each for each in gone if finest is None or each.step < finest]
    glass, unknown = _glass([each for each in known.glassware if each.here(day)])
    return Tools(
        Bench(scales, glass),
        _no_balance(known) if not here else "",
        tuple(
            f"{_named(each)} is away {_absence(each, day)}: weigh the dry solid before it goes"
            for each in missed
        ),
        tuple(
            f"{each.name} is away {_absence(each, day)}"
            for each in known.glassware
            if not each.here(day)
        ),
        unknown,
        known.house.practice,
    )


def _no_balance(known: Facts) -> str:
    if known.balances:
        return "No balance that day."
    return "no balance entered: stockroom add balances balance=… step_g=…, or give --step"


def _scale(balance: Balance) -> Scale:
    return Scale(balance.name, balance.step / PER_UNIT[Kind.MASS])


def _named(balance: Balance) -> str:
    return f"{balance.name} ({format_number(_scale(balance).step)} g)"


def _absence(thing: Balance | Glass, day: date) -> str:
    first, last = next(each for each in thing.away if each[0] <= day <= each[1])
    return f"{first} to {last}"


def _glass(pieces: list[Glass]) -> tuple[tuple[Ware, ...], tuple[str, ...]]:
    """The pieces whose tolerance is known, and in words those whose is not."""
    found, unknown = [], []
    cubic = PER_UNIT[Kind.VOLUME]
    for each in pieces:
        step = each.step / cubic if each.step else None
        try:
            found.append(
                ware(each.kind, each.size / cubic, each.glass_class, step=step, name=each.name)
            )
        except StockroomError as trouble:
            unknown.append(f"{each.name} is left out: {trouble.message}")
    return tuple(found), tuple(unknown)
