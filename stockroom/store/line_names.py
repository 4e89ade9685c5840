"""Every name a stock line answers to, for the reading half: nothing heavy is imported."""

from __future__ import annotations

import re
from dataclasses import dataclass

from stockroom.measure.reading import tidy
from stockroom.store.likeness import plain
from stockroom.store.reading import Reader


@dataclass(frozen=True, slots=True)
class LineNames:
    """The names of one line, as they are compared.

    `words` are in words: its key, item and substance, and the substance's other names.
    `signs` are the formulas and the registry number, which only count whole.
    """

    key: str
    substance: str
    strength: str
    words: tuple[str, ...]
    signs: tuple[str, ...]


def line_names(reader: Reader) -> tuple[LineNames, ...]:
    """The names of every line, in the order the lines were entered."""
    substances = {row["id"]: row for row in reader.rows("substance")}
    others: dict[int, list[str]] = {}
    for row in reader.rows("other_name"):
        others.setdefault(row["substance_id"], []).append(row["name"])
    found = []
    for row in reader.rows("line"):
        held = substances.get(row["substance_id"])
        words = [row["key"], row["item"], *others.get(row["substance_id"], ())]
        signs = [row["formula"]]
        if held is not None:
            words.append(held["substance"])
            signs += [held["formula"], held["cas"]]
        substance = held["substance"] if held is not None else ""
        named = LineNames(
            row["key"], substance, row["strength_text"], _settled(words), _settled(signs)
        )
        found.append(named)
    return tuple(found)


def spelt(name: str) -> str:
    """A name as it is compared, the three ways of writing a hydrate's dot settled too."""
    return plain(re.sub(r"[*.](?=[0-9]*H2O)", "·", tidy(name)))


def _settled(names: list[str]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(spelt(name) for name in names if name))
