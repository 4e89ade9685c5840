"""What went unused in the term: poured away by reason, spilled, lent, counted otherwise."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date
from typing import Protocol

from stockroom.measure.amounts import Kind
from stockroom.reports.words import amount, counted, named

POURED, SPILLED, LENT, COUNTED = "discarded", "spilled", "lent", "counted"
REASONS = ("past", "weak", "contaminated", "surplus")
"""The reasons a discard is asked for; any other text stands under "other reasons"."""
OTHER = "other reasons"
SURPLUS = "surplus"


class Left(Protocol):
    """One entry that took something off a bottle, as the service tells it."""

    @property
    def bottle(self) -> str: ...
    @property
    def item(self) -> str: ...
    @property
    def strength(self) -> str: ...
    @property
    def on(self) -> date: ...
    @property
    def amount(self) -> int: ...
    @property
    def kind(self) -> Kind: ...
    @property
    def how(self) -> str: ...
    @property
    def why(self) -> str: ...
    @property
    def way(self) -> str: ...
    @property
    def by(self) -> str: ...


@dataclass(frozen=True, slots=True)
class Waste:
    """One row: what became of it, how many bottles, how much in all, and of what."""

    what: str
    bottles: int
    total: str
    of: str


def reason_of(why: str) -> str:
    """The reason a discard was given, by the first of the usual words in it."""
    said = why.casefold()
    found = [(said.find(each), each) for each in REASONS if each in said]
    return min(found)[1] if found else OTHER


def wasted(left: Sequence[Left]) -> tuple[Waste, ...]:
    """A row for each reason of pouring away, then spills, loans not back, counts; none empty."""
    rows = [
        _row(
            f"poured away: {reason}", [one for one in poured(left) if reason_of(one.why) == reason]
        )
        for reason in (*REASONS, OTHER)
    ]
    rows.append(_row("spilled", [one for one in left if one.how == SPILLED]))
    rows.append(_row("lent, not come back", still_lent(left)))
    counts = [one for one in left if one.how == COUNTED]
    rows.append(_row("counted less than entered", [one for one in counts if one.amount > 0]))
    rows.append(_row("counted more than entered", [one for one in counts if one.amount < 0]))
    return tuple(row for row in rows if row.bottles)


def poured(left: Sequence[Left]) -> list[Left]:
    """The bottles poured away."""
    return [one for one in left if one.how == POURED]


def still_lent(left: Sequence[Left]) -> list[Left]:
    """What was lent of bottles of which not all came back."""
    lent = [one for one in left if one.how == LENT]
    owed: dict[str, int] = {}
    for one in lent:
        owed[one.bottle] = owed.get(one.bottle, 0) + one.amount
    return [one for one in lent if owed[one.bottle] > 0]


def total_of(left: Iterable[Left]) -> str:
    """How much in all, each kind of amount by itself: "1 250 cm³ and 20 g"; "nothing" for none."""
    sums: dict[Kind, int] = {}
    for one in left:
        sums[one.kind] = sums.get(one.kind, 0) + one.amount
    told = [amount(abs(micro), kind) for kind, micro in sorted(sums.items()) if micro]
    return " and ".join(told) or "nothing"


def _row(what: str, left: Sequence[Left]) -> Waste:
    names: dict[str, list[Left]] = {}
    for one in left:
        names.setdefault(named(one.item, one.strength), []).append(one)
    told = [
        f"{name} {total_of(each)} ({'; '.join(dict.fromkeys(_bottle(one) for one in each))})"
        for name, each in sorted(names.items())
    ]
    return Waste(what, len({one.bottle for one in left}), total_of(left), "; ".join(told))


def _bottle(one: Left) -> str:
    """A bottle, and which way it was poured away."""
    return f"{one.bottle}, {one.way}" if one.how == POURED and one.way else one.bottle


def _said(one: Left) -> str:
    reason = reason_of(one.why)
    return reason if reason != OTHER else one.why.strip() or "no reason given"


def poured_in_words(left: Sequence[Left]) -> str:
    """The sentence on what was poured away, spilled and lent."""
    gone, spilled, lent = (
        poured(left),
        [one for one in left if one.how == SPILLED],
        still_lent(left),
    )
    if not (gone or spilled or lent):
        return "Nothing is entered as poured away, spilled or lent this term."
    # a reason in words of one's own is said in them
    said = [_said(one) for one in gone]
    order = [each for each in dict.fromkeys((*REASONS, *said)) if each in said]
    by_reason = [f"{said.count(each)} {each}" for each in order]
    why = f" ({', '.join(by_reason)})" if by_reason else ""
    count = counted(len(gone), "bottle")
    verb = "was" if len(gone) == 1 else "were"
    return (
        f"{count} {verb} poured away{why}, {total_of(gone)} in all; "
        f"{total_of(spilled)} was spilled, and {total_of(lent)} is lent and not back."
    )
