"""What is held of a substance's hazards, and so much of it in a mixture.

Per cents are by mass throughout: Annex VI of the regulation counts by mass
unless it says otherwise.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from enum import StrEnum

from stockroom.errors import BadAmount
from stockroom.safety.classes import HazardClass, class_of
from stockroom.safety.grounds import RULE, Ground, distinct

NEAR = 0.95
"""From this part of a limit up the safer side is taken, with a note: ours, no source."""

_EXACT = 1e-9
_PURE = 100 * (1 - _EXACT)

ACUTE, BREATHING = "acute", "breathing"


class Basis(StrEnum):
    """What a row says of its class."""

    SPECIFIC = "specific"
    """A published limit of its own: the class holds from `from_percent` to below the next."""
    HARMONISED = "harmonised"
    """The class of the substance itself; the general mixture rules apply."""
    NOT_ADDITIVE = "not additive"
    """The same, of a strong acid or base that counts by itself: from 1 or 3 per cent."""
    TRANSPORT = "transport"
    """A class by the rules of transport alone: worth a note, and no statement."""
    NONE = "none"
    """Looked into, and not classified."""


class Route(StrEnum):
    """How an acute poison gets in; the last three are breathed."""

    ORAL = "oral"
    DERMAL = "dermal"
    VAPOUR = "vapour"
    DUST = "dust"
    GAS = "gas"


@dataclass(frozen=True, slots=True)
class Limit:
    """One row: a class with its statement, where it begins, and how that is known.

    `from_percent` and `below_percent` bound the band [from, below), and no upper one means
    up to the pure substance. `ate` is an acute toxicity estimate in mg/kg, mg/dm³ of
    air or ppm. `percent_of` names what the per cent counts when it is not the
    substance as dissolved: "available chlorine", or the formula of a hydrate.
    `how` is one of the marks of `grounds.py`. A supplemental statement has no class.
    """

    hazard_class: str
    h_code: str
    basis: Basis = Basis.HARMONISED
    from_percent: float | None = None
    below_percent: float | None = None
    route: Route | None = None
    ate: float | None = None
    m_factor: float = 1.0
    percent_of: str = ""
    how: str = ""
    source: str = ""

    @property
    def kind(self) -> HazardClass:
        """The category with its marks. Raises: BadInput for one nobody knows."""
        return class_of(self.hazard_class)

    @property
    def ground(self) -> Ground:
        """How it is known, and whose figure it is."""
        return Ground(self.how, self.source)

    @property
    def supplemental(self) -> bool:
        """True for EUH statements, which belong to no class."""
        return self.h_code.startswith("EUH")

    @property
    def ladder(self) -> str:
        """The ladder of its class; "" for a supplemental statement or for no class at all."""
        if self.supplemental or self.basis in (Basis.NONE, Basis.TRANSPORT):
            return ""
        ladder = self.kind.ladder
        # two effects under one class name: an irritant to breathe need not make drowsy
        if ladder == BREATHING:
            return f"{ladder} {self.h_code}"
        return f"{ladder} {self.way_in}" if ladder == ACUTE else ladder

    @property
    def way_in(self) -> str:
        """ "oral", "dermal" or "inhaled", as its statement says: H302, H312 or H332."""
        # the statement is on the label, so it is believed before a route left out or mistyped
        return {"H30": "oral", "H31": "dermal"}.get(self.h_code[:3], "inhaled")

    @property
    def counted_by(self) -> Route:
        """The route its estimate counts by; of a mist less is wanted, so it stands for no route."""
        by_code = {"oral": Route.ORAL, "dermal": Route.DERMAL}.get(self.way_in)
        breathed = self.route in (Route.VAPOUR, Route.DUST, Route.GAS)
        return by_code or (self.route if self.route and breathed else Route.DUST)


@dataclass(frozen=True, slots=True)
class Ingredient:
    """So many per cent by mass of a substance, with what is held of it.

    `percent` is the most it could be, 0 to 100. `counted` holds the per cent in other
    ways of counting, (way, per cent), for rows with a `percent_of`. No limits at all
    means that nobody entered any; `group` is its storage group.
    Raises: BadAmount for a per cent outside 0 to 100.
    """

    substance: str
    percent: float
    limits: tuple[Limit, ...] = ()
    counted: tuple[tuple[str, float], ...] = ()
    group: str = ""
    _counting: dict[str, tuple[Limit, ...]] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        # sorted out once: every rule asks for its own ladder
        object.__setattr__(self, "_counting", _that_count(self.limits))
        for percent in (self.percent, *(each for _, each in self.counted)):
            if not math.isfinite(percent) or not 0 <= percent <= 100 * (1 + 1e-6):
                raise BadAmount(
                    f"{percent:g} % w/w of {self.substance} cannot be.",
                    "Give a per cent by mass from 0 to 100.",
                )

    @property
    def entered(self) -> bool:
        """True when something is held of it, though it be only that it is not classified."""
        return bool(self.limits)

    def percent_for(self, limit: Limit) -> float:
        """The per cent as this row counts it; as dissolved when nobody worked the other out."""
        return dict(self.counted).get(limit.percent_of, self.percent)

    def part(self, row: Limit, edge: float, rule: Ground | None = None) -> Part:
        """Its part on the way to a class by one row, in the per cent that row counts.

        `rule` gave the edge; None where the row's own limit did. The pure substance has
        its own class, and no rule for mixtures is asked.
        """
        asked = rule is not None and self.percent < _PURE
        grounds = (row.ground, rule) if asked and rule else (row.ground,)
        return Part(self.substance, self.percent_for(row), edge, row.percent_of, grounds)

    def held(self, *ladders: str) -> tuple[Limit, ...]:
        """The rows on these ladders that count.

        A specific limit displaces a general one of the same category or a lesser; a graver
        category that has no limit of its own stays. Source: Art. 10 and Annex I, 1.1.2, seen.
        """
        return tuple(row for ladder in ladders for row in self._counting.get(ladder, ()))


def _that_count(limits: tuple[Limit, ...]) -> dict[str, tuple[Limit, ...]]:
    rows: dict[str, list[Limit]] = {}
    for row in limits:
        rows.setdefault(row.ladder, []).append(row)
    return {ladder: _undisplaced(each) for ladder, each in rows.items() if ladder}


def _undisplaced(rows: list[Limit]) -> tuple[Limit, ...]:
    ranks = [row.kind.rank for row in rows if row.basis is Basis.SPECIFIC]
    gravest = min(ranks, default=math.inf)
    return tuple(r for r in rows if r.basis is Basis.SPECIFIC or r.kind.rank < gravest)


@dataclass(frozen=True, slots=True)
class Part:
    """One ingredient's share of the way to a class: its per cent, and the edge by itself.

    `grounds` are what the edge rests on.
    """

    substance: str
    percent: float
    edge: float
    counted: str = ""
    grounds: tuple[Ground, ...] = ()

    @property
    def as_counted(self) -> str:
        """How the per cent counts, where not as dissolved: "% as CuSO4.5H2O"."""
        if not self.counted:
            return "%"
        return f"% as {self.counted}" if self.counted[0].isupper() else f"% {self.counted}"

    @property
    def share(self) -> float:
        """Per cent over edge; 1 and more reaches the class alone."""
        return self.percent / self.edge


@dataclass(frozen=True, slots=True)
class Found:
    """A class the mixture has, the limit that decides it in words, and whether only nearly.

    `grounds` are what that limit rests on.
    """

    kind: HazardClass
    h_code: str
    deciding: str
    near: bool = False
    way_in: str = ""
    grounds: tuple[Ground, ...] = ()

    @property
    def name(self) -> str:
        """The class as it is listed: "Skin Corr. 1B", "Acute Tox. 4 (oral)"."""
        return f"{self.kind.name} ({self.way_in})" if self.way_in else self.kind.name

    @property
    def ladder(self) -> str:
        """The ladder it stands on, told apart by way in and by effect."""
        effect = self.h_code if self.kind.ladder == BREATHING else self.way_in
        return f"{self.kind.ladder} {effect}".strip()


def reached(share: float) -> bool:
    """True at the limit or above it; a millionth of a millionth short is rounding."""
    return share >= 1 - _EXACT


def nearly(share: float) -> bool:
    """True from just under the limit up: there the safer side is taken."""
    return share >= NEAR - _EXACT


def summed(parts: list[Part], *, most: float = math.inf) -> float:
    """How far the parts together have come; no further than `most` when that is given."""
    return min(most, sum(part.share for part in parts))


def grounds_of(parts: list[Part]) -> tuple[Ground, ...]:
    """What the parts rest on together; that several add up is a rule of its own."""
    added = (RULE,) if len(parts) > 1 else ()
    return distinct([*(ground for part in parts for ground in part.grounds), *added])


def in_words(h_code: str, parts: list[Part]) -> str:
    """The deciding limit: "H314: sodium hydroxide ≥ 2 %", or the sum where several decide."""
    if len(parts) == 1:
        part = parts[0]
        if reached(part.share):
            return f"{h_code}: {part.substance} ≥ {part.edge:.3g} {part.as_counted}"
        return (
            f"{h_code}: {part.substance} {part.percent:.4g} {part.as_counted}, "
            f"just under its limit of {part.edge:.3g} %"
        )
    row = " + ".join(
        f"{part.substance} {part.percent:.3g} of {part.edge:.3g} {part.as_counted}"
        for part in parts
    )
    return f"{h_code}: {row}, together {summed(parts):.2g} times the limit"
