"""What the house knows: its stock lines and places, with every name they answer to."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from functools import cached_property

from stockroom.bringing.name_words import spelt
from stockroom.measure.amounts import Kind

Nearest = Callable[[str, Iterable[str]], list[str]]
"""The three names most like one that nobody knows, the likest first."""

_WATER = re.compile(r"[.·*•](?P<waters>[0-9.]*)H2O$")


@dataclass(frozen=True, slots=True)
class KnownLine:
    """A stock line as a spreadsheet may mean it.

    `names` are those of its substance, the registry number among them; `formula` is of what
    is in the bottle, water included. `strength` is in `unit` as the store keeps it, `density`
    in g/cm³. `made` is True where the house makes it up itself.
    """

    key: str
    item: str
    form: str
    kind: Kind
    substance: str = ""
    names: tuple[str, ...] = ()
    formula: str = ""
    strength: float | None = None
    unit: str = ""
    strength_text: str = ""
    molar_mass: float | None = None
    density: float | None = None
    made: bool = False
    never_kept: str = ""

    @property
    def water(self) -> float:
        """Molecules of water of crystallisation in its formula; 0 for none."""
        found = _WATER.search(self.formula)
        return float(found["waters"] or 1) if found else 0.0


@dataclass(frozen=True, slots=True)
class KnownPlace:
    """A place by its short name, and its long one."""

    place: str
    name: str = ""


@dataclass(frozen=True)
class House:
    """Everything names are looked up in. `nearest` ranks what is only like a name."""

    lines: tuple[KnownLine, ...]
    places: tuple[KnownPlace, ...]
    nearest: Nearest

    @cached_property
    def named(self) -> dict[str, tuple[KnownLine, ...]]:
        """The lines each name stands for, in one spelling."""
        return _grouped((name, line) for line in self.lines for name in _names(line))

    @cached_property
    def formulas(self) -> dict[str, tuple[KnownLine, ...]]:
        """The lines of each formula: capitals count in it."""
        return _grouped(
            (each, line)
            for line in self.lines
            if line.formula
            for each in {line.formula, _WATER.sub("", line.formula)}
        )

    @cached_property
    def keys(self) -> dict[str, KnownLine]:
        """Each line by its whole name, strength and all."""
        return {spelt(line.key): line for line in self.lines}

    @cached_property
    def shown(self) -> dict[str, str]:
        """Each name as it is written, by its one spelling: what nearest names are looked for in."""
        return {
            spelt(name): name for line in self.lines for name in (line.item, *line.names) if name
        }


def _names(line: KnownLine) -> list[str]:
    names = (line.key, line.item, line.substance, *line.names)
    return list(dict.fromkeys(spelt(name) for name in names if name))


def _grouped(pairs: Iterable[tuple[str, KnownLine]]) -> dict[str, tuple[KnownLine, ...]]:
    found: dict[str, dict[str, KnownLine]] = {}
    for name, line in pairs:
        found.setdefault(name, {})[line.key] = line
    return {name: tuple(lines.values()) for name, lines in found.items()}
