"""Labels of bottles: the name in words the biggest, its strength as known, dates, hazards, number.

Four kinds: the full one, for what is made here or bought; the strip of an opened bottle; the
short one of a small bottle; and the one that says to leave an unknown alone.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum
from typing import Any

from stockroom.reports.paper.head import Head
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.paper.label_grid import Grid


class Sort(StrEnum):
    """What a label is for."""

    FULL = "full"
    OPENED = "opened"
    SHORT = "short"
    UNKNOWN = "unknown"


@dataclass(frozen=True, slots=True)
class HazardText:
    """The hazards as a label has them.

    `statements` are pairs of code and wording, or one pair without a code: a supplier's text, or
    that nothing is entered. `basis` says whose words they are. `ask` is the command that has all.
    """

    signal: str = ""
    symbols: tuple[str, ...] = ()
    statements: tuple[tuple[str, str], ...] = ()
    basis: str = ""
    ask: str = ""


@dataclass(frozen=True, slots=True)
class Label:
    """One label. `number` is "" for a batch whose bottle has none yet.

    `dates` are pairs of a word and a day; "" for the day is a blank to write in. `warning` is
    what has to be read before the bottle is touched.
    """

    sort: Sort
    number: str
    name: str
    strength: str = ""
    known: str = ""
    dates: tuple[tuple[str, str], ...] = ()
    keep: str = ""
    vented: str = ""
    warning: str = ""
    hazards: HazardText = HazardText()
    about: str = ""


@dataclass(frozen=True, slots=True)
class Labels:
    """Labels of one size in mm, on a sheet of them or each on a page of its own."""

    head: Head
    size: tuple[float, float]
    grid: Grid | None
    labels: tuple[Label, ...]


def labels_text(sheet: Labels, width: int) -> str:
    """The labels one under the other, with all that stands on them."""
    from stockroom.reports.paper.label_text import told

    return told(sheet, width)


def label_lines(sheet: Labels) -> dict[str, str]:
    """Each label by its number, and all it says; for a batch which make had that number."""
    from stockroom.reports.paper.label_text import in_one_line
    from stockroom.reports.paper.make_number import number_line

    told = {label.number or label.about: in_one_line(label) for label in sheet.labels}
    for number, thing in things_of(sheet).items():
        told |= number_line(number, thing)
    return told


def things_of(sheet: Labels) -> dict[str, str]:
    """What the batches among them are, by the number of the make."""
    batches = [label for label in sheet.labels if label.about]
    # what is not known of the strength is no part of what it is
    return {b.about: f"{b.name} {b.strength if b.known else ''}".strip() for b in batches}


def _more(sheet: Labels) -> Mapping[str, Any]:
    from stockroom.reports.paper.codes import code_svg
    from stockroom.reports.shipped import symbol

    wanted = {code for label in sheet.labels for code in label.hazards.symbols}
    return {
        "codes": {each.number: code_svg(each.number) for each in sheet.labels if each.number},
        "symbols": {code: symbol(code) for code in sorted(wanted)},
    }


LABEL = Kind("label", labels_text, label_lines, _more)
