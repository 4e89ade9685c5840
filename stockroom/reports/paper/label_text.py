"""Labels on the screen: the same words, one label under the other."""

from __future__ import annotations

from collections.abc import Sequence

from stockroom.reports.paper.head import foot_lines, head_lines
from stockroom.reports.paper.label import Label, Labels, Sort
from stockroom.reports.sheet import wrap
from stockroom.reports.words import counted, listed

_BLANK = "........"

SMALL = "small"
"""The mark in `label.typ` of a label with symbols below 1 cm², which CLP asks for at least.

Annex I 1.2.1.4 of the regulation, from memory.
"""

_ROOMY = (105.0, 74.0)
"""A label, mm, whose symbols are 1 cm² with any usual text. Our choice."""

_NAMED = 6
"""Labels with small symbols that are named; of more there is a count. Our choice."""


def told(sheet: Labels, width: int) -> str:
    """Head, how large and on what, and each label in a block of its own."""
    wide, high = sheet.size
    grid = sheet.grid
    on = "each on a page of its own"
    if grid:
        on = f"{grid.across} across, {grid.down} down, from place {grid.start}"
    about = f"{counted(len(sheet.labels), 'label')}, {wide:g} x {high:g} mm, {on}"
    blocks = [block(each, width) for each in sheet.labels]
    parts = [f"{head_lines(sheet.head, width)}\n{wrap(about, width)}", *blocks]
    return "\n\n".join([*parts, foot_lines(sheet.head, width)])


def block(label: Label, width: int) -> str:
    """One label as text."""
    rows = [f"{label.number or f'number {_BLANK}'}  {label.name}"]
    rows += [f"{label.strength} ({label.known})" if label.known else label.strength]
    rows += ["   ".join(f"{word} {day or _BLANK}" for word, day in label.dates)]
    rows += [label.keep, label.vented, label.warning]
    rows += [f"initials {_BLANK}"] if label.sort in (Sort.FULL, Sort.SHORT) else []
    rows += [" ".join(filter(None, (label.hazards.signal.upper(), *label.hazards.symbols)))]
    rows += [f"{code} {words}".strip() for code, words in label.hazards.statements]
    rows += [label.hazards.basis]
    first, *rest = [row for row in rows if row.strip()]
    # a strength of nothing but what is known of it stands without its brackets
    return "\n".join([wrap(first, width), *(wrap(_bare(row), width, indent=2) for row in rest)])


def small_words(names: Sequence[str], sort: Sort, size: tuple[float, float]) -> str:
    """That hazard symbols came out smaller than 1 cm², and what gives them room; "" for none."""
    if not names:
        return ""
    more = f" and {len(names) - _NAMED} more" if len(names) > _NAMED else ""
    way = "leave out --short for a full label" if sort is Sort.SHORT else _larger(size)
    return f"symbols on {listed(names[:_NAMED])}{more} are smaller than 1 cm²: {way}"


def _larger(size: tuple[float, float]) -> str:
    if size[0] < _ROOMY[0] or size[1] < _ROOMY[1]:
        return f"--size {max(size[0], _ROOMY[0]):g}x{max(size[1], _ROOMY[1]):g}"
    return "give it more room with --size"


def _bare(row: str) -> str:
    return row.strip().removeprefix("(").removesuffix(")") if row.startswith(" (") else row


def in_one_line(label: Label) -> str:
    """All a label says, for holding it against the copy before."""
    parts = [label.name, label.strength, label.known]
    parts += [f"{word} {day}".strip() for word, day in label.dates]
    parts += [label.keep, label.vented, label.warning, label.hazards.signal]
    parts += [" ".join(label.hazards.symbols)]
    parts += [f"{code} {words}".strip() for code, words in label.hazards.statements]
    parts += [label.hazards.basis]
    return f"{label.number or label.about}: {'; '.join(part for part in parts if part)}"
