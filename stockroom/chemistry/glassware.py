"""Measuring glass: the tolerance of each piece, and the least it measures closely enough.

Each standard has a table of its own and a lookup never leaves it: ISO and ASTM give
different tolerances for pieces that look alike. "How" is a where the table was seen
and c where it is from memory. Sizes, marks and tolerances in cm³.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum

from stockroom.chemistry.figures import positive
from stockroom.errors import BadAmount, UnknownName
from stockroom.measure.formats import format_number


class GlassKind(StrEnum):
    """The kinds of measuring glass."""

    FLASK = "flask"
    PIPETTE = "pipette"
    GRADUATED = "graduated pipette"
    BURETTE = "burette"
    CYLINDER = "cylinder"

    @property
    def one_mark(self) -> bool:
        """True for glass that measures its nominal volume and nothing else."""
        return self in (GlassKind.FLASK, GlassKind.PIPETTE)


Sizes = Mapping[tuple[float, float], tuple[float, float]]
"""By (size, finest mark), the tolerances of class A and class B; one mark: the mark is 0."""


@dataclass(frozen=True, slots=True)
class Standard:
    """A published table of tolerances: its name, the glass it is for, how it was obtained."""

    name: str
    kind: GlassKind
    how: str
    sizes: Sizes


def _by_size(sizes: str, class_a: str, class_b: str) -> Sizes:
    columns = (map(float, row.split()) for row in (sizes, class_a, class_b))
    return {(size, 0.0): (a, b) for size, a, b in zip(*columns, strict=True)}


def _by_mark(sizes: str, class_a: str, class_b: str) -> Sizes:
    marks = [tuple(map(float, each.split("/"))) for each in sizes.split()]
    columns = (map(float, row.split()) for row in (class_a, class_b))
    return {(size, mark): (a, b) for (size, mark), a, b in zip(marks, *columns, strict=True)}


ISO_FLASKS = Standard(
    "ISO 1042:1998", GlassKind.FLASK, "a",
    _by_size(
        "1     2     5     10    20   25   50   100  200  250  500  1000 2000 5000",
        "0.025 0.025 0.025 0.025 0.04 0.04 0.06 0.10 0.15 0.15 0.25 0.40 0.60 1.20",
        "0.05  0.05  0.05  0.05  0.08 0.08 0.12 0.20 0.30 0.30 0.50 0.80 1.20 2.40",
    ),
)  # fmt: skip
"""Source: a public data set after the standard; 5 to 2000 cm³ also in a pharmacopoeia."""

ISO_PIPETTES = Standard(
    "ISO 648:2008", GlassKind.PIPETTE, "a",
    _by_size(
        "0.5   1     2     5     10    20    25    50    100",
        "0.005 0.008 0.010 0.015 0.020 0.030 0.030 0.050 0.080",
        "0.010 0.015 0.020 0.030 0.040 0.060 0.060 0.100 0.150",
    ),
)  # fmt: skip
"""Source: the same data set."""

ISO_BURETTES = Standard(
    "ISO 385:2005", GlassKind.BURETTE, "a",
    _by_mark(
        "1/0.01 2/0.01 5/0.01 5/0.02 10/0.02 10/0.05 25/0.05 25/0.1 50/0.1 100/0.2",
        "0.006  0.010  0.010  0.010  0.020   0.030   0.030   0.050  0.050  0.100",
        "0.01   0.02   0.02   0.02   0.05    0.05    0.05    0.10   0.10   0.20",
    ),
)  # fmt: skip
"""Source: the same data set."""

ISO_CYLINDERS = Standard(
    "ISO 4788:2005", GlassKind.CYLINDER, "c",
    _by_mark(
        "5/0.1 10/0.2 25/0.5 50/1 100/1 250/2 500/5 1000/10 2000/20",
        "0.05  0.10   0.25   0.5  0.5   1.0   2.5   5.0     10",
        "0.1   0.2    0.5    1.0  1.0   2.0   5.0   10      20",
    ),
)  # fmt: skip
"""Source: from memory; class B is what a pharmacopoeia prints for its class 2."""

ISO_GRADUATED = Standard(
    "ISO 835:2007", GlassKind.GRADUATED, "c",
    _by_mark(
        "0.5/0.01 1/0.01 2/0.02 5/0.05 10/0.1 25/0.1",
        "0.006    0.007  0.010  0.030  0.050  0.100",
        "0.010    0.010  0.020  0.050  0.100  0.200",
    ),
)  # fmt: skip
"""Source: from memory."""

ASTM_CYLINDERS = Standard(
    "ASTM E1272-02", GlassKind.CYLINDER, "a",
    _by_size(
        "5    10   25   50   100  250  500",
        "0.05 0.10 0.17 0.25 0.50 1.00 2.00",
        "0.10 0.20 0.34 0.50 1.00 2.00 4.00",
    ),
)  # fmt: skip
"""Source: its Table 1 in a standards shop's preview. Never used unless named."""

ISO: dict[GlassKind, Standard] = {
    each.kind: each
    for each in (ISO_FLASKS, ISO_PIPETTES, ISO_BURETTES, ISO_CYLINDERS, ISO_GRADUATED)
}
"""The table for each kind of glass, where nobody names another standard."""


@dataclass(frozen=True, slots=True)
class Ware:
    """One piece of measuring glass, with its tolerance and where that comes from.

    `step` is its finest mark, 0 with one mark only. `how` is a (the table was seen)
    or c (from memory).
    """

    kind: GlassKind
    size: float
    glass_class: str
    step: float
    tolerance: float
    standard: str
    how: str
    name: str = ""

    @property
    def error(self) -> float:
        """How far off a measured volume may be: its tolerance, or half a mark where wider."""
        # the meniscus is set on a line, so between two lines is as far as it can be misread
        return max(self.tolerance, self.step / 2)

    @property
    def resolution(self) -> float:
        """What the closeness rule divides: one mark, or the tolerance where wider."""
        return max(self.tolerance, self.step)

    @property
    def words(self) -> str:
        """The name it goes by in the house, else its size and kind."""
        return self.name or f"{format_number(self.size)} cm³ {self.kind}"


def ware(
    kind: str,
    size: float,
    glass_class: str = "",
    *,
    step: float | None = None,
    name: str = "",
    standard: Standard | None = None,
) -> Ware:
    """The piece of that kind and size, with its tolerance from the standard's table.

    `glass_class` is A, AS or B; blank is taken as B, the wider. `step` picks among
    burettes of one size; without it the widest tolerance counts.
    Raises: UnknownName for a kind or class that is none; BadAmount for a size or a
    mark that the table does not have, naming the nearest.

    >>> ware("flask", 250, "A").tolerance
    0.15
    """
    table = ISO[kind_of(kind)] if standard is None else standard
    graded = class_of(glass_class)
    known = {size_of: both for size_of, both in table.sizes.items() if size_of[0] == size}
    if not known:
        raise BadAmount(
            f"{kind} {format_number(positive(size, 'size', 'cm³'))} cm³: "
            f"{table.name} has none of that size.",
            f"The nearest: {_nearest(size, sorted({each for each, _ in table.sizes}))} cm³.",
        )
    mark, both = _marked(known, step, table, kind)
    return Ware(table.kind, size, graded, mark, both[graded == "B"], table.name, table.how, name)


def tolerance(kind: str, size: float, glass_class: str = "", *, step: float | None = None) -> float:
    """The ± cm³ that the ISO standard allows. Raises: as `ware`.

    >>> tolerance("pipette", 25, "A")
    0.03
    """
    return ware(kind, size, glass_class, step=step).tolerance


def smallest_sensible(
    kind: str, size: float, glass_class: str = "", *, closeness: float, step: float | None = None
) -> float | None:
    """The least cm³ that piece measures to within a `closeness` (5 % is 0.05).

    A mark (or the tolerance, where wider) over the closeness, as for a balance; a
    flask or bulb pipette measures its size or nothing. None: not even full.
    Raises: as `ware`, and BadAmount for a closeness not above 0.

    >>> smallest_sensible("cylinder", 100, "B", closeness=0.05)
    20.0
    """
    return least_measurable(ware(kind, size, glass_class, step=step), closeness)


def least_measurable(piece: Ware, closeness: float) -> float | None:
    """As `smallest_sensible`, for a piece already looked up."""
    least = piece.resolution / positive(closeness, "closeness")
    # a float's last bits must not refuse what is exactly close enough
    if least > piece.size * (1 + 1e-9):
        return None
    return piece.size if piece.kind.one_mark else least


def fine_enough(piece: Ware, accuracy: float) -> bool:
    """True when it may be used uncalibrated for an accuracy of ± cm³: a fifth of it.

    Raises: BadAmount for an accuracy not above 0.
    Source: the rule of UKAS LAB 15, seen.
    """
    return piece.tolerance <= positive(accuracy, "accuracy", "cm³") / 5 * (1 + 1e-9)


def kind_of(kind: str) -> GlassKind:
    """The kind of glass of that name. Raises: UnknownName naming them all."""
    try:
        return GlassKind(kind.strip().lower())
    except ValueError:
        raise UnknownName(
            f"{kind!r} is no kind of measuring glass.", f"{', '.join(GlassKind)}."
        ) from None


def class_of(glass_class: str) -> str:
    """The letter of a class: A for AS (quick delivery, same tolerance), B for blank.

    Raises: UnknownName.
    """
    letter = glass_class.strip().upper().removesuffix("S") or "B"
    if letter not in ("A", "B"):
        raise UnknownName(f"class {glass_class!r} is not A, AS or B.", "Read it off the glass.")
    return letter


def _marked(
    known: Sizes, step: float | None, table: Standard, kind: str
) -> tuple[float, tuple[float, float]]:
    """The mark and tolerances among pieces of one size; the widest where no mark is named."""
    if step:
        for (_, mark), both in known.items():
            # a bulb pipette has no marks, so a mark entered for it says nothing
            if mark in (step, 0.0):
                return mark, both
        marks = ", ".join(format_number(mark) for _, mark in sorted(known))
        raise BadAmount(
            f"{kind} {format_number(min(known)[0])} cm³ with marks of {format_number(step)} cm³: "
            f"{table.name} has {marks}.",
            "Read the marks off the glass.",
        )
    (_, mark), both = max(known.items(), key=lambda row: (row[1], row[0]))
    return mark, both


def _nearest(size: float, sizes: list[float]) -> str:
    below = [each for each in sizes if each < size][-1:]
    above = [each for each in sizes if each > size][:1]
    return " or ".join(format_number(each) for each in below + above)
