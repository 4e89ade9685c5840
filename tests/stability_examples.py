"""Published stability studies: per cent of label against months, batch by batch.

Source: LeBlond, Griffith and Aubuchon, J. Valid. Technol. 17(3):47-68 (2011), tables
IV, VI and VIII, as carried by the data files of the R package expirest 0.1.7; the
paper itself was not seen. (a)
"""

from __future__ import annotations

from stockroom.keeping.pooling import Batch

_TIMES_OF = {
    "b2": "0 1 3 3 6 6 12 12 24 24",
    "b3": "0 3 3 6 6 12 12 24 24",
    "b4": "0 3 6 6 12 12 24 24",
    "b5": "0 1 2 3 3 6 6 12 12 24 24",
    "b7": "0 1 3 3 6 6 12 12 24 24",
    "b8": "0 3 6 12 12",
}
_VALUES_OF = {
    "b2": "101.0 101.3 99.8 99.2 99.5 97.8 97.4 97.2 96.9 96.0",
    "b3": "104.8 103.0 101.2 100.8 99.2 98.6 97.2 97.6 98.0",
    "b4": "104.0 103.2 102.8 103.3 102.4 101.2 99.1 99.5",
    "b5": "102.0 101.4 100.8 100.2 99.7 98.8 98.5 98.0 97.1 96.6 96.1",
    "b7": "101.3 101.5 100.2 99.8 99.0 98.5 98.5 97.4 96.6 96.4",
    "b8": "101.6 100.0 99.0 97.8 97.0",
}


def batch(name: str) -> Batch:
    """One batch of the study by its name."""
    times, values = (
        tuple(float(figure) for figure in table[name].split()) for table in (_TIMES_OF, _VALUES_OF)
    )
    return Batch(name, times, values)


def batches(names: str) -> list[Batch]:
    """Several of them: "b2 b5 b7"."""
    return [batch(name) for name in names.split()]


TABLE_IV = batches("b2 b5 b7")
TABLE_VI = batches("b3 b4 b5")
TABLE_VIII = batches("b4 b5 b8")
