"""Whether the solids of a batch, as it came out in the end, can be weighed closely enough.

A batch is first made big enough to weigh for (`sizing.py`). Where there is no more to make it
from, or it goes into several vessels, each mass may be too little all the same.
"""

from __future__ import annotations

from stockroom.chemistry.weighing import least_weighable, relative_error
from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.measure.formats import format_number
from stockroom.planning.facts import Balance, Facts, Form, Line
from stockroom.planning.making.batch import Batch
from stockroom.planning.making.glass import per_cent

_MICROGRAMS = PER_UNIT[Kind.MASS]
_LAST_DIGITS = 1e-5
"""What rounding a batch to whole microlitres may take off a mass, as a fraction."""
_NO_BALANCE = "No balance that day"
_SAID = "is too little to weigh:"


def grams_of(batch: Batch) -> dict[Line, float]:
    """The grams of each solid weighed for one vessel of a batch."""
    row: dict[Line, float] = {}
    for source in batch.sources:
        if source.line.form is Form.SOLID:
            share = source.amount / batch.vessels / _MICROGRAMS
            row[source.line] = row.get(source.line, 0.0) + share
    return row


def too_little_to_weigh(facts: Facts, batch: Batch) -> list[str]:
    """The solids too little for every balance that is in that day, each with the way out.

    Nothing where no balance is written down, nor where the reasons of the batch say it already.
    """
    grams = grams_of(batch)
    if not grams or not facts.balances:
        return []
    here = [balance for balance in facts.balances if balance.here(batch.run.on)]
    finest = min(here, key=lambda balance: (balance.step, balance.name), default=None)
    if finest is None:
        return [] if _NO_BALANCE in batch.reasons else [_NO_BALANCE]
    if any(_SAID in words for words in batch.reasons):
        return []
    tolerance = min(want.tolerance or 0.20 for want in batch.wants)
    least = least_weighable(finest.step / _MICROGRAMS, tolerance)
    return [
        f"{format_number(each, 3)} g of {line.item} {_SAID} {_way_out(batch, each, least, finest)}"
        for line, each in grams.items()
        if 0 < each < least * (1 - _LAST_DIGITS)
    ]


def _way_out(batch: Batch, each: float, least: float, finest: Balance) -> str:
    whole = each * batch.vessels
    if whole >= least:
        once = f"weigh {format_number(whole, 3)} g once, dissolve it"
        return f"{once} and share it out among the {batch.vessels} vessels"
    step = per_cent(relative_error(finest.step / _MICROGRAMS, each))
    return f"borrow a finer balance, since one step of {finest.name} is {step} of it"
